//! The half-plane and the quarter-plane with at least one river: finitely
//! many images.
//!
//! Method: mirror the well in each edge; a river turns the sign, a barrier
//! keeps it (Ferris et al. 1962, USGS Water-Supply Paper 1536-E, "Theory of
//! images"). With the squared distances
//!
//!   A of the well (a, b), B of (−a, b), C of (a, −b), D of (−a, −b)
//!
//! | edges | 4π G |
//! |---|---|
//! | river x = 0 | ln(B/A), B − A = 4xa |
//! | rivers x = 0 and y = 0 | ln(BC/AD), BC − AD = 16 xayb |
//! | river x = 0, barrier y = 0 | ln(BD/AC), D − C = 4xa |
//! | barrier x = 0, river y = 0 | ln(CD/AB), C − A = D − B = 4yb |
//!
//! The differences are products, so a small drawdown beside a river keeps its
//! digits. Without a river there is no steady state: see `influence`.
//! Accuracy: absolute error ≤ 8ε, relative to the size of 1 + G.
//! Cost: one logarithm a pair.

use std::f64::consts::FRAC_1_PI;
use std::ops::Range;

use num_complex::Complex64;
use pulp::Simd;

use super::batch::{self, PairKernel, Place, TERMS};
use super::lanes::Lanes;
use super::logarithm::Ratio;
use super::{Green, Image, Source};

/// Which edges the corner has; the aquifer is x > 0, and y > 0 where there is
/// an edge on y = 0.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Corner {
    /// A river on x = 0.
    River,
    /// Rivers on x = 0 and y = 0.
    TwoRivers,
    /// A river on x = 0 and a barrier on y = 0.
    RiverThenBarrier,
    /// A barrier on x = 0 and a river on y = 0.
    BarrierThenRiver,
}

impl Corner {
    /// The well and its images: place, sign, order.
    fn images(self, pole: Complex64) -> Vec<Image> {
        let (x_sign, y_sign) = match self {
            Self::River => (-1.0, None),
            Self::TwoRivers => (-1.0, Some(-1.0)),
            Self::RiverThenBarrier => (-1.0, Some(1.0)),
            Self::BarrierThenRiver => (1.0, Some(-1.0)),
        };
        let image = |at, sign, order| Image { at, sign, order };
        let mut images = vec![image(pole, 1.0, 0), image(-pole.conj(), x_sign, 1)];
        if let Some(y_sign) = y_sign {
            images.push(image(pole.conj(), y_sign, 1));
            images.push(image(-pole, x_sign * y_sign, 2));
        }
        images
    }
}

impl PairKernel for Corner {
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
        let one = x.constant(1.0);
        let (across_x, across_y) = (
            x * x.constant(4.0 * prepared.x),
            y * y.constant(4.0 * prepared.y),
        );
        match self {
            Self::River => Ratio::of_well(squared, rim_squared, one, across_x),
            Self::TwoRivers => {
                let diagonal = squared + across_x + across_y;
                Ratio::of_well(squared, rim_squared, diagonal, across_x * across_y)
            }
            Self::RiverThenBarrier => Ratio::of_well(squared, rim_squared, one, across_x)
                .times(Ratio::of_image(squared + across_y, across_x)),
            Self::BarrierThenRiver => Ratio::of_well(squared, rim_squared, one, across_y)
                .times(Ratio::of_image(squared + across_x, across_y)),
        }
    }
}

impl Green for Corner {
    fn value_outside_rim(&self, at: Complex64, pole: Complex64, rim_m: f64) -> f64 {
        batch::single(self, at, pole, rim_m)
    }

    fn gradient(&self, at: Complex64, pole: Complex64) -> Complex64 {
        // G = −Σ σ ln abs(z − z_j)/2π; its gradient is the conjugate of the
        // derivative of the complex logarithm.
        let slope: Complex64 = self
            .images(pole)
            .iter()
            .map(|image| image.sign / (at - image.at))
            .sum();
        -0.5 * FRAC_1_PI * slope.conj()
    }

    fn share(&self, side: usize, along: Range<f64>, pole: Complex64) -> f64 {
        let is_barrier = match self {
            Self::River | Self::TwoRivers => false,
            Self::RiverThenBarrier => side == 1,
            Self::BarrierThenRiver => side == 0,
        };
        if is_barrier {
            return 0.0;
        }
        // The stream function −Σ σ arg(z − z_j)/2π along the side.
        let turns = |across: &dyn Fn(&Image) -> (f64, f64)| {
            self.images(pole)
                .iter()
                .map(|image| {
                    let (distance, position) = across(image);
                    let angle = |end: f64| ((end - position) / distance).atan();
                    image.sign * (angle(along.end) - angle(along.start))
                })
                .sum::<f64>()
        };
        let swing = match side {
            0 => turns(&|image| (image.at.re, image.at.im)),
            _ => turns(&|image| (image.at.im, image.at.re)),
        };
        0.5 * FRAC_1_PI * swing
    }

    fn superpose(&self, sources: &[Source], points: &[Complex64], sums: &mut [f64]) {
        batch::superpose(self, sources, points, sums);
    }

    fn nearest_images(&self, pole: Complex64, count: usize) -> Vec<Image> {
        super::nearest(pole, self.images(pole), count)
    }
}
