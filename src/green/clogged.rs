//! The half-plane beside a river with a clogged bank.
//!
//! On x = 0 the drawdown obeys ∂G/∂x = G/b, b being the bank's skin: the
//! head lost in the bank is proportional to the inflow. With the well at z₀,
//! ζ = z + z̄₀ seen from its mirrored place, r = abs(z − z₀), r' = abs ζ and
//! w = ζ/b,
//!
//!   2π G = ln(r'/r) + 2 Re E(w),  E(w) = e^w E₁(w) = ∫₀^∞ e^(−t)/(w + t) dt.
//!
//! Both parts are positive, so nothing cancels; E is computed as it stands and
//! never overflows (`scaled_integral`). Since 2 Re E = −2 ln r' + 2 ∫ e^(−t) ln abs(ζ + bt) dt,
//! the images are one of sign + at the mirrored place and a line of sinks of
//! strength 2 in all, which fades behind it as e^(−t) at the distance bt.
//! The river gives Re E((x₀ + i(y − y₀))/b)/(πb) a metre, and all of the water.
//! Source: Hantush (1965), *Journal of Geophysical Research* 70, 2829–2838, for
//! the bank (from memory); G from its Fourier integral.
//! Accuracy: relative error ≤ 2e-14, times the logarithm's share of G.
//! Cost: a logarithm and E, 10 to 120 complex divisions, a pair.

mod scaled_integral;

use std::f64::consts::FRAC_1_PI;
use std::ops::Range;

use num_complex::Complex64;

use super::batch;
use super::corner::Corner;
use super::{Green, Image, Source};
use scaled_integral::scaled_integral;

/// The Green's function of x > 0 behind a clogged bank on x = 0.
#[derive(Clone, Copy, Debug)]
pub struct Clogged {
    skin: f64,
}

impl Clogged {
    /// A bank of skin b > 0, metres.
    pub fn new(skin: f64) -> Self {
        Self { skin }
    }

    /// What the bank adds to the G of a clean one: Re E(w)/π.
    fn added(&self, at: Complex64, pole: Complex64) -> f64 {
        FRAC_1_PI * scaled_integral((at + pole.conj()) / self.skin).re
    }
}

impl Green for Clogged {
    fn value_outside_rim(&self, at: Complex64, pole: Complex64, rim_m: f64) -> f64 {
        batch::single(&Corner::River, at, pole, rim_m) + self.added(at, pole)
    }

    /// dE/dw = E − 1/w.
    fn gradient(&self, at: Complex64, pole: Complex64) -> Complex64 {
        let mirrored = at + pole.conj();
        let bank = 2.0 * scaled_integral(mirrored / self.skin) / self.skin;
        let slope = bank - mirrored.inv() - (at - pole).inv();
        0.5 * FRAC_1_PI * slope.conj()
    }

    /// ∫ Re E dy/(πb) = Im[E(w) + ln w]/π along the bank.
    fn share(&self, _side: usize, along: Range<f64>, pole: Complex64) -> f64 {
        let stream = |end: f64| {
            let turn = (end - pole.im).atan2(pole.re);
            if end.is_infinite() {
                return turn;
            }
            turn + scaled_integral(Complex64::new(pole.re, end - pole.im) / self.skin).im
        };
        FRAC_1_PI * (stream(along.end) - stream(along.start))
    }

    fn superpose(&self, sources: &[Source], points: &[Complex64], sums: &mut [f64]) {
        batch::superpose(&Corner::River, sources, points, sums);
        for (point, sum) in points.iter().zip(sums) {
            *sum += sources
                .iter()
                .map(|source| source.strength_m * self.added(*point, source.pole))
                .sum::<f64>();
        }
    }

    /// The one image well; the line of sinks behind it is none.
    fn nearest_images(&self, pole: Complex64, count: usize) -> Vec<Image> {
        let image = Image {
            at: -pole.conj(),
            sign: 1.0,
            order: 1,
        };
        super::nearest(pole, vec![image], count)
    }
}
