//! Boundary paths within a rectangle, and the rings they make with its rim.

use std::f64::consts::TAU;
use std::ops::Range;

use crate::site::{Extent, Point, Vector};

/// Sagitta of the chords that stand for a circle, metres.
const SAGITTA_M: f64 = 0.5e-3;

/// The corners of a rectangle, counterclockwise from the south-west.
pub(super) fn corners(extent: Extent) -> [Point; 4] {
    let Extent { min, max } = extent;
    [min, Point::new(max.x, min.y), max, Point::new(min.x, max.y)]
}

/// The range of t within `limits` where start + step · t lies in a rectangle.
/// Source: Liang & Barsky (1984), from memory.
pub(super) fn within(
    extent: Extent,
    start: Point,
    step: Vector,
    limits: Range<f64>,
) -> Option<(f64, f64)> {
    let (mut from, mut to) = (limits.start, limits.end);
    let axes = [
        (start.x, step.x, extent.min.x, extent.max.x),
        (start.y, step.y, extent.min.y, extent.max.y),
    ];
    for (place, slope, low, high) in axes {
        if slope == 0.0 {
            if place < low || place > high {
                return None;
            }
            continue;
        }
        let (first, second) = ((low - place) / slope, (high - place) / slope);
        from = from.max(first.min(second));
        to = to.min(first.max(second));
    }
    (from < to).then_some((from, to))
}

/// The parts of a circle within a rectangle.
pub(super) enum Arcs {
    /// All of it.
    Whole,
    /// These ranges of angle, counterclockwise; perhaps none.
    Parts(Vec<Range<f64>>),
}

/// Where a circle runs within a rectangle.
pub(super) fn arcs(extent: Extent, centre: Point, radius_m: f64) -> Arcs {
    let mut crossings = Vec::new();
    let Extent { min, max } = extent;
    for (place, low, high, across_x) in [
        (min.x - centre.x, min.y - centre.y, max.y - centre.y, true),
        (max.x - centre.x, min.y - centre.y, max.y - centre.y, true),
        (min.y - centre.y, min.x - centre.x, max.x - centre.x, false),
        (max.y - centre.y, min.x - centre.x, max.x - centre.x, false),
    ] {
        let half_chord_squared = (radius_m - place) * (radius_m + place);
        if half_chord_squared <= 0.0 {
            continue;
        }
        let half_chord = half_chord_squared.sqrt();
        for other in [-half_chord, half_chord] {
            if other >= low && other <= high {
                let (x, y) = if across_x {
                    (place, other)
                } else {
                    (other, place)
                };
                crossings.push(y.atan2(x).rem_euclid(TAU));
            }
        }
    }
    crossings.sort_by(f64::total_cmp);
    let holds = |angle: f64| {
        let place = on_circle(centre, radius_m, angle);
        place.x >= min.x && place.x <= max.x && place.y >= min.y && place.y <= max.y
    };
    let Some(first) = crossings.first().copied() else {
        return if holds(0.0) {
            Arcs::Whole
        } else {
            Arcs::Parts(Vec::new())
        };
    };
    let following = crossings.iter().skip(1).copied().chain([first + TAU]);
    let parts = crossings.iter().copied().zip(following);
    let inside = parts.filter(|(from, to)| to > from && holds(0.5 * (from + to)));
    Arcs::Parts(inside.map(|(from, to)| from..to).collect())
}

fn on_circle(centre: Point, radius_m: f64, angle: f64) -> Point {
    let (sin, cos) = angle.sin_cos();
    Point::new(centre.x + radius_m * cos, centre.y + radius_m * sin)
}

/// How many chords stand for an arc over an angle.
pub(super) fn chords(radius_m: f64, span_rad: f64) -> usize {
    let half_step = 2.0 * (SAGITTA_M / (2.0 * radius_m)).sqrt().min(0.5).asin();
    (span_rad / (2.0 * half_step)).ceil().max(1.0) as usize
}

/// An arc as chords, its ends included.
pub(super) fn arc(centre: Point, radius_m: f64, angles: Range<f64>) -> Vec<Point> {
    let span = angles.end - angles.start;
    let count = chords(radius_m, span);
    (0..=count)
        .map(|step| {
            let angle = angles.start + span * step as f64 / count as f64;
            on_circle(centre, radius_m, angle)
        })
        .collect()
}

/// The rings to the left of paths that begin and end on a rectangle's rim:
/// each path is followed to its end, then the rim counterclockwise to the
/// next beginning of a path.
pub(super) fn rings(extent: Extent, paths: &[Vec<Point>]) -> Vec<Vec<Point>> {
    let place = |point: Option<&Point>| point.map_or(0.0, |point| rim_position(extent, *point));
    let starts: Vec<f64> = paths.iter().map(|path| place(path.first())).collect();
    let mut unused: Vec<usize> = (0..paths.len()).collect();
    let mut rings = Vec::new();
    while let Some(first) = unused.first().copied() {
        let mut ring: Vec<Point> = Vec::new();
        let mut here = first;
        loop {
            unused.retain(|path| *path != here);
            let path: &[Point] = paths.get(here).map_or(&[], Vec::as_slice);
            ring.extend(path);
            let end = place(path.last());
            let ahead = |path: &usize| {
                let start = starts.get(*path).copied().unwrap_or(0.0);
                (start - end).rem_euclid(4.0)
            };
            let candidates = unused.iter().copied().chain([first]);
            let next = candidates.min_by(|a, b| ahead(a).total_cmp(&ahead(b)));
            let next = next.unwrap_or(first);
            ring.extend(rim_corners(extent, end, ahead(&next)));
            if next == first {
                break;
            }
            here = next;
        }
        rings.push(ring);
    }
    rings
}

/// Position on the rim, 0 to 4: one for each side, counterclockwise from the
/// south-west corner.
pub(super) fn rim_position(extent: Extent, point: Point) -> f64 {
    let Extent { min, max } = extent;
    let east = ((point.x - min.x) / (max.x - min.x)).clamp(0.0, 1.0);
    let north = ((point.y - min.y) / (max.y - min.y)).clamp(0.0, 1.0);
    let sides = [
        ((point.y - min.y).abs(), east),
        ((point.x - max.x).abs(), 1.0 + north),
        ((point.y - max.y).abs(), 3.0 - east),
        ((point.x - min.x).abs(), 4.0 - north),
    ];
    let nearest = sides.into_iter().min_by(|a, b| a.0.total_cmp(&b.0));
    nearest.map_or(0.0, |(_, position)| position)
}

/// The corners passed when going on from a rim position.
pub(super) fn rim_corners(extent: Extent, from: f64, length: f64) -> Vec<Point> {
    let corners = corners(extent);
    let first = from.floor() as usize + 1;
    let passed = (from + length).ceil() as usize;
    (first..passed)
        .filter_map(|corner| corners.get(corner % 4).copied())
        .collect()
}
