//! `boundaries.geojson`: the rivers and barriers as far as they bound an
//! aquifer within the map and as far as the plan draws them, with the water they give to the wells.
//!
//! One feature a river or barrier, its parts joined; where its parts lie
//! apart they are several features, each with the whole inflow.

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
        for line in lines(planned, finding.edge) {
            let properties = Properties::new(planned.units())
                .with("name", edge.name.as_str())
                .with("kind", kind)
                .rate("inflow", finding.inflow_m3_d());
            layer.add_line(line, properties);
        }
    }
    layer
}

/// The course of an edge within the map: once where two aquifers share it,
/// in one line where its parts join. An edge that bounds no aquifer is drawn
/// as the plan gives it.
pub fn lines(planned: &Planned<'_>, edge: usize) -> Vec<Vec<Point>> {
    let mut lines: Vec<Vec<Point>> = Vec::new();
    let mut bounds = false;
    let extent = extent_with(planned, edge);
    for field in planned.solution.fields() {
        let outline = field.outline();
        for (side, pieces) in outline.sides.iter().enumerate() {
            let of_edge = pieces
                .iter()
                .enumerate()
                .filter(|(_, piece)| piece.edge == edge);
            for (piece, _) in of_edge {
                bounds = true;
                for line in outline.piece_lines(side, piece, extent) {
                    if line.len() > 1 && !lines.iter().any(|known| same_course(known, &line)) {
                        lines.push(line);
                    }
                }
            }
        }
    }
    if bounds {
        joined(lines)
    } else {
        planned
            .solution
            .site()
            .edges
            .get(edge)
            .map_or(vec![], as_given)
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

/// Lines whose ends meet, made one.
fn joined(mut lines: Vec<Vec<Point>>) -> Vec<Vec<Point>> {
    let mut done = Vec::new();
    while !lines.is_empty() {
        let mut line = lines.remove(0);
        while let Some((next, reversed)) = successor(&line, &lines) {
            let mut more = lines.remove(next);
            if reversed {
                more.reverse();
            }
            line.extend(more.into_iter().skip(1));
        }
        line.reverse();
        while let Some((next, reversed)) = successor(&line, &lines) {
            let mut more = lines.remove(next);
            if reversed {
                more.reverse();
            }
            line.extend(more.into_iter().skip(1));
        }
        done.push(line);
    }
    done
}

/// The line that begins, or reversed ends, where this one ends.
fn successor(line: &[Point], lines: &[Vec<Point>]) -> Option<(usize, bool)> {
    let end = *line.last()?;
    if line.first().is_some_and(|&first| near(first, end)) {
        return None;
    }
    lines.iter().enumerate().find_map(|(index, other)| {
        if near(*other.first()?, end) {
            Some((index, false))
        } else if near(*other.last()?, end) {
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
