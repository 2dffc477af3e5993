//! When a flag is raised: one file a rule.

mod above_ground;
mod accuracy_not_reached;
mod below_roof_at_well;
mod below_roof_on_map;
mod interference;
mod level;
mod level_too_low;
mod neighbour_over_limit;
mod no_limit_given;

use super::flag::{Flag, sort_by_severity};
use super::remedy::Remedy;
use super::{InterferenceMatrix, NeighbourFinding, RoofFinding, Solution, WellFinding};
use crate::field::WellField;

/// What the rules judge.
pub struct Judged<'a> {
    /// The solved site.
    pub solution: &'a Solution,
    /// Who draws down whom.
    pub matrix: &'a InterferenceMatrix,
    /// The wells.
    pub wells: &'a [WellFinding],
    /// The neighbours.
    pub neighbours: &'a [NeighbourFinding],
    /// Heads against the roof on the map.
    pub roof: Option<&'a RoofFinding>,
}

/// Whether a well stands in a closed basin.
fn must_balance(judged: &Judged<'_>, well: usize) -> bool {
    let field = judged.solution.field_of_well(well);
    field.is_some_and(WellField::is_closed_basin)
}

/// Applies every rule; most severe first.
pub fn flags(judged: &Judged<'_>) -> Vec<Flag> {
    let rules = [
        neighbour_over_limit::flags,
        above_ground::flags,
        level_too_low::flags,
        below_roof_at_well::flags,
        below_roof_on_map::flags,
        accuracy_not_reached::flags,
        interference::flags,
        no_limit_given::flags,
    ];
    let mut flags: Vec<Flag> = rules.iter().flat_map(|rule| rule(judged)).collect();
    for flag in &mut flags {
        if flag
            .cause
            .is_some_and(|cause| must_balance(judged, cause.well))
        {
            flag.remedy = flag.remedy.map(Remedy::in_balance);
        }
    }
    sort_by_severity(&mut flags);
    flags
}
