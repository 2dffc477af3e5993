//! The tables of a plan.

use super::*;

pub(in crate::plan) static TITLE: Key = key(
    "title",
    Form::Text,
    "Title of the plan; the file's name if absent.",
);
pub(in crate::plan) static CRS: Key = key("crs", Form::Crs, "A projected CRS, \"EPSG:32633\", or { origin = [longitude, latitude] } for a local east/north grid in metres.").required();
pub(in crate::plan) static UNITS: Key = key(
    "units",
    Form::OneOf(&["metric", "us"]),
    "Units of bare numbers. metric: m, m3/d, m2/d, m/d, d. us: ft, gpm, ft2/d, ft/d, in/yr, d.",
)
.required();
pub(in crate::plan) static ORIGIN: Key = key(
    "origin",
    Form::LongitudeLatitude,
    "Longitude and latitude of the local grid's origin, degrees.",
)
.required();

pub(in crate::plan) static AQUIFER: Key = key(
    "aquifer",
    Form::Table(&AQUIFER_TABLE),
    "The confined aquifer.",
)
.required();
pub(in crate::plan) static AMBIENT: Key = key(
    "ambient",
    Form::Table(&AMBIENT_TABLE),
    "The head before pumping, where the rivers alone do not fix it.",
);
pub(in crate::plan) static RIVER: Key =
    key("river", Form::Tables(&RIVER_TABLE), "Fixed-head edges.");
pub(in crate::plan) static BARRIER: Key =
    key("barrier", Form::Tables(&BARRIER_TABLE), "No-flow edges.");
pub(in crate::plan) static WELL: Key = key("well", Form::Tables(&WELL_TABLE), "Wells.");
pub(in crate::plan) static WELL_LAYER: Key = key(
    "well_layer",
    Form::Tables(&WELL_LAYER_TABLE),
    "Whole layers of wells.",
);
pub(in crate::plan) static NEIGHBOUR: Key = key(
    "neighbour",
    Form::Tables(&NEIGHBOUR_TABLE),
    "Neighbouring wells, springs and properties.",
);
pub(in crate::plan) static NEIGHBOUR_LAYER: Key = key(
    "neighbour_layer",
    Form::Tables(&NEIGHBOUR_LAYER_TABLE),
    "Whole layers of neighbours.",
);
pub(in crate::plan) static LIMITS: Key = key("limits", Form::Table(&LIMITS_TABLE), "When to flag.");
pub(in crate::plan) static ACCURACY: Key = key(
    "accuracy",
    Form::Table(&ACCURACY_TABLE),
    "How exact the answer must be.",
);
pub(in crate::plan) static MAP: Key = key("map", Form::Table(&MAP_TABLE), "What the map covers.");

pub(in crate::plan) static PLAN_TABLE: Table = table(
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
pub(in crate::plan) static CRS_TABLE: Table = table(
    "local grid",
    &[&ORIGIN],
    "A local east/north grid in metres.",
);
