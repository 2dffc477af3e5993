//! The places where contour levels cut the edges of a mesh.
//!
//! Method: every node is given the number of levels at or below its value,
//! its *class*. An edge carries one cut for each level between the classes of
//! its ends, found on the exact field and kept strictly in order, at least
//! 0.1 µm apart where there is room. In a triangle each level then joins
//! exactly two cuts, and no two such segments can cross, whatever the field
//! does between nodes.
//!
//! A node of the outline within a thousandth of the interval (at most 0.1 mm)
//! of a level counts as lying on it. It is put on the side where most of its
//! neighbours are: a river whose stage is a level would else be traced by a
//! contour that weaves with the last digit. Nodes inside are taken at their
//! values: beside a river drawdowns are small far and wide, and the line
//! between fall and rise would stray there.

use std::collections::BTreeMap;

use rayon::prelude::*;

use super::mesh::{Cell, Mesh, NONE, Triangle};
use super::roots::{Search, solve};
use super::{ContourError, ScalarField};
use crate::site::Point;

/// Largest distance of a vertex's value from its level, metres: a tenth of
/// what is promised.
const TOLERANCE_M: f64 = 1e-4;

/// The same, as a share of the smallest interval.
const TOLERANCE_SHARE: f64 = 1e-3;

/// Least distance of cuts from each other and from the ends of their edge,
/// metres.
const LEAST_GAP_M: f64 = 1e-7;

/// All cuts of a mesh by levels, and how they are joined.
#[derive(Clone, Debug)]
pub struct Cuts<'a> {
    pub(super) mesh: &'a Mesh,
    pub(super) levels: Vec<f64>,
    /// By node: how many levels are at or below it.
    classes: Vec<u32>,
    /// By edge: its first cut; the cuts of an edge rise in level.
    first: Vec<u32>,
    /// By cut: its edge.
    edges: Vec<u32>,
    /// By cut: the index of its level.
    pub(super) level_of: Vec<u32>,
    /// By cut: where it is.
    pub(super) points: Vec<Point>,
    /// By cut: the next along its contour, the lower side to the left.
    pub(super) next: Vec<u32>,
    /// By cut: the one before.
    pub(super) previous: Vec<u32>,
    /// Smallest and largest value at a node.
    pub(super) extremes: [f64; 2],
}

impl<'a> Cuts<'a> {
    /// Finds all cuts on the exact field, in batches.
    ///
    /// `values` come from [`sample`](super::sample); `levels` rise. Vertices
    /// are within 0.1 mm of their level, or a thousandth of the smallest
    /// interval where that is less, except where the field jumps.
    ///
    /// # Errors
    /// Where levels do not rise, the field has no finite value, or vertices
    /// number more than 4e9.
    pub fn refine(
        mesh: &'a Mesh,
        values: &[f64],
        field: &dyn ScalarField,
        levels: &[f64],
    ) -> Result<Self, ContourError> {
        if values.len() != mesh.node_count() {
            return Err(ContourError::Count {
                expected: mesh.node_count(),
                got: values.len(),
            });
        }
        let tolerance = tolerance(levels)?;
        let mut cuts = Self {
            mesh,
            levels: levels.to_vec(),
            classes: classify(mesh, values, levels, tolerance),
            first: Vec::new(),
            edges: Vec::new(),
            level_of: Vec::new(),
            points: Vec::new(),
            next: Vec::new(),
            previous: Vec::new(),
            extremes: extremes(values),
        };
        cuts.number()?;
        cuts.place(values, field, tolerance)?;
        cuts.join();
        Ok(cuts)
    }

    /// The levels, metres.
    pub fn levels(&self) -> &[f64] {
        &self.levels
    }

    /// The class of a node.
    pub(super) fn class(&self, node: u32) -> u32 {
        self.classes.get(node as usize).copied().unwrap_or(0)
    }

    /// The edge of a cut.
    pub(super) fn edge_of(&self, cut: u32) -> u32 {
        self.edges.get(cut as usize).copied().unwrap_or(NONE)
    }

    /// The cuts of an edge, rising in level.
    pub(super) fn cuts_of(&self, edge: u32) -> std::ops::Range<u32> {
        let edge = edge as usize;
        match (self.first.get(edge), self.first.get(edge + 1)) {
            (Some(&start), Some(&end)) => start..end,
            _ => 0..0,
        }
    }

    /// Counts and numbers the cuts of all edges.
    #[expect(clippy::indexing_slicing, reason = "cells and nodes of one grid, hot")]
    fn number(&mut self) -> Result<(), ContourError> {
        let (grid, cells) = (&self.mesh.grid, &self.mesh.cells);
        let (columns, rows) = (grid.cell_columns(), grid.cell_rows());
        let regular = |column: usize, row: usize| {
            column < columns && row < rows && cells[row * columns + column] == Cell::Regular
        };
        let classes = &self.classes;
        let mut first: Vec<u32> = Vec::with_capacity(self.mesh.edge_count() + 1);
        let mut total = 0u64;
        let mut count = |first: &mut Vec<u32>, a: u32, b: u32| {
            // A total past 32 bits is refused below, before any is used.
            first.push(total as u32);
            total += u64::from(a.abs_diff(b));
        };
        for row in 0..grid.rows {
            for column in 0..grid.columns {
                let node = row * grid.columns + column;
                let class = classes[node];
                let here = regular(column, row);
                let east = here || regular(column, row.wrapping_sub(1));
                let north = here || regular(column.wrapping_sub(1), row);
                let other = |used: bool, end: usize| if used { classes[end] } else { class };
                count(&mut first, class, other(east, node + 1));
                count(&mut first, class, other(north, node + grid.columns));
                let [a, b] = grid.edge(3 * node + 2);
                let start = if here { classes[a] } else { class };
                count(&mut first, start, other(here, b));
            }
        }
        for &[a, b] in self.mesh.special_edges() {
            count(&mut first, classes[a as usize], classes[b as usize]);
        }
        first.push(total as u32);
        if total >= u64::from(NONE) {
            return Err(ContourError::TooMany { vertices: total });
        }
        self.first = first;
        Ok(())
    }

    /// Finds where the cuts are.
    #[expect(clippy::indexing_slicing, reason = "nodes and levels of one mesh")]
    fn place(
        &mut self,
        values: &[f64],
        field: &dyn ScalarField,
        tolerance: f64,
    ) -> Result<(), ContourError> {
        let mut searches = Vec::new();
        for (edge, ends) in (0u32..).zip(self.first.windows(2)) {
            if ends[0] == ends[1] {
                continue;
            }
            let [low, high] = self.rising_ends(edge);
            let segment = [self.mesh.node(low), self.mesh.node(high)];
            let span = [values[low as usize], values[high as usize]];
            for level in self.class(low)..self.class(high) {
                let wanted = self.levels[level as usize];
                searches.push(Search::new(segment, wanted, [0.0, 1.0], span));
                self.edges.push(edge);
                self.level_of.push(level);
            }
        }
        solve(&mut searches, field, tolerance)?;
        self.put_in_order(&mut searches, values, field, tolerance)?;
        let mut start = 0;
        while let Some(&edge) = self.edges.get(start) {
            let end = start + self.cuts_of(edge).len();
            space_out(&mut searches[start..end]);
            start = end;
        }
        self.points = searches.iter().map(|s| s.point(s.place)).collect();
        Ok(())
    }

    /// The ends of an edge, the lower class first.
    fn rising_ends(&self, edge: u32) -> [u32; 2] {
        let [a, b] = self.mesh.edge(edge);
        if self.class(a) <= self.class(b) {
            [a, b]
        } else {
            [b, a]
        }
    }

    /// Searches again for cuts that lie before a lower one of their edge, as
    /// they may where the field does not rise steadily: between that lower one
    /// and the upper end there is another.
    #[expect(clippy::indexing_slicing, reason = "pairs of neighbouring cuts")]
    fn put_in_order(
        &self,
        searches: &mut [Search],
        values: &[f64],
        field: &dyn ScalarField,
        tolerance: f64,
    ) -> Result<(), ContourError> {
        // Each pass settles at least the lowest cut in disorder of each edge.
        for _ in 0..=self.levels.len() {
            let mut again = Vec::new();
            let mut last_edge = NONE;
            for cut in 1..searches.len() {
                let edge = self.edges[cut];
                let (before, here) = (&searches[cut - 1], &searches[cut]);
                let same = edge == self.edges[cut - 1] && edge != last_edge;
                if !same || here.place >= before.place {
                    continue;
                }
                let [low, high] = self.rising_ends(edge);
                let segment = [self.mesh.node(low), self.mesh.node(high)];
                let span = [before.value(), values[high as usize]];
                let level = self.levels[self.level_of[cut] as usize];
                again.push((cut, Search::new(segment, level, [before.place, 1.0], span)));
                last_edge = edge;
            }
            if again.is_empty() {
                break;
            }
            let (cuts, mut repeated): (Vec<usize>, Vec<Search>) = again.into_iter().unzip();
            solve(&mut repeated, field, tolerance)?;
            for (cut, search) in cuts.into_iter().zip(repeated) {
                searches[cut] = search;
            }
        }
        Ok(())
    }

    /// Joins the cuts of each triangle.
    fn join(&mut self) {
        self.next = vec![NONE; self.points.len()];
        self.previous = vec![NONE; self.points.len()];
        let mesh = self.mesh;
        for (cell, _) in mesh.regular_cells() {
            for triangle in mesh.grid.triangles(cell) {
                self.join_in(&triangle);
            }
        }
        for triangle in &mesh.special {
            self.join_in(triangle);
        }
    }

    #[expect(clippy::indexing_slicing, reason = "corners of a triangle, hot")]
    fn join_in(&mut self, triangle: &Triangle) {
        let classes = triangle.nodes.map(|node| self.classes[node as usize]);
        let lowest = classes[0].min(classes[1]).min(classes[2]);
        let highest = classes[0].max(classes[1]).max(classes[2]);
        for level in lowest..highest {
            // Counter-clockwise, one edge leaves the lower part and one
            // returns; from the first to the second the lower part is left.
            let (mut leaves, mut returns) = (NONE, NONE);
            for corner in 0..3 {
                let (here, there) = (classes[corner], classes[(corner + 1) % 3]);
                if (here <= level) == (there <= level) {
                    continue;
                }
                let first = self.first[triangle.edges[corner] as usize];
                let cut = first + level - here.min(there);
                if here <= level {
                    leaves = cut;
                } else {
                    returns = cut;
                }
            }
            self.next[leaves as usize] = returns;
            self.previous[returns as usize] = leaves;
        }
    }
}

/// Smallest and largest of the values that are numbers, as
/// [`sample`](super::sample) gives them; ∞ and −∞ where there are none.
pub fn extremes(values: &[f64]) -> [f64; 2] {
    let numbers = values.iter().filter(|value| !value.is_nan());
    numbers.fold([f64::INFINITY, f64::NEG_INFINITY], |[low, high], &value| {
        [low.min(value), high.max(value)]
    })
}

/// Largest distance of a value from its level.
fn tolerance(levels: &[f64]) -> Result<f64, ContourError> {
    let mut tolerance = TOLERANCE_M;
    let mut before = f64::NEG_INFINITY;
    for &level in levels {
        if !level.is_finite() || level <= before {
            return Err(ContourError::Levels {
                before,
                after: level,
            });
        }
        tolerance = tolerance.min(TOLERANCE_SHARE * (level - before));
        before = level;
    }
    Ok(tolerance)
}

/// How many levels lie at or below each node; nodes of the outline on a level
/// are put where most of their neighbours are.
fn classify(mesh: &Mesh, values: &[f64], levels: &[f64], tolerance: f64) -> Vec<u32> {
    let class = |value: &f64| levels.partition_point(|level| level <= value) as u32;
    let mut classes: Vec<u32> = values.par_iter().map(class).collect();
    let mut undecided = BTreeMap::new();
    for node in mesh.outline.iter().flat_map(|piece| [piece.from, piece.to]) {
        let Some(&value) = values.get(node as usize) else {
            continue;
        };
        let next = levels.partition_point(|level| level + tolerance < value);
        let reached = levels.get(next);
        if reached.is_some_and(|level| level - tolerance <= value) {
            undecided.insert(node, next as u32);
        }
    }
    // A corner of a river has neighbours on the river alone: it follows them
    // in the next round.
    while !undecided.is_empty() {
        let votes = votes(mesh, &classes, &undecided);
        if votes.is_empty() {
            break;
        }
        for (node, balance) in votes {
            let level = undecided.remove(&node);
            if let (Some(level), Some(class)) = (level, classes.get_mut(node as usize)) {
                *class = if balance < 0 { level } else { level + 1 };
            }
        }
    }
    classes
}

/// For each undecided node with decided neighbours: how many more of them are
/// above its level than below.
fn votes(mesh: &Mesh, classes: &[u32], undecided: &BTreeMap<u32, u32>) -> BTreeMap<u32, i32> {
    let mut votes = BTreeMap::new();
    for triangle in &mesh.special {
        for node in triangle.nodes {
            let Some(&level) = undecided.get(&node) else {
                continue;
            };
            for other in triangle.nodes {
                if other == node || undecided.get(&other) == Some(&level) {
                    continue;
                }
                let above = classes
                    .get(other as usize)
                    .is_some_and(|&class| class > level);
                *votes.entry(node).or_insert(0) += if above { 1 } else { -1 };
            }
        }
    }
    votes
}

/// Moves cuts that coincide, or lie on a node, apart by hairs.
fn space_out(searches: &mut [Search]) {
    let Some(length_m) = searches.first().map(Search::length_m) else {
        return;
    };
    let room = 0.5 / (searches.len() + 1) as f64;
    let gap = (LEAST_GAP_M / length_m).min(room);
    let mut least = gap;
    for search in searches.iter_mut() {
        search.place = search.place.max(least);
        least = search.place + gap;
    }
    let mut most = 1.0 - gap;
    for search in searches.iter_mut().rev() {
        search.place = search.place.min(most);
        most = search.place - gap;
    }
}
