//! Source: NIST Digital Library of Mathematical Functions, chapter 20 (theta
//! functions), after Abramowitz & Stegun (1964), chapter 16. The theta series
//! is summed here, checked against mpmath's values
//! (`tests/references/theta.py`), and the library's boxes against it.

use std::f64::consts::{FRAC_1_PI, PI};

use num_complex::Complex64;

use crate::shapes::{axes, axis, green};
use crate::table::rows;

/// DLMF 20.2.1: θ₁(z, q) = 2 Σ (−1)ⁿ q^((n + ½)²) sin((2n + 1) z).
fn theta_1(z: Complex64, q: f64) -> Complex64 {
    (0..60)
        .map(|n| {
            let half = f64::from(n) + 0.5;
            let sign = if n % 2 == 0 { 2.0 } else { -2.0 };
            (2.0 * half * z).sin() * q.powf(half * half) * sign
        })
        // Terms past underflow of q are 0 · ∞ where the sine overflows.
        .take_while(|term| term.re.is_finite() && term.im.is_finite())
        .sum()
}

/// DLMF 20.4.6: θ₁′(0, q) = θ₂(0, q) θ₃(0, q) θ₄(0, q), by 20.2.2–20.2.4.
fn theta_1_slope_at_0(q: f64) -> f64 {
    let powers = |offset: f64, sign: f64| -> f64 {
        (0..60)
            .map(|n| sign.powi(n) * 2.0 * q.powf((f64::from(n) + offset).powi(2)))
            .sum()
    };
    let theta_2 = powers(0.5, 1.0);
    let (theta_3, theta_4) = (powers(0.0, 1.0) - 1.0, powers(0.0, -1.0) - 1.0);
    theta_2 * theta_3 * theta_4
}

/// |z| ≤ 3 turns rounding of 2z(n + ½) into 1e-15; the series adds ε a term.
#[test]
fn the_theta_series_agrees_with_mpmath() {
    for row in rows("theta") {
        let z = Complex64::new(row.number("re"), row.number("im"));
        let ours = theta_1(z, row.number("q")).norm().ln();
        let theirs = row.number("ln_abs_theta1");
        assert!(
            (ours - theirs).abs() <= 1e-14 * theirs.abs().max(1.0) * 10.0,
            "ln |θ₁({z}, {})| = {ours}, mpmath {theirs}",
            row.text("q")
        );
    }
}

/// Four rivers around a box a × b: −(1/2π) Σ ± ln |θ₁(π(z − z_j)/2a, q)| with
/// q = exp(−πb/a) over the well and its three images. The linear terms of the
/// doubly periodic kernel cancel.
#[test]
fn a_box_between_four_rivers_is_four_theta_functions() {
    let (width, height) = (900.0, 1200.0);
    let q = (-PI * height / width).exp();
    let green = green(&axes(axis("DD", width), axis("DD", height)));
    let well = Complex64::new(320.0, 450.0);
    let images = [
        (well, 1.0),
        (-well.conj(), -1.0),
        (well.conj(), -1.0),
        (-well, 1.0),
    ];
    for (x, y) in [(500.0, 700.0), (3.0, 1100.0), (880.0, 15.0)] {
        let at = Complex64::new(x, y);
        let theirs: f64 = images
            .iter()
            .map(|(place, sign)| -sign * theta_1(PI * (at - place) / (2.0 * width), q).norm().ln())
            .sum::<f64>()
            * 0.5
            * FRAC_1_PI;
        let ours = green.value(at, well);
        // Four logarithms of up to 10, each good to 1e-14 by the test above.
        assert!((ours - theirs).abs() < 1e-13, "{at}: {ours}, θ {theirs}");
    }
}

/// The regular part at the well replaces its own term by ln(πθ₁′(0)/2a).
#[test]
fn the_regular_part_of_a_box_is_the_slope_of_theta_at_zero() {
    let (width, height) = (900.0, 1200.0);
    let q = (-PI * height / width).exp();
    let green = green(&axes(axis("DD", width), axis("DD", height)));
    let well = Complex64::new(320.0, 450.0);
    let own = -(PI / (2.0 * width) * theta_1_slope_at_0(q)).ln();
    let others: f64 = [(-well.conj(), -1.0), (well.conj(), -1.0), (-well, 1.0)]
        .iter()
        .map(|(place, sign)| -sign * theta_1(PI * (well - place) / (2.0 * width), q).norm().ln())
        .sum();
    let theirs = (own + others) * 0.5 * FRAC_1_PI;
    let ours = green.regular_part(well);
    assert!((ours - theirs).abs() < 1e-13, "{ours}, θ {theirs}");
}

/// A square of side a has the conformal radius a/K at its centre, with
/// K = K(k = 1/√2) = Γ(¼)²/(4√π) (A&S 17.3, DLMF 19.6), and the regular part
/// is its logarithm over 2π. By hand from the Schwarz–Christoffel map.
#[test]
fn the_centre_of_a_square_between_rivers_has_the_conformal_radius_of_the_lemniscate() {
    const COMPLETE_ELLIPTIC_INTEGRAL: f64 = 1.854_074_677_301_371_9;
    let side = 3.0;
    let green = green(&axes(axis("DD", side), axis("DD", side)));
    let ours = green.regular_part(Complex64::new(0.5 * side, 0.5 * side));
    let conformal_radius = side / COMPLETE_ELLIPTIC_INTEGRAL;
    let theirs = conformal_radius.ln() * 0.5 * FRAC_1_PI;
    assert!((ours - theirs).abs() < 1e-14, "{ours}, {theirs}");
}
