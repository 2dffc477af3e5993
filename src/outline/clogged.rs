//! Gives a half-plane whose river has a clogged bank the shape that knows the
//! bank's skin.
//!
//! Its closed form covers one straight bank that is clogged alike all along.

use num_complex::Complex64;

use super::error::OutlineError;
use super::general::Condition;
use super::shape::{Axis, Kind, Shape};
use super::{Outline, Piece, banks};
use crate::site::{Site, Vector};

/// The outline with the skins of its banks; none where no closed form takes
/// them.
///
/// # Errors
/// `NoThickness`.
pub(super) fn with_banks(site: &Site, outline: Outline) -> Result<Option<Outline>, OutlineError> {
    let pieces: Vec<&Piece> = outline.sides.iter().flatten().collect();
    if !pieces
        .iter()
        .any(|piece| banks::is_clogged(site, piece.edge))
    {
        return Ok(Some(outline));
    }
    let half_plane = Shape::Axes {
        x: Axis::OneEdge(Kind::FixedHead),
        y: Axis::Open,
    };
    if outline.shape != half_plane {
        return Ok(None);
    }
    let bank = outline.frame.turn * Complex64::I;
    let bank = Vector::new(bank.re, bank.im);
    let conditions = pieces
        .iter()
        .map(|piece| banks::condition(site, &outline.frame.stretch, piece.edge, bank))
        .collect::<Result<Vec<Condition>, _>>()?;
    Ok(match conditions.split_first() {
        Some((&first, others)) if others.iter().all(|other| *other == first) => {
            of_skin(first).map(|shape| Outline { shape, ..outline })
        }
        _ => None,
    })
}

/// The half-plane behind a bank.
fn of_skin(condition: Condition) -> Option<Shape> {
    match condition {
        Condition::Clogged { skin_m } => Some(Shape::CloggedHalfPlane { skin_m }),
        Condition::Head | Condition::NoFlow => None,
    }
}
