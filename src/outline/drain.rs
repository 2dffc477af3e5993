//! Whether an aquifer can drain the recharge that it receives.

use super::error::{Named, OutlineError};
use super::names;
use super::shape::{Axis, Kind};
use super::{Outline, Shape};
use crate::site::{Site, Subject};

impl Outline {
    /// That a steady state exists under the plan's recharge.
    ///
    /// # Errors
    /// `RechargeWithoutEnd` over an unbounded area, `RechargeWithoutRiver` where
    /// barriers alone close the aquifer. Of an open general outline the solver
    /// knows more.
    pub(crate) fn check_drainage(&self, site: &Site) -> Result<(), OutlineError> {
        let recharge = site.aquifer.recharge;
        if recharge.si() == 0.0 || self.drains() {
            return Ok(());
        }
        let well = self.wells.first().map_or(
            Named {
                subject: Subject::Plan,
                words: "a well".to_owned(),
            },
            |well| names::well(site, *well),
        );
        Err(if self.is_closed() {
            OutlineError::RechargeWithoutRiver { recharge, well }
        } else {
            OutlineError::RechargeWithoutEnd {
                recharge,
                well,
                shape: self.shape.name(),
            }
        })
    }

    /// Whether a river lies within a bounded distance of every place, as it may
    /// in an open general outline.
    fn drains(&self) -> bool {
        let is_drained = |axis: Axis| match axis {
            Axis::TwoEdges { kinds, .. } => kinds.contains(&Kind::FixedHead),
            Axis::Open | Axis::OneEdge(_) => false,
        };
        match self.shape {
            Shape::Axes { x, y } => is_drained(x) || is_drained(y),
            Shape::Disk { .. } => true,
            Shape::General => !self.is_closed() || self.side_kinds().contains(&Kind::FixedHead),
            Shape::Wedge { .. } | Shape::CloggedHalfPlane { .. } | Shape::DiskExterior { .. } => {
                false
            }
        }
    }
}
