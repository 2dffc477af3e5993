//! Logarithmic potentials of Legendre polynomials on the interval (−1, 1).
//!
//! > Qₙ(ζ) = ½ ∫ Pₙ(t)/(ζ − t) dt
//! >
//! > ∫ Pₙ(t) ln(ζ − t) dt = 2 (Qₙ₊₁(ζ) − Qₙ₋₁(ζ))/(2n + 1),   n ≥ 1
//!
//! Qₙ falls as ρ⁻ⁿ with ρ = |ζ + √(ζ² − 1)|, so its recurrence is run upward
//! where ρ < 1.25 (at most 1.25²ⁿ of the rounding is gained, two digits at
//! n = 10) and elsewhere downward as a continued fraction. On the interval
//! itself the limit from above is taken.
//! Accuracy: 1e-13 of the largest Qₙ.
//! Source: DLMF §14.7 and §3.10; Gauss nodes by Newton's method.

use std::f64::consts::PI;

use num_complex::Complex64;

/// Largest number of nodes of a panel.
pub(super) const MOST_NODES: usize = 16;

/// Order of the rule between whose nodes a panel is checked that shares its few
/// unknowns with others.
const FEW: usize = 4;

/// Number of nodes of the finer rule.
const FINE: usize = 24;

/// A place whose ρ exceeds this sees the finer rule's nodes as points: a density of
/// degree 15 times a logarithm is integrated to 2.4⁻³³ ≈ 3e-13, one of degree 9 to
/// 2e-15.
pub(super) const FINE_FAR: f64 = 2.4;

/// A Gauss rule with the tables that panels of its order share.
#[derive(Clone, Debug)]
pub(super) struct Rule {
    /// Gauss nodes in (−1, 1), rising.
    pub nodes: Vec<f64>,
    /// Their weights.
    pub weights: Vec<f64>,
    /// Row k: (2n + 1)/2 · wₖ Pₙ(tₖ), the part of node k in coefficient n.
    coefficients: Vec<Vec<f64>>,
    /// Places between the nodes, where residuals are largest.
    pub checks: Vec<f64>,
    /// Places on a panel that shares its unknowns with others.
    pub few_checks: Vec<f64>,
    /// A place whose ρ exceeds this sees the nodes as points, to 1e-15.
    pub far: f64,
    /// Nodes of a rule of [`FINE`] nodes, for places nearer than that.
    pub fine_nodes: Vec<f64>,
    /// For each of them, what a density of one at each node weighs there.
    pub fine_weights: Vec<Vec<f64>>,
}

impl Rule {
    pub fn new(order: usize) -> Self {
        let (nodes, weights) = gauss(order);
        let coefficients = nodes.iter().zip(&weights).map(|(&t, &w)| {
            let polynomials = polynomials(t, order);
            let scaled = polynomials.iter().enumerate();
            scaled
                .map(|(n, p)| (n as f64 + 0.5) * w * p)
                .collect::<Vec<_>>()
        });
        let coefficients: Vec<Vec<f64>> = coefficients.collect();
        let (fine_nodes, weights_there) = gauss(FINE);
        let fine_weights = fine_nodes.iter().zip(weights_there).map(|(&t, weight)| {
            let polynomials = polynomials(t, order);
            let rows = coefficients.iter();
            rows.map(|row| weight * dot(row, &polynomials)).collect()
        });
        Self {
            fine_weights: fine_weights.collect(),
            fine_nodes,
            checks: between(&nodes),
            few_checks: between(&gauss(FEW).0),
            coefficients,
            far: 10f64.powf(15.0 / (2.0 * order as f64)),
            nodes,
            weights,
        }
    }

    pub fn order(&self) -> usize {
        self.nodes.len()
    }

    /// The density at t of a panel whose nodes carry `values`.
    pub fn interpolate(&self, t: f64, values: impl Iterator<Item = f64>) -> f64 {
        let polynomials = polynomials(t, self.order());
        let rows = self.coefficients.iter().zip(values);
        rows.map(|(row, value)| value * dot(row, &polynomials))
            .sum()
    }

    /// For each node the integral of its interpolating polynomial from −1 to t.
    pub fn integrals_to(&self, t: f64) -> Vec<f64> {
        let order = self.order();
        let polynomials = polynomials(t, order + 1);
        let get = |n: usize| polynomials.get(n).copied().unwrap_or(0.0);
        let integral = |n: usize| match n {
            0 => t + 1.0,
            _ => (get(n + 1) - get(n - 1)) / (2 * n + 1) as f64,
        };
        let integrals: Vec<f64> = (0..order).map(integral).collect();
        self.coefficients
            .iter()
            .map(|row| dot(row, &integrals))
            .collect()
    }

    /// For each node k the integrals of its interpolating polynomial times
    /// ln|ζ − t| and times 1/(ζ − t).
    pub fn near(&self, zeta: Complex64, logs: &mut [f64], inverses: &mut [Complex64]) {
        let order = self.order();
        let mut q = [Complex64::ZERO; MOST_NODES + 1];
        second_kind(zeta, order, &mut q);
        let mut log = [0.0; MOST_NODES];
        fill_logs(zeta, &q, order, &mut log);
        for ((row, value), inverse) in self.coefficients.iter().zip(logs).zip(inverses) {
            let mut sum = 0.0;
            let mut complex = Complex64::ZERO;
            for ((factor, log), q) in row.iter().zip(&log).zip(&q) {
                sum += factor * log;
                complex += q * (2.0 * factor);
            }
            *value = sum;
            *inverse = complex;
        }
    }
}

fn dot(one: &[f64], other: &[f64]) -> f64 {
    one.iter().zip(other).map(|(a, b)| a * b).sum()
}

/// ρ of a place: 1 on the interval, growing away from it.
pub(super) fn ellipse(zeta: Complex64) -> f64 {
    let root = (zeta * zeta - 1.0).sqrt();
    (zeta + root).norm().max((zeta - root).norm())
}

/// Midpoints of neighbouring nodes, and places beside both ends.
fn between(nodes: &[f64]) -> Vec<f64> {
    const BESIDE_END: f64 = 1.0 - 1e-4;
    let middles = nodes.iter().zip(nodes.iter().skip(1));
    let middles = middles.map(|(a, b)| 0.5 * (a + b));
    std::iter::once(-BESIDE_END)
        .chain(middles)
        .chain(std::iter::once(BESIDE_END))
        .collect()
}

/// Gauss–Legendre nodes, rising, and their weights.
fn gauss(order: usize) -> (Vec<f64>, Vec<f64>) {
    let count = order as f64;
    let node = |index: usize| {
        let mut t = -(PI * (index as f64 + 0.75) / (count + 0.5)).cos();
        let mut slope = 1.0;
        for _ in 0..8 {
            let p = polynomials(t, order + 1);
            let get = |n: usize| p.get(n).copied().unwrap_or(1.0);
            slope = count * (t * get(order) - get(order - 1)) / (t * t - 1.0);
            t -= get(order) / slope;
        }
        (t, 2.0 / ((1.0 - t * t) * slope * slope))
    };
    (0..order).map(node).unzip()
}

/// P₀(t), …, `count` of them.
pub(super) fn polynomials(t: f64, count: usize) -> Vec<f64> {
    let mut values = Vec::with_capacity(count);
    let (mut before, mut here) = (0.0, 1.0);
    for n in 0..count {
        values.push(here);
        let n = n as f64;
        let next = ((2.0 * n + 1.0) * t * here - n * before) / (n + 1.0);
        (before, here) = (here, next);
    }
    values
}

/// Q₀(ζ) … Q_order(ζ).
fn second_kind(zeta: Complex64, order: usize, q: &mut [Complex64]) {
    let first = 0.5 * (logarithm(zeta + 1.0) - logarithm(zeta - 1.0));
    let rho = ellipse(zeta);
    if rho < 1.25 {
        let (mut before, mut here) = (first, zeta * first - 1.0);
        for (n, slot) in q.iter_mut().take(order + 1).enumerate() {
            *slot = before;
            let n = n as f64 + 1.0;
            let next = (zeta * here * (2.0 * n + 1.0) - before * n) / (n + 1.0);
            (before, here) = (here, next);
        }
        return;
    }
    // Each step down gains a factor ρ² of accuracy: e^-37 below rounding.
    let extra = (18.5 / rho.ln()).ceil() as usize;
    let mut ratio = Complex64::ZERO;
    for n in (1..=order + extra).rev() {
        let n_real = n as f64;
        ratio = n_real / (zeta * (2.0 * n_real + 1.0) - ratio * (n_real + 1.0));
        if let Some(slot) = q.get_mut(n).filter(|_| n <= order) {
            *slot = ratio;
        }
    }
    let mut product = first;
    for (n, slot) in q.iter_mut().take(order + 1).enumerate() {
        if n > 0 {
            product *= *slot;
        }
        *slot = product;
    }
}

/// Re ∫ Pₙ(t) ln(ζ − t) dt for n < order.
fn fill_logs(zeta: Complex64, q: &[Complex64], order: usize, logs: &mut [f64]) {
    let (above, below) = (zeta + 1.0, zeta - 1.0);
    for (n, slot) in logs.iter_mut().take(order).enumerate() {
        *slot = if n == 0 {
            (above * logarithm(above) - below * logarithm(below)).re - 2.0
        } else {
            let get = |n: usize| q.get(n).copied().unwrap_or(Complex64::ZERO);
            2.0 * (get(n + 1) - get(n - 1)).re / (2 * n + 1) as f64
        };
    }
}

/// ln z with the upper side of the cut, finite at zero, where its terms cancel
/// or are multiplied by zero.
fn logarithm(z: Complex64) -> Complex64 {
    let norm = z.norm().max(1e-300);
    let argument = if z.im == 0.0 {
        if z.re < 0.0 { PI } else { 0.0 }
    } else {
        z.arg()
    };
    Complex64::new(norm.ln(), argument)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Against Gauss quadrature with 16 nodes on 4,000 slices, a midpoint sum
    /// whose singularity is left out.
    #[test]
    fn near_integrals_agree_with_dense_quadrature() {
        let rule = Rule::new(10);
        let dense = Rule::new(16);
        for zeta in [
            Complex64::new(0.3, 0.05),
            Complex64::new(-1.01, 0.02),
            Complex64::new(1.2, -0.3),
            Complex64::new(2.5, 1.0),
            Complex64::new(0.0, 0.24),
        ] {
            let mut logs = [0.0; 10];
            let mut inverses = [Complex64::ZERO; 10];
            rule.near(zeta, &mut logs, &mut inverses);
            for k in 0..10 {
                let (mut log, mut inverse) = (0.0, Complex64::ZERO);
                let slices = 4000;
                for slice in 0..slices {
                    for (t, w) in dense.nodes.iter().zip(&dense.weights) {
                        let half = 1.0 / slices as f64;
                        let t = -1.0 + half * (2.0 * slice as f64 + 1.0 + t);
                        let basis = rule.interpolate(t, (0..10).map(|m| f64::from(m == k)));
                        log += w * half * basis * (zeta - t).norm().ln();
                        inverse += w * half * basis / (zeta - t);
                    }
                }
                assert!(
                    (log - logs[k]).abs() < 1e-13,
                    "{zeta} {k} {log} {}",
                    logs[k]
                );
                assert!((inverse - inverses[k]).norm() < 1e-12, "{zeta} {k}");
            }
        }
    }
}
