//! The water balance: rivers give what wells take.

use crate::plans::{EXAMPLES, example, found, solved};

/// In a steady state the rivers give what the wells take.
#[test]
fn rivers_give_each_aquifer_s_wells_what_they_pump() {
    for name in EXAMPLES {
        for balance in found(&solved(example(name))).balances {
            let inflow_m3_d = balance.inflow_m3_d.expect("a river");
            assert!((inflow_m3_d - balance.pumping_m3_d).abs() < 1e-8, "{name}");
        }
    }
}

/// A harmonic measure lies between 0 and 1.
#[test]
fn no_river_gives_a_well_more_than_it_pumps() {
    for name in EXAMPLES {
        let solution = solved(example(name));
        for boundary in found(&solution).boundaries {
            for (given, well) in boundary.by_well_m3_d.iter().zip(&solution.site().wells) {
                let share = given / well.pumping.si();
                assert!((-1e-12..=1.0 + 1e-12).contains(&share), "{name}: {share}");
            }
        }
    }
}

/// The flux through a side is the sum of those through its parts.
#[test]
fn the_reaches_of_a_river_add_up_to_what_it_gives() {
    for name in EXAMPLES {
        let findings = found(&solved(example(name)));
        for boundary in &findings.boundaries {
            let reaches = findings.reaches.iter();
            let of_edge = reaches.filter(|reach| reach.edge == boundary.edge);
            let total_m3_d: f64 = of_edge.map(|reach| reach.inflow_m3_d).sum();
            let given_m3_d = boundary.inflow_m3_d();
            assert!(
                (total_m3_d - given_m3_d).abs() < 1e-8,
                "{name}: {total_m3_d}"
            );
        }
    }
}

/// A reach from y₁ to y₂ along a straight river gives a well at distance d the
/// share (atan(y₂/d) − atan(y₁/d))/π (Glover & Balmer 1954, from memory); its
/// ends are the vertices that the plan draws.
#[test]
fn a_reach_between_two_vertices_gives_its_arctangent_share() {
    let plan = r#"
title = "Reaches"
crs = "EPSG:32631"
units = "metric"
[aquifer]
transmissivity = 500.0
[[river]]
name = "R"
line = [[600000.0, 5739950.0], [600000.0, 5740200.0], [600000.0, 5740300.0]]
stage = 10.0
[[well]]
name = "P"
at = [600100.0, 5740000.0]
pumping = 1000.0
radius = 0.15
"#;
    let folder = std::path::Path::new(".");
    let plan = mirrorwell::plan::Plan::from_text("plan.toml", plan, folder).expect("a plan");
    let reaches = found(&solved(plan.site)).reaches;
    let share = |y: f64| (y / 100.0).atan() / std::f64::consts::PI;
    let expected = [
        (None, share(-50.0) + 0.5),
        (Some(250.0), share(200.0) - share(-50.0)),
        (Some(100.0), share(300.0) - share(200.0)),
        (None, 0.5 - share(300.0)),
    ];
    assert_eq!(reaches.len(), expected.len());
    let mut got: Vec<_> = reaches
        .iter()
        .map(|reach| (reach.length_m, reach.inflow_m3_d))
        .collect();
    // The side may run either way along the river.
    if (got[0].1 - 1000.0 * expected[0].1).abs() > 1e-3 {
        got.reverse();
    }
    for ((length_m, inflow_m3_d), (expected_m, share)) in got.into_iter().zip(expected) {
        assert_eq!(length_m.map(f64::round), expected_m);
        assert!((inflow_m3_d - 1000.0 * share).abs() < 1e-9, "{inflow_m3_d}");
    }
}
