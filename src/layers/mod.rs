//! Writes what was found as GIS layers, tables and one JSON document: one
//! file an output, all listed in [`OUTPUTS`].

pub(crate) mod boundaries;
mod caution;
mod contours;
mod findings_json;
pub mod geojson;
mod image_wells;
mod interference_csv;
mod map_svg;
mod neighbours;
mod rings;
mod river_reaches;
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
pub use units::{Properties, Units, number};
pub use write::{OutputFile, WriteError, write_all};

use serde_json::Value;

use crate::contours::ContourError;
use crate::findings::{Findings, FlagCode, Solution, Survey, Who};
use crate::plan::Plan;
use crate::report;

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
}

impl Planned<'_> {
    /// The plan's units.
    pub fn units(&self) -> Units {
        Units(self.plan.units)
    }

    /// What the reader should know: assumptions made where the plan was silent.
    pub fn notes(&self) -> Vec<String> {
        notes(self.plan, self.solution)
    }
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

/// Makes one output.
type Maker = fn(&Planned<'_>) -> Result<Vec<u8>, LayerError>;

/// Every output: its name and its maker.
pub const OUTPUTS: [(&str, Maker); 11] = [
    ("head_contours.geojson", |p| json(&contours::head_lines(p)?)),
    ("drawdown_contours.geojson", |p| {
        json(&contours::drawdown_lines(p)?)
    }),
    ("drawdown_bands.geojson", |p| {
        json(&contours::drawdown_bands(p)?)
    }),
    ("wells.geojson", |p| json(&wells::layer(p)?)),
    ("neighbours.geojson", |p| json(&neighbours::layer(p)?)),
    ("boundaries.geojson", |p| json(&boundaries::layer(p)?)),
    ("river_reaches.geojson", |p| json(&river_reaches::layer(p)?)),
    ("image_wells.geojson", |p| json(&image_wells::layer(p)?)),
    ("interference.csv", interference_csv::table),
    ("findings.json", |p| {
        pretty_json(&findings_json::document(p))
    }),
    ("report.html", report::page),
];

/// Makes every output.
///
/// # Errors
/// The first output that cannot be made.
pub fn make_all(planned: &Planned<'_>) -> Result<Vec<OutputFile>, LayerError> {
    OUTPUTS
        .iter()
        .map(|&(name, make)| {
            Ok(OutputFile {
                name,
                bytes: make(planned)?,
            })
        })
        .collect()
}

/// JSON on one line, with a line end.
fn json(value: &impl serde::Serialize) -> Result<Vec<u8>, LayerError> {
    let mut bytes = serde_json::to_vec(value)?;
    bytes.push(b'\n');
    Ok(bytes)
}

/// JSON for people too.
fn pretty_json(value: &Value) -> Result<Vec<u8>, LayerError> {
    let mut bytes = serde_json::to_vec_pretty(value)?;
    bytes.push(b'\n');
    Ok(bytes)
}
