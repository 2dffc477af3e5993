//! The keys of `[limits]`, `[accuracy]` and `[map]`.

use super::*;

pub(in crate::plan) static INTERFERENCE_SHARE: Key = quantity(
    "interference_share",
    Measure::between(Dimension::Share, 0.0, 1.0),
    "Flag a well when others cause more than this share of its drawdown.",
);
pub(in crate::plan) static HEAD_ACCURACY: Key = quantity(
    "head",
    Measure::between(Dimension::Length, 1e-9, 10.0),
    "The head error that the plan accepts.",
);
pub(in crate::plan) static EXTENT: Key = key(
    "extent",
    Form::Extent,
    "Corners of the map: [xmin, ymin, xmax, ymax].",
);
pub(in crate::plan) static SPACING: Key = quantity(
    "spacing",
    Measure::positive(Dimension::Length, 1e6).in_grid_units(),
    "Distance of the map's nodes, in the CRS's unit.",
);
pub(in crate::plan) static INTERVAL: Key = quantity(
    "interval",
    Measure::positive(Dimension::Length, 1e4),
    "Contour interval.",
);

pub(in crate::plan) static LIMITS_TABLE: Table =
    table("[limits]", &[&INTERFERENCE_SHARE], "When to flag.");
pub(in crate::plan) static ACCURACY_TABLE: Table = table(
    "[accuracy]",
    &[&HEAD_ACCURACY],
    "How exact the answer must be.",
);
pub(in crate::plan) static MAP_TABLE: Table = table(
    "[map]",
    &[&EXTENT, &SPACING, &INTERVAL],
    "What the map covers.",
);
