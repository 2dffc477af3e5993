//! Reads `[[well]]` and `[[well_layer]]`.

use crate::site::{Length, Level, Point, Rate, Well, WellLoss};

use super::fault::Fault;
use super::features::{Geometry, Wanted};
use super::keys::{
    AT, FEATURE, FILE, GROUND, INJECTION, LAYER, LOWEST_LEVEL, PUMPING, RADIUS, WELL,
    WELL_FEATURE_TABLE, WELL_LAYER, WELL_LAYER_TABLE, WELL_LOSS, WELL_TABLE,
};
use super::layers::note_unused_columns;
use super::names::Names;
use super::points::Vertex;
use super::quantities::number;
use super::reader::{MOST_ITEMS, Reading, Section, tables};
use super::source::Place;
use super::source_map::SourceMap;
use super::units::Dimension;

/// A well and where its place was written.
type Placed = (Well, Place);

/// The wells, in metres of the plan's grid: those of the plan, then those of
/// its layers.
pub(super) fn read_wells(
    plan: &Section<'_>,
    names: &mut Names,
    map: &mut SourceMap,
    reading: &mut Reading<'_>,
) -> Vec<Well> {
    let mut wells = Vec::new();
    for section in tables(plan, &WELL, &WELL_TABLE, reading) {
        map.wells.push(section.places());
        let at = read_place(&section, reading);
        wells.extend(read_well(&section, at, names, reading));
    }
    for section in tables(plan, &WELL_LAYER, &WELL_LAYER_TABLE, reading) {
        wells.extend(read_layer(&section, names, map, reading).unwrap_or_default());
    }
    refuse_none(plan, reading);
    refuse_overlaps(&wells, reading);
    wells.into_iter().map(|(well, _)| well).collect()
}

fn read_place(section: &Section<'_>, reading: &mut Reading<'_>) -> Option<Vertex> {
    if section.value(&AT).is_some() {
        return section.point(&AT, reading);
    }
    section.text(&LAYER, reading)?;
    section.text(&FEATURE, reading)?;
    let layer = reading.layer(section.value(&LAYER)?)?;
    let wanted = section.value(&FEATURE)?;
    let feature = layer.feature(wanted, reading)?;
    match feature.geometry(Wanted::Point, wanted.place, reading)? {
        Geometry::Point(vertex) => Some(vertex),
        Geometry::Line(_) | Geometry::Polygon(_) => None,
    }
}

fn read_layer(
    section: &Section<'_>,
    names: &mut Names,
    map: &mut SourceMap,
    reading: &mut Reading<'_>,
) -> Option<Vec<Placed>> {
    section.text(&FILE, reading)?;
    let file = section.value(&FILE)?;
    let layer = reading.layer(file)?;
    layer.refuse_too_many(file.place, reading)?;
    let mut wells = Vec::new();
    let mut columns = Vec::new();
    for feature in &layer.features {
        let opened = Section::of_feature(&WELL_FEATURE_TABLE, feature, reading);
        let Some((properties, unused)) = opened else {
            continue;
        };
        columns.extend(unused);
        map.wells.push(properties.places());
        let at = match feature.geometry(Wanted::Point, file.place, reading) {
            Some(Geometry::Point(vertex)) => Some(vertex),
            _ => None,
        };
        wells.extend(read_well(&properties, at, names, reading));
    }
    note_unused_columns(&layer.name, columns, reading);
    Some(wells)
}

fn read_well(
    section: &Section<'_>,
    at: Option<Vertex>,
    names: &mut Names,
    reading: &mut Reading<'_>,
) -> Option<Placed> {
    let name = names.claim(section, reading);
    let pumping = section.quantity(&PUMPING, reading);
    let injection = section.quantity(&INJECTION, reading);
    let radius = section.quantity(&RADIUS, reading);
    let well_loss = section.quantity(&WELL_LOSS, reading).unwrap_or(0.0);
    let lowest_level = section.quantity(&LOWEST_LEVEL, reading);
    let ground = section.quantity(&GROUND, reading);
    let at = at?;
    let well = Well {
        name: name?,
        at: at.at,
        pumping: Rate::from_si(pumping.or(injection.map(|rate| -rate))?),
        radius: Length::from_si(radius?),
        well_loss: WellLoss::from_si(well_loss),
        lowest_level: lowest_level.map(Level::from_si),
        ground: ground.map(Level::from_si),
    };
    Some((well, at.place))
}

fn refuse_none(plan: &Section<'_>, reading: &mut Reading<'_>) {
    if plan.value(&WELL).is_some() || plan.value(&WELL_LAYER).is_some() {
        return;
    }
    let what = "the plan has no well";
    let help = "add [[well]] with `name`, `at`, `radius` and `pumping` or `injection`";
    reading.refuse(Fault::new(plan.place, what, help));
}

/// Wells sorted by their easting are compared only while they can be near.
fn refuse_overlaps(wells: &[Placed], reading: &mut Reading<'_>) {
    let mut order: Vec<(usize, &Placed)> = wells.iter().enumerate().collect();
    order.sort_by(|a, b| a.1.0.at.x.total_cmp(&b.1.0.at.x));
    let largest = wells
        .iter()
        .map(|(well, _)| well.radius.si())
        .fold(0.0, f64::max);
    for (position, (index, one)) in order.iter().enumerate() {
        let reach = one.0.radius.si() + largest;
        let east = order.iter().skip(position + 1);
        let near = |other: &&&(usize, &Placed)| other.1.0.at.x - one.0.at.x <= reach;
        for (other_index, other) in east.take_while(|other| near(&other)) {
            let apart = distance(one.0.at, other.0.at);
            if apart >= one.0.radius.si() + other.0.radius.si() {
                continue;
            }
            let (first, second) = if index < other_index {
                (one, other)
            } else {
                (other, one)
            };
            let fault = overlap_fault(first, second, apart, reading);
            reading.refuse(fault);
            if reading.faults.len() > MOST_ITEMS {
                return;
            }
        }
    }
}

fn distance(a: Point, b: Point) -> f64 {
    (a - b).norm()
}

fn overlap_fault(first: &Placed, second: &Placed, apart: f64, reading: &Reading<'_>) -> Fault {
    let [apart, radii] = [apart, first.0.radius.si() + second.0.radius.si()]
        .map(|metres| number(reading.units.of_si(Dimension::Length, metres)));
    let unit = reading.units.unit_name(Dimension::Length);
    let [one, other] = [&first.0.name, &second.0.name].map(|name| super::fault::shown(name));
    let what = format!(
        "wells `{one}` and `{other}` are {apart} {unit} apart, less than the sum of their radii, {radii} {unit}"
    );
    let help = "move one of them, or join them into one well with the sum of their rates";
    Fault::new(second.1, what, help)
        .label(format!("`{other}`"))
        .related(first.1, format!("`{one}`"))
}
