//! What the banks of an outline do to the head: their condition and the stage
//! along them.

use super::boundary::Bit;
use super::error::OutlineError;
use super::frame::Stretch;
use super::general::Condition;
use super::names;
use super::stroke::TOUCH_M;
use crate::site::{EdgeKind, EdgeShape, Point, Site, Stage, Vector};

/// Whether an edge is a river behind a clogged bank.
pub(super) fn is_clogged(site: &Site, edge: usize) -> bool {
    resistance_d(site, edge).is_some()
}

/// c of an edge's bank, days, where it has one.
fn resistance_d(site: &Site, edge: usize) -> Option<f64> {
    match site.edges.get(edge).map(|edge| &edge.kind) {
        Some(EdgeKind::River {
            bank_resistance: Some(resistance),
            ..
        }) if resistance.si() != 0.0 => Some(resistance.si()),
        _ => None,
    }
}

/// The condition on a side of an edge that runs along a (stretched) unit
/// vector.
///
/// The bank lets (stage − h)/c through each square metre: D (stage − h)/c
/// through each metre of its length in the site, D the thickness. The
/// stretch has determinant 1, so it keeps the flux between two places of the
/// bank; a length l of the site becomes l' there, and the flux through each
/// stretched metre is D (stage − h)/c · l/l'. It equals T ∂h/∂n, n outward and
/// T the geometric mean. Hence ∂h/∂n = −(h − stage)/skin with
/// skin = T/D · c · l'/l = K c l'/l.
///
/// # Errors
/// `NoThickness` where D is unknown.
pub(super) fn condition(
    site: &Site,
    stretch: &Stretch,
    edge: usize,
    along: Vector,
) -> Result<Condition, OutlineError> {
    match site.edges.get(edge).map(|edge| &edge.kind) {
        Some(EdgeKind::River { .. }) => {}
        _ => return Ok(Condition::NoFlow),
    }
    let Some(days) = resistance_d(site, edge) else {
        return Ok(Condition::Head);
    };
    let thickness_m = site.aquifer.thickness.as_ref().map(|d| d.si());
    let thickness_m = thickness_m.ok_or_else(|| OutlineError::NoThickness {
        river: names::edge(site, edge),
        days,
    })?;
    let conductivity_m_d = site.aquifer.transmissivity.si() / thickness_m;
    let site_length = stretch.undo(Point::from(along)).coords.norm();
    Ok(Condition::Clogged {
        skin_m: conductivity_m_d * days / site_length,
    })
}

/// The stages of a straight piece at its ends and wherever the plan gives one
/// between, by their distances from a place of it along its direction.
///
/// # Errors
/// `StageCount`, and `CrossesItself` where the vertices that were straightened
/// run back and forth, so that no stage belongs to a place.
pub(super) fn knots(
    site: &Site,
    stretch: &Stretch,
    bit: &Bit,
    from: Point,
) -> Result<Knots, OutlineError> {
    let Some(edge) = site.edges.get(bit.edge) else {
        return Ok(Knots::default());
    };
    let EdgeKind::River { stage, .. } = &edge.kind else {
        return Ok(Knots::default());
    };
    let levels = match stage {
        Stage::Constant(level) => return Ok(Knots(vec![(0.0, level.si())])),
        Stage::AtVertices(levels) => levels,
    };
    let points: &[Point] = match &edge.shape {
        EdgeShape::Line(points) => points,
        EdgeShape::Circle { .. } => &[],
    };
    check_count(site, bit.edge)?;
    let (first, last) = bit.vertices;
    let of_stroke = points.iter().zip(levels).enumerate();
    let of_stroke = of_stroke.take(last + 1).skip(first);
    let mut known: Vec<(f64, f64, usize)> = of_stroke
        .map(|(index, (point, level))| {
            let along = (stretch.apply(*point) - from).dot(&bit.direction);
            (along, level.si(), index)
        })
        .collect();
    let runs_against = match (known.first(), known.last()) {
        (Some(start), Some(end)) => start.0 > end.0,
        _ => false,
    };
    if runs_against {
        known.reverse();
    }
    let back = known
        .iter()
        .zip(known.iter().skip(1))
        .find(|(here, next)| next.0 < here.0 - TOUCH_M);
    if let Some((turn, _)) = back {
        let line = points.iter().zip(points.iter().skip(1)).take(turn.2);
        let from_start: f64 = line.map(|(a, b)| (b - a).norm()).sum();
        return Err(OutlineError::CrossesItself {
            edge: names::edge(site, bit.edge),
            from_start: names::length(from_start),
        });
    }
    known.sort_by(|a, b| a.0.total_cmp(&b.0));
    Ok(Knots(known.iter().map(|at| (at.0, at.1)).collect()))
}

/// That a river has one stage for each vertex, or one for all.
///
/// # Errors
/// `StageCount`.
pub(super) fn check_count(site: &Site, edge: usize) -> Result<(), OutlineError> {
    let Some(drawn) = site.edges.get(edge) else {
        return Ok(());
    };
    let vertices = match &drawn.shape {
        EdgeShape::Line(points) => points.len(),
        EdgeShape::Circle { .. } => 0,
    };
    match &drawn.kind {
        EdgeKind::River {
            stage: Stage::AtVertices(levels),
            ..
        } if levels.len() != vertices => Err(OutlineError::StageCount {
            river: names::edge(site, edge),
            stages: levels.len(),
            vertices,
        }),
        _ => Ok(()),
    }
}

/// Known stages by position, linear between them and held beyond them; zero
/// where there is none.
#[derive(Clone, Debug, Default, PartialEq)]
pub(super) struct Knots(Vec<(f64, f64)>);

impl Knots {
    /// The stage at a position.
    pub fn at(&self, along: f64) -> f64 {
        let after = self.0.partition_point(|knot| knot.0 <= along);
        let before = after.checked_sub(1).and_then(|index| self.0.get(index));
        match (before, self.0.get(after)) {
            (Some(low), Some(high)) => {
                let share = (along - low.0) / (high.0 - low.0);
                low.1 + share * (high.1 - low.1)
            }
            (Some(only), None) | (None, Some(only)) => only.1,
            (None, None) => 0.0,
        }
    }

    /// The positions within a range, more than 1 mm from its ends and from one
    /// another.
    pub fn between(&self, low: f64, high: f64) -> Vec<f64> {
        let mut cuts: Vec<f64> = Vec::new();
        for &(along, _) in &self.0 {
            let before = cuts.last().copied().unwrap_or(low);
            if along > before + TOUCH_M && along < high - TOUCH_M {
                cuts.push(along);
            }
        }
        cuts
    }
}

/// The stage of a river that has one, metres; zero elsewhere.
pub(super) fn level_m(site: &Site, edge: usize) -> f64 {
    match site.edges.get(edge).map(|edge| &edge.kind) {
        Some(EdgeKind::River {
            stage: Stage::Constant(level),
            ..
        }) => level.si(),
        _ => 0.0,
    }
}
