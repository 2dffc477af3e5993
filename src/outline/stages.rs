//! The stage of each piece of river as a function of position along its side.
//!
//! A stage is constant, or, beside a half-plane, one linear function of the
//! position, which the drawn vertices follow to within 1 mm and which is
//! carried on to infinity; the rivers of one half-plane all fall alike. Any
//! other stage makes a general outline.

use super::boundary::Side;
use super::frame::Frame;
use super::shape::{Axis, Shape};
use super::stroke::TOUCH_M;
use super::{Outline, Piece};
use crate::site::{EdgeKind, EdgeShape, Level, Point, Site, Stage};

/// Stages that differ by less count as the same, metres.
const SAME_STAGE_M: f64 = 1e-9;

/// Slopes that differ by less count as the same: a millimetre a kilometre.
const SAME_SLOPE: f64 = 1e-6;

/// Sets the stages of all pieces of an outline, whose sides are given in
/// canonical order; none where no closed form takes them.
pub(super) fn set(site: &Site, sides: &[&Side], mut outline: Outline) -> Option<Outline> {
    let (frame, shape) = (outline.frame, outline.shape);
    for (pieces, side) in outline.sides.iter_mut().zip(sides) {
        for piece in pieces {
            let (stage_m, slope) = on_piece(site, side, piece, &frame, &shape)?;
            piece.stage_m = stage_m;
            piece.stage_slope = slope;
        }
    }
    let mut sides = outline.sides.iter_mut();
    sides.all(|side| fall_alike(side)).then_some(outline)
}

/// Whether the rivers of one side share one slope, as the closed form needs;
/// they are then given that of the first.
fn fall_alike(side: &mut [Piece]) -> bool {
    let Some((first, others)) = side.split_first_mut() else {
        return true;
    };
    for piece in others {
        let turn = piece.stage_slope - first.stage_slope;
        if turn.abs() > SAME_SLOPE {
            return false;
        }
        if turn != 0.0 {
            // The pieces meet at the start of the later one.
            piece.stage_m += turn * piece.along.start;
            piece.stage_slope = first.stage_slope;
        }
    }
    true
}

/// Stage at position 0 and slope of one piece.
fn on_piece(
    site: &Site,
    side: &Side,
    piece: &Piece,
    frame: &Frame,
    shape: &Shape,
) -> Option<(f64, f64)> {
    let edge = site.edges.get(piece.edge)?;
    let (EdgeKind::River { stage, .. }, EdgeShape::Line(points)) = (&edge.kind, &edge.shape) else {
        return Some((0.0, 0.0));
    };
    let levels = match stage {
        Stage::Constant(level) => return Some((level.si(), 0.0)),
        Stage::AtVertices(levels) => levels,
    };
    let known = at_positions(side, piece.edge, points, levels, frame);
    let highest = known
        .iter()
        .map(|at| at.1)
        .fold(f64::NEG_INFINITY, f64::max);
    let lowest = known.iter().map(|at| at.1).fold(f64::INFINITY, f64::min);
    if highest - lowest <= SAME_STAGE_M {
        return Some((lowest, 0.0));
    }
    let is_half_plane = matches!(
        shape,
        Shape::Axes {
            x: Axis::OneEdge(_),
            y: Axis::Open
        }
    );
    if is_half_plane {
        straight_fall(&known)
    } else {
        None
    }
}

/// Stage at position 0 and slope of a straight fall through known stages, none
/// where one departs from it by more than 1 mm.
fn straight_fall(known: &[(f64, f64)]) -> Option<(f64, f64)> {
    let (stage_m, slope) = line_through(known);
    let departure = |at: &(f64, f64)| (stage_m + slope * at.0 - at.1).abs();
    let worst = known.iter().map(departure).fold(0.0, f64::max);
    (worst <= TOUCH_M).then_some((stage_m, slope))
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
