//! Every key of the plan file, defined once: the reader, the unknown-key
//! check and the JSON Schema all read these tables.
//!
//! The bounds are there to catch slips of the pen (a unit mistaken, a comma
//! lost): they lie far outside anything that is drilled or pumped. They are
//! common practice, no source.

mod aquifer;
mod edges;
mod plan;
mod settings;
mod wells;

use super::units::Dimension;

pub(super) use aquifer::*;
pub(super) use edges::*;
pub(super) use plan::*;
pub(super) use settings::*;
pub(super) use wells::*;

/// A table of the plan and its keys.
#[derive(Debug)]
pub(super) struct Table {
    /// What a message calls it.
    pub(super) name: &'static str,
    pub(super) keys: &'static [&'static Key],
    /// Of each group exactly one key must be given.
    pub(super) exactly_one: &'static [&'static [&'static Key]],
    /// The first key of a pair makes no sense without the second.
    pub(super) needs: &'static [(&'static Key, &'static Key)],
    pub(super) doc: &'static str,
}

/// One key.
#[derive(Debug)]
pub(super) struct Key {
    pub(super) name: &'static str,
    pub(super) required: bool,
    pub(super) form: Form,
    pub(super) doc: &'static str,
}

/// What may stand at a key.
#[derive(Debug)]
pub(super) enum Form {
    Text,
    OneOf(&'static [&'static str]),
    Crs,
    Quantity(Measure),
    /// A quantity, or one for each vertex of the line.
    Stage(Measure),
    /// [longitude, latitude] in degrees.
    LongitudeLatitude,
    /// [x, y] in the plan's CRS.
    Point,
    /// At least this many points.
    Points(usize),
    /// [xmin, ymin, xmax, ymax] in the plan's CRS.
    Extent,
    Table(&'static Table),
    Tables(&'static Table),
}

/// A number with its dimension and bounds; bounds in metres, days, degrees.
#[derive(Clone, Copy, Debug)]
pub(super) struct Measure {
    pub(super) dimension: Dimension,
    /// A bare number is in the CRS's own linear unit, not the plan's.
    pub(super) in_grid_units: bool,
    pub(super) least: f64,
    /// Whether `least` itself is refused.
    pub(super) above: bool,
    pub(super) most: f64,
}

impl Measure {
    const fn between(dimension: Dimension, least: f64, most: f64) -> Self {
        Self {
            dimension,
            in_grid_units: false,
            least,
            above: false,
            most,
        }
    }

    /// Above zero, and at most `most`.
    const fn positive(dimension: Dimension, most: f64) -> Self {
        let mut measure = Self::between(dimension, 0.0, most);
        measure.above = true;
        measure
    }

    const fn in_grid_units(mut self) -> Self {
        self.in_grid_units = true;
        self
    }
}

const fn key(name: &'static str, form: Form, doc: &'static str) -> Key {
    Key {
        name,
        required: false,
        form,
        doc,
    }
}

const fn quantity(name: &'static str, measure: Measure, doc: &'static str) -> Key {
    key(name, Form::Quantity(measure), doc)
}

impl Table {
    /// What a message calls one of its kind: "a well", "[aquifer]".
    pub(super) fn one(&self) -> String {
        match self.name.chars().next() {
            Some('[') => self.name.to_owned(),
            _ if self.name.starts_with("the ") => self.name.to_owned(),
            Some('a' | 'e' | 'i' | 'o' | 'u') => format!("an {}", self.name),
            _ => format!("a {}", self.name),
        }
    }
}

impl Key {
    /// What it means, to stand inside a sentence.
    pub(super) fn meaning(&self) -> String {
        let doc = self.doc.trim_end_matches('.');
        let mut characters = doc.chars();
        let first = characters.next().into_iter();
        let lower = first.flat_map(char::to_lowercase);
        lower.chain(characters).collect()
    }

    const fn required(mut self) -> Self {
        self.required = true;
        self
    }
}

/// The largest coordinate, metres: the Earth's girth is 4e7 m.
pub(super) const LARGEST_COORDINATE_M: f64 = 1e8;
/// Water levels and elevations, metres: the Earth's relief is ±11 km.
const LEVEL: Measure = Measure::between(Dimension::Length, -20_000.0, 20_000.0);
/// The Amazon carries 2e10 m³/d; no well field comes near 1e7.
const RATE: Measure = Measure::between(Dimension::Rate, 0.0, 1e7);
const AZIMUTH: Measure = Measure::between(Dimension::Angle, -360.0, 360.0);

const fn table(name: &'static str, keys: &'static [&'static Key], doc: &'static str) -> Table {
    Table {
        name,
        keys,
        exactly_one: &[],
        needs: &[],
        doc,
    }
}
