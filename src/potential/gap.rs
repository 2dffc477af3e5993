//! The harmonic function that is linear between two half-lines side by side.
//!
//! Two parallel half-lines with different heads enclose, far away, a linear
//! head. With zA and zB the places seen from their starts, which stand abreast,
//! turned so that both half-lines are positive, and L their distance,
//!
//! > Φ = −zA ln(−zA) + zB ln(−zB),   zB = zA − iL,
//!
//! has the real part π(L − 2y) far between them and stays bounded everywhere
//! else; it is the potential of a uniform charge on the one half-line and its
//! opposite on the other. Its multiple by −b/(2π) rises by b a metre across.

use std::f64::consts::{PI, TAU};

use num_complex::Complex64;

use super::mesh::Place;

/// Places this close beyond a half-line count as on it, as a share of their
/// distance from its start.
const ROUNDING: f64 = 1e-9;

/// Distance, in widths, beyond which Φ is written so that it does not cancel.
const FAR: f64 = 16.0;

/// A linear head between a half-line that goes out and the next that comes in.
#[derive(Clone, Copy, Debug)]
pub(super) struct Gap {
    /// The side that goes out.
    pub out: usize,
    /// The side that comes in, to the left of it.
    pub back: usize,
    /// Start of the half-line that goes out.
    pub start: Complex64,
    /// Unit number to infinity.
    pub direction: Complex64,
    /// L, metres.
    pub width_m: f64,
    /// b, the rise a metre from the one half-line to the other.
    pub rise: f64,
}

/// A place seen from both starts, and the arguments of −zA and −zB.
struct Seen {
    a: Complex64,
    b: Complex64,
    turns: [f64; 2],
}

impl Seen {
    /// ln(−zA) and ln(−zB); finite at the starts, where they are multiplied by
    /// zero.
    fn logarithms(&self) -> [Complex64; 2] {
        let logarithm =
            |z: Complex64, turn| Complex64::new(z.norm().max(f64::MIN_POSITIVE).ln(), turn);
        [
            logarithm(self.a, self.turns[0]),
            logarithm(self.b, self.turns[1]),
        ]
    }
}

impl Gap {
    /// Its value at a place.
    pub fn value(&self, x: Complex64) -> f64 {
        self.scaled(self.potential(&self.seen(x))).re
    }

    /// Its value at a place of a side.
    pub fn value_on(&self, place: &Place) -> f64 {
        self.scaled(self.potential(&self.seen_on(place))).re
    }

    /// ∂/∂x − i ∂/∂y at a place.
    pub fn derivative(&self, x: Complex64) -> Complex64 {
        self.scaled(self.logarithm(&self.seen(x))) * self.direction.conj()
    }

    /// The same at a place of a side.
    pub fn derivative_on(&self, place: &Place) -> Complex64 {
        self.scaled(self.logarithm(&self.seen_on(place))) * self.direction.conj()
    }

    /// Its value far away in a direction that does not lie between the two.
    pub fn far_value(&self, direction: Complex64) -> f64 {
        let turn = (-direction * self.direction.conj()).arg();
        -self.rise / TAU * self.width_m * turn
    }

    fn scaled(&self, value: Complex64) -> Complex64 {
        value * (-self.rise / TAU)
    }

    /// Φ, far away as −iL ln(−zA) + zB ln(zB/zA), which does not cancel there.
    fn potential(&self, seen: &Seen) -> Complex64 {
        let [first, second] = seen.logarithms();
        if seen.a.norm() < FAR * self.width_m {
            seen.b * second - seen.a * first
        } else {
            Complex64::new(0.0, -self.width_m) * first + seen.b * self.logarithm(seen)
        }
    }

    /// ln(−zB) − ln(−zA), each cut along its half-line.
    fn logarithm(&self, seen: &Seen) -> Complex64 {
        if seen.a.norm() < FAR * self.width_m {
            let [first, second] = seen.logarithms();
            return second - first;
        }
        let ratio = Complex64::new(0.0, -self.width_m) / seen.a;
        let principal = ln_1p(ratio);
        let turned = (seen.turns[1] - seen.turns[0] - principal.im) / TAU;
        Complex64::new(principal.re, principal.im + TAU * turned.round())
    }

    fn seen(&self, x: Complex64) -> Seen {
        let a = (x - self.start) * self.direction.conj();
        let b = Complex64::new(a.re, a.im - self.width_m);
        let slack = ROUNDING * a.norm();
        // Between the two a lies above its half-line and b below its own.
        let turn = |z: Complex64, above: f64| {
            if z.re > 0.0 && z.im.abs() <= slack {
                -PI * above
            } else {
                (-z).arg()
            }
        };
        Seen {
            turns: [turn(a, 1.0), turn(b, -1.0)],
            a,
            b,
        }
    }

    /// On the half-lines themselves the distance across is exact.
    fn seen_on(&self, place: &Place) -> Seen {
        let along = ((place.x - self.start) * self.direction.conj()).re;
        let width = Complex64::new(0.0, self.width_m);
        let along = Complex64::new(along, 0.0);
        if place.side == self.out {
            let b = along - width;
            Seen {
                a: along,
                b,
                turns: [-PI, (-b).arg()],
            }
        } else if place.side == self.back {
            let a = along + width;
            Seen {
                a,
                b: along,
                turns: [(-a).arg(), PI],
            }
        } else {
            self.seen(place.x)
        }
    }
}

/// ln(1 + z) without cancellation.
fn ln_1p(z: Complex64) -> Complex64 {
    let squared = z.re * (2.0 + z.re) + z.im * z.im;
    Complex64::new(0.5 * squared.ln_1p(), z.im.atan2(1.0 + z.re))
}
