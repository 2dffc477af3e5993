//! What looks wrong in a plan, as sentences.

use super::Words;
use crate::findings::Oddity;

impl Words<'_> {
    /// What looks wrong, as a sentence.
    pub fn oddity(&self, oddity: &Oddity) -> String {
        match *oddity {
            Oddity::NoRoof => {
                "no `roof` is given, so it is not checked whether the aquifer stays confined".into()
            }
            Oddity::UnusualTransmissivity(m2_d) => format!(
                "a transmissivity of {m2_d:.3} m²/d is unusual for a well field (1 to 100,000 m²/d): are the units right?"
            ),
            Oddity::UnconfinedBeforePumping {
                well,
                ambient_m,
                roof_m,
            } => format!(
                "{}: the head before pumping, {}, is below the aquifer's roof at {}: the aquifer is not confined there",
                self.well(well),
                self.length(ambient_m),
                self.length(roof_m)
            ),
            Oddity::IdleWell(well) => {
                format!("{} neither pumps nor injects", self.well(well))
            }
            Oddity::WideWell(well, radius_m) => format!(
                "{}: a borehole radius of {} is unusual: is it given in the right unit?",
                self.well(well),
                self.length(radius_m)
            ),
            Oddity::WellsAtOnePlace(a, b, distance_m) => format!(
                "{} and {} stand only {} apart: are they one well?",
                self.well(a),
                self.well(b),
                self.length(distance_m)
            ),
            Oddity::LowestLevelAboveHead {
                well,
                lowest_m,
                ambient_m,
            } => format!(
                "{}: the lowest level, {}, is above the head before pumping, {}",
                self.well(well),
                self.length(lowest_m),
                self.length(ambient_m)
            ),
            Oddity::BelowBase {
                well,
                level_m,
                base_m,
            } => format!(
                "{}: the level in the well would be {}, below the aquifer's base at {}: no such rate is possible",
                self.well(well),
                self.length(level_m),
                self.length(base_m)
            ),
            Oddity::NeighbourOutside(neighbour) => format!(
                "{} lies outside every aquifer that holds a well: nothing can be said of it",
                self.neighbour(neighbour)
            ),
            Oddity::NeighbourWithoutLimit(neighbour) => format!(
                "{} has no `allowed_drawdown` to be judged by",
                self.neighbour(neighbour)
            ),
        }
    }
}
