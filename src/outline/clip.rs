//! The part of an outline, and of its sides, within a map's rectangle.
//!
//! Method: a convex outline of straight sides clips the rectangle side by side
//! (Sutherland & Hodgman 1974, from memory), so that every vertex is a corner
//! or a crossing. Around a reflex wedge or a circle the boundary's paths
//! within the rectangle are joined along its rim (`walk`). Circles become
//! chords with their vertices on the circle and a sagitta of at most 0.5 mm.

use std::f64::consts::{PI, TAU};

use geo::{Coord, LineString, MultiPolygon, Polygon};
use num_complex::Complex64;

use super::shape::{Axis, Shape};
use super::{Outline, Piece};
use super::{walk, window};
use crate::site::{Extent, Point};

impl Outline {
    /// The aquifer within a rectangle, in site coordinates; empty where they
    /// do not overlap.
    pub fn clip(&self, extent: Extent) -> MultiPolygon<f64> {
        match self.shape.unclogged() {
            Shape::Axes { .. } | Shape::CloggedHalfPlane { .. } => self.clip_convex(extent),
            Shape::Wedge { angle_rad, .. } if angle_rad <= PI => self.clip_convex(extent),
            Shape::Wedge { angle_rad, .. } if angle_rad < TAU => {
                let paths = self.reflex_paths(extent);
                self.joined(extent, paths)
            }
            // The plane slit by a half-line.
            Shape::Wedge { .. } => polygon(walk::corners(extent).to_vec()),
            Shape::Disk { radius_m } => self.clip_circle(extent, radius_m, true),
            Shape::DiskExterior { radius_m } => self.clip_circle(extent, radius_m, false),
            Shape::General => match &self.boundary {
                Some(boundary) => window::clip(&self.frame, boundary, extent),
                None => MultiPolygon::new(Vec::new()),
            },
        }
    }

    /// The line of one piece of a side within a rectangle, its extension
    /// included; empty where the piece does not come into the rectangle. On a
    /// circle that the rectangle cuts into several arcs this is the longest;
    /// `piece_lines` gives all of them.
    pub fn piece_line(&self, side: usize, piece: usize, extent: Extent) -> Vec<Point> {
        let lines = self.piece_lines(side, piece, extent);
        let length = |line: &Vec<Point>| -> f64 {
            line.iter()
                .zip(line.iter().skip(1))
                .map(|(a, b)| (b - a).norm())
                .sum()
        };
        lines
            .into_iter()
            .max_by(|a, b| length(a).total_cmp(&length(b)))
            .unwrap_or_default()
    }

    /// All lines of one piece of a side within a rectangle.
    pub fn piece_lines(&self, side: usize, piece: usize, extent: Extent) -> Vec<Vec<Point>> {
        let Some(piece) = self.sides.get(side).and_then(|pieces| pieces.get(piece)) else {
            return Vec::new();
        };
        if let (Shape::General, Some(curve)) = (self.shape, self.round_side(side)) {
            return window::arcs_within(&self.frame, &curve, extent);
        }
        match self.shape {
            Shape::Disk { radius_m } | Shape::DiskExterior { radius_m } => {
                let centre = self.frame.to_site(Complex64::ZERO);
                match walk::arcs(extent, centre, radius_m) {
                    walk::Arcs::Whole => vec![walk::arc(centre, radius_m, 0.0..TAU)],
                    walk::Arcs::Parts(parts) => parts
                        .into_iter()
                        .map(|part| walk::arc(centre, radius_m, part))
                        .collect(),
                }
            }
            _ => self
                .straight_piece(side, piece, extent)
                .into_iter()
                .collect(),
        }
    }

    /// A straight piece within a rectangle.
    fn straight_piece(&self, side: usize, piece: &Piece, extent: Extent) -> Option<Vec<Point>> {
        let line = self.side_line(side);
        let start = self.frame.to_site(line.origin);
        let step = self.frame.direction_to_site(line.axis);
        let (low, high) = (piece.along.start, piece.along.end);
        let (from, to) = walk::within(extent, start, step, low..high)?;
        Some(vec![start + step * from, start + step * to])
    }

    /// Clips the rectangle by every side of a convex outline.
    fn clip_convex(&self, extent: Extent) -> MultiPolygon<f64> {
        let mut ring = walk::corners(extent).to_vec();
        for inward in self.inward_distances() {
            let measured: Vec<(Point, f64)> = ring
                .iter()
                .map(|point| (*point, inward(self.frame.to_canonical(*point))))
                .collect();
            ring = cut(&measured);
        }
        polygon(ring)
    }

    /// For each straight side the canonical distance inward from its line.
    fn inward_distances(&self) -> Vec<Box<dyn Fn(Complex64) -> f64>> {
        match self.shape.unclogged() {
            Shape::Axes { x, y } => {
                let mut sides = across(x, |z| z.re);
                sides.extend(across(y, |z| z.im));
                sides
            }
            Shape::Wedge { angle_rad, .. } => {
                let back = Complex64::cis(-angle_rad);
                vec![
                    Box::new(|z: Complex64| z.im),
                    Box::new(move |z: Complex64| -(z * back).im),
                ]
            }
            Shape::CloggedHalfPlane { .. }
            | Shape::Disk { .. }
            | Shape::DiskExterior { .. }
            | Shape::General => Vec::new(),
        }
    }

    /// The boundary of a reflex wedge within a rectangle, the aquifer to its
    /// left: in along the second side, out along the first.
    fn reflex_paths(&self, extent: Extent) -> Vec<Vec<Point>> {
        let apex = self.frame.to_site(Complex64::ZERO);
        let part = |side: usize| {
            let step = self.frame.direction_to_site(self.side_line(side).axis);
            let (from, to) = walk::within(extent, apex, step, 0.0..f64::INFINITY)?;
            Some((from, apex + step * from, apex + step * to))
        };
        match (part(1), part(0)) {
            (Some((start, _, come)), Some((end, _, go))) if start == 0.0 && end == 0.0 => {
                vec![vec![come, apex, go]]
            }
            (inward, outward) => {
                let inward = inward.map(|(_, near, far)| vec![far, near]);
                let outward = outward.map(|(_, near, far)| vec![near, far]);
                inward.into_iter().chain(outward).collect()
            }
        }
    }

    /// The disk within a rectangle, or the rectangle without the disk.
    fn clip_circle(&self, extent: Extent, radius_m: f64, inside: bool) -> MultiPolygon<f64> {
        let centre = self.frame.to_site(Complex64::ZERO);
        let parts = match walk::arcs(extent, centre, radius_m) {
            walk::Arcs::Whole => {
                let circle = walk::arc(centre, radius_m, 0.0..TAU);
                return if inside {
                    polygon(circle)
                } else {
                    let hole = line_string(circle.into_iter().rev());
                    let rim = line_string(walk::corners(extent));
                    MultiPolygon::new(vec![Polygon::new(rim, vec![hole])])
                };
            }
            walk::Arcs::Parts(parts) => parts,
        };
        let paths = parts.into_iter().map(|part| {
            let mut path = walk::arc(centre, radius_m, part);
            if !inside {
                path.reverse();
            }
            path
        });
        let paths = paths.collect();
        self.joined(extent, paths)
    }

    /// The polygons to the left of boundary paths that cross a rectangle.
    fn joined(&self, extent: Extent, paths: Vec<Vec<Point>>) -> MultiPolygon<f64> {
        if paths.is_empty() {
            let middle = nalgebra::center(&extent.min, &extent.max);
            return if self.holds(middle) {
                polygon(walk::corners(extent).to_vec())
            } else {
                MultiPolygon::new(Vec::new())
            };
        }
        let rings = walk::rings(extent, &paths);
        let polygons = rings.into_iter().flat_map(polygon);
        MultiPolygon::new(polygons.collect())
    }
}

/// Distances inward from the edges across an axis.
fn across(
    axis: Axis,
    coordinate: impl Fn(Complex64) -> f64 + Copy + 'static,
) -> Vec<Box<dyn Fn(Complex64) -> f64>> {
    match axis {
        Axis::Open => Vec::new(),
        Axis::OneEdge(_) => vec![Box::new(coordinate)],
        Axis::TwoEdges { width_m, .. } => vec![
            Box::new(coordinate),
            Box::new(move |z| width_m - coordinate(z)),
        ],
    }
}

/// The part of a ring where a linear function, given at its corners, is not
/// negative.
fn cut(measured: &[(Point, f64)]) -> Vec<Point> {
    let mut kept = Vec::with_capacity(measured.len() + 1);
    for (here, next) in measured.iter().zip(measured.iter().cycle().skip(1)) {
        if here.1 >= 0.0 {
            kept.push(here.0);
        }
        if (here.1 > 0.0 && next.1 < 0.0) || (here.1 < 0.0 && next.1 > 0.0) {
            let share = here.1 / (here.1 - next.1);
            kept.push(here.0 + (next.0 - here.0) * share);
        }
    }
    kept
}

/// A polygon of one ring; none where it has no area.
fn polygon(ring: Vec<Point>) -> MultiPolygon<f64> {
    let origin = ring.first().copied().unwrap_or(Point::origin());
    let doubled_area: f64 = ring
        .iter()
        .zip(ring.iter().cycle().skip(1))
        .map(|(a, b)| (a - origin).perp(&(b - origin)))
        .sum();
    if ring.len() < 3 || doubled_area <= 0.0 {
        return MultiPolygon::new(Vec::new());
    }
    MultiPolygon::new(vec![Polygon::new(line_string(ring), Vec::new())])
}

fn line_string(points: impl IntoIterator<Item = Point>) -> LineString<f64> {
    let coordinates = points.into_iter().map(|point| Coord {
        x: point.x,
        y: point.y,
    });
    LineString::new(coordinates.collect())
}
