//! The map from the site's local frame to an outline's canonical frame and back.

use nalgebra::Matrix2;
use num_complex::Complex64;

use crate::site::{Anisotropy, Point, Vector, direction_of_azimuth};

/// A stretch that makes an anisotropic aquifer isotropic.
///
/// With K₁ = K·√ratio along the unit vector u and K₂ = K/√ratio across it, the
/// symmetric map S = ratio^(−1/4) u uᵀ + ratio^(1/4) (1 − u uᵀ) has
/// determinant 1 and turns the flow equation into the isotropic one with the
/// geometric mean K. Source: Bear (1972), *Dynamics of Fluids in Porous
/// Media*, section 7.4, from memory.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Stretch {
    forward: Matrix2<f64>,
    backward: Matrix2<f64>,
    rim_factor: f64,
}

impl Stretch {
    /// No stretch: an isotropic aquifer.
    pub fn none() -> Self {
        Self {
            forward: Matrix2::identity(),
            backward: Matrix2::identity(),
            rim_factor: 1.0,
        }
    }

    /// The stretch of an anisotropic aquifer.
    pub fn of(anisotropy: Anisotropy) -> Self {
        let axis = direction_of_azimuth(anisotropy.azimuth_deg);
        let along = axis * axis.transpose();
        let across = Matrix2::identity() - along;
        let root = anisotropy.ratio.sqrt().sqrt();
        Self {
            forward: along / root + across * root,
            backward: along * root + across / root,
            rim_factor: 0.5 * (root + 1.0 / root),
        }
    }

    /// A place of the site, stretched.
    pub fn apply(&self, point: Point) -> Point {
        self.forward * point
    }

    /// A stretched place, back in the site.
    pub fn undo(&self, point: Point) -> Point {
        self.backward * point
    }

    /// A gradient of the site, as it reads in stretched coordinates.
    pub fn apply_to_gradient(&self, gradient: Vector) -> Vector {
        // ∇' = S⁻ᵀ ∇, and S is symmetric.
        self.backward * gradient
    }

    /// A gradient in stretched coordinates, as it reads in the site.
    pub fn undo_on_gradient(&self, gradient: Vector) -> Vector {
        self.forward * gradient
    }

    /// K/|K| times a gradient, |K| the geometric mean: S⁻² = √ratio u uᵀ +
    /// (1 − u uᵀ)/√ratio.
    pub fn conductivity_over_mean(&self, gradient: Vector) -> Vector {
        self.backward * (self.backward * gradient)
    }

    /// The radius of the circle that draws as much water as a stretched
    /// borehole of radius 1: (ratio^(1/4) + ratio^(−1/4))/2, the logarithmic
    /// capacity of an ellipse. Source: Kucuk & Brigham (1979), from memory.
    pub fn rim_factor(&self) -> f64 {
        self.rim_factor
    }
}

/// Site → canonical: stretch, move the origin, turn.
///
/// z = (S p − o) · turn̄, with p in metres and z = x + iy in the canonical frame.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Frame {
    /// The stretch that comes before everything else.
    pub stretch: Stretch,
    /// The canonical origin, in stretched site coordinates.
    pub origin: Complex64,
    /// Unit number: the canonical x axis, in stretched site coordinates.
    pub turn: Complex64,
}

impl Frame {
    /// The canonical place of a point of the site.
    pub fn to_canonical(&self, point: Point) -> Complex64 {
        let stretched = self.stretch.apply(point);
        (Complex64::new(stretched.x, stretched.y) - self.origin) * self.turn.conj()
    }

    /// The point of the site at a canonical place.
    pub fn to_site(&self, z: Complex64) -> Point {
        let stretched = z * self.turn + self.origin;
        self.stretch.undo(Point::new(stretched.re, stretched.im))
    }

    /// A canonical displacement, as it reads in the site.
    pub fn direction_to_site(&self, step: Complex64) -> Vector {
        let stretched = step * self.turn;
        let stretched = Point::new(stretched.re, stretched.im);
        self.stretch.undo(stretched).coords
    }

    /// A gradient of the site, as ∂/∂x + i ∂/∂y of the canonical frame.
    pub fn gradient_to_canonical(&self, gradient: Vector) -> Complex64 {
        let stretched = self.stretch.apply_to_gradient(gradient);
        Complex64::new(stretched.x, stretched.y) * self.turn.conj()
    }

    /// A canonical gradient ∂/∂x + i ∂/∂y, as it reads in the site.
    pub fn gradient_to_site(&self, gradient: Complex64) -> Vector {
        let stretched = gradient * self.turn;
        self.stretch
            .undo_on_gradient(Vector::new(stretched.re, stretched.im))
    }
}
