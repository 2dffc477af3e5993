//! The few functions that the density of a straight side is made of.
//!
//! Between two corners it is smooth but for powers of the distances from them.
//! With r the distance from a corner of interior angle α, fields inside go as
//! r^(jπ/α), or r^((j − ½)π/α) where head meets flux; those outside, which take
//! up the same boundary values, as r^(jπ/(2π − α)), j = 1, 2, …. The density is
//! the difference of their slopes and has one power less. With some polynomials
//! the first of these powers span what the side needs; so a dozen or two unknowns do
//! for a side that takes a hundred nodes to integrate.
//!
//! The functions are made orthonormal at the nodes, and those that others make
//! up to a small part are left out. As many nodes ask the side's condition,
//! chosen one by one where the functions differ most from the others chosen. What
//! the functions miss shows in the residuals, and the side's nodes are set free.

use std::f64::consts::{PI, TAU};

use super::cut::power_for;
use super::legendre::{Rule, polynomials};
use super::panel::{Panel, Place};
use super::region::{Condition, Region};

/// How many functions a span is to hold.
#[derive(Clone, Copy, Debug)]
struct Wealth {
    /// Highest degree of the polynomials.
    degree: usize,
    /// Powers of r below this are kept; higher ones are smooth enough.
    highest_power: f64,
    /// Functions nearer than this to the span of others are left out.
    negligible: f64,
}

/// For heads to a few 1e-5 m.
const LEAN: Wealth = Wealth {
    degree: 4,
    highest_power: 2.5,
    negligible: 1e-5,
};

/// For heads to a few 1e-7 m.
const PLAIN: Wealth = Wealth {
    degree: 5,
    highest_power: 3.3,
    negligible: 1e-6,
};

/// For slopes, whose errors add up along many sides.
const RICH: Wealth = Wealth {
    degree: 7,
    highest_power: 4.5,
    negligible: 1e-8,
};

/// Lean spans do for heads to this, metres.
const LEAN_TARGET_M: f64 = 3e-5;

impl Wealth {
    fn of(condition: Condition, target_m: f64) -> Self {
        match condition {
            Condition::Head if target_m >= LEAN_TARGET_M => LEAN,
            Condition::Head => PLAIN,
            Condition::Flux | Condition::Clogged { .. } => RICH,
        }
    }
}

/// A basis of the densities of one side.
#[derive(Clone, Debug)]
pub(super) struct Span {
    /// The nodes of the side that ask its condition, as many as functions.
    pub rows: Vec<usize>,
    /// Node after node, the value of each function there.
    values: Vec<f64>,
    /// The power of r that its profile has at its start and its end, if any.
    profile_powers: [Option<f64>; 2],
}

impl Span {
    /// Whether a side is straight from corner to corner, and no skin lies on it or
    /// on the sides that it meets.
    pub fn suits(region: &Region, side: usize) -> bool {
        let before = region.before(side);
        let after = region.joint(side).map(|joint| joint.next);
        let plain = [Some(side), Some(before), after].into_iter().all(|side| {
            let side = side.and_then(|side| region.sides().get(side));
            side.is_some_and(|side| !matches!(side.condition, Condition::Clogged { .. }))
        });
        let is_straight = region.sides().get(side).is_some_and(|side| {
            !side.goes_out() && !side.comes_in() && side.curve.c().norm() == 0.0
        });
        plain && is_straight
    }

    /// The span of a side that it suits, on panels that resolve it, for errors of
    /// the head up to a target.
    pub fn new(region: &Region, side: usize, panels: &[Panel], rule: &Rule, target_m: f64) -> Self {
        let side_here = region.sides().get(side);
        let condition = side_here.map_or(Condition::Flux, |side| side.condition);
        let wealth = Wealth::of(condition, target_m);
        let joints = [region.before(side), side];
        let powers = joints.map(|joint| corner_powers(region, joint, wealth));
        let roots = rule.weights.iter().map(|weight| weight.sqrt());
        let roots: Vec<f64> = roots.cycle().take(panels.len() * rule.order()).collect();
        let mut functions = functions(panels, rule, wealth, &powers);
        for function in &mut functions {
            let values = function.iter_mut().zip(&roots);
            values.for_each(|(value, root)| *value *= root);
        }
        let basis = orthonormal(functions, wealth.negligible);
        let at_nodes: Vec<Vec<f64>> = (0..roots.len())
            .map(|node| basis.iter().filter_map(|f| f.get(node).copied()).collect())
            .collect();
        let values = at_nodes
            .iter()
            .zip(&roots)
            .flat_map(|(row, root)| row.iter().map(move |value| value / root))
            .collect();
        Self {
            rows: most_different(at_nodes, basis.len()),
            values,
            profile_powers: joints.map(|joint| profile_power(region, joint)),
        }
    }

    /// A density of the span, positive all along the side and largest where any
    /// other is: 1 and the powers that a panel beside the corner has where it is
    /// constant, at a place of the side.
    pub fn profile(&self, place: &Place) -> f64 {
        let ends = [place.counted(false), place.counted(true)];
        let powers = ends.into_iter().zip(self.profile_powers);
        let parts = powers.filter_map(|(distance, power)| Some(distance.powf(power? - 1.0)));
        (1.0 + parts.sum::<f64>()) * place.outward.norm()
    }

    /// How many functions.
    pub fn count(&self) -> usize {
        self.rows.len()
    }

    /// For each node the functions' values there.
    pub fn at_nodes(&self) -> impl Iterator<Item = &[f64]> + '_ {
        self.values.chunks(self.count().max(1))
    }
}

/// Polynomials and powers of the distance from the start and from the end, as
/// densities at each node.
fn functions(
    panels: &[Panel],
    rule: &Rule,
    wealth: Wealth,
    powers: &[Vec<f64>; 2],
) -> Vec<Vec<f64>> {
    let nodes: Vec<_> = panels
        .iter()
        .flat_map(|panel| rule.nodes.iter().map(move |&t| (panel, t)))
        .map(|(panel, t)| (panel.ends_at(t), panel.u_slope(t)))
        .collect();
    let polynomial = |degree: usize| {
        let at = |([u, _], slope): &([f64; 2], f64)| {
            let values = polynomials(2.0 * u - 1.0, degree + 1);
            values.last().copied().unwrap_or_default() * slope
        };
        nodes.iter().map(at).collect()
    };
    let power_of = |distance: fn(&[f64; 2]) -> f64, power: &f64| {
        let at = |(ends, slope): &([f64; 2], f64)| distance(ends).powf(power - 1.0) * slope;
        nodes.iter().map(at).collect()
    };
    let [from_start, from_end] = powers;
    let from_start = from_start
        .iter()
        .map(|power| power_of(|ends| ends[0], power));
    let from_end = from_end.iter().map(|power| power_of(|ends| ends[1], power));
    let polynomials = (0..=wealth.degree).map(polynomial);
    polynomials.chain(from_start).chain(from_end).collect()
}

/// The power of r that stands for a constant on a panel beside a corner.
fn profile_power(region: &Region, joint: usize) -> Option<f64> {
    let exponent = region.joint(joint)?.exponent;
    exponent
        .is_finite()
        .then(|| f64::from(power_for(exponent)).recip())
}

/// The powers of the distance from a corner, not whole, that fields go as there.
fn corner_powers(region: &Region, joint: usize, wealth: Wealth) -> Vec<f64> {
    let Some(joint_here) = region.joint(joint) else {
        return Vec::new();
    };
    let condition = |side: usize| region.sides().get(side).map(|side| side.condition);
    let is_mixed = condition(joint) != condition(joint_here.next);
    let shift = if is_mixed { 0.5 } else { 0.0 };
    let inside = PI / joint_here.angle_rad;
    let outside = PI / (TAU - joint_here.angle_rad);
    let series = |base: f64, shift: f64| {
        (1..16)
            .map(move |j| base * (f64::from(j) - shift))
            .take_while(|power| *power < wealth.highest_power)
    };
    let mut powers: Vec<f64> = series(inside, shift).chain(series(outside, 0.0)).collect();
    powers.retain(|power| (power - power.round()).abs() > 1e-9);
    powers.extend(profile_power(region, joint));
    powers.sort_by(f64::total_cmp);
    powers
}

/// An orthonormal basis of functions' span, by Gram and Schmidt, twice each
/// so that rounding leaves them orthogonal.
fn orthonormal(functions: Vec<Vec<f64>>, negligible: f64) -> Vec<Vec<f64>> {
    let mut basis: Vec<Vec<f64>> = Vec::with_capacity(functions.len());
    for mut function in functions {
        let size = norm(&function);
        for _ in 0..2 {
            for other in &basis {
                subtract(&mut function, other);
            }
        }
        let left = norm(&function);
        if left > negligible * size {
            function.iter_mut().for_each(|value| *value /= left);
            basis.push(function);
        }
    }
    basis
}

/// The numbers of so many vectors, each the farthest from the span of those
/// before it.
fn most_different(mut vectors: Vec<Vec<f64>>, count: usize) -> Vec<usize> {
    let mut chosen = Vec::with_capacity(count);
    for _ in 0..count {
        let sizes = vectors.iter().map(|vector| norm(vector)).enumerate();
        let Some((best, size)) = sizes.max_by(|one, other| one.1.total_cmp(&other.1)) else {
            break;
        };
        let Some(unit) = vectors
            .get(best)
            .map(|vector| vector.iter().map(|value| value / size).collect::<Vec<_>>())
        else {
            break;
        };
        for vector in &mut vectors {
            subtract(vector, &unit);
        }
        // What rounding leaves of it is not chosen again.
        if let Some(vector) = vectors.get_mut(best) {
            vector.fill(0.0);
        }
        chosen.push(best);
    }
    chosen.sort_unstable();
    chosen
}

fn norm(vector: &[f64]) -> f64 {
    vector.iter().map(|value| value * value).sum::<f64>().sqrt()
}

/// Takes from a vector its part along a unit vector.
fn subtract(vector: &mut [f64], unit: &[f64]) {
    let along: f64 = vector.iter().zip(unit).map(|(a, b)| a * b).sum();
    for (value, unit) in vector.iter_mut().zip(unit) {
        *value -= along * unit;
    }
}
