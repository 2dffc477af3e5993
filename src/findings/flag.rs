//! What a planner must look at: who, how much, against what, caused by whom,
//! and what would clear it.
//!
//! Order of severity: someone else's supply first, then water coming out of
//! the ground, then a well that runs dry, then places where the model itself
//! no longer holds, then heads less exact than asked, then wells that crowd
//! each other, then what could not be judged. Within one code the largest excess comes first, then the plan's
//! order.

use super::remedy::Remedy;

/// The kinds of flag, most severe first.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub enum FlagCode {
    /// A neighbour is drawn down further than it may be.
    NeighbourOverLimit,
    /// Injection lifts the level in a well above the ground.
    AboveGround,
    /// Pumping draws a well below its lowest level.
    LevelTooLow,
    /// The head falls below the aquifer's roof: it is no longer confined, and
    /// the transmissivity, and with it every result there, no longer holds.
    BelowRoof,
    /// The proven error of an aquifer's heads is larger than the plan accepts.
    AccuracyNotReached,
    /// Other wells cause more of a well's drawdown than the plan accepts.
    Interference,
    /// A neighbour has no limit to be judged against.
    NoLimitGiven,
}

impl FlagCode {
    /// The code as the outputs carry it.
    pub fn name(self) -> &'static str {
        match self {
            Self::NeighbourOverLimit => "neighbour-over-limit",
            Self::AboveGround => "above-ground",
            Self::LevelTooLow => "level-too-low",
            Self::BelowRoof => "below-roof",
            Self::AccuracyNotReached => "accuracy-not-reached",
            Self::Interference => "interference",
            Self::NoLimitGiven => "no-limit-given",
        }
    }

    /// Whether it says that a limit is broken, rather than that one is missing
    /// or that the result is less exact than asked.
    pub fn breaks_a_limit(self) -> bool {
        !matches!(self, Self::NoLimitGiven | Self::AccuracyNotReached)
    }
}

/// Whom a flag is about.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Who {
    /// A well, by its index in `Site::wells`.
    Well(usize),
    /// A neighbour, by its index in `Site::neighbours`.
    Neighbour(usize),
    /// An aquifer, by the lowest index of its wells in `Site::wells`.
    AquiferOf(usize),
    /// The aquifer within the map.
    Map,
}

/// What was measured, and against what; metres or a share from 0 to 1.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Measure {
    /// A drawdown against the allowed one, if there is one.
    Drawdown {
        /// The drawdown, metres.
        drawdown_m: f64,
        /// The allowed drawdown, metres.
        allowed_m: Option<f64>,
    },
    /// The level in a well against its lowest level.
    LowestLevel {
        /// The level in the well, metres.
        level_m: f64,
        /// The level it must not fall below, metres.
        lowest_m: f64,
    },
    /// The level in a well against the ground.
    Ground {
        /// The level in the well, metres.
        level_m: f64,
        /// Elevation of the ground, metres.
        ground_m: f64,
    },
    /// The head at a well against the aquifer's roof.
    RoofAtWell {
        /// The head in the aquifer at the well's rim, metres.
        rim_head_m: f64,
        /// The level in the well, metres: lower by the well loss.
        level_m: f64,
        /// Elevation of the roof, metres.
        roof_m: f64,
    },
    /// The head on the map against the aquifer's roof.
    RoofOnMap {
        /// Area of the map where the head is below the roof, m².
        area_m2: f64,
        /// The lowest head there, metres.
        lowest_m: f64,
        /// Elevation of the roof, metres.
        roof_m: f64,
    },
    /// A share of a drawdown against the accepted one.
    Share {
        /// Interference over the whole drawdown.
        share: f64,
        /// The accepted share.
        limit: f64,
        /// The interference, metres.
        interference_m: f64,
    },
    /// The proven error of a head against the one that the plan accepts.
    Accuracy {
        /// The proven bound on the error, metres.
        bound_m: f64,
        /// The error that the plan accepts, metres.
        accepted_m: f64,
        /// The edge, by its index in `Site::edges`, beside which the bound is
        /// largest; none where rounding alone makes it.
        hardest_edge: Option<usize>,
    },
}

impl Measure {
    /// How far the limit is exceeded, in its own unit; the drawdown where
    /// there is no limit.
    pub fn excess(&self) -> f64 {
        match *self {
            Self::Drawdown {
                drawdown_m,
                allowed_m,
            } => drawdown_m - allowed_m.unwrap_or(0.0),
            Self::LowestLevel { level_m, lowest_m } => lowest_m - level_m,
            Self::Ground { level_m, ground_m } => level_m - ground_m,
            Self::RoofAtWell {
                level_m, roof_m, ..
            } => roof_m - level_m,
            Self::RoofOnMap {
                lowest_m, roof_m, ..
            } => roof_m - lowest_m,
            Self::Share { share, limit, .. } => share - limit,
            Self::Accuracy {
                bound_m,
                accepted_m,
                ..
            } => bound_m - accepted_m,
        }
    }
}

/// The well that does most of it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Cause {
    /// The well, by its index in `Site::wells`.
    pub well: usize,
    /// The drawdown it causes there, metres; negative where it lifts the head.
    pub drawdown_m: f64,
}

/// One thing a planner must look at.
#[derive(Clone, Debug, PartialEq)]
pub struct Flag {
    /// Its kind.
    pub code: FlagCode,
    /// Whom it is about.
    pub who: Who,
    /// How much, against what.
    pub measure: Measure,
    /// The well that does most of it; none where no well takes part.
    pub cause: Option<Cause>,
    /// What would clear it; none where there is nothing to clear.
    pub remedy: Option<Remedy>,
}

/// Sorts flags by severity; see the module's header.
pub fn sort_by_severity(flags: &mut [Flag]) {
    // Stable: equals keep the plan's order.
    flags.sort_by(|a, b| {
        a.code
            .cmp(&b.code)
            .then_with(|| b.measure.excess().total_cmp(&a.measure.excess()))
    });
}
