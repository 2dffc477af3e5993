//! Inside and outside a circle that is a river or a lake: one inversion.
//!
//! The image of a well at z₀ stands at R²/z̄₀ with opposite sign:
//!
//!   G = ln( abs(R² − z̄₀z) / (R abs(z − z₀)) )/(2π),
//!   abs(R² − z̄₀z)² = R² abs(z − z₀)² + (R² − abs z²)(R² − abs z₀²),
//!
//! the same inside and outside. Outside, all water comes from the lake.
//! Source: Milne-Thomson (1940), circle theorem.
//! Accuracy: absolute error ≤ 8ε. Cost: one logarithm a pair.

use std::f64::consts::{FRAC_1_PI, TAU};
use std::ops::Range;

use num_complex::Complex64;
use pulp::Simd;

use super::batch::{self, PairKernel, Place, TERMS};
use super::lanes::Lanes;
use super::logarithm::Ratio;
use super::{Green, Image, Source};

/// The Green's function inside or outside a fixed-head circle around 0.
#[derive(Clone, Copy, Debug)]
pub struct Disk {
    radius: f64,
}

impl Disk {
    /// The circle of a given radius; wells on either side.
    pub fn new(radius: f64) -> Self {
        Self { radius }
    }

    /// R² − abs z².
    fn power_of_point(&self, z: Complex64) -> f64 {
        let distance = z.norm_sqr().sqrt();
        (self.radius - distance) * (self.radius + distance)
    }
}

/// A source: its place, and (R² − abs z₀²)/R².
pub struct Prepared {
    place: Place,
    power: f64,
}

impl PairKernel for Disk {
    type Prepared = Prepared;

    const USED: usize = 3;

    #[inline(always)]
    fn terms(&self, at: Complex64, _reference: Complex64) -> [f64; TERMS] {
        let power = self.power_of_point(at);
        [at.re, at.im, power, 0.0, 0.0, 0.0, 0.0, 0.0]
    }

    fn prepare(&self, source: &Source, _reference: Complex64) -> Prepared {
        Prepared {
            place: Place::of(source),
            power: self.power_of_point(source.pole) / (self.radius * self.radius),
        }
    }

    #[inline(always)]
    fn ratio<S: Simd>(&self, prepared: &Prepared, terms: &[Lanes<S>; TERMS]) -> Ratio<S> {
        let [x, y, power, ..] = *terms;
        let [squared, rim_squared] = prepared.place.squares(x, y);
        Ratio::of_well(
            squared,
            rim_squared,
            x.constant(1.0),
            power * power.constant(prepared.power),
        )
    }
}

impl Green for Disk {
    fn value_outside_rim(&self, at: Complex64, pole: Complex64, rim_m: f64) -> f64 {
        batch::single(self, at, pole, rim_m)
    }

    fn gradient(&self, at: Complex64, pole: Complex64) -> Complex64 {
        let conjugate = pole.conj();
        let image = conjugate / (self.radius * self.radius - conjugate * at);
        let slope = -image - 1.0 / (at - pole);
        0.5 * FRAC_1_PI * slope.conj()
    }

    /// Poisson's integral over an arc; `along` holds arc angles.
    fn share(&self, _side: usize, along: Range<f64>, pole: Complex64) -> f64 {
        let distance = pole.norm() / self.radius;
        let ratio = distance.min(distance.recip());
        let steepness = (1.0 + ratio) / (1.0 - ratio);
        let measure = |angle: f64| {
            let turn = angle - pole.arg();
            let whole = (turn / TAU).round();
            let half = 0.5 * (turn - whole * TAU);
            FRAC_1_PI * (steepness * half.sin()).atan2(half.cos()) + whole
        };
        measure(along.end) - measure(along.start)
    }

    fn superpose(&self, sources: &[Source], points: &[Complex64], sums: &mut [f64]) {
        batch::superpose(self, sources, points, sums);
    }

    fn nearest_images(&self, pole: Complex64, count: usize) -> Vec<Image> {
        if pole.norm_sqr() == 0.0 {
            // The image of the centre is infinitely far away.
            return Vec::new();
        }
        let image = Image {
            at: self.radius * self.radius / pole.conj(),
            sign: -1.0,
            order: 1,
        };
        super::nearest(pole, vec![image], count)
    }
}
