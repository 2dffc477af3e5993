//! `head.tif` and `drawdown.tif`: the field as a picture of numbers.
//!
//! Cells are squares of the map's spacing. The map's nodes are their centres,
//! where the values are computed; cells whose centre lies outside every
//! aquifer hold no data.

use super::geotiff::{self, Picture};
use super::{LayerError, Planned};
use crate::site::{Point, Vector};

/// Rows that are computed at a time.
const ROWS_AT_A_TIME: usize = 64;

/// Heads and drawdowns of all cells in the plan's unit of length, row by row
/// from the north-west, NaN outside. Seven digits are what the files hold.
#[derive(Debug, Default)]
pub(super) struct Cells {
    heads: Vec<f32>,
    drawdowns: Vec<f32>,
}

/// The heads as a file.
pub fn heads(planned: &Planned<'_>) -> Result<Vec<u8>, LayerError> {
    file(planned, "head", &cells(planned).heads)
}

/// The drawdowns as a file.
pub fn drawdowns(planned: &Planned<'_>) -> Result<Vec<u8>, LayerError> {
    file(planned, "drawdown", &cells(planned).drawdowns)
}

/// The middle of a cell.
fn node(planned: &Planned<'_>, column: usize, row: usize) -> Point {
    let window = &planned.survey.window;
    window.extent.min + Vector::new(column as f64, row as f64) * window.spacing_m
}

/// Both fields, computed once: superposing the wells is what takes long.
fn cells<'p>(planned: &'p Planned<'_>) -> &'p Cells {
    planned.drawn.cells.get_or_init(|| {
        let units = planned.units();
        let (columns, rows) = planned.survey.window.node_counts();
        let mut cells = Cells::default();
        // A picture's rows run from north to south.
        let southward: Vec<usize> = (0..rows).rev().collect();
        for some_rows in southward.chunks(ROWS_AT_A_TIME) {
            let nodes: Vec<Point> = some_rows
                .iter()
                .flat_map(|&row| (0..columns).map(move |column| node(planned, column, row)))
                .collect();
            let drawdowns_m = planned.solution.drawdowns_m(&nodes);
            let ambient_m = planned.solution.ambient_heads_m(&nodes);
            for (ambient_m, drawdown_m) in ambient_m.into_iter().zip(drawdowns_m) {
                cells
                    .heads
                    .push(units.length(ambient_m - drawdown_m) as f32);
                cells.drawdowns.push(units.length(drawdown_m) as f32);
            }
        }
        cells
    })
}

/// One field as a file.
fn file(planned: &Planned<'_>, name: &str, values: &[f32]) -> Result<Vec<u8>, LayerError> {
    let window = &planned.survey.window;
    let (columns, rows) = window.node_counts();
    let half = Vector::new(-0.5, 0.5) * window.spacing_m;
    let north_west = node(planned, 0, rows.saturating_sub(1)) + half;
    geotiff::file(&Picture {
        crs: &planned.plan.crs,
        columns,
        values,
        corner: planned.plan.to_plan_xy(north_west),
        cell: window.spacing_m / planned.plan.crs.metres_per_unit(),
        name,
        unit: planned.units().length_ending(),
    })
}
