//! How the results were computed: each aquifer's outline, method and error
//! bound, and where the material comes from.

use serde::Serialize;

use super::flags::capitalised;
use crate::field::WellField;
use crate::layers::Planned;
use crate::layers::words::{Words, short, steady_state};
use crate::plan::Dimension;

/// Wells of an aquifer that are named, at most.
const MOST_NAMES: usize = 8;

/// Letters of a sentence that holds names as they are given, at most.
const LONGEST_TEXT: usize = 1000;

/// How it was computed.
#[derive(Serialize)]
pub struct Method {
    aquifers: Vec<Aquifer>,
    material: Option<MaterialSource>,
    notes: Vec<String>,
}

#[derive(Serialize)]
struct Aquifer {
    outline: String,
    method: String,
    accuracy: String,
    steady_state: String,
    wells: String,
}

#[derive(Serialize)]
struct MaterialSource {
    name: String,
    range: String,
    source: String,
    caution: String,
}

/// How a plan's results were computed.
pub fn method(planned: &Planned<'_>) -> Method {
    Method {
        aquifers: planned
            .solution
            .fields()
            .iter()
            .map(|field| aquifer(planned, field))
            .collect(),
        material: material(planned),
        notes: planned
            .notes()
            .iter()
            .map(|note| sentence(&short(note, LONGEST_TEXT)))
            .collect(),
    }
}

fn aquifer(planned: &Planned<'_>, field: &WellField) -> Aquifer {
    let words = Words::of(planned);
    let site = planned.solution.site();
    let told = |text: &str| sentence(&planned.plan.units.beside(&short(text, LONGEST_TEXT)));
    let wells = &field.outline().wells;
    let named: Vec<String> = wells
        .iter()
        .take(MOST_NAMES)
        .map(|&well| words.well(well))
        .collect();
    let more = match wells.len() - named.len() {
        0 => String::new(),
        more => format!(" and {more} more"),
    };
    let bound_m = field.error_bound_m();
    Aquifer {
        outline: told(&field.outline().words(site)),
        method: told(&field.method()),
        accuracy: sentence(&if field.is_accurate(site.head_tolerance) {
            words.proven(bound_m)
        } else {
            words.inexact(bound_m, site.head_tolerance.si())
        }),
        steady_state: sentence(&steady_state(planned.solution, field)),
        wells: format!("{}{more}", named.join(", ")),
    }
}

fn material(planned: &Planned<'_>) -> Option<MaterialSource> {
    let material = planned.plan.material?;
    let units = planned.plan.units;
    let [least, most] = [material.conductivity.least, material.conductivity.most]
        .map(|value| significant(units.of_si(Dimension::Conductivity, value.si())));
    Some(MaterialSource {
        name: material.name.clone(),
        range: format!(
            "{least} to {most} {}",
            units.unit_name(Dimension::Conductivity)
        ),
        source: material.source.clone(),
        caution: material.caution.clone(),
    })
}

/// A number to three digits.
fn significant(value: f64) -> String {
    let text = format!("{value:.2e}");
    text.parse::<f64>()
        .map_or(text, |rounded| rounded.to_string())
}

/// A text with a capital at its head and a stop at its end.
fn sentence(text: &str) -> String {
    let text = capitalised(text.trim_end_matches('.'));
    format!("{text}.")
}
