//! The keys of `[[river]]` and `[[barrier]]`.

use super::*;

pub(in crate::plan) static NAME: Key = key("name", Form::Text, "Its name; unique.").required();
pub(in crate::plan) static LINE: Key = key(
    "line",
    Form::Points(2),
    "The vertices of its line; a closed ring when the last is the first.",
);
pub(in crate::plan) static CIRCLE: Key = key(
    "circle",
    Form::Table(&CIRCLE_TABLE),
    "A circle instead of a line.",
);
pub(in crate::plan) static CENTRE: Key =
    key("centre", Form::Point, "Centre of the circle.").required();
pub(in crate::plan) static CIRCLE_RADIUS: Key = quantity(
    "radius",
    Measure::positive(Dimension::Length, 1e7).in_grid_units(),
    "Radius of the circle, in the CRS's unit.",
)
.required();
pub(in crate::plan) static LAYER: Key = key(
    "layer",
    Form::Text,
    "A GeoJSON file to take the place from, relative to the plan.",
);
pub(in crate::plan) static FEATURE: Key = key(
    "feature",
    Form::Text,
    "The `name` property of the layer's feature.",
);
pub(in crate::plan) static STAGE: Key = key(
    "stage",
    Form::Stage(LEVEL),
    "Water level: constant, or one value for each vertex of the line.",
)
.required();
pub(in crate::plan) static BANK_RESISTANCE: Key = quantity(
    "bank_resistance",
    Measure::between(Dimension::Time, 0.0, 1e9),
    "Skin thickness over skin conductivity of a clogged bank.",
);

pub(in crate::plan) static RIVER_TABLE: Table = Table {
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
pub(in crate::plan) static BARRIER_TABLE: Table = Table {
    exactly_one: &[&[&LINE, &CIRCLE, &LAYER]],
    needs: &[(&LAYER, &FEATURE), (&FEATURE, &LAYER)],
    ..table(
        "barrier",
        &[&NAME, &LINE, &CIRCLE, &LAYER, &FEATURE],
        "A no-flow edge.",
    )
};
pub(in crate::plan) static CIRCLE_TABLE: Table =
    table("circle", &[&CENTRE, &CIRCLE_RADIUS], "A circle.");
