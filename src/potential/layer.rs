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
    /// The weight of each problem.
    weights: Vec<f64>,
}

impl Solution {
    /// The sum of the problems, each times its weight.
    pub fn sum(&self, weights: &[f64]) -> Layer {
        let total = |values: &[f64]| values.iter().zip(weights).map(|(a, b)| a * b).sum();
        Layer {
            constant: total(&self.densities.constants),
            densities: self
                .densities
                .at_nodes
                .chunks(self.densities.count)
                .map(total)
                .collect(),
            weights: weights.to_vec(),
        }
    }

    /// The value of a sum at a place of the region, its poles left out.
    pub fn value_without_poles(&self, layer: &Layer, x: Complex64) -> f64 {
        let rule = &self.system.mesh.rule;
        let mut effect = Effect::NONE;
        let blocks = layer.densities.chunks(rule.order());
        let mut sum = self.smooth_value(layer, x);
        for (source, block) in self.system.sources.iter().zip(blocks) {
            source.at(rule, x, &mut effect);
            sum += dot(&effect.values, block);
        }
        sum
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
        let rule = &self.system.mesh.rule;
        let mut effect = Effect::NONE;
        let blocks = layer.densities.chunks(rule.order());
        let mut sum = known;
        for (source, block) in self.system.sources.iter().zip(blocks) {
            source.at(rule, x, &mut effect);
            for (slope, density) in effect.slopes.iter().zip(block) {
                sum += slope * density;
            }
        }
        sum.conj()
    }
}

fn dot(one: &[f64], other: &[f64]) -> f64 {
    one.iter().zip(other).map(|(a, b)| a * b).sum()
}
