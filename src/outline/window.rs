//! The part of a general outline within a map's rectangle.
//!
//! Method: the chains become rings in the site's frame, the open ones closed
//! along a square far outside; the rings are then cut at the rectangle's four
//! lines, one after the other (`cutting`).

use std::f64::consts::{PI, TAU};

use geo::{Contains, Coord, LineString, MultiPolygon, Polygon};
use num_complex::Complex64;

use super::cutting::{CutLine, Ring};
use super::frame::Frame;
use super::general::{Boundary, BoundaryChain, Curve};
use super::{infinity, walk};
use crate::site::{Extent, Point};

/// Twice the area below which a ring is nothing, m².
const NO_AREA_M2: f64 = 1e-9;

/// The aquifer within a rectangle, in site coordinates.
pub(super) fn clip(frame: &Frame, boundary: &Boundary, extent: Extent) -> MultiPolygon<f64> {
    let far = square_around(frame, boundary, extent);
    let mut rings = rings(frame, boundary, extent, far);
    let Extent { min, max } = extent;
    for line in [
        CutLine::new(0, min.x, true),
        CutLine::new(0, max.x, false),
        CutLine::new(1, min.y, true),
        CutLine::new(1, max.y, false),
    ] {
        rings = line.cut(rings);
    }
    polygons(rings)
}

/// A square well outside the rectangle and all vertices.
fn square_around(frame: &Frame, boundary: &Boundary, extent: Extent) -> Extent {
    let centre = nalgebra::center(&extent.min, &extent.max);
    let of_side = |curve: &Curve| {
        let radius = match *curve {
            Curve::Arc { radius, .. } => 2.0 * radius,
            _ => 0.0,
        };
        let ends = curve.from().into_iter().chain(curve.to());
        ends.map(|z| (frame.to_site(z) - centre).amax() + radius)
            .fold(0.0, f64::max)
    };
    let vertices = boundary.sides.iter().map(|side| of_side(&side.curve));
    let reach = vertices.fold((extent.max - centre).amax(), f64::max);
    let reach = crate::site::Vector::repeat(2.0 * reach + 1.0);
    Extent {
        min: centre - reach,
        max: centre + reach,
    }
}

/// All rings of the boundary, closed within the far square.
fn rings(frame: &Frame, boundary: &Boundary, extent: Extent, far: Extent) -> Vec<Ring> {
    let closed = boundary.chains.iter().filter(|chain| chain.closed);
    let mut rings: Vec<Ring> = closed
        .map(|chain| path(frame, boundary, chain, extent, far))
        .collect();
    let open: Vec<&BoundaryChain> = boundary.open_chains().collect();
    if open.is_empty() {
        if !boundary.is_bounded() {
            rings.push(walk::corners(far).to_vec());
        }
        return rings;
    }
    let paths: Vec<Ring> = open
        .iter()
        .map(|chain| path(frame, boundary, chain, extent, far))
        .collect();
    let mut ring = Vec::new();
    let following = paths.iter().zip(&open).cycle().skip(1);
    for ((path, chain), (next, other)) in paths.iter().zip(&open).zip(following) {
        ring.extend(path);
        if let (Some(end), Some(start)) = (path.last(), next.first()) {
            let out = boundary.sides_of(chain).last();
            let back = boundary.sides_of(other).first();
            let is_between = out.zip(back).is_some_and(|(out, back)| {
                let ends = out.curve.from().zip(back.curve.to());
                let heading = out.curve.heading(0.0);
                ends.is_some_and(|(from, to)| infinity::lies_left(heading, from, to))
            });
            ring.extend(around(far, *end, *start, is_between));
        }
    }
    rings.push(ring);
    rings
}

/// The corners of the far square on the way counterclockwise from the end of a
/// path to the start of the next, which may lie beside it, the aquifer between
/// them or all around.
fn around(far: Extent, end: Point, start: Point, is_between: bool) -> Vec<Point> {
    let position = walk::rim_position(far, end);
    let ahead = (walk::rim_position(far, start) - position).rem_euclid(4.0);
    let is_whole_turn = !(1e-9..=4.0 - 1e-9).contains(&ahead) && !is_between;
    let ahead = if is_whole_turn { 4.0 } else { ahead };
    walk::rim_corners(far, position, ahead)
}

/// The vertices of a chain, those of a closed one without its last.
fn path(
    frame: &Frame,
    boundary: &Boundary,
    chain: &BoundaryChain,
    extent: Extent,
    far: Extent,
) -> Ring {
    let mut path = Vec::new();
    for side in boundary.sides_of(chain) {
        match side.curve {
            Curve::Segment { from, .. } => path.push(frame.to_site(from)),
            Curve::RayIn { to, from_direction } => {
                path.extend(on_rim(frame, to, from_direction, far));
            }
            Curve::RayOut { from, direction } => {
                path.push(frame.to_site(from));
                path.extend(on_rim(frame, from, direction, far));
            }
            Curve::Arc { .. } => {
                let mut arc = arc(frame, &side.curve, extent);
                arc.pop();
                path.extend(arc);
            }
        }
    }
    path
}

/// Where a half-line leaves a square.
fn on_rim(frame: &Frame, from: Complex64, direction: Complex64, far: Extent) -> Option<Point> {
    let (start, step) = (frame.to_site(from), frame.direction_to_site(direction));
    let (_, leave) = walk::within(far, start, step, 0.0..f64::INFINITY)?;
    Some(start + step * leave)
}

/// The vertices of an arc, ends included, with one wherever it meets a line of
/// the rectangle's rim.
pub(super) fn arc(frame: &Frame, curve: &Curve, extent: Extent) -> Vec<Point> {
    let mut vertices: Vec<Point> = Vec::new();
    for part in arc_parts(frame, curve, extent) {
        vertices.pop();
        vertices.extend(chords(frame, curve, part));
    }
    vertices
}

/// The parts of an arc within a rectangle.
pub(super) fn arcs_within(frame: &Frame, curve: &Curve, extent: Extent) -> Vec<Vec<Point>> {
    let mut lines: Vec<Vec<Point>> = Vec::new();
    let mut goes_on = false;
    for (from, to) in arc_parts(frame, curve, extent) {
        let middle = frame.to_site(curve.at(0.5 * (from + to)));
        let Extent { min, max } = extent;
        let is_within =
            middle.x >= min.x && middle.x <= max.x && middle.y >= min.y && middle.y <= max.y;
        if is_within {
            let part = chords(frame, curve, (from, to));
            match lines.last_mut() {
                Some(line) if goes_on => line.extend(part.into_iter().skip(1)),
                _ => lines.push(part),
            }
        }
        goes_on = is_within;
    }
    let is_whole = matches!(curve, Curve::Arc { sweep_rad, .. } if sweep_rad.abs() == TAU);
    if is_whole
        && lines.len() > 1
        && lines.first().and_then(|line| line.first()) == lines.last().and_then(|line| line.last())
    {
        let rest = lines.remove(0);
        if let Some(last) = lines.last_mut() {
            last.extend(rest.into_iter().skip(1));
        }
    }
    lines
}

/// Positions along an arc between its meetings with the rim's four lines.
fn arc_parts(frame: &Frame, curve: &Curve, extent: Extent) -> Vec<(f64, f64)> {
    let Curve::Arc {
        centre,
        radius,
        start_rad,
        sweep_rad,
    } = *curve
    else {
        return Vec::new();
    };
    let middle = frame.to_site(centre);
    let mut cuts = vec![0.0, sweep_rad.abs()];
    let mut cut = |angle: f64| {
        let swept = (angle - start_rad) * sweep_rad.signum();
        let position = swept.rem_euclid(TAU);
        if position < sweep_rad.abs() {
            cuts.push(position);
        }
    };
    for x in [extent.min.x, extent.max.x] {
        let angle = ((x - middle.x) / radius).acos();
        if angle.is_finite() {
            cut(angle);
            cut(-angle);
        }
    }
    for y in [extent.min.y, extent.max.y] {
        let angle = ((y - middle.y) / radius).asin();
        if angle.is_finite() {
            cut(angle);
            cut(PI - angle);
        }
    }
    cuts.sort_by(f64::total_cmp);
    // Ends that a rim's line meets too, but for rounding.
    cuts.dedup_by(|next, before| *next - *before < 1e-12);
    if let Some(last) = cuts.last_mut() {
        *last = sweep_rad.abs();
    }
    let ends = cuts.iter().skip(1);
    cuts.iter()
        .zip(ends)
        .map(|(from, to)| (*from, *to))
        .collect()
}

/// The vertices of a part of an arc, ends included.
pub(super) fn chords(frame: &Frame, curve: &Curve, (from, to): (f64, f64)) -> Vec<Point> {
    let radius = match *curve {
        Curve::Arc { radius, .. } => radius,
        _ => 0.0,
    };
    let count = walk::chords(radius, to - from);
    let position = |step: usize| from + (to - from) * (step as f64 / count as f64);
    (0..=count)
        .map(|step| frame.to_site(curve.at(position(step))))
        .collect()
}

/// Rings as polygons: each hole within the smallest ring around it.
fn polygons(rings: Vec<Ring>) -> MultiPolygon<f64> {
    let mut outer: Vec<(f64, Polygon<f64>)> = Vec::new();
    let mut holes: Vec<LineString<f64>> = Vec::new();
    for mut ring in rings {
        ring.dedup();
        let area = doubled_area(&ring);
        let coordinates = ring.iter().map(|point| Coord {
            x: point.x,
            y: point.y,
        });
        let line = LineString::new(coordinates.collect());
        if area > NO_AREA_M2 {
            outer.push((area, Polygon::new(line, Vec::new())));
        } else if area < -NO_AREA_M2 {
            holes.push(line);
        }
    }
    let solid: Vec<Polygon<f64>> = outer.iter().map(|(_, polygon)| polygon.clone()).collect();
    for hole in holes {
        let Some(place) = inner_place(&hole) else {
            continue;
        };
        let around = outer
            .iter_mut()
            .zip(&solid)
            .filter(|(_, solid)| solid.contains(&place))
            .min_by(|a, b| a.0.0.total_cmp(&b.0.0));
        if let Some(((_, polygon), _)) = around {
            polygon.interiors_push(hole);
        }
    }
    MultiPolygon::new(outer.into_iter().map(|(_, polygon)| polygon).collect())
}

/// A place within a ring, off its vertices.
fn inner_place(ring: &LineString<f64>) -> Option<geo::Point<f64>> {
    use geo::InteriorPoint;
    Polygon::new(ring.clone(), Vec::new()).interior_point()
}

fn doubled_area(ring: &[Point]) -> f64 {
    let origin = ring.first().copied().unwrap_or(Point::origin());
    ring.iter()
        .zip(ring.iter().cycle().skip(1))
        .map(|(a, b)| (a - origin).perp(&(b - origin)))
        .sum()
}
