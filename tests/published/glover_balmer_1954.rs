//! Source: Glover & Balmer (1954), Transactions AGU 35, and Jenkins (1968),
//! USGS Techniques of Water-Resources Investigations book 4, chapter D1, both
//! from memory: the share q/Q = erfc(√(d²S/(4Tt))) of a well's water that a
//! river gives tends to 1, and the inflow at y along the river is
//! Q d/(π(d² + y²)) in the steady state, so that a reach gives
//! (atan(y₂/d) − atan(y₁/d))/π.

use std::f64::consts::PI;

use crate::plans::Solved;
use crate::shapes::{axes, axis, green};
use num_complex::Complex64;

/// A river along x = 600000 in three pieces, the outer ones endless; a well
/// 100 m east of it at y = 5740000.
const THREE_REACHES: &str = r#"
title = "Three reaches"
crs = "EPSG:32631"
units = "metric"
[aquifer]
transmissivity = 500.0
[[river]]
name = "lower"
line = [[600000.0, 5739000.0], [600000.0, 5739950.0]]
stage = 10.0
[[river]]
name = "middle"
line = [[600000.0, 5739950.0], [600000.0, 5740200.0]]
stage = 10.0
[[river]]
name = "upper"
line = [[600000.0, 5740200.0], [600000.0, 5741000.0]]
stage = 10.0
[[well]]
name = "P"
at = [600100.0, 5740000.0]
pumping = 1000.0
radius = 0.15
"#;

/// Differences of arctangents at 1 ε each, times 1000 m³/d.
const TOLERANCE_M3_D: f64 = 1e-10;

#[test]
fn each_reach_gives_its_arctangent_share() {
    let field = Solved::of(THREE_REACHES).field;
    let share = |y: f64| (y / 100.0).atan() / PI;
    for (edge, expected) in [
        (0, share(-50.0) + 0.5),
        (1, share(200.0) - share(-50.0)),
        (2, 0.5 - share(200.0)),
    ] {
        let ours = field.inflow_m3_d(edge, 0);
        assert!(
            (ours - 1000.0 * expected).abs() < TOLERANCE_M3_D,
            "reach {edge}: {ours}, {expected}"
        );
    }
}

/// erfc(0) = 1: after endless time the river gives all of it.
#[test]
fn the_whole_river_gives_all_the_water() {
    let field = Solved::of(THREE_REACHES).field;
    let total: f64 = (0..3).map(|edge| field.inflow_m3_d(edge, 0)).sum();
    assert!((total - 1000.0).abs() < TOLERANCE_M3_D);
}

/// Half the water comes from within a distance d up and down the river, 70.5 %
/// from within 2d, 93.7 % from within 10d.
#[test]
fn half_the_water_comes_from_within_the_wells_distance() {
    let river = green(&axes(axis("D", 0.0), axis("", 0.0)));
    let well = Complex64::new(100.0, 0.0);
    for (multiple, expected) in [
        (1.0, 0.5),
        (2.0, 0.704_832_764_699_133),
        (10.0, 0.936_548_965_138_893),
    ] {
        let reach = 100.0 * multiple;
        let ours = river.share(0, -reach..reach, well);
        assert!((ours - expected).abs() < 1e-14, "{multiple}: {ours}");
    }
}

/// Between two parallel rivers the shares are 1 − x₀/L and x₀/L: harmonic
/// functions linear across the strip.
#[test]
fn two_parallel_rivers_share_by_distance() {
    let field = Solved::of(
        r#"
title = "Two rivers"
crs = "EPSG:32631"
units = "metric"
[aquifer]
transmissivity = 500.0
[[river]]
name = "west"
line = [[600000.0, 5739000.0], [600000.0, 5741000.0]]
stage = 10.0
[[river]]
name = "east"
line = [[601000.0, 5739000.0], [601000.0, 5741000.0]]
stage = 10.0
[[well]]
name = "P"
at = [600300.0, 5740000.0]
pumping = 1000.0
radius = 0.15
"#,
    )
    .field;
    assert!((field.inflow_m3_d(0, 0) - 700.0).abs() < TOLERANCE_M3_D);
    assert!((field.inflow_m3_d(1, 0) - 300.0).abs() < TOLERANCE_M3_D);
    // Muskat (1937), from memory: s = Q/(2πT) ln(2L sin(πx₀/L)/(π r)).
    let expected = 1000.0 / (2.0 * PI * 500.0) * (2000.0 / (PI * 0.15) * (0.3 * PI).sin()).ln();
    assert!((field.own_drawdown_m(0) - expected).abs() < 1e-12);
}
