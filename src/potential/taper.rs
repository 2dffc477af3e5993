//! The harmonic function that jumps from one side of a corner to the other.
//!
//! Where two sides of different head meet, the density would grow as 1/r.
//! With L = ln(ζ/(ζ − 1)), ζ the parameter of the side that starts there,
//!
//! > −1/π · Im[(1 − ζ) L]
//!
//! is 1 − s on that side (from above) and 1 − θ/π close to the corner, θ the
//! angle from the side; its multiple by J π/α takes up a jump J across the
//! interior angle α. It is the double-layer potential of a linear density, so it
//! is bounded and single-valued everywhere off the side, also at infinity.

use std::f64::consts::{FRAC_1_PI, PI};

use num_complex::Complex64;

use super::curve::Curve;
use super::panel::Place;

/// |ζ| beyond which L is summed as a series in 1/ζ.
const FAR: f64 = 16.0;

/// Terms of that series: 16⁻¹⁴ is below rounding.
const TERMS: u32 = 14;

/// A side's taper, times its height.
#[derive(Clone, Copy, Debug)]
pub(super) struct Taper {
    pub side: usize,
    curve: Curve,
    /// The joint at the start of its side.
    pub corner: usize,
    /// Its value at the start of its side.
    height_m: f64,
}

impl Taper {
    /// The taper that takes up a jump of the head at the start of a side.
    pub fn new(side: usize, curve: Curve, corner: usize, jump_m: f64, angle_rad: f64) -> Self {
        Self {
            side,
            curve,
            corner,
            height_m: jump_m * PI / angle_rad,
        }
    }

    /// Its value on a side of the region.
    pub fn value_on(&self, place: &Place) -> f64 {
        if self.side == place.side {
            self.height_m * place.counted(true)
        } else {
            self.value_at(place.parameter_on(&self.curve, self.corner))
        }
    }

    /// Its value off its side; on it the side of the region counts.
    pub fn value(&self, x: Complex64) -> f64 {
        self.value_at(from_above(self.curve.parameter(x)))
    }

    fn value_at(&self, zeta: Complex64) -> f64 {
        let value = if zeta.norm_sqr() > FAR * FAR {
            let small = zeta.inv();
            ((small - 1.0) * series(small, 1)).im
        } else {
            ((1.0 - zeta) * angle_log(zeta)).im
        };
        -self.height_m * FRAC_1_PI * value
    }

    /// ∂/∂x − i ∂/∂y of it.
    pub fn derivative(&self, x: Complex64) -> Complex64 {
        self.derivative_at(x, from_above(self.curve.parameter(x)))
    }

    /// The same at a place of another side.
    pub fn derivative_on(&self, place: &Place) -> Complex64 {
        self.derivative_at(place.x, place.parameter_on(&self.curve, self.corner))
    }

    fn derivative_at(&self, x: Complex64, zeta: Complex64) -> Complex64 {
        let slope = if zeta.norm_sqr() > FAR * FAR {
            let small = zeta.inv();
            small * small * series(small, 2)
        } else {
            angle_log(zeta) - zeta.inv()
        };
        -Complex64::I * FRAC_1_PI * slope * self.curve.parameter_slope(x) * self.height_m
    }
}

/// Σ zᵏ/(k + first), k ≥ 0, for |z| ≤ 1/FAR: L without cancellation far away,
/// to 1e-16.
fn series(z: Complex64, first: u32) -> Complex64 {
    let terms = (0..TERMS).rev();
    terms.fold(Complex64::ZERO, |sum, k| {
        sum * z + f64::from(first + k).recip()
    })
}

/// A place that rounding put just beyond the side counts as on it.
fn from_above(zeta: Complex64) -> Complex64 {
    const ROUNDING: f64 = 1e-9;
    let is_on_side = zeta.re > 0.0 && zeta.re < 1.0 && zeta.im.abs() < ROUNDING;
    let im = if is_on_side { zeta.im.abs() } else { zeta.im };
    Complex64::new(zeta.re, im)
}

/// ln(ζ/(ζ − 1)), its cut on the interval.
fn angle_log(zeta: Complex64) -> Complex64 {
    let other = zeta - 1.0;
    let norm = |z: Complex64| z.norm().max(f64::MIN_POSITIVE);
    let argument = |z: Complex64| {
        if z.im == 0.0 && z.re < 0.0 {
            PI
        } else {
            z.arg()
        }
    };
    Complex64::new(
        (norm(zeta) / norm(other)).ln(),
        argument(zeta) - argument(other),
    )
}
