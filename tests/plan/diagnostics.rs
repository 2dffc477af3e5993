//! Faults as other programs read them, and in colours.

use crate::support::{read, spoilt};

#[test]
fn faults_are_listed_with_file_line_column_what_and_help() {
    let faults = read(&spoilt("radius = 0.2", "radius = -0.2")).unwrap_err();
    let json = serde_json::to_value(faults.list()).unwrap();
    assert_eq!(
        json,
        serde_json::json!([{
            "file": "plan.toml",
            "line": 16,
            "column": 10,
            "what": "well `PW-1`: `radius` must be at least 0.001 m, but is -0.2 m",
            "why": null,
            "help": "write a value at least 0.001 m: radius of the borehole wall at the screen",
        }])
    );
}

#[test]
fn colours_appear_only_when_asked() {
    let faults = read(&spoilt("radius = 0.2", "radius = -0.2")).unwrap_err();
    assert!(faults.render(true).contains('\u{1b}'));
    assert!(!faults.render(false).contains('\u{1b}'));
    assert_eq!(faults.to_string(), faults.render(false));
}
