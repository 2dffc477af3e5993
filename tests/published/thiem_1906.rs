//! Source: Thiem (1906), *Hydrologische Methoden*, from memory: between two
//! distances from a well s₁ − s₂ = Q/(2πT) ln(r₂/r₁).

use std::f64::consts::PI;

use crate::plans::Solved;

const OPEN_PLANE: &str = r#"
title = "One well in the open plane"
crs = "EPSG:32633"
units = "metric"
[aquifer]
transmissivity = 836.0
influence_radius = 1500.0
[ambient]
head = 62.0
at = [412300.0, 5361200.0]
[[well]]
name = "P"
at = [412450.0, 5361020.0]
pumping = 2160.0
radius = 0.2
"#;

/// Drawdowns of half a metre by one logarithm: 4 ε of coordinates of 1e3 m.
const TOLERANCE_M: f64 = 1e-12;

#[test]
fn drawdowns_at_two_distances_differ_by_the_logarithm_of_their_ratio() {
    let solved = Solved::of(OPEN_PLANE);
    let near = solved.drawdown_m(412_480.0, 5_361_060.0);
    let far = solved.drawdown_m(412_450.0, 5_360_320.0);
    let expected = 2160.0 / (2.0 * PI * 836.0) * (700.0f64 / 50.0).ln();
    assert!(((near - far) - expected).abs() < TOLERANCE_M);
}

#[test]
fn the_cone_ends_at_the_influence_radius() {
    let solved = Solved::of(OPEN_PLANE);
    let at_edge = solved.drawdown_m(412_450.0 + 1500.0, 5_361_020.0);
    assert!(at_edge.abs() < TOLERANCE_M, "{at_edge}");
    assert_eq!(solved.drawdown_m(412_450.0, 5_361_020.0 - 1600.0), 0.0);
}

#[test]
fn the_well_draws_down_its_rim_by_the_logarithm_of_radius_over_rim() {
    let solved = Solved::of(OPEN_PLANE);
    let expected = 2160.0 / (2.0 * PI * 836.0) * (1500.0f64 / 0.2).ln();
    assert!((solved.field.own_drawdown_m(0) - expected).abs() < TOLERANCE_M);
    let on_rim = solved.drawdown_m(412_450.2, 5_361_020.0);
    // The rim's place itself is rounded to 1e-9 m of its 0.2 m.
    assert!((on_rim - expected).abs() < 1e-8, "{on_rim}, {expected}");
}
