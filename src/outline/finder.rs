//! Finds for a place of a general outline whether the aquifer holds it, and
//! how far its nearest side is.

use super::frame::Frame;
use super::general::{Boundary, BoundarySide};
use super::inside::Inside;
use super::nearest::Nearest;
use super::recognise::Context;

/// The two searches over the sides of a boundary.
#[derive(Debug)]
pub(super) struct Finder {
    /// In the canonical frame.
    pub inside: Inside,
    /// In the site.
    pub nearest: Nearest,
}

impl Finder {
    /// Prepares both searches; none where no well tells inside from outside.
    pub fn of(frame: &Frame, boundary: &Boundary, context: Context<'_>) -> Option<Self> {
        let known = context.wells.first()?;
        let well = context.site.wells.get(*known)?;
        let sides: &[BoundarySide] = &boundary.sides;
        Some(Self {
            inside: Inside::of(boundary, frame.to_canonical(well.at)),
            nearest: Nearest::of(frame, sides),
        })
    }
}
