//! The keys of `[aquifer]` and `[ambient]`.

use super::*;

pub(in crate::plan) static MATERIAL: Key = key(
    "material",
    Form::Text,
    "An aquifer material whose typical conductivity is taken where none is given.",
);
pub(in crate::plan) static CONDUCTIVITY: Key = quantity(
    "conductivity",
    Measure::positive(Dimension::Conductivity, 1e7),
    "Hydraulic conductivity; with thickness, or instead of it transmissivity.",
);
pub(in crate::plan) static THICKNESS: Key = quantity(
    "thickness",
    Measure::positive(Dimension::Length, 1e4),
    "Thickness of the aquifer.",
);
pub(in crate::plan) static TRANSMISSIVITY: Key = quantity(
    "transmissivity",
    Measure::positive(Dimension::Transmissivity, 1e7),
    "Conductivity times thickness.",
);
pub(in crate::plan) static ROOF: Key = quantity(
    "roof",
    LEVEL,
    "Elevation of the aquifer's top, the base of its confining bed.",
);
pub(in crate::plan) static RECHARGE: Key = quantity(
    "recharge",
    Measure::between(Dimension::Flux, -1.0, 1.0),
    "Areal leakage into the aquifer.",
);
pub(in crate::plan) static ANISOTROPY: Key = key(
    "anisotropy",
    Form::Table(&ANISOTROPY_TABLE),
    "Conductivity that differs with direction; the values above are then its geometric mean.",
);
pub(in crate::plan) static RATIO: Key = quantity(
    "ratio",
    Measure::between(Dimension::Share, 1.0, 1e4),
    "Largest over smallest conductivity.",
)
.required();
pub(in crate::plan) static AZIMUTH_OF_LARGEST: Key = quantity(
    "azimuth",
    AZIMUTH,
    "Azimuth of the largest conductivity, degrees clockwise from grid north.",
)
.required();
pub(in crate::plan) static INFLUENCE_RADIUS: Key = quantity(
    "influence_radius",
    Measure::positive(Dimension::Length, 1e7),
    "Distance at which a well's drawdown ends, where no fixed head bounds the aquifer.",
);

pub(in crate::plan) static AMBIENT_HEAD: Key =
    quantity("head", LEVEL, "The head before pumping at the point `at`.");
pub(in crate::plan) static AMBIENT_AT: Key = key("at", Form::Point, "Where `head` holds.");
pub(in crate::plan) static GRADIENT: Key = quantity(
    "gradient",
    Measure::between(Dimension::Slope, 0.0, 1.0),
    "Slope of the head before pumping.",
);
pub(in crate::plan) static TOWARD: Key = quantity(
    "toward",
    AZIMUTH,
    "Azimuth the head falls toward, degrees clockwise from grid north.",
);

pub(in crate::plan) static AQUIFER_TABLE: Table = table(
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
pub(in crate::plan) static ANISOTROPY_TABLE: Table = table(
    "anisotropy",
    &[&RATIO, &AZIMUTH_OF_LARGEST],
    "Conductivity that differs with direction.",
);
pub(in crate::plan) static AMBIENT_TABLE: Table = Table {
    needs: &[(&TOWARD, &GRADIENT)],
    ..table(
        "[ambient]",
        &[&AMBIENT_HEAD, &AMBIENT_AT, &GRADIENT, &TOWARD],
        "The head before pumping.",
    )
};
