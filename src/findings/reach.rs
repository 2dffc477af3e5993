//! What each straight reach of a river gives to the wells.
//!
//! A reach's share of a well's water is the flux of the well's Green's
//! function through it; the reaches of all rivers of an aquifer add up to what
//! its wells pump.

use std::ops::Range;

use super::Solution;
use crate::field::WellField;
use crate::outline::Kind;
use crate::site::Site;

/// What one straight reach of a river gives to the wells of one aquifer.
#[derive(Clone, Debug, PartialEq)]
pub struct ReachFinding {
    /// The river, by its index in `Site::edges`.
    pub edge: usize,
    /// The aquifer, by its index in `Solution::fields`.
    pub field: usize,
    /// The side of the aquifer's outline.
    pub side: usize,
    /// Where along the side.
    pub along: Range<f64>,
    /// Length, metres; none where it goes on without end.
    pub length_m: Option<f64>,
    /// Water given to all wells of the aquifer, m³/d.
    pub inflow_m3_d: f64,
}

/// Every reach of every river that bounds an aquifer.
pub fn all(solution: &Solution) -> Vec<ReachFinding> {
    let site = solution.site();
    let fields = solution.fields().iter().enumerate();
    fields
        .flat_map(|(index, field)| of_aquifer(site, index, field))
        .collect()
}

fn of_aquifer(site: &Site, index: usize, field: &WellField) -> Vec<ReachFinding> {
    let outline = field.outline();
    let kinds = outline.side_kinds();
    let mut reaches = Vec::new();
    for (side, (kind, pieces)) in kinds.iter().zip(&outline.sides).enumerate() {
        if *kind != Kind::FixedHead {
            continue;
        }
        for piece in pieces {
            for along in outline.reaches(site, side, piece) {
                reaches.push(ReachFinding {
                    edge: piece.edge,
                    field: index,
                    side,
                    length_m: outline.reach_length_m(side, &along),
                    inflow_m3_d: field.inflow_through_m3_d(side, &along),
                    along,
                });
            }
        }
    }
    reaches
}
