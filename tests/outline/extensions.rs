//! How line ends join and how free ends are carried on.

use approx::assert_relative_eq;
use mirrorwell::outline::{Axis, Shape};

use crate::plans::{With, only, site};

#[test]
fn ends_within_a_millimetre_join() {
    // 0.9 mm apart the ends are one place, that of the first. 100 mm apart both
    // are carried on, to meet 100 · 40/300 = 13.3 mm below Ostra's end.
    let bend = |gap: f64| {
        let plan = site(&[(100.0, 60.0)])
            .river("Ostra", &[(0.0, 300.0), (0.0, 0.0)])
            .river("Velm", &[(gap, 0.0), (300.0 + gap, 40.0)]);
        only(&plan).frame.to_site(num_complex::Complex64::ZERO)
    };
    assert_eq!(bend(0.0009).y, 0.0);
    assert_relative_eq!(bend(0.1).y, -0.1 * 40.0 / 300.0, epsilon = 1e-12);
}

#[test]
fn a_free_end_stops_at_the_first_edge_it_meets() {
    // The barrier comes from the west and stops at the river: the east bank
    // is a whole half-plane, the west bank a quarter-plane.
    let plan = |x: f64| {
        site(&[(x, 50.0)])
            .river("Ostra", &[(0.0, -10.0), (0.0, 10.0)])
            .barrier("dyke", &[(-300.0, 0.0), (-200.0, 0.0)])
    };
    assert_eq!(only(&plan(50.0)).shape.name(), "half-plane");
    assert_eq!(only(&plan(-50.0)).shape.name(), "quarter-plane");
}

#[test]
fn two_extensions_that_meet_both_end_in_a_corner() {
    let plan = site(&[(-50.0, -50.0)])
        .river("Ostra", &[(0.0, 100.0), (0.0, 300.0)])
        .barrier("dyke", &[(40.0, 0.0), (500.0, 0.0)]);
    // Seen from outside the corner: a wedge of 270°, not four quarters.
    let Shape::Wedge { angle_rad, .. } = only(&plan).shape else {
        panic!("no wedge");
    };
    assert_relative_eq!(angle_rad, 1.5 * std::f64::consts::PI, max_relative = 1e-14);
}

#[test]
fn of_several_meetings_the_earlier_ones_stand() {
    // North of the wells, Ostra's end (at y = 100, growing south) would meet
    // the near dyke's extension at y = 0 after 100 m and the far dyke's at
    // y = −50 after 150 m. The near corner stands, the far dyke goes on.
    let plan = site(&[(30.0, 200.0)])
        .river("Ostra", &[(0.0, 100.0), (0.0, 300.0)])
        .barrier("near", &[(40.0, 0.0), (500.0, 0.0)])
        .barrier("far", &[(45.0, -50.0), (500.0, -50.0)]);
    assert_eq!(only(&plan).shape.name(), "quarter-plane");
    let mut below = plan.clone();
    below.wells[0].at = mirrorwell::site::Point::new(0.0, -500.0);
    assert_eq!(only(&below).shape.name(), "half-plane");
}

#[test]
fn a_late_extension_ends_on_one_that_has_stopped_beyond() {
    // "dyke" grows east from x = −10 and stops at Ostra after 10 m. "brook"
    // grows south from y = 300 and reaches dyke's path (x = −5) after 300 m,
    // when it has long stopped: it ends there, and dyke still reaches Ostra.
    let plan = site(&[(-2.0, 100.0)])
        .river("Ostra", &[(0.0, -1000.0), (0.0, 1000.0)])
        .barrier("dyke", &[(-100.0, 0.0), (-10.0, 0.0)])
        .river("brook", &[(-5.0, 400.0), (-5.0, 300.0)]);
    let Shape::Axes {
        x: Axis::TwoEdges { width_m, .. },
        y: Axis::OneEdge(_),
    } = only(&plan).shape
    else {
        panic!("no half-strip");
    };
    assert_relative_eq!(width_m, 5.0, max_relative = 1e-12);
    let mut below = plan.clone();
    below.wells[0].at = mirrorwell::site::Point::new(-50.0, -100.0);
    assert_eq!(only(&below).shape.name(), "quarter-plane");
}

#[test]
fn crossing_lines_make_four_aquifers() {
    let plan = site(&[(50.0, 50.0), (-50.0, 50.0), (-50.0, -50.0), (50.0, -50.0)])
        .river("Ostra", &[(0.0, -10.0), (0.0, 10.0)])
        .barrier("dyke", &[(-10.0, 0.0), (10.0, 0.0)]);
    let outlines = mirrorwell::outline::find(&plan).expect("four quarter-planes");
    assert_eq!(outlines.len(), 4);
    for (index, outline) in outlines.iter().enumerate() {
        assert_eq!(outline.wells, [index]);
        assert_eq!(outline.shape.name(), "quarter-plane");
    }
}

#[test]
fn a_gap_in_a_fence_closes_straight_on() {
    // Two short pieces of each side of a box, none of them reaching a corner.
    let plan = site(&[(50.0, 70.0)])
        .river("south", &[(30.0, 0.0), (60.0, 0.0)])
        .river("east", &[(100.0, 60.0), (100.0, 90.0)])
        .river("north", &[(30.0, 150.0), (60.0, 150.0)])
        .river("west", &[(0.0, 60.0), (0.0, 90.0)]);
    let Shape::Axes {
        x: Axis::TwoEdges { width_m: width, .. },
        y: Axis::TwoEdges {
            width_m: height, ..
        },
    } = only(&plan).shape
    else {
        panic!("no box");
    };
    assert_relative_eq!(width, 100.0, max_relative = 1e-12);
    assert_relative_eq!(height, 150.0, max_relative = 1e-12);
}

#[test]
fn vertices_within_a_millimetre_of_a_straight_run_do_not_bend_it() {
    let river = |bulge: f64| {
        site(&[(50.0, 0.0)]).river("Ostra", &[(0.0, -500.0), (bulge, 0.0), (0.0, 500.0)])
    };
    assert_eq!(only(&river(0.0009)).shape.name(), "half-plane");
    assert_eq!(only(&river(0.002)).shape.name(), "wedge");
}
