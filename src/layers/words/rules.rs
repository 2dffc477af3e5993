//! The rule behind each flag.

use super::Words;
use crate::findings::FlagCode;

impl Words<'_> {
    /// The rule that a flag goes by, as a sentence.
    pub fn rule(&self, code: FlagCode) -> String {
        match code {
            FlagCode::NeighbourOverLimit => {
                "A neighbour may be drawn down no further than its `allowed_drawdown`, at its worst point.".into()
            }
            FlagCode::AboveGround => {
                "The level in an injecting well must stay below its `ground`.".into()
            }
            FlagCode::LevelTooLow => {
                "The level in a pumping well, well loss included, must not fall below its `lowest_level`.".into()
            }
            FlagCode::BelowRoof => {
                "The head must stay above the aquifer's `roof`, else the aquifer is not confined and the results do not hold there.".into()
            }
            FlagCode::AccuracyNotReached => format!(
                "The proven error of the heads must be at most {}, the plan's `[accuracy] head`.",
                self.tolerance(self.site.head_tolerance.si())
            ),
            FlagCode::Interference => format!(
                "Other wells may cause at most {} of a well's drawdown, the plan's `interference_share`.",
                super::percent(self.site.interference_share)
            ),
            FlagCode::NoLimitGiven => {
                "Each neighbour needs an `allowed_drawdown` to be judged by.".into()
            }
        }
    }
}
