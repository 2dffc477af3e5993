//! The open plane and outlines of barriers alone: Thiem's formula with an
//! assumed radius of influence.
//!
//! Without a fixed head a steady cone has no edge of its own. With an
//! influence radius R the well and each of its images lower the head by
//! Q/(2πT) ln(R/r) inside R and not at all beyond (Thiem 1906, superposed).
//! Only images within R of the aquifer count, so the sum is finite.
//!
//! A wedge between barriers whose angle does not divide 180° has no image
//! wells. There the same sum is continued to any angle: its 2π/α wells
//! together lower the head by Q/(2πT) (2m ln R − ln abs(z^m − z₀^m)
//! − ln abs(z^m − z̄₀^m)), m = π/α, and not at all where that is negative.
//! For the angles that have images both agree wherever all images are within R.
//!
//! R is an assumption, not a boundary: far from the wells the answer is no
//! better than R. Accuracy of the formula itself: absolute error ≤ 8ε an image.

use std::f64::consts::{FRAC_1_PI, PI};
use std::ops::Range;

use num_complex::Complex64;
use pulp::Simd;

use super::batch::{self, PairKernel, Place, TERMS};
use super::lanes::Lanes;
use super::logarithm::Ratio;
use super::wedge::images_in_wedge;
use super::{Green, GreenError, Image, Source, mirrors};
use crate::outline::{Axis, Kind, Shape, argument_in_wedge};

/// More images than this for one well are refused.
const MOST_IMAGES: f64 = 10_000.0;

/// Thiem's cone of a well and its images in barriers.
#[derive(Clone, Copy, Debug)]
pub struct Influence {
    shape: Shape,
    radius: f64,
}

impl Influence {
    /// An outline of barriers alone, or none, with an influence radius.
    ///
    /// # Errors
    /// `TooManyImages` where the radius is so much larger than the outline's
    /// width that the sum over images would make no sense.
    pub fn new(shape: Shape, radius_m: f64) -> Result<Self, GreenError> {
        let across = |axis: Axis| match axis {
            Axis::TwoEdges { width_m, .. } => 2.0 * radius_m / width_m,
            _ => 2.0,
        };
        let images = match shape {
            Shape::Axes { x, y } => across(x) * across(y),
            Shape::Wedge { angle_rad, .. } => 2.0 * PI / angle_rad,
            Shape::CloggedHalfPlane { .. }
            | Shape::Disk { .. }
            | Shape::DiskExterior { .. }
            | Shape::General => 1.0,
        };
        if images > MOST_IMAGES {
            return Err(GreenError::TooManyImages {
                images,
                most: MOST_IMAGES,
            });
        }
        Ok(Self {
            shape,
            radius: radius_m,
        })
    }

    /// The well and those of its images that may be felt in the aquifer; none
    /// where the wedge's angle has no images.
    fn images(&self, pole: Complex64) -> Vec<Image> {
        match self.shape {
            Shape::Axes { x, y } => super::product_of(
                &mirrors::images_within(x, pole.re, self.radius),
                &mirrors::images_within(y, pole.im, self.radius),
            ),
            Shape::Wedge { angle_rad, kinds } => images_in_wedge(angle_rad, kinds, pole),
            Shape::CloggedHalfPlane { .. }
            | Shape::Disk { .. }
            | Shape::DiskExterior { .. }
            | Shape::General => Vec::new(),
        }
    }

    /// The angle of a wedge without image wells.
    fn fan(&self, pole: Complex64) -> Option<Fan> {
        match self.shape {
            Shape::Wedge { angle_rad, kinds }
                if images_in_wedge(angle_rad, kinds, pole).is_empty() =>
            {
                Some(Fan {
                    angle: angle_rad,
                    radius: self.radius,
                })
            }
            _ => None,
        }
    }
}

/// The continued sum in a wedge without image wells.
struct Fan {
    angle: f64,
    radius: f64,
}

impl Fan {
    /// 2π G, before it is cut off at zero.
    fn cone(&self, at: Complex64, pole: Complex64, rim_m: f64) -> f64 {
        let m = PI / self.angle;
        let theta = m * argument_in_wedge(at, self.angle);
        let theta_0 = m * argument_in_wedge(pole, self.angle);
        let rise = m * (at.norm().max(1e-300) / pole.norm()).ln();
        // abs(z^m − z₀^m)² = 2 abs(z z₀)^m (cosh rise − cos Δθ), and
        // ln 2(cosh rise − cos Δθ) = abs rise + ln(1 − 2t cos Δθ + t²).
        let t = (-rise.abs()).exp();
        let half = (0.5 * (theta - theta_0)).sin();
        let rim = (m * rim_m / pole.norm()).powi(2);
        let well = ((1.0 - t).powi(2) + 4.0 * t * half * half).max(t * rim);
        let mirrored = 1.0 - 2.0 * t * (theta + theta_0).cos() + t * t;
        let scale = |distance: f64| m * (self.radius / distance).ln();
        scale(at.norm().max(1e-300)) + scale(pole.norm())
            - rise.abs()
            - 0.5 * (well.ln() + mirrored.ln())
    }

    fn value(&self, at: Complex64, pole: Complex64, rim_m: f64) -> f64 {
        0.5 * FRAC_1_PI * self.cone(at, pole, rim_m).max(0.0)
    }

    fn gradient(&self, at: Complex64, pole: Complex64) -> Complex64 {
        if self.cone(at, pole, 0.0) <= 0.0 {
            return Complex64::new(0.0, 0.0);
        }
        let m = PI / self.angle;
        let power = |z: Complex64| {
            let argument = argument_in_wedge(z, self.angle);
            Complex64::from_polar((z.norm() / pole.norm()).powf(m), m * argument)
        };
        let (z, z_0) = (power(at), power(pole));
        let slope = m * z / at * (1.0 / (z - z_0) + 1.0 / (z - z_0.conj()));
        -0.5 * FRAC_1_PI * slope.conj()
    }
}

impl PairKernel for Influence {
    type Prepared = Place;

    const USED: usize = 2;

    #[inline(always)]
    fn terms(&self, at: Complex64, _reference: Complex64) -> [f64; TERMS] {
        [at.re, at.im, 0.0, 0.0, 0.0, 0.0, 0.0, 0.0]
    }

    fn prepare(&self, source: &Source, _reference: Complex64) -> Place {
        Place::of(source)
    }

    #[inline(always)]
    fn ratio<S: Simd>(&self, prepared: &Place, terms: &[Lanes<S>; TERMS]) -> Ratio<S> {
        let [x, y, ..] = *terms;
        let [squared, rim_squared] = prepared.squares(x, y);
        let squared = squared.max(rim_squared);
        let inside = x.constant(self.radius * self.radius) - squared;
        Ratio {
            denominator: squared,
            difference: inside.max(x.constant(0.0)),
        }
    }
}

impl Green for Influence {
    fn value_outside_rim(&self, at: Complex64, pole: Complex64, rim_m: f64) -> f64 {
        if let Some(fan) = self.fan(pole) {
            return fan.value(at, pole, rim_m);
        }
        let images = self.images(pole);
        let of_image = |image: &Image| {
            let rim_m = if image.order == 0 { rim_m } else { 0.0 };
            batch::single(self, at, image.at, rim_m)
        };
        images.iter().map(of_image).sum()
    }

    fn gradient(&self, at: Complex64, pole: Complex64) -> Complex64 {
        if let Some(fan) = self.fan(pole) {
            return fan.gradient(at, pole);
        }
        let slope: Complex64 = self
            .images(pole)
            .iter()
            .filter(|image| (at - image.at).norm() < self.radius)
            .map(|image| 1.0 / (at - image.at))
            .sum();
        -0.5 * FRAC_1_PI * slope.conj()
    }

    /// No river, no share.
    fn share(&self, _side: usize, _along: Range<f64>, _pole: Complex64) -> f64 {
        0.0
    }

    fn superpose(&self, sources: &[Source], points: &[Complex64], sums: &mut [f64]) {
        let mut wells_and_images = Vec::new();
        for source in sources {
            if let Some(fan) = self.fan(source.pole) {
                for (point, sum) in points.iter().zip(sums.iter_mut()) {
                    *sum += source.strength_m * fan.value(*point, source.pole, source.rim_m);
                }
            }
            wells_and_images.extend(self.images(source.pole).iter().map(|image| Source {
                pole: image.at,
                strength_m: source.strength_m * image.sign,
                rim_m: if image.order == 0 { source.rim_m } else { 0.0 },
            }));
        }
        batch::superpose(self, &wells_and_images, points, sums);
    }

    fn nearest_images(&self, pole: Complex64, count: usize) -> Vec<Image> {
        super::nearest(pole, self.images(pole), count)
    }
}

/// Whether an outline has no fixed head and therefore needs an influence
/// radius; a closed basin does not, it has to be in balance.
pub(super) fn needs_radius(shape: &Shape) -> bool {
    // A general outline has a river or is closed.
    let closed = matches!(
        shape,
        Shape::Axes {
            x: Axis::TwoEdges { .. },
            y: Axis::TwoEdges { .. }
        } | Shape::General
    );
    !closed && !shape.side_kinds().contains(&Kind::FixedHead)
}
