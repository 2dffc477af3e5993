//! One pair of a place and a well: the terms of each, and the formula of all
//! rows of images that joins them, in vector lanes.

use std::f64::consts::LN_2;

use num_complex::Complex64;
use pulp::Simd;

use super::Rows;
use crate::green::Source;
use crate::green::batch::{PairKernel, TERMS};
use crate::green::lanes::Lanes;
use crate::green::logarithm::Ratio;
use crate::outline::{Axis, Kind};

/// Powers of two that t is held between, so that t⁴ stays a normal number.
const POWER_LIMIT: f64 = 240.0;

/// A source: terms of the well alone.
pub struct Prepared {
    half_sin: f64,
    half_cos: f64,
    sin: f64,
    cos: f64,
    rim: f64,
    y: f64,
    own: Row,
    mirrored: Vec<Row>,
}

/// One row of images: t = e^(−κ abs(y − yₖ)) is `factor` · 2^`power` times the
/// point's e^(κy) where the row is above all points, e^(−κy) where below.
struct Row {
    above: bool,
    factor: f64,
    power: f64,
    sign: f64,
}

impl Row {
    fn new(rows: &Rows, position: f64, above: bool, sign: f64) -> Self {
        let exponent = rows.kappa * position;
        let (factor, power) = rows.exponential(if above { -exponent } else { exponent });
        Self {
            above,
            factor,
            power,
            sign,
        }
    }
}

impl Rows {
    /// e^x as (m, k) with e^x = m · 2^k, k whole; k = 0 in a short aquifer.
    fn exponential(&self, x: f64) -> (f64, f64) {
        if self.is_short {
            return (x.exp(), 0.0);
        }
        let power = (x / LN_2).round();
        ((x - power * LN_2).exp(), power)
    }
}

/// What all rows of one pair share: the cosines of κ(x ∓ x₀).
struct Cosines<S: Simd> {
    minus: Lanes<S>,
    plus: Lanes<S>,
    /// cos κ(x − x₀) − cos κ(x + x₀) = 2 sin κx sin κx₀.
    difference: Lanes<S>,
    /// cos κ(x − x₀) + cos κ(x + x₀) = 2 cos κx cos κx₀.
    sum: Lanes<S>,
}

impl PairKernel for Rows {
    type Prepared = Prepared;

    const USED: usize = TERMS;

    #[inline(always)]
    fn is_lifted(&self) -> bool {
        self.has_no_river_across_x()
    }

    fn terms(&self, at: Complex64, reference: Complex64) -> [f64; TERMS] {
        let (at, reference) = (self.turned(at), self.turned(reference));
        let (half_sin, half_cos) = (0.5 * self.kappa * at.re).sin_cos();
        let y = at.im - self.y_origin(reference);
        let (factor, power) = self.exponential(self.kappa * y);
        let sin = 2.0 * half_sin * half_cos;
        let cos = 1.0 - 2.0 * half_sin * half_sin;
        [
            half_sin,
            half_cos,
            sin,
            cos,
            factor,
            factor.recip(),
            power,
            y,
        ]
    }

    fn prepare(&self, source: &Source, reference: Complex64) -> Prepared {
        let source = Source {
            pole: self.turned(source.pole),
            ..*source
        };
        let origin = self.y_origin(self.turned(reference));
        let (half_sin, half_cos) = (0.5 * self.kappa * source.pole.re).sin_cos();
        let rows = self.rows_of(source.pole.im);
        let mirrored = rows.iter().skip(1).map(|row| {
            let above = row.position > source.pole.im;
            Row::new(self, row.position - origin, above, row.sign)
        });
        let y = source.pole.im - origin;
        Prepared {
            half_sin,
            half_cos,
            sin: 2.0 * half_sin * half_cos,
            cos: 1.0 - 2.0 * half_sin * half_sin,
            rim: (self.kappa * source.rim_m).powi(2),
            y,
            own: Row::new(self, y, false, 1.0),
            mirrored: mirrored.collect(),
        }
    }

    #[inline(always)]
    fn ratio<S: Simd>(&self, prepared: &Prepared, terms: &[Lanes<S>; TERMS]) -> Ratio<S> {
        let [half_sin, half_cos, sin, cos, ..] = *terms;
        let sines = sin * sin.constant(prepared.sin);
        let cosines = cos * cos.constant(prepared.cos);
        let cosines = Cosines {
            minus: cosines + sines,
            plus: cosines - sines,
            difference: sines + sines,
            sum: cosines + cosines,
        };

        let one = sin.constant(1.0);
        let limit = f64::exp2(POWER_LIMIT);
        let mut t = self
            .fade(&prepared.own, terms)
            .min(sin.constant(limit))
            .max(sin.constant(limit.recip()));
        if self.has_no_river_across_x() {
            t = t.min(one / t);
        }
        let half_sine = half_sin * half_sin.constant(prepared.half_cos)
            - half_cos * half_cos.constant(prepared.half_sin);
        let (gap, twice) = (one - t, t + t);
        let squared = (twice + twice).mul_add(half_sine * half_sine, gap * gap);
        let rim_squared = t * t.constant(prepared.rim);

        let (others, difference) = self.other_images(t, &cosines, squared);
        let mut product = Ratio::of_well(squared, rim_squared, others, difference);
        for row in &prepared.mirrored {
            let t = self.fade(row, terms);
            let nearest = t.mul_add(t, one) - (t + t) * cosines.minus;
            let (others, difference) = self.other_images(t, &cosines, nearest);
            let factor = Ratio::of_image(nearest * others, difference);
            product = if row.sign > 0.0 {
                product.times(factor)
            } else {
                product.over(factor)
            };
        }
        product
    }

    #[inline(always)]
    fn plain_part<S: Simd>(
        &self,
        prepared: &Prepared,
        terms: &[Lanes<S>; TERMS],
    ) -> Option<Lanes<S>> {
        use Kind::{FixedHead, NoFlow};
        if !self.has_no_river_across_x() {
            return None;
        }
        let [.., y] = *terms;
        let y0 = y.constant(prepared.y);
        let (low, high) = (y.min(y0), y.max(y0));
        let mean = match self.y_axis {
            Axis::TwoEdges { width_m, kinds } => {
                let end = y.constant(width_m);
                match kinds {
                    [FixedHead, FixedHead] => low * (end - high) / end,
                    [FixedHead, NoFlow] => low,
                    [NoFlow, FixedHead] => end - high,
                    [NoFlow, NoFlow] => {
                        y.mul_add(y, y0 * y0) / (end + end) - high + y.constant(width_m / 3.0)
                    }
                }
            }
            _ => low,
        };
        Some(mean * y.constant(self.width.recip()))
    }
}

impl Rows {
    /// Along an open axis far distances are measured from among the wells, so
    /// that κy stays small; edges across y fix the origin.
    fn y_origin(&self, reference: Complex64) -> f64 {
        match self.y_axis {
            Axis::Open => reference.im,
            _ => 0.0,
        }
    }

    /// One period of a row is N/(w p): images of sign −1 over those of sign +1,
    /// of which w = 1 − 2t cos κ(x − x₀) + t² is the first. Returns p and
    /// N − w p, the latter free of cancellation.
    #[inline(always)]
    fn other_images<S: Simd>(
        &self,
        t: Lanes<S>,
        cosines: &Cosines<S>,
        first: Lanes<S>,
    ) -> (Lanes<S>, Lanes<S>) {
        use Kind::{FixedHead, NoFlow};
        let one = t.constant(1.0);
        let (sum, twice) = (t.mul_add(t, one), t + t);
        match self.kinds {
            [FixedHead, FixedHead] => (one, twice * cosines.difference),
            [FixedHead, NoFlow] => (
                twice.mul_add(cosines.plus, sum),
                (twice + twice) * sum * cosines.difference,
            ),
            [NoFlow, FixedHead] => (
                sum - twice * cosines.plus,
                (twice + twice) * sum * cosines.sum,
            ),
            [NoFlow, NoFlow] => {
                let others = sum - twice * cosines.plus;
                (others, one - first * others)
            }
        }
    }

    /// t = e^(−κ abs(y − yₖ)) of a row at some points.
    #[inline(always)]
    fn fade<S: Simd>(&self, row: &Row, terms: &[Lanes<S>; TERMS]) -> Lanes<S> {
        let [_, _, _, _, up, down, power, _] = *terms;
        let (point, power) = if row.above {
            (up, power.constant(row.power) + power)
        } else {
            (down, power.constant(row.power) - power)
        };
        let t = point * point.constant(row.factor);
        if self.is_short {
            return t;
        }
        let limit = power.constant(POWER_LIMIT);
        let power = power.min(limit).max(power.constant(-POWER_LIMIT));
        t * power.power_of_two()
    }
}
