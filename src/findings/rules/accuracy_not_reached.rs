//! `accuracy-not-reached`: no error as small as the plan asks for could be
//! proven of an aquifer's heads. No well causes it.

use super::Judged;
use crate::findings::flag::{Flag, FlagCode, Measure, Who};

/// One flag an aquifer whose proven error exceeds `[accuracy] head`.
pub fn flags(judged: &Judged<'_>) -> Vec<Flag> {
    let accepted = judged.solution.site().head_tolerance;
    let inexact = judged.solution.fields().iter().filter_map(|field| {
        if field.is_accurate(accepted) {
            return None;
        }
        Some(Flag {
            code: FlagCode::AccuracyNotReached,
            who: Who::AquiferOf(field.outline().wells.iter().copied().min()?),
            measure: Measure::Accuracy {
                bound_m: field.error_bound_m(),
                accepted_m: accepted.si(),
                hardest_edge: field.hardest_edge(),
            },
            cause: None,
            remedy: None,
        })
    });
    inexact.collect()
}
