//! `boundaries.geojson`: the rivers and barriers as far as they bound an
//! aquifer within the map and as far as the plan draws them, with the water they give to the wells.
//!
//! One feature a river or barrier, its parts joined; where its parts lie
//! apart they are several features, each with its own inflow.

use super::Planned;
use super::layer::Layer;
use super::units::Properties;
use crate::site::{Edge, EdgeKind, EdgeShape, Extent, Point, Vector};

/// The layer.
pub fn layer(planned: &Planned<'_>) -> Layer {
    let mut layer = Layer::default();
    let site = planned.solution.site();
    for (finding, edge) in planned.findings.boundaries.iter().zip(&site.edges) {
        let kind = match edge.kind {
            EdgeKind::River { .. } => "river",
            EdgeKind::Barrier => "barrier",
        };
        let parts = parts(planned, finding.edge);
        let is_whole = parts.len() == 1;
        for part in parts {
            let inflow_m3_d = if is_whole {
                finding.inflow_m3_d()
            } else {
                part.inflow_m3_d(planned)
            };
            let properties = Properties::new(planned.units())
                .with("name", edge.name.as_str())
                .with("kind", kind)
                .rate("inflow", inflow_m3_d);
            layer.add_line(part.line, properties);
        }
    }
    layer
}

/// A part of an edge, in one line.
struct Part {
    line: Vec<Point>,
    pieces: Vec<PieceAt>,
}

/// Where a piece of an outline stands: its aquifer, side and number there.
#[derive(Clone, Copy)]
struct PieceAt {
    field: usize,
    side: usize,
    piece: usize,
}

impl Part {
    /// Goes on with another part that begins where this one ends.
    fn extend(&mut self, mut next: Self, is_reversed: bool) {
        if is_reversed {
            next.line.reverse();
        }
        self.line.extend(next.line.into_iter().skip(1));
        self.pieces.extend(next.pieces);
    }

    /// What it gives to the wells of all its aquifers, m³/d.
    fn inflow_m3_d(&self, planned: &Planned<'_>) -> f64 {
        let given = |at: &PieceAt| {
            let field = planned.solution.fields().get(at.field)?;
            let piece = field.outline().sides.get(at.side)?.get(at.piece)?;
            Some(field.inflow_through_m3_d(at.side, &piece.along))
        };
        self.pieces.iter().filter_map(given).sum()
    }
}

/// The course of an edge within the map, a line a part.
pub fn lines(planned: &Planned<'_>, edge: usize) -> Vec<Vec<Point>> {
    let parts = parts(planned, edge).into_iter();
    parts.map(|part| part.line).collect()
}

/// The parts of an edge within the map: once where two aquifers share it,
/// in one line where its pieces join. An edge that bounds no aquifer is drawn
/// as the plan gives it.
fn parts(planned: &Planned<'_>, edge: usize) -> Vec<Part> {
    let mut parts: Vec<Part> = Vec::new();
    let mut bounds = false;
    let extent = extent_with(planned, edge);
    for (field, solved) in planned.solution.fields().iter().enumerate() {
        let outline = solved.outline();
        for (side, pieces) in outline.sides.iter().enumerate() {
            let of_edge = pieces
                .iter()
                .enumerate()
                .filter(|(_, piece)| piece.edge == edge);
            for (piece, _) in of_edge {
                bounds = true;
                let at = PieceAt { field, side, piece };
                add(&mut parts, at, outline.piece_lines(side, piece, extent));
            }
        }
    }
    if bounds {
        return joined(parts);
    }
    let given = planned.solution.site().edges.get(edge).map(as_given);
    let whole = |line| Part {
        line,
        pieces: Vec::new(),
    };
    given.into_iter().flatten().map(whole).collect()
}

/// Adds the course of a piece, which the extent may cut into several lines:
/// its water counts with the first.
fn add(parts: &mut Vec<Part>, at: PieceAt, lines: Vec<Vec<Point>>) {
    let mut pieces = vec![at];
    for line in lines.into_iter().filter(|line| line.len() > 1) {
        let known = parts
            .iter_mut()
            .find(|known| same_course(&known.line, &line));
        match known {
            Some(known) => known.pieces.append(&mut pieces),
            None => parts.push(Part {
                line,
                pieces: std::mem::take(&mut pieces),
            }),
        }
    }
}

/// The map's extent, widened to hold what the plan draws of an edge: no river
/// that gives water is left out for lying off the map.
fn extent_with(planned: &Planned<'_>, edge: usize) -> Extent {
    let mut extent = planned.survey.window.extent;
    let drawn = planned.solution.site().edges.get(edge).map(as_given);
    for place in drawn.into_iter().flatten().flatten() {
        extent.min = extent.min.inf(&place);
        extent.max = extent.max.sup(&place);
    }
    extent
}

/// An edge as the plan gives it; a circle as its polygon of 128 sides.
fn as_given(edge: &Edge) -> Vec<Vec<Point>> {
    match &edge.shape {
        EdgeShape::Line(line) => vec![line.clone()],
        EdgeShape::Circle { centre, radius } => {
            let rim = (0..=128).map(|step| {
                let (sin, cos) = (f64::from(step) / 128.0 * std::f64::consts::TAU).sin_cos();
                centre + Vector::new(cos, sin) * radius.si()
            });
            vec![rim.collect()]
        }
    }
}

/// Parts whose ends meet, made one.
fn joined(mut parts: Vec<Part>) -> Vec<Part> {
    let mut done = Vec::new();
    while !parts.is_empty() {
        let mut part = parts.remove(0);
        for from_its_beginning in [false, true] {
            if from_its_beginning {
                part.line.reverse();
            }
            while let Some((next, is_reversed)) = successor(&part.line, &parts) {
                part.extend(parts.remove(next), is_reversed);
            }
        }
        done.push(part);
    }
    done
}

/// The part that begins, or reversed ends, where a line ends.
fn successor(line: &[Point], parts: &[Part]) -> Option<(usize, bool)> {
    let end = *line.last()?;
    if line.first().is_some_and(|&first| near(first, end)) {
        return None;
    }
    parts.iter().enumerate().find_map(|(index, other)| {
        if near(*other.line.first()?, end) {
            Some((index, false))
        } else if near(*other.line.last()?, end) {
            Some((index, true))
        } else {
            None
        }
    })
}

/// Whether two lines run between the same ends and over the same middle, to a
/// millimetre.
fn same_course(a: &[Point], b: &[Point]) -> bool {
    let ends = |line: &[Point]| Some((*line.first()?, *line.last()?));
    if !near(middle(a), middle(b)) {
        return false;
    }
    match (ends(a), ends(b)) {
        (Some((a0, a1)), Some((b0, b1))) => {
            (near(a0, b0) && near(a1, b1)) || (near(a0, b1) && near(a1, b0))
        }
        _ => false,
    }
}

/// The place halfway along a line.
fn middle(line: &[Point]) -> Point {
    let legs = || line.iter().zip(line.iter().skip(1));
    let whole: f64 = legs().map(|(a, b)| (b - a).norm()).sum();
    let mut left = 0.5 * whole;
    for (a, b) in legs() {
        let length = (b - a).norm();
        if length >= left && length > 0.0 {
            return a + (b - a) * (left / length);
        }
        left -= length;
    }
    line.first().copied().unwrap_or(Point::origin())
}

/// Whether two points are the same to a millimetre.
fn near(a: Point, b: Point) -> bool {
    (a - b).norm() < 1e-3
}
