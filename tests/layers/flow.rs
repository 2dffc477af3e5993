//! Flow arrows against Darcy's law worked by hand.
//!
//! Source: Darcy (1856), q = K i; for an anisotropic aquifer Bear (1972),
//! *Dynamics of Fluids in Porous Media*, section 5.6, from memory: each
//! principal direction has its own K.

use serde_json::Value;

use crate::support::made;

/// An endless aquifer with even flow; the well pumps next to nothing.
fn plan(units: &str, aquifer: &str) -> String {
    format!(
        r#"
title = "Even flow"
crs = {{ origin = [15.0, 48.0] }}
units = "{units}"
[aquifer]
conductivity = 40.0
thickness = 25.0
influence_radius = 5000.0
{aquifer}
[ambient]
head = 60.0
at = [0.0, 0.0]
gradient = 0.002
toward = 110.0
[[well]]
name = "PW-1"
at = [3.0, 7.0]
pumping = 1e-9
radius = 0.15
"#
    )
}

/// Azimuth and flux of every arrow.
fn arrows(plan: &str, flux: &str) -> Vec<[f64; 2]> {
    let layer: Value = serde_json::from_slice(&made(plan, "flow")).unwrap();
    let features = layer["features"].as_array().unwrap().iter();
    features
        .map(|feature| ["azimuth", flux].map(|name| feature["properties"][name].as_f64().unwrap()))
        .collect()
}

/// The well's own pull, Q/(2πrT) at the nearest arrow, is below 1e-12 m/d; the
/// rest is rounding.
fn assert_all(arrows: &[[f64; 2]], azimuth: f64, flux: f64) {
    assert!(arrows.len() > 300);
    for [given_azimuth, given_flux] in arrows {
        assert!((given_azimuth - azimuth).abs() < 1e-6, "{given_azimuth}");
        assert!((given_flux - flux).abs() < 1e-9 * flux, "{given_flux}");
    }
}

/// 40 m/d · 0.002 = 0.08 m/d.
#[test]
fn even_flow_has_the_flux_of_darcy_s_law_in_its_own_direction() {
    assert_all(&arrows(&plan("metric", ""), "flux_m_per_d"), 110.0, 0.08);
}

/// 40 ft/d · 0.002 = 0.08 ft/d.
#[test]
fn a_plan_in_us_units_gets_feet_a_day() {
    let plan = plan("us", "");
    assert_all(&arrows(&plan, "flux_ft_per_d"), 110.0, 0.08);
}

/// K₁ = 40 · √9 = 120 along azimuth 80°, K₂ = 40/√9 across it, at 170°; the
/// slope has 0.002 cos 30° along and 0.002 sin 30° across.
#[test]
fn water_turns_towards_the_direction_of_the_largest_conductivity() {
    let plan = plan("metric", "anisotropy = { ratio = 9.0, azimuth = 80.0 }");
    let (sin, cos) = 30_f64.to_radians().sin_cos();
    let (along, across) = (120.0 * 0.002 * cos, 40.0 / 3.0 * 0.002 * sin);
    let azimuth = 80.0 + across.atan2(along).to_degrees();
    assert_all(&arrows(&plan, "flux_m_per_d"), azimuth, along.hypot(across));
}

/// All arrows lie in the aquifer and point away from where water enters: the
/// river feeds the well, so beside the river they point inland.
#[test]
fn beside_a_river_that_feeds_a_well_the_arrows_point_inland() {
    let plan = r#"
title = "River"
crs = { origin = [15.0, 48.0] }
units = "metric"
[aquifer]
conductivity = 40.0
thickness = 25.0
[[river]]
name = "Ostra"
line = [[0.0, -1000.0], [0.0, 1000.0]]
stage = 60.0
[[well]]
name = "PW-1"
at = [100.0, 0.0]
pumping = 1000.0
radius = 0.15
[map]
extent = [-100.0, -100.0, 300.0, 300.0]
"#;
    let layer: Value = serde_json::from_slice(&made(plan, "flow")).unwrap();
    let features = layer["features"].as_array().unwrap();
    // 20 × 20 places, a quarter of the map beyond the river.
    assert_eq!(features.len(), 300);
    let (west, east): (Vec<_>, Vec<_>) = features.iter().partition(|feature| {
        feature["geometry"]["coordinates"][0].as_f64().unwrap() < 15.0 + 40.0 / 74_600.0
    });
    assert_eq!(west.len(), 40);
    assert_eq!(east.len(), 260);
    for feature in west {
        let azimuth = feature["properties"]["azimuth"].as_f64().unwrap();
        assert!(azimuth > 0.0 && azimuth < 180.0, "{azimuth}");
    }
}
