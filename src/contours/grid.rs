//! The regular grid over the map: its nodes, edges and cells by number.
//!
//! Numbers: node = row · columns + column; the edges that leave node n are
//! 3n to the east, 3n + 1 to the north, and 3n + 2 the diagonal of the cell
//! north-east of it; a cell has the number of its south-west corner, counted
//! without the last column and row.

use super::mesh::Triangle;
use super::{MeshError, Region};
use crate::site::Point;

/// Most nodes; the numbers of their edges fit 32 bits with room to spare.
const MOST_NODES: f64 = 1e8;

/// A regular grid that fills the map's extent.
#[derive(Clone, Debug)]
pub(super) struct Grid {
    min: Point,
    pub(super) step_x_m: f64,
    pub(super) step_y_m: f64,
    /// Nodes in a row.
    pub(super) columns: usize,
    /// Rows of nodes.
    pub(super) rows: usize,
}

impl Grid {
    /// The coarsest grid that fits the extent and respects the spacing.
    pub(super) fn over(region: &Region) -> Result<Self, MeshError> {
        let (min, max) = (region.extent.min, region.extent.max);
        let (width_m, height_m) = (max.x - min.x, max.y - min.y);
        let finite = width_m.is_finite() && height_m.is_finite();
        if !finite || width_m <= 0.0 || height_m <= 0.0 {
            return Err(MeshError::Extent { width_m, height_m });
        }
        let spacing_m = region.spacing_m;
        if !spacing_m.is_finite() || spacing_m <= 0.0 {
            return Err(MeshError::Spacing { spacing_m });
        }
        // A hair of slack: an extent of 10 spacings is not 11 cells.
        let across = |length: f64| (length / spacing_m * (1.0 - 1e-12)).ceil().max(1.0);
        let (cells_x, cells_y) = (across(width_m), across(height_m));
        let nodes = (cells_x + 1.0) * (cells_y + 1.0);
        if nodes > MOST_NODES {
            let least_m = (width_m * height_m / MOST_NODES).sqrt();
            let least_m = least_m.max((width_m + height_m) / (0.25 * MOST_NODES));
            let decade = 10f64.powf(least_m.log10().ceil());
            return Err(MeshError::TooFine {
                nodes,
                most: MOST_NODES,
                workable_m: 2.0 * decade,
            });
        }
        Ok(Self {
            min,
            step_x_m: width_m / cells_x,
            step_y_m: height_m / cells_y,
            columns: cells_x as usize + 1,
            rows: cells_y as usize + 1,
        })
    }

    /// The larger of the two steps.
    pub(super) fn step_m(&self) -> f64 {
        self.step_x_m.max(self.step_y_m)
    }

    /// How many nodes it has.
    pub(super) fn node_count(&self) -> usize {
        self.columns * self.rows
    }

    /// Cells in a row.
    pub(super) fn cell_columns(&self) -> usize {
        self.columns - 1
    }

    /// Rows of cells.
    pub(super) fn cell_rows(&self) -> usize {
        self.rows - 1
    }

    /// Where a column and row meet.
    pub(super) fn place(&self, column: usize, row: usize) -> Point {
        Point::new(
            self.min.x + column as f64 * self.step_x_m,
            self.min.y + row as f64 * self.step_y_m,
        )
    }

    /// Where a node is.
    pub(super) fn node(&self, node: usize) -> Point {
        self.place(node % self.columns, node / self.columns)
    }

    /// The two ends of a grid edge.
    pub(super) fn edge(&self, edge: usize) -> [usize; 2] {
        let node = edge / 3;
        match edge % 3 {
            0 => [node, node + 1],
            1 => [node, node + self.columns],
            _ if self.diagonal_rises(node) => [node, node + self.columns + 1],
            _ => [node + 1, node + self.columns],
        }
    }

    /// Whether the diagonal of the cell north-east of a node leaves that node.
    /// Alternating diagonals favour no direction.
    pub(super) fn diagonal_rises(&self, node: usize) -> bool {
        (node % self.columns + node / self.columns).is_multiple_of(2)
    }

    /// The four corners of a cell.
    pub(super) fn corners(&self, cell: usize) -> [usize; 4] {
        let corner = cell + cell / self.cell_columns();
        let above = corner + self.columns;
        [corner, corner + 1, above, above + 1]
    }

    /// The two triangles of a regular cell, counter-clockwise, as nodes and
    /// edges.
    pub(super) fn triangles(&self, cell: usize) -> [Triangle; 2] {
        let [a, b, c, d] = self.corners(cell);
        let (south, west, diagonal) = (3 * a, 3 * a + 1, 3 * a + 2);
        let (east, north) = (3 * b + 1, 3 * c);
        let triangle = |nodes: [usize; 3], edges: [usize; 3]| Triangle {
            nodes: nodes.map(|node| node as u32),
            edges: edges.map(|edge| edge as u32),
        };
        if self.diagonal_rises(a) {
            [
                triangle([a, b, d], [south, east, diagonal]),
                triangle([a, d, c], [diagonal, north, west]),
            ]
        } else {
            [
                triangle([a, b, c], [south, diagonal, west]),
                triangle([b, d, c], [east, north, diagonal]),
            ]
        }
    }

    /// Distance from the southern edge to the middle of a row of cells.
    pub(super) fn middle_y(&self, row: usize) -> f64 {
        self.min.y + (row as f64 + 0.5) * self.step_y_m
    }

    /// Column of cells that holds x, clamped to the grid.
    pub(super) fn column_of(&self, x: f64) -> usize {
        // The cast saturates, and takes what is no number to zero.
        (((x - self.min.x) / self.step_x_m).floor() as usize).min(self.cell_columns() - 1)
    }

    /// Row of cells that holds y, clamped to the grid.
    pub(super) fn row_of(&self, y: f64) -> usize {
        (((y - self.min.y) / self.step_y_m).floor() as usize).min(self.cell_rows() - 1)
    }

    /// Number of the cell that holds a point, clamped to the grid.
    pub(super) fn cell_of(&self, point: Point) -> usize {
        self.row_of(point.y) * self.cell_columns() + self.column_of(point.x)
    }

    /// First row of cells whose middle line lies at or above y; may be one
    /// past the last row.
    pub(super) fn first_middle_at_or_above(&self, y: f64) -> usize {
        (((y - self.min.y) / self.step_y_m - 0.5).ceil() as usize).min(self.cell_rows())
    }

    /// Numbers of the cells that meet a box around a segment, widened by a
    /// margin.
    pub(super) fn cells_around(
        &self,
        from: Point,
        to: Point,
        margin_m: f64,
    ) -> impl Iterator<Item = usize> + use<> {
        let left = self.column_of(from.x.min(to.x) - margin_m);
        let right = self.column_of(from.x.max(to.x) + margin_m);
        let low = self.row_of(from.y.min(to.y) - margin_m);
        let high = self.row_of(from.y.max(to.y) + margin_m);
        let columns = self.cell_columns();
        (low..=high).flat_map(move |row| (left..=right).map(move |column| row * columns + column))
    }
}
