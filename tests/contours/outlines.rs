//! Regions of every kind, and wells where they are least welcome.

use std::f64::consts::PI;

use geo::{MultiPolygon, Polygon};
use mirrorwell::contours::{Bump, MeshError, mesh};
use mirrorwell::site::Point;

use crate::support::{
    Formula, beside_river, bump, check, check_shape, circle, draw, rectangle, region, ring, thiem,
};

#[test]
fn a_round_lake_of_720_sides_holds_its_contours() {
    let well = bump(31.0, -12.0, 0.2);
    let formula = thiem(&[(well, 4.0)]);
    let region = region(&circle(0.0, 0.0, 200.0, 720), &[], 10.0);
    let drawn = draw(&region, &[well], &Formula(formula.clone()), None);
    assert!(drawn.lines.iter().any(|line| !line.closed));
    check(&region, &drawn, formula);
}

#[test]
fn nonconvex_regions_and_regions_with_holes_hold_their_contours() {
    let well = bump(41.0, 22.0, 0.2);
    let formula = thiem(&[(well, 4.0)]);
    let horseshoe = [
        (0.0, 0.0),
        (300.0, 0.0),
        (300.0, 200.0),
        (200.0, 203.0),
        (190.0, 60.0),
        (110.0, 61.0),
        (100.0, 200.0),
        (1.0, 180.0),
    ];
    let thorn = [
        (0.0, 0.0),
        (300.0, 0.0),
        (90.0, 40.0),
        (95.0, 300.0),
        (60.0, 40.0),
    ];
    let holes = [circle(100.0, 30.0, 20.0, 90), circle(150.0, 40.0, 3.0, 12)];
    let cases = [
        (&horseshoe[..], &holes[..]),
        (&horseshoe, &[]),
        (&thorn, &[]),
    ];
    for (outer, holes) in cases {
        for spacing_m in [7.0, 60.0, 1000.0] {
            let region = region(outer, holes, spacing_m);
            let drawn = draw(&region, &[well], &Formula(formula.clone()), None);
            assert!(!drawn.lines.is_empty());
            check(&region, &drawn, &formula);
        }
    }
}

#[test]
fn a_wedge_of_ten_degrees_holds_its_contours() {
    let (sin, cos) = 10f64.to_radians().sin_cos();
    let outer = [(0.0, 0.0), (400.0, 0.0), (400.0 * cos, 400.0 * sin)];
    let region = region(&outer, &[], 10.0);
    let well = bump(150.0, 10.0, 0.1);
    let formula = thiem(&[(well, 4.0)]);
    let drawn = draw(&region, &[well], &Formula(formula.clone()), None);
    check(&region, &drawn, formula);
}

#[test]
fn a_hole_that_touches_the_outer_ring_leaves_valid_bands() {
    let well = bump(70.0, 50.0, 0.1);
    let formula = thiem(&[(well, 4.0)]);
    let square = [(0.0, 0.0), (100.0, 0.0), (100.0, 100.0), (0.0, 100.0)];
    // One touches at a vertex, one in the middle of a side.
    let at_corner = vec![(0.0, 0.0), (40.0, 20.0), (20.0, 40.0)];
    let at_side = vec![(50.0, 100.0), (60.0, 80.0), (40.0, 80.0)];
    let region = region(&square, &[at_corner, at_side], 9.0);
    let drawn = draw(&region, &[well], &Formula(formula.clone()), None);
    check(&region, &drawn, formula);
}

#[test]
fn parts_that_touch_in_a_point_or_share_a_side_are_tiled() {
    let mut region = rectangle(0.0, 0.0, 100.0, 100.0, 9.0);
    let square = |x: f64, y: f64| {
        let corners = [(x, y), (x + 50.0, y), (x + 50.0, y + 50.0), (x, y + 50.0)];
        Polygon::new(ring(&corners), vec![])
    };
    let well = bump(30.0, 20.0, 0.1);
    let formula = thiem(&[(well, 4.0)]);
    for polygons in [
        vec![square(0.0, 0.0), square(50.0, 50.0)],
        vec![square(0.0, 0.0), square(50.0, 0.0)],
    ] {
        region.polygons = MultiPolygon(polygons);
        let drawn = draw(&region, &[well], &Formula(formula.clone()), None);
        check_shape(&region, &drawn);
    }
}

#[test]
fn wells_near_edges_corners_and_each_other_are_drawn() {
    let region = rectangle(0.0, 0.0, 100.0, 100.0, 10.0);
    let places: [&[(f64, f64)]; 11] = [
        &[(1e-3, 50.0)],
        &[(1e-9, 50.0)],
        &[(0.0, 50.0)],
        &[(0.0, 0.0)],
        &[(50.0, 50.0), (50.0, 50.0)],
        &[(50.0, 50.0), (50.0 + 1e-9, 50.0)],
        &[(50.0, 50.0), (50.3, 50.0), (50.0, 50.31)],
        &[(50.0, 50.0), (53.0, 50.0)],
        &[(10.0, 10.0), (20.0, 10.0), (15.0, 10.0)],
        &[(-3.0, 50.0)],
        &[(99.95, 99.9)],
    ];
    for places in places {
        let wells = places.iter().map(|&(x, y)| (bump(x, y, 0.2), 4.0));
        let wells: Vec<(Bump, f64)> = wells.collect();
        let bumps: Vec<Bump> = wells.iter().map(|well| well.0).collect();
        let formula = thiem(&wells);
        let drawn = draw(&region, &bumps, &Formula(formula.clone()), None);
        check(&region, &drawn, formula);
    }
}

/// The drawdown is zero on the river, so contours pass between well and river.
#[test]
fn a_well_a_hand_from_the_river_has_its_rings_closed() {
    let well = bump(0.5, 50.0, 0.1);
    let formula = beside_river(well, 4.0);
    let region = rectangle(0.0, 0.0, 100.0, 100.0, 10.0);
    let drawn = draw(&region, &[well], &Formula(formula.clone()), None);
    assert!(drawn.lines.len() >= 10 && drawn.lines.iter().all(|line| line.closed));
    check(&region, &drawn, formula);
}

#[test]
fn rims_of_any_size_are_drawn() {
    let region = rectangle(0.0, 0.0, 100.0, 100.0, 10.0);
    for rim_m in [0.0, 1e-6, 0.01, 1.0, 9.0, 40.0] {
        let formula = thiem(&[(bump(52.0, 47.0, f64::max(rim_m, 1e-3)), 4.0)]);
        let well = bump(52.0, 47.0, rim_m);
        let drawn = draw(&region, &[well], &Formula(formula.clone()), None);
        check(&region, &drawn, formula);
    }
}

#[test]
fn a_thousand_wells_are_drawn() {
    let place = |i: i32| {
        let (u, v) = (f64::from(i) * 0.618_034, f64::from(i) * 0.754_877);
        bump(500.0 * u.fract(), 500.0 * v.fract(), 0.1)
    };
    let bumps: Vec<Bump> = (0..1000).map(place).collect();
    let region = rectangle(0.0, 0.0, 500.0, 500.0, 10.0);
    // A cheap field with the same peaks: the cone of the nearest well alone.
    let tree: Vec<Vec<Point>> = (0..2500)
        .map(|cell| {
            let (x, y) = (f64::from(cell % 50) * 10.0, f64::from(cell / 50) * 10.0);
            let near = |p: &Point| (p.x - x).abs() < 40.0 && (p.y - y).abs() < 40.0;
            bumps.iter().map(|b| b.at).filter(near).collect()
        })
        .collect();
    let formula = |p: Point| {
        let index = |v: f64| (v / 10.0).clamp(0.0, 49.0) as usize;
        let near = &tree[index(p.y) * 50 + index(p.x)];
        let squares = near.iter().map(|w| nalgebra::distance_squared(w, &p));
        -0.5 * squares.fold(400.0, f64::min).max(0.01).ln()
    };
    let levels = [-1.0, 0.0, 1.0, 2.0];
    let drawn = draw(&region, &bumps, &Formula(formula), Some(&levels));
    let rings = drawn.lines.iter().filter(|line| line.level == 2.0);
    assert!(rings.count() >= 990);
    check(&region, &drawn, formula);
}

#[test]
fn large_coordinates_keep_their_contours() {
    let (x, y) = (412_345.678, 5_361_020.123);
    let well = bump(x + 47.0, y + 55.0, 0.1);
    let formula = thiem(&[(well, 4.0)]);
    let region = rectangle(x, y, x + 100.0, y + 100.0, 9.0);
    let drawn = draw(&region, &[well], &Formula(formula.clone()), None);
    check(&region, &drawn, formula);
}

#[test]
fn an_empty_region_has_neither_lines_nor_bands() {
    let mut region = rectangle(0.0, 0.0, 100.0, 100.0, 9.0);
    region.polygons = MultiPolygon(vec![]);
    let well = [bump(50.0, 50.0, 0.1)];
    let drawn = draw(&region, &well, &Formula(|p: Point| p.x), Some(&[50.0]));
    assert!(drawn.lines.is_empty() && drawn.bands.is_empty());
}

#[test]
fn unusable_regions_are_refused() {
    let good = rectangle(0.0, 0.0, 100.0, 100.0, 10.0);
    let mut bad = good.clone();
    for spacing_m in [0.0, -1.0, f64::NAN, f64::INFINITY] {
        bad.spacing_m = spacing_m;
        assert!(matches!(mesh(&bad, &[]), Err(MeshError::Spacing { .. })));
    }
    bad.spacing_m = 1e-4;
    let Err(MeshError::TooFine { workable_m, .. }) = mesh(&bad, &[]) else {
        panic!("a grid of 1e12 nodes")
    };
    assert!((1e-4..0.3).contains(&workable_m));
    for east in [0.0, f64::NAN] {
        bad = good.clone();
        bad.extent.max.x = east;
        assert!(matches!(mesh(&bad, &[]), Err(MeshError::Extent { .. })));
    }
    for x in [f64::NAN, f64::INFINITY, 1e300] {
        let corners = ring(&[(0.0, 0.0), (x, 0.0), (50.0, 50.0)]);
        bad = good.clone();
        bad.polygons = MultiPolygon(vec![Polygon::new(corners, vec![])]);
        assert!(matches!(mesh(&bad, &[]), Err(MeshError::Coordinate { .. })));
    }
    bad.polygons = region(&[(0.0, 0.0), (900.0, 0.0), (0.0, 90.0)], &[], 1.0).polygons;
    assert!(matches!(mesh(&bad, &[]), Err(MeshError::OutsideMap { .. })));
    let crowd = vec![bump(50.0, 50.0, 0.1); 100_000];
    let crowded = mesh(&good, &crowd);
    assert!(matches!(crowded, Err(MeshError::TooManyWells { .. })));
    let bow = [(0.0, 0.0), (90.0, 80.0), (100.0, 0.0), (0.0, 100.0)];
    let crossed = mesh(&region(&bow, &[], 10.0), &[]);
    assert!(matches!(crossed, Err(MeshError::OutlineCrosses { .. })));
    for at in [Point::new(f64::NAN, 1.0), Point::new(1e300, 1.0)] {
        let rim_m = f64::NAN;
        assert!(mesh(&good, &[Bump { at, rim_m }]).is_ok());
    }
}

#[test]
fn a_region_smaller_or_larger_than_the_map_is_drawn() {
    let mut region = rectangle(0.0, 0.0, 100.0, 100.0, 10.0);
    let well = bump(31.0, 32.0, 0.1);
    let formula = thiem(&[(well, 2.0 * PI)]);
    for (x, y, radius) in [(31.0, 32.0, 3.0), (34.0, 30.0, 0.01), (50.0, 50.0, 120.0)] {
        let round = Polygon::new(ring(&circle(x, y, radius, 60)), vec![]);
        region.polygons = MultiPolygon(vec![round]);
        let drawn = draw(&region, &[well], &Formula(formula.clone()), None);
        check(&region, &drawn, &formula);
    }
}
