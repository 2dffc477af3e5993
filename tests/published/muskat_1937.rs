//! Source: Muskat (1937), *The Flow of Homogeneous Fluids through Porous
//! Media*, from memory: w = −cos(πz/L) maps the half-strip 0 < x < L, y > 0
//! onto the upper half-plane, so that between three rivers
//! s = Q/(2πT) ln |(w − w̄₀)/(w − w₀)|.

use std::f64::consts::PI;

use num_complex::Complex64;

use crate::plans::Solved;

const WIDTH_M: f64 = 1000.0;

/// A well at (x, y) of a half-strip whose corner is at (412000, 5360000).
fn half_strip(x: f64, y: f64) -> Solved {
    let river = |name: &str, line: &str| {
        format!("[[river]]\nname = \"{name}\"\nline = {line}\nstage = 10.0\n")
    };
    Solved::of(&format!(
        r#"
title = "Between three rivers"
crs = "EPSG:32633"
units = "metric"
[aquifer]
transmissivity = 500.0
{}{}{}
[[well]]
name = "P"
at = [{}, {}]
pumping = 1000.0
radius = 0.2
"#,
        river("west", "[[412000.0, 5360000.0], [412000.0, 5361000.0]]"),
        river("south", "[[412000.0, 5360000.0], [413000.0, 5360000.0]]"),
        river("east", "[[413000.0, 5360000.0], [413000.0, 5361000.0]]"),
        412_000.0 + x,
        5_360_000.0 + y,
    ))
}

/// s at the borehole wall: near the well w − w₀ = w′(z₀) r, w′ = π/L sin(πz/L).
fn own_drawdown_m(x: f64, y: f64) -> f64 {
    let z = PI / WIDTH_M * Complex64::new(x, y);
    let (w, slope) = (-z.cos(), PI / WIDTH_M * z.sin());
    let ratio = 2.0 * w.im / (slope.norm() * 0.2);
    1000.0 / (2.0 * PI * 500.0) * ratio.ln()
}

/// Many places, the middle among them, where rounding has its whims.
#[test]
fn a_well_between_three_rivers_draws_itself_down_as_the_cosine_map_says() {
    for x in [20.0, 333.3, 500.0, 750.0] {
        for y in [10.0, 375.0, 1234.5, 4000.0] {
            let ours = half_strip(x, y).field.own_drawdown_m(0);
            let theirs = own_drawdown_m(x, y);
            assert!(
                (ours - theirs).abs() < 1e-11,
                "({x}, {y}): {ours}, map {theirs}"
            );
        }
    }
}
