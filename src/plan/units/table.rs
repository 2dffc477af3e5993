//! The units that are known, with their exact values in metres and days.
//!
//! Definitions: the inch is 0.0254 m and the foot 0.3048 m exactly, the US
//! gallon 231 in³, the imperial gallon 4.54609 L; the year of "in/yr" is
//! 365.25 days. Source: NIST SP 811 (2008), appendix B, from memory; the
//! factors follow from the definitions. The length of the year is our choice.

use super::Dimension;

pub(super) const INCH: f64 = 0.0254;
pub(super) const FOOT: f64 = 0.3048;
pub(super) const FOOT_2: f64 = FOOT * FOOT;
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
pub(super) const YEAR: f64 = 365.25;
pub(super) const GPM: f64 = GALLON * MINUTES;

/// One unit: how it is written, and its value in metres, days and degrees.
#[derive(Debug)]
pub(super) struct Unit {
    /// The first spelling is the one that is shown.
    pub(super) spellings: &'static [&'static str],
    pub(super) si: f64,
}

const fn unit(spellings: &'static [&'static str], si: f64) -> Unit {
    Unit { spellings, si }
}

impl Unit {
    pub(super) fn name(&self) -> &'static str {
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

/// The units of a dimension.
pub(super) fn units_of(dimension: Dimension) -> &'static [Unit] {
    match dimension {
        Dimension::Length => &LENGTHS,
        Dimension::Rate => &RATES,
        Dimension::Conductivity | Dimension::Flux => &SPEEDS,
        Dimension::Transmissivity => &TRANSMISSIVITIES,
        Dimension::Time => &TIMES,
        Dimension::WellLoss => &WELL_LOSSES,
        Dimension::Angle => &ANGLES,
        Dimension::Slope => &SLOPES,
        Dimension::Share => &SHARES,
    }
}
