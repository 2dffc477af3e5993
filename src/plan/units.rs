//! The units that people write, and their values in metres and days.
//!
//! A bare number is in the plan's own unit (see [`UnitSystem`]); a text such
//! as "25 L/s" carries its own. The units and their definitions stand in
//! `units/table.rs`.

mod beside;
mod table;

use table::{FOOT, FOOT_2, GPM, INCH, Unit, YEAR};

/// The units of a plan's bare numbers.
///
/// | kind | metric | us |
/// |---|---|---|
/// | length, level, drawdown | m | ft |
/// | rate | m3/d | gpm |
/// | conductivity | m/d | ft/d |
/// | transmissivity | m2/d | ft2/d |
/// | recharge | m/d | in/yr |
/// | time | d | d |
/// | well loss C of s = BQ + CQ² | d2/m5 | ft/gpm2 |
///
/// The well loss of a us plan is in feet for each squared gallon a minute, so
/// that s = C Q² holds in the plan's own units.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum UnitSystem {
    /// Metres, m³/d, days.
    Metric,
    /// International feet, US gallons a minute, days.
    Us,
}

/// What a number measures.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Dimension {
    /// A length, level or drawdown; metres.
    Length,
    /// A volume each day; m³/d.
    Rate,
    /// Hydraulic conductivity; m/d.
    Conductivity,
    /// Transmissivity; m²/d.
    Transmissivity,
    /// Areal recharge; m/d.
    Flux,
    /// A span of time; days.
    Time,
    /// C of s = BQ + CQ²; d²/m⁵.
    WellLoss,
    /// An angle; degrees.
    Angle,
    /// A slope of the head; metres a metre.
    Slope,
    /// A share or a ratio; no unit.
    Share,
}

/// Every dimension, for looking a unit up among the others.
const DIMENSIONS: [Dimension; 10] = [
    Dimension::Length,
    Dimension::Rate,
    Dimension::Conductivity,
    Dimension::Transmissivity,
    Dimension::Flux,
    Dimension::Time,
    Dimension::WellLoss,
    Dimension::Angle,
    Dimension::Slope,
    Dimension::Share,
];

impl Dimension {
    /// What it is called in a sentence.
    pub fn name(self) -> &'static str {
        match self {
            Self::Length => "length",
            Self::Rate => "rate",
            Self::Conductivity => "conductivity",
            Self::Transmissivity => "transmissivity",
            Self::Flux => "recharge",
            Self::Time => "time",
            Self::WellLoss => "well loss coefficient",
            Self::Angle => "angle",
            Self::Slope => "slope",
            Self::Share => "share",
        }
    }

    /// The accepted units, as a list for a sentence: "m, cm, mm, …".
    pub fn accepted(self) -> String {
        let names: Vec<_> = table::units_of(self).iter().map(Unit::name).collect();
        names.join(", ")
    }
}

impl UnitSystem {
    /// The unit of a bare number, as it is written: "gpm"; empty for shares.
    pub fn unit_name(self, dimension: Dimension) -> &'static str {
        match (dimension, self) {
            (Dimension::Length, Self::Metric) => "m",
            (Dimension::Length, Self::Us) => "ft",
            (Dimension::Rate, Self::Metric) => "m3/d",
            (Dimension::Rate, Self::Us) => "gpm",
            (Dimension::Conductivity | Dimension::Flux, Self::Metric) => "m/d",
            (Dimension::Conductivity, Self::Us) => "ft/d",
            (Dimension::Flux, Self::Us) => "in/yr",
            (Dimension::Transmissivity, Self::Metric) => "m2/d",
            (Dimension::Transmissivity, Self::Us) => "ft2/d",
            (Dimension::Time, _) => "d",
            (Dimension::WellLoss, Self::Metric) => "d2/m5",
            (Dimension::WellLoss, Self::Us) => "ft/gpm2",
            (Dimension::Angle, _) => "deg",
            (Dimension::Slope | Dimension::Share, _) => "",
        }
    }

    /// How many metres, days and degrees the unit of a bare number holds.
    pub fn si_per_unit(self, dimension: Dimension) -> f64 {
        match (dimension, self) {
            (Dimension::Length, Self::Us) => FOOT,
            (Dimension::Rate, Self::Us) => GPM,
            (Dimension::Conductivity, Self::Us) => FOOT,
            (Dimension::Flux, Self::Us) => INCH / YEAR,
            (Dimension::Transmissivity, Self::Us) => FOOT_2,
            (Dimension::WellLoss, Self::Us) => FOOT / (GPM * GPM),
            _ => 1.0,
        }
    }

    /// A value in metres and days, in the plan's own unit.
    pub fn of_si(self, dimension: Dimension, si: f64) -> f64 {
        si / self.si_per_unit(dimension)
    }

    /// The name that a plan gives it.
    pub fn name(self) -> &'static str {
        match self {
            Self::Metric => "metric",
            Self::Us => "us",
        }
    }
}

/// Why a text is no quantity of the wanted dimension.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
pub enum UnitError {
    /// It does not begin with a number.
    #[error("it does not begin with a number")]
    NoNumber,
    /// Its number has a comma.
    #[error("a number has no commas, and a point before its decimals")]
    Comma,
    /// It is a number without a unit.
    #[error("a number in quotes needs a unit")]
    NoUnit,
    /// The unit measures something else.
    #[error("`{unit}` is a unit of {measures}, not of {wanted}")]
    WrongDimension {
        /// The unit, as it was written.
        unit: String,
        /// What it measures.
        measures: &'static str,
        /// What was wanted.
        wanted: &'static str,
    },
    /// The unit is not known.
    #[error("`{unit}` is not a known unit of {wanted}")]
    Unknown {
        /// The unit, as it was written.
        unit: String,
        /// What was wanted.
        wanted: &'static str,
    },
}

/// A quantity such as "25 L/s" in metres, days and degrees.
///
/// Powers may be written m3, m^3 or m³; capitals do not matter except in ML/d.
///
/// # Errors
/// [`UnitError`] says which half of the text is wrong.
pub fn parse(text: &str, wanted: Dimension) -> Result<f64, UnitError> {
    let (number, written) = split(text).ok_or(UnitError::NoNumber)?;
    if written.is_empty() {
        return Err(UnitError::NoUnit);
    }
    if written.starts_with(',') {
        return Err(UnitError::Comma);
    }
    let spelling = plain_spelling(written);
    if let Some(found) = find(&spelling, wanted) {
        return Ok(number * found.si);
    }
    let other = DIMENSIONS
        .into_iter()
        .find(|dimension| find(&spelling, *dimension).is_some());
    Err(match other {
        Some(dimension) => UnitError::WrongDimension {
            unit: short(written),
            measures: dimension.name(),
            wanted: wanted.name(),
        },
        None => UnitError::Unknown {
            unit: short(written),
            wanted: wanted.name(),
        },
    })
}

/// Enough of a text to know it again.
fn short(text: &str) -> String {
    text.chars().take(40).collect()
}

fn find(spelling: &str, dimension: Dimension) -> Option<&'static Unit> {
    let units = table::units_of(dimension);
    let exact = units.iter().find(|unit| unit.spellings.contains(&spelling));
    exact.or_else(|| {
        units.iter().find(|unit| {
            // A megalitre is not a millilitre.
            unit.name() != "ML/d"
                && unit
                    .spellings
                    .iter()
                    .any(|known| known.eq_ignore_ascii_case(spelling))
        })
    })
}

/// The leading number of a text and the trimmed rest.
fn split(text: &str) -> Option<(f64, &str)> {
    let text = text.trim();
    let (negative, body) = match text.strip_prefix(['-', '−']) {
        Some(body) => (true, body),
        None => (false, text.strip_prefix('+').unwrap_or(text)),
    };
    let digits = |from: usize| {
        let rest = body.get(from..).unwrap_or("");
        rest.bytes().take_while(u8::is_ascii_digit).count()
    };
    let mut end = digits(0);
    if body.get(end..).is_some_and(|rest| rest.starts_with('.')) {
        end += 1 + digits(end + 1);
    }
    if let Some(rest) = body
        .get(end..)
        .and_then(|rest| rest.strip_prefix(['e', 'E']))
    {
        let sign = usize::from(rest.starts_with(['+', '-']));
        let exponent = digits(end + 1 + sign);
        if exponent > 0 {
            end += 1 + sign + exponent;
        }
    }
    let magnitude: f64 = body.get(..end)?.parse().ok()?;
    let number = if negative { -magnitude } else { magnitude };
    Some((number, body.get(end..)?.trim()))
}

/// A unit with its powers as plain digits and single spaces.
fn plain_spelling(written: &str) -> String {
    let plain: String = written
        .chars()
        .filter(|character| *character != '^')
        .map(|character| match character {
            '²' => '2',
            '³' => '3',
            '⁵' => '5',
            other => other,
        })
        .collect();
    plain.split_whitespace().collect::<Vec<_>>().join(" ")
}
