//! Outlines of any form: the well in the open plane plus a harmonic function.
//!
//! G(z, z₀) = −ln|z − z₀|/(2π) + v(z), where v takes up what the logarithm
//! leaves on the sides; v is found by [`crate::potential`] for all wells
//! together, and so is the head before pumping, since one system serves them all.
//! Its bound on the weighted sum of their errors is a bound on every head.
//! Cost: one dense system when built; then a sum over all panels for a value.

use std::ops::Range;

use num_complex::Complex64;

mod sides;

use super::{Green, Image, Source};
use crate::outline::{Boundary, Condition};
use crate::potential::{Layer, Problem, RimmedPole, Solution};
use sides::{Channel, Sides};

/// A well as it enters the bound.
#[derive(Clone, Copy, Debug)]
pub struct WeightedPole {
    /// Where it is, in the canonical frame.
    pub at: Complex64,
    /// Q/T, metres.
    pub strength_m: f64,
}

/// The head before pumping, beside the stages.
#[derive(Clone, Copy, Debug, Default)]
pub struct Before {
    /// ∂h/∂x + i ∂h/∂y of a flow that is uniform far away.
    pub flow: Complex64,
    /// Recharge over transmissivity, 1/m.
    pub source_per_m: f64,
}

/// The Green's function of an outline without closed form, and its head before
/// pumping.
pub struct General {
    boundary: Boundary,
    solution: Solution,
    poles: Vec<Complex64>,
    /// G of each pole.
    layers: Vec<Layer>,
    sides: Sides,
    flow: Complex64,
    /// Whether neither a uniform flow nor recharge moves the water.
    is_undisturbed: bool,
    /// The head before pumping, the last of the problems.
    before: Layer,
    target_m: f64,
}

impl General {
    /// Solves an outline of finite or infinite extent with a river, for its
    /// wells and its head before pumping, until the error of every head is
    /// proven to be at most `target_m`, or as near as it comes.
    pub fn new(boundary: &Boundary, wells: &[WeightedPole], before: Before, target_m: f64) -> Self {
        let ends = boundary
            .sides
            .iter()
            .flat_map(|side| [side.curve.from(), side.curve.to()])
            .flatten();
        let drawn: Vec<_> = ends.chain(wells.iter().map(|well| well.at)).collect();
        let sides = Sides::of(boundary, &drawn);
        let of_well = |well: &WeightedPole| Problem {
            poles: vec![(well.at, 1.0)],
            weight: well.strength_m,
            ..Problem::default()
        };
        let mut problems: Vec<_> = wells.iter().map(of_well).collect();
        problems.push(Problem {
            heads_m: sides.heads_m.clone(),
            flow: before.flow,
            source_per_m: before.source_per_m,
            weight: 1.0,
            ..Problem::default()
        });
        let solution = Solution::new(sides.region.clone(), problems, target_m);
        let only = |problem: usize| {
            let weights = (0..=wells.len()).map(|other| f64::from(other == problem));
            solution.sum(&weights.collect::<Vec<_>>())
        };
        Self {
            before: only(wells.len()),
            layers: (0..wells.len()).map(only).collect(),
            boundary: boundary.clone(),
            poles: wells.iter().map(|well| well.at).collect(),
            flow: before.flow,
            is_undisturbed: before.flow == Complex64::ZERO && before.source_per_m == 0.0,
            solution,
            sides,
            target_m,
        }
    }

    /// A proven bound on the error of every head, metres; infinite where none
    /// was found.
    pub fn bound_m(&self) -> f64 {
        self.solution.bound_m()
    }

    /// Number of unknowns of the system.
    pub fn unknowns(&self) -> usize {
        self.solution.unknowns()
    }

    /// The side of the boundary near which the error is largest.
    pub fn hardest_side(&self) -> Option<usize> {
        let hardest = self.solution.hardest_side()?;
        self.sides
            .parts
            .iter()
            .position(|part| part.contains(&hardest))
    }

    /// Adds the head before pumping, metres, to the sum of each place.
    pub fn add_heads_before_m(&self, places: &[Complex64], sums: &mut [f64]) {
        for (place, sum) in places.iter().zip(sums.iter_mut()) {
            *sum += (self.flow.conj() * (place - self.near(*place))).re;
        }
        let layer = &self.before;
        self.solution
            .add_values(layer, &[], &self.all_near(places), sums);
    }

    /// The head before pumping at a place, metres.
    pub fn head_before_m(&self, z: Complex64) -> f64 {
        let mut sum = [0.0];
        self.add_heads_before_m(&[z], &mut sum);
        sum[0]
    }

    /// ∂h/∂x + i ∂h/∂y before pumping.
    pub fn gradient_before(&self, z: Complex64) -> Complex64 {
        if self.near(z) == z {
            self.solution.gradient(&self.before, z)
        } else {
            self.flow
        }
    }

    /// A place, or where far in a channel nothing but the flow along it
    /// changes any more, the one abreast of it at the end.
    fn near(&self, z: Complex64) -> Complex64 {
        let mut channels = self.sides.channels.iter();
        let end = channels.find_map(|channel: &Channel| channel.end_abreast(z));
        end.unwrap_or(z)
    }

    fn all_near(&self, places: &[Complex64]) -> Vec<Complex64> {
        places.iter().map(|place| self.near(*place)).collect()
    }

    /// ∫ ∂h/∂n dl before pumping through a part of a side, metres, n pointing
    /// out of the aquifer; none where a jump of the stage or a flow that never
    /// fades makes it infinite.
    pub fn outflow_before_m(&self, side: usize, along: &Range<f64>) -> Option<f64> {
        let is_endless = along.start.is_infinite() || along.end.is_infinite();
        if is_endless && self.sides.channel_of(side).is_some() && !self.is_still() {
            return None;
        }
        self.outflow(self.poles.len(), side, along)
            .filter(|outflow_m| outflow_m.is_finite())
    }

    /// Whether nothing flows across far channels before pumping.
    fn is_still(&self) -> bool {
        self.is_undisturbed && self.sides.have_channels_one_stage(&self.boundary)
    }

    fn outflow(&self, problem: usize, side: usize, along: &Range<f64>) -> Option<f64> {
        let curve = self.boundary.sides.get(side)?.curve;
        let parts = self.sides.parts.get(side)?.clone();
        parts
            .enumerate()
            .map(|(piece, index)| (index, self.sides.within(side, &curve, piece, along)))
            .filter(|(_, within)| within.start < within.end)
            .map(|(index, within)| {
                let parameter = |along: f64| self.solution.parameter(index, curve.at(along));
                let range = parameter(within.start)..parameter(within.end);
                self.solution.outflow(problem, index, range)
            })
            .sum()
    }

    fn problem_of(&self, pole: Complex64) -> Option<usize> {
        self.poles.iter().position(|known| *known == pole)
    }

    /// Does something with G of a pole; one that is no well is solved for.
    fn with<R>(&self, pole: Complex64, act: impl Fn(&Self, usize, &Layer) -> R) -> Option<R> {
        if let Some(problem) = self.problem_of(pole) {
            return Some(act(self, problem, self.layers.get(problem)?));
        }
        let well = WeightedPole {
            at: pole,
            strength_m: 1.0,
        };
        let one = Self::new(&self.boundary, &[well], Before::default(), self.target_m);
        Some(act(&one, 0, one.layers.first()?))
    }
}

impl Green for General {
    fn value_outside_rim(&self, at: Complex64, pole: Complex64, rim_m: f64) -> f64 {
        let at = self.near(at);
        let distance_m = (at - pole).norm().max(rim_m);
        let regular = self.with(pole, |general, _, layer| {
            general.solution.value_without_poles(layer, at)
        });
        regular.unwrap_or(f64::NAN) - distance_m.ln() / std::f64::consts::TAU
    }

    fn gradient(&self, at: Complex64, pole: Complex64) -> Complex64 {
        if self.near(at) != at {
            return Complex64::ZERO;
        }
        self.with(pole, |general, _, layer| {
            general.solution.gradient(layer, at)
        })
        .unwrap_or_default()
    }

    fn regular_part(&self, pole: Complex64) -> f64 {
        self.with(pole, |general, _, layer| {
            general.solution.value_without_poles(layer, pole)
        })
        .unwrap_or(f64::NAN)
    }

    fn share(&self, side: usize, along: Range<f64>, pole: Complex64) -> f64 {
        let condition = self.boundary.sides.get(side).map(|side| side.condition);
        if condition.is_none_or(|condition| condition == Condition::NoFlow) {
            return 0.0;
        }
        let share = self.with(pole, |general, problem, _| {
            -general.outflow(problem, side, &along).unwrap_or(0.0)
        });
        share.unwrap_or(0.0)
    }

    /// One sum over the sides for all wells.
    fn superposed_gradient(&self, sources: &[Source], at: Complex64) -> Complex64 {
        let mut weights = vec![0.0; self.poles.len() + 1];
        let mut of_strangers = Complex64::ZERO;
        for source in sources {
            let problem = self.problem_of(source.pole);
            match problem.and_then(|problem| weights.get_mut(problem)) {
                Some(weight) => *weight += source.strength_m,
                None => of_strangers += source.strength_m * self.gradient(at, source.pole),
            }
        }
        if self.near(at) != at {
            return of_strangers;
        }
        of_strangers + self.solution.gradient(&self.solution.sum(&weights), at)
    }

    fn superpose(&self, sources: &[Source], points: &[Complex64], sums: &mut [f64]) {
        let mut weights = vec![0.0; self.poles.len() + 1];
        let mut poles = Vec::with_capacity(sources.len());
        for source in sources {
            let Some(problem) = self.problem_of(source.pole) else {
                for (point, sum) in points.iter().zip(sums.iter_mut()) {
                    let green = self.value_outside_rim(*point, source.pole, source.rim_m);
                    *sum += source.strength_m * green;
                }
                continue;
            };
            if let Some(weight) = weights.get_mut(problem) {
                *weight += source.strength_m;
            }
            poles.push(RimmedPole {
                at: source.pole,
                strength: source.strength_m,
                rim_m: source.rim_m,
            });
        }
        let layer = self.solution.sum(&weights);
        let near = self.all_near(points);
        self.solution.add_values(&layer, &poles, &near, sums);
    }

    /// None: the sides act through layers of their own.
    fn nearest_images(&self, _: Complex64, _: usize) -> Vec<Image> {
        Vec::new()
    }
}
