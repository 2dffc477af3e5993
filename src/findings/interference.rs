//! Who draws down whom: the drawdown that each well causes at each well and
//! at each neighbour.
//!
//! An entry is Q_j G(x_i, x_j)/T; on the diagonal stands the well's own
//! drawdown at its rim. Well loss is left out, since only the well itself
//! feels it. A well of another aquifer causes nothing: the edge between is
//! taken to penetrate fully.

use rayon::prelude::*;

use super::Solution;
use super::neighbour::NeighbourFinding;
use crate::site::{Point, Refusal, Site, Subject};

/// Entries of the tables of wells by wells, neighbours and edges, at most:
/// more than a spreadsheet or a GIS takes in.
pub const MOST_ENTRIES: usize = 4_000_000;

/// Refuses sites whose tables would be too large.
///
/// # Errors
/// When wells × (wells + neighbours + edges) exceeds [`MOST_ENTRIES`].
pub fn refuse_large(site: &Site) -> Result<(), Refusal> {
    let (wells, neighbours, edges) = (site.wells.len(), site.neighbours.len(), site.edges.len());
    let entries = wells * (wells + neighbours + edges);
    if entries <= MOST_ENTRIES {
        return Ok(());
    }
    Err(Refusal {
        subject: Subject::Plan,
        what: format!(
            "{wells} wells, {neighbours} neighbours and {edges} rivers and barriers make tables of {entries} entries; {MOST_ENTRIES} is the most"
        ),
        why: Some("every well is weighed against every well, neighbour and edge".into()),
        remedy: "plan the well field in parts, or join wells that stand close together into one"
            .into(),
        related: vec![],
    })
}

/// Drawdowns by causing well (columns) at affected wells, then neighbours
/// (rows), metres.
#[derive(Clone, Debug)]
pub struct InterferenceMatrix {
    wells: Vec<Vec<f64>>,
    neighbours: Vec<Option<Vec<f64>>>,
}

impl InterferenceMatrix {
    /// Works the matrix out; the neighbours' rows hold at their worst points.
    pub fn of(solution: &Solution, neighbours: &[NeighbourFinding]) -> Self {
        let wells = solution
            .site()
            .wells
            .par_iter()
            .enumerate()
            .map(|(affected, well)| row_of_well(solution, affected, well.at))
            .collect();
        let neighbours = neighbours
            .iter()
            .map(|neighbour| {
                neighbour
                    .worst
                    .as_ref()
                    .map(|worst| worst.by_well_m.clone())
            })
            .collect();
        Self { wells, neighbours }
    }

    /// What every well causes at a well, itself included.
    pub fn at_well(&self, well: usize) -> &[f64] {
        self.wells.get(well).map_or(&[], Vec::as_slice)
    }

    /// The rows of the wells, in the plan's order.
    pub fn well_rows(&self) -> &[Vec<f64>] {
        &self.wells
    }

    /// The rows of the neighbours, in the plan's order; none where a
    /// neighbour lies outside every aquifer.
    pub fn neighbour_rows(&self) -> &[Option<Vec<f64>>] {
        &self.neighbours
    }
}

/// What each well of the site causes at one well.
fn row_of_well(solution: &Solution, affected: usize, at: Point) -> Vec<f64> {
    let mut row = vec![0.0; solution.site().wells.len()];
    let Some(field) = solution.field_of_well(affected) else {
        return row;
    };
    for &cause in &field.outline().wells {
        if let Some(entry) = row.get_mut(cause) {
            *entry = if cause == affected {
                field.own_drawdown_m(cause)
            } else {
                field.drawdown_by_m(cause, at)
            };
        }
    }
    row
}
