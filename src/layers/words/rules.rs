//! The rule behind each flag.

use super::Words;
use crate::findings::FlagCode;

impl Words<'_> {
    /// What a kind of flag is called.
    pub fn flag_title(code: FlagCode) -> &'static str {
        match code {
            FlagCode::NeighbourOverLimit => "Neighbour over its limit",
            FlagCode::AboveGround => "Water above the ground",
            FlagCode::LevelTooLow => "Level too low",
            FlagCode::BelowRoof => "Head below the aquifer’s roof",
            FlagCode::AccuracyNotReached => "Accuracy not reached",
            FlagCode::Interference => "Wells that crowd each other",
            FlagCode::NoLimitGiven => "No limit given",
        }
    }

    /// The rule that a flag goes by, as a sentence.
    pub fn rule(&self, code: FlagCode) -> String {
        match code {
            FlagCode::NeighbourOverLimit => {
                "A neighbour may be drawn down no further than its allowed drawdown, at its worst point.".into()
            }
            FlagCode::AboveGround => {
                "The level in an injecting well must stay below the ground.".into()
            }
            FlagCode::LevelTooLow => {
                "The level in a pumping well, well loss included, must not fall below its lowest level.".into()
            }
            FlagCode::BelowRoof => {
                "The head must stay above the aquifer's roof, else the aquifer is not confined and the results do not hold there.".into()
            }
            FlagCode::AccuracyNotReached => format!(
                "The proven error of the heads must be at most {}, as the plan's [accuracy] asks.",
                self.tolerance(self.site.head_tolerance.si())
            ),
            FlagCode::Interference => format!(
                "Other wells may cause at most {} of a well's drawdown, the plan's limit.",
                super::percent(self.site.interference_share)
            ),
            FlagCode::NoLimitGiven => {
                "Each neighbour needs an allowed drawdown to be judged by.".into()
            }
        }
    }
}
