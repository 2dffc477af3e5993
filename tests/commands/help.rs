//! Help, completions, the manual page, schema and materials.

use crate::support::{folder, mirrorwell, outcome, printed};

#[test]
fn the_help_shows_every_command() {
    let folder = folder();
    insta::assert_snapshot!(printed(&outcome(folder.path(), &["--help"])));
}

#[test]
fn the_help_of_run_shows_a_worked_example() {
    let folder = folder();
    insta::assert_snapshot!(printed(&outcome(folder.path(), &["run", "--help"])));
}

#[test]
fn a_command_that_does_not_exist_is_refused_with_the_nearest() {
    let folder = folder();
    let output = outcome(folder.path(), &["rum"]);
    assert_eq!(output.status.code(), Some(2));
    assert!(String::from_utf8_lossy(&output.stderr).contains("'run'"));
}

#[test]
fn completions_exist_for_every_shell() {
    let folder = folder();
    for shell in ["bash", "zsh", "fish", "powershell", "elvish"] {
        let output = outcome(folder.path(), &["completions", shell]);
        assert_eq!(output.status.code(), Some(0), "{shell}");
        assert!(
            String::from_utf8_lossy(&output.stdout).contains("heads"),
            "{shell}"
        );
    }
}

#[test]
fn the_manual_page_tells_of_every_command() {
    let folder = folder();
    let output = outcome(folder.path(), &["manual"]);
    let page = String::from_utf8_lossy(&output.stdout).into_owned();
    assert!(page.starts_with(".ie"));
    for command in ["run", "check", "heads", "schema", "materials"] {
        assert!(page.contains(&format!("mirrorwell {command}")), "{command}");
    }
}

#[test]
fn the_schema_is_a_json_document() {
    let folder = folder();
    let output = outcome(folder.path(), &["schema"]);
    let schema: serde_json::Value = serde_json::from_slice(&output.stdout).unwrap();
    assert!(schema["properties"]["well"].is_object());
}

#[test]
fn every_material_has_a_source() {
    let folder = folder();
    let output = outcome(folder.path(), &["materials", "--json"]);
    let materials: serde_json::Value = serde_json::from_slice(&output.stdout).unwrap();
    let materials = materials.as_array().unwrap();
    assert!(materials.len() >= 10);
    assert!(
        materials
            .iter()
            .all(|m| !m["source"].as_str().unwrap().is_empty())
    );
}

#[test]
fn a_reader_that_stops_reading_is_no_error() {
    // The output is larger than a pipe holds, and nobody reads it.
    let folder = folder();
    let mut child = std::process::Command::new(assert_cmd::cargo::cargo_bin("mirrorwell"))
        .arg("schema")
        .stdout(std::process::Stdio::piped())
        .stderr(std::process::Stdio::piped())
        .current_dir(folder.path())
        .spawn()
        .unwrap();
    drop(child.stdout.take());
    let output = child.wait_with_output().unwrap();
    assert_eq!(output.status.code(), Some(0));
    assert!(output.stderr.is_empty());
    mirrorwell(folder.path()).arg("schema").assert().code(0);
}
