//! The stage of each piece of river as a function of position along its side.
//!
//! A stage is constant, or, beside a half-plane, one linear function of the
//! position, which the drawn vertices follow to within 1 mm and which is
//! carried on to infinity.

use super::boundary::Side;
use super::error::OutlineError;
use super::frame::Frame;
use super::names;
use super::shape::{Axis, Shape};
use super::stroke::TOUCH_M;
use super::{Outline, Piece};
use crate::site::{EdgeKind, EdgeShape, Level, Point, Site, Stage};

/// Stages that differ by less count as the same, metres.
const SAME_STAGE_M: f64 = 1e-9;

/// Slopes that differ by less count as the same: a millimetre a kilometre.
const SAME_SLOPE: f64 = 1e-6;

/// Sets the stages of all pieces of an outline, whose sides are given in
/// canonical order.
pub(super) fn set(
    site: &Site,
    sides: &[&Side],
    mut outline: Outline,
) -> Result<Outline, Vec<OutlineError>> {
    let (frame, shape) = (outline.frame, outline.shape);
    let mut errors = Vec::new();
    for (pieces, side) in outline.sides.iter_mut().zip(sides) {
        for piece in pieces {
            match on_piece(site, side, piece, &frame, &shape) {
                Ok((stage_m, slope)) => {
                    piece.stage_m = stage_m;
                    piece.stage_slope = slope;
                }
                Err(error) if errors.contains(&*error) => {}
                Err(error) => errors.push(*error),
            }
        }
    }
    if errors.is_empty() {
        errors.extend(outline.sides.iter_mut().find_map(|side| bent(site, side)));
    }
    if errors.is_empty() {
        Ok(outline)
    } else {
        Err(errors)
    }
}

/// Gives the rivers of one side the slope of the first, or says which of them
/// falls otherwise: without one slope an endless bank fixes no head.
fn bent(site: &Site, side: &mut [Piece]) -> Option<OutlineError> {
    let (first, others) = side.split_first_mut()?;
    for piece in others {
        let turn = piece.stage_slope - first.stage_slope;
        // The pieces meet at the start of the later one.
        let joint_m = piece.along.start;
        if turn.abs() > SAME_SLOPE {
            return Some(OutlineError::StagesBend {
                river: names::edge(site, piece.edge),
                slope: piece.stage_slope,
                other: names::edge(site, first.edge),
                other_slope: first.stage_slope,
            });
        }
        if turn != 0.0 {
            piece.stage_m += turn * joint_m;
            piece.stage_slope = first.stage_slope;
        }
    }
    None
}

/// The stage of a circle, and no slope.
pub(super) fn on_circle(site: &Site, edge: usize) -> Result<(f64, f64), Box<OutlineError>> {
    match site.edges.get(edge).map(|edge| &edge.kind) {
        Some(EdgeKind::River {
            stage: Stage::Constant(level),
            ..
        }) => Ok((level.si(), 0.0)),
        Some(EdgeKind::River {
            stage: Stage::AtVertices(levels),
            ..
        }) => Err(Box::new(OutlineError::StageCount {
            river: names::edge(site, edge),
            stages: levels.len(),
            vertices: 0,
        })),
        _ => Ok((0.0, 0.0)),
    }
}

/// Stage at position 0 and slope of one piece.
fn on_piece(
    site: &Site,
    side: &Side,
    piece: &Piece,
    frame: &Frame,
    shape: &Shape,
) -> Result<(f64, f64), Box<OutlineError>> {
    let Some(edge) = site.edges.get(piece.edge) else {
        return Ok((0.0, 0.0));
    };
    let (EdgeKind::River { stage, .. }, EdgeShape::Line(points)) = (&edge.kind, &edge.shape) else {
        return Ok((0.0, 0.0));
    };
    let levels = match stage {
        Stage::Constant(level) => return Ok((level.si(), 0.0)),
        Stage::AtVertices(levels) => levels,
    };
    let river = || names::edge(site, piece.edge);
    if levels.len() != points.len() {
        return Err(Box::new(OutlineError::StageCount {
            river: river(),
            stages: levels.len(),
            vertices: points.len(),
        }));
    }
    let known = at_positions(side, piece.edge, points, levels, frame);
    let highest = known
        .iter()
        .map(|at| at.1)
        .fold(f64::NEG_INFINITY, f64::max);
    let lowest = known.iter().map(|at| at.1).fold(f64::INFINITY, f64::min);
    let mean_m = known.iter().map(|at| at.1).sum::<f64>() / known.len().max(1) as f64;
    if highest - lowest <= SAME_STAGE_M {
        return Ok((lowest, 0.0));
    }
    let is_half_plane = matches!(
        shape,
        Shape::Axes {
            x: Axis::OneEdge(_),
            y: Axis::Open
        }
    );
    if !is_half_plane {
        return Err(Box::new(OutlineError::StageVaries {
            river: river(),
            spread: names::length(highest - lowest),
            shape: shape.name(),
            mean_m,
        }));
    }
    straight_fall(&known).map_err(|worst| {
        Box::new(OutlineError::StageNotLinear {
            river: river(),
            departure: names::length(worst),
        })
    })
}

/// Stage at position 0 and slope of a straight fall through known stages, or
/// the largest departure from it where that exceeds 1 mm.
fn straight_fall(known: &[(f64, f64)]) -> Result<(f64, f64), f64> {
    let (stage_m, slope) = line_through(known);
    let departure = |at: &(f64, f64)| (stage_m + slope * at.0 - at.1).abs();
    let worst = known.iter().map(departure).fold(0.0, f64::max);
    if worst > TOUCH_M {
        return Err(worst);
    }
    Ok((stage_m, slope))
}

/// The stages at those vertices of an edge that make a side, with their
/// positions along x = 0.
fn at_positions(
    side: &Side,
    edge: usize,
    points: &[Point],
    levels: &[Level],
    frame: &Frame,
) -> Vec<(f64, f64)> {
    let bits = || side.bits.iter().filter(|bit| bit.edge == edge);
    let first = bits().map(|bit| bit.vertices.0).min().unwrap_or(0);
    let last = bits().map(|bit| bit.vertices.1).max().unwrap_or(0);
    points
        .iter()
        .zip(levels)
        .take(last + 1)
        .skip(first)
        .map(|(point, level)| (frame.to_canonical(*point).im, level.si()))
        .collect()
}

/// Value at 0 and slope of the line of least squares.
fn line_through(known: &[(f64, f64)]) -> (f64, f64) {
    let count = known.len() as f64;
    let mean = known.iter().map(|at| at.0).sum::<f64>() / count;
    let mean_level = known.iter().map(|at| at.1).sum::<f64>() / count;
    let spread: f64 = known.iter().map(|at| (at.0 - mean).powi(2)).sum();
    let joint: f64 = known
        .iter()
        .map(|at| (at.0 - mean) * (at.1 - mean_level))
        .sum();
    let slope = if spread > 0.0 { joint / spread } else { 0.0 };
    (mean_level - slope * mean, slope)
}
