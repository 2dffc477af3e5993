//! `above-ground`: injection lifts the level in a well above the ground.
//!
//! A level that stands above the ground without injection (an artesian
//! aquifer) is not flagged unless the wells lift it further.

use super::Judged;
use super::level::{Bound, Level};
use crate::findings::flag::{Flag, FlagCode, Measure, Who};

/// One flag a well that would overflow.
pub fn flags(judged: &Judged<'_>) -> Vec<Flag> {
    let site = judged.solution.site();
    let overflowing = judged
        .wells
        .iter()
        .zip(&site.wells)
        .filter_map(|(finding, well)| {
            let ground_m = well.ground?.si();
            let level_m = finding.level_m();
            if level_m <= ground_m || finding.drawdown_m() >= 0.0 {
                return None;
            }
            let (cause, remedy) = Level {
                site,
                finding,
                row: judged.matrix.at_well(finding.well),
                with_loss: true,
            }
            .cause_and_remedy(Bound::Upper(ground_m));
            Some(Flag {
                code: FlagCode::AboveGround,
                who: Who::Well(finding.well),
                measure: Measure::Ground { level_m, ground_m },
                cause,
                remedy: Some(remedy),
            })
        });
    overflowing.collect()
}
