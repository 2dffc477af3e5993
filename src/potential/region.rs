//! A region of the plane: its sides, what holds on them, and its corners.

use std::f64::consts::{PI, TAU};

use num_complex::Complex64;

use super::curve::Curve;

/// λ where fields go as r ln r, for one: close to it, but no whole number.
pub(super) const LOGARITHMIC: f64 = 0.98;

/// What holds on a side for a harmonic function u; n points out of the region.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Condition {
    /// u is given.
    Head,
    /// ∂u/∂n is given.
    Flux,
    /// u + `skin_m` ∂u/∂n is given, as behind a clogged bank.
    Clogged {
        /// Thickness of aquifer that resists as the skin does, metres, > 0.
        skin_m: f64,
    },
}

/// One side of a region.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Side {
    /// Where it is, the region to its left.
    pub curve: Curve,
    /// Whether a uniform flow passes through it, as at the end that a channel
    /// is given.
    pub(super) is_closing: bool,
    /// What holds on it.
    pub condition: Condition,
    /// Direction in which its curve leaves s = 0; from infinity towards the
    /// region on a half-line that comes in.
    pub(super) leaves: Complex64,
    /// Direction in which it arrives at s = 1.
    pub(super) arrives: Complex64,
}

/// The joint of a side's end with the side that follows it.
#[derive(Clone, Copy, Debug)]
pub(super) struct Joint {
    /// The side that follows, with the region to the left of both.
    pub next: usize,
    /// Interior angle, 0 to 2π.
    pub angle_rad: f64,
    /// How fast errors fall with the distance from the corner: as its power
    /// λ. Infinite where nothing is singular.
    pub exponent: f64,
}

/// A region whose sides form closed chains and chains that run to infinity.
#[derive(Clone, Debug)]
pub struct Region {
    sides: Vec<Side>,
    /// For each side the joint at its end (s = 1).
    joints: Vec<Joint>,
    /// For each side the side before it.
    before: Vec<usize>,
}

impl Side {
    /// A straight side.
    pub fn segment(from: Complex64, to: Complex64, condition: Condition) -> Self {
        Self::new(Curve::segment(from, to), to - from, to - from, condition)
    }

    /// A half-line that leaves a place for infinity.
    pub fn ray_out(
        from: Complex64,
        direction: Complex64,
        scale_m: f64,
        condition: Condition,
    ) -> Self {
        let curve = Curve::ray_out(from, direction, scale_m);
        Self::new(curve, direction, direction, condition)
    }

    /// A half-line that comes from infinity; `direction` points to infinity.
    pub fn ray_in(to: Complex64, direction: Complex64, scale_m: f64, condition: Condition) -> Self {
        let curve = Curve::ray_in(to, direction, scale_m);
        Self::new(curve, -direction, -direction, condition)
    }

    /// An arc of less than a full turn; counter-clockwise for a positive sweep.
    pub fn arc(
        centre: Complex64,
        radius_m: f64,
        start_rad: f64,
        sweep_rad: f64,
        condition: Condition,
    ) -> Self {
        let at =
            |share: f64| centre + Complex64::from_polar(radius_m, start_rad + share * sweep_rad);
        let heading = |share: f64| {
            Complex64::cis(start_rad + share * sweep_rad) * Complex64::I * sweep_rad.signum()
        };
        let curve = Curve::arc(at(0.0), at(0.5), at(1.0));
        Self::new(curve, heading(0.0), heading(1.0), condition)
    }

    fn new(curve: Curve, leaves: Complex64, arrives: Complex64, condition: Condition) -> Self {
        Self {
            curve,
            condition,
            is_closing: false,
            leaves,
            arrives,
        }
    }

    /// A straight side that a uniform flow passes through and nothing else.
    pub fn closing(from: Complex64, to: Complex64) -> Self {
        Self {
            is_closing: true,
            ..Self::segment(from, to, Condition::Flux)
        }
    }

    /// Whether it comes from infinity.
    pub(super) fn comes_in(&self) -> bool {
        self.curve.below(0.0) == Complex64::ZERO
    }

    /// Whether it goes to infinity.
    pub(super) fn goes_out(&self) -> bool {
        self.curve.below(1.0) == Complex64::ZERO
    }
}

impl Region {
    /// A region with the sides of each chain in order. A chain is closed, or
    /// its first side comes from infinity and its last goes there.
    pub fn new(chains: &[Vec<Side>]) -> Self {
        let sides: Vec<Side> = chains.iter().flatten().copied().collect();
        let mut joints = Vec::with_capacity(sides.len());
        let mut start = 0;
        for chain in chains {
            for position in 0..chain.len() {
                let index = start + position;
                let is_last = position + 1 == chain.len();
                let next = if is_last { start } else { index + 1 };
                joints.push(joint(&sides, index, next));
            }
            start += chain.len();
        }
        let mut before = vec![0; sides.len()];
        for (index, joint) in joints.iter().enumerate() {
            if let Some(slot) = before.get_mut(joint.next) {
                *slot = index;
            }
        }
        Self {
            sides,
            joints,
            before,
        }
    }

    /// The sides, chain after chain.
    pub fn sides(&self) -> &[Side] {
        &self.sides
    }

    /// Whether any side fixes the level, directly or through a skin.
    pub fn has_head(&self) -> bool {
        self.sides
            .iter()
            .any(|side| side.condition != Condition::Flux)
    }

    /// The joint at the end of a side.
    pub(super) fn joint(&self, side: usize) -> Option<&Joint> {
        self.joints.get(side)
    }

    /// The corners that a side does not touch.
    pub(super) fn other_corners(&self, side: usize) -> impl Iterator<Item = Complex64> + '_ {
        let own = [self.before(side), side];
        let joints = self.joints.iter().enumerate();
        let others = joints.filter(move |(number, _)| !own.contains(number));
        others.filter_map(|(number, joint)| {
            let side = self.sides.get(number)?;
            let is_corner = joint.exponent.is_finite() && !side.goes_out();
            is_corner.then(|| side.curve.at(1.0))
        })
    }

    /// The number of the joint at the start of a side, which is the side that
    /// ends there.
    pub(super) fn before(&self, side: usize) -> usize {
        self.before.get(side).copied().unwrap_or(side)
    }
}

/// The joint between a side and the next of its chain; a side that goes to
/// infinity is followed by the next one that comes from there.
fn joint(sides: &[Side], index: usize, next: usize) -> Joint {
    let smooth = Joint {
        next,
        angle_rad: PI,
        exponent: f64::INFINITY,
    };
    let Some(side) = sides.get(index) else {
        return smooth;
    };
    let (next, angle_rad) = if side.goes_out() {
        next_at_infinity(sides, side).unwrap_or((next, PI))
    } else {
        let follows = sides.get(next).map_or(side.arrives, |side| side.leaves);
        (next, PI - (follows / side.arrives).arg())
    };
    let other = sides
        .get(next)
        .map_or(side.condition, |next| next.condition);
    Joint {
        next,
        angle_rad,
        exponent: exponent(angle_rad, side.condition, other),
    }
}

/// The side that comes from infinity next, counter-clockwise, after one that
/// goes there, and the angle between them.
fn next_at_infinity(sides: &[Side], side: &Side) -> Option<(usize, f64)> {
    let turn = |other: &Side| {
        let angle = (-other.leaves / side.arrives).arg();
        angle.rem_euclid(TAU)
    };
    sides
        .iter()
        .enumerate()
        .filter(|(_, other)| other.comes_in())
        .map(|(index, other)| (index, turn(other)))
        .min_by(|one, other| one.1.total_cmp(&other.1))
}

/// λ of the layer's potential at a corner, seen from both of its sides. Close to
/// a corner a clogged side acts as one of flux; where skins differ, fields go as
/// r ln r beside.
fn exponent(angle_rad: f64, one: Condition, other: Condition) -> f64 {
    let wider = angle_rad.max(TAU - angle_rad);
    if one == other && (wider - PI).abs() < 1e-9 {
        return f64::INFINITY;
    }
    let is_head = |condition| condition == Condition::Head;
    let share = if is_head(one) != is_head(other) {
        0.5
    } else if one != other {
        LOGARITHMIC
    } else {
        1.0
    };
    share * PI / wider
}
