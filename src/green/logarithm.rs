//! The natural logarithm of a ratio, in vector lanes.
//!
//! Every Green's function of image wells ends in ln(N/D) for two positive
//! products of squared distances whose difference N − D is known without
//! cancellation. Near a river N/D tends to 1, and the logarithm keeps all its
//! digits because it starts from the difference.
//!
//! Method: with the whole k ≥ 0 that makes D ≤ N 2^(−k) < 2D the value is
//! k ln 2 + 2 artanh((N 2^(−k) − D)/(N 2^(−k) + D)), and 2 artanh(s) = 2s + s³ p(s²) for abs s ≤ 1/3.
//! p has degree 9; its relative error is 5.1e-18 (Chebyshev fit, computed with
//! 60 digits by `tests/references/logarithm/coefficients.py`).
//! Accuracy: relative error ≤ 4ε where N < 2D, else ≤ 4ε of the result.
//! Cost: one division and some thirty other operations.

use pulp::Simd;

use super::lanes::Lanes;

/// p(v) of 2 artanh(s) = 2s + s³ p(s²) on 0 ≤ v ≤ 1/9, lowest power first.
const ARTANH: [f64; 10] = [
    0.666_666_666_666_666_6,
    0.400_000_000_000_145_8,
    0.285_714_285_671_087_6,
    0.222_222_227_174_278_6,
    0.181_817_894_361_328_58,
    0.153_855_700_649_586_23,
    0.133_141_442_096_549_36,
    0.120_010_728_095_907_13,
    0.088_007_384_861_446_74,
    0.161_640_456_119_435_3,
];

/// A ratio N/D of positive numbers, held as D and N − D.
#[derive(Clone, Copy, Debug)]
pub(super) struct Ratio<S: Simd> {
    /// D > 0.
    pub denominator: Lanes<S>,
    /// N − D > −D, without cancellation.
    pub difference: Lanes<S>,
}

impl<S: Simd> Ratio<S> {
    /// The ratio N/D of images alone.
    #[inline(always)]
    pub fn of_image(denominator: Lanes<S>, difference: Lanes<S>) -> Self {
        Self {
            denominator,
            difference,
        }
    }

    /// The ratio N/(w p) of a well: w is its (scaled) squared distance, which
    /// counts as that of the rim inside the rim, while N stays as it is.
    /// `difference` is N − w p for the true w; `others` is p.
    #[inline(always)]
    pub fn of_well(
        squared: Lanes<S>,
        rim_squared: Lanes<S>,
        others: Lanes<S>,
        difference: Lanes<S>,
    ) -> Self {
        let held = squared.max(rim_squared);
        Self {
            denominator: held * others,
            difference: (squared - held).mul_add(others, difference),
        }
    }

    /// The product of two ratios.
    #[inline(always)]
    pub fn times(self, other: Self) -> Self {
        // (D + δ)(d + ε) − Dd = δ(d + ε) + Dε
        let other_numerator = other.denominator + other.difference;
        Self {
            denominator: self.denominator * other.denominator,
            difference: self
                .difference
                .mul_add(other_numerator, self.denominator * other.difference),
        }
    }

    /// The quotient of two ratios.
    #[inline(always)]
    pub fn over(self, other: Self) -> Self {
        // (D + δ)d − D(d + ε) = δd − Dε
        Self {
            denominator: self.denominator * (other.denominator + other.difference),
            difference: self.difference * other.denominator - self.denominator * other.difference,
        }
    }

    /// The ratio multiplied by 2^8, so that ratios down to 2^−8 keep N ≥ D as
    /// [`Ratio::ln`] needs; subtract [`LN_LIFT`] from the logarithm.
    #[inline(always)]
    pub fn lifted(self) -> Self {
        let numerator = self.denominator + self.difference;
        Self {
            denominator: self.denominator,
            difference: numerator * numerator.constant(256.0) - self.denominator,
        }
    }

    /// ln(N/D), for N/D ≥ 1/2.
    #[inline(always)]
    pub fn ln(self) -> Lanes<S> {
        let denominator = self.denominator;
        let numerator = denominator + self.difference;
        let (power, scaled) = numerator.scaled_down_to(denominator);
        // Below twice the denominator, where k = 0, the exact difference
        // serves as it is.
        let near = self.difference.below(denominator);
        let top = Lanes::select(near, self.difference, scaled - denominator);
        let artanh = artanh_doubled(top / (scaled + denominator));
        power.mul_add(power.constant(std::f64::consts::LN_2), artanh)
    }
}

/// The natural logarithm in vector lanes, by itself: the floor against which
/// the Green's functions are measured. Normal positive values only; relative
/// error ≤ 4ε, absolute near 1.
#[inline(always)]
pub fn ln_lanes<S: Simd>(simd: S, values: S::f64s) -> S::f64s {
    let x = Lanes::new(simd, values);
    let one = x.constant(1.0);
    let mantissa = x.mantissa();
    let s = (mantissa - one) / (mantissa + one);
    let artanh = artanh_doubled(s);
    x.exponent()
        .mul_add(x.constant(std::f64::consts::LN_2), artanh)
        .values()
}

/// 2 artanh(s) for abs s ≤ 1/3.
#[inline(always)]
fn artanh_doubled<S: Simd>(s: Lanes<S>) -> Lanes<S> {
    let v = s * s;
    let [lower @ .., highest] = ARTANH;
    let mut polynomial = v.constant(highest);
    for &coefficient in lower.iter().rev() {
        polynomial = polynomial.mul_add(v, v.constant(coefficient));
    }
    (s * v).mul_add(polynomial, s + s)
}

/// ln 2^8, what [`Ratio::lifted`] adds.
pub(super) const LN_LIFT: f64 = 8.0 * std::f64::consts::LN_2;

#[cfg(test)]
mod tests {
    use pulp::Scalar;

    use super::*;

    fn ln_of(denominator: f64, difference: f64) -> f64 {
        let simd = Scalar::new();
        Ratio {
            denominator: Lanes::splat(simd, denominator),
            difference: Lanes::splat(simd, difference),
        }
        .ln()
        .values()
    }

    /// Reference: `f64::ln_1p` of the platform's mathematics library.
    #[test]
    fn the_logarithm_of_a_ratio_agrees_with_ln_1p_to_four_epsilon() {
        let mut worst: f64 = 0.0;
        for step in -1_000..6_000 {
            let quotient = 1.013_f64.powi(step);
            for denominator in [1.0, 1.999_999_9, 3.7e-9, 8.2e11] {
                let difference = quotient * denominator;
                let expected = (difference / denominator).ln_1p();
                let got = ln_of(denominator, difference);
                worst = worst.max(((got - expected) / expected).abs());
            }
        }
        assert!(
            worst <= 4.0 * f64::EPSILON,
            "worst relative error {worst:e}"
        );
    }

    #[test]
    fn a_ratio_of_one_has_logarithm_zero_exactly() {
        assert_eq!(ln_of(17.3, 0.0), 0.0);
    }

    #[test]
    fn ratios_down_to_one_half_are_exact_to_four_epsilon() {
        for step in 0..=500 {
            let difference = -0.001 * f64::from(step);
            let expected = difference.ln_1p();
            assert!((ln_of(1.0, difference) - expected).abs() <= 4.0 * f64::EPSILON);
        }
    }
}
