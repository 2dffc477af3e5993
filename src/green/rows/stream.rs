//! The complex potential of rows of images: its derivative is the gradient,
//! its imaginary part the stream function that counts water through a side.
//!
//! Each image gives −σ ln(1 − e^(±iκ(z − z_kj)))/(2π), with the sign of the
//! exponent that lets it fade away from the row; the logarithm then stays on
//! one branch, since its argument lies within 1 of 1.

use std::f64::consts::FRAC_1_PI;
use std::ops::Range;

use num_complex::Complex64;

use super::Rows;
use crate::green::mirrors::AxisImage;
use crate::outline::{Axis, Kind};

impl Rows {
    /// Σ σₖ sⱼ f(z − z_kj, whether z is above row k) over all images.
    fn sum_over_images(
        &self,
        at: Complex64,
        pole: Complex64,
        above: impl Fn(&AxisImage) -> bool,
        term: impl Fn(Complex64, bool) -> Complex64,
    ) -> Complex64 {
        let columns = self.columns_of(pole.re);
        let rows = self.rows_of(pole.im);
        rows.iter()
            .flat_map(|row| columns.iter().map(move |column| (row, column)))
            .map(|(row, column)| {
                let image = Complex64::new(column.position, row.position);
                row.sign * column.sign * term(at - image, above(row))
            })
            .sum()
    }

    /// e^(iκ distance), or e^(−iκ distance) below the row: abs ≤ 1.
    fn fading(&self, distance: Complex64, above: bool) -> Complex64 {
        let turn = if above { self.kappa } else { -self.kappa };
        (Complex64::i() * turn * distance).exp()
    }

    /// Stream function −Σ σₖ sⱼ arg(1 − e^(±iκ(z − z_kj)))/(2π) of the images;
    /// `above_well` chooses the branch of the well's own row.
    fn stream(&self, at: Complex64, pole: Complex64, above_well: bool) -> f64 {
        let above = |row: &AxisImage| match row.order {
            0 => above_well,
            _ => row.position < pole.im,
        };
        let logarithm = |distance, above| (1.0 - self.fading(distance, above)).ln();
        -0.5 * FRAC_1_PI * self.sum_over_images(at, pole, above, logarithm).im
    }

    /// The flow averaged across the strip: −g″ = δ(y − y₀) along y.
    fn mean_slope(&self, y: f64, y0: f64) -> f64 {
        use Kind::{FixedHead, NoFlow};
        let below = if y < y0 { 1.0 } else { 0.0 };
        match self.y_axis {
            Axis::TwoEdges { width_m, kinds } => match kinds {
                [FixedHead, FixedHead] => below - y0 / width_m,
                [FixedHead, NoFlow] => below,
                [NoFlow, FixedHead] => below - 1.0,
                [NoFlow, NoFlow] => y / width_m - (1.0 - below),
            },
            _ => below,
        }
    }

    /// ∂G/∂x + i ∂G/∂y: the conjugate of the derivative of the complex potential.
    pub(super) fn slope(&self, at: Complex64, pole: Complex64) -> Complex64 {
        let above = |row: &AxisImage| at.im >= row.position;
        let slope = |distance, above| {
            let fading = self.fading(distance, above);
            let turn = if above { -self.kappa } else { self.kappa };
            Complex64::i() * turn * fading / (1.0 - fading)
        };
        let images = self.sum_over_images(at, pole, above, slope);
        let mean = if self.has_no_river_across_x() {
            self.mean_slope(at.im, pole.im) / self.width
        } else {
            0.0
        };
        -0.5 * FRAC_1_PI * images.conj() + Complex64::new(0.0, mean)
    }

    /// −∫ ∂G/∂n dl over a part of a side: the change of the stream function.
    pub(super) fn flux(&self, side: usize, along: Range<f64>, pole: Complex64) -> f64 {
        let change = |from: Complex64, to: Complex64, above_well: bool| {
            self.stream(to, pole, above_well) - self.stream(from, pole, above_well)
        };
        let kind = self.side_kind(side);
        if kind == Some(Kind::NoFlow) || along.is_empty() {
            return 0.0;
        }
        match side {
            0 | 1 => {
                let x = if side == 0 { 0.0 } else { self.width };
                let level = |y: f64| Complex64::new(x, y);
                // The side passes the well's own row, where the branch of the
                // stream function changes.
                let middle = pole.im.clamp(along.start, along.end);
                let below = change(level(along.start), level(middle), false);
                let above = change(level(middle), level(along.end), true);
                let swing = below + above;
                if side == 0 { swing } else { -swing }
            }
            _ => {
                let (y, inward) = match self.y_axis {
                    Axis::TwoEdges { width_m, .. } if side == 3 => (width_m, 1.0),
                    _ => (0.0, -1.0),
                };
                let along_x = |x: f64| Complex64::new(x, y);
                let swing = change(along_x(along.start), along_x(along.end), y > pole.im);
                let mean = if self.has_no_river_across_x() {
                    let slope = self.mean_slope(y, pole.im);
                    -inward * slope * (along.end - along.start) / self.width
                } else {
                    0.0
                };
                inward * swing + mean
            }
        }
    }

    fn side_kind(&self, side: usize) -> Option<Kind> {
        match (side, self.y_axis) {
            (0 | 1, _) => self.kinds.get(side).copied(),
            (_, Axis::Open) => None,
            (_, Axis::OneEdge(kind)) => Some(kind),
            (_, Axis::TwoEdges { kinds, .. }) => kinds.get(side - 2).copied(),
        }
    }
}
