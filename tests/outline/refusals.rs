//! Every plan that cannot be solved is refused by name, with a remedy.

use mirrorwell::outline::find;
use mirrorwell::site::{Anisotropy, Flux, Length, Point, Site, Subject};

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
fn a_clogged_bank_needs_a_thickness() {
    let mut plan = site(&[(50.0, 0.0)])
        .river("Ostra", &[(0.0, 0.0), (0.0, 1.0)])
        .clogged("Ostra", 2.0);
    let refused = refused(&plan);
    assert_eq!(refused.len(), 1);
    assert_eq!(refused[0].subject, Subject::Aquifer(None));
    assert_eq!(refused[0].related[0].0, Subject::Edge(0, None));
    assert!(
        refused[0]
            .to_string()
            .contains("river Ostra has a bank resistance of 2 days"),
        "{}",
        refused[0]
    );
    assert!(refused[0].remedy.contains("`thickness` and `conductivity`"));
    plan.aquifer.thickness = Some(Length::from_si(20.0));
    assert!(find(&plan).is_ok());
}

#[test]
fn recharge_over_an_area_without_end_or_without_a_river_is_refused() {
    let wet = |mut plan: Site| {
        plan.aquifer.recharge = Flux::from_si(0.0005);
        plan
    };
    let half_plane = wet(site(&[(50.0, 0.0)]).river("Ostra", &[(0.0, 0.0), (0.0, 1.0)]));
    assert_eq!(
        refused(&half_plane)[0].subject,
        Subject::Aquifer(Some("recharge"))
    );
    says(
        &half_plane,
        &[
            "half-plane",
            "0.0005 m/d",
            "an unbounded area cannot drain",
            "close the aquifer",
        ],
    );
    let mut clogged = half_plane.clone().clogged("Ostra", 2.0);
    clogged.aquifer.thickness = Some(Length::from_si(20.0));
    says(
        &clogged,
        &["half-plane behind a clogged bank", "cannot drain"],
    );
    let corridor = site(&[(50.0, 50.0)])
        .barrier("west", &[(0.0, 0.0), (0.0, 700.0)])
        .barrier("east", &[(100.0, 0.0), (100.0, 700.0)]);
    says(
        &wet(corridor.clone()),
        &["the strip around well PW-1", "cannot drain"],
    );
    says(
        &wet(corridor.river("Ostra", &[(0.0, 0.0), (100.0, 0.0)])),
        &["the half-strip around well PW-1", "cannot drain"],
    );
    let lake = wet(site(&[(200.0, 50.0)]).lake("Pond", (0.0, 0.0), 100.0));
    says(
        &lake,
        &["plane around a lake", "an unbounded area cannot drain"],
    );
    let ring = [(0.0, 0.0), (300.0, 0.0), (0.0, 300.0), (0.0, 0.0)];
    let walled = wet(site(&[(50.0, 50.0)]).barrier("fence", &ring));
    says(&walled, &["barriers close on all sides", "cannot drain"]);
    // A box of barriers is as dry as a triangle.
    let ring = [
        (0.0, 0.0),
        (300.0, 0.0),
        (300.0, 200.0),
        (0.0, 200.0),
        (0.0, 0.0),
    ];
    let walled = wet(site(&[(50.0, 50.0)]).barrier("fence", &ring));
    says(&walled, &["barriers close on all sides"]);
    // Water leaves a strip, a moated box or a lake by the river at hand.
    let strip = site(&[(50.0, 50.0)])
        .river("Ostra", &[(0.0, 0.0), (0.0, 700.0)])
        .barrier("dyke", &[(100.0, -100.0), (100.0, 400.0)]);
    assert!(find(&wet(strip)).is_ok());
    assert!(find(&wet(site(&[(50.0, 50.0)]).river("moat", &ring))).is_ok());
    assert!(find(&wet(site(&[(50.0, 50.0)]).lake("Round", (0.0, 0.0), 100.0))).is_ok());
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
fn an_edge_with_the_aquifer_on_both_its_banks_is_refused_by_name() {
    let ostra = site(&[(60.0, 80.0)]).river("Ostra", &[(0.0, -500.0), (0.0, 500.0)]);
    let pond = ostra.lake("Pond", (300.0, 0.0), 50.0);
    let dyke = pond.clone().barrier("dyke", &[(0.0, 0.0), (250.0, 0.0)]);
    says(
        &dyke,
        &[
            "barrier dyke has the aquifer of well PW-1 on both its banks",
            "without parting it",
            "draw both its banks",
        ],
    );
    let refused = refused(&dyke);
    assert_eq!(refused[0].subject, Subject::Edge(2, None));
    assert_eq!(refused[0].related[0].0, Subject::Well(0, None));
    // A canal does no better, nor a line that a free end carries on.
    let canal = pond.clone().river("canal", &[(0.0, 0.0), (250.0, 0.0)]);
    says(&canal, &["river canal has the aquifer of well PW-1"]);
    let stump = pond.clone().barrier("stump", &[(100.0, 5.0), (200.0, 5.0)]);
    says(
        &stump,
        &["barrier stump has the aquifer", "carried on straight"],
    );
    // From a lake to infinity.
    let lake = site(&[(60.0, 80.0)]).lake("Pond", (300.0, 0.0), 50.0);
    let spur = lake.barrier("spur", &[(300.0, 10.0), (320.0, 90.0)]);
    says(&spur, &["barrier spur has the aquifer"]);
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
fn an_open_outline_of_barriers_alone_without_images_is_refused_with_its_angles() {
    let mut plan = site(&[(50.0, 80.0)])
        .barrier("west", &[(0.0, 0.0), (0.0, 300.0)])
        .barrier("base", &[(0.0, 0.0), (160.0, 0.0)])
        .barrier("east", &[(160.0, 0.0), (170.0, 300.0)]);
    plan.aquifer.influence_radius = Some(Length::from_si(900.0));
    says(
        &plan,
        &[
            "an aquifer with 2 corners: barrier west, barrier base, barrier east",
            "its corners measure 90.0° and 91.9°",
            "its long sides are 1.9° from parallel",
            "draw its two long sides parallel",
        ],
    );
    plan.edges[1].kind = site(&[]).river("base", &[]).edges[0].kind.clone();
    assert!(find(&plan).is_ok());
}

#[test]
fn islands_of_barriers_alone_are_refused() {
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
    let plan = site(&[(50.0, 0.0)])
        .barrier("dyke", &[(0.0, 0.0), (0.0, 100.0)])
        .barrier("mound", &square);
    says(
        &plan,
        &[
            "an aquifer with an island inside it: barrier mound",
            "leave barrier mound out",
        ],
    );
    let plan = site(&[(-200.0, 0.0)])
        .barrier("dyke", &[(0.0, -500.0), (0.0, 500.0)])
        .round_barrier("pluton", (10.0, 0.0), 100.0);
    says(
        &plan,
        &["an aquifer bounded by an arc of barrier pluton and by other edges: barrier dyke"],
    );
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
fn a_river_with_too_few_stages_is_refused() {
    let line = [(0.0, 0.0), (0.0, 250.0), (0.0, 500.0)];
    let short = site(&[(50.0, 250.0)]).falling_river("Ostra", &line, &[61.0, 60.5]);
    says(&short, &["river Ostra has 2 stages for 3 vertices"]);
    assert_eq!(refused(&short)[0].subject, Subject::Edge(0, Some("stage")));
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
    let mut plan = site(&[(50.0, 0.0), (0.0, 5.0), (-50.0, 0.0)])
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
    plan.aquifer.recharge = Flux::from_si(1e-4);
    let texts = refusals(&plan);
    assert_eq!(texts.len(), 3, "{texts:#?}");
    assert!(texts[0].contains("well PW-2 lies on"));
    assert!(texts[1].contains("the half-plane around well PW-1 has a recharge"));
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
