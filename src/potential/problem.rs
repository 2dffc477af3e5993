//! What is asked of a harmonic function, and the parts of it that are known.
//!
//! A problem's solution is `known(x)` + C + the potential of the panels. Known
//! are the logarithms of its poles, a uniform flow, the bowl of an areal source
//! and the tapers of its jumps; the panels make up what the sides still ask for.

use num_complex::Complex64;

use super::kernel::of_pole;
use super::mesh::Place;
use super::region::{Condition, Region};
use super::taper::Taper;

/// A function u to be found: harmonic but for its poles and its areal source.
#[derive(Clone, Debug, Default)]
pub struct Problem {
    /// Poles, each with its strength: u ~ −strength/(2π) ln|x − pole|.
    pub poles: Vec<(Complex64, f64)>,
    /// For each side the head at its start and at its end, linear in between
    /// (constant on half-lines and arcs); empty where all are zero. On a flux
    /// side it is not read.
    pub heads_m: Vec<[f64; 2]>,
    /// ∂u/∂x + i ∂u/∂y of a flow that is uniform far away. It must run along
    /// flux half-lines and square to the others.
    pub flow: Complex64,
    /// −∇²u, 1/m: recharge over transmissivity.
    pub source_per_m: f64,
    /// What its error counts in the bound of the whole; 1 where it is one of
    /// the parts of a sum, 0 where it is not to steer the refinement.
    pub weight: f64,
}

/// A problem on its region.
#[derive(Clone, Debug)]
pub(super) struct Posed {
    problem: Problem,
    tapers: Vec<Taper>,
}

impl Posed {
    pub fn new(region: &Region, problem: Problem) -> Self {
        let heads = |side: usize| problem.heads_m.get(side).copied().unwrap_or([0.0; 2]);
        let is_head = |side: usize| {
            let side = region.sides().get(side);
            side.is_some_and(|side| side.condition == Condition::Head)
        };
        let mut tapers = Vec::new();
        for index in 0..region.sides().len() {
            let Some(joint) = region.joint(index).filter(|_| is_head(index)) else {
                continue;
            };
            let jump_m = heads(joint.next)[0] - heads(index)[1];
            if let Some(next) = region.sides().get(joint.next)
                && is_head(joint.next)
                && jump_m != 0.0
            {
                let taper = Taper::new(joint.next, next.curve, index, jump_m, joint.angle_rad);
                tapers.push(taper);
            }
        }
        Self { problem, tapers }
    }

    pub fn poles(&self) -> &[(Complex64, f64)] {
        &self.problem.poles
    }

    pub fn weight(&self) -> f64 {
        self.problem.weight
    }

    /// The sum of its poles' strengths.
    pub fn charge(&self) -> f64 {
        self.problem.poles.iter().map(|(_, strength)| strength).sum()
    }

    /// ∂/∂x − i ∂/∂y of the known part.
    pub fn derivative(&self, x: Complex64) -> Complex64 {
        let tapers = self.tapers.iter().map(|taper| taper.derivative(x));
        let poles = self.problem.poles.iter();
        let poles = poles.map(|(pole, strength)| of_pole(x, *pole).1 * *strength);
        self.smooth_derivative(x) + tapers.sum::<Complex64>() + poles.sum::<Complex64>()
    }

    /// The known part but for the poles.
    pub fn value_without_poles(&self, x: Complex64) -> f64 {
        self.smooth_value(x) + self.taper_values(x)
    }

    /// What the panels and C must bring about at a place of a side, in the
    /// measure of its row: head, outward slope, or slope and head together.
    pub fn asked(&self, region: &Region, place: &Place) -> f64 {
        match place.condition {
            Condition::Head => self.head(place) - self.known_head(region, place),
            Condition::Flux => -self.known_slope(region, place),
            Condition::Clogged { skin_m } => {
                let conductance = place.conductance(skin_m);
                let missing = self.head(place) - self.known_head(region, place);
                conductance * missing - self.known_slope(region, place)
            }
        }
    }

    /// The head given at a place of a side.
    fn head(&self, place: &Place) -> f64 {
        let heads = self.problem.heads_m.get(place.side);
        heads.map_or(0.0, |[from, to]| from + place.s() * (to - from))
    }

    fn known_head(&self, region: &Region, place: &Place) -> f64 {
        let tapers = self.tapers.iter().map(|taper| taper.value_on(place));
        let x = drawn_end(region, place).unwrap_or(place.x);
        self.smooth_value(x) + self.pole_values(place.x) + tapers.sum::<f64>()
    }

    /// Outward slope of the known part on a side, in the measure of its panel.
    fn known_slope(&self, region: &Region, place: &Place) -> f64 {
        let poles = self.problem.poles.iter();
        let poles = poles.map(|(pole, strength)| of_pole(place.x, *pole).1 * *strength);
        (poles.sum::<Complex64>() * place.outward).re + self.slope_without_poles(region, place)
    }

    /// The same but for the poles.
    pub fn slope_without_poles(&self, region: &Region, place: &Place) -> f64 {
        let is_endless = drawn_end(region, place).is_some();
        let smooth = if is_endless && place.condition == Condition::Flux {
            Complex64::ZERO
        } else {
            self.smooth_derivative(place.x)
        };
        let tapers = self.tapers.iter().map(|taper| taper.derivative_on(place));
        let all = smooth + tapers.sum::<Complex64>();
        (all * place.outward).re
    }

    fn smooth_value(&self, x: Complex64) -> f64 {
        let Problem {
            flow, source_per_m, ..
        } = self.problem;
        (flow.conj() * x).re - 0.25 * source_per_m * x.norm_sqr()
    }

    fn smooth_derivative(&self, x: Complex64) -> Complex64 {
        self.problem.flow.conj() - 0.5 * self.problem.source_per_m * x.conj()
    }

    fn pole_values(&self, x: Complex64) -> f64 {
        let poles = self.problem.poles.iter();
        poles
            .map(|(pole, strength)| strength * of_pole(x, *pole).0)
            .sum()
    }

    fn taper_values(&self, x: Complex64) -> f64 {
        self.tapers.iter().map(|taper| taper.value(x)).sum()
    }
}

/// On a half-line a uniform flow, square to it, has the head of its drawn
/// end: no digits are lost to far places.
fn drawn_end(region: &Region, place: &Place) -> Option<Complex64> {
    let side = region.sides().get(place.side)?;
    if side.comes_in() {
        Some(side.curve.at(1.0))
    } else if side.goes_out() {
        Some(side.curve.at(0.0))
    } else {
        None
    }
}
