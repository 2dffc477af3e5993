//! One Green's function for each kind of outline, behind one small trait.
//!
//! G solves −∇²G = δ(z − z₀) in the canonical frame of an outline, with G = 0
//! on fixed-head sides and ∂G/∂n = 0 on no-flow sides; behind a clogged bank
//! G obeys the bank's own condition (`clogged`). A well that pumps Q at
//! z₀ lowers the head at z by Q/T · G(z, z₀).

mod batch;
mod clogged;
mod corner;
mod disk;
mod general;
mod influence;
mod lanes;
mod logarithm;
mod mirrors;
mod rows;
mod wedge;

pub use general::{Before, General, WeightedPole};
pub use logarithm::ln_lanes;

use std::f64::consts::FRAC_1_PI;
use std::ops::Range;

use num_complex::Complex64;
use thiserror::Error;

use crate::outline::{Axis, Kind, Shape};
use clogged::Clogged;
use corner::Corner;
use disk::Disk;
use influence::Influence;
use mirrors::AxisImage;
use rows::Rows;
use wedge::Wedge;

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
    /// G(at, pole), where a place nearer to the pole than `rim_m` takes the
    /// value of the rim, −ln(rim_m)/(2π) + the regular part there.
    fn value_outside_rim(&self, at: Complex64, pole: Complex64, rim_m: f64) -> f64;

    /// G(at, pole), at ≠ pole.
    fn value(&self, at: Complex64, pole: Complex64) -> f64 {
        self.value_outside_rim(at, pole, 0.0)
    }

    /// ∂G/∂x + i ∂G/∂y at `at`, in 1/m.
    fn gradient(&self, at: Complex64, pole: Complex64) -> Complex64;

    /// Σ strength · (∂G/∂x + i ∂G/∂y) at a place off the poles, rims left out.
    fn superposed_gradient(&self, sources: &[Source], at: Complex64) -> Complex64 {
        let gradient = |source: &Source| source.strength_m * self.gradient(at, source.pole);
        sources.iter().map(gradient).sum()
    }

    /// The limit of G(z, pole) + ln abs(z − pole)/(2π) at the pole.
    ///
    /// Read off on a rim of a micrometre, on which G is −ln(rim)/(2π) + the
    /// regular part exactly; the two logarithms cancel to 1e-15. The pole must
    /// be farther than that from the edges.
    fn regular_part(&self, pole: Complex64) -> f64 {
        const RIM_M: f64 = 1e-6;
        self.value_outside_rim(pole, pole, RIM_M) + RIM_M.ln() * 0.5 * FRAC_1_PI
    }

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

/// Why an outline has no Green's function.
#[derive(Clone, Copy, Debug, Error, PartialEq)]
pub enum GreenError {
    /// No edge fixes the head and no influence radius is given.
    #[error("no river fixes the head, so a steady cone of depression has no edge")]
    NoSteadyState,
    /// A general outline: its shape does not tell where its edges run;
    /// [`General::new`] solves its boundary.
    #[error("the outline is a general one, and its shape alone does not tell where its edges run")]
    General,
    /// The influence radius reaches over too many images.
    #[error("the influence radius reaches some {images:.0} image wells, more than {most:.0}")]
    TooManyImages {
        /// How many images each well would have.
        images: f64,
        /// The largest number that is summed.
        most: f64,
    },
}

/// The Green's function of a named shape.
///
/// With a river, image wells hold its head. Without one the influence radius
/// (metres) bounds the cones; a closed box of barriers has Neumann's function
/// of zero mean, right only for wells whose pumping and injection balance.
///
/// # Errors
/// `NoSteadyState` where a radius is needed and missing; `TooManyImages`;
/// `General` for a general outline, which [`General::new`] solves.
pub fn of(shape: &Shape, influence_radius_m: Option<f64>) -> Result<Box<dyn Green>, GreenError> {
    use Axis::{OneEdge, Open, TwoEdges};
    use Kind::{FixedHead, NoFlow};
    if influence::needs_radius(shape) {
        let radius = influence_radius_m.ok_or(GreenError::NoSteadyState)?;
        return Ok(Box::new(Influence::new(*shape, radius)?));
    }
    Ok(match *shape {
        Shape::Axes { x, y } => match (x, y) {
            (
                TwoEdges { width_m, kinds },
                TwoEdges {
                    width_m: height_m,
                    kinds: across,
                },
            ) => Box::new(Rows::of_box(width_m, kinds, height_m, across)),
            (TwoEdges { width_m, kinds }, y_axis) => Box::new(Rows::new(width_m, kinds, y_axis)),
            (OneEdge(FixedHead), OneEdge(FixedHead)) => Box::new(Corner::TwoRivers),
            (OneEdge(FixedHead), OneEdge(NoFlow)) => Box::new(Corner::RiverThenBarrier),
            (OneEdge(NoFlow), OneEdge(FixedHead)) => Box::new(Corner::BarrierThenRiver),
            (OneEdge(_), _) => Box::new(Corner::River),
            (Open, _) => return Err(GreenError::NoSteadyState),
        },
        Shape::Wedge { angle_rad, kinds } => Box::new(Wedge::new(angle_rad, kinds)),
        Shape::CloggedHalfPlane { skin_m } => Box::new(Clogged::new(skin_m)),
        Shape::Disk { radius_m } | Shape::DiskExterior { radius_m } => {
            Box::new(Disk::new(radius_m))
        }
        Shape::General => return Err(GreenError::General),
    })
}

/// All products of images across x and images across y.
fn product_of(columns: &[AxisImage], rows: &[AxisImage]) -> Vec<Image> {
    rows.iter()
        .flat_map(|row| columns.iter().map(move |column| (row, column)))
        .map(|(row, column)| Image {
            at: Complex64::new(column.position, row.position),
            sign: row.sign * column.sign,
            order: row.order + column.order,
        })
        .collect()
}

/// The `count` images nearest to a pole, itself left out, nearest first.
fn nearest(pole: Complex64, mut images: Vec<Image>, count: usize) -> Vec<Image> {
    images.retain(|image| image.order > 0);
    images.sort_by(|one, other| {
        let distance = |image: &Image| (image.at - pole).norm();
        distance(one)
            .total_cmp(&distance(other))
            .then(one.order.cmp(&other.order))
    });
    images.truncate(count);
    images
}

#[cfg(test)]
mod tests;
