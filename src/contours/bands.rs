//! Bands: what lies between two neighbouring levels.
//!
//! Method: the rim of a band consists of contours and of stretches of the
//! outline, with the band to the left. From each vertex there is exactly one
//! way on, so rings are followed by numbers alone.

use rayon::prelude::*;

use super::cuts::Cuts;
use super::mesh::{Mesh, NONE};
use super::nesting::{Ring, nest};
use super::{ContourError, ScalarField};

/// The part of a region between two levels.
#[derive(Clone, Debug, PartialEq)]
pub struct Band {
    /// Lower end, metres; the field's smallest value at a node in the lowest
    /// band.
    pub from: f64,
    /// Upper end, metres; the field's largest value at a node in the highest
    /// band.
    pub to: f64,
    /// Where it is: outer rings counter-clockwise, holes clockwise.
    pub polygons: geo::MultiPolygon<f64>,
}

/// A vertex of a band's rim.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Vertex {
    /// The start of a piece of the outline.
    Corner(u32),
    /// A cut, seen from the band above its level or from the one below.
    Cut { cut: u32, from_above: bool },
}

impl Cuts<'_> {
    /// The bands, from the lowest up; levels that the region does not reach
    /// have none. Together they cover the region without gap or overlap.
    pub fn bands(&self) -> Vec<Band> {
        let polygons: Vec<geo::MultiPolygon<f64>> = self.rims().into_par_iter().map(nest).collect();
        polygons
            .into_iter()
            .enumerate()
            .filter(|(_, polygons)| !polygons.0.is_empty())
            .map(|(class, polygons)| {
                let below = class.checked_sub(1).and_then(|i| self.levels.get(i));
                Band {
                    from: below.copied().unwrap_or(self.extremes[0]),
                    to: self.levels.get(class).copied().unwrap_or(self.extremes[1]),
                    polygons,
                }
            })
            .collect()
    }

    /// The rings of each class.
    fn rims(&self) -> Vec<Vec<Ring>> {
        let mut rims = vec![Vec::new(); self.levels.len() + 1];
        let mut tracer = Tracer {
            corners: vec![false; self.mesh.outline.len()],
            above: vec![false; self.points.len()],
            below: vec![false; self.points.len()],
        };
        let corners = (0u32..).zip(&self.mesh.outline);
        for (corner, piece) in corners {
            let ring = tracer.follow(self, Vertex::Corner(corner));
            store(&mut rims, self.class(piece.from), ring);
        }
        for (cut, &level) in (0u32..).zip(&self.level_of) {
            for from_above in [false, true] {
                let ring = tracer.follow(self, Vertex::Cut { cut, from_above });
                store(&mut rims, level + u32::from(from_above), ring);
            }
        }
        rims
    }

    /// The vertex after another on the rim of its band.
    fn after(&self, vertex: Vertex) -> Option<Vertex> {
        match vertex {
            Vertex::Corner(corner) => self.along_outline(corner, None),
            Vertex::Cut { cut, from_above } => {
                let joined = if from_above {
                    &self.previous
                } else {
                    &self.next
                };
                match *joined.get(cut as usize)? {
                    NONE => {
                        let corner = self.mesh.outline_of(self.edge_of(cut))?;
                        self.along_outline(corner, Some(cut))
                    }
                    cut => Some(Vertex::Cut { cut, from_above }),
                }
            }
        }
    }

    /// The next vertex on a piece of the outline after one of its cuts, or
    /// after its start.
    fn along_outline(&self, corner: u32, after: Option<u32>) -> Option<Vertex> {
        let piece = self.mesh.outline.get(corner as usize)?;
        let cuts = self.cuts_of(piece.edge);
        let rises = self.class(piece.from) <= self.class(piece.to);
        let next = match (after, rises) {
            (None, true) => cuts.start,
            (None, false) => cuts.end.wrapping_sub(1),
            (Some(cut), true) => cut + 1,
            (Some(cut), false) => cut.wrapping_sub(1),
        };
        Some(if cuts.contains(&next) {
            // Going up, a level is met from below.
            Vertex::Cut {
                cut: next,
                from_above: !rises,
            }
        } else {
            Vertex::Corner(piece.next)
        })
    }

    fn position(&self, vertex: Vertex) -> Option<(geo::Coord<f64>, u32)> {
        let (point, node) = match vertex {
            Vertex::Corner(corner) => {
                let node = self.mesh.outline.get(corner as usize)?.from;
                (self.mesh.node(node), node)
            }
            Vertex::Cut { cut, .. } => (*self.points.get(cut as usize)?, NONE),
        };
        Some((
            geo::Coord {
                x: point.x,
                y: point.y,
            },
            node,
        ))
    }
}

fn store(rims: &mut [Vec<Ring>], class: u32, ring: Ring) {
    if let Some(rim) = rims.get_mut(class as usize).filter(|_| !ring.is_empty()) {
        rim.extend(ring.split());
    }
}

/// What has been followed already.
struct Tracer {
    corners: Vec<bool>,
    above: Vec<bool>,
    below: Vec<bool>,
}

impl Tracer {
    /// The ring from a vertex; empty where it was followed before.
    fn follow(&mut self, cuts: &Cuts<'_>, start: Vertex) -> Ring {
        let mut ring = Ring::default();
        let mut vertex = Some(start);
        while let Some(here) = vertex {
            let seen = match here {
                Vertex::Corner(corner) => self.corners.get_mut(corner as usize),
                Vertex::Cut {
                    cut,
                    from_above: true,
                } => self.above.get_mut(cut as usize),
                Vertex::Cut { cut, .. } => self.below.get_mut(cut as usize),
            };
            let Some(unseen @ false) = seen else { break };
            *unseen = true;
            if let Some((coordinate, node)) = cuts.position(here) {
                ring.push(coordinate, node);
            }
            vertex = cuts.after(here);
        }
        ring
    }
}

/// Area, m², of the part of a region where a field is below a level.
///
/// Accuracy: that of the contour, a polygon through exact points.
///
/// # Errors
/// As [`Cuts::refine`].
pub fn area_below(
    mesh: &Mesh,
    values: &[f64],
    field: &dyn ScalarField,
    level: f64,
) -> Result<f64, ContourError> {
    let cuts = Cuts::refine(mesh, values, field, &[level])?;
    let rims = cuts.rims();
    let lowest = rims.first().into_iter().flatten();
    Ok(lowest.map(Ring::signed_area_m2).sum())
}
