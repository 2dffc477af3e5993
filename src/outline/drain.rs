//! Whether an aquifer can drain the recharge that it receives.

use super::error::{Named, OutlineError};
use super::names;
use super::recognise::Context;
use super::shape::{Axis, Kind};
use super::{Outline, Shape};
use crate::site::Subject;

/// That a steady state exists under the plan's recharge.
///
/// # Errors
/// `RechargeWithoutEnd` over an unbounded area, `RechargeWithoutRiver` where
/// barriers alone close the aquifer.
pub(super) fn check(context: Context<'_>, outline: &Outline) -> Result<(), OutlineError> {
    let metres_a_day = context.site.aquifer.recharge.si();
    if metres_a_day == 0.0 {
        return Ok(());
    }
    let well = context.wells.first().map_or(
        Named {
            subject: Subject::Plan,
            words: "a well".to_owned(),
        },
        |well| names::well(context.site, *well),
    );
    let shape = outline.shape.name();
    let has_river = outline.side_kinds().contains(&Kind::FixedHead);
    if outline.is_closed() && !has_river {
        Err(OutlineError::RechargeWithoutRiver { metres_a_day, well })
    } else if drains(outline) {
        Ok(())
    } else {
        Err(OutlineError::RechargeWithoutEnd {
            metres_a_day,
            well,
            shape,
        })
    }
}

/// Whether a river lies within a bounded distance of every place.
fn drains(outline: &Outline) -> bool {
    let is_drained = |axis: Axis| match axis {
        Axis::TwoEdges { kinds, .. } => kinds.contains(&Kind::FixedHead),
        Axis::Open | Axis::OneEdge(_) => false,
    };
    match outline.shape {
        Shape::Axes { x, y } => is_drained(x) || is_drained(y),
        Shape::Disk { .. } => true,
        Shape::General => outline.is_closed(),
        Shape::Wedge { .. } | Shape::DiskExterior { .. } => false,
    }
}
