//! Source: Newsom & Wilson (1988), "Flow of ground water to a well near a
//! stream: effect of ambient ground-water flow direction", Ground Water 26(6),
//! and Wilson (1993), Water Resources Research 29(10), from memory. A well at
//! d from a river that ambient flow q₀ = T i enters takes river water only
//! above the critical rate π d q₀. Numbers: `tests/references/
//! captured_river_water.py`.

use std::f64::consts::PI;

use crate::plans::Solved;
use crate::table::rows;

const TRANSMISSIVITY: f64 = 600.0;
const GRADIENT: f64 = 0.002;
const DISTANCE_M: f64 = 250.0;
const RIVER_X: f64 = 600_000.0;
const WELL_Y: f64 = 5_740_000.0;

/// A well east of a river that flow from the east enters, pumping `beta`
/// times the critical rate.
fn pumping(beta: f64) -> Solved {
    let rate = beta * PI * DISTANCE_M * TRANSMISSIVITY * GRADIENT;
    Solved::of(&format!(
        r#"
title = "A well near a gaining river"
crs = "EPSG:32631"
units = "metric"
[aquifer]
transmissivity = {TRANSMISSIVITY}
[ambient]
gradient = {GRADIENT}
toward = 270.0
[[river]]
name = "river"
line = [[{RIVER_X}, 5739000.0], [{RIVER_X}, 5741000.0]]
stage = 10.0
[[well]]
name = "P"
at = [{}, {WELL_Y}]
pumping = {rate:?}
radius = 0.15
"#,
        RIVER_X + DISTANCE_M
    ))
}

/// Net flow from the river into the aquifer at y along it, m²/d.
fn inflow_m2_d(solved: &Solved, y: f64) -> f64 {
    -TRANSMISSIVITY * solved.field.head_gradient(solved.at(RIVER_X, WELL_Y + y)).x
}

/// Gradients of 2e-3 from places rounded to 1e-10 of 250 m.
const GRADIENT_TOLERANCE: f64 = 1e-13;

#[test]
fn below_the_critical_rate_the_flow_stands_still_between_river_and_well() {
    for row in rows("captured_river_water") {
        if row.number("beta") >= 1.0 {
            continue;
        }
        let solved = pumping(row.number("beta"));
        let x = RIVER_X + DISTANCE_M * row.number("stagnation_over_d");
        let gradient = solved.field.head_gradient(solved.at(x, WELL_Y));
        assert!(gradient.norm() < GRADIENT_TOLERANCE, "{gradient}");
        assert!(
            inflow_m2_d(&solved, 0.0) < 0.0,
            "the river gains everywhere"
        );
    }
}

#[test]
fn at_the_critical_rate_the_river_neither_gains_nor_loses_before_the_well() {
    let solved = pumping(1.0);
    assert!(inflow_m2_d(&solved, 0.0).abs() < GRADIENT_TOLERANCE * TRANSMISSIVITY);
}

/// Simpson's rule over 2000 intervals of a smooth curve: 1e-12 of itself.
#[test]
fn above_the_critical_rate_the_losing_reach_gives_the_published_share() {
    const INTERVALS: u32 = 2000;
    for row in rows("captured_river_water") {
        let beta = row.number("beta");
        if beta <= 1.0 {
            continue;
        }
        let solved = pumping(beta);
        let reach = DISTANCE_M * row.number("losing_half_reach_over_d");
        for y in [-reach, reach] {
            let inflow = inflow_m2_d(&solved, y);
            assert!(inflow.abs() < 1e-9, "β = {beta}: {inflow} at its end");
        }
        let step = 2.0 * reach / f64::from(INTERVALS);
        let integral: f64 = (0..=INTERVALS)
            .map(|i| {
                let weight = match i {
                    0 | INTERVALS => 1.0,
                    odd if odd % 2 == 1 => 4.0,
                    _ => 2.0,
                };
                weight * inflow_m2_d(&solved, -reach + f64::from(i) * step)
            })
            .sum::<f64>()
            * step
            / 3.0;
        let share = integral / (beta * PI * DISTANCE_M * TRANSMISSIVITY * GRADIENT);
        let published = row.number("river_share");
        assert!(
            (share - published).abs() < 1e-8,
            "β = {beta}: {share}, published {published}"
        );
    }
}
