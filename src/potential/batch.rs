//! Sums over many places at once, through local expansions.
//!
//! Places are gathered in boxes. Panels and poles more than [`FAR`] radii from
//! a box, all of whose places see their nodes as points, are summed into one
//! Taylor series around its centre c,
//!
//! > Σ q ln(x − y) = Σ q ln(y − c) − Σₙ 1/n · ((x − c)/R)ⁿ Σ q (R/(y − c))ⁿ,
//!
//! the others place by place. With FAR = 3 and [`TERMS`] terms the rest of the
//! series is at most 3⁻³² ≈ 5e-16 of Σ|q|.

use num_complex::Complex64;
use rayon::prelude::*;

use super::kernel::{Effect, FACTOR, Source};
use super::layer::Layer;
use super::legendre::Rule;
use super::solve::Solution;

/// Distance, in radii of a box, from which a panel's nodes enter the series.
const FAR: f64 = 3.0;

/// Terms of the series.
const TERMS: usize = 32;

/// Boxes of fewer places are not divided.
const FEW_PLACES: usize = 128;

/// The circle that holds a panel or a box.
#[derive(Clone, Copy, Debug)]
pub(super) struct Circle {
    pub centre: Complex64,
    pub radius: f64,
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
        let zones = self.near_zones();
        let mut boxes = Vec::new();
        divide(places, (0..places.len()).collect(), &mut boxes);
        let parts: Vec<Vec<f64>> = boxes
            .par_iter()
            .map(|members| self.values_in_box(layer, poles, &zones, places, members))
            .collect();
        for (members, values) in boxes.iter().zip(parts) {
            for (index, value) in members.iter().zip(values) {
                if let Some(sum) = sums.get_mut(*index) {
                    *sum += value;
                }
            }
        }
    }

    fn near_zones(&self) -> Vec<NearZone> {
        let sources = self.system.sources.iter();
        sources
            .map(|source| NearZone::of(source, &self.system.mesh.rule))
            .collect()
    }

    fn values_in_box(
        &self,
        layer: &Layer,
        poles: &[RimmedPole],
        zones: &[NearZone],
        places: &[Complex64],
        members: &[usize],
    ) -> Vec<f64> {
        let places: Vec<Complex64> = members
            .iter()
            .filter_map(|index| places.get(*index).copied())
            .collect();
        let mut series = Series::new(circle_of(&places, 1.0));
        let near = self.split_panels(layer, zones, &places, &mut series);
        let near_poles = split_poles(poles, &mut series);
        let mut effect = Effect::NONE;
        let value = |x: &Complex64| {
            let mut sum = series.value(*x) + self.smooth_value(layer, *x);
            for (source, block) in &near {
                source.at(&self.system.mesh.rule, *x, &mut effect);
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

    /// Enters the panels far from all places into a series; returns the others.
    fn split_panels<'a>(
        &'a self,
        layer: &'a Layer,
        zones: &[NearZone],
        places: &[Complex64],
        series: &mut Series,
    ) -> Vec<(&'a Source, &'a [f64])> {
        let rule = &self.system.mesh.rule;
        let mut near = Vec::new();
        let mut panels = self.system.sources.iter().zip(zones);
        let mut blocks = layer.densities.chunks(rule.order());
        let stretches = self.system.mesh.stretches.iter().zip(&self.system.hubs);
        for ((stretch, hub), at_hub) in stretches.zip(&layer.at_hubs) {
            let count = stretch.panels.len();
            let here = panels.by_ref().take(count).zip(blocks.by_ref().take(count));
            match hub.as_ref().filter(|hub| series.is_far(&hub.near_zone())) {
                Some(hub) => {
                    series.add_nodes(&hub.source, &self.system.hub_rule, at_hub);
                    here.for_each(drop);
                }
                None => {
                    for ((source, zone), block) in here {
                        match zone.seen_from(source, rule, series, places) {
                            Seen::AsPoints => series.add_nodes(source, rule, block),
                            Seen::AsFinePoints => series.add_fine_nodes(source, rule, block),
                            Seen::Near => near.push((source, block)),
                        }
                    }
                }
            }
        }
        near
    }
}

/// How the places of a box see a panel.
enum Seen {
    /// As its nodes.
    AsPoints,
    /// As the nodes of the finer rule.
    AsFinePoints,
    /// Place by place.
    Near,
}

/// Where places do not see a panel's nodes as points.
enum NearZone {
    /// Within the first circle; nor those of the finer rule within the second.
    Circles([Circle; 2]),
    /// Somewhere around the panel, whose nodes lie in this circle.
    Unknown(Circle),
}

impl NearZone {
    fn of(source: &Source, rule: &Rule) -> Self {
        match source.near_circles(rule) {
            Some((centre, radii)) => Self::Circles(radii.map(|radius| Circle { centre, radius })),
            None => Self::Unknown(circle_of(&source.nodes, 1.1)),
        }
    }

    /// How a box's places see the panel, where the series around it takes it.
    fn seen_from(
        &self,
        source: &Source,
        rule: &Rule,
        series: &Series,
        places: &[Complex64],
    ) -> Seen {
        match self {
            Self::Circles([points, _]) if series.is_far(points) => Seen::AsPoints,
            Self::Circles([_, fine]) if series.is_far(fine) => Seen::AsFinePoints,
            Self::Unknown(circle)
                if series.is_far(circle) && places.iter().all(|x| source.is_far_from(rule, *x)) =>
            {
                Seen::AsPoints
            }
            _ => Seen::Near,
        }
    }
}

/// Enters the poles far from a box into its series; returns the others.
fn split_poles<'a>(poles: &'a [RimmedPole], series: &mut Series) -> Vec<&'a RimmedPole> {
    let mut near = Vec::new();
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
            near.push(pole);
        }
    }
    near
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

    /// Whether all of a circle is far from the box, and all of the box outside it.
    fn is_far(&self, circle: &Circle) -> bool {
        let distance = (circle.centre - self.circle.centre).norm() - circle.radius;
        distance > FAR * self.circle.radius && distance > 0.0
    }

    /// Adds the nodes of a panel's finer rule as points.
    fn add_fine_nodes(&mut self, source: &Source, rule: &Rule, densities: &[f64]) {
        for (node, weights) in source.fine_nodes.iter().zip(&rule.fine_weights) {
            let parts = weights.iter().zip(densities);
            let charge: f64 = parts.map(|(weight, density)| weight * density).sum();
            self.add(Charge {
                at: *node,
                factor: FACTOR * charge,
            });
        }
    }

    /// Adds a panel's nodes as points.
    fn add_nodes(&mut self, source: &Source, rule: &Rule, densities: &[f64]) {
        let nodes = source.nodes.iter().zip(&rule.weights).zip(densities);
        for ((node, weight), density) in nodes {
            self.add(Charge {
                at: *node,
                factor: FACTOR * weight * density,
            });
        }
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
