//! What `run` writes to the disk, and what it leaves alone.

use std::collections::BTreeMap;
use std::fs;
use std::path::Path;

use mirrorwell::layers::OUTPUTS;

use crate::support::{SMALL, folder, mirrorwell, outcome};

/// How many files a run writes.
fn count() -> usize {
    OUTPUTS.iter().map(|output| output.files.len()).sum()
}

/// Every file of a folder, by name.
fn files(folder: &Path) -> BTreeMap<String, Vec<u8>> {
    fs::read_dir(folder)
        .unwrap()
        .map(|entry| entry.unwrap())
        .map(|entry| {
            (
                entry.file_name().into_string().unwrap(),
                fs::read(entry.path()).unwrap(),
            )
        })
        .collect()
}

#[test]
fn the_files_of_the_contract_are_written_and_no_others() {
    let folder = folder();
    assert!(outcome(folder.path(), &["run"]).status.success());
    let names: Vec<String> = files(&folder.path().join("mirrorwell-out"))
        .into_keys()
        .collect();
    assert_eq!(
        names,
        [
            "boundaries.geojson",
            "boundaries.sld",
            "drawdown.sld",
            "drawdown.tif",
            "drawdown_bands.geojson",
            "drawdown_bands.sld",
            "drawdown_contours.geojson",
            "drawdown_contours.sld",
            "findings.json",
            "flow.geojson",
            "flow.sld",
            "head.sld",
            "head.tif",
            "head_contours.geojson",
            "head_contours.sld",
            "image_wells.geojson",
            "image_wells.sld",
            "interference.csv",
            "neighbours.geojson",
            "neighbours.sld",
            "report.html",
            "results.gpkg",
            "river_reaches.geojson",
            "river_reaches.sld",
            "wells.geojson",
            "wells.sld",
        ]
    );
    // Nothing is left beside the folder.
    assert_eq!(fs::read_dir(folder.path()).unwrap().count(), 1);
}

#[test]
fn the_same_plan_gives_the_same_bytes_at_any_number_of_threads() {
    let folder = folder();
    for (threads, out) in [("1", "one"), ("2", "two"), ("7", "seven")] {
        assert!(
            outcome(folder.path(), &["run", "--threads", threads, "--out", out])
                .status
                .success()
        );
    }
    let one = files(&folder.path().join("one"));
    assert!(one == files(&folder.path().join("two")));
    assert!(one == files(&folder.path().join("seven")));
}

/// A bent river that meets a barrier, with a lake: solved by the general solver,
/// whose matrices, sums and maps are shared out among the threads.
const BENT: &str = r#"
title = "Bent"
crs = { origin = [15.0, 48.0] }
units = "metric"
[aquifer]
conductivity = 25.0
thickness = 20.0
roof = 40.0
[[river]]
name = "Ostra"
line = [[-900.0, 60.0], [-200.0, -40.0], [150.0, 180.0], [700.0, 0.0]]
stage = [61.0, 60.6, 60.2, 60.0]
[[barrier]]
name = "granite edge"
line = [[700.0, 0.0], [820.0, 900.0]]
[[river]]
name = "Round lake"
circle = { centre = [250.0, 520.0], radius = 90.0 }
stage = 59.8
[[well]]
name = "PW-1"
at = [-150.0, 170.0]
pumping = 900.0
radius = 0.15
[[well]]
name = "PW-2"
at = [520.0, 300.0]
pumping = 600.0
radius = 0.15
[[neighbour]]
name = "Lot 14"
area = [[0.0, 300.0], [120.0, 300.0], [60.0, 420.0]]
allowed_drawdown = 0.3
[map]
extent = [-700.0, -150.0, 900.0, 800.0]
spacing = 20.0
"#;

#[test]
fn a_bent_outline_gives_the_same_bytes_at_any_number_of_threads() {
    let folder = folder();
    fs::write(folder.path().join("plan.toml"), BENT).unwrap();
    let of = |threads: &str| {
        let run = ["run", "plan.toml", "--threads", threads, "--out", threads];
        let done = outcome(folder.path(), &run);
        assert!(done.status.success(), "{done:?}");
        files(&folder.path().join(threads))
    };
    let one = of("1");
    assert_eq!(one.len(), count());
    let findings = String::from_utf8_lossy(&one["findings.json"]);
    assert!(
        findings.contains("general solver on the edges"),
        "{findings}"
    );
    for threads in ["2", "4"] {
        let other = of(threads);
        let names = one.keys().filter(|name| one.get(*name) != other.get(*name));
        let names: Vec<&String> = names.collect();
        assert!(
            names.is_empty() && other.len() == one.len(),
            "{threads}: {names:?}"
        );
    }
}

#[test]
fn a_second_run_replaces_the_files_of_the_first() {
    let folder = folder();
    assert!(outcome(folder.path(), &["run"]).status.success());
    let demo = files(&folder.path().join("mirrorwell-out"));
    fs::write(folder.path().join("plan.toml"), SMALL).unwrap();
    assert!(
        outcome(folder.path(), &["run", "plan.toml"])
            .status
            .success()
    );
    let small = files(&folder.path().join("mirrorwell-out"));
    assert!(demo.keys().eq(small.keys()));
    assert!(demo["findings.json"] != small["findings.json"]);
}

#[test]
fn a_refused_run_leaves_the_last_good_run_s_files_as_they_were() {
    let folder = folder();
    assert!(outcome(folder.path(), &["run"]).status.success());
    let before = files(&folder.path().join("mirrorwell-out"));
    fs::write(
        folder.path().join("plan.toml"),
        SMALL.replace("radius = 0.15", "radius = -1.0"),
    )
    .unwrap();
    let output = outcome(folder.path(), &["run", "plan.toml"]);
    assert_eq!(output.status.code(), Some(2));
    assert!(before == files(&folder.path().join("mirrorwell-out")));
}

#[test]
fn files_that_are_not_a_run_s_are_left_alone() {
    let folder = folder();
    let out = folder.path().join("mirrorwell-out");
    fs::create_dir(&out).unwrap();
    fs::write(out.join("notes.txt"), "mine").unwrap();
    assert!(outcome(folder.path(), &["run"]).status.success());
    assert!(outcome(folder.path(), &["run"]).status.success());
    let after = files(&out);
    assert_eq!(after["notes.txt"], b"mine");
    assert_eq!(after.len(), count() + 1);
}

#[test]
fn a_file_in_the_place_of_the_folder_is_refused_and_left_alone() {
    let folder = folder();
    fs::write(folder.path().join("taken"), "mine").unwrap();
    let output = outcome(folder.path(), &["run", "--out", "taken"]);
    assert_eq!(output.status.code(), Some(2));
    assert_eq!(fs::read(folder.path().join("taken")).unwrap(), b"mine");
}

#[test]
fn the_folder_in_which_one_stands_can_be_the_target() {
    let folder = folder();
    assert!(
        outcome(folder.path(), &["run", "--out", "."])
            .status
            .success()
    );
    assert!(
        outcome(folder.path(), &["run", "--out", "."])
            .status
            .success()
    );
    assert_eq!(files(folder.path()).len(), count());
}

#[cfg(unix)]
#[test]
fn a_link_to_a_folder_stays_a_link() {
    let folder = folder();
    fs::create_dir(folder.path().join("real")).unwrap();
    std::os::unix::fs::symlink("real", folder.path().join("link")).unwrap();
    assert!(
        outcome(folder.path(), &["run", "--out", "link"])
            .status
            .success()
    );
    assert!(folder.path().join("link").is_symlink());
    assert_eq!(files(&folder.path().join("real")).len(), count());
}

#[cfg(unix)]
#[test]
fn others_may_read_the_folder_as_the_user_s_mask_says() {
    use std::os::unix::fs::PermissionsExt;
    let folder = folder();
    assert!(outcome(folder.path(), &["run"]).status.success());
    let made = fs::metadata(folder.path().join("mirrorwell-out")).unwrap();
    fs::create_dir(folder.path().join("plain")).unwrap();
    let plain = fs::metadata(folder.path().join("plain")).unwrap();
    assert_eq!(made.permissions().mode(), plain.permissions().mode());
}

#[test]
fn a_run_killed_at_any_moment_leaves_a_whole_set_of_files() {
    let folder = folder();
    fs::write(folder.path().join("plan.toml"), SMALL).unwrap();
    mirrorwell(folder.path())
        .args(["run", "plan.toml"])
        .assert()
        .success();
    let out = folder.path().join("mirrorwell-out");
    let small = files(&out);
    let target = folder.path().join("demo");
    assert!(
        outcome(folder.path(), &["run", "--out", "demo"])
            .status
            .success()
    );
    let demo = files(&target);
    for milliseconds in [1, 5, 10, 20, 40, 60, 80, 120] {
        let mut child = std::process::Command::new(assert_cmd::cargo::cargo_bin("mirrorwell"))
            .args(["run", "--quiet"])
            .current_dir(folder.path())
            .spawn()
            .unwrap();
        std::thread::sleep(std::time::Duration::from_millis(milliseconds));
        let _ = child.kill();
        child.wait().unwrap();
        let now = files(&out);
        assert!(now == small || now == demo, "after {milliseconds} ms");
    }
}
