//! What a unit density at each node of a panel does at a place.
//!
//! The potential of a density τ(t) on a panel is
//! −1/(2π) ∫ τ(t) ln|x − y(t)| dt. With u(x) the complex parameter of the place
//! on the panel's side and u = wᵐ on the panel,
//!
//! > ln|x − y| = Σ ln|ωⱼ u(x)^(1/m) − w| + ln|a − c x| − ln|c u + d|,
//!
//! summed over the m roots ωⱼ of one. Where all the roots are far from the
//! panel its nodes count as points, nearer those of a finer rule; beside it the
//! density's polynomial is integrated in closed form, so that nothing is lost right
//! up to the panel.

use std::f64::consts::{FRAC_1_PI, TAU};

use num_complex::Complex64;

use super::legendre::{FINE_FAR, MOST_NODES, Rule, ellipse};
use super::panel::{Panel, Place};
use super::region::Condition;

/// −1/(2π).
pub(super) const FACTOR: f64 = -0.5 * FRAC_1_PI;

/// A panel ready to act.
#[derive(Clone, Debug)]
pub(super) struct Source {
    pub panel: Panel,
    /// Its nodes.
    pub nodes: Vec<Complex64>,
    /// The nodes of the finer rule.
    pub fine_nodes: Vec<Complex64>,
    /// What the finer rule misses, for each node: that of −ln|c u + d|, which the
    /// places have no part in, counts as the coarser rule has it.
    fine_misses: Vec<f64>,
    /// ln|c u + d| − m ln h at each node.
    offsets: Vec<f64>,
    /// The m roots of one.
    roots: Vec<Complex64>,
    /// |ζ| from which a place is surely far.
    far_radius: f64,
    /// |u| from which it is.
    far_parameter: f64,
}

/// Values and slopes for each node of one panel.
#[derive(Clone, Copy, Debug)]
pub(super) struct Effect {
    /// The potential.
    pub values: [f64; MOST_NODES],
    /// dF/dx, F the complex potential whose real part it is.
    pub slopes: [Complex64; MOST_NODES],
}

impl Effect {
    pub const NONE: Self = Self {
        values: [0.0; MOST_NODES],
        slopes: [Complex64::ZERO; MOST_NODES],
    };
}

impl Source {
    /// A panel, ready to act.
    pub fn new(panel: &Panel, rule: &Rule) -> Self {
        let parameters: Vec<f64> = rule.nodes.iter().map(|&t| panel.u(t)).collect();
        let power = f64::from(panel.power);
        let far_radius = 0.5 * (rule.far + 1.0 / rule.far);
        let offset = |u: &f64| panel.curve.below(*u).norm().ln() - power * panel.half.ln();
        let root = |index: u32| Complex64::cis(TAU * f64::from(index) / power);
        Self {
            panel: *panel,
            nodes: parameters.iter().map(|&u| panel.curve.at(u)).collect(),
            fine_nodes: (rule.fine_nodes.iter())
                .map(|&t| panel.curve.at(panel.u(t)))
                .collect(),
            fine_misses: fine_misses(panel, rule),
            offsets: parameters.iter().map(offset).collect(),
            roots: (0..panel.power).map(root).collect(),
            far_parameter: (panel.middle + far_radius * panel.half).powf(power),
            far_radius,
        }
    }

    /// The effect of its nodes as points on a place of another side; what is not
    /// wanted is left zero.
    pub fn as_points_on_side(&self, rule: &Rule, place: &Place, wanted: Wanted, out: &mut OnSide) {
        *out = OnSide::NONE;
        let nodes = self.nodes.iter().zip(&rule.weights);
        if wanted.values {
            for ((node, weight), value) in nodes.clone().zip(&mut out.values) {
                *value = FACTOR * weight * 0.5 * (place.x - node).norm_sqr().ln();
            }
        }
        if wanted.slopes {
            for ((node, weight), slope) in nodes.zip(&mut out.slopes) {
                let distance = place.x - node;
                let along = (distance.conj() * place.outward).re;
                *slope = FACTOR * weight * along / distance.norm_sqr();
            }
        }
    }

    /// The effect at a place anywhere in the region.
    pub fn at(&self, rule: &Rule, x: Complex64, effect: &mut Effect) {
        self.effect(rule, x, self.panel.curve.parameter(x), effect);
    }

    /// The effect at a place with its parameter on this panel's side.
    fn effect(&self, rule: &Rule, x: Complex64, u: Complex64, effect: &mut Effect) {
        // Spares most places the root.
        if u.norm_sqr() >= self.far_parameter * self.far_parameter {
            self.as_points(rule, x, effect);
            return;
        }
        let root = self.panel.root(u);
        let nearest = self.nearest(rule, root);
        if nearest >= rule.far {
            self.as_points(rule, x, effect);
        } else if nearest >= FINE_FAR {
            self.as_fine_points(rule, x, effect);
        } else {
            self.as_polynomials(rule, x, u, root, effect);
        }
    }

    /// The centre of circles outside which places see the nodes as points, and
    /// those of the finer rule, with their radii; none where the side is not
    /// straight between two places.
    pub fn near_circles(&self, rule: &Rule) -> Option<(Complex64, [f64; 2])> {
        let (panel, curve) = (&self.panel, &self.panel.curve);
        if curve.c().norm() > 0.0 {
            return None;
        }
        let length = (curve.at(1.0) - curve.at(0.0)).norm();
        // An ellipse of ρ lies within a circle of half of ρ + 1/ρ.
        let reaches = [rule.far, FINE_FAR].map(|rho| 0.5 * (rho + 1.0 / rho) * panel.half);
        let circles = if panel.power == 1 {
            (curve.at(panel.middle), reaches.map(|reach| reach * length))
        } else {
            let power = panel.power.cast_signed();
            let parameters = reaches.map(|reach| (panel.middle + reach).powi(power));
            (
                curve.at(0.0),
                parameters.map(|parameter| parameter * length),
            )
        };
        Some(circles)
    }

    /// Whether a place anywhere in the region sees the nodes as points.
    pub fn is_far_from(&self, rule: &Rule, x: Complex64) -> bool {
        let u = self.panel.curve.parameter(x);
        u.norm_sqr() >= self.far_parameter * self.far_parameter
            || self.nearest(rule, self.panel.root(u)) >= rule.far
    }

    /// The least ρ of a place's roots, or some number beyond the rule's far one.
    fn nearest(&self, rule: &Rule, root: Complex64) -> f64 {
        let norm = self.local(root).norm_sqr();
        if norm >= self.far_radius * self.far_radius || !norm.is_finite() {
            return rule.far;
        }
        let turned = self
            .roots
            .iter()
            .map(|turn| ellipse(self.local(root * turn)));
        turned.fold(rule.far, f64::min)
    }

    fn local(&self, root: Complex64) -> Complex64 {
        (root - self.panel.middle) / self.panel.half
    }

    /// The effect of its nodes as points.
    pub fn as_points(&self, rule: &Rule, x: Complex64, effect: &mut Effect) {
        let slots = effect.values.iter_mut().zip(&mut effect.slopes);
        for ((node, weight), (value, slope)) in self.nodes.iter().zip(&rule.weights).zip(slots) {
            let distance = x - node;
            let squared = distance.norm_sqr();
            let factor = FACTOR * weight;
            *value = factor * 0.5 * squared.ln();
            *slope = distance.conj() * (factor / squared);
        }
    }

    fn as_fine_points(&self, rule: &Rule, x: Complex64, effect: &mut Effect) {
        *effect = Effect::NONE;
        for (value, miss) in effect.values.iter_mut().zip(&self.fine_misses) {
            *value = FACTOR * miss;
        }
        for (node, weights) in self.fine_nodes.iter().zip(&rule.fine_weights) {
            let distance = x - node;
            let squared = distance.norm_sqr();
            let (log, inverse) = (
                FACTOR * 0.5 * squared.ln(),
                FACTOR * distance.conj() / squared,
            );
            let slots = effect.values.iter_mut().zip(&mut effect.slopes);
            for (weight, (value, slope)) in weights.iter().zip(slots) {
                *value += weight * log;
                *slope += weight * inverse;
            }
        }
    }

    fn as_polynomials(
        &self,
        rule: &Rule,
        x: Complex64,
        u: Complex64,
        root: Complex64,
        effect: &mut Effect,
    ) {
        let curve = self.panel.curve;
        let distance = curve.pole_distance(x);
        let distance_log = 0.5 * distance.norm_sqr().ln();
        let distance_slope = -curve.c() / distance;
        let parts = self.offsets.iter().zip(&rule.weights);
        let slots = effect.values.iter_mut().zip(&mut effect.slopes);
        for ((offset, weight), (value, slope)) in parts.zip(slots) {
            *value = FACTOR * weight * (distance_log - offset);
            *slope = FACTOR * *weight * distance_slope;
        }
        let root_slope = if self.panel.power == 1 {
            curve.parameter_slope(x)
        } else {
            root / u * curve.parameter_slope(x) / f64::from(self.panel.power)
        };
        let (mut logs, mut inverses) = ([0.0; MOST_NODES], [Complex64::ZERO; MOST_NODES]);
        for turn in &self.roots {
            self.integrals(rule, self.local(root * turn), &mut logs, &mut inverses);
            let zeta_slope = turn * root_slope / self.panel.half;
            let integrals = logs.iter().zip(&inverses).take(rule.order());
            let slots = effect.values.iter_mut().zip(&mut effect.slopes);
            for ((log, inverse), (value, slope)) in integrals.zip(slots) {
                *value += FACTOR * log;
                *slope += FACTOR * (inverse * zeta_slope);
            }
        }
    }

    /// The integrals of ln|ζ − t| and 1/(ζ − t), in closed form if near.
    fn integrals(
        &self,
        rule: &Rule,
        zeta: Complex64,
        logs: &mut [f64; MOST_NODES],
        inverses: &mut [Complex64; MOST_NODES],
    ) {
        if ellipse(zeta) < rule.far {
            rule.near(zeta, logs, inverses);
            return;
        }
        let nodes = rule.nodes.iter().zip(&rule.weights);
        for ((node, weight), (log, inverse)) in nodes.zip(logs.iter_mut().zip(inverses)) {
            let distance = zeta - node;
            let squared = distance.norm_sqr();
            *log = weight * 0.5 * squared.ln();
            *inverse = distance.conj() * (weight / squared);
        }
    }

    /// The effect at a place on a panel, as (potential, outward slope).
    pub fn on_side(&self, rule: &Rule, index: usize, place: &Place, out: &mut OnSide) {
        if place.side != self.panel.side {
            let u = place.parameter_on(&self.panel.curve, self.panel.corner);
            let mut effect = Effect::NONE;
            if place.corner.map(|(corner, _)| corner) == Some(self.panel.corner) {
                // Close to a common corner x − node has no digits left; u has.
                let root = self.panel.root(u);
                self.as_polynomials(rule, place.x, u, root, &mut effect);
            } else {
                self.effect(rule, place.x, u, &mut effect);
            }
            out.values = effect.values;
            for (slope, derivative) in out.slopes.iter_mut().zip(&effect.slopes) {
                *slope = (derivative * place.outward).re;
            }
            return;
        }
        self.on_own_side(rule, index == place.panel, place, out);
    }

    /// On one's own side the distances are real and free of cancellation, and
    /// straight sides have no slope there but their own panel's jump.
    fn on_own_side(&self, rule: &Rule, is_own: bool, place: &Place, out: &mut OnSide) {
        let u = Complex64::new(place.counted(self.panel.is_reversed), 0.0);
        let root = self.panel.root(u);
        let distance_log = self.panel.curve.pole_distance(place.x).norm().ln();
        let parts = self.offsets.iter().zip(&rule.weights);
        let slots = out.values.iter_mut().zip(&mut out.slopes);
        for ((offset, weight), (value, slope)) in parts.zip(slots) {
            *value = FACTOR * weight * (distance_log - offset);
            *slope = FACTOR * weight * place.bend;
        }
        let (mut logs, mut inverses) = ([0.0; MOST_NODES], [Complex64::ZERO; MOST_NODES]);
        for turn in &self.roots {
            let is_principal = *turn == Complex64::ONE;
            let zeta = if is_own && is_principal {
                Complex64::new(place.t, 0.0)
            } else {
                self.local(root * turn)
            };
            self.integrals(rule, zeta, &mut logs, &mut inverses);
            for (value, log) in out.values.iter_mut().zip(&logs).take(rule.order()) {
                *value += FACTOR * log;
            }
        }
        if is_own {
            for (k, slope) in out.slopes.iter_mut().enumerate().take(rule.order()) {
                let unit = (0..rule.order()).map(|m| f64::from(m == k));
                *slope += 0.5 * rule.interpolate(place.t, unit);
            }
        }
    }
}

/// For each node, by how much its rule exceeds the finer one for −ln|c u + d|.
fn fine_misses(panel: &Panel, rule: &Rule) -> Vec<f64> {
    let below_log = |t: &f64| panel.curve.below(panel.u(*t)).norm().ln();
    let mut misses: Vec<f64> = (rule.nodes.iter().zip(&rule.weights))
        .map(|(t, weight)| -weight * below_log(t))
        .collect();
    for (t, weights) in rule.fine_nodes.iter().zip(&rule.fine_weights) {
        let log = below_log(t);
        let slots = misses.iter_mut().zip(weights);
        slots.for_each(|(miss, weight)| *miss += weight * log);
    }
    misses
}

/// What of an effect is wanted.
#[derive(Clone, Copy, Debug)]
pub(super) struct Wanted {
    pub values: bool,
    pub slopes: bool,
}

impl Wanted {
    pub const ALL: Self = Self {
        values: true,
        slopes: true,
    };

    /// What a place's condition looks at.
    pub fn by(place: &Place) -> Self {
        Self {
            values: place.condition != Condition::Flux,
            slopes: place.condition != Condition::Head,
        }
    }
}

/// Potentials and outward slopes on a side for each node of one panel.
#[derive(Clone, Copy, Debug)]
pub(super) struct OnSide {
    pub values: [f64; MOST_NODES],
    pub slopes: [f64; MOST_NODES],
}

impl OnSide {
    pub const NONE: Self = Self {
        values: [0.0; MOST_NODES],
        slopes: [0.0; MOST_NODES],
    };
}

/// The potential −1/(2π) ln|x − pole| and dF/dx of it.
pub(super) fn of_pole(x: Complex64, pole: Complex64) -> (f64, Complex64) {
    let distance = x - pole;
    (-distance.norm().ln() / TAU, FACTOR * distance.inv())
}
