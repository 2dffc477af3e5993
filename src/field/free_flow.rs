//! Which uniform flow the edges of an outline leave free.

use num_complex::Complex64;

use crate::outline::{Axis, Kind, Shape};

/// The part of a uniform slope that the edges leave free, in the canonical
/// frame.
pub(super) fn part_of(shape: &Shape, slope: Complex64) -> Complex64 {
    match free_flow(shape) {
        FreeFlow::No => Complex64::ZERO,
        FreeFlow::Any => slope,
        FreeFlow::Along(axis) => axis * (slope * axis.conj()).re,
    }
}

/// Which uniform flow the edges leave free, in the canonical frame.
#[derive(Clone, Copy, Debug, PartialEq)]
enum FreeFlow {
    /// None.
    No,
    /// Along one axis only: a unit number.
    Along(Complex64),
    /// In any direction.
    Any,
}

fn free_flow(shape: &Shape) -> FreeFlow {
    use Axis::{OneEdge, Open, TwoEdges};
    use Kind::{FixedHead, NoFlow};
    let (x_axis, y_axis) = (Complex64::new(1.0, 0.0), Complex64::i());
    match *shape {
        Shape::DiskExterior { .. } => FreeFlow::Any,
        Shape::CloggedHalfPlane { .. } => FreeFlow::Along(x_axis),
        Shape::Wedge { .. } | Shape::Disk { .. } | Shape::General => FreeFlow::No,
        Shape::Axes { x, y } => match (x, y) {
            (Open, Open) => FreeFlow::Any,
            (OneEdge(FixedHead), Open | OneEdge(NoFlow)) => FreeFlow::Along(x_axis),
            (OneEdge(NoFlow), Open | OneEdge(FixedHead)) => FreeFlow::Along(y_axis),
            (
                TwoEdges {
                    kinds: [NoFlow, NoFlow],
                    ..
                },
                Open | OneEdge(FixedHead),
            ) => FreeFlow::Along(y_axis),
            _ => FreeFlow::No,
        },
    }
}
