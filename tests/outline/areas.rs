//! The part of an outline within a map's rectangle.

use std::f64::consts::PI;

use approx::assert_relative_eq;
use geo::{Area, Validation};
use mirrorwell::outline::{Kind, Piece, Shape};
use mirrorwell::site::{Extent, Point, Site};

use crate::plans::{With, only, site};

fn rectangle(min: (f64, f64), max: (f64, f64)) -> Extent {
    Extent {
        min: Point::new(min.0, min.1),
        max: Point::new(max.0, max.1),
    }
}

/// Area of the aquifer within a rectangle; its polygons are checked to be valid.
fn area(plan: &Site, extent: Extent) -> f64 {
    let clipped = only(plan).clip(extent);
    assert!(clipped.is_valid(), "{clipped:?}");
    clipped.unsigned_area()
}

#[test]
fn the_open_plane_fills_the_rectangle() {
    let extent = rectangle((-10.0, -20.0), (30.0, 40.0));
    assert_eq!(area(&site(&[(0.0, 0.0)]), extent), 2400.0);
}

#[test]
fn a_diagonal_half_plane_fills_half_of_a_square() {
    let plan = site(&[(30.0, 0.0)]).river("Ostra", &[(0.0, 0.0), (1.0, 1.0)]);
    let square = rectangle((-50.0, -50.0), (50.0, 50.0));
    assert_relative_eq!(area(&plan, square), 5000.0, max_relative = 1e-12);
    let beyond = rectangle((-50.0, 60.0), (50.0, 160.0));
    assert_eq!(area(&plan, beyond), 0.0);
}

#[test]
fn a_strip_fills_its_width() {
    let plan = site(&[(30.0, 0.0)])
        .river("west", &[(0.0, 0.0), (0.0, 1.0)])
        .barrier("east", &[(70.0, 0.0), (70.0, 1.0)]);
    let extent = rectangle((-500.0, -200.0), (500.0, 300.0));
    assert_relative_eq!(area(&plan, extent), 35_000.0, max_relative = 1e-12);
}

#[test]
fn a_wedge_and_the_reflex_wedge_behind_it_fill_the_square_together() {
    let wedge = |at| {
        site(&[at])
            .river("Ostra", &[(0.0, 0.0), (300.0, 0.0)])
            .barrier("granite edge", &[(0.0, 0.0), (200.0, 200.0)])
    };
    let (inside, outside) = (wedge((100.0, 40.0)), wedge((-100.0, 40.0)));
    // Apex at the centre: an eighth of the square.
    let square = rectangle((-50.0, -50.0), (50.0, 50.0));
    assert_relative_eq!(area(&inside, square), 1250.0, max_relative = 1e-12);
    assert_relative_eq!(area(&outside, square), 8750.0, max_relative = 1e-12);
    // Apex outside: the reflex wedge falls into two parts, x from 10 to 60:
    // below y = 0, and above y = x up to 100.
    let beside = rectangle((10.0, -20.0), (60.0, 100.0));
    let below = 50.0 * 20.0;
    let above = 50.0 * 100.0 - (60.0 * 60.0 - 10.0 * 10.0) / 2.0;
    assert_relative_eq!(area(&outside, beside), below + above, max_relative = 1e-12);
    assert_relative_eq!(
        area(&inside, beside),
        6000.0 - below - above,
        max_relative = 1e-12
    );
    assert_eq!(only(&outside).clip(beside).0.len(), 2);
    let within = rectangle((50.0, 5.0), (60.0, 6.0));
    assert_eq!(area(&outside, within), 0.0);
    assert_eq!(area(&inside, within), 10.0);
}

#[test]
fn a_lake_is_cut_out_with_chords_no_coarser_than_half_a_millimetre() {
    let lake = |at| site(&[at]).lake("Round lake", (0.0, 0.0), 100.0);
    let (outside, inside) = (lake((300.0, 0.0)), lake((5.0, 5.0)));
    // A chord of sagitta s cuts off 2/3 of chord · s: a share of the disk below
    // (4/3) s/r = 7e-6.
    let disk = PI * 1e4;
    let around = rectangle((-150.0, -120.0), (150.0, 120.0));
    assert_relative_eq!(area(&inside, around), disk, max_relative = 7e-6);
    assert_relative_eq!(area(&outside, around), 72_000.0 - disk, max_relative = 7e-6);
    // A quarter of it.
    let quarter = rectangle((0.0, 0.0), (200.0, 150.0));
    assert_relative_eq!(area(&inside, quarter), disk / 4.0, max_relative = 7e-6);
    assert_relative_eq!(
        area(&outside, quarter),
        30_000.0 - disk / 4.0,
        max_relative = 7e-6
    );
    // A band across it: four arcs, of which two lie in the band.
    let band = rectangle((-200.0, -60.0), (200.0, 60.0));
    let half = 0.6_f64.asin();
    let slice = 2.0 * 1e4 * (half + half.sin() * half.cos());
    assert_relative_eq!(area(&inside, band), slice, max_relative = 7e-6);
    assert_relative_eq!(area(&outside, band), 48_000.0 - slice, max_relative = 2e-5);
    assert_eq!(only(&outside).clip(band).0.len(), 2);
    assert_eq!(area(&inside, rectangle((-1.0, -1.0), (1.0, 1.0))), 4.0);
    assert_eq!(area(&outside, rectangle((-1.0, -1.0), (1.0, 1.0))), 0.0);
    for point in only(&inside).clip(around).0[0].exterior().coords() {
        assert_relative_eq!(point.x.hypot(point.y), 100.0, max_relative = 1e-14);
    }
}

#[test]
fn a_piece_is_drawn_to_the_rim_of_the_map_with_its_extension() {
    let plan = site(&[(50.0, 0.0)])
        .river("Upper", &[(0.0, 200.0), (0.0, 40.0)])
        .river("Lower", &[(0.0, 40.0), (0.0, -30.0)]);
    let outline = only(&plan);
    let map = rectangle((-100.0, -500.0), (100.0, 100.0));
    assert_eq!(
        outline.piece_line(0, 0, map),
        [Point::new(0.0, -500.0), Point::new(0.0, 40.0)]
    );
    assert_eq!(
        outline.piece_line(0, 1, map),
        [Point::new(0.0, 40.0), Point::new(0.0, 100.0)]
    );
    assert!(
        outline
            .piece_line(0, 1, rectangle((5.0, 0.0), (9.0, 9.0)))
            .is_empty()
    );
    assert!(outline.piece_line(0, 7, map).is_empty());
}

#[test]
fn a_lakes_shore_is_drawn_whole_or_in_arcs() {
    let outline = only(&site(&[(300.0, 0.0)]).lake("Round lake", (0.0, 0.0), 100.0));
    let whole = outline.piece_line(0, 0, rectangle((-150.0, -150.0), (150.0, 150.0)));
    assert!((whole[0] - whole[whole.len() - 1]).norm() < 1e-12);
    let arcs = outline.piece_lines(0, 0, rectangle((-200.0, -60.0), (200.0, 60.0)));
    assert_eq!(arcs.len(), 2);
}

#[test]
fn a_plane_slit_by_a_half_line_is_everything_around_its_tip() {
    // No drawn line makes one today: every free end is carried on.
    let mut outline = only(&site(&[(1.0, 1.0)]));
    outline.shape = Shape::Wedge {
        angle_rad: 2.0 * PI,
        kinds: [Kind::FixedHead; 2],
    };
    let bank = Piece {
        edge: 0,
        along: 0.0..f64::INFINITY,
        stage_m: 0.0,
        stage_slope: 0.0,
    };
    outline.sides = vec![vec![bank.clone()], vec![bank]];
    for (x, y) in [(1.0, 1.0), (-1.0, 1.0), (1.0, -1.0), (5.0, 0.0)] {
        assert!(outline.holds(Point::new(x, y)));
    }
    assert_relative_eq!(
        outline.distance_to_edge_m(Point::new(5.0, -2.0)),
        2.0,
        epsilon = 1e-14
    );
    assert_relative_eq!(
        outline.distance_to_edge_m(Point::new(-3.0, 4.0)),
        5.0,
        epsilon = 1e-14
    );
    let square = rectangle((-50.0, -50.0), (50.0, 50.0));
    assert_eq!(outline.clip(square).unsigned_area(), 1e4);
}
