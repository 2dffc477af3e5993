//! `mirrorwell run`.

use crate::support::{FAR, SMALL, folder, mirrorwell, outcome, printed, with_plan};

#[test]
fn the_demo_prints_a_summary_for_people() {
    let folder = folder();
    insta::assert_snapshot!(printed(&outcome(folder.path(), &["run"])));
}

#[test]
fn a_small_plan_prints_a_summary_for_people() {
    insta::assert_snapshot!(printed(&with_plan(SMALL, "run")));
}

#[test]
fn quiet_says_nothing_when_all_goes_well() {
    let folder = folder();
    let output = outcome(folder.path(), &["run", "--quiet"]);
    assert_eq!(
        printed(&output),
        "exit status 0\n--- standard output\n--- standard error\n"
    );
    assert!(folder.path().join("mirrorwell-out/findings.json").is_file());
}

#[test]
fn strict_ends_with_status_3_when_a_limit_is_broken() {
    let folder = folder();
    let output = outcome(folder.path(), &["run", "--strict", "--quiet"]);
    assert_eq!(output.status.code(), Some(3));
    assert!(String::from_utf8_lossy(&output.stderr).contains("limits are broken"));
    // The files are there all the same.
    assert!(folder.path().join("mirrorwell-out/wells.geojson").is_file());
}

#[test]
fn strict_ends_with_status_0_when_all_limits_are_kept() {
    let folder = folder();
    let plan = SMALL.replace("allowed_drawdown = 0.3", "allowed_drawdown = 3.0");
    std::fs::write(folder.path().join("plan.toml"), plan).unwrap();
    mirrorwell(folder.path())
        .args(["run", "plan.toml", "--strict"])
        .assert()
        .code(0);
}

/// The plan has no limit to break, but asks for more than was proven.
#[test]
fn strict_ends_with_status_3_when_the_plan_s_accuracy_is_missed() {
    let folder = folder();
    std::fs::write(folder.path().join("plan.toml"), FAR).unwrap();
    let output = outcome(folder.path(), &["run", "plan.toml", "--strict"]);
    insta::assert_snapshot!(printed(&output));
    let findings = std::fs::read(folder.path().join("mirrorwell-out/findings.json")).unwrap();
    let document: serde_json::Value = serde_json::from_slice(&findings).unwrap();
    let flag = &document["flags"][0];
    assert_eq!(flag["code"], "accuracy-not-reached");
    assert_eq!(flag["kind"], "aquifer");
    assert_eq!(flag["who"], "PW-1");
    assert_eq!(flag["value_m"], document["outline"]["error_bound_m"]);
    assert_eq!(flag["limit_m"], 1e-9);
}

/// 25 m/d · 18 m · 1.5 m / 1800 m · 1200 m = 450 m³/d flow from the river to
/// the canal before pumping.
#[test]
fn the_findings_state_what_rivers_and_aquifer_exchange() {
    let folder = folder();
    let plan = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join("examples/box.toml");
    outcome(folder.path(), &["run", plan.to_str().unwrap()]);
    let findings = std::fs::read(folder.path().join("mirrorwell-out/findings.json")).unwrap();
    let document: serde_json::Value = serde_json::from_slice(&findings).unwrap();
    for (boundary, before) in [(0, 450.0), (1, -450.0), (2, 0.0)] {
        let boundary = &document["boundaries"][boundary];
        let rate = |name: &str| boundary[name].as_f64().unwrap();
        assert!((rate("exchange_before_m3_per_d") - before).abs() < 1e-9);
        let after = before + rate("inflow_m3_per_d");
        assert!((rate("exchange_after_m3_per_d") - after).abs() < 1e-9);
    }
}

/// Ambient flow crosses an endless creek.
#[test]
fn an_exchange_that_is_no_number_is_null() {
    let folder = folder();
    let plan = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join("examples/us_units.toml");
    outcome(folder.path(), &["run", plan.to_str().unwrap()]);
    let findings = std::fs::read(folder.path().join("mirrorwell-out/findings.json")).unwrap();
    let document: serde_json::Value = serde_json::from_slice(&findings).unwrap();
    assert!(document["boundaries"][0]["exchange_before_gpm"].is_null());
    assert!(document["boundaries"][0]["exchange_after_gpm"].is_null());
}

#[test]
fn a_plan_that_is_not_there_is_refused() {
    let folder = folder();
    let output = outcome(folder.path(), &["run", "nowhere.toml"]);
    assert_eq!(output.status.code(), Some(2));
    assert!(String::from_utf8_lossy(&output.stderr).contains("nowhere.toml"));
}

#[test]
fn every_example_runs() {
    let examples = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join("examples");
    for plan in [
        "box.toml",
        "us_units.toml",
        "two_banks.toml",
        "gis/plan.toml",
    ] {
        let folder = folder();
        let path = examples.join(plan);
        let output = outcome(folder.path(), &["run", path.to_str().unwrap()]);
        assert!(output.status.success(), "{}", printed(&output));
        insta::assert_snapshot!(plan.replace('/', "_"), printed(&output));
    }
}

/// In a closed basin no rate may change alone.
#[test]
fn a_closed_basin_in_balance_is_planned_and_kept_in_balance() {
    let plan = r#"
title = "Closed basin"
crs = "EPSG:32633"
units = "metric"
[aquifer]
transmissivity = 400.0
[ambient]
head = 50.0
[[barrier]]
name = "rim"
line = [[412000.0, 5360000.0], [413000.0, 5360000.0], [413000.0, 5361500.0], [412000.0, 5361500.0], [412000.0, 5360000.0]]
[[well]]
name = "P"
at = [412300.0, 5360500.0]
pumping = 900.0
radius = 0.2
lowest_level = 48.0
[[well]]
name = "I"
at = [412700.0, 5361100.0]
injection = 900.0
radius = 0.2
"#;
    insta::assert_snapshot!(printed(&with_plan(plan, "run")));
}
