//! Triangles of the cells that the outline cuts or that hold wells.
//!
//! Method: a constrained Delaunay triangulation (crate spade, exact
//! predicates) of the outline's pieces, the rings around wells and the nodes
//! of these cells, with the borders to regular cells as constraints. What is
//! inside is found by walking from the outermost face and turning "inside" on
//! and off at each piece of the outline, which no rounding can upset.

use std::collections::{HashMap, HashSet, VecDeque};

use spade::handles::{DirectedEdgeHandle, FixedVertexHandle};
use spade::{
    CdtEdge, ConstrainedDelaunayTriangulation, DelaunayTriangulation, HasPosition, Point2,
    Triangulation,
};

use super::MeshError;
use super::boundary::{Boundary, MARGIN_STEPS};
use super::grid::Grid;
use super::mesh::Cell;
use super::rings::{Wells, spade_point};
use crate::site::Point;

/// A vertex, and the grid's node that it is.
#[derive(Clone, Copy)]
pub(super) struct Vertex {
    pub(super) at: Point2<f64>,
    pub(super) node: Option<usize>,
}

impl HasPosition for Vertex {
    type Scalar = f64;

    fn position(&self) -> Point2<f64> {
        self.at
    }
}

type Constrained = ConstrainedDelaunayTriangulation<Vertex>;
type Edge<'a> = DirectedEdgeHandle<'a, Vertex, (), CdtEdge<()>, ()>;

/// Inside the aquifer.
const INSIDE: u8 = 1;
/// Among the regular cells.
const REGULAR: u8 = 2;

/// The triangulation with what is known of its edges.
pub(super) struct Special {
    triangulation: Constrained,
    /// Edges of the outline, smaller vertex first.
    outline: HashSet<[usize; 2]>,
    /// Edges between special and regular cells, with their grid edge.
    pub(super) borders: HashMap<[usize; 2], usize>,
    /// By face: INSIDE, REGULAR.
    labels: Vec<u8>,
}

impl Special {
    pub(super) fn triangulate(
        grid: &Grid,
        cells: &[Cell],
        boundary: &Boundary,
        wells: &Wells,
    ) -> Result<Self, MeshError> {
        let mut points = Points::default();
        for &at in boundary.points() {
            points.insert(at, None)?;
        }
        let borders = border_edges(grid, cells);
        for &(_, [from, to]) in &borders {
            points.insert_node(from, grid)?;
            points.insert_node(to, grid)?;
        }
        for point in wells.points() {
            if !boundary.is_near(point.at, MARGIN_STEPS * point.step_m, grid) {
                points.insert_apart(point.at, None, 0.5 * point.step_m)?;
            }
        }
        points.insert_special_nodes(grid, cells, boundary, wells)?;
        let mut special = Self {
            triangulation: points.triangulation.into(),
            outline: HashSet::new(),
            borders: HashMap::new(),
            labels: Vec::new(),
        };
        special.constrain_outline(boundary, &points.of_boundary)?;
        special.constrain_borders(&borders, &points.of_node)?;
        special.label();
        Ok(special)
    }

    fn constrain_outline(
        &mut self,
        boundary: &Boundary,
        vertices: &[FixedVertexHandle],
    ) -> Result<(), MeshError> {
        for &[a, b] in boundary.pieces() {
            let (Some(&from), Some(&to)) = (vertices.get(a), vertices.get(b)) else {
                continue;
            };
            for edge in self.constrain(from, to)? {
                // A piece that two polygons share does not bound their union.
                if !self.outline.insert(edge) {
                    self.outline.remove(&edge);
                }
            }
        }
        Ok(())
    }

    fn constrain_borders(
        &mut self,
        borders: &[(usize, [usize; 2])],
        vertices: &HashMap<usize, FixedVertexHandle>,
    ) -> Result<(), MeshError> {
        for (edge, [from, to]) in borders {
            let (Some(&from), Some(&to)) = (vertices.get(from), vertices.get(to)) else {
                continue;
            };
            for pair in self.constrain(from, to)? {
                self.borders.insert(pair, *edge);
            }
        }
        Ok(())
    }

    /// Makes a constraint of a piece; gives the edges that it consists of.
    fn constrain(
        &mut self,
        from: FixedVertexHandle,
        to: FixedVertexHandle,
    ) -> Result<Vec<[usize; 2]>, MeshError> {
        if from == to {
            return Ok(Vec::new());
        }
        let edges = self.triangulation.try_add_constraint(from, to);
        if edges.is_empty() {
            let at = self.triangulation.vertex(from).position();
            return Err(MeshError::OutlineCrosses {
                x_m: at.x,
                y_m: at.y,
            });
        }
        Ok(edges
            .into_iter()
            .map(|edge| {
                let edge = self.triangulation.directed_edge(edge);
                sorted(edge.from().index(), edge.to().index())
            })
            .collect())
    }

    /// Labels all faces, from the outermost inward.
    fn label(&mut self) {
        let mut labels: Vec<Option<u8>> = vec![None; self.triangulation.num_all_faces()];
        let mut waiting = VecDeque::new();
        if let Some(outer) = labels.first_mut() {
            *outer = Some(0);
        }
        for edge in self.triangulation.convex_hull() {
            let outward = if edge.is_outer_edge() {
                edge
            } else {
                edge.rev()
            };
            waiting.push_back((outward.fix(), 0));
        }
        // An edge waits with the label of the face to its left.
        while let Some((edge, label)) = waiting.pop_front() {
            let edge = self.triangulation.directed_edge(edge);
            let across = edge.rev();
            let pair = sorted(edge.from().index(), edge.to().index());
            let turned = label
                ^ (if self.outline.contains(&pair) {
                    INSIDE
                } else {
                    0
                })
                ^ (if self.borders.contains_key(&pair) {
                    REGULAR
                } else {
                    0
                });
            let slot = labels.get_mut(across.face().index());
            let Some(slot @ None) = slot else { continue };
            *slot = Some(turned);
            for next in [across.next(), across.prev()] {
                waiting.push_back((next.fix(), turned));
            }
        }
        self.labels = labels.into_iter().map(|label| label.unwrap_or(0)).collect();
    }

    /// Whether a face is a special triangle of the aquifer.
    fn holds(&self, face: usize) -> bool {
        self.labels.get(face) == Some(&INSIDE)
    }

    /// All vertices, by number.
    pub(super) fn vertices(&self) -> impl Iterator<Item = Vertex> + '_ {
        self.triangulation.vertices().map(|vertex| *vertex.data())
    }

    /// Vertices of the special triangles, counter-clockwise.
    pub(super) fn triangles(&self) -> impl Iterator<Item = [usize; 3]> + '_ {
        self.triangulation
            .inner_faces()
            .filter(|face| self.holds(face.index()))
            .map(|face| face.vertices().map(|vertex| vertex.index()))
    }

    /// Edges of the outline with the aquifer to their left, each with the end
    /// of the one that goes on around the same part of the aquifer.
    pub(super) fn outline_edges(&self) -> impl Iterator<Item = [usize; 3]> + '_ {
        self.triangulation
            .directed_edges()
            .filter(|&edge| self.bounds(edge))
            .filter_map(|edge| {
                // Turn about the end, through the triangles of the aquifer.
                let mut next = edge.next();
                while !self.bounds(next) {
                    next = next.rev().next();
                    if next == edge.next() || !self.holds(next.face().index()) {
                        return None;
                    }
                }
                Some([edge.from().index(), edge.to().index(), next.to().index()])
            })
    }

    fn bounds(&self, edge: Edge<'_>) -> bool {
        let pair = sorted(edge.from().index(), edge.to().index());
        self.holds(edge.face().index()) && self.outline.contains(&pair)
    }
}

/// Two numbers, the smaller first.
pub(super) fn sorted(one: usize, other: usize) -> [usize; 2] {
    [one.min(other), one.max(other)]
}

/// The grid edges between a regular cell and any other, with their ends.
fn border_edges(grid: &Grid, cells: &[Cell]) -> Vec<(usize, [usize; 2])> {
    let (columns, rows) = (grid.cell_columns(), grid.cell_rows());
    let regular = |column: usize, row: usize| {
        column < columns && row < rows && cells.get(row * columns + column) == Some(&Cell::Regular)
    };
    let mut borders = Vec::new();
    for row in 0..grid.rows {
        for column in 0..grid.columns {
            let here = regular(column, row);
            // Below row 0 the subtraction wraps to a row that does not exist.
            let south = regular(column, row.wrapping_sub(1));
            let west = regular(column.wrapping_sub(1), row);
            let node = row * grid.columns + column;
            if here != south {
                borders.push((3 * node, grid.edge(3 * node)));
            }
            if here != west {
                borders.push((3 * node + 1, grid.edge(3 * node + 1)));
            }
        }
    }
    borders
}

/// The points so far, kept far enough apart.
#[derive(Default)]
struct Points {
    triangulation: DelaunayTriangulation<Vertex>,
    of_boundary: Vec<FixedVertexHandle>,
    of_node: HashMap<usize, FixedVertexHandle>,
}

impl Points {
    fn insert(&mut self, at: Point, node: Option<usize>) -> Result<(), MeshError> {
        let vertex = Vertex {
            at: spade_point(at),
            node,
        };
        let handle = self
            .triangulation
            .insert(vertex)
            .map_err(|_| MeshError::Coordinate {
                x_m: at.x,
                y_m: at.y,
            })?;
        match node {
            Some(node) => {
                self.of_node.insert(node, handle);
            }
            None => self.of_boundary.push(handle),
        }
        Ok(())
    }

    fn insert_node(&mut self, node: usize, grid: &Grid) -> Result<(), MeshError> {
        if self.of_node.contains_key(&node) {
            return Ok(());
        }
        self.insert(grid.node(node), Some(node))
    }

    /// Inserts a point unless another is nearer than a distance.
    fn insert_apart(
        &mut self,
        at: Point,
        node: Option<usize>,
        distance_m: f64,
    ) -> Result<(), MeshError> {
        let nearest = self.triangulation.nearest_neighbor(spade_point(at));
        let crowded = nearest.is_some_and(|vertex| {
            let place = vertex.position();
            (place.x - at.x).hypot(place.y - at.y) < distance_m
        });
        if crowded {
            Ok(())
        } else {
            self.insert(at, node)
        }
    }

    /// Inserts the nodes of special cells that neither the outline nor a
    /// well's rings make superfluous.
    fn insert_special_nodes(
        &mut self,
        grid: &Grid,
        cells: &[Cell],
        boundary: &Boundary,
        wells: &Wells,
    ) -> Result<(), MeshError> {
        let step_m = grid.step_m();
        let mut seen = HashSet::new();
        let special = cells
            .iter()
            .enumerate()
            .filter(|(_, cell)| **cell == Cell::Special);
        for (cell, _) in special {
            for node in grid.corners(cell) {
                let at = grid.node(node);
                if self.of_node.contains_key(&node)
                    || !seen.insert(node)
                    || wells.distance_m(at) < wells.reach_m()
                    || boundary.is_near(at, MARGIN_STEPS * step_m, grid)
                {
                    continue;
                }
                self.insert_apart(at, Some(node), 0.3 * step_m)?;
            }
        }
        Ok(())
    }
}
