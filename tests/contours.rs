//! Contours of fields in closed form: Thiem cones, an image well, a plane, a
//! saddle. Every expected value is the formula itself, evaluated at the
//! vertices; areas are those of the regions by the shoelace formula, or π r².

use std::f64::consts::PI;

use geo::{Area, Coord, LineString, MultiPolygon, Polygon, Validation, Winding};
use mirrorwell::contours::{
    Band, Bump, ContourLine, Cuts, Mesh, Region, ScalarField, area_below, mesh, round_levels,
    sample,
};
use mirrorwell::site::{Extent, Point};
use proptest::prelude::*;
use rayon::prelude::*;

/// What is promised of every vertex.
const VERTEX_TOLERANCE_M: f64 = 1e-3;

struct Formula<F>(F);

impl<F: Fn(Point) -> f64 + Sync> ScalarField for Formula<F> {
    fn values(&self, points: &[Point]) -> Vec<f64> {
        points.par_iter().map(|&point| (self.0)(point)).collect()
    }
}

/// Thiem (1906): s = Q/(2πT) ln(R/r), the rim kept inside it.
fn thiem(wells: &[(Bump, f64)]) -> impl Fn(Point) -> f64 + Sync + Clone {
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
fn beside_river(well: Bump, strength: f64) -> impl Fn(Point) -> f64 + Sync + Clone {
    move |point| {
        let r2 = nalgebra::distance_squared(&point, &well.at).max(well.rim_m.powi(2));
        strength / (4.0 * PI) * (4.0 * well.at.x * point.x / r2).ln_1p()
    }
}

fn ring(points: &[(f64, f64)]) -> LineString<f64> {
    let mut line: LineString<f64> = points.iter().map(|&(x, y)| Coord { x, y }).collect();
    line.close();
    line
}

fn region(outer: &[(f64, f64)], holes: &[Vec<(f64, f64)>], spacing_m: f64) -> Region {
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

fn rectangle(x0: f64, y0: f64, x1: f64, y1: f64, spacing_m: f64) -> Region {
    region(&[(x0, y0), (x1, y0), (x1, y1), (x0, y1)], &[], spacing_m)
}

fn circle(x: f64, y: f64, radius: f64, corners: usize) -> Vec<(f64, f64)> {
    (0..corners)
        .map(|i| {
            let (sin, cos) = (2.0 * PI * i as f64 / corners as f64).sin_cos();
            (x + radius * cos, y + radius * sin)
        })
        .collect()
}

fn bump(x: f64, y: f64, rim_m: f64) -> Bump {
    Bump {
        at: Point::new(x, y),
        rim_m,
    }
}

struct Drawn {
    mesh: Mesh,
    values: Vec<f64>,
    lines: Vec<ContourLine>,
    bands: Vec<Band>,
}

fn draw(region: &Region, bumps: &[Bump], field: &dyn ScalarField, levels: Option<&[f64]>) -> Drawn {
    let mesh = mesh(region, bumps).unwrap();
    let values = sample(&mesh, field).unwrap();
    let finite = || values.iter().copied().filter(|v| v.is_finite());
    let (min, max) = (
        finite().fold(f64::INFINITY, f64::min),
        finite().fold(f64::NEG_INFINITY, f64::max),
    );
    let levels = match levels {
        Some(levels) => levels.to_vec(),
        None => round_levels(min, max, 1.0, None).unwrap(),
    };
    let cuts = Cuts::refine(&mesh, &values, field, &levels).unwrap();
    let (lines, bands) = (cuts.lines(), cuts.bands());
    Drawn {
        mesh,
        values,
        lines,
        bands,
    }
}

fn distance_to_outline(region: &Region, at: Point) -> f64 {
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

fn turns(a: Point, b: Point, c: Point) -> f64 {
    (b - a).perp(&(c - a))
}

/// Pairs of segments of different lines, or not neighbours on one, that meet.
fn crossings(lines: &[ContourLine]) -> usize {
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
            if !neighbours
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

/// Everything that is promised of lines and bands, whatever the field.
fn check(region: &Region, drawn: &Drawn, formula: impl Fn(Point) -> f64) {
    let scale = (region.extent.max - region.extent.min).norm();
    for line in &drawn.lines {
        for &point in &line.points {
            let miss = (formula(point) - line.level).abs();
            assert!(
                miss <= VERTEX_TOLERANCE_M,
                "{miss} at {point} of {}",
                line.level
            );
        }
        let (first, last) = (line.points[0], *line.points.last().unwrap());
        if line.closed {
            assert_eq!(first, last);
        } else {
            for end in [first, last] {
                assert!(
                    distance_to_outline(region, end) <= 1e-9 * scale,
                    "{end} {}",
                    line.level
                );
            }
        }
    }
    assert_eq!(crossings(&drawn.lines), 0);
    let area: f64 = drawn
        .bands
        .iter()
        .map(|band| band.polygons.unsigned_area())
        .sum();
    approx::assert_relative_eq!(area, region.polygons.unsigned_area(), max_relative = 1e-9);
    for band in &drawn.bands {
        assert!(band.from <= band.to);
        for polygon in &band.polygons {
            polygon.check_validation().unwrap();
            assert!(polygon.exterior().is_ccw());
            assert!(polygon.interiors().iter().all(|hole| hole.is_cw()));
            for coordinate in polygon
                .exterior()
                .coords()
                .chain(polygon.interiors().iter().flat_map(|h| h.coords()))
            {
                let value = formula(Point::new(coordinate.x, coordinate.y));
                let slack = VERTEX_TOLERANCE_M;
                assert!(
                    band.from - slack <= value && value <= band.to + slack,
                    "{value} in {} to {}",
                    band.from,
                    band.to
                );
            }
        }
    }
}

#[test]
fn a_cone_in_a_box_gives_rings_and_lines_that_end_on_the_box() {
    let wells = [(bump(3.0, 4.0, 0.2), 5.0), (bump(-120.0, 60.0, 0.15), 3.0)];
    let formula = thiem(&wells);
    let region = rectangle(-300.0, -200.0, 300.0, 200.0, 10.0);
    let bumps: Vec<Bump> = wells.iter().map(|w| w.0).collect();
    let drawn = draw(&region, &bumps, &Formula(formula.clone()), None);
    assert!((10..=20).contains(&{
        let mut levels: Vec<f64> = drawn.lines.iter().map(|l| l.level).collect();
        levels.dedup();
        levels.len()
    }));
    check(&region, &drawn, formula);
}
