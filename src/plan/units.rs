//! The units that people write, with their exact values in metres and days.
//!
//! Definitions: the inch is 0.0254 m and the foot 0.3048 m exactly, the US
//! gallon 231 in³, the imperial gallon 4.54609 L; the year of "in/yr" is
//! 365.25 days. A bare number is in the plan's own unit (see [`UnitSystem`]);
//! a string such as "25 L/s" carries its own.
//! Source: NIST SP 811 (2008), appendix B, from memory; the factors follow
//! from the definitions above. The length of the year is our choice.

const INCH: f64 = 0.0254;
const FOOT: f64 = 0.3048;
const FOOT_2: f64 = FOOT * FOOT;
const FOOT_3: f64 = FOOT_2 * FOOT;
const FOOT_5: f64 = FOOT_2 * FOOT_3;
const SURVEY_FOOT: f64 = 1200.0 / 3937.0;
const MILE: f64 = 5280.0 * FOOT;
const GALLON: f64 = 0.003_785_411_784;
const IMPERIAL_GALLON: f64 = 0.004_546_09;
const ACRE_FOOT: f64 = 43_560.0 * FOOT_3;
const HOURS: f64 = 24.0;
const MINUTES: f64 = 1440.0;
const SECONDS: f64 = 86_400.0;
const YEAR: f64 = 365.25;
const GPM: f64 = GALLON * MINUTES;

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

/// One unit: how it is written, and its value in metres, days and degrees.
#[derive(Debug)]
struct Unit {
    /// The first spelling is the one that is shown.
    spellings: &'static [&'static str],
    si: f64,
}

const fn unit(spellings: &'static [&'static str], si: f64) -> Unit {
    Unit { spellings, si }
}

impl Unit {
    fn name(&self) -> &'static str {
        self.spellings.first().copied().unwrap_or("")
    }
}

static LENGTHS: [Unit; 8] = [
    unit(&["m", "metre", "metres", "meter", "meters"], 1.0),
    unit(&["cm"], 0.01),
    unit(&["mm"], 0.001),
    unit(&["km"], 1000.0),
    unit(&["ft", "foot", "feet"], FOOT),
    unit(&["in", "inch", "inches"], INCH),
    unit(&["mi", "mile", "miles"], MILE),
    unit(&["ftUS", "us-ft"], SURVEY_FOOT),
];

static RATES: [Unit; 14] = [
    unit(&["m3/d", "m3/day"], 1.0),
    unit(&["m3/h", "m3/hr"], HOURS),
    unit(&["m3/min"], MINUTES),
    unit(&["m3/s"], SECONDS),
    unit(&["L/s", "l/s", "lps"], 0.001 * SECONDS),
    unit(&["L/min", "l/min", "lpm"], 0.001 * MINUTES),
    unit(&["ML/d"], 1000.0),
    unit(&["gpm", "gal/min"], GPM),
    unit(&["gpd", "gal/d", "gal/day"], GALLON),
    unit(&["mgd", "Mgal/d"], 1e6 * GALLON),
    unit(&["ft3/s", "cfs"], FOOT_3 * SECONDS),
    unit(&["ft3/d", "cfd"], FOOT_3),
    unit(&["acre-ft/yr", "ac-ft/yr"], ACRE_FOOT / YEAR),
    unit(&["imp gal/min", "igpm"], IMPERIAL_GALLON * MINUTES),
];

static SPEEDS: [Unit; 15] = [
    unit(&["m/d", "m/day"], 1.0),
    unit(&["m/s"], SECONDS),
    unit(&["cm/s"], 0.01 * SECONDS),
    unit(&["cm/d"], 0.01),
    unit(&["mm/d"], 0.001),
    unit(&["mm/yr", "mm/a"], 0.001 / YEAR),
    unit(&["cm/yr", "cm/a"], 0.01 / YEAR),
    unit(&["m/yr", "m/a"], 1.0 / YEAR),
    unit(&["ft/d", "ft/day"], FOOT),
    unit(&["ft/s"], FOOT * SECONDS),
    unit(&["in/h", "in/hr"], INCH * HOURS),
    unit(&["in/d"], INCH),
    unit(&["in/yr"], INCH / YEAR),
    unit(&["ft/yr"], FOOT / YEAR),
    unit(&["gpd/ft2", "gal/d/ft2"], GALLON / FOOT_2),
];

static TRANSMISSIVITIES: [Unit; 6] = [
    unit(&["m2/d", "m2/day"], 1.0),
    unit(&["m2/s"], SECONDS),
    unit(&["cm2/s"], 1e-4 * SECONDS),
    unit(&["ft2/d", "ft2/day"], FOOT_2),
    unit(&["ft2/s"], FOOT_2 * SECONDS),
    unit(&["gpd/ft", "gal/d/ft"], GALLON / FOOT),
];

static TIMES: [Unit; 5] = [
    unit(&["d", "day", "days"], 1.0),
    unit(&["h", "hr", "hour", "hours"], 1.0 / HOURS),
    unit(&["min", "minute", "minutes"], 1.0 / MINUTES),
    unit(&["s", "second", "seconds"], 1.0 / SECONDS),
    unit(&["yr", "a", "year", "years"], YEAR),
];

static WELL_LOSSES: [Unit; 7] = [
    unit(&["d2/m5"], 1.0),
    unit(&["h2/m5"], 1.0 / (HOURS * HOURS)),
    unit(&["min2/m5"], 1.0 / (MINUTES * MINUTES)),
    unit(&["s2/m5"], 1.0 / (SECONDS * SECONDS)),
    unit(&["s2/ft5"], 1.0 / (SECONDS * SECONDS * FOOT_5)),
    unit(&["d2/ft5"], 1.0 / FOOT_5),
    unit(&["ft/gpm2"], FOOT / (GPM * GPM)),
];

static ANGLES: [Unit; 2] = [
    unit(&["deg", "°", "degrees"], 1.0),
    unit(&["rad"], 180.0 / std::f64::consts::PI),
];

static SLOPES: [Unit; 6] = [
    unit(&["m/m"], 1.0),
    unit(&["m/km"], 0.001),
    unit(&["ft/ft"], 1.0),
    unit(&["ft/mi"], 1.0 / 5280.0),
    unit(&["%"], 0.01),
    unit(&["‰"], 0.001),
];

static SHARES: [Unit; 1] = [unit(&["%"], 0.01)];

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
    fn units(self) -> &'static [Unit] {
        match self {
            Self::Length => &LENGTHS,
            Self::Rate => &RATES,
            Self::Conductivity | Self::Flux => &SPEEDS,
            Self::Transmissivity => &TRANSMISSIVITIES,
            Self::Time => &TIMES,
            Self::WellLoss => &WELL_LOSSES,
            Self::Angle => &ANGLES,
            Self::Slope => &SLOPES,
            Self::Share => &SHARES,
        }
    }

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
        let names: Vec<_> = self.units().iter().map(Unit::name).collect();
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
    let spelling = plain_spelling(written);
    if let Some(found) = find(&spelling, wanted) {
        return Ok(number * found.si);
    }
    let other = DIMENSIONS
        .into_iter()
        .find(|dimension| find(&spelling, *dimension).is_some());
    Err(match other {
        Some(dimension) => UnitError::WrongDimension {
            unit: written.to_owned(),
            measures: dimension.name(),
            wanted: wanted.name(),
        },
        None => UnitError::Unknown {
            unit: written.to_owned(),
            wanted: wanted.name(),
        },
    })
}

fn find(spelling: &str, dimension: Dimension) -> Option<&'static Unit> {
    let units = dimension.units();
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
