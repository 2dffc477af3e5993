//! Rivers and barriers with what they give.

use mirrorwell::layers::{OUTPUTS, Output};
use serde_json::Value;

use crate::support::made;

/// A river on whose bank a barrier cuts off a bay without wells: two parts.
const BAY: &str = r#"
title = "Bay"
crs = "EPSG:32633"
units = "metric"
[aquifer]
transmissivity = 600.0
[map]
extent = [410000.0, 5359900.0, 412000.0, 5361500.0]
spacing = 50.0
[[river]]
name = "Ostra"
line = [[410000.0, 5360000.0], [412000.0, 5360000.0]]
stage = 50.0
[[barrier]]
name = "wall"
line = [[410900.0, 5360000.0], [410900.0, 5360300.0], [411200.0, 5360300.0], [411200.0, 5360000.0]]
[[well]]
name = "PW-1"
at = [410600.0, 5360400.0]
pumping = 900.0
radius = 0.2
"#;

fn features(plan: &str) -> Vec<Value> {
    let layer: Value = serde_json::from_slice(&made(plan, "boundaries")).unwrap();
    layer["features"].as_array().unwrap().clone()
}

/// The parts of a river that gives all the water give all of it together, and
/// the nearer part more.
#[test]
fn each_part_of_a_river_has_its_own_inflow() {
    let inflows: Vec<f64> = features(BAY)
        .iter()
        .filter(|feature| feature["properties"]["name"] == "Ostra")
        .map(|feature| feature["properties"]["inflow_m3_per_d"].as_f64().unwrap())
        .collect();
    assert_eq!(inflows.len(), 2);
    approx::assert_relative_eq!(inflows.iter().sum::<f64>(), 900.0, max_relative = 1e-4);
    let most = inflows.iter().copied().fold(0.0, f64::max);
    assert!(most > 600.0 && most < 890.0, "{inflows:?}");
}

/// A river in one part gives what the findings say, to the last digit.
#[test]
fn a_river_in_one_part_has_the_findings_inflow() {
    let demo = include_str!("../../examples/demo.toml");
    let findings: Value = serde_json::from_slice(&made(demo, "findings")).unwrap();
    let layer = features(demo);
    let ostra = |feature: &&Value| feature["properties"]["name"] == "Ostra";
    let drawn = layer.iter().find(ostra).unwrap();
    assert_eq!(
        drawn["properties"]["inflow_m3_per_d"],
        findings["boundaries"][0]["inflow_m3_per_d"]
    );
}

#[test]
fn every_layer_and_raster_has_a_style() {
    let styled = |output: &&Output| !output.properties.is_empty();
    for output in OUTPUTS.iter().filter(styled) {
        assert_eq!(output.files.len(), 2, "{}", output.name);
        assert_eq!(output.files[1], format!("{}.sld", output.name));
    }
}
