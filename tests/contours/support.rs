//! Fields and regions in closed form, and the check of everything that is
//! promised of contours. Every expected value is the formula itself, evaluated
//! at the vertices; areas are those of the region by geo's shoelace formula.

use std::f64::consts::PI;

use geo::{Area, Coord, LineString, MultiPolygon, Polygon, Validation, Winding};
use mirrorwell::contours::{
    Band, Bump, ContourLine, Cuts, Region, ScalarField, extremes, mesh, round_levels, sample,
};
use mirrorwell::site::{Extent, Point};
use rayon::prelude::*;

/// What is promised of every vertex.
pub const VERTEX_TOLERANCE_M: f64 = 1e-3;

pub struct Formula<F>(pub F);

impl<F: Fn(Point) -> f64 + Sync> ScalarField for Formula<F> {
    fn values(&self, points: &[Point]) -> Vec<f64> {
        points.par_iter().map(|&point| (self.0)(point)).collect()
    }
}

/// Thiem (1906): s = Q/(2πT) ln(R/r), the rim kept inside it.
pub fn thiem(wells: &[(Bump, f64)]) -> impl Fn(Point) -> f64 + Sync + Clone + use<> {
    let wells = wells.to_vec();
    move |point| {
        let cone = |(bump, strength): &(Bump, f64)| {
            let r = nalgebra::distance(&point, &bump.at).max(bump.rim_m);
            strength / (2.0 * PI) * (1000.0 / r).ln()
        };
        wells.iter().map(cone).sum()
    }
}

/// A well beside a river along x = 0: s = Q/(4πT) ln(r'²/r²). Ferris et al.
/// (1962), USGS Water-Supply Paper 1536-E, image wells.
pub fn beside_river(well: Bump, strength: f64) -> impl Fn(Point) -> f64 + Sync + Clone + use<> {
    move |point| {
        let r2 = nalgebra::distance_squared(&point, &well.at).max(well.rim_m.powi(2));
        strength / (4.0 * PI) * (4.0 * well.at.x * point.x / r2).ln_1p()
    }
}

pub fn ring(points: &[(f64, f64)]) -> LineString<f64> {
    let mut line: LineString<f64> = points.iter().map(|&(x, y)| Coord { x, y }).collect();
    line.close();
    line
}

pub fn region(outer: &[(f64, f64)], holes: &[Vec<(f64, f64)>], spacing_m: f64) -> Region {
    let polygon = Polygon::new(ring(outer), holes.iter().map(|h| ring(h)).collect());
    let xs = outer.iter().map(|p| p.0);
    let ys = outer.iter().map(|p| p.1);
    let extent = Extent {
        min: Point::new(
            xs.clone().fold(f64::INFINITY, f64::min),
            ys.clone().fold(f64::INFINITY, f64::min),
        ),
        max: Point::new(
            xs.fold(f64::NEG_INFINITY, f64::max),
            ys.fold(f64::NEG_INFINITY, f64::max),
        ),
    };
    Region {
        polygons: MultiPolygon(vec![polygon]),
        extent,
        spacing_m,
    }
}

pub fn rectangle(x0: f64, y0: f64, x1: f64, y1: f64, spacing_m: f64) -> Region {
    region(&[(x0, y0), (x1, y0), (x1, y1), (x0, y1)], &[], spacing_m)
}

pub fn circle(x: f64, y: f64, radius: f64, corners: usize) -> Vec<(f64, f64)> {
    (0..corners)
        .map(|i| {
            let (sin, cos) = (2.0 * PI * i as f64 / corners as f64).sin_cos();
            (x + radius * cos, y + radius * sin)
        })
        .collect()
}

pub fn bump(x: f64, y: f64, rim_m: f64) -> Bump {
    Bump {
        at: Point::new(x, y),
        rim_m,
    }
}

pub struct Drawn {
    pub lines: Vec<ContourLine>,
    pub bands: Vec<Band>,
}

pub fn draw(
    region: &Region,
    bumps: &[Bump],
    field: &dyn ScalarField,
    levels: Option<&[f64]>,
) -> Drawn {
    let mesh = mesh(region, bumps).unwrap();
    let values = sample(&mesh, field).unwrap();
    let [min, max] = extremes(&values);
    let levels = match levels {
        Some(levels) => levels.to_vec(),
        None => round_levels(min, max, 1.0, None).unwrap(),
    };
    let cuts = Cuts::refine(&mesh, &values, field, &levels).unwrap();
    let (lines, bands) = (cuts.lines(), cuts.bands());
    Drawn { lines, bands }
}

pub fn distance_to_outline(region: &Region, at: Point) -> f64 {
    region
        .polygons
        .iter()
        .flat_map(|p| std::iter::once(p.exterior()).chain(p.interiors()))
        .flat_map(|ring| ring.lines())
        .map(|line| {
            let (a, b) = (
                Point::new(line.start.x, line.start.y),
                Point::new(line.end.x, line.end.y),
            );
            let d = b - a;
            let t = ((at - a).dot(&d) / d.norm_squared()).clamp(0.0, 1.0);
            nalgebra::distance(&at, &(a + d * t))
        })
        .fold(f64::INFINITY, f64::min)
}

pub fn turns(a: Point, b: Point, c: Point) -> f64 {
    (b - a).perp(&(c - a))
}

/// Pairs of segments of different lines, or not neighbours on one, that meet.
pub fn crossings(lines: &[ContourLine]) -> usize {
    let segments: Vec<(usize, usize, usize, Point, Point)> = lines
        .iter()
        .enumerate()
        .flat_map(|(number, line)| {
            let count = line.points.len() - 1;
            line.points
                .windows(2)
                .enumerate()
                .map(move |(i, pair)| (number, i, count, pair[0], pair[1]))
        })
        .collect();
    let mut order: Vec<usize> = (0..segments.len()).collect();
    let low = |i: usize| segments[i].3.x.min(segments[i].4.x);
    let high = |i: usize| segments[i].3.x.max(segments[i].4.x);
    order.sort_by(|&a, &b| low(a).total_cmp(&low(b)));
    let mut active: Vec<usize> = Vec::new();
    let mut found = 0;
    for &i in &order {
        active.retain(|&j| high(j) >= low(i));
        for &j in &active {
            let (n, a, count, p, q) = segments[i];
            let (m, b, _, r, s) = segments[j];
            let neighbours = n == m && (a.abs_diff(b) <= 1 || a.abs_diff(b) == count - 1);
            // Of segments in one line, one above the other, no turn tells.
            let apart = p.y.max(q.y) < r.y.min(s.y) || r.y.max(s.y) < p.y.min(q.y);
            if !neighbours
                && !apart
                && turns(p, q, r) * turns(p, q, s) <= 0.0
                && turns(r, s, p) * turns(r, s, q) <= 0.0
            {
                found += 1;
            }
        }
        active.push(i);
    }
    found
}

/// Everything that is promised of lines and bands of a continuous field.
pub fn check(region: &Region, drawn: &Drawn, formula: impl Fn(Point) -> f64) {
    check_shape(region, drawn);
    for line in &drawn.lines {
        for &point in &line.points {
            let miss = (formula(point) - line.level).abs();
            let level = line.level;
            assert!(miss <= VERTEX_TOLERANCE_M, "{miss} at {point} of {level}");
        }
    }
    for band in &drawn.bands {
        let (low, high) = (band.from - VERTEX_TOLERANCE_M, band.to + VERTEX_TOLERANCE_M);
        let rings = band
            .polygons
            .iter()
            .flat_map(|p| std::iter::once(p.exterior()).chain(p.interiors()));
        for coordinate in rings.flat_map(|ring| ring.coords()) {
            let value = formula(Point::new(coordinate.x, coordinate.y));
            assert!((low..=high).contains(&value), "{value} in {low} to {high}");
        }
    }
}

/// What is promised of the shape of lines and bands, whatever the field.
pub fn check_shape(region: &Region, drawn: &Drawn) {
    let scale = (region.extent.max - region.extent.min).norm();
    for line in &drawn.lines {
        let (first, last) = (line.points[0], *line.points.last().unwrap());
        if line.closed {
            assert_eq!(first, last);
            continue;
        }
        for end in [first, last] {
            let away = distance_to_outline(region, end);
            assert!(away <= 1e-9 * scale, "{away} at {end} of {}", line.level);
        }
    }
    assert_eq!(crossings(&drawn.lines), 0);
    let areas = drawn.bands.iter().map(|band| band.polygons.unsigned_area());
    let area: f64 = areas.sum();
    approx::assert_relative_eq!(area, region.polygons.unsigned_area(), max_relative = 1e-9);
    for band in &drawn.bands {
        assert!(band.from <= band.to);
        for polygon in &band.polygons {
            polygon.check_validation().unwrap();
            assert!(polygon.exterior().is_ccw());
            assert!(polygon.interiors().iter().all(|hole| hole.is_cw()));
        }
    }
}
