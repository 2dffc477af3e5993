//! Panels: pieces of the sides, graded into corners, with the places where
//! the conditions are asked.
//!
//! At a corner of angle α the density behaves as r^(λ − 1) with λ = π/α, of the
//! interior or the exterior angle, or half of that where head meets flux. A
//! panel beside a corner therefore runs through u = wᵐ, u its side's parameter
//! counted from the corner and m a whole number: r^(λ − 1) dr becomes
//! w^(mλ − 1) dw, a polynomial where mλ is whole, as at right angles, and
//! smooth enough elsewhere for a few panels graded in w.

use num_complex::Complex64;

use super::curve::Curve;
use super::legendre::{Rule, ellipse};
use super::region::{Condition, Region};

/// A panel that touches a corner gives it this share of itself when it is cut.
const CORNER_SHARE: f64 = 0.25;

/// A pole is kept at least this far, as an ellipse, from every panel.
const POLE_ELLIPSE: f64 = 2.2;

/// Panels are not cut smaller than this share of their side, in w.
const SMALLEST: f64 = 1e-14;

/// Corners of a smaller λ are cut from the start.
const STRONG: f64 = 0.85;

/// A smooth panel that misses its aim by more is cut in four.
const QUARTERS: f64 = 100.0;

/// Largest m.
const HIGHEST_POWER: u32 = 8;

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
    /// Half its length; infinite on one that reaches infinity.
    half_m: f64,
}

impl Reach {
    /// What a unit of water from another panel at most makes of slope on this one,
    /// about: the inverse of their distance in lengths of this panel.
    pub fn sees(&self, other: &Self) -> f64 {
        let pairs = self.ends.iter().flat_map(|own| {
            let gaps = other.ends.iter().map(move |end| (own - end).norm());
            gaps.filter(|gap| gap.is_finite())
        });
        let gap_m = pairs.fold(f64::INFINITY, f64::min);
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
    fn whole(region: &Region, side: usize, curve: Curve) -> Self {
        Self {
            side,
            curve,
            is_reversed: false,
            corner: region.before(side),
            power: 1,
            middle: 0.5,
            half: 0.5,
        }
    }

    /// The part of it, in w, between two bounds.
    fn part(&self, from: f64, to: f64) -> Self {
        Self {
            middle: 0.5 * (from + to),
            half: 0.5 * (to - from),
            ..*self
        }
    }

    fn halves(&self) -> [Self; 2] {
        [
            self.part(self.from(), self.middle),
            self.part(self.middle, self.to()),
        ]
    }

    fn from(&self) -> f64 {
        self.middle - self.half
    }

    fn to(&self) -> f64 {
        self.middle + self.half
    }

    /// Whether it reaches the corner that u is counted from.
    fn is_first(&self) -> bool {
        self.from() <= 0.25 * SMALLEST
    }

    /// Whether it reaches the other corner of its side.
    fn is_last(&self) -> bool {
        self.power == 1 && self.to() >= 1.0 - 0.25 * SMALLEST
    }

    /// The same place counted from the other end of the side; `power` is 1.
    fn turned(&self, region: &Region) -> Self {
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
    fn with_power(&self, power: u32) -> Self {
        let to = self.to().powf(f64::from(power).recip());
        Self {
            power,
            ..self.part(0.0, to)
        }
    }

    /// w at t.
    fn w(&self, t: f64) -> f64 {
        // Written from the corner, so that a first panel loses no digits there.
        self.from().max(0.0) + self.half * (1.0 + t)
    }

    /// u at t.
    pub fn u(&self, t: f64) -> f64 {
        self.w(t).powi(self.power.cast_signed())
    }

    /// du/dt at t.
    fn u_slope(&self, t: f64) -> f64 {
        let below = self.power.cast_signed() - 1;
        f64::from(self.power) * self.w(t).powi(below) * self.half
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

    fn place(&self, index: usize, condition: Condition, t: f64) -> Place {
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
            x: self.curve.at(u),
            corner: Some((self.corner, offset)).filter(|_| is_finite),
            outward: Complex64::I * self.curve.derivative(u) * right,
            bend: right * (self.curve.c() / below).im,
            condition,
        }
    }
}

/// The panels of a region, side after side.
#[derive(Clone, Debug)]
pub(super) struct Mesh {
    pub panels: Vec<Panel>,
    pub rule: Rule,
}

impl Mesh {
    /// One panel a side, cut until every pole is well off all of them, and
    /// where strong corners are known to ask for it.
    pub fn new(region: &Region, poles: &[Complex64], order: usize) -> Self {
        let mut panels = Vec::new();
        for (index, side) in region.sides().iter().enumerate() {
            let whole = Panel::whole(region, index, side.curve);
            let mut uncut = Vec::new();
            cut_near_poles(whole, poles, &mut uncut);
            for panel in uncut {
                if has_strong_corner(region, &panel) {
                    cut(region, panel, 1.0, &mut panels);
                } else {
                    panels.push(panel);
                }
            }
        }
        Self {
            panels,
            rule: Rule::new(order),
        }
    }

    /// Number of unknown densities.
    pub fn unknowns(&self) -> usize {
        self.panels.len() * self.rule.order()
    }

    /// Where each panel is.
    pub fn reaches(&self) -> Vec<Reach> {
        let reach = |panel: &Panel| {
            let ends = [-1.0, 1.0].map(|t| panel.curve.at(panel.u(t)));
            let half_m = 0.5 * (ends[1] - ends[0]).norm();
            Reach {
                ends,
                half_m: if half_m.is_nan() { f64::INFINITY } else { half_m },
            }
        };
        self.panels.iter().map(reach).collect()
    }

    /// The nodes, panel after panel.
    pub fn nodes(&self, region: &Region) -> Vec<Place> {
        self.places(region, &self.rule.nodes)
    }

    /// The places between the nodes, panel after panel.
    pub fn checks(&self, region: &Region) -> Vec<Place> {
        self.places(region, &self.rule.checks)
    }

    fn places(&self, region: &Region, at: &[f64]) -> Vec<Place> {
        let panels = self.panels.iter().enumerate();
        panels
            .flat_map(|(index, panel)| {
                let condition = region
                    .sides()
                    .get(panel.side)
                    .map_or(Condition::Head, |side| side.condition);
                at.iter().map(move |&t| panel.place(index, condition, t))
            })
            .collect()
    }

    /// A finer mesh: each panel whose residual exceeds its aim by a factor is
    /// cut as often as that factor asks for.
    pub fn refined(&self, region: &Region, excess: &[f64]) -> Self {
        let mut panels = Vec::with_capacity(2 * self.panels.len());
        for (panel, &excess) in self.panels.iter().zip(excess) {
            if excess > 1.0 && panel.half > SMALLEST {
                cut(region, *panel, excess, &mut panels);
            } else {
                panels.push(*panel);
            }
        }
        Self {
            panels,
            rule: self.rule.clone(),
        }
    }
}

/// Cuts a panel where it is singular, or in two.
fn cut(region: &Region, panel: Panel, excess: f64, panels: &mut Vec<Panel>) {
    let turned = panel.turned(region);
    match exponents(region, &panel) {
        (None, None) => halve(panel, excess, panels),
        (Some(first), None) if panel.power == 1 => {
            bend(panel, first, excess, panels);
        }
        (Some(first), None) if is_whole(first, panel.power) => halve(panel, excess, panels),
        (Some(first), None) => grade(panel, levels(excess, first, panel.power), panels),
        (None, Some(last)) => bend(turned, last, excess, panels),
        (Some(first), Some(last)) => {
            let [near, _] = panel.halves();
            let [far, _] = turned.halves();
            bend(near, first, excess, panels);
            bend(far, last, excess, panels);
        }
    }
}

/// Lets a panel run through wᵐ from its corner on, and cuts it where it misses
/// its aim by more than that gains.
fn bend(panel: Panel, exponent: f64, excess: f64, panels: &mut Vec<Panel>) {
    let bent = panel.with_power(power_for(exponent));
    if excess <= QUARTERS {
        panels.push(bent);
    } else if is_whole(exponent, bent.power) {
        panels.extend(bent.halves());
    } else {
        grade(
            bent,
            levels(excess / QUARTERS, exponent, bent.power),
            panels,
        );
    }
}

/// λ of the corners that a panel touches, first and last, where singular.
fn exponents(region: &Region, panel: &Panel) -> (Option<f64>, Option<f64>) {
    let exponent = |corner: usize, touches: bool| {
        let joint = region.joint(corner).filter(|_| touches)?;
        Some(joint.exponent).filter(|exponent| exponent.is_finite())
    };
    let end = panel.turned(region).corner;
    (
        exponent(panel.corner, panel.is_first()),
        exponent(end, panel.is_last()),
    )
}

/// Whether a panel touches a corner at which its density is far from smooth.
fn has_strong_corner(region: &Region, panel: &Panel) -> bool {
    let (first, last) = exponents(region, panel);
    let is_strong = |exponent: Option<f64>| exponent.is_some_and(|exponent| exponent < STRONG);
    is_strong(first) || is_strong(last)
}

/// Cuts a smooth panel in two, or in four where it misses its aim by much.
fn halve(panel: Panel, excess: f64, panels: &mut Vec<Panel>) {
    for half in panel.halves() {
        if excess > QUARTERS {
            panels.extend(half.halves());
        } else {
            panels.push(half);
        }
    }
}

/// m for a corner's λ: the least that makes mλ whole, or else at least 2.
fn power_for(exponent: f64) -> u32 {
    (2..=HIGHEST_POWER)
        .find(|&power| is_whole(exponent, power))
        .unwrap_or_else(|| ((2.0 / exponent).ceil() as u32).clamp(3, HIGHEST_POWER))
}

/// Whether the density is smooth in w: mλ is a whole number.
fn is_whole(exponent: f64, power: u32) -> bool {
    let product = f64::from(power) * exponent;
    product > 0.5 && (product - product.round()).abs() < 1e-9
}

/// How often a panel at a corner is to be cut so that its residual, which
/// falls as the power mλ of its size, loses a factor.
fn levels(excess: f64, exponent: f64, power: u32) -> usize {
    let gain = -exponent * f64::from(power) * CORNER_SHARE.ln();
    (excess.ln() / gain).ceil().clamp(1.0, 8.0) as usize
}

/// Cuts a panel geometrically into its corner.
fn grade(panel: Panel, levels: usize, panels: &mut Vec<Panel>) {
    let mut rest = panel;
    for _ in 0..levels {
        if rest.half < SMALLEST {
            break;
        }
        let at = rest.to() * CORNER_SHARE;
        panels.push(rest.part(at, rest.to()));
        rest = rest.part(0.0, at);
    }
    panels.push(rest);
}

fn cut_near_poles(panel: Panel, poles: &[Complex64], panels: &mut Vec<Panel>) {
    let is_near = |pole: &Complex64| {
        let u = panel.curve.parameter(*pole);
        ellipse(panel.local(u)) < POLE_ELLIPSE
    };
    if panel.half > SMALLEST && poles.iter().any(is_near) {
        for half in panel.halves() {
            cut_near_poles(half, poles, panels);
        }
    } else {
        panels.push(panel);
    }
}
