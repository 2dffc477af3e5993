//! Every key of the plan file, defined once: the reader, the unknown-key
//! check and the JSON Schema all read these tables.
//!
//! The bounds are there to catch slips of the pen (a unit mistaken, a comma
//! lost): they lie far outside anything that is drilled or pumped. They are
//! common practice, no source.

use super::units::Dimension;

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

impl Key {
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

pub(super) static TITLE: Key = key(
    "title",
    Form::Text,
    "Title of the plan; the file's name if absent.",
);
pub(super) static CRS: Key = key("crs", Form::Crs, "A projected CRS, \"EPSG:32633\", or { origin = [longitude, latitude] } for a local east/north grid in metres.").required();
pub(super) static UNITS: Key = key(
    "units",
    Form::OneOf(&["metric", "us"]),
    "Units of bare numbers. metric: m, m3/d, m2/d, m/d, d. us: ft, gpm, ft2/d, ft/d, in/yr, d.",
)
.required();
pub(super) static ORIGIN: Key = key(
    "origin",
    Form::LongitudeLatitude,
    "Longitude and latitude of the local grid's origin, degrees.",
)
.required();

pub(super) static MATERIAL: Key = key(
    "material",
    Form::Text,
    "An aquifer material whose typical conductivity is taken where none is given.",
);
pub(super) static CONDUCTIVITY: Key = quantity(
    "conductivity",
    Measure::positive(Dimension::Conductivity, 1e7),
    "Hydraulic conductivity; with thickness, or instead of it transmissivity.",
);
pub(super) static THICKNESS: Key = quantity(
    "thickness",
    Measure::positive(Dimension::Length, 1e4),
    "Thickness of the aquifer.",
);
pub(super) static TRANSMISSIVITY: Key = quantity(
    "transmissivity",
    Measure::positive(Dimension::Transmissivity, 1e7),
    "Conductivity times thickness.",
);
pub(super) static ROOF: Key = quantity(
    "roof",
    LEVEL,
    "Elevation of the aquifer's top, the base of its confining bed.",
);
pub(super) static RECHARGE: Key = quantity(
    "recharge",
    Measure::between(Dimension::Flux, -1.0, 1.0),
    "Areal leakage into the aquifer.",
);
pub(super) static ANISOTROPY: Key = key(
    "anisotropy",
    Form::Table(&ANISOTROPY_TABLE),
    "Conductivity that differs with direction; the values above are then its geometric mean.",
);
pub(super) static RATIO: Key = quantity(
    "ratio",
    Measure::between(Dimension::Share, 1.0, 1e4),
    "Largest over smallest conductivity.",
)
.required();
pub(super) static AZIMUTH_OF_LARGEST: Key = quantity(
    "azimuth",
    AZIMUTH,
    "Azimuth of the largest conductivity, degrees clockwise from grid north.",
)
.required();
pub(super) static INFLUENCE_RADIUS: Key = quantity(
    "influence_radius",
    Measure::positive(Dimension::Length, 1e7),
    "Distance at which a well's drawdown ends, where no fixed head bounds the aquifer.",
);

pub(super) static AMBIENT_HEAD: Key =
    quantity("head", LEVEL, "The head before pumping at the point `at`.");
pub(super) static AMBIENT_AT: Key = key("at", Form::Point, "Where `head` holds.");
pub(super) static GRADIENT: Key = quantity(
    "gradient",
    Measure::between(Dimension::Slope, 0.0, 1.0),
    "Slope of the head before pumping.",
);
pub(super) static TOWARD: Key = quantity(
    "toward",
    AZIMUTH,
    "Azimuth the head falls toward, degrees clockwise from grid north.",
);

pub(super) static NAME: Key = key("name", Form::Text, "Its name; unique.").required();
pub(super) static LINE: Key = key(
    "line",
    Form::Points(2),
    "The vertices of its line; a closed ring when the last is the first.",
);
pub(super) static CIRCLE: Key = key(
    "circle",
    Form::Table(&CIRCLE_TABLE),
    "A circle instead of a line.",
);
pub(super) static CENTRE: Key = key("centre", Form::Point, "Centre of the circle.").required();
pub(super) static CIRCLE_RADIUS: Key = quantity(
    "radius",
    Measure::positive(Dimension::Length, 1e7).in_grid_units(),
    "Radius of the circle, in the CRS's unit.",
)
.required();
pub(super) static LAYER: Key = key(
    "layer",
    Form::Text,
    "A GeoJSON file to take the place from, relative to the plan.",
);
pub(super) static FEATURE: Key = key(
    "feature",
    Form::Text,
    "The `name` property of the layer's feature.",
);
pub(super) static STAGE: Key = key(
    "stage",
    Form::Stage(LEVEL),
    "Water level: constant, or one value for each vertex of the line.",
)
.required();
pub(super) static BANK_RESISTANCE: Key = quantity(
    "bank_resistance",
    Measure::between(Dimension::Time, 0.0, 1e9),
    "Skin thickness over skin conductivity of a clogged bank.",
);

pub(super) static AT: Key = key("at", Form::Point, "Where it is.");
pub(super) static PUMPING: Key = quantity("pumping", RATE, "Rate it pumps.");
pub(super) static INJECTION: Key = quantity("injection", RATE, "Rate it injects.");
pub(super) static RADIUS: Key = quantity(
    "radius",
    Measure::between(Dimension::Length, 0.001, 1000.0),
    "Radius of the borehole wall at the screen.",
)
.required();
pub(super) static WELL_LOSS: Key = quantity(
    "well_loss",
    Measure::between(Dimension::WellLoss, 0.0, 1.0),
    "C of s = BQ + CQ²; d2/m5, or ft/gpm2 in a us plan.",
);
pub(super) static LOWEST_LEVEL: Key = quantity(
    "lowest_level",
    LEVEL,
    "The level that pumping must not draw the well below.",
);
pub(super) static GROUND: Key = quantity("ground", LEVEL, "Ground elevation.");
pub(super) static FILE: Key = key(
    "file",
    Form::Text,
    "A GeoJSON file whose properties carry the keys, relative to the plan.",
)
.required();

pub(super) static AREA: Key = key(
    "area",
    Form::Points(3),
    "The corners of a property; its worst point counts.",
);
pub(super) static ALLOWED_DRAWDOWN: Key = quantity(
    "allowed_drawdown",
    Measure::positive(Dimension::Length, 1e4),
    "The drawdown it may suffer.",
);

pub(super) static INTERFERENCE_SHARE: Key = quantity(
    "interference_share",
    Measure::between(Dimension::Share, 0.0, 1.0),
    "Flag a well when others cause more than this share of its drawdown.",
);
pub(super) static HEAD_ACCURACY: Key = quantity(
    "head",
    Measure::between(Dimension::Length, 1e-9, 10.0),
    "The head error that the plan accepts.",
);
pub(super) static EXTENT: Key = key(
    "extent",
    Form::Extent,
    "Corners of the map: [xmin, ymin, xmax, ymax].",
);
pub(super) static SPACING: Key = quantity(
    "spacing",
    Measure::positive(Dimension::Length, 1e6).in_grid_units(),
    "Distance of the map's nodes, in the CRS's unit.",
);
pub(super) static INTERVAL: Key = quantity(
    "interval",
    Measure::positive(Dimension::Length, 1e4),
    "Contour interval.",
);

pub(super) static AQUIFER: Key = key(
    "aquifer",
    Form::Table(&AQUIFER_TABLE),
    "The confined aquifer.",
)
.required();
pub(super) static AMBIENT: Key = key(
    "ambient",
    Form::Table(&AMBIENT_TABLE),
    "The head before pumping, where the rivers alone do not fix it.",
);
pub(super) static RIVER: Key = key("river", Form::Tables(&RIVER_TABLE), "Fixed-head edges.");
pub(super) static BARRIER: Key = key("barrier", Form::Tables(&BARRIER_TABLE), "No-flow edges.");
pub(super) static WELL: Key = key("well", Form::Tables(&WELL_TABLE), "Wells.");
pub(super) static WELL_LAYER: Key = key(
    "well_layer",
    Form::Tables(&WELL_LAYER_TABLE),
    "Whole layers of wells.",
);
pub(super) static NEIGHBOUR: Key = key(
    "neighbour",
    Form::Tables(&NEIGHBOUR_TABLE),
    "Neighbouring wells, springs and properties.",
);
pub(super) static NEIGHBOUR_LAYER: Key = key(
    "neighbour_layer",
    Form::Tables(&NEIGHBOUR_LAYER_TABLE),
    "Whole layers of neighbours.",
);
pub(super) static LIMITS: Key = key("limits", Form::Table(&LIMITS_TABLE), "When to flag.");
pub(super) static ACCURACY: Key = key(
    "accuracy",
    Form::Table(&ACCURACY_TABLE),
    "How exact the answer must be.",
);
pub(super) static MAP: Key = key("map", Form::Table(&MAP_TABLE), "What the map covers.");

const fn table(name: &'static str, keys: &'static [&'static Key], doc: &'static str) -> Table {
    Table {
        name,
        keys,
        exactly_one: &[],
        needs: &[],
        doc,
    }
}

pub(super) static PLAN_TABLE: Table = table(
    "the plan",
    &[
        &TITLE,
        &CRS,
        &UNITS,
        &AQUIFER,
        &AMBIENT,
        &RIVER,
        &BARRIER,
        &WELL,
        &WELL_LAYER,
        &NEIGHBOUR,
        &NEIGHBOUR_LAYER,
        &LIMITS,
        &ACCURACY,
        &MAP,
    ],
    "A plan of a well field.",
);
pub(super) static CRS_TABLE: Table = table("crs", &[&ORIGIN], "A local east/north grid in metres.");
pub(super) static AQUIFER_TABLE: Table = table(
    "[aquifer]",
    &[
        &MATERIAL,
        &CONDUCTIVITY,
        &THICKNESS,
        &TRANSMISSIVITY,
        &ROOF,
        &RECHARGE,
        &ANISOTROPY,
        &INFLUENCE_RADIUS,
    ],
    "The confined aquifer.",
);
pub(super) static ANISOTROPY_TABLE: Table = table(
    "anisotropy",
    &[&RATIO, &AZIMUTH_OF_LARGEST],
    "Conductivity that differs with direction.",
);
pub(super) static AMBIENT_TABLE: Table = Table {
    needs: &[(&TOWARD, &GRADIENT)],
    ..table(
        "[ambient]",
        &[&AMBIENT_HEAD, &AMBIENT_AT, &GRADIENT, &TOWARD],
        "The head before pumping.",
    )
};
pub(super) static RIVER_TABLE: Table = Table {
    exactly_one: &[&[&LINE, &CIRCLE, &LAYER]],
    needs: &[(&LAYER, &FEATURE), (&FEATURE, &LAYER)],
    ..table(
        "river",
        &[
            &NAME,
            &LINE,
            &CIRCLE,
            &LAYER,
            &FEATURE,
            &STAGE,
            &BANK_RESISTANCE,
        ],
        "A fixed-head edge.",
    )
};
pub(super) static BARRIER_TABLE: Table = Table {
    exactly_one: &[&[&LINE, &CIRCLE, &LAYER]],
    needs: &[(&LAYER, &FEATURE), (&FEATURE, &LAYER)],
    ..table(
        "barrier",
        &[&NAME, &LINE, &CIRCLE, &LAYER, &FEATURE],
        "A no-flow edge.",
    )
};
pub(super) static CIRCLE_TABLE: Table = table("circle", &[&CENTRE, &CIRCLE_RADIUS], "A circle.");
pub(super) static WELL_TABLE: Table = Table {
    exactly_one: &[&[&AT, &LAYER], &[&PUMPING, &INJECTION]],
    needs: &[(&LAYER, &FEATURE), (&FEATURE, &LAYER)],
    ..table(
        "well",
        &[
            &NAME,
            &AT,
            &LAYER,
            &FEATURE,
            &PUMPING,
            &INJECTION,
            &RADIUS,
            &WELL_LOSS,
            &LOWEST_LEVEL,
            &GROUND,
        ],
        "A well; it pumps or injects.",
    )
};
pub(super) static WELL_LAYER_TABLE: Table = table("well_layer", &[&FILE], "A layer of wells.");
/// The properties of a feature in a layer of wells.
pub(super) static WELL_FEATURE_TABLE: Table = Table {
    exactly_one: &[&[&PUMPING, &INJECTION]],
    ..table(
        "well",
        &[
            &NAME,
            &PUMPING,
            &INJECTION,
            &RADIUS,
            &WELL_LOSS,
            &LOWEST_LEVEL,
            &GROUND,
        ],
        "A well of a layer.",
    )
};
pub(super) static NEIGHBOUR_TABLE: Table = Table {
    exactly_one: &[&[&AT, &AREA, &LAYER]],
    needs: &[(&LAYER, &FEATURE), (&FEATURE, &LAYER)],
    ..table(
        "neighbour",
        &[&NAME, &AT, &AREA, &LAYER, &FEATURE, &ALLOWED_DRAWDOWN],
        "A neighbouring well, spring or property.",
    )
};
pub(super) static NEIGHBOUR_LAYER_TABLE: Table =
    table("neighbour_layer", &[&FILE], "A layer of neighbours.");
/// The properties of a feature in a layer of neighbours.
pub(super) static NEIGHBOUR_FEATURE_TABLE: Table = table(
    "neighbour",
    &[&NAME, &ALLOWED_DRAWDOWN],
    "A neighbour of a layer.",
);
pub(super) static LIMITS_TABLE: Table = table("[limits]", &[&INTERFERENCE_SHARE], "When to flag.");
pub(super) static ACCURACY_TABLE: Table = table(
    "[accuracy]",
    &[&HEAD_ACCURACY],
    "How exact the answer must be.",
);
pub(super) static MAP_TABLE: Table = table(
    "[map]",
    &[&EXTENT, &SPACING, &INTERVAL],
    "What the map covers.",
);
