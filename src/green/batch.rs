//! Sums a Green's function over many wells at many points, in vector lanes.
//!
//! A kernel splits G(z, z₀) into terms of the point alone, terms of the well
//! alone, and a pair formula without any transcendental function but one
//! logarithm. The terms are computed once; the pair loop multiplies and adds.

use std::f64::consts::PI;

use num_complex::Complex64;
use pulp::{Arch, Scalar, Simd, WithSimd};

use super::Source;
use super::lanes::Lanes;
use super::logarithm::{LN_LIFT, Ratio};

/// How many terms of a point a kernel may keep.
pub(super) const TERMS: usize = 8;

/// Points handled together; a multiple of every lane count.
const BLOCK: usize = 32;

/// A Green's function as a pair formula:
/// G = ln(ratio)/(4π) + plain part.
pub(super) trait PairKernel: Sync {
    /// What depends on a source alone.
    type Prepared: Sync;

    /// How many of a point's terms are used; the others are zero.
    const USED: usize;

    /// Whether ratios may fall below 1/2, down to 2^−8.
    #[inline(always)]
    fn is_lifted(&self) -> bool {
        false
    }

    /// What depends on a point alone. `reference` is a place among the
    /// sources from which far distances may be measured.
    fn terms(&self, at: Complex64, reference: Complex64) -> [f64; TERMS];

    /// What depends on a source alone.
    fn prepare(&self, source: &Source, reference: Complex64) -> Self::Prepared;

    /// The ratio whose logarithm is 4π(G − plain part).
    fn ratio<S: Simd>(&self, prepared: &Self::Prepared, terms: &[Lanes<S>; TERMS]) -> Ratio<S>;

    /// The part of G that is no logarithm, where there is one.
    #[inline(always)]
    fn plain_part<S: Simd>(
        &self,
        _prepared: &Self::Prepared,
        _terms: &[Lanes<S>; TERMS],
    ) -> Option<Lanes<S>> {
        None
    }
}

/// Where a source is and how wide its rim, for kernels that work with plain
/// distances; the point's terms are then x and y.
pub(super) struct Place {
    /// x of the source.
    pub x: f64,
    /// y of the source.
    pub y: f64,
    rim_squared: f64,
}

impl Place {
    /// The place of a source.
    pub fn of(source: &Source) -> Self {
        Self {
            x: source.pole.re,
            y: source.pole.im,
            rim_squared: source.rim_m * source.rim_m,
        }
    }

    /// The squared distance of some points and the squared rim.
    #[inline(always)]
    pub fn squares<S: Simd>(&self, x: Lanes<S>, y: Lanes<S>) -> [Lanes<S>; 2] {
        let (dx, dy) = (x - x.constant(self.x), y - y.constant(self.y));
        [dx.mul_add(dx, dy * dy), x.constant(self.rim_squared)]
    }
}

/// G of one source with strength 1 at one point, rim respected.
pub(super) fn single<K: PairKernel>(kernel: &K, at: Complex64, pole: Complex64, rim_m: f64) -> f64 {
    let simd = Scalar::new();
    let source = Source {
        pole,
        strength_m: 1.0,
        rim_m,
    };
    let prepared = kernel.prepare(&source, pole);
    let terms = kernel.terms(at, pole).map(|term| Lanes::splat(simd, term));
    four_pi_green(kernel, &prepared, &terms).values() / (4.0 * PI)
}

/// Adds Σ strength · G(point, pole) to each point's sum, rims respected.
///
/// Points and sums pair off; extra ones of either are left alone.
pub(super) fn superpose<K: PairKernel>(
    kernel: &K,
    sources: &[Source],
    points: &[Complex64],
    sums: &mut [f64],
) {
    if sources.is_empty() {
        return;
    }
    let reference =
        sources.iter().map(|source| source.pole).sum::<Complex64>() / sources.len() as f64;
    let prepared = sources
        .iter()
        .map(|source| {
            (
                source.strength_m / (4.0 * PI),
                kernel.prepare(source, reference),
            )
        })
        .collect::<Vec<_>>();
    Arch::new().dispatch(Superposition {
        kernel,
        prepared: &prepared,
        reference,
        points,
        sums,
    });
}

/// 4π G of one pair.
#[inline(always)]
fn four_pi_green<S: Simd, K: PairKernel>(
    kernel: &K,
    prepared: &K::Prepared,
    terms: &[Lanes<S>; TERMS],
) -> Lanes<S> {
    let ratio = kernel.ratio(prepared, terms);
    let logarithm = if kernel.is_lifted() {
        let lifted = ratio.lifted().ln();
        lifted - lifted.constant(LN_LIFT)
    } else {
        ratio.ln()
    };
    match kernel.plain_part(prepared, terms) {
        Some(plain) => plain.mul_add(plain.constant(4.0 * PI), logarithm),
        None => logarithm,
    }
}

struct Superposition<'a, K: PairKernel> {
    kernel: &'a K,
    prepared: &'a [(f64, K::Prepared)],
    reference: Complex64,
    points: &'a [Complex64],
    sums: &'a mut [f64],
}

impl<K: PairKernel> WithSimd for Superposition<'_, K> {
    type Output = ();

    #[inline(always)]
    fn with_simd<S: Simd>(self, simd: S) {
        let mut columns = [[0.0; BLOCK]; TERMS];
        let blocks = self.points.chunks(BLOCK).zip(self.sums.chunks_mut(BLOCK));
        for (points, sums) in blocks {
            fill(self.kernel, points, self.reference, &mut columns);
            let mut totals = [0.0; BLOCK];
            let groups = S::as_mut_simd_f64s(&mut totals).0;
            let filled = points.len().div_ceil(S::F64_LANES);
            for (index, total) in groups.iter_mut().take(filled).enumerate() {
                let terms = group::<S, K>(simd, &columns, index);
                let mut sum = Lanes::splat(simd, 0.0);
                for (strength, prepared) in self.prepared {
                    let value = four_pi_green(self.kernel, prepared, &terms);
                    sum = value.mul_add(Lanes::splat(simd, *strength), sum);
                }
                *total = sum.values();
            }
            for (sum, total) in sums.iter_mut().zip(totals) {
                *sum += total;
            }
        }
    }
}

/// Computes the terms of a block's points, column by column. A short block
/// repeats its last point, so that every lane holds a harmless value.
fn fill<K: PairKernel>(
    kernel: &K,
    points: &[Complex64],
    reference: Complex64,
    columns: &mut [[f64; BLOCK]; TERMS],
) {
    let Some(&last) = points.last() else { return };
    let padded = points.iter().copied().chain(std::iter::repeat(last));
    for (index, point) in padded.take(BLOCK).enumerate() {
        let terms = kernel.terms(point, reference);
        for (column, term) in columns.iter_mut().zip(terms).take(K::USED) {
            if let Some(entry) = column.get_mut(index) {
                *entry = term;
            }
        }
    }
}

/// The lanes of one group of a block's columns.
///
/// Written as a loop: a closure would not be compiled for the processor's
/// vector set.
#[inline(always)]
fn group<S: Simd, K: PairKernel>(
    simd: S,
    columns: &[[f64; BLOCK]; TERMS],
    index: usize,
) -> [Lanes<S>; TERMS] {
    let mut terms = [Lanes::splat(simd, 0.0); TERMS];
    for (term, column) in terms.iter_mut().zip(columns).take(K::USED) {
        if let Some(lanes) = S::as_simd_f64s(column).0.get(index) {
            *term = Lanes::new(simd, *lanes);
        }
    }
    terms
}
