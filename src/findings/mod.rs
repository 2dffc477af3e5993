//! What a planner wants to know of a solved site: interference, neighbours,
//! river inflow, and flags with their reasons. Numbers only, SI; no words.

mod boundary;
mod flag;
mod interference;
mod neighbour;
mod oddities;
mod outside;
mod reach;
mod remedy;
mod roof;
mod rules;
mod solution;
mod survey;
mod well;
mod window;
mod worst;

pub use boundary::{Balance, BoundaryFinding};
pub use flag::{Cause, Flag, FlagCode, Measure, Who};
pub use interference::{InterferenceMatrix, MOST_ENTRIES};
pub use neighbour::{NeighbourFinding, Worst};
pub use oddities::{Oddity, oddities};
pub use outside::edge_between;
pub use reach::ReachFinding;
pub use remedy::{CommonFactor, NewRate, Rates, Remedy};
pub use roof::RoofFinding;
pub use solution::Solution;
pub use survey::{AtNodes, Drawdowns, Heads, Survey, SurveyError, SurveyedAquifer};
pub use well::{WellFinding, interference_share};
pub use window::{MOST_NODES, MapWindow};

pub use worst::{Peak, RateChange, worst_point};

/// What is found without a map: wells and neighbours.
pub struct WellsAndNeighbours {
    /// The wells, in the plan's order.
    pub wells: Vec<WellFinding>,
    /// Who draws down whom.
    pub interference: InterferenceMatrix,
    /// The neighbours, in the plan's order.
    pub neighbours: Vec<NeighbourFinding>,
}

impl WellsAndNeighbours {
    /// Works them out.
    pub fn of(solution: &Solution) -> Self {
        let neighbours = neighbour::all(solution);
        let interference = InterferenceMatrix::of(solution, &neighbours);
        Self {
            wells: well::all(solution, &interference),
            interference,
            neighbours,
        }
    }
}

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
    /// The straight reaches of the rivers.
    pub reaches: Vec<ReachFinding>,
    /// The water balance of each aquifer.
    pub balances: Vec<Balance>,
    /// Heads against the roof on the map; none where the plan gives no roof.
    pub roof: Option<RoofFinding>,
    /// What must be looked at, most severe first.
    pub flags: Vec<Flag>,
}

impl Findings {
    /// Works everything out; the area below the roof is measured on the map.
    ///
    /// # Errors
    /// Where the contour of the roof cannot be drawn.
    pub fn of(solution: &Solution, survey: &Survey<'_>) -> Result<Self, SurveyError> {
        let WellsAndNeighbours {
            wells,
            interference,
            neighbours,
        } = WellsAndNeighbours::of(solution);
        let boundaries = boundary::all(solution);
        let balances = boundary::balances(solution, &boundaries);
        let roof = roof::finding(solution, &wells, survey)?;
        let flags = rules::flags(&rules::Judged {
            solution,
            matrix: &interference,
            wells: &wells,
            neighbours: &neighbours,
            roof: roof.as_ref(),
        });
        Ok(Self {
            wells,
            interference,
            neighbours,
            boundaries,
            reaches: reach::all(solution),
            balances,
            roof,
            flags,
        })
    }

    /// The flags of one well, most severe first.
    pub fn flags_of(&self, who: Who) -> impl Iterator<Item = &Flag> {
        self.flags.iter().filter(move |flag| flag.who == who)
    }
}
