//! What each river gives to the wells, whether it adds up to what they pump,
//! and what passes between river and aquifer before and after pumping.
//!
//! The share of a well's water that an edge gives is the harmonic measure of
//! the edge seen from the well; where an aquifer has a river, the shares of
//! all its edges sum to one.

use super::Solution;
use crate::field::WellField;

/// What one river or barrier gives to the wells.
#[derive(Clone, Debug, PartialEq)]
pub struct BoundaryFinding {
    /// The edge, by its index in `Site::edges`.
    pub edge: usize,
    /// Whether it bounds an aquifer that holds a well.
    pub bounds_an_aquifer: bool,
    /// Water given to each well, m³/d, in the plan's order of wells; negative
    /// where an injecting well feeds the river.
    pub by_well_m3_d: Vec<f64>,
    /// Water that it gives to the aquifers before any pumping, m³/d; negative
    /// where it takes water from them; none where that is infinite or not
    /// determined, or where it bounds no aquifer.
    pub exchange_before_m3_d: Option<f64>,
}

impl BoundaryFinding {
    /// Water given to all wells together, m³/d.
    pub fn inflow_m3_d(&self) -> f64 {
        self.by_well_m3_d.iter().sum()
    }

    /// Water that it gives to the aquifers while the wells run, m³/d, under
    /// the same terms as before.
    pub fn exchange_after_m3_d(&self) -> Option<f64> {
        Some(self.exchange_before_m3_d? + self.inflow_m3_d())
    }
}

/// The water balance of one aquifer.
#[derive(Clone, Debug, PartialEq)]
pub struct Balance {
    /// What the aquifer's wells pump, less what they inject, m³/d.
    pub pumping_m3_d: f64,
    /// What its rivers give to them, m³/d; none where no river bounds it.
    pub inflow_m3_d: Option<f64>,
}

/// What every edge gives.
pub fn all(solution: &Solution) -> Vec<BoundaryFinding> {
    let site = solution.site();
    (0..site.edges.len())
        .map(|edge| {
            let mut by_well_m3_d = vec![0.0; site.wells.len()];
            let beside = || solution.fields().iter().filter(|field| bounds(field, edge));
            let bounds_an_aquifer = beside().next().is_some();
            for field in beside() {
                for &well in &field.outline().wells {
                    if let Some(given) = by_well_m3_d.get_mut(well) {
                        *given += field.inflow_m3_d(edge, well);
                    }
                }
            }
            let before: Option<f64> = beside().map(|field| field.ambient_inflow_m3_d(edge)).sum();
            BoundaryFinding {
                edge,
                bounds_an_aquifer,
                by_well_m3_d,
                exchange_before_m3_d: before.filter(|_| bounds_an_aquifer),
            }
        })
        .collect()
}

/// The balance of every aquifer, in the solution's order.
pub fn balances(solution: &Solution, boundaries: &[BoundaryFinding]) -> Vec<Balance> {
    let site = solution.site();
    solution
        .fields()
        .iter()
        .map(|field| {
            let wells = &field.outline().wells;
            let given = |boundary: &BoundaryFinding| -> f64 {
                wells
                    .iter()
                    .filter_map(|&well| boundary.by_well_m3_d.get(well))
                    .sum()
            };
            Balance {
                pumping_m3_d: wells
                    .iter()
                    .filter_map(|&well| site.wells.get(well))
                    .map(|well| well.pumping.si())
                    .sum(),
                inflow_m3_d: has_river(field).then(|| boundaries.iter().map(given).sum()),
            }
        })
        .collect()
}

/// Whether an edge makes a part of an aquifer's outline.
fn bounds(field: &WellField, edge: usize) -> bool {
    field
        .outline()
        .sides
        .iter()
        .flatten()
        .any(|piece| piece.edge == edge)
}

/// Whether a fixed head bounds an aquifer.
fn has_river(field: &WellField) -> bool {
    field
        .outline()
        .side_kinds()
        .contains(&crate::outline::Kind::FixedHead)
}
