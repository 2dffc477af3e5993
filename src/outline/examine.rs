//! Examines a general outline once more as a whole: that it holds its wells,
//! and has the aquifer to the left of every side and not to the right.
//!
//! Joining places within 1 mm, and chords for circles, could in rare drawings
//! turn two sides that all but touch into sides that cross; this finds it.

use num_complex::Complex64;

use super::Outline;
use super::error::OutlineError;
use super::general::{Boundary, BoundarySide, Curve};
use super::names;
use super::recognise::Context;
use crate::site::{EdgeShape, Point};

/// How far beside a side is looked, metres, and as a share of its length: far
/// less than two sides lie apart, far more than rounding.
const BESIDE_M: f64 = 1e-4;
const BESIDE: f64 = 1e-6;

/// Where along a side is looked, as shares of it.
const SHARES: [f64; 3] = [0.25, 0.5, 0.75];

/// What is wrong with an outline of general shape, as an error.
pub(super) fn faults(context: Context<'_>, outline: &Outline) -> Result<(), Vec<OutlineError>> {
    let Some(boundary) = &outline.boundary else {
        return Ok(());
    };
    let site = context.site;
    let lost = |&&well: &&usize| {
        let well = site.wells.get(well);
        well.is_some_and(|well| !outline.holds(well.at))
    };
    if let Some(&well) = outline.wells.iter().find(lost) {
        let at = site.wells.get(well).map(|well| well.at);
        let edge = at.and_then(|at| nearest_edge(outline, boundary, at));
        return Err(vec![OutlineError::OnEdge {
            part: names::well(site, well),
            edge: names::edge(site, edge.unwrap_or(0)),
            distance: names::length(at.map_or(0.0, |at| outline.distance_to_edge_m(at))),
        }]);
    }
    let crossed = boundary
        .sides
        .iter()
        .find_map(|side| Some((side, misplaced(outline, side, context)?)));
    match crossed {
        None => Ok(()),
        Some((side, z)) => Err(vec![OutlineError::SidesCross {
            edge: names::edge(site, side.edge),
            place: place_in_words(context, side.edge, outline.frame.to_site(z)),
        }]),
    }
}

/// A place of an edge by its nearest vertex, or by its azimuth on a circle.
fn place_in_words(context: Context<'_>, edge: usize, place: Point) -> String {
    match context.site.edges.get(edge).map(|edge| &edge.shape) {
        Some(EdgeShape::Circle { centre, .. }) => {
            let outward = place - centre;
            let azimuth = outward.x.atan2(outward.y).rem_euclid(std::f64::consts::TAU);
            format!("at azimuth {} from its centre", names::angle(azimuth))
        }
        Some(EdgeShape::Line(points)) => {
            let distances = points.iter().map(|point| (point - place).norm());
            let nearest = distances.enumerate().min_by(|a, b| a.1.total_cmp(&b.1));
            nearest.map_or_else(String::new, |(vertex, distance_m)| {
                let distance = names::length(distance_m);
                format!("{distance} from its vertex number {}", vertex + 1)
            })
        }
        None => String::new(),
    }
}

/// A place of a side that has not the aquifer to its left alone.
fn misplaced(outline: &Outline, side: &BoundarySide, context: Context<'_>) -> Option<Complex64> {
    let along = side.curve.along();
    let extent_m = context.scene.extent_m;
    let (length, scale) = match side.curve {
        Curve::Segment { .. } => (along.end, 1.0),
        Curve::RayIn { .. } => (-4.0 * extent_m, 1.0),
        Curve::RayOut { .. } => (4.0 * extent_m, 1.0),
        Curve::Arc { radius, .. } => (along.end, radius),
    };
    let beside_m = BESIDE_M.min(BESIDE * scale * length.abs());
    let finder = outline.finder.as_ref()?;
    let places = SHARES.iter().map(|share| share * length);
    places
        .map(|position| (side.curve.at(position), side.curve.heading(position)))
        .find(|&(z, heading)| {
            let left = heading * Complex64::I * beside_m;
            let misses = !finder.inside.holds(z + left, 0.0);
            misses || finder.inside.holds(z - left, 0.0)
        })
        .map(|(z, _)| z)
}

/// The edge of the side that is nearest to a place of the site.
fn nearest_edge(outline: &Outline, boundary: &Boundary, place: Point) -> Option<usize> {
    let distance = |side: &BoundarySide| {
        let of_one = super::nearest::Nearest::of(&outline.frame, std::slice::from_ref(side));
        of_one.distance_m(place)
    };
    let nearest = boundary
        .sides
        .iter()
        .map(|side| (distance(side), side.edge))
        .min_by(|a, b| a.0.total_cmp(&b.0));
    nearest.map(|(_, edge)| edge)
}
