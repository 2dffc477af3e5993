//! `head.tif` and `drawdown.tif`: the field as a picture of numbers.
//!
//! Cells are squares of the map's spacing. The map's nodes are their centres,
//! where the values are computed; cells whose centre lies outside every
//! aquifer hold no data.

use super::geotiff::{self, Picture};
use super::{LayerError, Planned};
use crate::site::Vector;

/// The heads as a file.
pub fn heads(planned: &Planned<'_>) -> Result<Vec<u8>, LayerError> {
    file(planned, "head", &planned.survey.at_nodes().heads_m)
}

/// The drawdowns as a file.
pub fn drawdowns(planned: &Planned<'_>) -> Result<Vec<u8>, LayerError> {
    file(planned, "drawdown", &planned.survey.at_nodes().drawdowns_m)
}

/// Values at the nodes, row by row from the south-west, as a file in the
/// plan's unit of length.
fn file(planned: &Planned<'_>, name: &str, values_m: &[f64]) -> Result<Vec<u8>, LayerError> {
    let (window, units) = (&planned.survey.window, planned.units());
    let (columns, rows) = window.node_counts();
    // A picture's rows run from north to south; seven digits are what it holds.
    let southward = values_m.chunks(columns.max(1)).rev().flatten();
    let values: Vec<f32> = southward
        .map(|&value_m| units.length(value_m) as f32)
        .collect();
    let north_west_node = Vector::new(0.0, rows.saturating_sub(1) as f64);
    let half_a_cell = Vector::new(-0.5, 0.5);
    let north_west = window.extent.min + (north_west_node + half_a_cell) * window.spacing_m;
    geotiff::file(&Picture {
        crs: &planned.plan.crs,
        columns,
        values: &values,
        corner: planned.plan.to_plan_xy(north_west),
        cell: window.spacing_m / planned.plan.crs.metres_per_unit(),
        name,
        unit: units.length_ending(),
    })
}
