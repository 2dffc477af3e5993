//! Why a steady state exists, in words.

use super::{LONGEST_NAME, listed, short};
use crate::field::WellField;
use crate::findings::Solution;
use crate::outline::Kind;

/// Why the steady state of an aquifer exists.
pub fn steady_state(solution: &Solution, field: &WellField) -> String {
    let site = solution.site();
    let outline = field.outline();
    let kinds = outline.side_kinds();
    let mut rivers: Vec<String> = Vec::new();
    for (kind, pieces) in kinds.iter().zip(&outline.sides) {
        for piece in pieces.iter().filter(|_| *kind == Kind::FixedHead) {
            if let Some(edge) = site.edges.get(piece.edge) {
                let name = short(&edge.name, LONGEST_NAME);
                if !rivers.contains(&name) {
                    rivers.push(name);
                }
            }
        }
    }
    match (rivers.is_empty(), site.aquifer.influence_radius) {
        (false, _) => {
            let hold = if rivers.len() > 1 { "hold" } else { "holds" };
            format!("exists: {} {hold} the head", listed(&rivers))
        }
        (true, Some(_)) => {
            "assumed: no edge holds the head, so each cone ends at the influence radius".into()
        }
        (true, None) => "exists: pumping and injection balance".into(),
    }
}
