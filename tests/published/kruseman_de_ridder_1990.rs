//! Source: Kruseman & de Ridder (1990), *Analysis and Evaluation of Pumping
//! Test Data*, ILRI Publication 47, chapter 3: the Oude Korendijk test (Wit
//! 1963). Q = 788 m³/d; after 830 min the drawdowns were 1.088 m at 30 m and
//! 0.716 m at 90 m, 2.236 m in the well (0.8 m). The book finds 370 m²/d
//! between 30 and 90 m by Thiem, 396 between 0.8 and 30 m, 390 between 0.8 and
//! 90 m; its arithmetic is to three digits. The results are from memory.

use std::f64::consts::PI;

use crate::plans::Solved;

/// The plan of the test with a transmissivity in m²/d.
fn oude_korendijk(transmissivity: f64) -> Solved {
    Solved::of(&format!(
        r#"
title = "Oude Korendijk"
crs = "EPSG:32631"
units = "metric"
[aquifer]
transmissivity = {transmissivity}
influence_radius = 500.0
[ambient]
head = 0.0
at = [600000.0, 5740000.0]
[[well]]
name = "pumped"
at = [600000.0, 5740000.0]
pumping = 788.0
radius = 0.8
"#
    ))
}

fn drawdown_m(solved: &Solved, distance_m: f64) -> f64 {
    if distance_m == 0.8 {
        return solved.field.own_drawdown_m(0);
    }
    solved.drawdown_m(600_000.0 + distance_m, 5_740_000.0)
}

/// With the published transmissivity the program must find the observed
/// difference of drawdowns, to what three digits of the book allow: half a
/// unit of 370 is 0.14 %, and the drawdowns are read to 1 mm.
#[test]
fn the_books_transmissivities_give_back_the_observed_differences() {
    for (transmissivity, near, far, observed_m) in [
        (370.0, 30.0, 90.0, 1.088 - 0.716),
        (396.0, 0.8, 30.0, 2.236 - 1.088),
        (390.0, 0.8, 90.0, 2.236 - 0.716),
    ] {
        let solved = oude_korendijk(transmissivity);
        let ours = drawdown_m(&solved, near) - drawdown_m(&solved, far);
        let allowed = 0.0014 * observed_m + 0.001;
        assert!(
            (ours - observed_m).abs() <= allowed,
            "{near} to {far} m: {ours}, observed {observed_m}"
        );
    }
}

/// The same without the book's rounding: T = Q ln(r₂/r₁)/(2π Δs) put in gives
/// Δs out.
#[test]
fn the_unrounded_transmissivity_gives_back_the_observed_difference_exactly() {
    let transmissivity = 788.0 / (2.0 * PI * (1.088 - 0.716)) * 3f64.ln();
    assert!((transmissivity - 370.380_285_245).abs() < 1e-8);
    let solved = oude_korendijk(transmissivity);
    let ours = drawdown_m(&solved, 30.0) - drawdown_m(&solved, 90.0);
    assert!((ours - 0.372).abs() < 1e-12, "{ours}");
}
