//! A coarse grid of a map's values, for the value under the pointer.
//!
//! Each value is a whole number of steps above the lowest, two bytes, low byte
//! first, in base64, row by row from the upper left corner; 65,535 is outside
//! the aquifer. Accuracy: half a step, the values' range over 131,068, at the
//! nodes.

use base64::Engine;
use base64::engine::general_purpose::STANDARD;
use serde::Serialize;

use crate::site::{Extent, Point, Vector};

/// Nodes on the long side.
const NODES: f64 = 160.0;
/// The mark of a node outside the aquifer.
const OUTSIDE: u16 = u16::MAX;

/// The nodes of a map's coarse grid.
pub struct Nodes {
    /// Nodes from west to east.
    pub columns: usize,
    /// Nodes from north to south.
    pub rows: usize,
    /// Where they are.
    pub points: Vec<Point>,
}

impl Nodes {
    /// The nodes of an extent: its corners and even steps between them.
    pub fn of(extent: Extent) -> Self {
        let size = extent.max - extent.min;
        let step = size.max() / (NODES - 1.0);
        // Truncation is meant: the counts are small and positive.
        let count = |length: f64| ((length / step).round() as usize).max(1) + 1;
        let (columns, rows) = (count(size.x), count(size.y));
        let share = |index: usize, count: usize| index as f64 / (count - 1) as f64;
        let corner = Point::new(extent.min.x, extent.max.y);
        let points = (0..rows)
            .flat_map(|row| (0..columns).map(move |column| (column, row)))
            .map(|(column, row)| {
                corner + Vector::new(size.x * share(column, columns), -size.y * share(row, rows))
            })
            .collect();
        Self {
            columns,
            rows,
            points,
        }
    }
}

/// Values at the nodes, packed.
#[derive(Serialize)]
pub struct Grid {
    columns: usize,
    rows: usize,
    low: f64,
    step: f64,
    values: String,
}

impl Grid {
    /// Packs values in the nodes' order; those that are no number are outside.
    pub fn packed(nodes: &Nodes, values: &[f64]) -> Self {
        let finite = || values.iter().copied().filter(|value| value.is_finite());
        let low = finite().fold(f64::INFINITY, f64::min);
        let high = finite().fold(f64::NEG_INFINITY, f64::max);
        let (low, high) = if low <= high { (low, high) } else { (0.0, 0.0) };
        let step = (high - low) / f64::from(OUTSIDE - 1);
        let packed = |value: &f64| {
            if !value.is_finite() {
                OUTSIDE
            } else if step > 0.0 {
                // Truncation is meant: at most 65,534.
                ((value - low) / step).round() as u16
            } else {
                0
            }
        };
        let bytes: Vec<u8> = values
            .iter()
            .flat_map(|v| packed(v).to_le_bytes())
            .collect();
        Self {
            columns: nodes.columns,
            rows: nodes.rows,
            low,
            step,
            values: STANDARD.encode(bytes),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// By hand: 1 and 3 are steps 0 and 65,534, 0xfffe; bytes 00 00 fe ff ff ff.
    #[test]
    fn values_are_packed_between_the_lowest_and_the_highest() {
        let nodes = Nodes {
            columns: 3,
            rows: 1,
            points: vec![],
        };
        let grid = Grid::packed(&nodes, &[1.0, 3.0, f64::NAN]);
        assert_eq!(grid.values, "AAD+////");
        assert_eq!((grid.low, grid.step * 65_534.0), (1.0, 2.0));
    }

    #[test]
    fn the_nodes_begin_in_the_north_west_and_reach_every_corner() {
        let extent = Extent {
            min: Point::new(0.0, 0.0),
            max: Point::new(200.0, 100.0),
        };
        let nodes = Nodes::of(extent);
        assert_eq!((nodes.columns, nodes.rows), (160, 81));
        assert_eq!(nodes.points.first(), Some(&Point::new(0.0, 100.0)));
        assert_eq!(nodes.points.last(), Some(&Point::new(200.0, 0.0)));
    }
}
