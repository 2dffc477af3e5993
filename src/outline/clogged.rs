//! Turns a half-plane whose river has a clogged bank into the shape that knows
//! the bank's skin; refuses other outlines with clogged banks.
//!
//! A bank of resistance c (its skin's thickness over its conductivity, days)
//! lets D (stage − h)/c of water through each metre of its length, D being the
//! aquifer's thickness. The stretch to isotropy has determinant 1 and keeps
//! the discharge through corresponding lengths, so that in canonical metres
//!
//!   T ∂h/∂x = (D/c) (h − stage) · ℓ_site/ℓ_canonical,
//!
//! that is ∂h/∂x = (h − stage)/b with the skin b = (T c/D) ℓ_canonical/ℓ_site;
//! without anisotropy b = K c.

use num_complex::Complex64;

use super::error::OutlineError;
use super::names;
use super::shape::{Axis, Kind, Shape};
use super::{Outline, Piece};
use crate::site::{EdgeKind, Site};

/// The outline with the skins of its banks.
pub(super) fn with_banks(site: &Site, outline: Outline) -> Result<Outline, Vec<OutlineError>> {
    let pieces: Vec<&Piece> = outline.sides.iter().flatten().collect();
    let clogged = pieces.iter().find(|piece| days(site, piece.edge) > 0.0);
    let Some(edge) = clogged.map(|piece| piece.edge) else {
        return Ok(outline);
    };
    let (river, resistance) = (|| names::edge(site, edge), days(site, edge));
    let half_plane = Shape::Axes {
        x: Axis::OneEdge(Kind::FixedHead),
        y: Axis::Open,
    };
    if outline.shape != half_plane {
        return Err(vec![OutlineError::BankResistance {
            river: river(),
            days: resistance,
            shape: outline.shape.name(),
        }]);
    }
    let other = pieces
        .iter()
        .find(|piece| days(site, piece.edge) != resistance);
    if let Some(other) = other {
        return Err(vec![OutlineError::BanksDiffer {
            river: river(),
            days: resistance,
            other: names::edge(site, other.edge),
            other_days: days(site, other.edge),
        }]);
    }
    let Some(thickness) = site.aquifer.thickness else {
        return Err(vec![OutlineError::BankWithoutThickness {
            river: river(),
            days: resistance,
        }]);
    };
    let conductivity = site.aquifer.transmissivity.si() / thickness.si();
    let site_length = outline.frame.direction_to_site(Complex64::I).norm();
    let shape = Shape::CloggedHalfPlane {
        skin_m: conductivity * resistance / site_length,
    };
    Ok(Outline { shape, ..outline })
}

/// The bank resistance of an edge, days; zero where it has none.
fn days(site: &Site, edge: usize) -> f64 {
    match site.edges.get(edge).map(|edge| &edge.kind) {
        Some(EdgeKind::River {
            bank_resistance: Some(resistance),
            ..
        }) => resistance.si(),
        _ => 0.0,
    }
}
