//! Outlines that are hard to solve: the answer is right within the stated bound,
//! held against a second solution with a hundredth of the error, or the plan is
//! refused with the place named.

use std::fmt::Write as _;
use std::path::Path;

use mirrorwell::findings::Solution;
use mirrorwell::plan::Plan;
use mirrorwell::site::{Length, Point, Refusal};

/// The error that is asked for, metres.
const ASKED_M: f64 = 1e-4;

type Line<'a> = &'a [(f64, f64)];

/// A plan of rivers (with a stage) and barriers around wells of 800 m³/d.
fn plan(rivers: &[(Line<'_>, f64)], barriers: &[Line<'_>], wells: Line<'_>) -> Plan {
    read(&text(rivers, barriers, wells))
}

fn text(rivers: &[(Line<'_>, f64)], barriers: &[Line<'_>], wells: Line<'_>) -> String {
    let mut text = "title = \"Awkward\"\ncrs = { origin = [14.0, 52.0] }\nunits = \"metric\"\n\
                    [aquifer]\ntransmissivity = 500.0\nroof = 10.0\n"
        .to_owned();
    for (number, (line, stage)) in rivers.iter().enumerate() {
        write!(
            text,
            "[[river]]\nname = \"R{number}\"\nline = {}\nstage = {stage:.1}\n",
            list(line)
        )
        .expect("text");
    }
    for (number, line) in barriers.iter().enumerate() {
        write!(
            text,
            "[[barrier]]\nname = \"B{number}\"\nline = {}\n",
            list(line)
        )
        .expect("text");
    }
    for (number, (x, y)) in wells.iter().enumerate() {
        write!(
            text,
            "[[well]]\nname = \"W{number}\"\nat = [{x:?}, {y:?}]\npumping = 800.0\nradius = 0.2\n"
        )
        .expect("text");
    }
    text
}

/// A plan's text, its wells made thin.
fn read(text: &str) -> Plan {
    let mut plan = Plan::from_text("plan.toml", text, Path::new(".")).expect("a plan");
    // Thinner than a plan may say, to come near to an edge.
    for well in &mut plan.site.wells {
        well.radius = Length::from_si(0.0004);
    }
    plan
}

fn list(line: Line<'_>) -> String {
    let points: Vec<String> = line
        .iter()
        .map(|(x, y)| format!("[{x:?}, {y:?}]"))
        .collect();
    format!("[{}]", points.join(", "))
}

fn solved(plan: &Plan, asked_m: f64) -> Result<Solution, Vec<Refusal>> {
    let mut site = plan.site.clone();
    site.head_tolerance = Length::from_si(asked_m);
    Solution::of(site)
}

/// The bound holds at places of the plan, and is as small as asked for.
fn assert_right(plan: &Plan, places: Line<'_>) {
    let coarse = solved(plan, ASKED_M).unwrap();
    let fine = solved(plan, 0.01 * ASKED_M).unwrap();
    let bound_m = coarse.fields()[0].error_bound_m();
    assert!(bound_m <= ASKED_M, "bound {bound_m}");
    let points: Vec<Point> = places.iter().map(|(x, y)| plan.to_site(*x, *y)).collect();
    let heads = coarse
        .heads_m(&points)
        .into_iter()
        .zip(fine.heads_m(&points));
    for ((coarse_m, fine_m), place) in heads.zip(places) {
        let error_m = (coarse_m - fine_m).abs();
        assert!(
            error_m <= 1.01 * bound_m,
            "error {error_m} of {bound_m} at {place:?}"
        );
    }
}

#[test]
fn a_well_two_millimetres_from_a_bent_river_is_solved_within_the_bound() {
    let river = [(-900.0, 40.0), (0.0, 0.0), (900.0, 130.0)];
    let plan = plan(&[(&river, 50.0)], &[], &[(450.0, 65.0021), (100.0, 300.0)]);
    assert_right(
        &plan,
        &[
            (450.0, 65.5),
            (449.9, 65.0),
            (100.0, 200.0),
            (-300.0, 900.0),
        ],
    );
}

#[test]
fn vertices_a_few_millimetres_apart_are_solved_within_the_bound() {
    let river = [(-900.0, 40.0), (0.0, 0.0), (0.003, 0.002), (900.0, 130.0)];
    let plan = plan(&[(&river, 50.0)], &[], &[(50.0, 120.0)]);
    assert_right(&plan, &[(0.001, 0.05), (40.0, 80.0), (-500.0, 700.0)]);
}

#[test]
fn a_corner_of_a_tenth_of_a_degree_is_solved_within_the_bound() {
    let river = [(0.0, 0.0), (1000.0, 0.0)];
    let barriers: [Line<'_>; 2] = [
        &[(0.0, 0.0), (1000.0, 1.7453)],
        &[(1000.0, 0.0), (1000.0, 1.7453)],
    ];
    let plan = plan(&[(&river, 50.0)], &barriers, &[(900.0, 0.8)]);
    assert_right(&plan, &[(899.0, 0.5), (990.0, 1.0), (500.0, 0.4)]);
}

#[test]
fn a_river_that_doubles_back_within_a_metre_is_solved_within_the_bound() {
    let river = [
        (-900.0, 0.0),
        (0.0, 0.0),
        (0.0, 300.0),
        (0.8, 300.0),
        (0.8, 0.0),
        (900.0, 0.0),
    ];
    let plan = plan(&[(&river, 50.0)], &[], &[(60.0, 150.0), (-80.0, 200.0)]);
    assert_right(
        &plan,
        &[(0.4, 300.5), (0.9, 100.0), (-1.0, 290.0), (200.0, 500.0)],
    );
}

#[test]
fn an_island_that_all_but_touches_a_river_is_solved_within_the_bound() {
    let river = [(-900.0, 40.0), (0.0, 0.0), (900.0, 130.0)];
    let island = [
        (-100.0, 30.0),
        (100.0, 14.455),
        (0.0, 160.0),
        (-100.0, 30.0),
    ];
    let plan = plan(&[(&river, 50.0)], &[&island], &[(50.0, 320.0)]);
    assert_right(
        &plan,
        &[(100.0, 14.45), (0.0, 10.0), (0.0, 161.0), (400.0, 300.0)],
    );
}

#[test]
fn a_well_a_millimetre_from_a_bent_river_is_solved_within_the_bound() {
    let river = [(-900.0, 40.0), (0.0, 0.0), (900.0, 130.0)];
    // 1 mm along the normal of the second leg is 1.0104 mm upward.
    let plan = plan(&[(&river, 50.0)], &[], &[(450.0, 65.0010104)]);
    assert_right(&plan, &[(450.0, 65.5), (449.9, 65.0), (100.0, 200.0)]);
}

#[test]
fn vertices_a_millimetre_apart_are_solved_within_the_bound() {
    let river = [(-900.0, 40.0), (0.0, 0.0), (0.0008, 0.0006), (900.0, 130.0)];
    let plan = plan(&[(&river, 50.0)], &[], &[(50.0, 120.0)]);
    assert_right(&plan, &[(0.001, 0.05), (40.0, 80.0), (-500.0, 700.0)]);
}

#[test]
fn two_lakes_that_cross_beside_a_river_are_solved_within_the_bound() {
    let plan = read(
        "title = \"Two lakes\"\ncrs = { origin = [14.0, 52.0] }\nunits = \"metric\"\n\
         [aquifer]\ntransmissivity = 500.0\nroof = 10.0\n\
         [[river]]\nname = \"R0\"\nline = [[-900.0, 40.0], [0.0, 0.0], [900.0, 130.0]]\nstage = 50.0\n\
         [[river]]\nname = \"L0\"\ncircle = { centre = [0.0, 300.0], radius = 100.0 }\nstage = 50.4\n\
         [[river]]\nname = \"L1\"\ncircle = { centre = [160.0, 300.0], radius = 100.0 }\nstage = 50.4\n\
         [[well]]\nname = \"W0\"\nat = [80.0, 450.0]\npumping = 800.0\nradius = 0.2\n",
    );
    // The lakes' shores meet at (80, 360) and (80, 240).
    let places = [
        (80.0, 360.01),
        (80.0, 361.0),
        (80.0, 239.0),
        (-200.0, 200.0),
        (0.0, 199.9),
    ];
    assert_right(&plan, &places);
}

#[test]
fn rivers_and_barriers_that_touch_themselves_are_refused_with_the_place() {
    let loops = [
        [
            (-900.0, 0.0),
            (0.0, 0.0),
            (200.0, 200.0),
            (-200.0, 200.0),
            (0.0, 0.0),
            (900.0, 50.0),
        ],
        // A vertex on an earlier leg.
        [
            (-900.0, 0.0),
            (300.0, 0.0),
            (200.0, 200.0),
            (0.0, 0.0),
            (-100.0, 300.0),
            (900.0, 350.0),
        ],
    ];
    for (line, sides) in loops
        .iter()
        .zip(["side 1 meets side 4", "side 1 meets side 3"])
    {
        for text in [
            text(&[(line, 50.0)], &[], &[(0.0, 500.0)]),
            text(&[], &[line], &[(0.0, 500.0)]),
        ] {
            let faults = Plan::from_text("plan.toml", &text, Path::new("."));
            let faults = faults.expect_err("a refusal").to_string();
            assert!(faults.contains("crosses or touches itself"), "{faults}");
            assert!(faults.contains(sides), "{faults}");
        }
    }
}

#[test]
fn rivers_that_lie_on_one_another_are_refused_with_both_names() {
    let (upper, lower) = (
        [(-900.0, 40.0), (0.0, 0.0), (400.0, 80.0)],
        [(200.0, 40.0), (600.0, 120.0), (900.0, 0.0)],
    );
    let plan = plan(&[(&upper, 50.0), (&lower, 49.0)], &[], &[(50.0, 300.0)]);
    let refusals = solved(&plan, ASKED_M).err().expect("a refusal");
    let text = refusals[0].to_string();
    assert!(text.contains("R0") && text.contains("R1"), "{text}");
    assert!(text.contains("lie on one another"), "{text}");
}

#[test]
fn ten_thousand_vertices_are_refused_with_their_number() {
    let river: Vec<(f64, f64)> = (0..10_000)
        .map(|index| (f64::from(index), 3.0 * f64::from(index % 2)))
        .collect();
    let plan = plan(&[(&river, 50.0)], &[], &[(5000.0, 300.0)]);
    let refusals = solved(&plan, ASKED_M).err().expect("a refusal");
    let text = refusals[0].to_string();
    assert!(text.contains("straight pieces"), "{text}");
}
