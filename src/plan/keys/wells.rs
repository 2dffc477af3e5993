//! The keys of wells and neighbours, in the plan and in layers.

use super::*;

pub(in crate::plan) static AT: Key = key("at", Form::Point, "Where it is.");
pub(in crate::plan) static PUMPING: Key = quantity("pumping", RATE, "The rate it pumps.");
pub(in crate::plan) static INJECTION: Key = quantity("injection", RATE, "The rate it injects.");
pub(in crate::plan) static RADIUS: Key = quantity(
    "radius",
    Measure::between(Dimension::Length, 0.001, 1000.0),
    "Radius of the borehole wall at the screen.",
)
.required();
pub(in crate::plan) static WELL_LOSS: Key = quantity(
    "well_loss",
    Measure::between(Dimension::WellLoss, 0.0, 1.0),
    "The C of s = BQ + CQ²; d2/m5, or ft/gpm2 in a us plan.",
);
pub(in crate::plan) static LOWEST_LEVEL: Key = quantity(
    "lowest_level",
    LEVEL,
    "The level that pumping must not draw the well below.",
);
pub(in crate::plan) static GROUND: Key = quantity("ground", LEVEL, "Ground elevation.");
pub(in crate::plan) static FILE: Key = key(
    "file",
    Form::Text,
    "A GeoJSON file whose properties carry the keys, relative to the plan.",
)
.required();

pub(in crate::plan) static AREA: Key = key(
    "area",
    Form::Points(3),
    "The corners of a property; its worst point counts.",
);
pub(in crate::plan) static ALLOWED_DRAWDOWN: Key = quantity(
    "allowed_drawdown",
    Measure::positive(Dimension::Length, 1e4),
    "The drawdown it may suffer.",
);

pub(in crate::plan) static WELL_TABLE: Table = Table {
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
pub(in crate::plan) static WELL_LAYER_TABLE: Table =
    table("well_layer", &[&FILE], "A layer of wells.");
/// The properties of a feature in a layer of wells.
pub(in crate::plan) static WELL_FEATURE_TABLE: Table = Table {
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
pub(in crate::plan) static NEIGHBOUR_TABLE: Table = Table {
    exactly_one: &[&[&AT, &AREA, &LAYER]],
    needs: &[(&LAYER, &FEATURE), (&FEATURE, &LAYER)],
    ..table(
        "neighbour",
        &[&NAME, &AT, &AREA, &LAYER, &FEATURE, &ALLOWED_DRAWDOWN],
        "A neighbouring well, spring or property.",
    )
};
pub(in crate::plan) static NEIGHBOUR_LAYER_TABLE: Table =
    table("neighbour_layer", &[&FILE], "A layer of neighbours.");
/// The properties of a feature in a layer of neighbours.
pub(in crate::plan) static NEIGHBOUR_FEATURE_TABLE: Table = table(
    "neighbour",
    &[&NAME, &ALLOWED_DRAWDOWN],
    "A neighbour of a layer.",
);
