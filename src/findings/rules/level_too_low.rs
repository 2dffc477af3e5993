//! `level-too-low`: the level in a well falls below its lowest level.

use super::Judged;
use super::level::{Bound, Level};
use crate::findings::flag::{Flag, FlagCode, Measure, Who};

/// One flag a well that is drawn too low.
pub fn flags(judged: &Judged<'_>) -> Vec<Flag> {
    let site = judged.solution.site();
    let too_low = judged
        .wells
        .iter()
        .zip(&site.wells)
        .filter_map(|(finding, well)| {
            let lowest_m = well.lowest_level?.si();
            let level_m = finding.level_m();
            if level_m >= lowest_m {
                return None;
            }
            let (cause, remedy) = Level {
                site,
                finding,
                row: judged.matrix.at_well(finding.well),
                with_loss: true,
            }
            .cause_and_remedy(Bound::Lower(lowest_m));
            Some(Flag {
                code: FlagCode::LevelTooLow,
                who: Who::Well(finding.well),
                measure: Measure::LowestLevel { level_m, lowest_m },
                cause,
                remedy: Some(remedy),
            })
        });
    too_low.collect()
}
