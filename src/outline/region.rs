//! Where an outline lies: what it holds, and how far its edges are.

use std::f64::consts::TAU;

use num_complex::Complex64;

use super::general::Curve;
use super::shape::{Axis, Kind, Shape};
use super::{Outline, Piece};
use crate::site::Point;

/// Share of a place's distance by which it may lie outside and still count
/// as on the edge.
const ON_EDGE: f64 = 1e-9;

impl Outline {
    /// Whether a place of the site lies in the aquifer or on its edge, to
    /// within 1e-9 of its distance from the canonical origin and the rounding of
    /// its coordinates.
    pub fn holds(&self, point: Point) -> bool {
        let z = self.frame.to_canonical(point);
        let slack = ON_EDGE * z.norm() + self.rounding_m(point);
        match self.shape.unclogged() {
            Shape::Axes { x, y } => within(x, z.re, slack) && within(y, z.im, slack),
            Shape::CloggedHalfPlane { .. } => z.re >= -slack,
            Shape::Wedge { angle_rad, .. } => {
                // Near the apex no angle tells a place on a side from one off it.
                let slack_rad = slack / z.norm().max(slack);
                let from_first = z.arg().rem_euclid(TAU);
                // Just below the first side the argument is almost a full turn.
                let below = TAU - from_first;
                z.norm() <= slack || from_first <= angle_rad + slack_rad || below <= slack_rad
            }
            Shape::Disk { radius_m } => z.norm() <= radius_m + slack,
            Shape::DiskExterior { radius_m } => z.norm() + slack >= radius_m,
            Shape::General => self
                .finder
                .as_ref()
                .is_some_and(|finder| finder.inside.holds(z, slack)),
        }
    }

    /// How far a place may be moved by stretching, shifting and turning it:
    /// 8ε of the coordinates involved.
    fn rounding_m(&self, point: Point) -> f64 {
        let stretched = self.frame.stretch.apply(point);
        8.0 * f64::EPSILON * (stretched.coords.norm() + self.frame.origin.norm())
    }

    /// Distance of a place from the nearest edge of the aquifer, in metres of
    /// the site; infinite in an open plane.
    pub fn distance_to_edge_m(&self, point: Point) -> f64 {
        if let Some(finder) = &self.finder {
            return finder.nearest.distance_m(point);
        }
        let sides = self.sides.iter().enumerate();
        sides
            .flat_map(|(side, pieces)| pieces.iter().map(move |piece| (side, piece)))
            .map(|(side, piece)| self.distance_to_piece(side, piece, point))
            .fold(f64::INFINITY, f64::min)
    }

    /// Distance of a place from one piece of a side, metres of the site.
    fn distance_to_piece(&self, side: usize, piece: &Piece, point: Point) -> f64 {
        if let Shape::Disk { radius_m } | Shape::DiskExterior { radius_m } = self.shape {
            return (self.frame.to_canonical(point).norm() - radius_m).abs();
        }
        let line = self.side_line(side);
        let along = line
            .nearest(self, point)
            .clamp(piece.along.start, piece.along.end);
        (self.frame.to_site(line.at(along)) - point).norm()
    }

    /// The course of a side of a general outline.
    pub(super) fn curve(&self, side: usize) -> Option<Curve> {
        let boundary = self.boundary.as_ref()?;
        boundary.sides.get(side).map(|side| side.curve)
    }

    /// Where a side is round: its course, positions along it the arc angle.
    pub(super) fn round_side(&self, side: usize) -> Option<Curve> {
        match self.shape {
            Shape::Disk { radius_m } | Shape::DiskExterior { radius_m } => Some(Curve::Arc {
                centre: Complex64::ZERO,
                radius: radius_m,
                start_rad: 0.0,
                sweep_rad: TAU,
            }),
            Shape::General => self
                .curve(side)
                .filter(|curve| matches!(curve, Curve::Arc { .. })),
            Shape::Axes { .. } | Shape::Wedge { .. } | Shape::CloggedHalfPlane { .. } => None,
        }
    }

    /// The kinds of the sides, in their order; a clogged river counts as
    /// fixed head.
    pub fn side_kinds(&self) -> Vec<Kind> {
        match &self.boundary {
            Some(boundary) => boundary.kinds(),
            None => self.shape.side_kinds(),
        }
    }

    /// Whether edges close the aquifer on all sides.
    pub fn is_closed(&self) -> bool {
        match (self.shape, &self.boundary) {
            (_, Some(boundary)) => boundary.is_bounded(),
            (
                Shape::Axes {
                    x: Axis::TwoEdges { .. },
                    y: Axis::TwoEdges { .. },
                }
                | Shape::Disk { .. },
                None,
            ) => true,
            _ => false,
        }
    }

    /// The straight line of a canonical side.
    pub(super) fn side_line(&self, side: usize) -> SideLine {
        let lines = match self.shape.unclogged() {
            Shape::Axes { x, y } => {
                let across_x = places(x).map(|x| SideLine {
                    origin: Complex64::new(x, 0.0),
                    axis: Complex64::I,
                });
                let across_y = places(y).map(|y| SideLine {
                    origin: Complex64::new(0.0, y),
                    axis: Complex64::ONE,
                });
                across_x.chain(across_y).nth(side)
            }
            Shape::Wedge { angle_rad, .. } => Some(SideLine {
                origin: Complex64::ZERO,
                axis: if side == 0 {
                    Complex64::ONE
                } else {
                    Complex64::cis(angle_rad)
                },
            }),
            Shape::CloggedHalfPlane { .. } | Shape::Disk { .. } | Shape::DiskExterior { .. } => {
                None
            }
            Shape::General => self.curve(side).and_then(straight_line),
        };
        lines.unwrap_or(SideLine {
            origin: Complex64::ZERO,
            axis: Complex64::ONE,
        })
    }
}

/// A canonical line: origin + along · axis.
#[derive(Clone, Copy, Debug)]
pub(super) struct SideLine {
    /// Where `along` is zero.
    pub origin: Complex64,
    /// Unit number along it.
    pub axis: Complex64,
}

impl SideLine {
    /// The canonical place at a position.
    pub fn at(&self, along: f64) -> Complex64 {
        self.origin + self.axis * along
    }

    /// The position nearest to a place as the site measures it.
    fn nearest(&self, outline: &Outline, point: Point) -> f64 {
        let start = outline.frame.to_site(self.origin);
        let step = outline.frame.direction_to_site(self.axis);
        step.dot(&(point - start)) / step.norm_squared()
    }
}

/// The line of a straight curve.
fn straight_line(curve: Curve) -> Option<SideLine> {
    let origin = match curve {
        Curve::Segment { from, .. } | Curve::RayOut { from, .. } => from,
        Curve::RayIn { to, .. } => to,
        Curve::Arc { .. } => return None,
    };
    Some(SideLine {
        origin,
        axis: curve.heading(0.0),
    })
}

/// The places of the edges across an axis.
fn places(axis: Axis) -> impl Iterator<Item = f64> {
    let places = match axis {
        Axis::Open => [None, None],
        Axis::OneEdge(_) => [Some(0.0), None],
        Axis::TwoEdges { width_m, .. } => [Some(0.0), Some(width_m)],
    };
    places.into_iter().flatten()
}

/// Whether a coordinate lies between the edges across its axis.
fn within(axis: Axis, value: f64, slack: f64) -> bool {
    match axis {
        Axis::Open => true,
        Axis::OneEdge(_) => value >= -slack,
        Axis::TwoEdges { width_m, .. } => value >= -slack && value <= width_m + slack,
    }
}
