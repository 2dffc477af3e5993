//! GIS layers in place of coordinates.

use approx::assert_relative_eq;
use mirrorwell::plan::{Plan, PlanFaults};
use mirrorwell::site::{EdgeShape, Place, Subject};
use sha2::{Digest, Sha256};

const PLAN: &str = r#"crs = "EPSG:32633"
units = "metric"

[aquifer]
transmissivity = 800.0

[[river]]
name = "the Ostra"
layer = "rivers.geojson"
feature = "Ostra"
stage = [61.0, 61.4]

[[well_layer]]
file = "wells.geojson"

[[neighbour_layer]]
file = "lots.geojson"
"#;

/// Longitudes and latitudes near 15° E, where EPSG:32633 has its axis.
const RIVERS: &str = r#"{ "type": "FeatureCollection", "features": [
  { "type": "Feature", "properties": { "name": "Ostra" },
    "geometry": { "type": "LineString", "coordinates": [[15.0, 48.0], [15.0, 48.1, 300.0]] } }
] }"#;

const WELLS: &str = r#"{ "type": "FeatureCollection", "features": [
  { "type": "Feature",
    "properties": { "fid": 1, "name": "PW-1", "pumping": "25 L/s", "radius": 0.2, "ground": null },
    "geometry": { "type": "Point", "coordinates": [15.01, 48.05] } },
  { "type": "Feature",
    "properties": { "fid": 2, "name": "IW-1", "injection": 600, "radius": 0.2 },
    "geometry": { "type": "MultiPoint", "coordinates": [[15.02, 48.05]] } }
] }"#;

const LOTS: &str = r#"{ "type": "FeatureCollection", "features": [
  { "type": "Feature", "properties": { "name": "Lot 14", "allowed_drawdown": 0.5 },
    "geometry": { "type": "Polygon", "coordinates":
      [[[15.03, 48.05], [15.04, 48.05], [15.04, 48.06], [15.03, 48.05]]] } }
] }"#;

fn read(plan: &str, wells: &str) -> Result<Plan, PlanFaults> {
    let layers = [
        ("rivers.geojson", RIVERS),
        ("wells.geojson", wells),
        ("lots.geojson", LOTS),
    ];
    Plan::from_texts("plan.toml", plan, &layers)
}

/// On the central meridian a transverse Mercator grid has x = 500 000 m, and
/// the scale 0.9996 along it; a degree of latitude near 48° is 111.2 km (the
/// meridian arc of the WGS 84 ellipsoid, from memory, to four digits).
#[test]
fn features_are_projected_into_the_plans_crs() {
    let plan = read(PLAN, WELLS).unwrap_or_else(|faults| panic!("{faults}"));
    let EdgeShape::Line(line) = &plan.site.edges[0].shape else {
        panic!("a line");
    };
    let (x, _) = plan.to_plan_xy(line[0]);
    assert_relative_eq!(x, 500_000.0, epsilon = 1e-3);
    assert_relative_eq!(
        (line[1] - line[0]).norm(),
        11_120.0 * 0.9996,
        max_relative = 1e-3
    );
    let (longitude, latitude) = plan.to_longitude_latitude(plan.site.wells[0].at).unwrap();
    assert_relative_eq!(longitude, 15.01, epsilon = 1e-9);
    assert_relative_eq!(latitude, 48.05, epsilon = 1e-9);
}

#[test]
fn a_layers_properties_carry_the_keys_of_its_wells_and_neighbours() {
    let plan = read(PLAN, WELLS).unwrap_or_else(|faults| panic!("{faults}"));
    let rates: Vec<_> = plan
        .site
        .wells
        .iter()
        .map(|well| well.pumping.si())
        .collect();
    assert_eq!(rates, [2160.0, -600.0]);
    assert!(plan.site.wells[0].ground.is_none());
    let lot = &plan.site.neighbours[0];
    assert_eq!(lot.allowed_drawdown.map(|length| length.si()), Some(0.5));
    assert!(matches!(&lot.place, Place::Area(corners) if corners.len() == 3));
    assert_eq!(
        plan.notes,
        ["wells.geojson: these properties are not used: `fid`"]
    );
}

#[test]
fn a_refusal_of_a_layers_well_is_shown_in_the_layer() {
    let plan = read(PLAN, WELLS).unwrap_or_else(|faults| panic!("{faults}"));
    let place = plan.locate(&Subject::Well(1, Some("pumping"))).to_string();
    assert_eq!(place, "wells.geojson:6:60");
    let place = plan.locate(&Subject::Edge(0, Some("line"))).to_string();
    assert_eq!(place, "plan.toml:9:9");
}

#[test]
fn the_fingerprint_is_of_the_plans_bytes_and_then_the_layers() {
    let plan = read(PLAN, WELLS).unwrap_or_else(|faults| panic!("{faults}"));
    let bytes = [PLAN, RIVERS, WELLS, LOTS].concat();
    assert_eq!(plan.sha256, format!("{:x}", Sha256::digest(bytes)));
    let other = read(PLAN, &WELLS.replace("600", "601")).unwrap();
    assert_ne!(plan.sha256, other.sha256);
}

#[test]
fn layers_lie_relative_to_the_plan() {
    let folder = tempfile::tempdir().unwrap();
    for (name, text) in [
        ("plan.toml", PLAN),
        ("rivers.geojson", RIVERS),
        ("wells.geojson", WELLS),
        ("lots.geojson", LOTS),
    ] {
        std::fs::write(folder.path().join(name), text).unwrap();
    }
    let plan =
        Plan::read(&folder.path().join("plan.toml")).unwrap_or_else(|faults| panic!("{faults}"));
    assert_eq!(plan.site.wells.len(), 2);
    let location = plan.locate(&Subject::Well(1, None));
    assert!(
        location.file.ends_with("wells.geojson")
            && location.file.contains(folder.path().to_str().unwrap())
    );
}

#[test]
fn the_names_that_say_crs84_are_accepted() {
    let crs = r#"{ "crs": { "type": "name", "properties": { "name": "urn:ogc:def:crs:OGC:1.3:CRS84" } },"#;
    assert!(read(PLAN, &WELLS.replacen('{', crs, 1)).is_ok());
    assert!(read(PLAN, &WELLS.replacen('{', r#"{ "crs": null,"#, 1)).is_ok());
}
