//! `neighbour-over-limit`: a neighbour is drawn down further than it may be.
//!
//! On an area the worst point may move while the causing well is throttled.
//! The drawdown at every point is linear in its rate, so the largest of them
//! is convex, and Newton's steps from above reach the clearing rate without
//! passing it: each step clears the worst point of the last.

use rayon::prelude::*;

use super::Judged;
use crate::findings::flag::{Cause, Flag, FlagCode, Measure, Who};
use crate::findings::neighbour::{NeighbourFinding, Worst};
use crate::findings::remedy::{CommonFactor, NewRate, Rates, Remedy};
use crate::findings::worst::{Peak, RateChange, worst_point};

/// Steps until the worst point stays where it is; a few are usual.
const STEPS: usize = 60;
/// A limit counts as kept within this many metres.
const CLEARED_M: f64 = 1e-10;

/// One flag a neighbour over its limit.
pub fn flags(judged: &Judged<'_>) -> Vec<Flag> {
    let over = judged.neighbours.par_iter().filter_map(|finding| {
        finding.excess_m()?;
        let worst = finding.worst.as_ref()?;
        let allowed_m = finding.allowed_m?;
        let cause = worst.largest_cause.and_then(|well| {
            Some(Cause {
                well,
                drawdown_m: *worst.by_well_m.get(well)?,
            })
        });
        Some(Flag {
            code: FlagCode::NeighbourOverLimit,
            who: Who::Neighbour(finding.neighbour),
            measure: Measure::Drawdown {
                drawdown_m: worst.drawdown_m,
                allowed_m: Some(allowed_m),
            },
            cause,
            remedy: Some(Remedy::new(
                cause.and_then(|cause| clearing_rate(judged, finding, cause.well)),
                together(worst, allowed_m),
            )),
        })
    });
    over.collect()
}

/// All drawdowns are proportional to the common factor on the rates.
fn together(worst: &Worst, allowed_m: f64) -> Option<CommonFactor> {
    (allowed_m >= 0.0).then(|| CommonFactor {
        rates: Rates::All,
        factor: allowed_m / worst.drawdown_m,
    })
}

/// The rate of one well at which no point of the neighbour is over its limit.
fn clearing_rate(judged: &Judged<'_>, finding: &NeighbourFinding, well: usize) -> Option<NewRate> {
    let site = judged.solution.site();
    let place = &site.neighbours.get(finding.neighbour)?.place;
    let rate_m3_d = site.wells.get(well)?.pumping.si();
    let allowed_m = finding.allowed_m?;
    let mut factor = 1.0;
    let worst = finding.worst.as_ref()?;
    let mut peak = Peak {
        at: worst.at,
        drawdown_m: worst.drawdown_m,
    };
    for _ in 0..STEPS {
        let excess_m = peak.drawdown_m - allowed_m;
        if excess_m <= CLEARED_M {
            return Some(NewRate::scaled(well, rate_m3_d, factor));
        }
        factor -= excess_m / judged.solution.drawdown_by_m(well, peak.at);
        // Also false for NaN: nothing is invented where the well has no part.
        let can_be_reached = factor >= 0.0;
        if !can_be_reached {
            return None;
        }
        peak = worst_point(judged.solution, place, Some(RateChange { well, factor }))?;
    }
    None
}
