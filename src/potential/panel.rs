//! One panel: a piece of a side, and the places where its condition is asked.
//!
//! At a corner of angle α the density behaves as r^(λ − 1) with λ = π/α, of the
//! interior or the exterior angle, or half of that where head meets flux. A
//! panel beside a corner therefore runs through u = wᵐ, u its side's parameter
//! counted from the corner and m a whole number: r^(λ − 1) dr becomes
//! w^(mλ − 1) dw, a polynomial where mλ is whole, as at right angles, and
//! smooth enough elsewhere for a few panels graded in w.

use num_complex::Complex64;

use super::curve::Curve;
use super::region::{Condition, Region};

/// Panels are not cut smaller than this share of their side, in w.
pub(super) const SMALLEST: f64 = 1e-14;

/// The part w = `middle` ± `half` of a side.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Panel {
    pub side: usize,
    /// Its side, run through from the corner that u is counted from.
    pub curve: Curve,
    /// Whether that is the side's end, so that the region lies to the right.
    pub is_reversed: bool,
    /// The number of the joint at u = 0.
    pub corner: usize,
    /// m of u = wᵐ.
    pub power: u32,
    pub middle: f64,
    pub half: f64,
}

/// Where a panel is, and how long.
#[derive(Clone, Copy, Debug)]
pub(super) struct Reach {
    ends: [Complex64; 2],
    middle: Complex64,
    /// Half its length; infinite on one that reaches infinity.
    half_m: f64,
}

impl Reach {
    /// Of a panel.
    pub fn of(panel: &Panel) -> Self {
        Self::through([-1.0, 0.0, 1.0].map(|t| panel.curve.at(panel.u(t))))
    }

    /// Of a whole side.
    pub fn of_all(panels: &[Panel]) -> Self {
        let places = panels
            .first()
            .map(|panel| [0.0, 0.5, 1.0].map(|u| panel.curve.at(u)));
        Self::through(places.unwrap_or_default())
    }

    fn through([from, middle, to]: [Complex64; 3]) -> Self {
        let half_m = 0.5 * (to - from).norm();
        Self {
            ends: [from, to],
            middle,
            half_m: if half_m.is_nan() {
                f64::INFINITY
            } else {
                half_m
            },
        }
    }

    /// The slope times half a length that a unit of water from another panel makes
    /// on this one, about: half a length over the distance.
    pub fn sees(&self, other: &Self) -> f64 {
        let gaps = self.ends.iter().map(|own| (own - other.middle).norm());
        let gap_m = gaps
            .filter(|gap| gap.is_finite())
            .fold(f64::INFINITY, f64::min);
        if self.half_m.is_finite() {
            self.half_m / (2.0 * self.half_m + gap_m)
        } else {
            0.5
        }
    }
}

/// A place on a panel where a condition is asked.
#[derive(Clone, Copy, Debug)]
pub(super) struct Place {
    pub panel: usize,
    pub side: usize,
    /// Whether u is counted from the end of the side.
    pub is_reversed: bool,
    /// Its parameter, counted from one end of the side.
    pub u: f64,
    /// t on its panel.
    pub t: f64,
    /// dw/dt.
    pub half: f64,
    pub x: Complex64,
    /// A corner nearby, and x − corner to full precision; none at infinity.
    pub corner: Option<(usize, Complex64)>,
    /// Outward normal times |dx/dt|, t running from −1 to 1 on the panel.
    pub outward: Complex64,
    /// `outward` slope of a unit charge's term ln|a − c x| on its own side.
    pub bend: f64,
    pub condition: Condition,
}

impl Place {
    /// |dx/dt| over the skin: what a head across the skin lets through.
    pub fn conductance(&self, skin_m: f64) -> f64 {
        self.outward.norm() / skin_m
    }

    /// Its parameter on its side, 0 to 1.
    pub fn s(&self) -> f64 {
        if self.is_reversed {
            1.0 - self.u
        } else {
            self.u
        }
    }

    /// Its parameter counted from the start or the end of its side.
    pub fn counted(&self, from_end: bool) -> f64 {
        if self.is_reversed == from_end {
            self.u
        } else {
            1.0 - self.u
        }
    }

    /// Whether its residual counts as one in head: on head sides, and behind a
    /// skin that is thin for its panel, where slope and head together are
    /// divided by the skin's conductance.
    pub fn counts_head(&self) -> bool {
        match self.condition {
            Condition::Head => true,
            Condition::Flux => false,
            Condition::Clogged { skin_m } => self.conductance(skin_m) >= 1.0,
        }
    }

    /// The complex parameter of this place on a curve that starts at a corner.
    pub fn parameter_on(&self, curve: &Curve, corner: usize) -> Complex64 {
        match self.corner {
            Some((own, offset)) if own == corner => curve.parameter_of_offset(offset),
            _ => curve.parameter(self.x),
        }
    }
}

impl Panel {
    /// A whole side, in u = w.
    pub fn whole(region: &Region, side: usize, curve: Curve) -> Self {
        Self {
            corner: region.before(side),
            ..Self::of_curve(side, curve)
        }
    }

    /// The same where its corner does not matter.
    pub fn of_curve(side: usize, curve: Curve) -> Self {
        Self {
            side,
            curve,
            is_reversed: false,
            corner: usize::MAX,
            power: 1,
            middle: 0.5,
            half: 0.5,
        }
    }

    /// The part of it, in w, between two bounds.
    pub fn part(&self, from: f64, to: f64) -> Self {
        Self {
            middle: 0.5 * (from + to),
            half: 0.5 * (to - from),
            ..*self
        }
    }

    pub fn halves(&self) -> [Self; 2] {
        [
            self.part(self.from(), self.middle),
            self.part(self.middle, self.to()),
        ]
    }

    pub fn from(&self) -> f64 {
        self.middle - self.half
    }

    pub fn to(&self) -> f64 {
        self.middle + self.half
    }

    /// Whether it reaches the corner that u is counted from.
    pub fn is_first(&self) -> bool {
        self.from() <= 0.25 * SMALLEST
    }

    /// Whether it reaches the other corner of its side.
    pub fn is_last(&self) -> bool {
        self.power == 1 && self.to() >= 1.0 - 0.25 * SMALLEST
    }

    /// Whether it reaches the end of its side that u is not counted from.
    pub fn reaches_end(&self) -> bool {
        self.to() >= 1.0 - 0.25 * SMALLEST
    }

    /// Its half beside its corner, and the other one with u = w.
    pub fn unbent_halves(&self) -> (Self, Self) {
        let [near, far] = self.halves();
        let from = far.u(-1.0);
        let far = Self { power: 1, ..far }.part(from, 1.0);
        (near, far)
    }

    /// The same place counted from the other end of the side; `power` is 1.
    pub fn turned(&self, region: &Region) -> Self {
        Self {
            curve: self.curve.reversed(),
            is_reversed: !self.is_reversed,
            corner: if self.is_reversed {
                region.before(self.side)
            } else {
                self.side
            },
            middle: 1.0 - self.middle,
            ..*self
        }
    }

    /// The same panel in u = wᵐ, from its corner on.
    pub fn with_power(&self, power: u32) -> Self {
        let to = self.to().powf(f64::from(power).recip());
        Self {
            power,
            ..self.part(0.0, to)
        }
    }

    /// w at t.
    pub fn w(&self, t: f64) -> f64 {
        // Written from the corner, so that a first panel loses no digits there.
        self.from().max(0.0) + self.half * (1.0 + t)
    }

    /// u at t.
    pub fn u(&self, t: f64) -> f64 {
        self.w(t).powi(self.power.cast_signed())
    }

    /// du/dt at t.
    pub fn u_slope(&self, t: f64) -> f64 {
        let below = self.power.cast_signed() - 1;
        f64::from(self.power) * self.w(t).powi(below) * self.half
    }

    /// The distances in u from the start and from the end of its side, at t.
    pub fn ends_at(&self, t: f64) -> [f64; 2] {
        let u = self.u(t);
        if self.is_reversed {
            [1.0 - u, u]
        } else {
            [u, 1.0 - u]
        }
    }

    /// t at u, beyond the panel too.
    pub fn t(&self, u: f64) -> f64 {
        let w = u.max(0.0).powf(f64::from(self.power).recip());
        (w - self.middle) / self.half
    }

    /// t of the root w = u^(1/m) nearest to the panel.
    pub fn local(&self, u: Complex64) -> Complex64 {
        (self.root(u) - self.middle) / self.half
    }

    /// The principal u^(1/m).
    pub fn root(&self, u: Complex64) -> Complex64 {
        match self.power {
            1 => u,
            power if u.im == 0.0 && u.re >= 0.0 => {
                Complex64::new(u.re.powf(f64::from(power).recip()), 0.0)
            }
            power => u.powf(f64::from(power).recip()),
        }
    }

    pub fn place(&self, index: usize, condition: Condition, t: f64) -> Place {
        let u = self.u(t);
        let u_slope = self.u_slope(t);
        // Turned left or right from the direction in which u grows.
        let right = if self.is_reversed { 1.0 } else { -1.0 } * u_slope;
        let below = self.curve.below(u);
        let offset = self.curve.offset(u);
        let is_finite = offset.norm().is_finite();
        Place {
            panel: index,
            side: self.side,
            is_reversed: self.is_reversed,
            u,
            t,
            half: self.half,
            x: self.curve.at(u),
            corner: Some((self.corner, offset)).filter(|_| is_finite),
            outward: Complex64::I * self.curve.derivative(u) * right,
            bend: right * (self.curve.c() / below).im,
            condition,
        }
    }
}
