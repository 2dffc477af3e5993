//! `below-roof` at a well: the level in it, or even the head in the aquifer
//! beside it, falls below the aquifer's roof.
//!
//! The remedy is for the level in the well, the lower of the two where the
//! well pumps; without well loss they are the same.

use super::Judged;
use super::level::{Bound, Level};
use crate::findings::flag::{Flag, FlagCode, Measure, Who};

/// One flag a well that is drawn below the roof.
pub fn flags(judged: &Judged<'_>) -> Vec<Flag> {
    let site = judged.solution.site();
    let Some(roof_m) = site.aquifer.roof.map(|roof| roof.si()) else {
        return vec![];
    };
    let below = judged.wells.iter().filter_map(|finding| {
        let (level_m, rim_head_m) = (finding.level_m(), finding.rim_head_m());
        if level_m.min(rim_head_m) >= roof_m {
            return None;
        }
        let (cause, remedy) = Level {
            site,
            finding,
            row: judged.matrix.at_well(finding.well),
            with_loss: level_m <= rim_head_m,
        }
        .cause_and_remedy(Bound::Lower(roof_m));
        Some(Flag {
            code: FlagCode::BelowRoof,
            who: Who::Well(finding.well),
            measure: Measure::RoofAtWell {
                rim_head_m,
                level_m,
                roof_m,
            },
            cause,
            remedy: Some(remedy),
        })
    });
    below.collect()
}
