//! The GeoPackage as SQLite reads it; GDAL reads it in `tests/references/gis`.

use rusqlite::Connection;

use crate::support::made;

/// A river, a well and a neighbour of any name.
fn plan(name: &str) -> String {
    let name = serde_json::to_string(name).unwrap();
    format!(
        r#"
title = {name}
crs = "EPSG:32633"
units = "metric"
[aquifer]
transmissivity = 500.0
[[river]]
name = "Ostra"
line = [[412000.0, 5360000.0], [412000.0, 5361000.0]]
stage = 60.0
[[well]]
name = {name}
at = [412100.25, 5360500.5]
pumping = 1000.0
radius = 0.15
[[neighbour]]
name = "Lot 14"
area = [[412200.0, 5360500.0], [412200.0, 5360600.0], [412300.0, 5360600.0]]
"#
    )
}

/// The file, opened.
fn opened(plan: &str) -> (tempfile::TempDir, Connection) {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("results.gpkg");
    std::fs::write(&path, made(plan, "results")).unwrap();
    let database = Connection::open(path).unwrap();
    (folder, database)
}

/// OGC 12-128r17, clause 1.1.1: requirements 2, 6 and 7.
#[test]
fn the_file_is_a_sound_geopackage() {
    let (_folder, database) = opened(&plan("PW-1"));
    let ask = |name: &str| -> String {
        let query = format!("SELECT CAST((SELECT * FROM pragma_{name}) AS TEXT)");
        database.query_row(&query, [], |row| row.get(0)).unwrap()
    };
    assert_eq!(ask("application_id"), 0x4750_4B47.to_string());
    assert_eq!(ask("user_version"), "10300");
    assert_eq!(ask("integrity_check"), "ok");
    let broken = "SELECT count(*) FROM pragma_foreign_key_check";
    let broken: i64 = database.query_row(broken, [], |row| row.get(0)).unwrap();
    assert_eq!(broken, 0);
}

/// Clause 2.1.3: magic, version, flags, system, then the point itself.
#[test]
fn a_well_lies_to_the_last_digit_where_the_plan_puts_it() {
    let (_folder, database) = opened(&plan("PW-1"));
    let query = "SELECT geom FROM wells";
    let blob: Vec<u8> = database.query_row(query, [], |row| row.get(0)).unwrap();
    assert_eq!(blob[..4], [b'G', b'P', 0, 1]);
    assert_eq!(blob[4..8], 32633_i32.to_le_bytes());
    assert_eq!(blob[8..13], [1, 1, 0, 0, 0]);
    assert_eq!(blob[13..21], 412_100.25_f64.to_le_bytes());
    assert_eq!(blob[21..29], 5_360_500.5_f64.to_le_bytes());
    assert_eq!(blob.len(), 29);
}

#[test]
fn names_of_any_kind_are_kept() {
    let long = "ж".repeat(5_000);
    for name in [
        "'); DROP TABLE wells; --",
        "<script>alert(1)</script>\"'&",
        "two\r\nlines\tand a tab",
        "\u{202e}من اليمين\u{202c}",
        long.as_str(),
    ] {
        let (_folder, database) = opened(&plan(name));
        let query = "SELECT name FROM wells";
        let kept: String = database.query_row(query, [], |row| row.get(0)).unwrap();
        assert_eq!(kept, name);
    }
}

#[test]
fn every_column_is_described_with_its_unit() {
    let (_folder, database) = opened(&plan("PW-1"));
    let query = "SELECT description FROM gpkg_data_columns \
                 WHERE table_name = 'wells' AND column_name = 'pumping_m3_per_d'";
    let about: String = database.query_row(query, [], |row| row.get(0)).unwrap();
    assert!(about.ends_with("m³/d"), "{about}");
}
