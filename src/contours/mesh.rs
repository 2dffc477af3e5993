//! The triangles that contours are drawn on.
//!
//! Regular cells exist only as numbers, see `grid.rs`; special triangles, see
//! `special.rs`, are stored. Both share whole edges, so the mesh has no seam.

use std::collections::HashMap;

use rayon::prelude::*;

use super::boundary::Boundary;
use super::grid::Grid;
use super::rings::Wells;
use super::special::{Special, sorted};
use super::{Bump, ContourError, MeshError, Region, ScalarField, evaluate};
use crate::site::Point;

/// What a grid cell is.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Cell {
    /// Outside the aquifer.
    Outside,
    /// Wholly inside and far from wells: two triangles.
    Regular,
    /// Cut by the outline or near a well: part of the triangulation.
    Special,
}

/// Cells within this many steps of a well's last ring are special, so that
/// no point of a ring comes near a regular cell.
const MARGIN_OF_WELLS: f64 = 0.3;

/// No number.
pub(super) const NONE: u32 = u32::MAX;

/// A triangle, counter-clockwise; edge i joins node i to the next.
#[derive(Clone, Copy, Debug)]
pub(super) struct Triangle {
    pub(super) nodes: [u32; 3],
    pub(super) edges: [u32; 3],
}

/// A piece of the outline, the aquifer to its left.
#[derive(Clone, Copy, Debug)]
pub(super) struct OutlineEdge {
    pub(super) edge: u32,
    pub(super) from: u32,
    pub(super) to: u32,
    /// The piece that goes on around the same part of the aquifer.
    pub(super) next: u32,
}

/// Triangles that fill a region and share whole edges.
#[derive(Clone, Debug)]
pub struct Mesh {
    pub(super) grid: Grid,
    pub(super) cells: Vec<Cell>,
    /// Nodes that are not the grid's; their numbers follow those of the grid.
    extra_nodes: Vec<Point>,
    pub(super) special: Vec<Triangle>,
    /// Ends of the edges that are not the grid's; numbers follow the grid's.
    special_edges: Vec<[u32; 2]>,
    pub(super) outline: Vec<OutlineEdge>,
    /// By special edge: its piece of the outline, or NONE.
    outline_of_edge: Vec<u32>,
    /// Nodes that triangles use, rising.
    in_use: Vec<u32>,
}

/// Cuts a region into triangles, with rings of points around wells.
///
/// # Errors
/// Where the extent, the spacing or the outline is unusable.
pub fn mesh(region: &Region, bumps: &[Bump]) -> Result<Mesh, MeshError> {
    let grid = Grid::over(region)?;
    let wells = Wells::new(bumps, &grid)?;
    let boundary = Boundary::new(&region.polygons, &grid, &wells)?;
    let cells = classify(&grid, &boundary, &wells);
    let special = Special::triangulate(&grid, &cells, &boundary, &wells)?;
    Ok(Mesh::assemble(grid, cells, &special))
}

/// The field's values at the nodes, by node; NaN where no triangle is.
///
/// # Errors
/// Where the field has no finite value at a node in use.
pub fn sample(mesh: &Mesh, field: &dyn ScalarField) -> Result<Vec<f64>, ContourError> {
    let points: Vec<Point> = mesh
        .in_use
        .par_iter()
        .map(|&node| mesh.node(node))
        .collect();
    let found = evaluate(field, &points)?;
    let mut values = vec![f64::NAN; mesh.node_count()];
    for (&node, value) in mesh.in_use.iter().zip(found) {
        if let Some(slot) = values.get_mut(node as usize) {
            *slot = value;
        }
    }
    Ok(values)
}

/// Tells regular cells from special ones and from those outside.
fn classify(grid: &Grid, boundary: &Boundary, wells: &Wells) -> Vec<Cell> {
    let mut crossings: Vec<Vec<f64>> = vec![Vec::new(); grid.cell_rows()];
    for (from, to) in boundary.ends() {
        let (low, high) = if from.y <= to.y {
            (from, to)
        } else {
            (to, from)
        };
        // Half open, so that a vertex on a middle line counts once.
        let first = grid.first_middle_at_or_above(low.y);
        let end = grid.first_middle_at_or_above(high.y);
        for (row, crossed) in crossings.iter_mut().enumerate().take(end).skip(first) {
            let share = (grid.middle_y(row) - low.y) / (high.y - low.y);
            crossed.push(low.x + (high.x - low.x) * share);
        }
    }
    let mut cells: Vec<Cell> = Vec::with_capacity(grid.cell_columns() * grid.cell_rows());
    for crossed in &mut crossings {
        crossed.sort_by(f64::total_cmp);
        let mut passed = 0;
        for column in 0..grid.cell_columns() {
            let middle = grid.place(column, 0).x + 0.5 * grid.step_x_m;
            while crossed.get(passed).is_some_and(|&x| x < middle) {
                passed += 1;
            }
            let inside = passed % 2 == 1;
            cells.push(if inside { Cell::Regular } else { Cell::Outside });
        }
    }
    let around_wells = wells.places().flat_map(|at| {
        let margin_m = wells.reach_m() + MARGIN_OF_WELLS * grid.step_m();
        grid.cells_around(at, at, margin_m)
    });
    for cell in boundary.cells().chain(around_wells) {
        if let Some(cell) = cells.get_mut(cell) {
            *cell = Cell::Special;
        }
    }
    cells
}

impl Mesh {
    fn assemble(grid: Grid, cells: Vec<Cell>, special: &Special) -> Self {
        let mut mesh = Self {
            grid,
            cells,
            extra_nodes: Vec::new(),
            special: Vec::new(),
            special_edges: Vec::new(),
            outline: Vec::new(),
            outline_of_edge: Vec::new(),
            in_use: Vec::new(),
        };
        let nodes = mesh.number_vertices(special);
        let edges = mesh.number_triangles(special, &nodes);
        mesh.number_outline(special, &nodes, &edges);
        mesh.note_nodes_in_use();
        mesh
    }

    /// Gives each vertex of the triangulation its node.
    fn number_vertices(&mut self, special: &Special) -> Vec<u32> {
        let mut nodes = Vec::new();
        for vertex in special.vertices() {
            let number = vertex.node.unwrap_or_else(|| {
                self.extra_nodes.push(Point::new(vertex.at.x, vertex.at.y));
                self.grid.node_count() + self.extra_nodes.len() - 1
            });
            nodes.push(number as u32);
        }
        nodes
    }

    /// Stores the special triangles; gives the numbers of their edges by
    /// vertices.
    fn number_triangles(&mut self, special: &Special, nodes: &[u32]) -> HashMap<[usize; 2], u32> {
        let first_special = 3 * self.grid.node_count();
        let mut numbers: HashMap<[usize; 2], u32> = special
            .borders
            .iter()
            .map(|(&pair, &edge)| (pair, edge as u32))
            .collect();
        let node = |vertex: usize| nodes.get(vertex).copied().unwrap_or(NONE);
        for vertices in special.triangles() {
            let [a, b, c] = vertices;
            let edges = [[a, b], [b, c], [c, a]].map(|[from, to]| {
                *numbers.entry(sorted(from, to)).or_insert_with(|| {
                    self.special_edges.push([node(from), node(to)]);
                    (first_special + self.special_edges.len() - 1) as u32
                })
            });
            self.special.push(Triangle {
                nodes: vertices.map(node),
                edges,
            });
        }
        numbers
    }

    fn number_outline(
        &mut self,
        special: &Special,
        nodes: &[u32],
        edges: &HashMap<[usize; 2], u32>,
    ) {
        let first_special = 3 * self.grid.node_count();
        let pieces: Vec<[usize; 3]> = special.outline_edges().collect();
        let numbers: HashMap<[usize; 2], u32> = pieces
            .iter()
            .enumerate()
            .map(|(number, &[from, to, _])| ([from, to], number as u32))
            .collect();
        let node = |vertex: usize| nodes.get(vertex).copied().unwrap_or(NONE);
        self.outline_of_edge = vec![NONE; self.special_edges.len()];
        for (number, &[from, to, beyond]) in pieces.iter().enumerate() {
            let edge = edges.get(&sorted(from, to)).copied().unwrap_or(NONE);
            let slot = (edge as usize).checked_sub(first_special);
            if let Some(slot) = slot.and_then(|slot| self.outline_of_edge.get_mut(slot)) {
                *slot = number as u32;
            }
            self.outline.push(OutlineEdge {
                edge,
                from: node(from),
                to: node(to),
                next: numbers.get(&[to, beyond]).copied().unwrap_or(NONE),
            });
        }
    }

    fn note_nodes_in_use(&mut self) {
        let mut used = vec![false; self.node_count()];
        let mut note = |node: usize| {
            if let Some(slot) = used.get_mut(node) {
                *slot = true;
            }
        };
        for (cell, _) in self.regular_cells() {
            for node in self.grid.corners(cell) {
                note(node);
            }
        }
        for triangle in &self.special {
            for node in triangle.nodes {
                note(node as usize);
            }
        }
        self.in_use = (0u32..)
            .zip(used)
            .filter_map(|(node, used)| used.then_some(node))
            .collect();
    }

    /// How many nodes there are, used or not.
    pub fn node_count(&self) -> usize {
        self.grid.node_count() + self.extra_nodes.len()
    }

    /// Where the nodes in use are, in the order of their numbers.
    pub fn points(&self) -> impl Iterator<Item = Point> + '_ {
        self.in_use.iter().map(|&node| self.node(node))
    }

    /// Of values at the nodes those on the regular grid, row by row from the
    /// south-west corner, where the grid has these columns and this spacing.
    pub fn on_grid<'v>(
        &self,
        values: &'v [f64],
        columns: usize,
        spacing_m: f64,
    ) -> Option<&'v [f64]> {
        let grid = &self.grid;
        let same = grid.columns == columns
            && grid.step_x_m == spacing_m
            && (grid.step_y_m == spacing_m || grid.rows == 1);
        same.then(|| values.get(..grid.node_count())).flatten()
    }

    /// How many edges there are, used or not.
    pub(super) fn edge_count(&self) -> usize {
        3 * self.grid.node_count() + self.special_edges.len()
    }

    /// Where a node is.
    pub(super) fn node(&self, node: u32) -> Point {
        let node = node as usize;
        match node.checked_sub(self.grid.node_count()) {
            None => self.grid.node(node),
            Some(extra) => self.extra_nodes.get(extra).copied().unwrap_or_default(),
        }
    }

    /// The ends of the special edges, in the order of their numbers.
    pub(super) fn special_edges(&self) -> &[[u32; 2]] {
        &self.special_edges
    }

    /// The ends of an edge.
    pub(super) fn edge(&self, edge: u32) -> [u32; 2] {
        let edge = edge as usize;
        match edge.checked_sub(3 * self.grid.node_count()) {
            None => self.grid.edge(edge).map(|node| node as u32),
            Some(special) => self
                .special_edges
                .get(special)
                .copied()
                .unwrap_or([NONE; 2]),
        }
    }

    /// The piece of the outline that an edge is, if any.
    pub(super) fn outline_of(&self, edge: u32) -> Option<u32> {
        let special = (edge as usize).checked_sub(3 * self.grid.node_count())?;
        self.outline_of_edge
            .get(special)
            .copied()
            .filter(|&piece| piece != NONE)
    }

    /// Regular cells, each with its south-west node.
    pub(super) fn regular_cells(&self) -> impl Iterator<Item = (usize, usize)> + '_ {
        let columns = self.grid.cell_columns();
        self.cells
            .iter()
            .enumerate()
            .filter(|(_, cell)| **cell == Cell::Regular)
            .map(move |(cell, _)| (cell, cell + cell / columns))
    }
}
