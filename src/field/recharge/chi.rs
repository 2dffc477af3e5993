//! Legendre's chi functions χ_s(z) = Σ z^n/n^s over odd n, s = 2 and 3, of
//! z = e^w, in the half-plane Re w ≤ 0.
//!
//! They sum the sine series of a parabola. For abs Im w ≤ π/2 (the rest follows from
//! χ(−z̄) = −conj χ(z)):
//!
//! | where | how |
//! |---|---|
//! | Re w < −0.6 | the series itself: z^n/n³ < 1e-17 from n = 47 on |
//! | Re w ≥ −0.6 | χ₃ = 7ζ(3)/8 + π²w/8 + (w²/4)(3/2 − ln(−w/2)) + Σ cⱼ w^(2j+2) |
//!
//! cⱼ = (−1)^(j+1) η(2j)/(π^(2j) 2j (2j+1)(2j+2)) with Dirichlet's η. The
//! expansion follows from that of the polylogarithms (DLMF 25.12.12) by
//! χ₃(z) = Li₃(z) − Li₃(z²)/8, and converges for abs w < π; here abs w ≤ 1.69,
//! and 24 terms leave 2e-18. χ₂ = dχ₃/dw.
//! Accuracy: absolute error ≤ 8ε of χ(1). Cost: some 25 complex products.

use std::f64::consts::{FRAC_PI_2, PI};

use num_complex::Complex64;

/// Where the expansion about w = 0 takes over from the series.
const NEAR: f64 = -0.6;

/// η(2j) = Σ (−1)^(n+1)/n^(2j), j = 1, 2, …
const ETA: [f64; 24] = [
    0.822_467_033_424_113_2,
    0.947_032_829_497_245_9,
    0.985_551_091_297_435_1,
    0.996_233_001_852_647_8,
    0.999_039_507_598_271_5,
    0.999_757_685_143_858_2,
    0.999_939_170_345_979_7,
    0.999_984_764_214_906_1,
    0.999_996_187_869_610_1,
    0.999_999_046_611_581_6,
    0.999_999_761_613_230_8,
    0.999_999_940_398_892_4,
    0.999_999_985_099_232,
    0.999_999_996_274_753_4,
    0.999_999_999_068_682_3,
    0.999_999_999_767_169_9,
    0.999_999_999_941_792_5,
    0.999_999_999_985_448_1,
    0.999_999_999_996_362,
    0.999_999_999_999_090_5,
    0.999_999_999_999_772_6,
    0.999_999_999_999_943_2,
    0.999_999_999_999_985_8,
    0.999_999_999_999_996_4,
];

/// 7ζ(3)/8 = χ₃(1).
const CHI_3_OF_1: f64 = 1.051_799_790_264_645;

/// π²/8 = χ₂(1).
const CHI_2_OF_1: f64 = PI * PI / 8.0;

/// χ₃(e^w) and χ₂(e^w) for Re w ≤ 0, abs Im w ≤ π.
pub(super) fn chi(w: Complex64) -> [Complex64; 2] {
    if w.im > FRAC_PI_2 {
        return chi(Complex64::new(w.re, PI - w.im)).map(|chi| -chi.conj());
    }
    if w.re < NEAR { series(w) } else { expansion(w) }
}

fn series(w: Complex64) -> [Complex64; 2] {
    let z = w.exp();
    let square = z * z;
    let (mut third, mut second) = (Complex64::ZERO, Complex64::ZERO);
    let mut power = z;
    for n in (1..48).step_by(2).map(f64::from) {
        second += power / (n * n);
        third += power / (n * n * n);
        power *= square;
    }
    [third, second]
}

fn expansion(w: Complex64) -> [Complex64; 2] {
    if w == Complex64::ZERO {
        return [CHI_3_OF_1.into(), CHI_2_OF_1.into()];
    }
    let logarithm = (-0.5 * w).ln();
    let mut third = CHI_3_OF_1 + w * (CHI_2_OF_1 + 0.25 * w * (1.5 - logarithm));
    let mut second = CHI_2_OF_1 + 0.5 * w * (1.0 - logarithm);
    let turned = -w * w / (PI * PI);
    let mut power = -w;
    let mut twice_j = 0.0;
    for eta in ETA {
        twice_j += 2.0;
        power *= turned;
        let term = power * (eta / (twice_j * (twice_j + 1.0)));
        second += term;
        third += term * w / (twice_j + 2.0);
    }
    [third, second]
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Σ z^n/n³ over n < 2e5, smallest first; the rest is below 1/(4·2e5²).
    #[test]
    fn both_ways_agree_where_they_meet_and_with_the_series_on_the_circle() {
        for step in 0..=40 {
            let angle = PI * f64::from(step) / 40.0;
            let w = Complex64::new(NEAR, angle.min(PI - angle));
            for (one, other) in series(w).into_iter().zip(expansion(w)) {
                assert!((one - other).norm() < 4e-15, "{w}: {one} {other}");
            }
            let sum: Complex64 = (1..200_000)
                .step_by(2)
                .rev()
                .map(f64::from)
                .map(|n| Complex64::cis(n * angle) / (n * n * n))
                .sum();
            let [third, _] = chi(Complex64::new(0.0, angle));
            assert!((third - sum).norm() < 7e-12, "{angle}: {third} {sum}");
        }
    }

    /// χ₂(1) = π²/8; χ₂(√2 − 1) = π²/16 − ln²(√2 + 1)/4, from Lewin (1981),
    /// *Polylogarithms and Associated Functions*, section 1.8, from memory.
    #[test]
    fn known_values_of_chi_two_are_met() {
        let root = 2.0_f64.sqrt();
        let [_, second] = chi(Complex64::new((root - 1.0).ln(), 0.0));
        let expected = PI * PI / 16.0 - (root + 1.0).ln().powi(2) / 4.0;
        assert!((second - expected).norm() < 4e-16 * 4.0, "{second}");
        let [_, second] = chi(Complex64::ZERO);
        assert!((second - PI * PI / 8.0).norm() < 4e-16);
    }
}
