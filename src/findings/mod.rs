//! What a planner wants to know of a solved site: interference, neighbours,
//! river inflow, and flags with their reasons. Numbers only, SI; no words.

mod boundary;
mod flag;
mod interference;
mod neighbour;
mod remedy;
mod roof;
mod rules;
mod solution;
mod well;
mod window;
mod worst;

pub use boundary::{Balance, BoundaryFinding};
pub use flag::{Cause, Flag, FlagCode, Measure, Who};
pub use interference::InterferenceMatrix;
pub use neighbour::{NeighbourFinding, Worst};
pub use remedy::{CommonFactor, NewRate, Rates, Remedy};
pub use roof::RoofFinding;
pub use solution::Solution;
pub use well::{WellFinding, interference_share};
pub use window::{MOST_NODES, MapWindow};
pub use worst::{Peak, RateChange, worst_point};

/// Everything found of a solved site.
pub struct Findings {
    /// The wells, in the plan's order.
    pub wells: Vec<WellFinding>,
    /// Who draws down whom.
    pub interference: InterferenceMatrix,
    /// The neighbours, in the plan's order.
    pub neighbours: Vec<NeighbourFinding>,
    /// Rivers and barriers, in the site's order.
    pub boundaries: Vec<BoundaryFinding>,
    /// The water balance of each aquifer.
    pub balances: Vec<Balance>,
    /// Heads against the roof on the map; none where the plan gives no roof.
    pub roof: Option<RoofFinding>,
    /// What must be looked at, most severe first.
    pub flags: Vec<Flag>,
}

impl Findings {
    /// Works everything out; `window` is the map on which the area below the
    /// roof is measured.
    pub fn of(solution: &Solution, window: &MapWindow) -> Self {
        let neighbours = neighbour::all(solution);
        let interference = InterferenceMatrix::of(solution, &neighbours);
        let wells = well::all(solution, &interference);
        let boundaries = boundary::all(solution);
        let balances = boundary::balances(solution, &boundaries);
        let roof = roof::finding(solution, &wells, window);
        let flags = rules::flags(&rules::Judged {
            solution,
            matrix: &interference,
            wells: &wells,
            neighbours: &neighbours,
            roof: roof.as_ref(),
        });
        Self {
            wells,
            interference,
            neighbours,
            boundaries,
            balances,
            roof,
            flags,
        }
    }

    /// The flags of one well, most severe first.
    pub fn flags_of(&self, who: Who) -> impl Iterator<Item = &Flag> {
        self.flags.iter().filter(move |flag| flag.who == who)
    }
}
