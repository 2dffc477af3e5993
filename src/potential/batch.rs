//! Sums over many places at once, through local expansions.
//!
//! Places are gathered in boxes. Panels and poles more than [`FAR`] radii from
//! a box are summed into one Taylor series around its centre c,
//!
//! > Σ q ln(x − y) = Σ q ln(y − c) − Σₙ 1/n · ((x − c)/R)ⁿ Σ q (R/(y − c))ⁿ,
//!
//! the others place by place. With FAR = 3 and [`TERMS`] terms the rest of the
//! series is at most 3⁻³² ≈ 5e-16 of Σ|q|.

use num_complex::Complex64;
use rayon::prelude::*;

use super::kernel::{Effect, FACTOR};
use super::layer::Layer;
use super::solve::Solution;

/// Distance, in radii of a box, from which a panel's nodes enter the series.
const FAR: f64 = 3.0;

/// Terms of the series.
const TERMS: usize = 32;

/// Boxes of fewer places are not divided.
const FEW_PLACES: usize = 128;

/// The circle that holds a panel or a box.
#[derive(Clone, Copy, Debug)]
struct Circle {
    centre: Complex64,
    radius: f64,
}

/// A point charge of the sum.
#[derive(Clone, Copy, Debug)]
struct Charge {
    at: Complex64,
    /// −1/(2π) times its charge.
    factor: f64,
}

/// A logarithmic pole whose value within its rim is that of the rim.
#[derive(Clone, Copy, Debug)]
pub struct RimmedPole {
    /// Where it is.
    pub at: Complex64,
    /// It adds −strength/(2π) ln max(|x − at|, rim).
    pub strength: f64,
    /// Radius of the rim.
    pub rim_m: f64,
}

impl Solution {
    /// Adds to each sum the value of a layer at its place, without the layer's
    /// own poles, and that of the given poles. Parallel; the sums depend on
    /// the places alone.
    pub fn add_values(
        &self,
        layer: &Layer,
        poles: &[RimmedPole],
        places: &[Complex64],
        sums: &mut [f64],
    ) {
        let circles = self.panel_circles();
        let mut boxes = Vec::new();
        divide(places, (0..places.len()).collect(), &mut boxes);
        let parts: Vec<Vec<f64>> = boxes
            .par_iter()
            .map(|members| self.values_in_box(layer, poles, &circles, places, members))
            .collect();
        for (members, values) in boxes.iter().zip(parts) {
            for (index, value) in members.iter().zip(values) {
                if let Some(sum) = sums.get_mut(*index) {
                    *sum += value;
                }
            }
        }
    }

    fn panel_circles(&self) -> Vec<Circle> {
        let sources = self.system.sources.iter();
        sources
            .map(|source| circle_of(&source.nodes, 1.1))
            .collect()
    }

    fn values_in_box(
        &self,
        layer: &Layer,
        poles: &[RimmedPole],
        circles: &[Circle],
        places: &[Complex64],
        members: &[usize],
    ) -> Vec<f64> {
        let places: Vec<Complex64> = members
            .iter()
            .filter_map(|index| places.get(*index).copied())
            .collect();
        let here = circle_of(&places, 1.0);
        let rule = &self.system.mesh.rule;
        let mut series = Series::new(here);
        let mut near = Vec::new();
        let blocks = layer.densities.chunks(rule.order());
        for ((source, circle), block) in self.system.sources.iter().zip(circles).zip(blocks) {
            if series.is_far(circle) {
                let nodes = source.nodes.iter().zip(&rule.weights).zip(block);
                for ((node, weight), density) in nodes {
                    series.add(Charge {
                        at: *node,
                        factor: FACTOR * weight * density,
                    });
                }
            } else {
                near.push((source, block));
            }
        }
        let mut near_poles = Vec::new();
        for pole in poles {
            let circle = Circle {
                centre: pole.at,
                radius: pole.rim_m,
            };
            if series.is_far(&circle) {
                series.add(Charge {
                    at: pole.at,
                    factor: FACTOR * pole.strength,
                });
            } else {
                near_poles.push(pole);
            }
        }
        let mut effect = Effect::NONE;
        let value = |x: &Complex64| {
            let mut sum = series.value(*x) + self.smooth_value(layer, *x);
            for (source, block) in &near {
                source.at(rule, *x, &mut effect);
                let parts = effect.values.iter().zip(*block);
                sum += parts.map(|(value, density)| value * density).sum::<f64>();
            }
            for pole in &near_poles {
                let distance = (x - pole.at).norm().max(pole.rim_m);
                sum += FACTOR * pole.strength * distance.ln();
            }
            sum
        };
        places.iter().map(value).collect()
    }
}

/// A Taylor series of far charges around the centre of a box.
struct Series {
    circle: Circle,
    terms: [Complex64; TERMS],
}

impl Series {
    fn new(circle: Circle) -> Self {
        Self {
            circle,
            terms: [Complex64::ZERO; TERMS],
        }
    }

    fn is_far(&self, circle: &Circle) -> bool {
        let distance = (circle.centre - self.circle.centre).norm() - circle.radius;
        distance > FAR * self.circle.radius && distance > 0.0
    }

    fn add(&mut self, charge: Charge) {
        let away = charge.at - self.circle.centre;
        let ratio = self.circle.radius / away;
        let mut power = Complex64::new(charge.factor, 0.0);
        for (n, term) in self.terms.iter_mut().enumerate() {
            if n == 0 {
                term.re += charge.factor * away.norm().ln();
            } else {
                power *= ratio;
                *term -= power / n as f64;
            }
        }
    }

    fn value(&self, x: Complex64) -> f64 {
        let step = if self.circle.radius > 0.0 {
            (x - self.circle.centre) / self.circle.radius
        } else {
            Complex64::ZERO
        };
        let sum = self.terms.iter().rev();
        sum.fold(Complex64::ZERO, |sum, term| sum * step + term).re
    }
}

/// The circle around the middle of places' bounding box that holds them.
fn circle_of(places: &[Complex64], margin: f64) -> Circle {
    let (low, high) = bounds(places.iter());
    let centre = 0.5 * (low + high);
    let radius = places
        .iter()
        .map(|place| (place - centre).norm())
        .fold(0.0, f64::max);
    Circle {
        centre,
        radius: margin * radius,
    }
}

fn bounds<'a>(places: impl Iterator<Item = &'a Complex64>) -> (Complex64, Complex64) {
    let nothing = (
        Complex64::new(f64::INFINITY, f64::INFINITY),
        Complex64::new(f64::NEG_INFINITY, f64::NEG_INFINITY),
    );
    places.fold(nothing, |(low, high), place| {
        (
            Complex64::new(low.re.min(place.re), low.im.min(place.im)),
            Complex64::new(high.re.max(place.re), high.im.max(place.im)),
        )
    })
}

/// Divides places across the longer side of their bounding box until few are
/// left in each.
fn divide(places: &[Complex64], members: Vec<usize>, boxes: &mut Vec<Vec<usize>>) {
    if members.len() <= FEW_PLACES {
        if !members.is_empty() {
            boxes.push(members);
        }
        return;
    }
    let inside = members.iter().filter_map(|index| places.get(*index));
    let (low, high) = bounds(inside);
    let (size, middle) = (high - low, 0.5 * (low + high));
    let is_wide = size.re >= size.im;
    let is_low = |index: &usize| {
        places.get(*index).is_some_and(|place| {
            if is_wide {
                place.re < middle.re
            } else {
                place.im < middle.im
            }
        })
    };
    let (first, second): (Vec<_>, Vec<_>) = members.into_iter().partition(is_low);
    if first.is_empty() || second.is_empty() {
        // All at one place, to rounding.
        boxes.push(if first.is_empty() { second } else { first });
        return;
    }
    divide(places, first, boxes);
    divide(places, second, boxes);
}
