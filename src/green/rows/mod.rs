//! The strip, the half-strip and the box: rows of images that never end, each
//! summed in closed form.
//!
//! Between edges at x = 0 and x = L the images of a well repeat with the
//! period P = 2L (like edges) or 4L (unlike edges). One such row, seen from a
//! distance y, is ln abs(2 sin(κ(z − z₀)/2)) with κ = 2π/P. Written with
//! t = e^(−κ abs(y − y₀)),
//!
//!   2 ln abs(2 sin(κ(z − z₀)/2)) = κ abs(y − y₀) + ln(1 − 2t cos κ(x − x₀) + t²),
//!
//! which neither overflows nor loses digits far from the row. Edges across y
//! make a row of each image yₖ of the well, with sign σₖ; the rows fade like
//! e^(−κ abs(y − yₖ)), and all of them together are the theta function ϑ₁ of
//! the box (DLMF 20.5.10). Where x has a river, the signs of a row add up to
//! nothing and the κ abs(y − y₀) cancel. Where both its edges are barriers,
//! they add up to the flow averaged across the strip, which is that of a
//! one-dimensional aquifer:
//!
//!   G = g(y, y₀)/L − Σ σₖ sⱼ ln(1 − 2tₖ cos κ(x − xⱼ) + tₖ²)/(4π).
//!
//! With barriers all round, G is Neumann's function of the box: its mean is
//! zero and a uniform source 1/(LH) feeds the well, which cancels where
//! pumping and injection balance.
//!
//! Near the well 1 − 2t cos u + t² = (1 − t)² + 4t sin²(u/2) keeps its digits.
//! Accuracy: absolute error ≤ 64ε (1 + κ abs(y − y₀)) + 1e-16, the last term
//! for the rows left out.
//! A box takes its rows along the axis of the shorter period.
//! Cost: a dozen operations a row and one logarithm a pair; a strip is one
//! row, a half-strip two, a square box some 25 (like edges) or 50.
//! Source: Muskat (1937), *Flow of Homogeneous Fluids*, for the strip (from
//! memory); the theta form is classical.

mod pair;
mod stream;

pub use pair::Prepared;

use std::f64::consts::TAU;
use std::ops::Range;

use num_complex::Complex64;

use super::batch;
use super::mirrors::{self, AxisImage};
use super::{Green, Image, Source};
use crate::outline::{Axis, Kind};

/// Rows farther than this many κ⁻¹ add less than e^(−37.5) = 5e-17 each.
const FADED: f64 = 37.5;

/// Up to this many κ⁻¹ of height, e^(κy) needs no exponent of its own.
const SHORT: f64 = 600.0;

/// The Green's function of 0 < x < L, with any edges across y.
#[derive(Clone, Debug)]
pub struct Rows {
    width: f64,
    kinds: [Kind; 2],
    y_axis: Axis,
    /// 2π over the period.
    kappa: f64,
    /// Whether e^(κy) is an ordinary number all over the aquifer.
    is_short: bool,
    /// Whether x and y have changed places.
    is_turned: bool,
}

impl Rows {
    /// The rows between edges of the given kinds at 0 and `width`.
    pub fn new(width: f64, kinds: [Kind; 2], y_axis: Axis) -> Self {
        let kappa = TAU / mirrors::period(width, kinds);
        let is_short = match y_axis {
            Axis::TwoEdges { width_m, .. } => kappa * width_m < SHORT,
            _ => false,
        };
        Self {
            width,
            kinds,
            y_axis,
            kappa,
            is_short,
            is_turned: false,
        }
    }

    /// The rows of a box, along the axis whose period is shorter: the fewest
    /// rows are felt there.
    pub fn of_box(width: f64, kinds: [Kind; 2], height: f64, across: [Kind; 2]) -> Self {
        let axis = |width_m, kinds| Axis::TwoEdges { width_m, kinds };
        if mirrors::period(width, kinds) <= mirrors::period(height, across) {
            return Self::new(width, kinds, axis(height, across));
        }
        Self {
            is_turned: true,
            ..Self::new(height, across, axis(width, kinds))
        }
    }

    /// A place or gradient with x and y in the places they have here.
    fn turned(&self, z: Complex64) -> Complex64 {
        if self.is_turned {
            Complex64::new(z.im, z.re)
        } else {
            z
        }
    }

    /// The number that a side has here.
    fn turned_side(&self, side: usize) -> usize {
        if self.is_turned { (side + 2) % 4 } else { side }
    }

    /// The images of the well's y that are felt inside the aquifer; the well's
    /// own row comes first.
    fn rows_of(&self, y: f64) -> Vec<AxisImage> {
        mirrors::images_within(self.y_axis, y, FADED / self.kappa)
    }

    fn columns_of(&self, x: f64) -> Vec<AxisImage> {
        mirrors::images_of_one_period(self.width, self.kinds, x)
    }

    fn has_no_river_across_x(&self) -> bool {
        self.kinds == [Kind::NoFlow; 2]
    }
}

impl Green for Rows {
    fn value_outside_rim(&self, at: Complex64, pole: Complex64, rim_m: f64) -> f64 {
        batch::single(self, at, pole, rim_m)
    }

    fn gradient(&self, at: Complex64, pole: Complex64) -> Complex64 {
        self.turned(self.slope(self.turned(at), self.turned(pole)))
    }

    fn share(&self, side: usize, along: Range<f64>, pole: Complex64) -> f64 {
        self.flux(self.turned_side(side), along, self.turned(pole))
    }

    fn superpose(&self, sources: &[Source], points: &[Complex64], sums: &mut [f64]) {
        batch::superpose(self, sources, points, sums);
    }

    fn nearest_images(&self, pole: Complex64, count: usize) -> Vec<Image> {
        let pole = self.turned(pole);
        let order = u32::try_from(count).unwrap_or(u32::MAX).min(64);
        let x_axis = Axis::TwoEdges {
            width_m: self.width,
            kinds: self.kinds,
        };
        let rows = mirrors::images_up_to(self.y_axis, pole.im, order);
        let columns = mirrors::images_up_to(x_axis, pole.re, order);
        let mut images = super::product_of(&columns, &rows);
        for image in &mut images {
            image.at = self.turned(image.at);
        }
        super::nearest(self.turned(pole), images, count)
    }
}
