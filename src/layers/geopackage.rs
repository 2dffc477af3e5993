//! `results.gpkg`: all layers of features as tables of one GeoPackage, in the
//! plan's own coordinates.
//!
//! Version 1.3, with a spatial index on each table and a description of each
//! layer and column. A plan with an EPSG code keeps it; a local grid is a
//! system of its own, transverse Mercator as well-known text. Points and lines
//! keep their full precision; polygons are rounded to 0.001 of the grid's
//! unit, which keeps them sound.
//! The database is made in memory, always in the same order and with a fixed
//! date, so that the same plan gives the same bytes.
//! Source: OGC 12-128r17, GeoPackage 1.3.

mod geometry;

use rusqlite::types::Value as Cell;
use rusqlite::{Connection, params, params_from_iter};
use serde_json::Value;

use self::geometry::Encoded;
use super::caution::CAUTION;
use super::layer::{Feature, Layer};
use super::output::{Content, Kind, OUTPUTS, Output};
use super::property::{Property, Quantity};
use super::{LayerError, Planned, Units};
use crate::plan::Plan;
use crate::plan::crs::{Crs, GridSystem, WGS_84};

/// The required moment of the last change: none is kept, or the same plan
/// would not give the same bytes.
const LAST_CHANGE: &str = "1970-01-01T00:00:00.000Z";
/// The number of a local grid's system; no EPSG code is so large.
const LOCAL_SYSTEM: i64 = 100_000;

/// The whole file.
///
/// # Errors
/// Where a layer cannot be made, or the database refuses.
pub fn file(planned: &Planned<'_>) -> Result<Vec<u8>, LayerError> {
    let mut database = Connection::open_in_memory()?;
    database.execute_batch(include_str!("geopackage/schema.sql"))?;
    let transaction = database.transaction()?;
    let system = add_systems(&transaction, &planned.plan.crs)?;
    for output in OUTPUTS {
        if let Content::Features(kind, layer) = output.content {
            let table = Table {
                output,
                kind,
                system,
                units: planned.units(),
            };
            table.add(&transaction, planned.plan, &layer(planned)?)?;
        }
    }
    transaction.commit()?;
    Ok(database.serialize("main")?.to_vec())
}

/// Lists the coordinate systems, and says the number of the plan's.
fn add_systems(database: &Connection, crs: &Crs) -> rusqlite::Result<i64> {
    let mut insert =
        database.prepare("INSERT INTO gpkg_spatial_ref_sys VALUES (?1, ?2, ?3, ?4, ?5, ?6)")?;
    for (name, id, definition, about) in [
        ("Undefined Cartesian SRS", -1, "undefined", "any plane"),
        ("Undefined geographic SRS", 0, "undefined", "any globe"),
    ] {
        insert.execute(params![name, id, "NONE", id, definition, about])?;
    }
    let about = "longitude and latitude, degrees";
    insert.execute(params!["WGS 84", 4326, "EPSG", 4326, WGS_84, about])?;
    let (id, organization) = match crs.system() {
        GridSystem::Epsg(code) => (i64::from(code), "EPSG"),
        GridSystem::Local { .. } => (LOCAL_SYSTEM, "NONE"),
    };
    let text = crs.system().well_known_text();
    insert.execute(params![
        crs.system().name(),
        id,
        organization,
        id,
        text,
        "the plan's grid"
    ])?;
    Ok(id)
}

/// A layer's table.
struct Table<'a> {
    output: &'a Output,
    kind: Kind,
    system: i64,
    units: Units,
}

impl Table<'_> {
    /// Adds the table with its features, its index and its descriptions.
    fn add(&self, database: &Connection, plan: &Plan, layer: &Layer) -> rusqlite::Result<()> {
        let features: Vec<(Encoded, &Feature)> = layer
            .features
            .iter()
            .filter_map(|feature| {
                let geometry = geometry::encoded(plan, self.system, self.kind, &feature.shape)?;
                Some((geometry, feature))
            })
            .collect();
        self.describe(database, &features, layer.note)?;
        let columns: Vec<String> = self
            .output
            .properties
            .iter()
            .map(|p| self.column(p))
            .collect();
        database.execute_batch(&format!(
            "CREATE TABLE \"{}\" (\n  fid INTEGER PRIMARY KEY AUTOINCREMENT NOT NULL,\n  \
             geom {},\n  {}\n)",
            self.output.name,
            geometry_name(self.kind),
            columns.join(",\n  ")
        ))?;
        self.insert(database, &features)?;
        self.index(database, &features)
    }

    /// A column's definition.
    fn column(&self, property: &Property) -> String {
        let kind = match property.quantity {
            Quantity::Text => "TEXT",
            Quantity::Whole => "MEDIUMINT",
            _ => "DOUBLE",
        };
        format!("\"{}\" {kind}", property.name(self.units))
    }

    /// Says what the table and its columns hold, and where it is.
    fn describe(
        &self,
        database: &Connection,
        features: &[(Encoded, &Feature)],
        note: Option<&str>,
    ) -> rusqlite::Result<()> {
        let name = self.output.name;
        let bounds = features.iter().map(|(geometry, _)| geometry.bounds);
        let all = bounds.reduce(|[w, s, e, n], [west, south, east, north]| {
            [w.min(west), s.min(south), e.max(east), n.max(north)]
        });
        let [west, south, east, north] = all.map_or([None; 4], |all| all.map(Some));
        let note = note.map_or_else(String::new, |note| format!(" Note: {note}."));
        let description = format!("{}.{note} {CAUTION}", self.output.about);
        database.execute(
            "INSERT INTO gpkg_contents VALUES (?1, 'features', ?1, ?2, ?3, ?4, ?5, ?6, ?7, ?8)",
            params![
                name,
                description,
                LAST_CHANGE,
                west,
                south,
                east,
                north,
                self.system
            ],
        )?;
        let kind = geometry_name(self.kind);
        database.execute(
            "INSERT INTO gpkg_geometry_columns VALUES (?1, 'geom', ?2, ?3, 0, 0)",
            params![name, kind, self.system],
        )?;
        for property in self.output.properties {
            let unit = property.unit(self.units);
            let about = match unit.as_str() {
                "" => property.about.to_owned(),
                unit => format!("{}; {unit}", property.about),
            };
            database.execute(
                "INSERT INTO gpkg_data_columns VALUES (?1, ?2, ?2, ?2, ?3, NULL, NULL)",
                params![name, property.name(self.units), about],
            )?;
        }
        Ok(())
    }

    /// Adds the features, numbered from 1.
    fn insert(
        &self,
        database: &Connection,
        features: &[(Encoded, &Feature)],
    ) -> rusqlite::Result<()> {
        let names: Vec<String> = self
            .output
            .properties
            .iter()
            .map(|p| p.name(self.units))
            .collect();
        let marks = ", ?".repeat(names.len());
        let name = self.output.name;
        let mut insert =
            database.prepare(&format!("INSERT INTO \"{name}\" VALUES (?, ?{marks})"))?;
        for (number, (geometry, feature)) in (1_i64..).zip(features) {
            let cells = names.iter().map(|name| cell(feature.properties.get(name)));
            let row = [Cell::Integer(number), Cell::Blob(geometry.bytes.clone())];
            insert.execute(params_from_iter(row.into_iter().chain(cells)))?;
        }
        Ok(())
    }

    /// Adds the spatial index, and what keeps it true.
    fn index(
        &self,
        database: &Connection,
        features: &[(Encoded, &Feature)],
    ) -> rusqlite::Result<()> {
        let name = self.output.name;
        let index = format!("rtree_{name}_geom");
        database.execute_batch(&format!(
            "CREATE VIRTUAL TABLE \"{index}\" USING rtree(id, minx, maxx, miny, maxy)"
        ))?;
        let mut insert =
            database.prepare(&format!("INSERT INTO \"{index}\" VALUES (?, ?, ?, ?, ?)"))?;
        for (number, (geometry, _)) in (1_i64..).zip(features) {
            let [west, south, east, north] = geometry.bounds;
            insert.execute(params![number, west, east, south, north])?;
        }
        let triggers = include_str!("geopackage/index.sql")
            .replace("INDEX", &index)
            .replace("\"TABLE\"", &format!("\"{name}\""));
        database.execute_batch(&triggers)?;
        database.execute(
            "INSERT INTO gpkg_extensions VALUES (?1, 'geom', 'gpkg_rtree_index', \
             'http://www.geopackage.org/spec120/#extension_rtree', 'write-only')",
            params![name],
        )?;
        Ok(())
    }
}

/// The name of a table's geometries.
fn geometry_name(kind: Kind) -> &'static str {
    match kind {
        Kind::Points => "POINT",
        Kind::Lines => "LINESTRING",
        Kind::Polygons => "MULTIPOLYGON",
        Kind::PointsAndPolygons => "GEOMETRY",
    }
}

/// A property's value as a cell.
fn cell(value: Option<&Value>) -> Cell {
    match value {
        Some(Value::String(text)) => Cell::Text(text.clone()),
        Some(Value::Number(number)) => number
            .as_i64()
            .map(Cell::Integer)
            .or_else(|| number.as_f64().map(Cell::Real))
            .unwrap_or(Cell::Null),
        _ => Cell::Null,
    }
}
