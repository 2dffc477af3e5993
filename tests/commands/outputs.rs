//! Which outputs there are, and writing some of them.

use std::fs;
use std::path::Path;

use serde_json::Value;

use crate::support::{SMALL, folder, outcome, printed};

/// The names of the files in a folder, sorted.
fn names(folder: &Path) -> Vec<String> {
    let entries = fs::read_dir(folder).unwrap();
    let mut names: Vec<String> = entries
        .map(|entry| entry.unwrap().file_name().into_string().unwrap())
        .collect();
    names.sort();
    names
}

#[test]
fn the_outputs_are_listed_with_their_properties_and_units() {
    insta::assert_snapshot!(printed(&outcome(folder().path(), &["layers"])));
}

/// Every feature that a run writes has the listed properties, in their order.
#[test]
fn the_list_for_programs_names_the_properties_that_are_written() {
    let examples = Path::new(env!("CARGO_MANIFEST_DIR")).join("examples");
    let listed = outcome(folder().path(), &["layers", "--json"]).stdout;
    let listed: Value = serde_json::from_slice(&listed).unwrap();
    for (plan, units) in [("demo.toml", "metric"), ("us_units.toml", "us")] {
        let folder = folder();
        let plan = examples.join(plan);
        outcome(folder.path(), &["run", plan.to_str().unwrap(), "--quiet"]);
        let out = folder.path().join("mirrorwell-out");
        for output in listed.as_array().unwrap() {
            let file = output["files"][0].as_str().unwrap();
            if !file.ends_with(".geojson") {
                assert!(out.join(file).is_file(), "{file}");
                continue;
            }
            let properties = output["properties"][units].as_array().unwrap();
            let expected: Vec<&str> = properties
                .iter()
                .map(|property| property["name"].as_str().unwrap())
                .collect();
            let layer: Value = serde_json::from_slice(&fs::read(out.join(file)).unwrap()).unwrap();
            for feature in layer["features"].as_array().unwrap() {
                let given = feature["properties"].as_object().unwrap();
                assert!(given.keys().eq(&expected), "{file}: {given:?}");
            }
        }
    }
}

#[test]
fn only_what_is_named_is_written_with_the_same_bytes() {
    let folder = folder();
    assert!(
        outcome(folder.path(), &["run", "--out", "all"])
            .status
            .success()
    );
    let only = [
        "run",
        "--out",
        "some",
        "--only",
        "wells,head_contours",
        "--only",
        "head",
    ];
    assert!(outcome(folder.path(), &only).status.success());
    let some = folder.path().join("some");
    let written = names(&some);
    assert_eq!(
        written,
        [
            "head.sld",
            "head.tif",
            "head_contours.geojson",
            "head_contours.sld",
            "wells.geojson",
            "wells.sld"
        ]
    );
    for name in written {
        let all = fs::read(folder.path().join("all").join(&name)).unwrap();
        assert!(all == fs::read(some.join(&name)).unwrap(), "{name}");
    }
}

#[test]
fn what_is_not_named_stays_as_the_last_run_left_it() {
    let folder = folder();
    assert!(outcome(folder.path(), &["run"]).status.success());
    let out = folder.path().join("mirrorwell-out");
    let (before, findings) = (names(&out), fs::read(out.join("findings.json")).unwrap());
    let wells = fs::read(out.join("wells.geojson")).unwrap();
    fs::write(folder.path().join("plan.toml"), SMALL).unwrap();
    let only = ["run", "plan.toml", "--only", "wells"];
    assert!(outcome(folder.path(), &only).status.success());
    assert_eq!(names(&out), before);
    assert!(findings == fs::read(out.join("findings.json")).unwrap());
    assert!(wells != fs::read(out.join("wells.geojson")).unwrap());
}

#[test]
fn a_name_that_no_output_has_is_refused_and_nothing_is_written() {
    let folder = folder();
    let output = outcome(folder.path(), &["run", "--only", "wells,head_contour"]);
    insta::assert_snapshot!(printed(&output));
    assert!(names(folder.path()).is_empty());
}

#[test]
fn a_plan_without_a_thickness_gets_directions_without_flux_and_a_note() {
    let folder = folder();
    fs::write(folder.path().join("plan.toml"), SMALL).unwrap();
    let output = outcome(folder.path(), &["run", "plan.toml"]);
    assert!(String::from_utf8_lossy(&output.stderr).contains("no flux"));
    let layer = fs::read(folder.path().join("mirrorwell-out/flow.geojson")).unwrap();
    let layer: Value = serde_json::from_slice(&layer).unwrap();
    let features = layer["features"].as_array().unwrap();
    assert!(features.len() > 50);
    assert!(layer["note"].as_str().unwrap().contains("no flux"));
    for feature in features {
        assert!(feature["properties"]["azimuth"].is_number());
        assert!(feature["properties"]["flux_m_per_d"].is_null());
    }
}
