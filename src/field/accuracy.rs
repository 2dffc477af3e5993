//! A bound on the error of a head.
//!
//! Closed forms have no truncation beyond 1e-16, so these roundings count; the
//! general solver adds the bound that it has proven.
//!
//! 1. G itself: `green` states at most 64ε (1 + κ·distance) for each well; with
//!    distances up to e^40 periods left out, 64 · 40 ε bounds it.
//! 2. Places: stretching, moving and turning a coordinate of size c costs at
//!    most 8εc; beside a well's rim the head changes by Q/(2πT r_w) a metre.
//! 3. Recharge: `recharge` states its own bound.
//! 4. The sums: one rounding of the level and of each well's part.

use super::WellField;
use crate::site::{Refusal, Subject};

/// That the heads at the wells are numbers.
///
/// # Errors
/// Where the general solver's equations have no solution in the machine's
/// precision.
pub(super) fn check(field: &WellField) -> Result<(), Refusal> {
    let head_m = |pole| {
        let (green, shape) = (field.green.as_ref(), &field.outline.shape);
        field.ambient.head_m(pole, green, shape) + green.regular_part(pole)
    };
    if field.wells.iter().all(|well| head_m(well.pole).is_finite()) {
        return Ok(());
    }
    let well = |well: &super::FieldWell| {
        let subject = Subject::Well(well.index, None);
        (subject, "stands in the aquifer".to_owned())
    };
    Err(Refusal {
        subject: field
            .hardest_edge
            .map_or(Subject::Plan, |edge| Subject::Edge(edge, None)),
        what: "the general solver found no heads for this aquifer".to_owned(),
        why: Some("its equations have no solution in the machine's precision".to_owned()),
        remedy: "redraw its edges without needle-sharp corners and tiny pieces".to_owned(),
        related: field.wells.iter().map(well).collect(),
    })
}

/// A bound on the absolute rounding error of a head, metres, at places within
/// the wells' neighbourhood.
pub(super) fn bound_m(field: &WellField) -> f64 {
    const EPSILON: f64 = f64::EPSILON;
    let reach = |size: f64, place: f64| size.max(place.abs());
    let coordinate_m = field.wells.iter().fold(0.0, |size, well| {
        let origin = field.outline.frame.origin;
        [well.pole.re, well.pole.im, origin.re, origin.im]
            .into_iter()
            .fold(size, reach)
    });
    let level_m = field
        .wells
        .iter()
        .map(|well| {
            let (green, shape) = (field.green.as_ref(), &field.outline.shape);
            field.ambient.head_m(well.pole, green, shape).abs()
        })
        .fold(0.0, f64::max);
    let of_wells: f64 = field
        .wells
        .iter()
        .map(|well| {
            let strength_m = field.strength_m(well).abs();
            let of_green = 64.0 * 40.0 * EPSILON;
            let of_place = 8.0 * EPSILON * coordinate_m / (std::f64::consts::TAU * well.rim_m);
            strength_m * (of_green + of_place)
        })
        .sum();
    let of_recharge = field.ambient.recharge.map_or(0.0, |mound| mound.error_m());
    let solved = field.ambient.solved.as_ref();
    let of_solver = solved.map_or(0.0, |solved| solved.general.bound_m());
    of_wells + of_recharge + 4.0 * EPSILON * level_m + of_solver
}
