//! `no-limit-given`: a neighbour that could not be judged.

use super::Judged;
use crate::findings::flag::{Cause, Flag, FlagCode, Measure, Who};

/// One flag a neighbour without an allowed drawdown.
pub fn flags(judged: &Judged<'_>) -> Vec<Flag> {
    let unjudged = judged.neighbours.iter().filter_map(|finding| {
        let worst = finding.worst.as_ref()?;
        if finding.allowed_m.is_some() {
            return None;
        }
        Some(Flag {
            code: FlagCode::NoLimitGiven,
            who: Who::Neighbour(finding.neighbour),
            measure: Measure::Drawdown {
                drawdown_m: worst.drawdown_m,
                allowed_m: None,
            },
            cause: worst.largest_cause.and_then(|well| {
                Some(Cause {
                    well,
                    drawdown_m: *worst.by_well_m.get(well)?,
                })
            }),
            remedy: None,
        })
    });
    unjudged.collect()
}
