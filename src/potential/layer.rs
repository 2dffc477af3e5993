//! A sum of solutions, ready to be evaluated anywhere in the region.

use num_complex::Complex64;

use super::kernel::{Effect, of_pole};
use super::solve::Solution;

/// A weighted sum of the problems of a solution.
#[derive(Clone, Debug)]
pub struct Layer {
    constant: f64,
    /// The density at each node.
    pub(super) densities: Vec<f64>,
    /// For each stretch with a hub its densities there.
    pub(super) at_hubs: Vec<Vec<f64>>,
    /// The weight of each problem.
    weights: Vec<f64>,
}

impl Solution {
    /// The sum of the problems, each times its weight.
    pub fn sum(&self, weights: &[f64]) -> Layer {
        let total = |values: &[f64]| values.iter().zip(weights).map(|(a, b)| a * b).sum();
        let at_nodes = self.densities.at_nodes.chunks(self.densities.count);
        let densities: Vec<f64> = at_nodes.map(total).collect();
        Layer {
            constant: total(&self.densities.constants),
            at_hubs: self.system.at_hubs(&densities, 1),
            densities,
            weights: weights.to_vec(),
        }
    }

    /// The value of a sum at a place of the region, its poles left out.
    pub fn value_without_poles(&self, layer: &Layer, x: Complex64) -> f64 {
        let mut sum = self.smooth_value(layer, x);
        self.for_each_part(layer, x, |effect, block| sum += dot(&effect.values, block));
        sum
    }

    /// Does something with the effect of each panel, or of a side seen from afar,
    /// at a place, and with its densities.
    fn for_each_part(&self, layer: &Layer, x: Complex64, mut act: impl FnMut(&Effect, &[f64])) {
        let system = &self.system;
        let rule = &system.mesh.rule;
        let mut effect = Effect::NONE;
        let mut sources = system.sources.iter();
        let mut blocks = layer.densities.chunks(rule.order());
        let stretches = system.mesh.stretches.iter().zip(&system.hubs);
        for ((stretch, hub), at_hub) in stretches.zip(&layer.at_hubs) {
            let count = stretch.panels.len();
            let panels = sources
                .by_ref()
                .take(count)
                .zip(blocks.by_ref().take(count));
            if let Some(hub) = hub.as_ref().filter(|hub| hub.is_far(x)) {
                hub.source.as_points(&system.hub_rule, x, &mut effect);
                act(&effect, at_hub);
                panels.for_each(drop);
            } else {
                for (source, block) in panels {
                    source.at(rule, x, &mut effect);
                    act(&effect, block);
                }
            }
        }
    }

    /// What is neither panel nor pole of a sum.
    pub(super) fn smooth_value(&self, layer: &Layer, x: Complex64) -> f64 {
        let known = self.posed.iter().zip(&layer.weights);
        let known = known.filter(|(_, weight)| **weight != 0.0);
        layer.constant
            + known
                .map(|(posed, weight)| weight * posed.value_without_poles(x))
                .sum::<f64>()
    }

    /// The value of a sum at a place of the region that is no pole.
    pub fn value(&self, layer: &Layer, x: Complex64) -> f64 {
        self.value_without_poles(layer, x) + self.pole_values(layer, x)
    }

    fn pole_values(&self, layer: &Layer, x: Complex64) -> f64 {
        let known = self.posed.iter().zip(&layer.weights);
        known
            .flat_map(|(posed, weight)| posed.poles().iter().map(move |pole| (pole, weight)))
            .map(|((pole, strength), weight)| weight * strength * of_pole(x, *pole).0)
            .sum()
    }

    /// ∂u/∂x + i ∂u/∂y of a sum at a place of the region that is no pole.
    pub fn gradient(&self, layer: &Layer, x: Complex64) -> Complex64 {
        let known = self.posed.iter().zip(&layer.weights);
        let known: Complex64 = known
            .filter(|(_, weight)| **weight != 0.0)
            .map(|(posed, weight)| posed.derivative(x) * *weight)
            .sum();
        let mut sum = known;
        self.for_each_part(layer, x, |effect, block| {
            let parts = effect.slopes.iter().zip(block);
            sum += parts
                .map(|(slope, density)| slope * density)
                .sum::<Complex64>();
        });
        sum.conj()
    }
}

fn dot(one: &[f64], other: &[f64]) -> f64 {
    one.iter().zip(other).map(|(a, b)| a * b).sum()
}
