//! What the rivers give to the aquifer, or take from it, before any pumping.
//!
//! Through a part of a side of length L comes −T ∫ ∂h₀/∂n dl, n pointing into
//! the aquifer:
//!
//! | head before pumping | inflow over T |
//! |---|---|
//! | one level | 0 |
//! | linear, of slope g | −L g · n; 0 where g · n = 0, else none where L is infinite |
//! | bent around a lake | 0: what enters on one side leaves on the other |
//! | linear in a wedge's angle | none: infinite at the apex, where two stages meet |
//! | by harmonic measures | none, see below |
//!
//! Rivers of several stages that are not just two opposite ones always touch
//! somewhere, if only at infinity, and where two stages touch the flow from one
//! to the other is infinite. A river among them that touches none of another
//! stage exchanges a finite amount, for which there is no closed form here: it
//! is left open too.
//!
//! The inflow of a linear head is exact but for four roundings.

use std::ops::Range;

use num_complex::Complex64;

use super::WellField;
use super::ambient::AmbientHead;
use crate::outline::{Axis, Kind, Shape};

impl WellField {
    /// Water that edge `Site::edges[edge]` gives to this aquifer before any
    /// pumping, m³/d; negative where it takes water from it, zero for a
    /// barrier, none where it is infinite or not determined.
    pub fn ambient_inflow_m3_d(&self, edge: usize) -> Option<f64> {
        let shape = &self.outline.shape;
        let kinds = shape.side_kinds();
        let sides = kinds.iter().zip(&self.outline.sides).enumerate();
        let inflow_m: Option<f64> = sides
            .filter(|(_, (kind, _))| **kind == Kind::FixedHead)
            .flat_map(|(side, (_, pieces))| pieces.iter().map(move |piece| (side, piece)))
            .filter(|(_, piece)| piece.edge == edge)
            .map(|(side, piece)| inflow_m(&self.ambient, shape, side, &piece.along))
            .sum();
        inflow_m.map(|inflow_m| self.transmissivity_m2_d * inflow_m)
    }
}

/// Inflow through a part of a fixed-head side over the transmissivity, metres.
fn inflow_m(head: &AmbientHead, shape: &Shape, side: usize, along: &Range<f64>) -> Option<f64> {
    if head.per_radian_m != 0.0 || !head.measured.is_empty() {
        return None;
    }
    let across = inward(shape, side).map_or(0.0, |normal| (head.slope.conj() * normal).re);
    let length_m = along.end - along.start;
    match across {
        0.0 => Some(0.0),
        _ => length_m.is_finite().then_some(-across * length_m),
    }
}

/// The unit normal of an axis-parallel side, into the aquifer. Other shapes
/// have no linear head that crosses their sides.
fn inward(shape: &Shape, side: usize) -> Option<Complex64> {
    let Shape::Axes { x, y } = *shape else {
        return None;
    };
    let count = |axis: Axis| match axis {
        Axis::Open => 0,
        Axis::OneEdge(_) => 1,
        Axis::TwoEdges { .. } => 2,
    };
    let (across_x, across_y) = (Complex64::new(1.0, 0.0), Complex64::i());
    let normals = [across_x, -across_x].into_iter().take(count(x));
    let more = [across_y, -across_y].into_iter().take(count(y));
    normals.chain(more).nth(side)
}
