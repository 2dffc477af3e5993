//! Each named shape is found from the lines that draw it.

use std::f64::consts::{FRAC_PI_4, TAU};

use approx::assert_relative_eq;
use mirrorwell::outline::{Axis, Kind, Shape, find};
use mirrorwell::site::{Anisotropy, Length, Point};

use crate::plans::{With, only, site};

const RIVER: Kind = Kind::FixedHead;
const BARRIER: Kind = Kind::NoFlow;

#[test]
fn a_plan_without_edges_is_an_open_plane() {
    let plan = site(&[(10.0, 20.0), (300.0, 40.0)]).neighbour("Lot 1", (5.0, 5.0));
    let outline = only(&plan);
    assert_eq!(outline.shape.name(), "open plane");
    assert_eq!(outline.wells, [0, 1]);
    assert_eq!(outline.neighbours, [0]);
    assert_eq!(outline.words(&plan), "open plane");
    assert!(outline.distance_to_edge_m(Point::origin()).is_infinite());
}

#[test]
fn a_river_bounds_a_half_plane_on_the_side_of_the_well() {
    // River along x = 100, well 60 m east of it.
    let plan = site(&[(160.0, 30.0)]).river("Ostra", &[(100.0, -50.0), (100.0, 80.0)]);
    let outline = only(&plan);
    let Shape::Axes {
        x: Axis::OneEdge(RIVER),
        y: Axis::Open,
    } = outline.shape
    else {
        panic!("{:?}", outline.shape);
    };
    assert_relative_eq!(outline.frame.to_canonical(Point::new(160.0, 30.0)).re, 60.0);
    assert_eq!(outline.distance_to_edge_m(Point::new(160.0, 1e4)), 60.0);
    assert!(outline.holds(Point::new(101.0, -4e3)));
    assert!(!outline.holds(Point::new(99.0, 0.0)));
    let piece = &outline.sides[0][0];
    assert_eq!(outline.sides[0].len(), 1);
    assert_eq!(piece.along, f64::NEG_INFINITY..f64::INFINITY);
    assert_eq!((piece.stage_m, piece.stage_slope), (61.0, 0.0));
    assert_eq!(
        outline.words(&plan),
        "half-plane beside river Ostra (fixed head)"
    );
}

#[test]
fn wells_on_both_banks_are_two_aquifers_in_order_of_their_first_wells() {
    let plan = site(&[(50.0, 0.0), (-50.0, 0.0), (70.0, 10.0)])
        .river("Ostra", &[(0.0, -50.0), (0.0, 80.0)]);
    let outlines = find(&plan).expect("two half-planes");
    assert_eq!(outlines.len(), 2);
    assert_eq!(outlines[0].wells, [0, 2]);
    assert_eq!(outlines[1].wells, [1]);
    for outline in &outlines {
        for well in &outline.wells {
            assert!(outline.frame.to_canonical(plan.wells[*well].at).re > 0.0);
        }
    }
}

#[test]
fn two_rivers_end_to_end_on_one_line_are_a_half_plane_with_two_pieces() {
    // They meet at (0, 40); the well, at y = 10, is the origin along the side.
    let plan = site(&[(50.0, 10.0)])
        .river("Upper", &[(0.0, 200.0), (0.0, 40.0)])
        .river("Lower", &[(0.0, 40.0), (0.0, -300.0)]);
    let outline = only(&plan);
    assert_eq!(outline.shape.name(), "half-plane");
    let side = &outline.sides[0];
    assert_eq!(side.len(), 2);
    assert_eq!(side[0].edge, 1);
    assert_eq!(side[1].edge, 0);
    assert_relative_eq!(side[0].along.end, 30.0);
    assert_eq!(side[0].along.end, side[1].along.start);
    assert_eq!(outline.side_name(&plan, 0), "river Lower and river Upper");
}

#[test]
fn a_gap_between_collinear_rivers_is_shared_half_and_half() {
    let plan = site(&[(50.0, 0.0)])
        .river("Upper", &[(0.0, 200.0), (0.0, 40.0)])
        .river("Lower", &[(0.0, -40.0), (0.0, -300.0)]);
    let side = &only(&plan).sides[0];
    assert_eq!(side.len(), 2);
    assert_relative_eq!(side[0].along.end, 0.0, epsilon = 1e-9);
}

#[test]
fn a_river_and_a_barrier_side_by_side_are_a_strip() {
    let plan = site(&[(500.0, 10.0)])
        .river("Ostra", &[(0.0, 0.0), (0.0, 700.0)])
        .barrier("granite edge", &[(1240.0, -100.0), (1240.0, 400.0)]);
    let outline = only(&plan);
    let Shape::Axes {
        x: Axis::TwoEdges { width_m, kinds },
        y: Axis::Open,
    } = outline.shape
    else {
        panic!("{:?}", outline.shape);
    };
    assert_relative_eq!(width_m, 1240.0, max_relative = 1e-12);
    assert_eq!(kinds, [RIVER, BARRIER]);
    assert_eq!(
        outline.words(&plan),
        "strip 1,240 m wide between river Ostra (fixed head) and barrier granite edge (no flow)"
    );
}

#[test]
fn two_square_lines_are_a_quarter_plane_with_kinds_in_place() {
    // Aquifer x > 0, y > 0; the corner comes from carrying both ends on.
    let plan = site(&[(50.0, 80.0)])
        .river("Ostra", &[(0.0, 100.0), (0.0, 300.0)])
        .barrier("granite edge", &[(40.0, 0.0), (500.0, 0.0)]);
    let outline = only(&plan);
    assert_eq!(
        outline.shape,
        Shape::Axes {
            x: Axis::OneEdge(RIVER),
            y: Axis::OneEdge(BARRIER)
        }
    );
    let z = outline.frame.to_canonical(Point::new(50.0, 80.0));
    assert_relative_eq!(z.re, 50.0, max_relative = 1e-12);
    assert_relative_eq!(z.im, 80.0, max_relative = 1e-12);
    assert_eq!(outline.sides[0][0].edge, 0);
    assert_eq!(outline.sides[1][0].edge, 1);
    assert_eq!(outline.sides[1][0].along, 0.0..f64::INFINITY);
}

#[test]
fn three_lines_are_a_half_strip_with_its_base_on_y() {
    let plan = site(&[(50.0, 80.0)])
        .barrier("west", &[(0.0, 100.0), (0.0, 300.0)])
        .river("base", &[(40.0, 0.0), (120.0, 0.0)])
        .river("east", &[(160.0, 90.0), (160.0, 300.0)]);
    let outline = only(&plan);
    let Shape::Axes {
        x: Axis::TwoEdges { width_m, kinds },
        y: Axis::OneEdge(RIVER),
    } = outline.shape
    else {
        panic!("{:?}", outline.shape);
    };
    assert_relative_eq!(width_m, 160.0, max_relative = 1e-12);
    assert_eq!(kinds, [BARRIER, RIVER]);
    let z = outline.frame.to_canonical(Point::new(50.0, 80.0));
    assert_relative_eq!(z.re, 50.0, max_relative = 1e-12);
    assert_relative_eq!(z.im, 80.0, max_relative = 1e-12);
    let edges: Vec<usize> = outline.sides.iter().map(|side| side[0].edge).collect();
    assert_eq!(edges, [0, 2, 1]);
    assert_relative_eq!(outline.sides[2][0].along.end, 160.0, max_relative = 1e-12);
}

#[test]
fn four_sides_are_a_box_with_x_across_the_shorter_width() {
    // 300 m east, 200 m north, as one ring of barrier but for a river south.
    let plan = site(&[(100.0, 50.0)])
        .river("south", &[(0.0, 0.0), (300.0, 0.0)])
        .barrier(
            "rim",
            &[(300.0, 0.0), (300.0, 200.0), (0.0, 200.0), (0.0, 0.0)],
        );
    let outline = only(&plan);
    let Shape::Axes {
        x: Axis::TwoEdges {
            width_m: width,
            kinds: across_x,
        },
        y: Axis::TwoEdges {
            width_m: height,
            kinds: across_y,
        },
    } = outline.shape
    else {
        panic!("{:?}", outline.shape);
    };
    assert_relative_eq!(width, 200.0, max_relative = 1e-12);
    assert_relative_eq!(height, 300.0, max_relative = 1e-12);
    assert_eq!(across_x, [RIVER, BARRIER]);
    assert_eq!(across_y, [BARRIER, BARRIER]);
    assert!(
        outline
            .words(&plan)
            .starts_with("box 200 m by 300 m within river south")
    );
}

#[test]
fn a_closed_ring_of_one_river_is_a_box_of_four_sides() {
    let ring = [
        (0.0, 0.0),
        (100.0, 0.0),
        (100.0, 100.0),
        (0.0, 100.0),
        (0.0, 0.0),
    ];
    let outline = only(&site(&[(10.0, 20.0)]).river("moat", &ring));
    assert_eq!(outline.shape.name(), "box");
    assert!(
        outline
            .sides
            .iter()
            .all(|side| side.len() == 1 && side[0].edge == 0)
    );
}

#[test]
fn two_oblique_lines_are_a_wedge_of_exactly_their_angle() {
    // From the river, along +x, to the barrier at 45°.
    let plan = site(&[(100.0, 40.0)])
        .river("Ostra", &[(0.0, 0.0), (300.0, 0.0)])
        .barrier("granite edge", &[(0.0, 0.0), (200.0, 200.0)]);
    let outline = only(&plan);
    let Shape::Wedge { angle_rad, kinds } = outline.shape else {
        panic!("{:?}", outline.shape);
    };
    assert_relative_eq!(angle_rad, FRAC_PI_4, max_relative = 1e-14);
    assert_eq!(kinds, [RIVER, BARRIER]);
    assert_eq!(
        outline.words(&plan),
        "wedge of 45.0° between river Ostra (fixed head) and barrier granite edge (no flow)"
    );
    // Seen from the other side the wedge is reflex: 315°, barrier first.
    let mut outside = plan.clone();
    outside.wells[0].at = Point::new(-100.0, 30.0);
    let Shape::Wedge { angle_rad, kinds } = only(&outside).shape else {
        panic!("no wedge");
    };
    assert_relative_eq!(angle_rad, TAU - FRAC_PI_4, max_relative = 1e-14);
    assert_eq!(kinds, [BARRIER, RIVER]);
}

#[test]
fn a_bent_river_is_a_wedge_with_one_edge_on_both_sides() {
    let plan = site(&[(100.0, 40.0)]).river("Ostra", &[(0.0, 300.0), (0.0, 0.0), (300.0, -40.0)]);
    let outline = only(&plan);
    let Shape::Wedge { angle_rad, .. } = outline.shape else {
        panic!("{:?}", outline.shape);
    };
    // 90° and the fall of 40 in 300.
    let expected = std::f64::consts::FRAC_PI_2 + (40.0_f64 / 300.0).atan();
    assert_relative_eq!(angle_rad, expected, max_relative = 1e-14);
    assert_eq!(outline.sides[0][0].edge, 0);
    assert_eq!(outline.sides[1][0].edge, 0);
}

#[test]
fn rivers_a_little_off_parallel_are_a_wedge_with_a_far_apex() {
    // 0.4° apart, 500 m at the foot: the apex lies 500/tan 0.4° = 71.6 km off.
    let turn = 0.4_f64.to_radians();
    let far = (500.0 + 1000.0 * turn.sin(), 1000.0 * turn.cos());
    let plan = site(&[(200.0, 100.0)])
        .river("Ostra", &[(0.0, 0.0), (0.0, 1000.0)])
        .river("Velm", &[(500.0, 0.0), far]);
    let outline = only(&plan);
    let Shape::Wedge { angle_rad, .. } = outline.shape else {
        panic!("{:?}", outline.shape);
    };
    assert_relative_eq!(angle_rad, turn, max_relative = 1e-11);
    assert!(outline.words(&plan).contains("wedge of 0.40°"));
}

#[test]
fn a_lake_is_seen_from_inside_and_from_outside() {
    let outside = only(&site(&[(500.0, 0.0)]).lake("Round lake", (0.0, 100.0), 350.0));
    assert_eq!(outside.shape, Shape::DiskExterior { radius_m: 350.0 });
    assert_eq!(outside.sides[0][0].along, 0.0..TAU);
    assert!(outside.holds(Point::new(0.0, 500.0)));
    assert!(!outside.holds(Point::new(0.0, 100.0)));
    let inside = only(&site(&[(50.0, 0.0)]).lake("Moat", (0.0, 100.0), 350.0));
    assert_eq!(inside.shape, Shape::Disk { radius_m: 350.0 });
    assert_relative_eq!(inside.distance_to_edge_m(Point::new(0.0, 0.0)), 250.0);
}

#[test]
fn a_well_between_a_circle_and_its_chords_lies_inside() {
    // Chords of 2° have a sagitta of 350 (1 − cos 1°) = 53 mm: 30 mm inside
    // the circle at the middle of a chord, beyond a rim of 10 mm.
    let turn = 1.0_f64.to_radians();
    let radius = 350.0 - 0.03;
    let mut plan = site(&[(radius * turn.cos(), radius * turn.sin())]);
    plan.wells[0].radius = mirrorwell::site::Length::from_si(0.01);
    let outline = only(&plan.lake("Moat", (0.0, 0.0), 350.0));
    assert_eq!(outline.shape.name(), "disk");
}

#[test]
fn edges_of_another_face_do_not_matter() {
    // A lake and a bent barrier beyond the river.
    let plan = site(&[(50.0, 0.0)])
        .river("Ostra", &[(0.0, -50.0), (0.0, 80.0)])
        .lake("Round lake", (-400.0, 0.0), 100.0)
        .barrier("hook", &[(-700.0, 0.0), (-700.0, 50.0), (-900.0, 80.0)]);
    assert_eq!(only(&plan).shape.name(), "half-plane");
}

#[test]
fn an_anisotropic_strip_is_wider_where_conductivity_is_smaller() {
    // Ratio 16 with the largest along north: x is stretched by 16^(1/4) = 2.
    let mut plan = site(&[(40.0, 10.0)])
        .river("west", &[(0.0, 0.0), (0.0, 700.0)])
        .river("east", &[(100.0, 0.0), (100.0, 400.0)]);
    plan.aquifer.anisotropy = Some(Anisotropy {
        ratio: 16.0,
        azimuth_deg: 0.0,
    });
    let outline = only(&plan);
    let Shape::Axes {
        x: Axis::TwoEdges { width_m, .. },
        ..
    } = outline.shape
    else {
        panic!("{:?}", outline.shape);
    };
    assert_relative_eq!(width_m, 200.0, max_relative = 1e-12);
    assert_relative_eq!(
        outline.distance_to_edge_m(Point::new(30.0, 9.0)),
        30.0,
        max_relative = 1e-12
    );
}

#[test]
fn a_stage_that_falls_evenly_is_linear_along_a_half_plane() {
    // 1 m in 500 m northward falls; the well at y = 250 is position zero.
    let line = [(0.0, 0.0), (0.0, 250.0), (0.0, 500.0)];
    let plan = site(&[(50.0, 250.0)]).falling_river("Ostra", &line, &[61.0, 60.5, 60.0]);
    let outline = only(&plan);
    let piece = &outline.sides[0][0];
    assert_relative_eq!(piece.stage_m, 60.5, max_relative = 1e-12);
    // Canonical y runs along the edge with the aquifer (east) to its right: north.
    assert_relative_eq!(piece.stage_slope, -0.002, max_relative = 1e-12);
    let at = outline.frame.to_canonical(Point::new(0.0, 500.0));
    assert_relative_eq!(
        piece.stage_m + piece.stage_slope * at.im,
        60.0,
        max_relative = 1e-12
    );
}

#[test]
fn rivers_of_one_line_that_fall_alike_are_a_half_plane() {
    let plan = site(&[(50.0, 250.0)])
        .falling_river("Ostra", &[(0.0, 0.0), (0.0, 500.0)], &[61.0, 60.5])
        .falling_river("Weir pool", &[(0.0, 500.0), (0.0, 900.0)], &[60.2, 59.8]);
    let outline = only(&plan);
    assert_eq!(outline.shape.name(), "half-plane");
    for (piece, stage_m) in outline.sides[0].iter().zip([60.75, 60.45]) {
        assert_relative_eq!(piece.stage_m, stage_m, max_relative = 1e-12);
        assert_relative_eq!(piece.stage_slope, -0.001, max_relative = 1e-12);
    }
}

#[test]
fn a_river_clogged_alike_all_along_is_a_half_plane_with_a_skin() {
    // T = 500 m²/d over 20 m: K = 25 m/d; c = 2 d: a skin of 50 m.
    let mut plan = site(&[(50.0, 0.0)])
        .river("Ostra", &[(0.0, 0.0), (0.0, 9.0)])
        .river("Lower Ostra", &[(0.0, -9.0), (0.0, 0.0)])
        .clogged("Ostra", 2.0)
        .clogged("Lower Ostra", 2.0);
    plan.aquifer.thickness = Some(Length::from_si(20.0));
    let outline = only(&plan);
    assert_eq!(outline.shape, Shape::CloggedHalfPlane { skin_m: 50.0 });
    assert_eq!(outline.side_kinds(), [Kind::FixedHead]);
    assert_eq!(
        outline.words(&plan),
        "half-plane beside river Lower Ostra and river Ostra (clogged bank)"
    );
    // No resistance is no skin.
    let clean = plan.clogged("Ostra", 0.0).clogged("Lower Ostra", 0.0);
    assert_eq!(only(&clean).shape.name(), "half-plane");
}

#[test]
fn rivers_count_as_parallel_while_straightening_moves_them_by_less_than_a_millimetre() {
    // The plan's extent is the box of 1000 m by 1200 m around everything.
    let extent = 1000.0_f64.hypot(1200.0);
    let plan = |shift: f64| {
        site(&[(500.0, 100.0)])
            .river("Ostra", &[(0.0, 0.0), (0.0, 1200.0)])
            .river("Velm", &[(1000.0, 0.0), (1000.0 - shift, 1200.0)])
    };
    let just = 1200.0 * 1e-3 / extent;
    assert_eq!(only(&plan(0.99 * just)).shape.name(), "strip");
    assert_eq!(only(&plan(1.01 * just)).shape.name(), "wedge");
}
