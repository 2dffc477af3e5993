//! One Green's function for each kind of outline, behind one small trait.
//!
//! G solves −∇²G = δ(z − z₀) in the canonical frame of an outline, with G = 0
//! on fixed-head sides and ∂G/∂n = 0 on no-flow sides. A well that pumps Q at
//! z₀ lowers the head at z by Q/T · G(z, z₀).

use std::ops::Range;

use num_complex::Complex64;

/// A well as Green's functions see it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Source {
    /// Where it is, in the canonical frame.
    pub pole: Complex64,
    /// What its G is multiplied by: Q/T, metres.
    pub strength_m: f64,
    /// Radius within which G keeps the value of its rim, metres.
    pub rim_m: f64,
}

/// An image of a well, for audit.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Image {
    /// Where it is, in the canonical frame.
    pub at: Complex64,
    /// +1 pumps with its well, −1 against it.
    pub sign: f64,
    /// In how many edges the well was mirrored to make it.
    pub order: u32,
}

/// The Green's function of one outline.
///
/// Places are complex numbers of the outline's canonical frame, in metres; G
/// has no unit. `at` lies inside the outline or on it, a pole inside.
pub trait Green: Send + Sync {
    /// G(at, pole).
    fn value(&self, at: Complex64, pole: Complex64) -> f64;

    /// ∂G/∂x + i ∂G/∂y at `at`, in 1/m.
    fn gradient(&self, at: Complex64, pole: Complex64) -> Complex64;

    /// The limit of G(z, pole) + ln abs(z − pole)/(2π) at the pole.
    fn regular_part(&self, pole: Complex64) -> f64;

    /// −∫ ∂G/∂n dl over the part `along` of side number `side`: the share of
    /// the pole's water that comes through it. Zero on no-flow sides. Over
    /// all sides the shares sum to 1 where any side is fixed.
    fn share(&self, side: usize, along: Range<f64>, pole: Complex64) -> f64;

    /// Adds Σ strength · G(point, pole) to each point's sum, rims respected.
    fn superpose(&self, sources: &[Source], points: &[Complex64], sums: &mut [f64]);

    /// The images of a pole that lie nearest to it, nearest first, at most
    /// `count`.
    fn nearest_images(&self, pole: Complex64, count: usize) -> Vec<Image>;
}
