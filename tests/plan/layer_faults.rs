//! Layers that are wrong are shown in the layer, with the place that names them.

use mirrorwell::plan::Plan;

const PLAN: &str = r#"crs = "EPSG:32633"
units = "metric"

[aquifer]
transmissivity = 800.0

[[river]]
name = "Ostra"
layer = "rivers.geojson"
feature = "Ostra"
stage = 61.0

[[well_layer]]
file = "wells.geojson"
"#;

const RIVERS: &str = r#"{ "type": "FeatureCollection", "features": [
  { "type": "Feature", "properties": { "name": "Ostra" },
    "geometry": { "type": "LineString", "coordinates": [[15.0, 48.0], [15.0, 48.1]] } }
] }"#;

const WELLS: &str = r#"{ "type": "FeatureCollection", "features": [
  { "type": "Feature", "properties": { "name": "PW-1", "pumping": 2160, "radius": 0.2 },
    "geometry": { "type": "Point", "coordinates": [15.01, 48.05] } }
] }"#;

/// The refusal of a plan with a piece of one of its three texts replaced.
fn refusal(which: &str, old: &str, new: &str) -> String {
    let replaced = |name: &str, text: &str| {
        if name == which {
            assert!(text.contains(old), "{name} has no {old}");
            text.replacen(old, new, 1)
        } else {
            text.to_owned()
        }
    };
    let rivers = replaced("rivers.geojson", RIVERS);
    let wells = replaced("wells.geojson", WELLS);
    let layers = [
        ("rivers.geojson", rivers.as_str()),
        ("wells.geojson", wells.as_str()),
    ];
    let plan = Plan::from_texts("plan.toml", &replaced("plan.toml", PLAN), &layers);
    plan.expect_err("the plan was accepted").render(false)
}

fn gallery(cases: &[(&str, &str, &str, &str)]) -> String {
    let pages = cases
        .iter()
        .map(|(title, which, old, new)| format!("## {title}\n\n{}\n", refusal(which, old, new)));
    pages.collect::<Vec<_>>().join("\n\n")
}

#[test]
fn the_layer_as_a_whole() {
    insta::with_settings!({ omit_expression => true }, {
        insta::assert_snapshot!(gallery(&[
            ("a missing file", "plan.toml", "rivers.geojson", "river.geojson"),
            ("not JSON", "rivers.geojson", "\"features\": [", "\"features\": [,"),
            ("cut off", "rivers.geojson", "] }", ""),
            ("no collection", "rivers.geojson", "FeatureCollection", "Topology"),
            ("no feature", "rivers.geojson", "\"Feature\"", "\"Thing\""),
            ("features that are no list", "rivers.geojson", "\"features\": [", "\"features\": 3, \"x\": ["),
            (
                "another CRS",
                "rivers.geojson",
                "{",
                "{ \"crs\": { \"type\": \"name\", \"properties\": { \"name\": \"urn:ogc:def:crs:EPSG::32633\" } },"
            ),
            ("a layer without a feature", "plan.toml", "feature = \"Ostra\"\n", ""),
            ("a feature without a layer", "plan.toml", "layer = \"rivers.geojson\"\n", ""),
        ]));
    });
}

#[test]
fn features() {
    let second =
        "[ { \"type\": \"Feature\", \"properties\": { \"name\": \"Ostra\" }, \"geometry\": null },";
    insta::with_settings!({ omit_expression => true }, {
        insta::assert_snapshot!(gallery(&[
            ("a missing feature, like another", "plan.toml", "\"Ostra\"\nstage", "\"Ostro\"\nstage"),
            ("a missing feature, like none", "plan.toml", "\"Ostra\"\nstage", "\"Zwettl\"\nstage"),
            ("a name twice", "rivers.geojson", "[", second),
            ("a point for a river", "rivers.geojson", "LineString", "Point"),
            ("a polygon for a river", "rivers.geojson", "LineString", "Polygon"),
            ("several parts", "rivers.geojson", "LineString", "MultiLineString"),
            ("no geometry", "rivers.geojson", "\"geometry\"", "\"geometries\""),
            ("a line for a well", "wells.geojson", "\"Point\"", "\"LineString\""),
            ("eastings for longitudes", "wells.geojson", "[15.01, 48.05]", "[412450.0, 5361020.0]"),
            ("latitude first, past the pole", "wells.geojson", "[15.01, 48.05]", "[48.05, 115.01]"),
            ("a text for a position", "wells.geojson", "[15.01, 48.05]", "[\"15.01\", 48.05]"),
            ("a vertex twice", "rivers.geojson", "48.1", "48.0"),
        ]));
    });
}

#[test]
fn properties() {
    insta::with_settings!({ omit_expression => true }, {
        insta::assert_snapshot!(gallery(&[
            ("no name", "wells.geojson", "\"name\": \"PW-1\", ", ""),
            ("a negative radius", "wells.geojson", "0.2", "-0.2"),
            ("a unit of another kind", "wells.geojson", "2160", "\"25 m\""),
            ("a slip of a key", "wells.geojson", "pumping", "pumpin"),
            ("two rates", "wells.geojson", "\"radius\"", "\"injection\": 5, \"radius\""),
            ("a key twice", "wells.geojson", "\"radius\"", "\"radius\": 5, \"radius\""),
        ]));
    });
}

#[test]
fn bytes_that_are_not_utf8_are_shown_in_the_layer() {
    let folder = tempfile::tempdir().unwrap();
    std::fs::write(folder.path().join("plan.toml"), PLAN).unwrap();
    let latin = [b"{ \"name\": \"Gr\xfcnau\" }".as_slice(), RIVERS.as_bytes()].concat();
    std::fs::write(folder.path().join("rivers.geojson"), latin).unwrap();
    std::fs::write(folder.path().join("wells.geojson"), WELLS).unwrap();
    let faults = Plan::read(&folder.path().join("plan.toml"))
        .unwrap_err()
        .list();
    assert_eq!(faults.len(), 1);
    assert_eq!(faults[0].what, "rivers.geojson is not UTF-8 text");
    assert_eq!(
        (faults[0].location.line, faults[0].location.column),
        (1, 14)
    );
}

#[test]
fn a_fault_in_a_layer_of_one_long_line_shows_only_its_part() {
    let many = (0..2_000).map(|number| {
        format!(
            "{{\"type\":\"Feature\",\"properties\":{{\"name\":\"W{number}\",\"pumping\":1,\"radius\":0.1}},\
             \"geometry\":{{\"type\":\"Point\",\"coordinates\":[{},48.05]}}}}",
            15.0 + f64::from(number) * 1e-4
        )
    });
    let features = many.collect::<Vec<_>>().join(",");
    let wells = format!("{{\"type\":\"FeatureCollection\",\"features\":[{features}]}}").replacen(
        "\"W1500\",\"pumping\":1",
        "\"W1500\",\"pumping\":-1",
        1,
    );
    let layers = [
        ("rivers.geojson", RIVERS),
        ("wells.geojson", wells.as_str()),
    ];
    let faults = Plan::from_texts("plan.toml", PLAN, &layers).unwrap_err();
    let column = wells.find("-1").unwrap() + 1;
    assert_eq!(faults.list()[0].location.column, column);
    insta::assert_snapshot!(faults.to_string());
}
