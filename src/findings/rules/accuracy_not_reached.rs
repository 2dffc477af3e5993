//! `accuracy-not-reached`: no error as small as the plan asks for could be
//! proven of an aquifer's heads. No well causes it.

use super::Judged;
use crate::findings::flag::{Flag, FlagCode, Measure, Who};

/// One flag an aquifer whose proven error exceeds `[accuracy] head`.
pub fn flags(judged: &Judged<'_>) -> Vec<Flag> {
    let accepted_m = judged.solution.site().head_tolerance.si();
    let inexact = judged.solution.fields().iter().filter_map(|field| {
        let bound_m = field.error_bound_m();
        // Written so that a bound that is no number is flagged too.
        if bound_m <= accepted_m {
            return None;
        }
        Some(Flag {
            code: FlagCode::AccuracyNotReached,
            who: Who::AquiferOf(field.outline().wells.iter().copied().min()?),
            measure: Measure::Accuracy {
                bound_m,
                accepted_m,
                hardest_edge: field.hardest_edge(),
            },
            cause: None,
            remedy: None,
        })
    });
    inexact.collect()
}
