//! `head.tif` and `drawdown.tif`: the field as a picture of numbers.
//!
//! Cells are squares of the map's spacing. The map's nodes are their centres,
//! where the values are computed; cells whose centre lies outside every
//! aquifer hold no data.

use super::geotiff::{self, Picture};
use super::{LayerError, Planned};
use crate::findings::Solution;
use crate::site::{Point, Vector};

/// Rows that are computed at a time.
const ROWS_AT_A_TIME: usize = 64;

/// The heads, in the plan's unit of length.
pub fn heads(planned: &Planned<'_>) -> Result<Vec<u8>, LayerError> {
    raster(planned, "head", Solution::heads_m)
}

/// The drawdowns, in the plan's unit of length.
pub fn drawdowns(planned: &Planned<'_>) -> Result<Vec<u8>, LayerError> {
    raster(planned, "drawdown", Solution::drawdowns_m)
}

/// One field at the nodes of the map.
fn raster(
    planned: &Planned<'_>,
    name: &str,
    evaluate: fn(&Solution, &[Point]) -> Vec<f64>,
) -> Result<Vec<u8>, LayerError> {
    let units = planned.units();
    let window = &planned.survey.window;
    let (columns, rows) = window.node_counts();
    let node = |column: usize, row: usize| {
        window.extent.min + Vector::new(column as f64, row as f64) * window.spacing_m
    };
    let mut values = Vec::with_capacity(columns * rows);
    // A picture's rows run from north to south.
    let southward: Vec<usize> = (0..rows).rev().collect();
    for some_rows in southward.chunks(ROWS_AT_A_TIME) {
        let nodes: Vec<Point> = some_rows
            .iter()
            .flat_map(|&row| (0..columns).map(move |column| node(column, row)))
            .collect();
        let found_m = evaluate(planned.solution, &nodes);
        // Seven digits are what the file holds.
        values.extend(
            found_m
                .into_iter()
                .map(|value_m| units.length(value_m) as f32),
        );
    }
    let north_west = node(0, rows.saturating_sub(1)) + Vector::new(-0.5, 0.5) * window.spacing_m;
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
