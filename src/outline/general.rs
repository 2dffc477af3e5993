//! The sides of an aquifer that no closed form fits.

use std::f64::consts::TAU;
use std::ops::Range;

use num_complex::Complex64;

use super::shape::Kind;

/// Sides of an aquifer in the canonical frame: stretched to isotropy, the
/// origin at the middle of its wells, not turned. The aquifer lies to the LEFT
/// of every side. No side has it on both its banks.
#[derive(Clone, Debug, PartialEq)]
pub struct Boundary {
    /// All sides, those of one chain together and in order along it.
    pub sides: Vec<BoundarySide>,
    /// The chains. The open ones come first: each is followed
    /// counterclockwise around infinity by the next, the last by the first.
    pub chains: Vec<BoundaryChain>,
}

/// Consecutive sides that join end to end.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct BoundaryChain {
    /// Which of the boundary's sides.
    pub sides: Range<usize>,
    /// Whether the last side ends where the first begins. An open chain comes
    /// from infinity (`RayIn`) and goes to infinity (`RayOut`).
    pub closed: bool,
}

/// One straight or round side.
#[derive(Clone, Debug, PartialEq)]
pub struct BoundarySide {
    /// Where it runs.
    pub curve: Curve,
    /// Index in `Site::edges`.
    pub edge: usize,
    /// What it does to the head.
    pub condition: Condition,
    /// Stage at its beginning and end, metres, linear between them; zeros on
    /// a barrier. On a ray both are equal: beyond a river's drawn end the
    /// stage of its last vertex is held.
    pub stage_m: [f64; 2],
}

/// What a side does to the head.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Condition {
    /// The head is the stage.
    Head,
    /// ∂h/∂n = 0.
    NoFlow,
    /// ∂h/∂n + (h − stage)/`skin_m` = 0, n outward, in canonical metres.
    Clogged {
        /// Length of aquifer that resists as the clogged bank does, > 0.
        skin_m: f64,
    },
}

impl Condition {
    /// A river, clogged or not, fixes the head.
    pub fn kind(self) -> Kind {
        match self {
            Self::Head | Self::Clogged { .. } => Kind::FixedHead,
            Self::NoFlow => Kind::NoFlow,
        }
    }
}

/// Where a side runs, in canonical metres.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Curve {
    /// A straight side between two places.
    Segment {
        /// Where it begins.
        from: Complex64,
        /// Where it ends.
        to: Complex64,
    },
    /// A half-line that comes from infinity.
    RayIn {
        /// Where it ends.
        to: Complex64,
        /// Unit number from `to` toward infinity.
        from_direction: Complex64,
    },
    /// A half-line that goes to infinity.
    RayOut {
        /// Where it begins.
        from: Complex64,
        /// Unit number toward infinity.
        direction: Complex64,
    },
    /// Part of a circle; all of it where `sweep_rad` is ±2π.
    Arc {
        /// Centre of the circle.
        centre: Complex64,
        /// Radius, > 0.
        radius: f64,
        /// Angle at which it begins.
        start_rad: f64,
        /// Angle that it sweeps, positive counterclockwise.
        sweep_rad: f64,
    },
}

impl Curve {
    /// The positions along it: the distance from its beginning, on a `RayIn`
    /// the negative distance from its end, on an arc the angle swept.
    pub fn along(&self) -> Range<f64> {
        match *self {
            Self::Segment { from, to } => 0.0..(to - from).norm(),
            Self::RayIn { .. } => f64::NEG_INFINITY..0.0,
            Self::RayOut { .. } => 0.0..f64::INFINITY,
            Self::Arc { sweep_rad, .. } => 0.0..sweep_rad.abs(),
        }
    }

    /// The place at a position along it.
    pub fn at(&self, along: f64) -> Complex64 {
        match *self {
            Self::Segment { from, .. } => from + self.heading(along) * along,
            Self::RayIn { to, from_direction } => to - from_direction * along,
            Self::RayOut { from, direction } => from + direction * along,
            Self::Arc {
                centre,
                radius,
                start_rad,
                sweep_rad,
            } => centre + Complex64::from_polar(radius, start_rad + along.copysign(sweep_rad)),
        }
    }

    /// Unit number along it at a position; the aquifer lies to its left.
    pub fn heading(&self, along: f64) -> Complex64 {
        match *self {
            Self::Segment { from, to } => (to - from) / (to - from).norm(),
            Self::RayIn { from_direction, .. } => -from_direction,
            Self::RayOut { direction, .. } => direction,
            Self::Arc {
                start_rad,
                sweep_rad,
                ..
            } => {
                let outward = Complex64::cis(start_rad + along.copysign(sweep_rad));
                outward * Complex64::I * sweep_rad.signum()
            }
        }
    }

    /// Where it begins, unless at infinity.
    pub fn from(&self) -> Option<Complex64> {
        match *self {
            Self::Segment { from, .. } | Self::RayOut { from, .. } => Some(from),
            Self::RayIn { .. } => None,
            Self::Arc { .. } => Some(self.at(0.0)),
        }
    }

    /// Where it ends, unless at infinity. A whole circle ends where it begins,
    /// to the last bit.
    pub fn to(&self) -> Option<Complex64> {
        match *self {
            Self::Segment { to, .. } | Self::RayIn { to, .. } => Some(to),
            Self::RayOut { .. } => None,
            Self::Arc { sweep_rad, .. } if sweep_rad.abs() == TAU => Some(self.at(0.0)),
            Self::Arc { sweep_rad, .. } => Some(self.at(sweep_rad.abs())),
        }
    }
}

impl Boundary {
    /// The kinds of the sides, in order.
    pub fn kinds(&self) -> Vec<Kind> {
        let kinds = self.sides.iter().map(|side| side.condition.kind());
        kinds.collect()
    }

    /// The sides of a chain.
    pub fn sides_of(&self, chain: &BoundaryChain) -> &[BoundarySide] {
        self.sides.get(chain.sides.clone()).unwrap_or_default()
    }

    /// Whether the aquifer is of finite extent: no chain is open, and one
    /// runs counterclockwise around it.
    pub fn is_bounded(&self) -> bool {
        self.chains.iter().all(|chain| chain.closed)
            && self
                .chains
                .iter()
                .any(|chain| doubled_area(self.sides_of(chain)) > 0.0)
    }

    /// The open chains, in order around infinity.
    pub fn open_chains(&self) -> impl Iterator<Item = &BoundaryChain> {
        self.chains.iter().filter(|chain| !chain.closed)
    }
}

/// Where the aquifer goes on to infinity: between a half-line that goes out and
/// the next that comes in.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Opening {
    /// The side that goes out.
    pub out: usize,
    /// The side that comes in next, counterclockwise.
    pub back: usize,
    /// Their distance where they run side by side; none where they open by
    /// an angle.
    pub width_m: Option<f64>,
}

/// Half-lines whose directions differ by less run side by side; those that
/// count as parallel were made so.
const PARALLEL: f64 = 1e-9;

impl Boundary {
    /// Where the aquifer goes on to infinity, in order around it.
    pub fn openings(&self) -> Vec<Opening> {
        let open: Vec<_> = self.open_chains().collect();
        let next = open.iter().cycle().skip(1);
        open.iter()
            .zip(next)
            .filter_map(|(chain, next)| self.opening(chain.sides.clone().last()?, next.sides.start))
            .collect()
    }

    fn opening(&self, out: usize, back: usize) -> Option<Opening> {
        let (one, other) = (self.sides.get(out)?.curve, self.sides.get(back)?.curve);
        let (
            Curve::RayOut { from, direction },
            Curve::RayIn {
                to, from_direction, ..
            },
        ) = (one, other)
        else {
            return None;
        };
        let width_m = (direction.conj() * (to - from)).im;
        let is_parallel = (direction - from_direction).norm() < PARALLEL && width_m > 0.0;
        Some(Opening {
            out,
            back,
            width_m: is_parallel.then_some(width_m),
        })
    }
}

/// Twice the area that closed sides run around, negative where clockwise.
fn doubled_area(sides: &[BoundarySide]) -> f64 {
    let Some(origin) = sides.first().and_then(|side| side.curve.from()) else {
        return 0.0;
    };
    let of_side = |side: &BoundarySide| {
        let chord = match (side.curve.from(), side.curve.to()) {
            (Some(from), Some(to)) => ((from - origin).conj() * (to - origin)).im,
            _ => 0.0,
        };
        let bulge = match side.curve {
            Curve::Arc {
                radius, sweep_rad, ..
            } => radius * radius * (sweep_rad - sweep_rad.sin()),
            _ => 0.0,
        };
        chord + bulge
    };
    sides.iter().map(of_side).sum()
}
