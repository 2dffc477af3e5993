//! Every plan without a closed form is refused by name, with a remedy.

use mirrorwell::outline::find;
use mirrorwell::site::{Anisotropy, Length, Point, Site, Subject};

use crate::plans::{With, only_refusal, refusals, refused, site};

#[track_caller]
fn says(plan: &Site, parts: &[&str]) {
    let text = only_refusal(plan);
    for part in parts {
        assert!(text.contains(part), "{part:?} is missing in: {text}");
    }
}

#[test]
fn a_plan_without_wells_is_refused_as_a_whole() {
    let refused = refused(&site(&[]).river("Ostra", &[(0.0, 0.0), (1.0, 0.0)]));
    assert_eq!(refused[0].subject, Subject::Plan);
    assert!(refused[0].to_string().starts_with("the plan has no well;"));
}

#[test]
fn clogged_banks_without_a_closed_form_are_refused_where_they_are_written() {
    let clogged = |plan: Site| plan.clogged(2.0);
    let half_plane = || clogged(site(&[(50.0, 0.0)]).river("Ostra", &[(0.0, 0.0), (0.0, 1.0)]));
    let strip = half_plane().barrier("granite", &[(100.0, 0.0), (100.0, 1.0)]);
    let mixed = half_plane().river("Lower Ostra", &[(0.0, -9.0), (0.0, 0.0)]);
    let lake = clogged(site(&[(50.0, 0.0)]).lake("Tarn", (0.0, 0.0), 20.0));
    for (mut plan, parts) in [
        (
            strip,
            "river Ostra has a bank resistance of 2 days, and the aquifer is a strip",
        ),
        (mixed, "days, but river"),
        (lake, "and the aquifer is a plane around a lake"),
        (
            half_plane(),
            "and the aquifer has no thickness; a bank lets through",
        ),
    ] {
        let without_thickness = parts.contains("thickness");
        plan.aquifer.thickness = (!without_thickness).then(|| Length::from_si(20.0));
        says(&plan, &[parts]);
        let subject = &refused(&plan)[0].subject;
        assert!(matches!(subject, Subject::Edge(_, Some("bank_resistance"))));
    }
}

#[test]
fn rivers_of_one_line_that_fall_differently_are_refused() {
    let plan = site(&[(50.0, 0.0)])
        .falling_river("Ostra", &[(0.0, 0.0), (0.0, 1000.0)], &[60.0, 61.0])
        .falling_river("Rapids", &[(0.0, 1000.0), (0.0, 2000.0)], &[61.0, 65.0]);
    says(
        &plan,
        &["slopes by", "one straight fall along the whole line"],
    );
}

#[test]
fn coordinates_that_are_no_places_are_refused() {
    for wild in [f64::NAN, f64::INFINITY, 1e300, -2e8] {
        let plan = site(&[(50.0, 0.0)]).river("Ostra", &[(0.0, wild), (0.0, 1.0)]);
        says(
            &plan,
            &["river Ostra has a coordinate that is not a finite number"],
        );
        let plan = site(&[(wild, 0.0)]).river("Ostra", &[(0.0, 0.0), (0.0, 1.0)]);
        says(&plan, &["well PW-1 has a coordinate"]);
        let mut plan = site(&[(50.0, 0.0)]);
        plan.aquifer.anisotropy = Some(Anisotropy {
            ratio: if wild > 1.0 { f64::NAN } else { 0.5 },
            azimuth_deg: 0.0,
        });
        says(&plan, &["anisotropy ratio"]);
    }
}

#[test]
fn an_edge_without_length_is_refused() {
    for line in [&[(5.0, 5.0), (5.0, 5.0004)][..], &[(5.0, 5.0)], &[]] {
        says(
            &site(&[(50.0, 0.0)]).river("Ostra", line),
            &["river Ostra has no length"],
        );
    }
    says(
        &site(&[(50.0, 0.0)]).lake("Pond", (0.0, 0.0), 0.0),
        &["lake Pond has no length"],
    );
}

#[test]
fn a_line_that_crosses_itself_is_refused_with_the_place() {
    let line = [(0.0, 0.0), (100.0, 0.0), (100.0, 50.0), (40.0, -50.0)];
    says(
        &site(&[(50.0, 10.0)]).river("Ostra", &line),
        &["river Ostra crosses or touches itself 70.0 m along its line"],
    );
    let folded = [(0.0, 0.0), (100.0, 0.0), (30.0, 0.0)];
    says(
        &site(&[(50.0, 10.0)]).barrier("fold", &folded),
        &["barrier fold crosses or touches itself"],
    );
}

#[test]
fn edges_on_one_another_are_refused_with_both_names() {
    let plan = site(&[(50.0, 10.0)])
        .river("Ostra", &[(0.0, 0.0), (100.0, 0.0)])
        .barrier("dyke", &[(60.0, 0.0005), (200.0, 0.0)]);
    let refused = refused(&plan);
    assert_eq!(refused.len(), 1);
    assert_eq!(refused[0].subject, Subject::Edge(1, None));
    assert_eq!(refused[0].related[0].0, Subject::Edge(0, None));
    assert_eq!(
        refused[0].what,
        "barrier dyke and river Ostra lie on one another over 40.0 m"
    );
    let twice = site(&[(50.0, 10.0)])
        .lake("Pond", (0.0, 0.0), 20.0)
        .lake("Mere", (0.0, 0.0), 20.0);
    says(&twice, &["lake Mere and lake Pond lie on one another"]);
}

#[test]
fn a_river_that_a_barrier_continues_straight_on_is_refused() {
    let plan = site(&[(50.0, 10.0)])
        .river("Ostra", &[(0.0, 0.0), (0.0, 100.0)])
        .barrier("dyke", &[(0.0, 0.0), (0.0, -100.0)]);
    says(
        &plan,
        &["barrier dyke continues river Ostra on one straight line; no closed form covers it"],
    );
}

#[test]
fn an_aquifer_with_many_corners_is_refused_with_its_edges() {
    let ring = [
        (300.0, 0.0),
        (400.0, 100.0),
        (350.0, 200.0),
        (200.0, 260.0),
        (50.0, 200.0),
        (0.0, 100.0),
        (0.0, 0.0),
    ];
    let plan = site(&[(100.0, 50.0)])
        .river("Ostra", &[(0.0, 0.0), (300.0, 0.0)])
        .barrier("granite edge", &ring);
    says(
        &plan,
        &[
            "well PW-1 stands in a closed aquifer with 7 corners: river Ostra, barrier granite \
             edge; no closed form covers it; leave out edges far from the wells, or simplify the outline to",
        ],
    );
    assert_eq!(refused(&plan)[0].subject, Subject::Edge(1, None));
}

#[test]
fn a_box_out_of_square_is_refused_with_its_angles() {
    // One corner 1 m out in 300: atan(1/300) = 0.19°.
    let ring = [
        (0.0, 0.0),
        (300.0, 0.0),
        (301.0, 200.0),
        (0.0, 200.0),
        (0.0, 0.0),
    ];
    says(
        &site(&[(100.0, 50.0)]).barrier("fence", &ring),
        &[
            "4 corners: barrier fence",
            "its corners measure 90.0°, 90.0°, 90.29° and 89.71°",
            "square to one another, to within 1 mm",
        ],
    );
    // Out by 0.5 mm it is square enough, out by 5 mm not.
    let almost = |out: f64| {
        let ring = [
            (0.0, 0.0),
            (300.0, 0.0),
            (300.0 + out, 200.0),
            (0.0, 200.0),
            (0.0, 0.0),
        ];
        find(&site(&[(100.0, 50.0)]).barrier("fence", &ring)).is_ok()
    };
    assert!(almost(0.0005));
    assert!(!almost(0.005));
}

#[test]
fn a_half_strip_out_of_square_is_refused_with_its_angles() {
    let plan = site(&[(50.0, 80.0)])
        .barrier("west", &[(0.0, 0.0), (0.0, 300.0)])
        .river("base", &[(0.0, 0.0), (160.0, 0.0)])
        .river("east", &[(160.0, 0.0), (170.0, 300.0)]);
    says(
        &plan,
        &[
            "an aquifer with 2 corners: barrier west, river base, river east",
            "its corners measure 90.0° and 91.9°",
            "its long sides are 1.9° from parallel",
            "draw its two long sides parallel",
        ],
    );
}

#[test]
fn a_triangle_is_refused() {
    let ring = [(0.0, 0.0), (300.0, 0.0), (0.0, 300.0), (0.0, 0.0)];
    says(
        &site(&[(50.0, 50.0)]).river("moat", &ring),
        &[
            "a closed aquifer with 3 corners: river moat",
            "45.0°, 90.0° and 45.0°",
        ],
    );
}

#[test]
fn islands_are_refused_except_a_single_round_lake() {
    let square = [
        (500.0, 0.0),
        (600.0, 0.0),
        (600.0, 100.0),
        (500.0, 100.0),
        (500.0, 0.0),
    ];
    says(
        &site(&[(0.0, 0.0)]).barrier("mound", &square),
        &["well PW-1 stands in the plane around barrier mound; no closed form covers it"],
    );
    says(
        &site(&[(0.0, 0.0)])
            .lake("Pond", (500.0, 0.0), 50.0)
            .lake("Mere", (900.0, 0.0), 50.0),
        &["the plane around lake Pond"],
    );
    let plan = site(&[(50.0, 0.0)])
        .river("Ostra", &[(0.0, 0.0), (0.0, 100.0)])
        .lake("Pond", (500.0, 0.0), 50.0);
    says(
        &plan,
        &[
            "an aquifer with an island inside it: lake Pond",
            "leave lake Pond out",
        ],
    );
    // Nested: the well stands between two rings, the inner one is the island.
    let plan =
        site(&[(150.0, 0.0)])
            .lake("Moat", (0.0, 0.0), 200.0)
            .lake("Pond", (0.0, 0.0), 100.0);
    says(&plan, &["an aquifer with an island inside it: lake Pond"]);
}

#[test]
fn a_lake_that_meets_a_river_is_refused_where_it_bounds_the_aquifer() {
    let plan = |x: f64| {
        site(&[(x, 0.0)])
            .river("Ostra", &[(0.0, -500.0), (0.0, 500.0)])
            .lake("Round lake", (10.0, 0.0), 100.0)
    };
    says(
        &plan(300.0),
        &["an aquifer bounded by an arc of Round lake and by other edges: river Ostra"],
    );
    says(&plan(50.0), &["bounded by an arc of Round lake"]);
}

#[test]
fn round_barriers_and_circles_under_anisotropy_are_refused() {
    says(
        &site(&[(300.0, 0.0)]).round_barrier("pluton", (0.0, 0.0), 100.0),
        &["the aquifer around the round barrier pluton"],
    );
    let mut plan = site(&[(300.0, 0.0)]).lake("Pond", (0.0, 0.0), 100.0);
    plan.aquifer.anisotropy = Some(Anisotropy {
        ratio: 3.0,
        azimuth_deg: 40.0,
    });
    says(
        &plan,
        &[
            "an anisotropic aquifer bounded by the circle of lake Pond",
            "(ratio 3) a circle acts as an ellipse",
        ],
    );
    // A ratio of 1 stretches nothing.
    plan.aquifer.anisotropy = Some(Anisotropy {
        ratio: 1.0,
        azimuth_deg: 40.0,
    });
    assert!(find(&plan).is_ok());
}

#[test]
fn stages_that_vary_where_no_closed_form_allows_are_refused() {
    let line = [(0.0, 0.0), (0.0, 250.0), (0.0, 500.0)];
    let uneven = site(&[(50.0, 250.0)]).falling_river("Ostra", &line, &[61.0, 60.8, 60.0]);
    let refused = refused(&uneven);
    assert_eq!(refused[0].subject, Subject::Edge(0, Some("stage")));
    // Least squares: 61.1, 60.6, 60.1 against 61.0, 60.8, 60.0.
    assert!(
        refused[0]
            .what
            .contains("departs by 0.200 m from a straight fall"),
        "{}",
        refused[0]
    );
    let strip = site(&[(50.0, 250.0)])
        .falling_river("Ostra", &line, &[61.0, 60.5, 60.0])
        .barrier("dyke", &[(100.0, 0.0), (100.0, 10.0)]);
    says(
        &strip,
        &[
            "the stage of river Ostra varies by 1.0 m, and the aquifer is a strip",
            "its mean of 60.500 m",
        ],
    );
    let short = site(&[(50.0, 250.0)]).falling_river("Ostra", &line, &[61.0, 60.5]);
    says(&short, &["river Ostra has 2 stages for 3 vertices"]);
    let level = site(&[(50.0, 250.0)])
        .falling_river("Ostra", &line, &[61.0; 3])
        .barrier("dyke", &[(100.0, 0.0), (100.0, 10.0)]);
    assert!(find(&level).is_ok());
}

#[test]
fn a_coastline_of_thousands_of_vertices_is_refused_by_number() {
    let line: Vec<(f64, f64)> = (0..5001)
        .map(|step| (f64::from(step) * 10.0, f64::from(step % 2)))
        .collect();
    says(
        &site(&[(50.0, 250.0)]).river("coast", &line),
        &[
            "5000 straight pieces; at most 4000 can be joined",
            "simplify",
        ],
    );
    // As many vertices on one straight line are one piece.
    let straight: Vec<(f64, f64)> = line.iter().map(|at| (at.0, 0.0)).collect();
    assert!(find(&site(&[(50.0, 250.0)]).river("coast", &straight)).is_ok());
}

#[test]
fn faults_of_every_room_come_in_one_go() {
    let plan = site(&[(50.0, 0.0), (0.0, 5.0), (-50.0, 0.0)])
        .river("Ostra", &[(0.0, -10.0), (0.0, 10.0)])
        .barrier(
            "bend",
            &[
                (-100.0, -10.0),
                (-100.0, 10.0),
                (-130.0, 40.0),
                (-130.0, 90.0),
            ],
        )
        .neighbour("Lot 1", (0.0, 20.0));
    let texts = refusals(&plan);
    assert_eq!(texts.len(), 3, "{texts:#?}");
    assert!(texts[0].contains("well PW-2 lies on"));
    assert!(texts[1].contains("no closed form covers it"));
    assert!(texts[2].contains("neighbour Lot 1 lies on"));
}

#[test]
fn near_degenerate_plans_end_in_an_answer_and_not_in_a_panic() {
    // Lines that almost touch, almost overlap or almost close.
    for shift in [1e-12, 1e-9, 1e-6, 0.0009, 0.0011, 0.01] {
        for turn in [0.0, 1e-12, 1e-9, 1e-7, 1e-6, 1e-5] {
            let plan = site(&[(50.0, 30.0), (-50.0, -10.0), (50.0, -30.0)])
                .river("a", &[(0.0, 0.0), (100.0, shift)])
                .river("b", &[(100.0 + shift, 0.0), (200.0, 100.0 * turn)])
                .barrier("c", &[(shift, shift), (turn, 100.0)])
                .barrier("d", &[(100.0, 100.0), (100.0 + shift, shift)])
                .river("e", &[(-shift, 100.0 + shift), (100.0, 100.0 + turn)]);
            let mut moved = plan.clone();
            moved.wells[0].at = Point::new(1e7, 3.0);
            let _ = (find(&plan), find(&moved));
        }
    }
}
