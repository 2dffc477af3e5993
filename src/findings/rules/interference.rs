//! `interference`: other wells cause more of a well's drawdown (or rise) than
//! the plan accepts.
//!
//! The share is I/(own + I), so it falls to the limit L when I falls to
//! own · L/(1 − L). Reducing all rates in one proportion changes no share;
//! the common factor is therefore for all wells but the flagged one.

use super::Judged;
use crate::findings::WellFinding;
use crate::findings::flag::{Cause, Flag, FlagCode, Measure, Who};
use crate::findings::neighbour::largest;
use crate::findings::remedy::{CommonFactor, NewRate, Rates, Remedy, largest_factor};

/// One flag a well that others crowd.
pub fn flags(judged: &Judged<'_>) -> Vec<Flag> {
    let limit = judged.solution.site().interference_share;
    let crowded = judged.wells.iter().filter_map(|finding| {
        let share = finding.interference_share.filter(|&share| share > limit)?;
        let (cause, remedy) = cause_and_remedy(judged, finding, limit);
        Some(Flag {
            code: FlagCode::Interference,
            who: Who::Well(finding.well),
            measure: Measure::Share {
                share,
                limit,
                interference_m: finding.interference_m,
            },
            cause,
            remedy: Some(remedy),
        })
    });
    crowded.collect()
}

/// The well that crowds most, and which rates would clear it.
fn cause_and_remedy(
    judged: &Judged<'_>,
    finding: &WellFinding,
    limit: f64,
) -> (Option<Cause>, Remedy) {
    let sign = if finding.pumping_m3_d < 0.0 {
        -1.0
    } else {
        1.0
    };
    let room_m = sign * finding.own_m * limit / (1.0 - limit);
    let interference_m = sign * finding.interference_m;
    let together = largest_factor(interference_m, 0.0, room_m).map(|factor| CommonFactor {
        rates: Rates::AllOthers,
        factor,
    });
    let parts: Vec<f64> = judged
        .matrix
        .at_well(finding.well)
        .iter()
        .enumerate()
        .map(|(well, part)| {
            if well == finding.well {
                0.0
            } else {
                sign * part
            }
        })
        .collect();
    let Some((well, part_m)) = largest(&parts).and_then(|well| Some((well, *parts.get(well)?)))
    else {
        return (None, Remedy::new(None, together));
    };
    let alone =
        largest_factor(part_m, 0.0, room_m - (interference_m - part_m)).and_then(|factor| {
            let rate = judged.solution.site().wells.get(well)?.pumping.si();
            Some(NewRate::scaled(well, rate, factor))
        });
    let cause = Cause {
        well,
        drawdown_m: sign * part_m,
    };
    (Some(cause), Remedy::new(alone, together))
}
