//! E(w) = e^w E₁(w), the exponential integral without its exponential, in the
//! right half-plane.
//!
//! | where | how |
//! |---|---|
//! | abs w ≤ 1.25 | e^w (−γ − ln w − Σ (−w)^k/(k k!)), DLMF 6.6.2 |
//! | beyond | 1/(w + 1 − 1/(w + 3 − 4/(w + 5 − …))), DLMF 6.9.1 |
//!
//! The series loses at most a factor e^(abs w)/abs(E) ≤ 7 of ε to cancellation. The
//! fraction's n-th convergent is Gauss's rule of n points with the weight
//! e^(−t), whose relative error falls as e^(−4 √n Re √w); n is chosen to make that
//! e^(−38) = 3e-17, and each step of it divides by a number of positive real
//! part, so rounding does not grow.
//! Accuracy: relative error ≤ 1e-14 for Re w ≥ 0, w ≠ 0; held against mpmath.
//! Beyond abs w = 1e150 it is taken as 0, where it is below 1e-150.

use num_complex::Complex64;

/// γ, Euler's constant (DLMF 5.2.3).
const EULER: f64 = 0.577_215_664_901_532_9;

/// Up to this distance from 0 the series serves.
const NEAR: f64 = 1.25;

/// Beyond this distance squares overflow.
const FAR: f64 = 1e150;

/// Convergents are taken until they are off by e to the minus this.
const DIGITS: f64 = 38.0;

/// e^w E₁(w) for Re w ≥ 0, w ≠ 0.
pub(super) fn scaled_integral(w: Complex64) -> Complex64 {
    let size = w.re.hypot(w.im);
    if size <= NEAR {
        series(w)
    } else if size < FAR {
        fraction(w)
    } else {
        Complex64::ZERO
    }
}

fn series(w: Complex64) -> Complex64 {
    // 1.25^k/(k k!) < 1e-18 from k = 19 on.
    const TERMS: i32 = 19;
    let mut power = Complex64::ONE;
    let mut sum = Complex64::new(-EULER, 0.0) - w.ln();
    for k in 1..=TERMS {
        power *= -w / f64::from(k);
        sum -= power / f64::from(k);
    }
    w.exp() * sum
}

fn fraction(w: Complex64) -> Complex64 {
    let steps = (DIGITS / (4.0 * w.sqrt().re)).powi(2).ceil() + 3.0;
    let mut k = steps;
    let mut tail = Complex64::ZERO;
    while k > 0.0 {
        tail = k * k / (w + (2.0 * k + 1.0) - tail);
        k -= 1.0;
    }
    (w + 1.0 - tail).inv()
}
