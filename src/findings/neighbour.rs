//! Each neighbour against its limit: its worst point, the drawdown there, and
//! every well's part in it.

use rayon::prelude::*;

use super::Solution;
use super::worst::worst_point;
use crate::site::{Neighbour, Point};

/// What the wells do to one neighbour.
#[derive(Clone, Debug, PartialEq)]
pub struct NeighbourFinding {
    /// The neighbour, by its index in `Site::neighbours`.
    pub neighbour: usize,
    /// The drawdown it may suffer, metres.
    pub allowed_m: Option<f64>,
    /// Its worst point; none where it lies outside every aquifer that holds
    /// a well, of which nothing can be said.
    pub worst: Option<Worst>,
}

/// The worst point of a neighbour.
#[derive(Clone, Debug, PartialEq)]
pub struct Worst {
    /// Where; the neighbour itself where it is a point.
    pub at: Point,
    /// The head there, metres.
    pub head_m: f64,
    /// The drawdown there, metres.
    pub drawdown_m: f64,
    /// What each well causes there, metres, in the plan's order of wells.
    pub by_well_m: Vec<f64>,
    /// The well that causes most, by its index in `Site::wells`; none where
    /// no well draws it down.
    pub largest_cause: Option<usize>,
}

impl NeighbourFinding {
    /// By how much the drawdown exceeds the limit, metres; none within it.
    pub fn excess_m(&self) -> Option<f64> {
        let excess_m = self.worst.as_ref()?.drawdown_m - self.allowed_m?;
        (excess_m > 0.0).then_some(excess_m)
    }
}

/// Finds every neighbour's worst point.
pub fn all(solution: &Solution) -> Vec<NeighbourFinding> {
    solution
        .site()
        .neighbours
        .par_iter()
        .enumerate()
        .map(|(index, neighbour)| NeighbourFinding {
            neighbour: index,
            allowed_m: neighbour.allowed_drawdown.map(|limit| limit.si()),
            worst: worst_of(solution, neighbour),
        })
        .collect()
}

/// The worst point of a neighbour with what each well causes there.
fn worst_of(solution: &Solution, neighbour: &Neighbour) -> Option<Worst> {
    let peak = worst_point(solution, &neighbour.place, None)?;
    let by_well_m: Vec<f64> = (0..solution.site().wells.len())
        .map(|well| solution.drawdown_by_m(well, peak.at))
        .collect();
    Some(Worst {
        at: peak.at,
        head_m: solution.ambient_head_m(peak.at) - peak.drawdown_m,
        drawdown_m: peak.drawdown_m,
        largest_cause: largest(&by_well_m),
        by_well_m,
    })
}

/// The index of the largest positive part, the first of equals.
pub fn largest(parts: &[f64]) -> Option<usize> {
    parts
        .iter()
        .enumerate()
        .filter(|&(_, &part)| part > 0.0)
        .reduce(|best, part| if part.1 > best.1 { part } else { best })
        .map(|(index, _)| index)
}
