//! `mirrorwell check`.

use crate::support::{FAR, SMALL, folder, outcome, printed, with_plan};

#[test]
fn the_demo_is_looked_over() {
    let folder = folder();
    insta::assert_snapshot!(printed(&outcome(folder.path(), &["check"])));
    // Nothing was written.
    assert_eq!(std::fs::read_dir(folder.path()).unwrap().count(), 0);
}

#[test]
fn what_looks_wrong_is_said() {
    let plan = SMALL
        .replace("pumping = 1000.0", "pumping = 0.0\nlowest_level = 70.0")
        .replace("radius = 0.15", "radius = 15.0")
        .replace("roof = 40.0", "roof = 61.0")
        .replace("transmissivity = 500.0", "transmissivity = 0.5")
        .replace("allowed_drawdown = 0.3", "");
    insta::assert_snapshot!(printed(&with_plan(&plan, "check")));
}

#[test]
fn an_accuracy_that_is_missed_is_said() {
    insta::assert_snapshot!(printed(&with_plan(FAR, "check")));
}

#[test]
fn programs_get_one_json_document() {
    let folder = folder();
    let output = outcome(folder.path(), &["check", "--json"]);
    let document: serde_json::Value = serde_json::from_slice(&output.stdout).unwrap();
    assert_eq!(document["solvable"], true);
    assert_eq!(document["outlines"][0]["shape"], "strip");
    assert_eq!(document["outlines"][0]["accuracy_reached"], true);
    assert!(document["outlines"][0]["error_bound_m"].as_f64().unwrap() < 1e-9);
    assert!(output.stderr.is_empty());
}

#[test]
fn programs_get_a_json_document_of_a_refused_plan_too() {
    let folder = folder();
    let plan = SMALL.replace("stage = 60.0", "stage = \"deep\"");
    std::fs::write(folder.path().join("plan.toml"), plan).unwrap();
    let output = outcome(folder.path(), &["check", "plan.toml", "--json"]);
    assert_eq!(output.status.code(), Some(2));
    let document: serde_json::Value = serde_json::from_slice(&output.stdout).unwrap();
    assert_eq!(document["solvable"], false);
    assert_eq!(document["faults"][0]["line"], 11);
}
