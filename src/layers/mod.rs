//! Writes what was found as GIS layers, tables and one JSON document, all
//! listed in [`OUTPUTS`].

pub(crate) mod boundaries;
mod caution;
mod contours;
mod findings_json;
mod flow;
pub mod geojson;
mod geopackage;
mod geotiff;
mod image_wells;
mod interference_csv;
pub mod layer;
mod map_svg;
mod neighbours;
mod output;
mod property;
mod raster;
mod rings;
mod river_reaches;
mod styles;
mod units;
mod wells;
pub mod words;
mod write;

pub use caution::CAUTION;
pub use contours::Levels;
pub use interference_csv::safe_cell;
pub use map_svg::map_svg;
pub(crate) use map_svg::{
    INK, MapPicture, PAPER, Theme, WATER, escaped, map_picture, multiples, round_step,
};
pub use output::{OUTPUTS, Output, UnknownOutput, make, outputs_named};
pub use property::{Property, Quantity};
pub use units::{Properties, Units, number};
pub use write::{OutputFile, WriteError, write_all};

use std::sync::OnceLock;

use crate::contours::{Band, ContourError, ContourLine};
use crate::findings::{Findings, FlagCode, Solution, Survey, Who};
use crate::plan::Plan;

/// A plan with everything that was found of it.
pub struct Planned<'a> {
    /// What the user wrote.
    pub plan: &'a Plan,
    /// The heads of its aquifers.
    pub solution: &'a Solution,
    /// The map.
    pub survey: &'a Survey<'a>,
    /// The levels of its contours.
    pub levels: Levels,
    /// What was found.
    pub findings: &'a Findings,
    /// What was drawn so far.
    pub drawn: Drawn,
}

impl Planned<'_> {
    /// The plan's units.
    pub fn units(&self) -> Units {
        Units(self.plan.units)
    }

    /// What the reader should know: assumptions made where the plan was silent.
    pub fn notes(&self) -> Vec<String> {
        let mut notes = notes(self.plan, self.solution);
        notes.extend(flow::note(self.plan).map(str::to_owned));
        notes
    }
}

/// What several outputs show, made when first asked for.
#[derive(Debug, Default)]
pub struct Drawn {
    heads: OnceLock<Vec<ContourLine>>,
    drawdowns: OnceLock<(Vec<ContourLine>, Vec<Band>)>,
}

/// What the reader of a plan's results should know: assumptions made where
/// the plan was silent.
pub fn notes(plan: &Plan, solution: &Solution) -> Vec<String> {
    let mut notes = plan.notes.clone();
    for note in solution.fields().iter().flat_map(|field| field.notes()) {
        let note = plan.units.beside(note);
        if !notes.contains(&note) {
            notes.push(note);
        }
    }
    notes
}

/// Why an output cannot be made.
#[derive(Debug, thiserror::Error)]
pub enum LayerError {
    /// A place has no longitude and latitude.
    #[error(
        "the point {x_m} m east and {y_m} m north of the site's origin has no longitude and latitude: {reason}"
    )]
    Projection {
        /// East of the site's origin, metres.
        x_m: f64,
        /// North of the site's origin, metres.
        y_m: f64,
        /// What the coordinate system says.
        reason: String,
    },
    /// The contours cannot be drawn.
    #[error("the contours cannot be drawn: {0}")]
    Contours(#[from] ContourError),
    /// A raster cannot be written.
    #[error("the raster cannot be written: {0}")]
    Raster(String),
    /// A GeoPackage cannot be written.
    #[error("the GeoPackage cannot be written: {0}")]
    GeoPackage(#[from] rusqlite::Error),
    /// A table cannot be written.
    #[error("the table cannot be written: {0}")]
    Table(String),
    /// The report cannot be set.
    #[error("the report cannot be set: {0}")]
    Page(String),
    /// A document cannot be written as JSON.
    #[error("the document cannot be written: {0}")]
    Json(#[from] serde_json::Error),
}

impl From<csv::Error> for LayerError {
    fn from(error: csv::Error) -> Self {
        Self::Table(error.to_string())
    }
}

/// The codes of the flags of one well or neighbour, most severe first.
fn flag_codes(planned: &Planned<'_>, who: Who) -> Vec<&'static str> {
    let mut codes: Vec<FlagCode> = planned
        .findings
        .flags_of(who)
        .map(|flag| flag.code)
        .collect();
    codes.dedup();
    codes.into_iter().map(FlagCode::name).collect()
}
