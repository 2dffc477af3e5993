//! Every class of fault is shown with its line, its column, the offending
//! text, its values and a remedy. The snapshots are what a user reads.

use crate::support::{SOUND, assert_refusals, read, spoilt};

fn with(more: &str) -> String {
    format!("{SOUND}{more}")
}

fn aquifer(lines: &str) -> String {
    spoilt("transmissivity = 800.0", lines)
}

#[test]
fn the_sound_plan_is_accepted() {
    if let Err(faults) = read(SOUND) {
        panic!("{faults}");
    }
}

#[test]
fn syntax_and_keys() {
    assert_refusals!([
        ("no value", spoilt("radius = 0.2", "radius =")),
        (
            "two broken lines",
            spoilt("radius = 0.2", "radius = 0.2.1\npumping 7")
        ),
        ("the same key twice", with("radius = 0.3\n")),
        ("the same table twice", with("[aquifer]\nroof = 1.0\n")),
        ("no closing quote", spoilt("\"PW-1\"", "\"PW-1")),
        ("nested too deep", with(&format!("x = {}", "[".repeat(400)))),
        ("an unknown key", spoilt("pumping", "pumpin")),
        ("an unknown key, like none", with("colour = \"red\"\n")),
        ("an unknown table", with("[[rivers]]\nname = \"x\"\n")),
        ("a table for a list", spoilt("[[river]]", "[river]")),
        ("a list for a table", spoilt("[aquifer]", "[[aquifer]]")),
        ("a number for a table", "aquifer = 3\n".to_owned()),
        ("nothing at all", String::new()),
    ]);
}

#[test]
fn numbers_and_units() {
    let radius = |text: &str| spoilt("radius = 0.2", &format!("radius = {text}"));
    let pumping = |text: &str| spoilt("pumping = 2160.0", &format!("pumping = {text}"));
    assert_refusals!([
        ("not a number", radius("nan")),
        ("infinite", radius("-inf")),
        ("too large for a float", radius("1e999")),
        ("zero", radius("0.0")),
        ("negative", radius("-0.2")),
        ("a list", radius("[0.2]")),
        ("a date", radius("2026-12-01")),
        ("yes", radius("true")),
        ("a unit of another kind", radius("\"25 L/s\"")),
        ("an unknown unit", radius("\"1 furlong\"")),
        ("no unit", radius("\"0.2\"")),
        ("no number", radius("\"wide\"")),
        ("negative with a unit", pumping("\"-25 L/s\"")),
        ("negative pumping", pumping("-600")),
        ("huge pumping", pumping("1e8")),
        ("a comma in a number", pumping("\"2,160 m3/d\"")),
    ]);
}

#[test]
fn crs_and_units() {
    let crs = |text: &str| spoilt("crs = \"EPSG:32633\"", &format!("crs = {text}"));
    assert_refusals!([
        ("geographic", crs("\"EPSG:4326\"")),
        ("unknown", crs("\"EPSG:99999\"")),
        ("no code", crs("\"UTM 33N\"")),
        ("a bare number", crs("32633")),
        ("no origin", crs("{ }")),
        ("an origin that is none", crs("{ origin = [15.1, 98.4] }")),
        ("units", spoilt("\"metric\"", "\"imperial\"")),
    ]);
}

#[test]
fn the_aquifer() {
    assert_refusals!([
        ("says nothing", aquifer("roof = 3.0")),
        ("a material alone", aquifer("material = \"coarse-sand\"")),
        (
            "an unknown material",
            aquifer("material = \"course sand\"\nthickness = 3")
        ),
        (
            "two ways that disagree",
            aquifer("transmissivity = 800.0\nconductivity = 38.0\nthickness = 22.0")
        ),
        (
            "an inverted ratio",
            aquifer("transmissivity = 8\nanisotropy = { ratio = 0.3, azimuth = 40 }")
        ),
        (
            "half an anisotropy",
            aquifer("transmissivity = 8\nanisotropy = { ratio = 3 }")
        ),
        (
            "an azimuth past a turn",
            aquifer("transmissivity = 8\nanisotropy = { ratio = 3, azimuth = 400 }")
        ),
        ("huge", aquifer("transmissivity = 1e8")),
        (
            "a huge product",
            aquifer("conductivity = 1e5\nthickness = 1e4")
        ),
        (
            "a gradient toward nowhere",
            with("[ambient]\nhead = 60\ngradient = 0.001\n")
        ),
        (
            "toward without a gradient",
            with("[ambient]\nhead = 60\ntoward = 90\n")
        ),
    ]);
}

#[test]
fn edges() {
    let line = |text: &str| spoilt("[[412000.0, 5360000.0], [413500.0, 5362600.0]]", text);
    let stage = |text: &str| spoilt("stage = 61.4", text);
    assert_refusals!([
        ("one vertex", line("[[412000, 5360000]]")),
        ("no length", line("[[412000, 5360000], [412000, 5360000]]")),
        (
            "a vertex twice",
            line("[[412000, 5360000], [413000, 5361000], [413000, 5361000]]")
        ),
        (
            "crossing itself",
            line("[[412000, 5360000], [413000, 5361000], [413000, 5360000], [412000, 5361000]]")
        ),
        (
            "touching itself",
            line("[[412000, 5360000], [414000, 5360000], [414000, 5361000], [413000, 5360000]]")
        ),
        (
            "turning back on itself",
            line("[[412000, 5360000], [414000, 5360000], [413000, 5360000]]")
        ),
        (
            "a point with three numbers",
            line("[[412000, 5360000, 7], [413500, 5362600]]")
        ),
        (
            "a coordinate that is no number",
            line("[[412000, nan], [413500, 5362600]]")
        ),
        (
            "a huge coordinate",
            line("[[412000, 5360000], [1e12, 5362600]]")
        ),
        ("a text for a line", line("\"rivers.geojson\"")),
        ("no stage", stage("")),
        ("too few stages", stage("stage = [61.4]")),
        ("a stage that is no number", stage("stage = [61.4, nan]")),
        (
            "no line",
            spoilt("line = [[412000.0, 5360000.0], [413500.0, 5362600.0]]", "")
        ),
        (
            "a circle of no radius",
            spoilt(
                "line = [[412000.0, 5360000.0], [413500.0, 5362600.0]]",
                "circle = { centre = [412800, 5361900], radius = 0 }"
            )
        ),
        (
            "a circle with two stages",
            spoilt(
                "line = [[412000.0, 5360000.0], [413500.0, 5362600.0]]\nstage = 61.4",
                "circle = { centre = [412800, 5361900], radius = 350 }\nstage = [60, 61]"
            )
        ),
        (
            "a line and a circle",
            stage("stage = 61.4\ncircle = { centre = [412800, 5361900], radius = 350 }")
        ),
        (
            "a name twice",
            with("[[barrier]]\nname = \"Ostra\"\nline = [[411000, 5360500], [412000, 5360000]]\n")
        ),
        ("no name", spoilt("name = \"Ostra\"", "")),
        ("an empty name", spoilt("\"Ostra\"", "\" \"")),
    ]);
}

#[test]
fn wells_and_neighbours() {
    let neighbour = |lines: &str| with(&format!("[[neighbour]]\nname = \"Lot 14\"\n{lines}\n"));
    let second =
        "[[well]]\nname = \"PW-2\"\nat = [412450.3, 5361020.0]\npumping = 1\nradius = 0.2\n";
    assert_refusals!([
        ("no rate", spoilt("pumping = 2160.0", "")),
        (
            "two rates",
            spoilt("pumping = 2160.0", "pumping = 2160.0\ninjection = 1.0")
        ),
        ("no place", spoilt("at = [412450.0, 5361020.0]", "")),
        ("no radius", spoilt("radius = 0.2", "")),
        ("overlapping wells", with(second)),
        ("no well", spoilt("[[well]]", "[[barrier]]")),
        (
            "a well wider than its influence",
            spoilt(
                "transmissivity = 800.0",
                "transmissivity = 800.0\ninfluence_radius = 0.1"
            )
        ),
        (
            "a neighbour named as a well",
            with("[[neighbour]]\nname = \"PW-1\"\nat = [412900, 5361300]\n")
        ),
        (
            "no limit at all",
            neighbour("at = [412900, 5361300]\nallowed_drawdown = 0")
        ),
        (
            "a point and an area",
            neighbour("at = [412900, 5361300]\narea = [[0, 0], [1, 0], [0, 1]]")
        ),
        (
            "an area of two corners",
            neighbour("area = [[412900, 5361300], [412950, 5361300], [412900, 5361300]]")
        ),
        (
            "a bow tie",
            neighbour(
                "area = [[412900, 5361300], [412950, 5361350], [412950, 5361300], [412900, 5361350]]"
            )
        ),
        (
            "a share in per cent",
            with("[limits]\ninterference_share = 20\n")
        ),
        ("an accuracy of nothing", with("[accuracy]\nhead = 0\n")),
        (
            "an inverted extent",
            with("[map]\nextent = [413000, 5360000, 412000, 5362000]\n")
        ),
        (
            "an extent of three",
            with("[map]\nextent = [413000, 5360000, 412000]\n")
        ),
        (
            "too fine a map",
            with("[map]\nextent = [412000, 5360000, 413000, 5361000]\nspacing = 0.001\n")
        ),
    ]);
}

#[test]
fn every_fault_is_shown_in_one_go() {
    let text = r#"crs = "EPSG:4326"
units = "imperial"
colour = "red"

[aquifer]
transmissivity = -800.0

[[well]]
name = "PW-1"
at = [412450.0]
pumping = "25 m"
radius = 0.0

[map]
spacing = -1
"#;
    assert_refusals!([("nine faults", text.to_owned())]);
}

#[test]
fn broken_syntax_does_not_hide_other_faults_nor_invent_any() {
    assert_refusals!([
        (
            "a broken line and a negative radius",
            spoilt("radius = 0.2", "radius = -0.2\nwell_loss 7")
        ),
        (
            "a list without its end",
            spoilt("[413500.0, 5362600.0]]", "[413500.0, 5362600.0]")
        ),
        ("a header without its end", spoilt("[[river]]", "[[river]")),
    ]);
}
