//! Reads what the user wrote: a plan in TOML, with units, a coordinate
//! system, GIS layers and materials; and points at the exact place when it
//! is wrong.
//!
//! Method: the text becomes a tree of values that know their place; each
//! table is read against one list of keys ([`schema()`] is made of the same
//! list), and every fault is collected. Out comes a [`Site`] in metres and
//! days, its origin moved near the wells.
//! Limits: files of 64 MB, 20,000 wells, neighbours and edges each.

mod aquifer;
pub mod crs;
mod diagnostics;
mod document;
mod edges;
mod fault;
mod features;
mod files;
mod json;
mod keys;
mod layers;
mod lines;
mod map;
mod materials;
mod names;
mod neighbours;
mod points;
mod quantities;
mod reader;
mod schema;
mod source;
mod source_map;
mod syntax;
pub mod units;
mod value;
mod wells;

use std::path::Path;

use crate::site::{Point, Refusal, Site, Subject};

use crs::{Crs, CrsError};
use fault::Fault;
use files::LayerStore;
use source::{Source, Sources};
use source_map::SourceMap;

pub(crate) use fault::nearest;
pub use fault::{ListedFault, PlanFaults};
pub use materials::{ConductivityRange, Material, ShareRange, materials};
pub use schema::schema;
pub use source::Location;
pub use units::{Dimension, UnitSystem};

/// A quantity that a plan gives.
#[derive(Clone, Debug, PartialEq)]
pub struct Input {
    /// Whose it is: `[aquifer]`, "well `PW-1`".
    pub of: String,
    /// Its key.
    pub key: &'static str,
    /// As it was written, with its unit.
    pub written: String,
    /// Its value in metres, days and degrees.
    pub si: f64,
    /// What it measures.
    pub dimension: Dimension,
}

impl Input {
    /// Its value in metres and days, to nine digits, with its unit.
    pub fn in_si(&self) -> String {
        let value = quantities::rounded(self.si, 9);
        let unit = UnitSystem::Metric.unit_name(self.dimension);
        format!("{value} {unit}").trim_end().to_owned()
    }
}

/// A plan that was read without a fault.
#[derive(Clone, Debug)]
pub struct Plan {
    /// Its title; the file's name where it gives none.
    pub title: String,
    /// The problem, in metres and days, in the local frame.
    pub site: Site,
    /// The coordinate system of the plan's coordinates.
    pub crs: Crs,
    /// The units of the plan's bare numbers, and of the results.
    pub units: UnitSystem,
    /// The local frame's origin, whole metres of the plan's grid.
    pub origin: Point,
    /// SHA-256, in hexadecimal, of the plan's bytes followed by the bytes of
    /// each layer it uses, once each, in the order in which the plan is read:
    /// rivers, barriers, wells, layers of wells, neighbours, layers of
    /// neighbours.
    pub sha256: String,
    /// The material it names.
    pub material: Option<&'static Material>,
    /// What the reader should know: values taken where the plan was silent.
    pub notes: Vec<String>,
    /// The quantities it gives, in the order in which they were read; of
    /// coordinates the file holds the only record.
    pub inputs: Vec<Input>,
    sources: Sources,
    map: SourceMap,
}

impl Plan {
    /// Reads a plan and the layers it names, which lie relative to it.
    ///
    /// # Errors
    /// All the plan's faults, each at its place.
    pub fn read(path: &Path) -> Result<Self, PlanFaults> {
        let name = path.display().to_string();
        let bytes = files::read(path).map_err(|error| document::unreadable(&name, &error))?;
        let folder = path.parent().unwrap_or(Path::new(""));
        document::read(&name, bytes, LayerStore::Folder(folder))
    }

    /// Reads a plan from its text; layers lie relative to `folder`.
    ///
    /// # Errors
    /// All the plan's faults, each at its place.
    pub fn from_text(name: &str, text: &str, folder: &Path) -> Result<Self, PlanFaults> {
        document::read(name, text.as_bytes().to_vec(), LayerStore::Folder(folder))
    }

    /// Reads a plan whose layers are built into a program: each a name and
    /// its text.
    ///
    /// # Errors
    /// All the plan's faults, each at its place.
    pub fn from_texts(name: &str, text: &str, layers: &[(&str, &str)]) -> Result<Self, PlanFaults> {
        document::read(name, text.as_bytes().to_vec(), LayerStore::BuiltIn(layers))
    }

    /// The plan as it was written, without its layers.
    pub fn text(&self) -> &str {
        self.sources.first().map_or("", Source::text)
    }

    /// A place of the site in the plan's CRS and its unit.
    pub fn to_plan_xy(&self, point: Point) -> (f64, f64) {
        let per_unit = self.crs.metres_per_unit();
        let grid = point + self.origin.coords;
        (grid.x / per_unit, grid.y / per_unit)
    }

    /// Coordinates of the plan's CRS as a place of the site.
    pub fn to_site(&self, x: f64, y: f64) -> Point {
        let per_unit = self.crs.metres_per_unit();
        Point::new(x * per_unit, y * per_unit) - self.origin.coords
    }

    /// WGS 84 longitude and latitude of a place of the site, degrees.
    ///
    /// # Errors
    /// Where the CRS has no place on Earth for it.
    pub fn to_longitude_latitude(&self, point: Point) -> Result<(f64, f64), CrsError> {
        let (x, y) = self.to_plan_xy(point);
        self.crs.to_longitude_latitude(x, y)
    }

    /// Where a part of the site was written.
    pub fn locate(&self, subject: &Subject) -> Location {
        self.sources.locate(self.map.find(subject))
    }

    /// What later rooms refused, as faults at their places in the plan.
    pub fn diagnose(&self, refusals: &[Refusal]) -> PlanFaults {
        let fault = |refusal: &Refusal| {
            let place = self.map.find(&refusal.subject);
            let told = |text: &str| self.units.beside(text);
            let mut fault = Fault::new(place, told(&refusal.what), told(&refusal.remedy));
            if let Some(why) = &refusal.why {
                fault = fault.why(told(why));
            }
            for (subject, label) in &refusal.related {
                fault = fault.related(self.map.find(subject), label);
            }
            fault
        };
        let faults = refusals.iter().map(fault).collect();
        PlanFaults::new(self.sources.clone(), faults)
    }
}
