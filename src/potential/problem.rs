//! What is asked of a harmonic function, and the parts of it that are known.
//!
//! A problem's solution is `known(x)` + C + the potential of the panels. Known
//! are the logarithms of its poles, a uniform flow, the bowl of an areal source
//! and the tapers of its jumps; the panels make up what the sides still ask for.

use std::ops::Range;

use num_complex::Complex64;

use super::kernel::of_pole;
use super::panel::Place;
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
    /// −∇²u, 1/m: recharge over transmissivity; zero unless the region is bounded.
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
        let mut posed = Self {
            problem,
            tapers: Vec::new(),
        };
        posed.tapers = (0..region.sides().len())
            .filter_map(|side| posed.taper(region, side))
            .collect();
        posed
    }

    /// The taper for the jump of the head from the end of a side to the next.
    fn taper(&self, region: &Region, side: usize) -> Option<Taper> {
        let joint = region.joint(side)?;
        let here = region.sides().get(side)?;
        let next = region.sides().get(joint.next)?;
        let jump_m = if !here.goes_out() {
            self.drawn_head(region, joint.next, 0)? - self.drawn_head(region, side, 1)?
        } else {
            self.far_head(region, joint.next)? - self.far_head(region, side)?
        };
        let taper = Taper::new(joint.next, next.curve, side, jump_m, joint.angle_rad);
        Some(taper).filter(|_| jump_m != 0.0)
    }

    /// The head given at the start or the end of a head side.
    fn drawn_head(&self, region: &Region, side: usize, end: usize) -> Option<f64> {
        let is_head = region.sides().get(side)?.condition == Condition::Head;
        let heads = self.problem.heads_m.get(side).copied().unwrap_or_default();
        heads.get(end).copied().filter(|_| is_head)
    }

    /// What a half-line asks of the head far away beside the uniform flow; none
    /// where it fixes none. Far away clogged banks act as clean ones.
    fn far_head(&self, region: &Region, index: usize) -> Option<f64> {
        let side = region.sides().get(index)?;
        let skin_m = match side.condition {
            Condition::Head => 0.0,
            Condition::Flux => return None,
            Condition::Clogged { skin_m } => skin_m,
        };
        let heads = self.problem.heads_m.get(index).copied().unwrap_or_default();
        let drawn_end = side.curve.at(f64::from(!side.goes_out()));
        let outward = -Complex64::I * side.arrives;
        let slope = (self.smooth_derivative(drawn_end) * outward).re;
        Some(heads[0] - self.smooth_value(drawn_end) - skin_m * slope)
    }

    pub fn poles(&self) -> &[(Complex64, f64)] {
        &self.problem.poles
    }

    pub fn weight(&self) -> f64 {
        self.problem.weight
    }

    /// The sum of its poles' strengths.
    pub fn charge(&self) -> f64 {
        self.problem
            .poles
            .iter()
            .map(|(_, strength)| strength)
            .sum()
    }

    /// ∂/∂x − i ∂/∂y of the known part.
    pub fn derivative(&self, x: Complex64) -> Complex64 {
        let tapers = self.tapers.iter().map(|taper| taper.derivative(x));
        let poles = self.problem.poles.iter();
        let poles = poles.map(|(pole, strength)| of_pole(x, *pole).1 * *strength);
        self.smooth_derivative(x) + tapers.chain(poles).sum::<Complex64>()
    }

    /// Whether the flux through a range of a side is infinite or undetermined: a
    /// jump of the head lies at its start or its end, or a flow goes on along it
    /// to infinity.
    pub fn jumps_within(&self, region: &Region, side: usize, along: &Range<f64>) -> bool {
        let jumps_at = |joint: usize| self.tapers.iter().any(|taper| taper.corner == joint);
        let starts = along.start <= 0.0;
        let ends = along.end >= 1.0;
        let endless = region
            .sides()
            .get(side)
            .is_some_and(|side| side.goes_out() && ends || side.comes_in() && starts);
        let flows = self.problem.flow != Complex64::ZERO || self.problem.source_per_m != 0.0;
        starts && jumps_at(region.before(side)) || ends && jumps_at(side) || endless && flows
    }

    /// The known part but for the poles.
    pub fn value_without_poles(&self, x: Complex64) -> f64 {
        let tapers = self.tapers.iter().map(|taper| taper.value(x));
        self.smooth_value(x) + tapers.sum::<f64>()
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
        let smooth = match drawn_end(region, place) {
            Some(_) if place.condition == Condition::Flux => Complex64::ZERO,
            None if is_closing(region, place) => {
                self.smooth_derivative(place.x) - self.problem.flow.conj()
            }
            end => self.smooth_derivative(end.unwrap_or(place.x)),
        };
        let tapers = self.tapers.iter().map(|taper| taper.derivative_on(place));
        let all = smooth + tapers.sum::<Complex64>();
        (all * place.outward).re
    }

    fn smooth_value(&self, x: Complex64) -> f64 {
        (self.problem.flow.conj() * x).re - 0.25 * self.problem.source_per_m * x.norm_sqr()
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
}

fn is_closing(region: &Region, place: &Place) -> bool {
    let side = region.sides().get(place.side);
    side.is_some_and(|side| side.is_closing)
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
