//! Reads `[aquifer]` and `[ambient]`.

use crate::site::{
    Ambient, Anisotropy, Aquifer, Conductivity, Flux, Length, Level, Transmissivity,
};

use super::fault::{Fault, nearest, shown};
use super::keys::{
    AMBIENT, AMBIENT_AT, AMBIENT_HEAD, AMBIENT_TABLE, ANISOTROPY, ANISOTROPY_TABLE, AQUIFER,
    AQUIFER_TABLE, AZIMUTH_OF_LARGEST, CONDUCTIVITY, GRADIENT, INFLUENCE_RADIUS, MATERIAL, RATIO,
    RECHARGE, ROOF, THICKNESS, TOWARD, TRANSMISSIVITY,
};
use super::materials::{Material, materials};
use super::quantities::number;
use super::reader::{Reading, Section};
use super::source_map::SourceMap;
use super::units::Dimension;

/// Relative difference up to which transmissivity and conductivity ×
/// thickness agree: three digits are what a pumping test gives.
const AGREEMENT: f64 = 1e-3;

/// The aquifer and the material it names.
pub(super) fn read_aquifer(
    plan: &Section<'_>,
    map: &mut SourceMap,
    reading: &mut Reading<'_>,
) -> Option<(Aquifer, Option<&'static Material>)> {
    let section = Section::open(&AQUIFER_TABLE, plan.value(&AQUIFER)?, reading)?;
    map.aquifer = Some(section.places());
    let material = read_material(&section, reading);
    let flow = read_flow(&section, material, reading);
    let roof = section.quantity(&ROOF, reading);
    let recharge = section.quantity(&RECHARGE, reading);
    let anisotropy = read_anisotropy(&section, reading);
    let influence_radius = section.length(&INFLUENCE_RADIUS, reading);
    let (transmissivity, thickness) = flow?;
    let aquifer = Aquifer {
        transmissivity,
        thickness,
        roof: roof.map(Level::from_si),
        recharge: Flux::from_si(recharge.unwrap_or(0.0)),
        anisotropy,
        influence_radius,
    };
    Some((aquifer, material))
}

fn read_material(section: &Section<'_>, reading: &mut Reading<'_>) -> Option<&'static Material> {
    let key = section.text(&MATERIAL, reading)?;
    let known = materials();
    if let Some(material) = known.iter().find(|material| material.key == key) {
        return Some(material);
    }
    let place = section.value(&MATERIAL)?.place;
    let keys = || known.iter().map(|material| material.key.as_str());
    let all: Vec<_> = keys().collect();
    let all = all.join(", ");
    let help = match nearest(key, keys()) {
        Some(near) => format!("write `{near}`; the materials are {all}"),
        None => format!("the materials are {all}"),
    };
    let what = format!("`{}` is not a known material", shown(key));
    reading.refuse(Fault::new(place, what, help).label("unknown material"));
    None
}

/// Transmissivity, and thickness as far as it is known.
fn read_flow(
    section: &Section<'_>,
    material: Option<&'static Material>,
    reading: &mut Reading<'_>,
) -> Option<(Transmissivity, Option<Length>)> {
    let given =
        [&CONDUCTIVITY, &THICKNESS, &TRANSMISSIVITY].map(|key| section.value(key).is_some());
    let conductivity = section.quantity(&CONDUCTIVITY, reading);
    let thickness = section.quantity(&THICKNESS, reading);
    let transmissivity = section.quantity(&TRANSMISSIVITY, reading);
    let read = [conductivity, thickness, transmissivity].map(|value| value.is_some());
    if read != given {
        return None;
    }
    if let (Some(conductivity), Some(material)) = (conductivity, material) {
        note_unusual(conductivity, material, reading);
    }
    let (transmissivity, thickness) = match (conductivity, thickness, transmissivity) {
        (Some(k), Some(b), Some(t)) => {
            refuse_disagreement(section, k, b, t, reading)?;
            (t, Some(b))
        }
        (Some(k), None, Some(t)) => {
            let b = t / k;
            let shown = length_text(b, reading);
            reading.notes.push(format!(
                "the thickness, {shown}, is transmissivity over conductivity"
            ));
            (t, Some(b))
        }
        (Some(k), Some(b), None) => (k * b, Some(b)),
        (None, b, Some(t)) => (t, b),
        (None, Some(b), None) if material.is_some() => {
            (typical(material?, reading).si() * b, Some(b))
        }
        _ => {
            refuse_missing_flow(section, material.is_some(), reading);
            return None;
        }
    };
    refuse_extreme(section, transmissivity, reading)?;
    Some((
        Transmissivity::from_si(transmissivity),
        thickness.map(Length::from_si),
    ))
}

/// The material's typical conductivity, noted as such.
fn typical(material: &Material, reading: &mut Reading<'_>) -> Conductivity {
    let range = material.conductivity;
    let [typical, least, most] = [range.typical(), range.least, range.most]
        .map(|value| number(reading.units.of_si(Dimension::Conductivity, value.si())));
    let typical = three_digits(&typical);
    let unit = reading.units.unit_name(Dimension::Conductivity);
    reading.notes.push(format!(
        "the conductivity, {typical} {unit}, is the typical value of the material {}, \
         whose published range is {} to {} {unit} ({}); a pumping test decides",
        material.key,
        three_digits(&least),
        three_digits(&most),
        material.source
    ));
    range.typical()
}

fn note_unusual(conductivity: f64, material: &Material, reading: &mut Reading<'_>) {
    let range = material.conductivity;
    if conductivity >= range.least.si() && conductivity <= range.most.si() {
        return;
    }
    let [given, least, most] = [conductivity, range.least.si(), range.most.si()]
        .map(|value| three_digits(&number(reading.units.of_si(Dimension::Conductivity, value))));
    let unit = reading.units.unit_name(Dimension::Conductivity);
    reading.notes.push(format!(
        "the conductivity, {given} {unit}, lies outside the published range of the material {}, \
         {least} to {most} {unit} ({})",
        material.key, material.source
    ));
}

fn refuse_disagreement(
    section: &Section<'_>,
    conductivity: f64,
    thickness: f64,
    transmissivity: f64,
    reading: &mut Reading<'_>,
) -> Option<()> {
    let product = conductivity * thickness;
    if (product - transmissivity).abs() <= AGREEMENT * transmissivity {
        return Some(());
    }
    let unit = reading.units.unit_name(Dimension::Transmissivity);
    let [given, product] = [transmissivity, product]
        .map(|value| number(reading.units.of_si(Dimension::Transmissivity, value)));
    let what = format!(
        "`transmissivity` is {given} {unit}, but `conductivity` × `thickness` is {product} {unit}"
    );
    let help = "give `transmissivity` alone, or `conductivity` and `thickness`, or values that agree to 0.1 %";
    let place = |key| section.value(key).map(|value| value.place);
    let fault = Fault::new(place(&TRANSMISSIVITY)?, what, help)
        .label("disagrees")
        .related(place(&CONDUCTIVITY)?, "with this")
        .related(place(&THICKNESS)?, "times this");
    reading.refuse(fault);
    None
}

fn refuse_missing_flow(section: &Section<'_>, has_material: bool, reading: &mut Reading<'_>) {
    let what = "[aquifer] does not say how much water it carries";
    let help = if has_material {
        "add `thickness`: a material gives the conductivity alone"
    } else {
        "add `transmissivity`, or `conductivity` and `thickness`, or `material` and `thickness`"
    };
    reading.refuse(Fault::new(section.place, what, help));
}

/// A product of two sound numbers can still be absurd.
fn refuse_extreme(
    section: &Section<'_>,
    transmissivity: f64,
    reading: &mut Reading<'_>,
) -> Option<()> {
    if (1e-9..=1e7).contains(&transmissivity) {
        return Some(());
    }
    let what = format!(
        "[aquifer]: the transmissivity is {} m2/d, outside 1e-9 to 1e7 m2/d",
        number(transmissivity)
    );
    let help = "check the numbers and their units";
    let keys = [&TRANSMISSIVITY, &CONDUCTIVITY, &THICKNESS];
    let place = keys.iter().find_map(|key| section.value(key));
    let place = place.map_or(section.place, |value| value.place);
    reading.refuse(Fault::new(place, what, help));
    None
}

fn read_anisotropy(section: &Section<'_>, reading: &mut Reading<'_>) -> Option<Anisotropy> {
    let value = section.value(&ANISOTROPY)?;
    let inner = Section::open(&ANISOTROPY_TABLE, value, reading)?;
    let ratio = inner.quantity(&RATIO, reading);
    let azimuth_deg = inner.quantity(&AZIMUTH_OF_LARGEST, reading);
    Some(Anisotropy {
        ratio: ratio?,
        azimuth_deg: azimuth_deg?,
    })
}

/// The head before pumping, in metres of the plan's grid.
pub(super) fn read_ambient(
    plan: &Section<'_>,
    map: &mut SourceMap,
    reading: &mut Reading<'_>,
) -> Option<Ambient> {
    let section = Section::open(&AMBIENT_TABLE, plan.value(&AMBIENT)?, reading)?;
    map.ambient = Some(section.places());
    let head = section.quantity(&AMBIENT_HEAD, reading);
    let at = section.point(&AMBIENT_AT, reading);
    let gradient = section.quantity(&GRADIENT, reading).unwrap_or(0.0);
    let toward_deg = section.quantity(&TOWARD, reading);
    if gradient > 0.0 && section.value(&TOWARD).is_none() {
        let place = section.value(&GRADIENT)?.place;
        let what = "[ambient] has a `gradient`, but does not say where the head falls";
        let help = format!("add `toward`: {}", TOWARD.doc);
        reading.refuse(Fault::new(place, what, help).label("toward where?"));
    }
    if at.is_some() && section.value(&AMBIENT_HEAD).is_none() {
        let note = "[ambient]: `at` is not used, since no `head` is given";
        reading.notes.push(note.to_owned());
    }
    Some(Ambient {
        head: head.map(Level::from_si),
        at: at.map(|vertex| vertex.at),
        gradient,
        toward_deg,
    })
}

fn length_text(metres: f64, reading: &Reading<'_>) -> String {
    let value = number(reading.units.of_si(Dimension::Length, metres));
    let unit = reading.units.unit_name(Dimension::Length);
    format!("{} {unit}", three_digits(&value))
}

/// A number's text, rounded to three significant digits.
fn three_digits(text: &str) -> String {
    let rounded = text.parse::<f64>().map(|value| format!("{value:.2e}"));
    match rounded.map(|text| text.parse::<f64>()) {
        Ok(Ok(value)) => number(value),
        _ => text.to_owned(),
    }
}
