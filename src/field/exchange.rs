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
//! | in a general outline | by the solver; none where two stages meet |
//!
//! Rivers of several stages that are not just two opposite ones always touch
//! somewhere, if only at infinity, and where two stages touch the flow from one
//! to the other is infinite. A river among them that touches none of another
//! stage exchanges a finite amount, for which there is no closed form here: it
//! is left open too.
//!
//! Recharge leaves through the rivers whatever their stages: `recharge` knows
//! how much through each.
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
        let kinds = self.outline.side_kinds();
        let sides = kinds.iter().zip(&self.outline.sides).enumerate();
        let inflow_m: Option<f64> = sides
            .filter(|(_, (kind, _))| **kind == Kind::FixedHead)
            .flat_map(|(side, (_, pieces))| pieces.iter().map(move |piece| (side, piece)))
            .filter(|(_, piece)| piece.edge == edge)
            .map(|(side, piece)| inflow_m(&self.ambient, shape, side, &piece.along))
            .sum();
        Some(self.transmissivity_m2_d * inflow_m? - self.recharge_to_m3_d(edge)?)
    }
}

/// Inflow through a part of a fixed-head side over the transmissivity, metres.
fn inflow_m(head: &AmbientHead, shape: &Shape, side: usize, along: &Range<f64>) -> Option<f64> {
    // Named one by one, so that no new part of the head is forgotten here.
    let AmbientHead {
        level_m: _,
        slope,
        lake_radius_m: _,
        per_radian_m,
        measured,
        solved,
        // Added by the caller, as what leaves.
        recharge: _,
    } = head;
    if let Some(solved) = solved {
        return solved.general.outflow_before_m(side, along);
    }
    if *per_radian_m != 0.0 || !measured.is_empty() {
        return None;
    }
    let across = (slope.conj() * inward(shape, side)).re;
    if across == 0.0 {
        return Some(0.0);
    }
    let length_m = along.end - along.start;
    length_m.is_finite().then_some(-across * length_m)
}

/// The unit normal of an axis-parallel side, into the aquifer; zero for shapes
/// through whose sides no linear head drives water.
fn inward(shape: &Shape, side: usize) -> Complex64 {
    let (x, y) = match *shape {
        Shape::Axes { x, y } => (x, y),
        Shape::CloggedHalfPlane { .. } => return Complex64::ONE,
        Shape::Wedge { .. } | Shape::Disk { .. } | Shape::DiskExterior { .. } | Shape::General => {
            return Complex64::ZERO;
        }
    };
    let count = |axis: Axis| match axis {
        Axis::Open => 0,
        Axis::OneEdge(_) => 1,
        Axis::TwoEdges { .. } => 2,
    };
    let (east, north) = (Complex64::ONE, Complex64::I);
    let normals = [east, -east].into_iter().take(count(x));
    let mut normals = normals.chain([north, -north].into_iter().take(count(y)));
    normals.nth(side).unwrap_or_default()
}
