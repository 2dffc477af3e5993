//! What stands in the layers: RFC 7946, the contract's properties, and names
//! of any kind.

use std::fs;
use std::path::Path;

use serde_json::Value;

use crate::support::{SMALL, folder, outcome};

/// Runs a plan and gives a reader of its output files.
fn layers(plan: Option<&str>) -> impl Fn(&str) -> String + use<> {
    let folder = folder();
    let mut arguments = vec!["run", "--quiet"];
    if let Some(plan) = plan {
        fs::write(folder.path().join("plan.toml"), plan).unwrap();
        arguments.push("plan.toml");
    }
    let output = outcome(folder.path(), &arguments);
    assert!(
        output.status.success(),
        "{}",
        String::from_utf8_lossy(&output.stderr)
    );
    move |name: &str| fs::read_to_string(folder.path().join("mirrorwell-out").join(name)).unwrap()
}

fn json(text: &str) -> Value {
    serde_json::from_str(text).unwrap()
}

/// Every property name of a layer's first feature.
fn property_names(layer: &Value) -> Vec<String> {
    let properties = layer["features"][0]["properties"].as_object().unwrap();
    properties.keys().cloned().collect()
}

const GEOJSON: [&str; 9] = [
    "boundaries.geojson",
    "drawdown_bands.geojson",
    "drawdown_contours.geojson",
    "flow.geojson",
    "head_contours.geojson",
    "image_wells.geojson",
    "neighbours.geojson",
    "river_reaches.geojson",
    "wells.geojson",
];

/// All positions of a geometry's coordinates.
fn positions(coordinates: &Value) -> Vec<[f64; 2]> {
    let list = coordinates.as_array().unwrap();
    if list[0].is_number() {
        return vec![[list[0].as_f64().unwrap(), list[1].as_f64().unwrap()]];
    }
    list.iter().flat_map(positions).collect()
}

/// RFC 7946, sections 3.3 (FeatureCollection), 5 (bbox) and 4 (WGS 84, no
/// `crs` member).
#[test]
fn every_layer_is_a_feature_collection_with_its_bounds_and_the_caution() {
    let read = layers(None);
    for name in GEOJSON {
        let layer = json(&read(name));
        assert_eq!(layer["type"], "FeatureCollection", "{name}");
        assert!(
            layer["caution"]
                .as_str()
                .unwrap()
                .contains("hydrogeologist"),
            "{name}"
        );
        assert!(layer.get("crs").is_none(), "{name}");
        let bounds: Vec<f64> = layer["bbox"]
            .as_array()
            .unwrap()
            .iter()
            .map(|b| b.as_f64().unwrap())
            .collect();
        let features = layer["features"].as_array().unwrap();
        assert!(!features.is_empty(), "{name}");
        for [longitude, latitude] in features
            .iter()
            .flat_map(|feature| positions(&feature["geometry"]["coordinates"]))
        {
            assert!(bounds[0] <= longitude && longitude <= bounds[2], "{name}");
            assert!(bounds[1] <= latitude && latitude <= bounds[3], "{name}");
        }
    }
}

/// RFC 7946, section 3.1.6: rings are closed, the exterior runs
/// counter-clockwise and holes clockwise.
#[test]
fn rings_follow_the_right_hand_rule() {
    let read = layers(None);
    let mut rings = 0;
    for name in ["drawdown_bands.geojson", "neighbours.geojson"] {
        let layer = json(&read(name));
        for feature in layer["features"].as_array().unwrap() {
            let geometry = &feature["geometry"];
            let polygons = match geometry["type"].as_str().unwrap() {
                "Polygon" => vec![geometry["coordinates"].clone()],
                "MultiPolygon" => geometry["coordinates"].as_array().unwrap().clone(),
                _ => vec![],
            };
            for polygon in polygons {
                for (index, ring) in polygon.as_array().unwrap().iter().enumerate() {
                    let ring = positions(ring);
                    assert!(ring.len() >= 4);
                    assert_eq!(ring.first(), ring.last());
                    let [x0, y0] = ring[0];
                    let twice_area: f64 = ring
                        .windows(2)
                        .map(|w| (w[0][0] - x0) * (w[1][1] - y0) - (w[1][0] - x0) * (w[0][1] - y0))
                        .sum();
                    assert_eq!(twice_area > 0.0, index == 0, "{name}");
                    rings += 1;
                }
            }
        }
    }
    assert!(rings > 10);
}

#[test]
fn properties_have_the_names_of_the_contract() {
    let read = layers(None);
    let names = |layer: &str| property_names(&json(&read(layer)));
    assert_eq!(names("head_contours.geojson"), ["head_m"]);
    assert_eq!(names("drawdown_contours.geojson"), ["drawdown_m"]);
    assert_eq!(names("drawdown_bands.geojson"), ["from_m", "to_m"]);
    assert_eq!(
        names("wells.geojson"),
        [
            "name",
            "pumping_m3_per_d",
            "head_m",
            "drawdown_m",
            "own_drawdown_m",
            "interference_m",
            "well_loss_m",
            "flags"
        ]
    );
    assert_eq!(
        names("neighbours.geojson"),
        [
            "name",
            "drawdown_m",
            "allowed_drawdown_m",
            "largest_cause",
            "flags"
        ]
    );
    assert_eq!(
        names("boundaries.geojson"),
        ["name", "kind", "inflow_m3_per_d"]
    );
    assert_eq!(
        names("river_reaches.geojson"),
        ["name", "inflow_m3_per_d", "inflow_m3_per_d_per_m"]
    );
    assert_eq!(names("image_wells.geojson"), ["of", "sign", "order"]);
}

#[test]
fn a_plan_in_us_units_gets_feet_and_gallons() {
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("examples/us_units.toml");
    let read = layers(Some(&fs::read_to_string(path).unwrap()));
    let names = |layer: &str| property_names(&json(&read(layer)));
    assert_eq!(names("head_contours.geojson"), ["head_ft"]);
    assert_eq!(names("boundaries.geojson"), ["name", "kind", "inflow_gpm"]);
    assert!(names("wells.geojson").contains(&"pumping_gpm".to_owned()));
    let findings = json(&read("findings.json"));
    // 0.9 Mgal/d over 1440 minutes is 625 gallons a minute.
    let pumping = findings["wells"][1]["pumping_gpm"].as_f64().unwrap();
    assert!((pumping - 625.0).abs() < 1e-9);
    assert!(findings["outline"]["error_bound_ft"].as_f64().unwrap() < 1e-6);
    assert!(read("interference.csv").starts_with("drawdown_ft,CH-1,CH-2\n"));
}

/// Σ inflow = Σ pumping: what the wells take in a steady state the river gives.
#[test]
fn rivers_give_what_the_wells_pump() {
    let findings = json(&layers(None)("findings.json"));
    let inflow: f64 = findings["boundaries"]
        .as_array()
        .unwrap()
        .iter()
        .map(|boundary| boundary["inflow_m3_per_d"].as_f64().unwrap())
        .sum();
    let pumping: f64 = findings["wells"]
        .as_array()
        .unwrap()
        .iter()
        .map(|well| well["pumping_m3_per_d"].as_f64().unwrap())
        .sum();
    assert!((inflow - pumping).abs() < 1e-8, "{inflow} {pumping}");
}

/// Names with everything that breaks careless writers: quotes, commas, line
/// breaks, formulas, markup, and scripts from right to left.
#[test]
fn names_of_any_kind_come_back_as_they_were() {
    let long = "long name ".repeat(1_000);
    let names = [
        long.as_str(),
        "=HYPERLINK(\"x\")",
        "a,b \"c\"",
        "two\nlines",
        "井戸 №1",
        "بئر",
        "<script>alert(\"x\")</script>",
        "\u{202e}right to left\u{202c}",
        "carriage\r\nreturn",
        "'s mill",
        "-1",
    ];
    let wells: String = names
        .iter()
        .enumerate()
        .map(|(index, name)| {
            format!(
                "[[well]]\nname = {}\nat = [{}, {}]\npumping = 100.0\nradius = 0.1\n",
                serde_json::to_string(name).unwrap(),
                150 + 40 * index,
                30 * index
            )
        })
        .collect();
    let read = layers(Some(&format!("{SMALL}\n{wells}")));

    let layer = json(&read("wells.geojson"));
    let written: Vec<&str> = layer["features"]
        .as_array()
        .unwrap()
        .iter()
        .skip(1)
        .map(|feature| feature["properties"]["name"].as_str().unwrap())
        .collect();
    assert_eq!(written, names);

    let table = read("interference.csv");
    let mut reader = csv::ReaderBuilder::new().from_reader(table.as_bytes());
    let headings: Vec<String> = reader
        .headers()
        .unwrap()
        .iter()
        .skip(2)
        .map(str::to_owned)
        .collect();
    for (cell, name) in headings.iter().zip(names) {
        assert!(!cell.starts_with(['=', '+', '-', '@']), "{cell}");
        assert_eq!(cell.strip_prefix('\'').unwrap_or(cell), name);
    }
}

#[test]
fn wells_on_both_banks_of_a_river_do_not_touch_each_other() {
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("examples/two_banks.toml");
    let read = layers(Some(&fs::read_to_string(path).unwrap()));
    let findings = json(&read("findings.json"));
    assert_eq!(findings["outlines"].as_array().unwrap().len(), 2);
    let row = &findings["interference"]["rows"][0]["drawdown_m"];
    assert!(row[0].as_f64().unwrap() > 0.0);
    assert_eq!(row[1], 0.0);
    assert_eq!(row[2], 0.0);
}

/// Longitude and latitude of the wells by PROJ, which the program does not
/// use: `pyproj.Transformer.from_crs(code, 4326, always_xy=True)`, pyproj 3.7.
#[test]
fn wells_lie_where_another_projection_library_puts_them() {
    let by_proj: [(Option<&str>, &[[f64; 2]]); 2] = [
        (
            None,
            &[
                [13.814_702_031_6, 48.395_062_876_0],
                [13.815_719_894_2, 48.397_772_395_3],
                [13.818_373_364_9, 48.399_868_940_3],
                [13.811_891_875_6, 48.399_712_218_5],
                [13.806_028_615_8, 48.396_232_736_8],
            ],
        ),
        (
            Some("us_units.toml"),
            &[
                [-73.079_449_023_2, 40.855_781_862_9],
                [-73.080_137_799_6, 40.858_257_723_8],
            ],
        ),
    ];
    for (plan, expected) in by_proj {
        let examples = Path::new(env!("CARGO_MANIFEST_DIR")).join("examples");
        let text = plan.map(|plan| fs::read_to_string(examples.join(plan)).unwrap());
        let layer = json(&layers(text.as_deref())("wells.geojson"));
        for (feature, place) in layer["features"].as_array().unwrap().iter().zip(expected) {
            let position = positions(&feature["geometry"]["coordinates"])[0];
            for (degrees, by_proj) in position.iter().zip(place) {
                // Half of the eighth decimal: 0.6 mm.
                assert!((degrees - by_proj).abs() <= 0.51e-8, "{degrees} {by_proj}");
            }
        }
    }
}
