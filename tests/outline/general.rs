//! Outlines without a closed form come as boundaries of straight and round
//! sides, the aquifer to the left of each.

use std::f64::consts::{PI, TAU};

use approx::assert_relative_eq;
use geo::{Area, Validation};
use mirrorwell::outline::{
    Boundary, BoundaryChain, BoundarySide, Condition, Curve, Kind, Outline, Shape, find,
    find_unnamed,
};
use mirrorwell::site::{Anisotropy, Extent, Length, Point, Site};
use num_complex::Complex64;

use crate::plans::{With, only, site};

/// The boundary of the only outline of a plan.
fn boundary(plan: &Site) -> (Outline, Boundary) {
    general(only(plan))
}

/// The boundary of the only outline of a plan, closed form or not.
fn unnamed(plan: &Site) -> (Outline, Boundary) {
    general(find_unnamed(plan).expect("an outline").remove(0))
}

fn general(outline: Outline) -> (Outline, Boundary) {
    assert_eq!(outline.shape.name(), "general outline");
    let boundary = outline.boundary.as_deref().cloned().expect("a boundary");
    check(&outline, &boundary);
    (outline, boundary)
}

/// Joints, pieces and orientation of any boundary.
fn check(outline: &Outline, boundary: &Boundary) {
    let mut next = 0;
    for chain in &boundary.chains {
        assert_eq!(chain.sides.start, next);
        next = chain.sides.end;
        check_joints(boundary.sides_of(chain), chain.closed);
    }
    assert_eq!(next, boundary.sides.len());
    assert_eq!(outline.sides.len(), boundary.sides.len());
    for (pieces, side) in outline.sides.iter().zip(&boundary.sides) {
        assert_eq!(pieces.len(), 1);
        let piece = &pieces[0];
        assert_eq!(piece.edge, side.edge);
        assert_eq!(piece.along, side.curve.along());
        assert_eq!(piece.stage_m, side.stage_m[0]);
        if piece.along.end.is_finite() && piece.along.start.is_finite() {
            let end = piece.stage_m + piece.stage_slope * piece.along.end;
            assert!((end - side.stage_m[1]).abs() < 1e-12);
        } else {
            assert_eq!(side.stage_m[0], side.stage_m[1]);
        }
        let middle = match side.curve {
            Curve::RayIn { .. } => -7.0,
            Curve::RayOut { .. } => 7.0,
            _ => 0.5 * piece.along.end,
        };
        let left = side.curve.heading(middle) * Complex64::I * 1e-3;
        let at = side.curve.at(middle);
        assert!(outline.holds(outline.frame.to_site(at)));
        assert!(outline.holds(outline.frame.to_site(at + left)), "{side:?}");
        assert!(!outline.holds(outline.frame.to_site(at - left)), "{side:?}");
    }
}

fn check_joints(sides: &[BoundarySide], closed: bool) {
    for (side, next) in sides.iter().zip(sides.iter().skip(1)) {
        let gap = side.curve.to().expect("an end") - next.curve.from().expect("a beginning");
        assert!(gap.norm() < 1e-9);
    }
    let ends = (sides[0].curve.from(), sides[sides.len() - 1].curve.to());
    match ends {
        (Some(from), Some(to)) => assert!(closed && (from - to).norm() < 1e-9),
        (None, None) => assert!(!closed),
        _ => panic!("half open: {sides:?}"),
    }
}

/// Area that a closed boundary of straight sides and arcs runs around, by the
/// shoelace formula and circular segments.
fn area(boundary: &Boundary) -> f64 {
    let of_side = |side: &BoundarySide| {
        let (from, to) = (side.curve.from().unwrap(), side.curve.to().unwrap());
        let bulge = match side.curve {
            Curve::Arc {
                radius, sweep_rad, ..
            } => radius * radius * (sweep_rad - sweep_rad.sin()),
            _ => 0.0,
        };
        0.5 * ((from.conj() * to).im + bulge)
    };
    boundary.sides.iter().map(of_side).sum()
}

fn extent(min: (f64, f64), max: (f64, f64)) -> Extent {
    Extent {
        min: Point::new(min.0, min.1),
        max: Point::new(max.0, max.1),
    }
}

fn clipped(outline: &Outline, extent: Extent) -> f64 {
    let polygons = outline.clip(extent);
    assert!(polygons.is_valid(), "{polygons:?}");
    polygons.unsigned_area()
}

fn conditions(boundary: &Boundary) -> Vec<Kind> {
    boundary.kinds()
}

const RIVER: Kind = Kind::FixedHead;
const BARRIER: Kind = Kind::NoFlow;

/// An L: 300 by 200 without its north-east 100 by 120. Area 60000 − 12000.
const L_SHAPE: [(f64, f64); 6] = [
    (0.0, 0.0),
    (300.0, 0.0),
    (300.0, 80.0),
    (200.0, 80.0),
    (200.0, 200.0),
    (0.0, 200.0),
];

#[test]
fn a_closed_polygon_of_rivers_and_barriers_keeps_its_area_whatever_way_it_is_drawn() {
    for order in [[0, 1, 2, 3, 4, 5], [3, 5, 1, 0, 2, 4]] {
        for flipped in [false, true] {
            let mut plan = site(&[(50.0, 50.0), (250.0, 20.0)]);
            for index in order {
                let mut ends = [L_SHAPE[index], L_SHAPE[(index + 1) % 6]];
                if flipped {
                    ends.reverse();
                }
                let name = format!("E{index}");
                plan = if index % 2 == 0 {
                    plan.river(&name, &ends)
                } else {
                    plan.barrier(&name, &ends)
                };
            }
            let (outline, boundary) = boundary(&plan);
            assert_eq!(boundary.sides.len(), 6);
            assert_eq!(
                boundary.chains,
                [BoundaryChain {
                    sides: 0..6,
                    closed: true
                }]
            );
            assert_relative_eq!(area(&boundary), 48_000.0, max_relative = 1e-12);
            assert!(boundary.is_bounded() && outline.is_closed());
            assert_eq!(outline.side_kinds(), conditions(&boundary));
            for side in &boundary.sides {
                let river = plan.edges[side.edge].name.trim_start_matches('E');
                let river = river.parse::<usize>().unwrap() % 2 == 0;
                assert_eq!(side.condition == Condition::Head, river);
                let stage = if river { 61.0 } else { 0.0 };
                assert_eq!(side.stage_m, [stage; 2]);
            }
            // The frame is not turned; its origin is the middle of the wells.
            let z = outline.frame.to_canonical(Point::new(151.0, 37.0));
            assert_eq!(z, Complex64::new(1.0, 2.0));
            let all = extent((-50.0, -50.0), (400.0, 300.0));
            assert_relative_eq!(clipped(&outline, all), 48_000.0, max_relative = 1e-12);
            // The rectangle's rim along three of its sides and through a corner.
            let part = extent((0.0, 0.0), (200.0, 80.0));
            assert_relative_eq!(clipped(&outline, part), 16_000.0, max_relative = 1e-12);
            let part = extent((100.0, 80.0), (300.0, 200.0));
            assert_relative_eq!(clipped(&outline, part), 12_000.0, max_relative = 1e-12);
            let part = extent((200.0, 80.0), (300.0, 200.0));
            assert_eq!(clipped(&outline, part), 0.0);
            assert!(outline.words(&plan).starts_with("general outline between "));
        }
    }
}

#[test]
fn distances_are_those_to_the_nearest_side_of_the_site() {
    let mut ring = L_SHAPE.to_vec();
    ring.push(L_SHAPE[0]);
    let mut plan = site(&[(50.0, 50.0)]).river("moat", &ring);
    for ratio in [1.0, 9.0] {
        plan.aquifer.anisotropy = Some(Anisotropy {
            ratio,
            azimuth_deg: 20.0,
        });
        let outline = only(&plan);
        let distance = |x, y| outline.distance_to_edge_m(Point::new(x, y));
        assert_relative_eq!(distance(50.0, 70.0), 50.0, max_relative = 1e-12);
        // To the reflex corner at (200, 80): 3-4-5.
        assert_relative_eq!(distance(170.0, 40.0), 40.0, max_relative = 1e-12);
        assert_relative_eq!(distance(230.0, 120.0), 30.0, max_relative = 1e-12);
        assert_relative_eq!(distance(-30.0, -40.0), 50.0, max_relative = 1e-12);
    }
}

#[test]
fn a_river_of_three_legs_bounds_an_aquifer_on_either_bank() {
    let line = [(0.0, 300.0), (0.0, 0.0), (100.0, -50.0), (100.0, -400.0)];
    let plan = site(&[(200.0, 50.0)]).river("Ostra", &line);
    let (outline, east) = boundary(&plan);
    assert_eq!(
        east.chains,
        [BoundaryChain {
            sides: 0..3,
            closed: false
        }]
    );
    let at = |x: f64, y: f64| Complex64::new(x - 200.0, y - 50.0);
    // East of the river its left bank: the river is passed from north to south.
    assert_eq!(
        east.sides[0].curve,
        Curve::RayIn {
            to: at(0.0, 0.0),
            from_direction: Complex64::I
        }
    );
    assert_eq!(
        east.sides[1].curve,
        Curve::Segment {
            from: at(0.0, 0.0),
            to: at(100.0, -50.0)
        }
    );
    assert_eq!(
        east.sides[2].curve,
        Curve::RayOut {
            from: at(100.0, -50.0),
            direction: -Complex64::I
        }
    );
    assert!(!outline.is_closed());
    let west = site(&[(-200.0, 50.0)]).river("Ostra", &line);
    let (other, boundary) = boundary(&west);
    assert!(
        matches!(boundary.sides[0].curve, Curve::RayIn { from_direction, .. } if from_direction == -Complex64::I)
    );
    // The two banks fill any square.
    let square = extent((-300.0, -300.0), (300.0, 500.0));
    let areas = clipped(&outline, square) + clipped(&other, square);
    assert_relative_eq!(areas, 480_000.0, max_relative = 1e-12);
    assert!(outline.holds(Point::new(1e7, 3.0)) && !outline.holds(Point::new(-1e7, 3.0)));
    assert!(outline.holds(Point::new(0.0, 1e7)) && outline.holds(Point::new(1e-3, 1e7)));
    assert!(!outline.holds(Point::new(-1.0, 1e7)));
}

#[test]
fn a_whole_line_is_two_half_lines_that_meet_at_the_foot_of_the_wells() {
    let plan = site(&[(50.0, 30.0), (70.0, 50.0)]).river("Ostra", &[(0.0, 700.0), (0.0, 900.0)]);
    let outline = find_unnamed(&plan).expect("an outline").remove(0);
    let boundary = outline.boundary.as_deref().expect("a boundary");
    check(&outline, boundary);
    assert_eq!(boundary.sides.len(), 2);
    let foot = Complex64::new(-60.0, 0.0);
    assert_eq!(
        boundary.sides[0].curve,
        Curve::RayIn {
            to: foot,
            from_direction: Complex64::I
        }
    );
    assert_eq!(
        boundary.sides[1].curve,
        Curve::RayOut {
            from: foot,
            direction: -Complex64::I
        }
    );
}

#[test]
fn closed_forms_come_as_boundaries_too_when_asked_for_unnamed() {
    let ring = [
        (0.0, 0.0),
        (300.0, 0.0),
        (300.0, 200.0),
        (0.0, 200.0),
        (0.0, 0.0),
    ];
    let plan = site(&[(50.0, 50.0)]).river("moat", &ring);
    assert_eq!(only(&plan).shape.name(), "box");
    let outline = find_unnamed(&plan).expect("an outline").remove(0);
    let sides = outline.boundary.as_deref().expect("a boundary");
    check(&outline, sides);
    assert_eq!(sides.sides.len(), 4);
    assert_relative_eq!(area(sides), 60_000.0, max_relative = 1e-12);
    for (well, sweep) in [((50.0, 0.0), TAU), ((150.0, 0.0), -TAU)] {
        let plan = site(&[well]).lake("Round", (0.0, 0.0), 100.0);
        let outline = find_unnamed(&plan).expect("an outline").remove(0);
        let sides = outline.boundary.as_deref().expect("a boundary");
        check(&outline, sides);
        let Curve::Arc {
            centre,
            radius,
            sweep_rad,
            ..
        } = sides.sides[0].curve
        else {
            panic!("no arc");
        };
        assert_eq!((sides.sides.len(), radius, sweep_rad), (1, 100.0, sweep));
        assert_eq!(centre, Complex64::new(-well.0, 0.0));
        assert_eq!(sides.is_bounded(), sweep > 0.0);
        assert!(outline.distance_to_edge_m(Point::new(40.0, 30.0)) - 50.0 < 1e-12);
    }
    // Without a river, or with an influence radius, names stay.
    let open = find_unnamed(&site(&[(0.0, 0.0)])).expect("an outline");
    assert_eq!(open[0].shape.name(), "open plane");
}

#[test]
fn lakes_and_barrier_islands_are_chains_of_their_own() {
    let mound = [
        (500.0, 0.0),
        (600.0, 0.0),
        (600.0, 100.0),
        (500.0, 100.0),
        (500.0, 0.0),
    ];
    let plan = site(&[(50.0, 0.0)])
        .river("Ostra", &[(0.0, 0.0), (0.0, 100.0)])
        .lake("Pond", (300.0, 0.0), 50.0)
        .barrier("mound", &mound);
    let (outline, boundary) = boundary(&plan);
    let shape: Vec<(usize, bool)> = boundary
        .chains
        .iter()
        .map(|chain| (chain.sides.len(), chain.closed))
        .collect();
    assert_eq!(shape, [(2, false), (1, true), (4, true)]);
    assert!(!boundary.is_bounded());
    let window = extent((-100.0, -200.0), (700.0, 200.0));
    let expected = 700.0 * 400.0 - PI * 2500.0 - 10_000.0;
    // Chords 0.5 mm inside the circle leave 314 m of its rim 2/3 · 0.5 mm wide.
    assert_relative_eq!(clipped(&outline, window), expected, epsilon = 0.11);
    assert!(!outline.holds(Point::new(300.0, 49.9)));
    assert!(outline.holds(Point::new(300.0, 50.1)));
    assert!(!outline.holds(Point::new(550.0, 50.0)));
    assert_eq!(outline.side_name(&plan, 2), "lake Pond");
    // Two lakes alone: the unbounded plane around them.
    let two = site(&[(0.0, 0.0)])
        .lake("Pond", (500.0, 0.0), 50.0)
        .lake("Mere", (900.0, 0.0), 50.0);
    let outline = only(&two);
    assert!(!outline.is_closed());
    assert!(outline.holds(Point::new(1e9, 1e9)));
    // A ring between two lakes' shores.
    let ring =
        site(&[(150.0, 0.0)])
            .lake("Moat", (0.0, 0.0), 200.0)
            .lake("Pond", (0.0, 0.0), 100.0);
    let outline = only(&ring);
    assert!(outline.is_closed());
    let area = clipped(&outline, extent((-300.0, -300.0), (300.0, 300.0)));
    assert_relative_eq!(area, PI * 30_000.0, epsilon = 0.7);
    let piece = &outline.piece_lines(1, 0, extent((0.0, 0.0), (300.0, 300.0)));
    assert_eq!(piece.len(), 1);
}

#[test]
fn a_line_through_a_circle_leaves_exact_arcs() {
    // The river x = 10 cuts the lake of radius 100 at y = ±√(100² − 10²).
    let plan = |x: f64| {
        site(&[(x, 0.0)])
            .river("Ostra", &[(10.0, -500.0), (10.0, 500.0)])
            .lake("Round lake", (0.0, 0.0), 100.0)
    };
    let half = 0.1_f64.acos();
    for (x, sweep) in [(50.0, 2.0 * half), (-50.0, TAU - 2.0 * half)] {
        let (_, inside) = boundary(&plan(x));
        assert_eq!(inside.sides.len(), 2);
        let swept: Vec<f64> = inside
            .sides
            .iter()
            .filter_map(|side| match side.curve {
                Curve::Arc { sweep_rad, .. } => Some(sweep_rad),
                _ => None,
            })
            .collect();
        assert_eq!(swept.len(), 1);
        assert_relative_eq!(swept[0], sweep, max_relative = 1e-12);
        // Circular segment: R²/2 (θ − sin θ).
        assert_relative_eq!(
            area(&inside),
            5000.0 * (sweep - sweep.sin()),
            max_relative = 1e-10
        );
    }
    let (outline, outside) = boundary(&plan(300.0));
    assert_eq!(outside.sides.len(), 3);
    let Curve::Arc { sweep_rad, .. } = outside.sides[1].curve else {
        panic!("no arc");
    };
    assert_relative_eq!(sweep_rad, -2.0 * half, max_relative = 1e-12);
    let window = extent((-200.0, -200.0), (200.0, 200.0));
    let expected = 190.0 * 400.0 - 5000.0 * (2.0 * half - (2.0 * half).sin());
    assert_relative_eq!(clipped(&outline, window), expected, epsilon = 0.2);
    assert_relative_eq!(outline.distance_to_edge_m(Point::new(300.0, 0.0)), 200.0);
    assert_relative_eq!(outline.distance_to_edge_m(Point::new(310.0, 900.0)), 300.0);
}

#[test]
fn two_lakes_that_cross_make_one_shore_of_two_arcs() {
    // Centres 160 apart, radii 100: they cross at ±acos(0.8) off the axis.
    let plan = |at: (f64, f64)| {
        site(&[at])
            .lake("Pond", (0.0, 0.0), 100.0)
            .lake("Mere", (160.0, 0.0), 100.0)
    };
    let half = 0.8_f64.acos();
    let (_, around) = boundary(&plan((0.0, 300.0)));
    let (_, between) = boundary(&plan((80.0, 0.0)));
    let sweeps = |boundary: &Boundary| -> Vec<f64> {
        boundary
            .sides
            .iter()
            .map(|side| match side.curve {
                Curve::Arc { sweep_rad, .. } => sweep_rad,
                _ => f64::NAN,
            })
            .collect()
    };
    for sweep in sweeps(&around) {
        assert_relative_eq!(sweep, -(TAU - 2.0 * half), max_relative = 1e-12);
    }
    for sweep in sweeps(&between) {
        assert_relative_eq!(sweep, 2.0 * half, max_relative = 1e-12);
    }
    assert_eq!((around.sides.len(), between.sides.len()), (2, 2));
}

#[test]
fn stages_at_vertices_are_linear_along_each_drawn_leg_and_held_beyond() {
    let line = [(0.0, 0.0), (0.0, 250.0), (0.0, 500.0)];
    let plan = site(&[(50.0, 250.0)]).falling_river("Ostra", &line, &[61.0, 60.8, 60.0]);
    let (_, boundary) = boundary(&plan);
    let stages: Vec<[f64; 2]> = boundary.sides.iter().map(|side| side.stage_m).collect();
    // East of the river it is passed from north to south.
    assert_eq!(
        stages,
        [[60.0, 60.0], [60.0, 60.8], [60.8, 61.0], [61.0, 61.0]]
    );
    assert!(matches!(boundary.sides[0].curve, Curve::RayIn { .. }));
    assert!(matches!(boundary.sides[3].curve, Curve::RayOut { .. }));
}

#[test]
fn a_stage_where_another_edge_ends_is_interpolated() {
    // The dyke meets the river at y = 100 of a leg from 0 (61 m) to 400 (59 m).
    let plan = |y: f64| {
        site(&[(50.0, y)])
            .falling_river("Ostra", &[(0.0, 0.0), (0.0, 400.0)], &[61.0, 59.0])
            .barrier("dyke", &[(0.0, 100.0), (300.0, 100.0)])
    };
    let (_, north) = boundary(&plan(300.0));
    let stages: Vec<[f64; 2]> = north.sides.iter().map(|side| side.stage_m).collect();
    assert_eq!(stages.len(), 3);
    assert_eq!(stages[0], [59.0, 59.0]);
    assert_relative_eq!(stages[1][1], 60.5, max_relative = 1e-12);
    assert_eq!(stages[2], [0.0, 0.0]);
    let (_, south) = boundary(&plan(50.0));
    let stages: Vec<[f64; 2]> = south.sides.iter().map(|side| side.stage_m).collect();
    assert_relative_eq!(stages[1][0], 60.5, max_relative = 1e-12);
    assert_eq!(stages[2], [61.0, 61.0]);
    // From the other bank the river is whole, and its fall even.
    let other = only(
        &site(&[(-50.0, 0.0)])
            .falling_river("Ostra", &[(0.0, 0.0), (0.0, 400.0)], &[61.0, 59.0])
            .barrier("dyke", &[(0.0, 100.0), (300.0, 100.0)]),
    );
    assert_eq!(other.shape.name(), "half-plane");
}

#[test]
fn falling_rivers_in_every_shape_become_general_boundaries() {
    let fall =
        |line: &[(f64, f64)]| site(&[(50.0, 50.0)]).falling_river("Ostra", line, &[61.0, 60.0]);
    let strip = fall(&[(0.0, 0.0), (0.0, 500.0)]).barrier("dyke", &[(100.0, 0.0), (100.0, 10.0)]);
    let (_, strip) = boundary(&strip);
    // The river: two half-lines and the drawn leg; the dyke: two half-lines.
    assert_eq!(strip.sides.len(), 5);
    assert_eq!(strip.open_chains().count(), 2);
    let box_ = fall(&[(0.0, 0.0), (0.0, 500.0)]).river(
        "others",
        &[(0.0, 500.0), (100.0, 500.0), (100.0, 0.0), (0.0, 0.0)],
    );
    let (_, box_) = boundary(&box_);
    assert_eq!(box_.sides.len(), 4);
    let wedge = fall(&[(0.0, 0.0), (0.0, 500.0)]).barrier("dyke", &[(0.0, 0.0), (300.0, -50.0)]);
    let (_, wedge) = boundary(&wedge);
    assert_eq!(wedge.sides.len(), 3);
    // Two rivers of one line that fall differently.
    let bent = fall(&[(0.0, 0.0), (0.0, 500.0)]).falling_river(
        "Rapids",
        &[(0.0, 500.0), (0.0, 900.0)],
        &[60.0, 57.0],
    );
    let (_, bent) = boundary(&bent);
    assert_eq!(bent.sides.len(), 4);
    // One stage at all vertices keeps the name.
    let level = site(&[(50.0, 250.0)])
        .falling_river("Ostra", &[(0.0, 0.0), (0.0, 500.0)], &[61.0; 2])
        .barrier("dyke", &[(100.0, 0.0), (100.0, 10.0)]);
    assert_eq!(only(&level).shape.name(), "strip");
}

#[test]
fn a_clogged_bank_has_a_skin_of_conductivity_times_resistance() {
    // T = 500 m²/d over 20 m: K = 25 m/d; c = 2 d: a skin of 50 m.
    let mut plan = site(&[(50.0, 0.0)])
        .river("Ostra", &[(0.0, 0.0), (0.0, 1.0)])
        .clogged("Ostra", 2.0);
    plan.aquifer.thickness = Some(Length::from_si(20.0));
    let (outline, clogged) = unnamed(&plan);
    assert_eq!(clogged.sides.len(), 2);
    assert!(
        clogged
            .sides
            .iter()
            .all(|side| side.condition == Condition::Clogged { skin_m: 50.0 })
    );
    assert_eq!(outline.side_kinds(), [RIVER; 2]);
    assert_eq!(
        outline.words(&plan),
        "general outline within river Ostra (clogged bank)"
    );
    // Where conductivity is K√r across the bank, ∂h/∂n = (h − stage)/(K√r c) in
    // the site. Stretched, n' = n r^(−1/4): a skin of K c r^(1/4). And
    // K c r^(−1/4) where K√r runs along the bank.
    for (azimuth_deg, power) in [(90.0, 0.25), (0.0, -0.25)] {
        plan.aquifer.anisotropy = Some(Anisotropy {
            ratio: 16.0,
            azimuth_deg,
        });
        let (_, clogged) = unnamed(&plan);
        let Shape::CloggedHalfPlane { skin_m: in_name } = only(&plan).shape else {
            panic!("not clogged");
        };
        for side in &clogged.sides {
            let Condition::Clogged { skin_m } = side.condition else {
                panic!("not clogged");
            };
            assert_relative_eq!(skin_m, 50.0 * 16.0_f64.powf(power), max_relative = 1e-12);
            assert_relative_eq!(skin_m, in_name, max_relative = 1e-15);
        }
    }
}

#[test]
fn clogged_banks_that_no_closed_form_covers_are_general() {
    let ring = [
        (0.0, 0.0),
        (300.0, 0.0),
        (300.0, 200.0),
        (0.0, 200.0),
        (0.0, 0.0),
    ];
    let beside = |well| site(&[well]).river("Ostra", &[(0.0, 0.0), (0.0, 1.0)]);
    for plan in [
        beside((50.0, 0.0)).barrier("granite", &[(100.0, 0.0), (100.0, 1.0)]),
        beside((50.0, 0.0)).river("Lower Ostra", &[(0.0, -9.0), (0.0, 0.0)]),
        beside((50.0, 50.0)).barrier("sill", &[(0.0, 0.0), (9.0, 0.0)]),
        site(&[(50.0, 50.0)]).river("Ostra", &ring),
        site(&[(50.0, 0.0)]).lake("Ostra", (0.0, 0.0), 20.0),
        site(&[(5.0, 0.0)]).lake("Ostra", (0.0, 0.0), 20.0),
    ] {
        assert_ne!(only(&plan).shape.name(), "general outline");
        let mut clogged = plan.clogged("Ostra", 2.0);
        clogged.aquifer.thickness = Some(Length::from_si(20.0));
        let (_, clogged) = boundary(&clogged);
        for side in &clogged.sides {
            let is_clogged = matches!(side.condition, Condition::Clogged { .. });
            assert_eq!(is_clogged, side.edge == 0);
        }
    }
}

#[test]
fn the_flux_through_an_oblique_clogged_bank_is_the_same_stretched_or_not() {
    // A head that falls evenly across the bank y = x tan 30°: the water that
    // Darcy's law with the conductivity tensor sends through a metre of bank,
    // K = K₁ u uᵀ + K₂ (1 − u uᵀ), must equal what the skin lets through.
    let (ratio, azimuth) = (5.0_f64, 70.0_f64);
    let bank = 30.0_f64.to_radians();
    let (sin, cos) = bank.sin_cos();
    let mut plan = site(&[(-50.0, 50.0)])
        .river("Ostra", &[(0.0, 0.0), (400.0 * cos, 400.0 * sin)])
        .clogged("Ostra", 2.0);
    plan.aquifer.thickness = Some(Length::from_si(20.0));
    plan.aquifer.anisotropy = Some(Anisotropy {
        ratio,
        azimuth_deg: azimuth,
    });
    let (outline, clogged) = unnamed(&plan);
    let Condition::Clogged { skin_m } = clogged.sides[0].condition else {
        panic!("not clogged");
    };
    // Canonical: head above the stage at the bank 1 m, so −T ∂h/∂n = T/skin a
    // canonical metre; a site metre of bank is l'/l canonical metres.
    let step = Complex64::cis(bank);
    let canonical = outline.frame.to_canonical(Point::new(step.re, step.im))
        - outline.frame.to_canonical(Point::origin());
    let through_m2_d = 500.0 / skin_m * canonical.norm();
    // Site: thickness × 1 m / c.
    assert_relative_eq!(through_m2_d, 20.0 / 2.0, max_relative = 1e-12);
}

#[test]
fn barriers_that_go_on_as_rivers_and_walled_basins_are_general() {
    let plan = site(&[(50.0, 10.0)])
        .river("Ostra", &[(0.0, 0.0), (0.0, 100.0)])
        .barrier("dyke", &[(0.0, 0.0), (0.0, -100.0)]);
    let (_, line) = boundary(&plan);
    assert_eq!(conditions(&line), [RIVER, BARRIER]);
    assert!(
        matches!(line.sides[0].curve, Curve::RayIn { to, .. } if to == Complex64::new(-50.0, -10.0))
    );
    let ring = [(0.0, 0.0), (300.0, 0.0), (0.0, 300.0), (0.0, 0.0)];
    let (outline, walls) = boundary(&site(&[(50.0, 50.0)]).barrier("fence", &ring));
    assert_eq!(conditions(&walls), [BARRIER; 3]);
    assert!(outline.is_closed());
    let (outline, wall) =
        boundary(&site(&[(50.0, 50.0)]).round_barrier("crater", (0.0, 0.0), 100.0));
    assert_eq!(conditions(&wall), [BARRIER]);
    assert!(outline.is_closed());
    // A box is square to within 1 mm, or general.
    let almost = |out: f64| {
        let ring = [
            (0.0, 0.0),
            (300.0, 0.0),
            (300.0 + out, 200.0),
            (0.0, 200.0),
            (0.0, 0.0),
        ];
        only(&site(&[(100.0, 50.0)]).barrier("fence", &ring))
            .shape
            .name()
    };
    assert_eq!(almost(0.0005), "box");
    assert_eq!(almost(0.005), "general outline");
}

#[test]
fn one_river_with_a_bend_parts_two_aquifers() {
    let line = [(0.0, 300.0), (0.0, 0.0), (100.0, -50.0), (100.0, -400.0)];
    let plan = site(&[(200.0, 50.0), (-200.0, 50.0)])
        .river("Ostra", &line)
        .neighbour("Lot 1", (-20.0, -30.0))
        .neighbour("Lot 2", (150.0, -30.0));
    let outlines = find(&plan).expect("two aquifers");
    assert_eq!(outlines.len(), 2);
    assert_eq!(
        (&outlines[0].wells, &outlines[1].wells),
        (&vec![0], &vec![1])
    );
    assert_eq!(
        (&outlines[0].neighbours, &outlines[1].neighbours),
        (&vec![1], &vec![0])
    );
}

#[test]
fn a_dyke_between_lake_and_river_is_an_island_of_two_banks_once_it_has_a_width() {
    let plan = site(&[(60.0, 80.0)])
        .river("Ostra", &[(0.0, -500.0), (0.0, 500.0)])
        .lake("Pond", (300.0, 0.0), 50.0);
    let around = [
        (-10.0, -2.0),
        (260.0, -2.0),
        (260.0, 2.0),
        (-10.0, 2.0),
        (-10.0, -2.0),
    ];
    let outline = only(&plan.barrier("dyke", &around));
    let boundary = outline.boundary.as_deref().expect("a boundary");
    // In along the river, out along one bank, round the lake, back, on.
    let edges: Vec<usize> = boundary.sides.iter().map(|side| side.edge).collect();
    assert_eq!(edges, [0, 2, 1, 2, 0]);
    assert!(outline.holds(Point::new(100.0, 2.1)) && outline.holds(Point::new(100.0, -2.1)));
    assert!(!outline.holds(Point::new(100.0, 1.9)));
}

#[test]
fn sharp_corners_and_lines_that_double_back_keep_their_places() {
    // A corner of 0.1°, and a river that comes back a metre away.
    let sharp = 0.1_f64.to_radians();
    let tip = (1000.0, 1000.0 * sharp.tan());
    let plan = site(&[(900.0, 0.8)])
        .river("Ostra", &[(0.0, 0.0), (1000.0, 0.0)])
        .barrier("dyke", &[(0.0, 0.0), tip])
        .barrier("end", &[(1000.0, 0.0), tip]);
    let (outline, sides) = boundary(&plan);
    assert_relative_eq!(area(&sides), 500.0 * tip.1, max_relative = 1e-12);
    assert!(outline.holds(Point::new(1.0, 0.5 * sharp)));
    assert!(!outline.holds(Point::new(1.0, 1.5 * sharp)));
    let back = [
        (0.0, 0.0),
        (500.0, 0.0),
        (500.0, 1.0),
        (1.0, 1.0),
        (1.0, 300.0),
    ];
    let (outline, _) = boundary(&site(&[(200.0, 200.0)]).river("Ostra", &back));
    assert!(outline.holds(Point::new(300.0, 1.1)) && !outline.holds(Point::new(300.0, 0.5)));
}
