//! Whether a steady state exists, and what the plan must say where it does not.

use num_complex::Complex64;

use crate::green::{self, Green, GreenError};
use crate::outline::{Kind, Outline};
use crate::site::{Refusal, Site, Subject};

/// Pumping and injection balance when they differ by less than this share.
const BALANCE: f64 = 1e-6;

/// The Green's function of an outline in closed form in which a steady state
/// exists.
pub(super) fn green_of(site: &Site, outline: &Outline) -> Result<Box<dyn Green>, Refusal> {
    let radius_m = site.aquifer.influence_radius.map(|radius| radius.si());
    let green = green::of(&outline.shape, radius_m).map_err(|error| refusal(error, outline))?;
    if is_closed(outline) {
        check_balance(site, outline)?;
    }
    Ok(green)
}

/// Notes what an influence radius of the plan is used for.
pub(super) fn note_radius(site: &Site, outline: &Outline, notes: &mut Vec<String>) {
    let has_river = outline.side_kinds().contains(&Kind::FixedHead);
    match site.aquifer.influence_radius.map(|radius| radius.si()) {
        Some(_) if has_river => notes.push(
            "influence_radius is not used: a river fixes the head of this aquifer.".to_owned(),
        ),
        Some(_) if is_closed(outline) => notes.push(
            "influence_radius is not used: barriers close this aquifer on all sides.".to_owned(),
        ),
        Some(radius_m) => notes.push(format!(
            "No river fixes the head. Cones end at the assumed influence radius of {radius_m:.0} m; \
             the drawdowns are no better than this assumption."
        )),
        None => {}
    }
}

/// In a closed basin, the place whose head `[ambient]` fixes; without one the
/// mean head is fixed.
pub(super) fn datum(site: &Site, outline: &Outline, notes: &mut Vec<String>) -> Option<Complex64> {
    if !is_closed(outline) {
        return None;
    }
    let at = site.ambient.as_ref().and_then(|ambient| ambient.at);
    notes.push(match at {
        Some(_) => "Barriers close this aquifer on all sides: pumping and injection balance, and \
                    [ambient] fixes the head at its place `at`."
            .to_owned(),
        None => "Barriers close this aquifer on all sides: pumping and injection balance, and \
                 [ambient] fixes the mean head, since it gives no place `at`."
            .to_owned(),
    });
    at.filter(|at| outline.holds(*at))
        .map(|at| outline.frame.to_canonical(at))
}

fn is_closed(outline: &Outline) -> bool {
    outline.is_closed() && !outline.side_kinds().contains(&Kind::FixedHead)
}

fn check_balance(site: &Site, outline: &Outline) -> Result<(), Refusal> {
    let rates: Vec<f64> = outline
        .wells
        .iter()
        .filter_map(|&well| site.wells.get(well))
        .map(|well| well.pumping.si())
        .collect();
    let pumped: f64 = rates.iter().filter(|rate| **rate > 0.0).sum();
    let injected: f64 = -rates.iter().filter(|rate| **rate < 0.0).sum::<f64>();
    if (pumped - injected).abs() <= BALANCE * (pumped + injected) {
        return Ok(());
    }
    Err(Refusal {
        subject: Subject::Plan,
        what: format!(
            "barriers close the aquifer on all sides, and its wells pump {pumped:.3} m³/d but \
             inject {injected:.3} m³/d"
        ),
        why: Some(
            "with no river to give or take the difference, the head would fall or rise without end"
                .to_owned(),
        ),
        remedy: format!(
            "change the rates by {:.3} m³/d so that they balance, or give the aquifer a river",
            (pumped - injected).abs()
        ),
        related: edges_of(outline),
    })
}

fn refusal(error: GreenError, outline: &Outline) -> Refusal {
    let (subject, why, remedy) = match error {
        GreenError::NoSteadyState => (
            Subject::Aquifer(None),
            format!(
                "the aquifer is an {} without any fixed head; the cone would spread for ever",
                outline.shape.name()
            )
            .replace("an half", "a half")
            .replace("an strip", "a strip")
            .replace("an quarter", "a quarter")
            .replace("an wedge", "a wedge"),
            "add influence_radius to [aquifer] (Thiem's formula then ends each cone there), or a \
             river",
        ),
        GreenError::General => (
            Subject::Plan,
            "such an outline is solved on its boundary, not by image wells".to_owned(),
            "draw it with a river, or simplify it to a straight line, a strip, a wedge, a \
             half-strip, a box or a single circle",
        ),
        GreenError::TooManyImages { .. } => (
            Subject::Aquifer(Some("influence_radius")),
            "each well is mirrored in the barriers as often as the radius reaches across them"
                .to_owned(),
            "give a radius nearer to the width of the aquifer",
        ),
    };
    Refusal {
        subject,
        what: error.to_string(),
        why: Some(why),
        remedy: remedy.to_owned(),
        related: edges_of(outline),
    }
}

/// The edges of an outline, for a refusal to point at.
pub(super) fn edges_of(outline: &Outline) -> Vec<(Subject, String)> {
    let mut edges: Vec<usize> = outline
        .sides
        .iter()
        .flatten()
        .map(|piece| piece.edge)
        .collect();
    edges.sort_unstable();
    edges.dedup();
    edges
        .into_iter()
        .map(|edge| {
            (
                Subject::Edge(edge, None),
                "an edge of this aquifer".to_owned(),
            )
        })
        .collect()
}
