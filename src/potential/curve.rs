//! Straight lines, half-lines and circular arcs as images of one interval.
//!
//! Every side is the image of 0 ≤ s ≤ 1 under a Möbius map
//! x(s) = (a s + b)/(c s + d). Harmonic functions stay harmonic under it, and
//!
//! > ln|x − y| = ln|s(x) − s(y)| + ln|a − c x| + (a term of y alone),
//!
//! so that the logarithmic potential of a straight piece serves half-lines and
//! arcs as well: infinity is a place like any other, s = 1 or s = 0.

use num_complex::Complex64;

/// One side of a region, run through with the region to its left.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Curve {
    a: Complex64,
    b: Complex64,
    c: Complex64,
    d: Complex64,
    determinant: Complex64,
}

impl Curve {
    /// The straight line between two places.
    pub fn segment(from: Complex64, to: Complex64) -> Self {
        Self::new(to - from, from, Complex64::ZERO, Complex64::ONE)
    }

    /// The half-line from a place in a direction (a unit number); half of the
    /// interval covers its first `scale_m` metres.
    pub fn ray_out(from: Complex64, direction: Complex64, scale_m: f64) -> Self {
        let a = direction * scale_m - from;
        Self::new(a, from, -Complex64::ONE, Complex64::ONE)
    }

    /// The half-line that comes from infinity to a place; `direction` points
    /// from the place to infinity.
    pub fn ray_in(to: Complex64, direction: Complex64, scale_m: f64) -> Self {
        let far = direction * scale_m;
        Self::new(to - far, far, Complex64::ONE, Complex64::ZERO)
    }

    /// The circular arc from one place through another to a third.
    pub fn arc(from: Complex64, through: Complex64, to: Complex64) -> Self {
        let k = (through - from) / (through - to);
        Self::new(-from - k * to, from, -(k + 1.0), Complex64::ONE)
    }

    fn new(a: Complex64, b: Complex64, c: Complex64, d: Complex64) -> Self {
        let determinant = a * d - b * c;
        Self {
            a,
            b,
            c,
            d,
            determinant,
        }
    }

    /// The same side run through the other way: s becomes 1 − s.
    pub fn reversed(&self) -> Self {
        Self::new(-self.a, self.a + self.b, -self.c, self.c + self.d)
    }

    /// x(s) − x(0), without cancellation; infinite where x(0) is.
    pub fn offset(&self, s: f64) -> Complex64 {
        self.determinant * s / (self.d * self.below(s))
    }

    /// The parameter of the place x(0) + offset, without cancellation.
    pub fn parameter_of_offset(&self, offset: Complex64) -> Complex64 {
        let start = self.b / self.d;
        self.d * offset / (self.pole_distance(start) - self.c * offset)
    }

    /// The place at a parameter; infinite where the half-line is.
    pub fn at(&self, s: f64) -> Complex64 {
        (self.a * s + self.b) / self.below(s)
    }

    /// dx/ds.
    pub fn derivative(&self, s: f64) -> Complex64 {
        let below = self.below(s);
        self.determinant / (below * below)
    }

    /// The (complex) parameter of a place: real on the side, with a positive
    /// imaginary part to its left.
    pub fn parameter(&self, x: Complex64) -> Complex64 {
        (self.d * x - self.b) / self.pole_distance(x)
    }

    /// d(parameter)/dx.
    pub fn parameter_slope(&self, x: Complex64) -> Complex64 {
        let distance = self.pole_distance(x);
        self.determinant / (distance * distance)
    }

    /// a − c x, zero at the place whose parameter is infinite.
    pub fn pole_distance(&self, x: Complex64) -> Complex64 {
        self.a - self.c * x
    }

    /// c, zero for a straight line between two places.
    pub fn c(&self) -> Complex64 {
        self.c
    }

    /// c s + d.
    pub fn below(&self, s: f64) -> Complex64 {
        self.c * s + self.d
    }
}
