//! A wedge of any angle with at least one river: a strip in the logarithm of z.
//!
//! w = −i ln z = arg z − i ln abs z maps the wedge 0 < arg z < α to the strip
//! 0 < Re w < α, and G does not change under a conformal map. So the angle
//! need not divide 180°, and mixed edges are exact too; where it does, the
//! value equals the finite sum over image wells (Ferris et al. 1962).
//! A rim of radius r_w becomes one of radius r_w/abs z₀.
//! Accuracy: absolute error ≤ 64ε (1 + abs ln(abs z/abs z₀)).
//! Cost: as the strip; a logarithm and an angle a point.

use std::f64::consts::PI;
use std::ops::Range;

use num_complex::Complex64;
use pulp::Simd;

use super::batch::{self, PairKernel, TERMS};
use super::lanes::Lanes;
use super::logarithm::Ratio;
use super::rows::{self, Rows};
use super::{Green, Image, Source};
use crate::outline::{Axis, Kind, argument_in_wedge};

/// The Green's function of 0 < arg z < α.
#[derive(Clone, Debug)]
pub struct Wedge {
    angle: f64,
    kinds: [Kind; 2],
    strip: Rows,
}

impl Wedge {
    /// The wedge of a given angle, 0 < angle ≤ 2π, with the kinds of its sides
    /// at arg z = 0 and arg z = angle.
    pub fn new(angle: f64, kinds: [Kind; 2]) -> Self {
        Self {
            angle,
            kinds,
            strip: Rows::new(angle, kinds, Axis::Open),
        }
    }

    /// w = −i ln z; the apex, where w is infinite, counts as 1e-150 m away.
    fn map(&self, z: Complex64) -> Complex64 {
        let distance = 0.5 * z.norm_sqr().max(1e-300).ln();
        Complex64::new(argument_in_wedge(z, self.angle), -distance)
    }
}

impl PairKernel for Wedge {
    type Prepared = rows::Prepared;

    const USED: usize = TERMS;

    fn terms(&self, at: Complex64, reference: Complex64) -> [f64; TERMS] {
        self.strip.terms(self.map(at), self.map(reference))
    }

    fn prepare(&self, source: &Source, reference: Complex64) -> rows::Prepared {
        let mapped = Source {
            pole: self.map(source.pole),
            rim_m: source.rim_m / source.pole.norm(),
            ..*source
        };
        self.strip.prepare(&mapped, self.map(reference))
    }

    #[inline(always)]
    fn ratio<S: Simd>(&self, prepared: &rows::Prepared, terms: &[Lanes<S>; TERMS]) -> Ratio<S> {
        self.strip.ratio(prepared, terms)
    }
}

impl Green for Wedge {
    fn value_outside_rim(&self, at: Complex64, pole: Complex64, rim_m: f64) -> f64 {
        batch::single(self, at, pole, rim_m)
    }

    fn gradient(&self, at: Complex64, pole: Complex64) -> Complex64 {
        let strip = self.strip.gradient(self.map(at), self.map(pole));
        let slope = -Complex64::i() / at;
        strip * slope.conj()
    }

    fn share(&self, side: usize, along: Range<f64>, pole: Complex64) -> f64 {
        // Distance r along a side is y = −ln r of the strip.
        let mapped = -along.end.ln()..-along.start.ln();
        self.strip.share(side, mapped, self.map(pole))
    }

    fn superpose(&self, sources: &[Source], points: &[Complex64], sums: &mut [f64]) {
        batch::superpose(self, sources, points, sums);
    }

    /// Image wells exist where the angle divides 180° (like edges) or 90°
    /// (unlike edges); other angles have none.
    fn nearest_images(&self, pole: Complex64, count: usize) -> Vec<Image> {
        super::nearest(pole, images_in_wedge(self.angle, self.kinds, pole), count)
    }
}

/// All image wells of a pole in a wedge, itself first; empty where its angle
/// has no consistent set.
pub(super) fn images_in_wedge(angle: f64, kinds: [Kind; 2], pole: Complex64) -> Vec<Image> {
    let [first, second] = kinds.map(super::mirrors::sign_of);
    let wedges = 2.0 * PI / angle;
    let whole = wedges.round();
    // Going once round must bring back the well with its own sign.
    let copies = whole as u32;
    let consistent = (wedges - whole).abs() < 1e-9 * wedges
        && copies.is_multiple_of(2)
        && (first * second > 0.0 || copies.is_multiple_of(4));
    if !consistent {
        return Vec::new();
    }
    let mut images = Vec::with_capacity(copies as usize);
    // The mirrored wedges are numbered round the apex; the nearer way round
    // crosses fewer edges.
    let order_of = |number: u32| number.min(copies - number);
    for turn in 0..copies / 2 {
        let rotation = Complex64::from_polar(1.0, 2.0 * angle * f64::from(turn));
        let sign = (first * second).powi(turn as i32);
        images.push(Image {
            at: pole * rotation,
            sign,
            order: order_of(2 * turn),
        });
        images.push(Image {
            at: pole.conj() * rotation,
            sign: sign * first,
            order: order_of((2 * turn + copies - 1) % copies),
        });
    }
    images
}
