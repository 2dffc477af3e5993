//! Says in words what an outline is.

use super::general::Condition;
use super::names;
use super::shape::{Axis, Kind, Shape};
use super::{Outline, Piece};
use crate::site::Site;

impl Outline {
    /// The rivers or barriers that make a canonical side: "river Ostra", or
    /// "river Ostra and river Lower Ostra".
    pub fn side_name(&self, site: &Site, side: usize) -> String {
        let mut edges: Vec<String> = Vec::new();
        let pieces: &[Piece] = self.sides.get(side).map_or(&[], Vec::as_slice);
        for piece in pieces {
            let name = names::edge(site, piece.edge).words;
            if !edges.contains(&name) {
                edges.push(name);
            }
        }
        names::listed(&edges)
    }

    /// The outline in one line: "strip 1,240 m wide between river Ostra
    /// (fixed head) and barrier granite edge (no flow)".
    pub fn words(&self, site: &Site) -> String {
        let kinds = self.side_kinds();
        let sides = self.sides_in_words(site);
        let between = if sides.len() > 1 { "between" } else { "within" };
        let sides = match self.shape {
            Shape::General => names::few(&sides),
            _ => names::listed(&sides),
        };
        let name = self.shape.name();
        let stretched = if self.frame.stretch == super::Stretch::none() {
            ""
        } else {
            ", lengths and angles stretched to isotropy"
        };
        let text = match self.shape {
            Shape::CloggedHalfPlane { .. } => format!("half-plane beside {sides}"),
            Shape::Axes { x, y } => match (width(x), width(y)) {
                (None, None) if kinds.is_empty() => name.to_owned(),
                (None, None) if kinds.len() == 1 => format!("{name} beside {sides}"),
                (None, None) => format!("{name} {between} {sides}"),
                (Some(width), None) | (None, Some(width)) => {
                    format!("{name} {width} wide {between} {sides}")
                }
                (Some(width), Some(length)) => format!("{name} {width} by {length} within {sides}"),
            },
            Shape::Wedge { angle_rad, .. } => {
                format!("{name} of {} {between} {sides}", names::angle(angle_rad))
            }
            Shape::Disk { radius_m } => {
                format!(
                    "{name} of radius {} inside {sides}",
                    names::length(radius_m)
                )
            }
            Shape::General => format!("{name} {between} {sides}"),
            Shape::DiskExterior { radius_m } => {
                let radius = names::length(radius_m);
                format!("{name} of radius {radius}: {sides}")
            }
        };
        text + stretched
    }

    /// The sides with what they do to the head. One edge may bend round
    /// several sides; it is named once.
    fn sides_in_words(&self, site: &Site) -> Vec<String> {
        let mut sides: Vec<String> = Vec::new();
        for (side, kind) in self.side_kinds().into_iter().enumerate() {
            let condition = self.condition_words(side, kind);
            let words = format!("{} ({condition})", self.side_name(site, side));
            if !sides.contains(&words) {
                sides.push(words);
            }
        }
        sides
    }

    /// What a side of a kind does to the head.
    fn condition_words(&self, side: usize, kind: Kind) -> &'static str {
        let is_clogged = match &self.boundary {
            Some(boundary) => boundary
                .sides
                .get(side)
                .is_some_and(|side| matches!(side.condition, Condition::Clogged { .. })),
            None => matches!(self.shape, Shape::CloggedHalfPlane { .. }),
        };
        match kind {
            Kind::FixedHead if is_clogged => "clogged bank",
            Kind::FixedHead => "fixed head",
            Kind::NoFlow => "no flow",
        }
    }
}

/// The width across an axis in words, where it has two edges.
fn width(axis: Axis) -> Option<String> {
    match axis {
        Axis::TwoEdges { width_m, .. } => Some(names::length(width_m)),
        Axis::Open | Axis::OneEdge(_) => None,
    }
}
