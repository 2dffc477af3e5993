//! What is refused before any geometry is done.

use super::error::{Named, OutlineError};
use super::names;
use super::scene::{edge_places, neighbour_places};
use crate::site::{Anisotropy, Point, Site};

/// Largest coordinate in the local frame, metres.
pub(super) const FARTHEST_M: f64 = 1e8;

/// What a plan lacks before any geometry.
pub(super) fn lacks(site: &Site) -> Vec<OutlineError> {
    let mut errors = Vec::new();
    if site.wells.is_empty() {
        errors.push(OutlineError::NoWell);
    }
    errors
}

/// Numbers with which geometry cannot be done.
pub(super) fn wild_numbers(site: &Site) -> Vec<OutlineError> {
    let edges = site.edges.iter().enumerate().map(|(index, edge)| {
        let places = edge_places(&edge.shape);
        (names::edge(site, index), places)
    });
    let wells = site.wells.iter().enumerate();
    let wells = wells.map(|(index, well)| (names::well(site, index), vec![well.at]));
    let neighbours = site.neighbours.iter().enumerate().map(|(index, part)| {
        let places = neighbour_places(&part.place).to_vec();
        (names::neighbour(site, index), places)
    });
    let is_wild = |(_, places): &(Named, Vec<Point>)| {
        let tame = |value: &f64| value.abs() <= FARTHEST_M;
        !places.iter().flat_map(|place| place.iter()).all(tame)
    };
    let mut errors: Vec<OutlineError> = edges
        .chain(wells)
        .chain(neighbours)
        .filter(is_wild)
        .map(|(part, _)| OutlineError::WildCoordinate { part })
        .collect();
    if let Some(Anisotropy { ratio, azimuth_deg }) = site.aquifer.anisotropy
        && !(ratio.is_finite() && ratio >= 1.0 && azimuth_deg.is_finite())
    {
        errors.push(OutlineError::WildAnisotropy { ratio, azimuth_deg });
    }
    errors
}
