//! Findings in words for people: numbers rounded, each with its unit.
//!
//! A rate or share that clears a flag is rounded toward zero, so that what a
//! person reads clears it too.

mod accuracy;
mod names;
mod oddity;
mod rules;
mod steady;

pub use names::{listed, one_line, short};
pub use steady::steady_state;

use super::Planned;
use super::units::Units;
use crate::findings::{Cause, Flag, Measure, Rates, Remedy, Who};
use crate::site::Site;

/// Letters of a name in a sentence, at most.
const LONGEST_NAME: usize = 80;

/// Says things of one plan.
pub struct Words<'a> {
    site: &'a Site,
    units: Units,
}

impl<'a> Words<'a> {
    /// Words for a plan, in its units.
    pub fn of(planned: &Planned<'a>) -> Self {
        Self::new(planned.solution.site(), planned.units())
    }

    /// Words for a site, in these units.
    pub fn new(site: &'a Site, units: Units) -> Self {
        Self { site, units }
    }

    /// The units it speaks in.
    pub fn units(&self) -> Units {
        self.units
    }

    /// A length, to the centimetre or hundredth of a foot: "1.25 m".
    pub fn length(&self, metres: f64) -> String {
        format!(
            "{} {}",
            self.bare_length(metres),
            self.units.length_ending()
        )
    }

    /// A length without its unit.
    pub fn bare_length(&self, metres: f64) -> String {
        fixed(self.units.length(metres), 2)
    }

    /// A rate, to four figures or so: "2,160 m³/d".
    pub fn rate(&self, m3_d: f64) -> String {
        format!("{} {}", self.bare_rate(m3_d), self.units.rate_words())
    }

    /// A rate without its unit.
    pub fn bare_rate(&self, m3_d: f64) -> String {
        let rate = self.units.rate(m3_d);
        grouped(&fixed(rate, rate_decimals(rate)))
    }

    /// A rate rounded toward zero.
    fn rate_toward_zero(&self, m3_d: f64) -> String {
        let rate = self.units.rate(m3_d);
        let decimals = rate_decimals(rate);
        let power = 10_f64.powi(i32::try_from(decimals).unwrap_or(0));
        let rounded = (rate * power).trunc() / power;
        format!(
            "{} {}",
            grouped(&fixed(rounded, decimals)),
            self.units.rate_words()
        )
    }

    /// An area: "12,400 m²".
    pub fn area(&self, m2: f64) -> String {
        let area = self.units.area(m2);
        let decimals = usize::from(area < 10.0);
        format!(
            "{} {}",
            grouped(&fixed(area, decimals)),
            self.units.area_words()
        )
    }

    /// The name of a well.
    pub fn well(&self, well: usize) -> String {
        let name = self.site.wells.get(well).map_or("", |well| &well.name);
        short(name, LONGEST_NAME)
    }

    /// The name of a neighbour.
    pub fn neighbour(&self, neighbour: usize) -> String {
        let neighbours = &self.site.neighbours;
        let name = neighbours.get(neighbour).map_or("", |n| &n.name);
        short(name, LONGEST_NAME)
    }

    /// The name of a river or barrier.
    pub fn edge(&self, edge: usize) -> String {
        let name = self.site.edges.get(edge).map_or("", |edge| &edge.name);
        short(name, LONGEST_NAME)
    }

    /// Whom a flag is about.
    pub fn who(&self, who: Who) -> String {
        match who {
            Who::Well(well) => self.well(well),
            Who::Neighbour(neighbour) => self.neighbour(neighbour),
            Who::AquiferOf(well) => format!("aquifer of {}", self.well(well)),
            Who::Map => "map".into(),
        }
    }

    /// A flag as one or two sentences: how much, against what, caused by
    /// whom, and what would clear it.
    pub fn flag(&self, flag: &Flag) -> String {
        let reason = self.reason(flag);
        match self.clearing(flag) {
            Some(clearing) => format!("{reason} {clearing}"),
            None => reason,
        }
    }

    /// Why a flag was raised: how much, against what, caused by whom.
    pub fn reason(&self, flag: &Flag) -> String {
        let mut text = self.measure(&flag.measure);
        // With one well alone there is nothing to say of causes.
        if let Some(cause) = flag.cause.filter(|_| self.site.wells.len() > 1) {
            text.push_str(&self.cause(flag, cause));
        }
        text.push('.');
        text
    }

    /// What would clear a flag, where something is to be cleared.
    pub fn clearing(&self, flag: &Flag) -> Option<String> {
        match (&flag.remedy, flag.measure) {
            (Some(remedy), _) => Some(self.remedy(flag, remedy)),
            (
                None,
                Measure::Accuracy {
                    bound_m,
                    hardest_edge,
                    ..
                },
            ) => Some(self.exactness_remedy(bound_m, hardest_edge)),
            (None, _) => None,
        }
    }

    /// How much, against what.
    fn measure(&self, measure: &Measure) -> String {
        match *measure {
            Measure::Drawdown {
                drawdown_m,
                allowed_m: Some(allowed_m),
            } => format!(
                "drawn down {}, {} more than the {} allowed",
                self.length(drawdown_m),
                self.length(drawdown_m - allowed_m),
                self.length(allowed_m)
            ),
            Measure::Drawdown { drawdown_m, .. } => format!(
                "drawn down {}, with no allowed drawdown given to judge it by",
                self.length(drawdown_m)
            ),
            Measure::LowestLevel { level_m, lowest_m } => format!(
                "the level in the well falls to {}, {} below its lowest level of {}",
                self.length(level_m),
                self.length(lowest_m - level_m),
                self.length(lowest_m)
            ),
            Measure::Ground { level_m, ground_m } => format!(
                "the level in the well rises to {}, {} above the ground at {}",
                self.length(level_m),
                self.length(level_m - ground_m),
                self.length(ground_m)
            ),
            Measure::RoofAtWell {
                rim_head_m,
                level_m,
                roof_m,
            } => self.roof_at_well(rim_head_m, level_m, roof_m),
            Measure::RoofOnMap {
                area_m2,
                lowest_m,
                roof_m,
            } => format!(
                "the head is below the aquifer's roof at {} over {}, down to {}: the aquifer is not confined there and the results do not hold",
                self.length(roof_m),
                self.area(area_m2),
                self.length(lowest_m)
            ),
            Measure::Share {
                share,
                limit,
                interference_m,
            } => format!(
                "other wells cause {} of its {}, {}, more than the accepted {}",
                percent(share),
                if interference_m < 0.0 {
                    "rise"
                } else {
                    "drawdown"
                },
                self.length(interference_m.abs()),
                percent(limit)
            ),
            Measure::Accuracy {
                bound_m,
                accepted_m,
                ..
            } => self.inexact(bound_m, accepted_m),
        }
    }

    fn roof_at_well(&self, rim_head_m: f64, level_m: f64, roof_m: f64) -> String {
        let roof = self.length(roof_m);
        if rim_head_m < roof_m {
            format!(
                "the head in the aquifer at the well falls to {}, below the aquifer's roof at {roof}: the aquifer is not confined there and the results do not hold",
                self.length(rim_head_m)
            )
        } else {
            format!(
                "the level in the well falls to {} by well loss, below the aquifer's roof at {roof}; the aquifer beside it stays confined at {}",
                self.length(level_m),
                self.length(rim_head_m)
            )
        }
    }

    /// Caused by whom.
    fn cause(&self, flag: &Flag, cause: Cause) -> String {
        let itself = flag.who == Who::Well(cause.well);
        let (verb, metres) = if cause.drawdown_m < 0.0 {
            ("lifts it", -cause.drawdown_m)
        } else {
            ("draws it down", cause.drawdown_m)
        };
        let name = if itself {
            "the well itself".to_owned()
        } else {
            self.well(cause.well)
        };
        format!("; {name} {verb} {}, the most of all", self.length(metres))
    }

    /// What would clear it.
    fn remedy(&self, flag: &Flag, remedy: &Remedy) -> String {
        let together = match remedy.together {
            Some(common) => {
                let rates = match common.rates {
                    Rates::All => "all rates",
                    Rates::AllOthers => "all other wells' rates",
                };
                format!("{rates} at {} of the plan's", percent_down(common.factor))
            }
            None => String::new(),
        };
        let alone = match (remedy.alone, flag.cause) {
            (Some(rate), _) => {
                let what = if rate.from_m3_d < 0.0 {
                    "injecting"
                } else {
                    "pumping"
                };
                format!(
                    "{} {what} {} instead of {}",
                    self.well(rate.well),
                    self.rate_toward_zero(rate.to_m3_d.abs()),
                    self.rate(rate.from_m3_d.abs())
                )
            }
            (None, _) => String::new(),
        };
        if remedy.must_balance {
            let why = "no rate can change alone, since pumping and injection must balance";
            return match together.as_str() {
                "" => format!("Not cleared by lower rates in proportion; {why}."),
                _ => format!("Cleared by {together}; {why}."),
            };
        }
        match (alone.is_empty(), together.is_empty(), flag.cause) {
            (false, false, _) => format!("Cleared by {alone}, or by {together}."),
            (false, true, _) => format!("Cleared by {alone}."),
            (true, false, Some(cause)) => format!(
                "Stopping {} alone does not clear it; {together} would.",
                self.well(cause.well)
            ),
            (true, false, None) => format!("Cleared by {together}."),
            (true, true, _) => "No lower rate clears it: it is so before any pumping.".into(),
        }
    }
}

/// A share in whole percent.
pub fn percent(share: f64) -> String {
    format!("{}%", fixed(share * 100.0, 0))
}

/// A share in percent, rounded down to a tenth.
fn percent_down(share: f64) -> String {
    format!("{}%", fixed((share * 1000.0).floor() / 10.0, 1))
}

/// A number with a fixed count of decimals; never "-0.00".
pub fn fixed(value: f64, decimals: usize) -> String {
    let text = format!("{value:.decimals$}");
    let is_zero = text
        .bytes()
        .all(|byte| !byte.is_ascii_digit() || byte == b'0');
    match text.strip_prefix('-') {
        Some(digits) if is_zero => digits.to_owned(),
        Some(digits) => format!("−{digits}"),
        None => text,
    }
}

/// Thousands set apart: "12,400".
pub fn grouped(number: &str) -> String {
    let (sign, digits) = match number.strip_prefix('−') {
        Some(digits) => ("−", digits),
        None => ("", number),
    };
    let (whole, decimals) = match digits.split_once('.') {
        Some((whole, decimals)) => (whole, format!(".{decimals}")),
        None => (digits, String::new()),
    };
    let mut text = String::new();
    for (index, digit) in whole.chars().enumerate() {
        if index > 0 && (whole.len() - index) % 3 == 0 {
            text.push(',');
        }
        text.push(digit);
    }
    format!("{sign}{text}{decimals}")
}

/// Decimals that leave a rate some four figures.
fn rate_decimals(rate: f64) -> usize {
    match rate.abs() {
        size if size >= 100.0 => 0,
        size if size >= 10.0 => 1,
        _ => 2,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn thousands_are_set_apart_and_signs_kept() {
        assert_eq!(grouped("1234567"), "1,234,567");
        assert_eq!(grouped("−1234.50"), "−1,234.50");
        assert_eq!(grouped("999"), "999");
    }

    #[test]
    fn a_small_negative_number_is_not_minus_zero() {
        assert_eq!(fixed(-0.001, 2), "0.00");
        assert_eq!(fixed(-0.01, 2), "−0.01");
    }

    #[test]
    fn a_clearing_share_is_rounded_down() {
        assert_eq!(percent_down(0.8399), "83.9%");
    }
}
