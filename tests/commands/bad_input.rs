//! Bad plans: each ends in a clear refusal, status 2, and no file touched.

use crate::support::{SMALL, folder, outcome, printed};

/// Runs a bad plan and makes sure it is refused without a trace.
fn refusal(plan: impl AsRef<[u8]>) -> String {
    let folder = folder();
    std::fs::write(folder.path().join("plan.toml"), plan).unwrap();
    let output = outcome(folder.path(), &["run", "plan.toml"]);
    let printed = printed(&output);
    assert_eq!(output.status.code(), Some(2), "{printed}");
    assert!(output.stdout.is_empty(), "{printed}");
    assert_eq!(
        std::fs::read_dir(folder.path()).unwrap().count(),
        1,
        "{printed}"
    );
    printed
}

#[test]
fn a_plan_with_several_faults_shows_them_all() {
    let plan = SMALL
        .replace("radius = 0.15", "radius = -0.15")
        .replace("stage = 60.0", "stage = nan")
        .replace("pumping = 1000.0", "pumpin = 1000.0");
    insta::assert_snapshot!(refusal(plan));
}

#[test]
fn a_map_of_too_many_nodes_is_refused() {
    let plan = format!("{SMALL}\n[map]\nextent = [0.0, -3000.0, 6000.0, 3000.0]\nspacing = 1.0\n");
    insta::assert_snapshot!(refusal(plan));
}

#[test]
fn a_map_that_shows_nothing_of_the_aquifer_is_refused() {
    let plan = format!("{SMALL}\n[map]\nextent = [-900.0, -100.0, -500.0, 100.0]\n");
    insta::assert_snapshot!(refusal(plan));
}

#[test]
fn a_map_that_is_a_mere_line_is_refused() {
    for extent in ["[20.0, 0.0, 900.0, 0.001]", "[20.0, 0.0, 20.001, 0.001]"] {
        let refusal = refusal(format!("{SMALL}\n[map]\nextent = {extent}\n"));
        assert!(
            refusal.contains("too thin to draw contours on"),
            "{refusal}"
        );
    }
}

/// A pipe without a writer would be waited for without end.
#[cfg(unix)]
#[test]
fn a_layer_that_is_no_file_is_refused() {
    let layer = "layer = \"/dev/null\"\nfeature = \"Ostra\"\n";
    let river = SMALL.find("line").unwrap();
    let end = river + SMALL[river..].find('\n').unwrap() + 1;
    let plan = format!("{}{layer}{}", &SMALL[..river], &SMALL[end..]);
    let refusal = refusal(plan);
    assert!(refusal.contains("a pipe or a device"), "{refusal}");
}

#[test]
fn a_contour_interval_that_gives_too_many_levels_is_refused() {
    let plan = format!("{SMALL}\n[map]\ninterval = 1e-6\n");
    insta::assert_snapshot!(refusal(plan));
}

#[test]
fn wells_without_a_steady_state_are_refused() {
    let river = SMALL.find("[[river]]").unwrap();
    let well = SMALL.find("[[well]]").unwrap();
    let plan = format!("{}{}", &SMALL[..river], &SMALL[well..]);
    insta::assert_snapshot!(refusal(plan));
}

#[test]
fn every_bad_value_is_refused() {
    let bad = [
        ("at = [100.0, 0.0]", "at = [0.0, 0.0]"),
        ("at = [100.0, 0.0]", "at = [nan, 0.0]"),
        ("at = [100.0, 0.0]", "at = [100.0]"),
        ("at = [100.0, 0.0]", "at = [1e12, 0.0]"),
        ("radius = 0.15", "radius = 0.0"),
        ("radius = 0.15", "radius = inf"),
        ("radius = 0.15", "radius = 400.0"),
        ("radius = 0.15", ""),
        ("pumping = 1000.0", "pumping = \"1000 parsecs\""),
        ("pumping = 1000.0", "pumping = 1000.0\ninjection = 5.0"),
        ("pumping = 1000.0", "pumping = 1e300"),
        ("transmissivity = 500.0", "transmissivity = 0.0"),
        ("transmissivity = 500.0", "transmissivity = -5.0"),
        ("transmissivity = 500.0", ""),
        ("stage = 60.0", ""),
        (
            "line = [[0.0, -1000.0], [0.0, 1000.0]]",
            "line = [[0.0, 0.0], [0.0, 0.0]]",
        ),
        ("line = [[0.0, -1000.0], [0.0, 1000.0]]", "line = []"),
        ("crs = { origin = [15.0, 48.0] }", "crs = \"EPSG:4326\""),
        ("crs = { origin = [15.0, 48.0] }", "crs = \"EPSG:99999\""),
        ("crs = { origin = [15.0, 48.0] }", ""),
        ("units = \"metric\"", "units = \"cubits\""),
        ("allowed_drawdown = 0.3", "allowed_drawdown = -0.3"),
        ("[aquifer]", "[aquifer"),
    ];
    for (good, wrong) in bad {
        assert!(SMALL.contains(good), "{good}");
        let printed = refusal(SMALL.replace(good, wrong));
        assert!(printed.contains("error"), "{wrong}: {printed}");
        assert!(printed.contains("plan.toml"), "{wrong}: {printed}");
    }
}

#[test]
fn a_plan_that_is_not_utf_8_is_refused() {
    let mut plan = SMALL.as_bytes().to_vec();
    plan.extend(b"# \xff\xfe\n");
    assert!(refusal(plan).contains("UTF-8"));
}

#[test]
fn an_empty_plan_is_refused() {
    assert!(refusal("").contains("error"));
}

/// A foot is 0.3048 m (NIST SP 811, appendix B): 150 ft are 45.720 m.
#[test]
fn a_us_plan_reads_its_own_units_beside_metres() {
    let plan =
        SMALL.replace("\"metric\"", "\"us\"") + "[ambient]\nhead = 150.0\nat = [90.0, 5.0]\n";
    let refusal = refusal(plan);
    for text in ["45.720 m (150.00 ft)", "18.288 m (60.000 ft)"] {
        assert!(refusal.contains(text), "{refusal}");
    }
}

#[test]
fn more_threads_than_any_machine_has_are_refused() {
    let folder = folder();
    let output = outcome(folder.path(), &["run", "--threads", "100000"]);
    assert_eq!(output.status.code(), Some(2));
    assert_eq!(std::fs::read_dir(folder.path()).unwrap().count(), 0);
}
