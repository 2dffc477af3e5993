//! Rings of points around wells, from the rim outward.
//!
//! Between two rings whose radii have a fixed ratio a logarithmic cone falls
//! by a fixed amount, so geometric rings follow it evenly from a borehole's
//! rim to the spacing of the grid, and every contour round a well has at least
//! 48 vertices however small it is.

use std::f64::consts::TAU;

use spade::{DelaunayTriangulation, HierarchyHintGenerator, Point2, Triangulation};

use super::Bump;
use super::grid::Grid;
use crate::site::{Point, Vector};

/// Points on a ring. Departure from theory: tuned for looks, a 24-gon's
/// contour strays from the circle by 0.2 % of its radius.
const RING_POINTS: usize = 24;

/// Ratio of the radii of neighbouring rings; tuned so that triangles between
/// rings are about as tall as wide.
const RING_RATIO: f64 = 1.3;

/// Rings end at this many steps of the grid.
const REACH_STEPS: f64 = 1.2;

/// No rim is smaller, metres.
const LEAST_RIM_M: f64 = 1e-3;

/// Distance of neighbours on a ring, as a share of its radius.
pub(super) const RING_STEP: f64 = TAU / RING_POINTS as f64;

type Index = DelaunayTriangulation<Point2<f64>, (), (), (), HierarchyHintGenerator<f64>>;

/// The wells that need rings: those within reach of the map whose rim is
/// smaller than the reach of rings.
pub(super) struct Wells {
    bumps: Vec<Bump>,
    index: Index,
    reach_m: f64,
    least_rim_m: f64,
}

/// A point of a ring.
pub(super) struct RingPoint {
    pub(super) at: Point,
    /// Distance of its neighbours on the ring, metres.
    pub(super) step_m: f64,
}

impl Wells {
    pub(super) fn new(bumps: &[Bump], grid: &Grid) -> Self {
        let reach_m = REACH_STEPS * grid.step_m();
        let low = grid.place(0, 0) - Vector::repeat(reach_m);
        let high = grid.node(grid.node_count() - 1) + Vector::repeat(reach_m);
        let mut index = Index::new();
        let mut kept = Vec::new();
        let mut least_rim_m = f64::INFINITY;
        for bump in bumps {
            let rim_m = bump.rim_m.max(LEAST_RIM_M);
            let near = bump.at.x >= low.x && bump.at.x <= high.x;
            let near = near && bump.at.y >= low.y && bump.at.y <= high.y;
            if near && rim_m < reach_m && index.insert(spade_point(bump.at)).is_ok() {
                least_rim_m = least_rim_m.min(rim_m);
                kept.push(Bump { at: bump.at, rim_m });
            }
        }
        Self {
            bumps: kept,
            index,
            reach_m,
            least_rim_m,
        }
    }

    /// Radius within which rings take the place of the grid, metres.
    pub(super) fn reach_m(&self) -> f64 {
        self.reach_m
    }

    /// Where the wells are.
    pub(super) fn places(&self) -> impl Iterator<Item = Point> + '_ {
        self.bumps.iter().map(|bump| bump.at)
    }

    /// Distance to the nearest well, metres; infinite without wells.
    pub(super) fn distance_m(&self, point: Point) -> f64 {
        self.index
            .nearest_neighbor(spade_point(point))
            .map_or(f64::INFINITY, |well| {
                let at = well.position();
                (at.x - point.x).hypot(at.y - point.y)
            })
    }

    /// Longest piece of the outline that still follows the field, for a piece
    /// with this middle and length, metres.
    pub(super) fn longest_piece_m(&self, middle: Point, length_m: f64, step_m: f64) -> f64 {
        let distance_m = self.distance_m(middle);
        if distance_m - 0.5 * length_m > self.reach_m {
            return step_m;
        }
        (0.4 * distance_m)
            .max(RING_STEP * self.least_rim_m)
            .min(step_m)
    }

    /// The middle and the rings of every well, each point with the distance of
    /// its neighbours; leaves out points that another well's rings serve
    /// better.
    pub(super) fn points(&self) -> impl Iterator<Item = RingPoint> + '_ {
        self.bumps.iter().flat_map(move |bump| {
            let middle = RingPoint {
                at: bump.at,
                step_m: RING_STEP * bump.rim_m,
            };
            let radii = std::iter::successors(Some(bump.rim_m), |radius| Some(radius * RING_RATIO))
                .take_while(|&radius| radius <= self.reach_m)
                .enumerate();
            let rings = radii.flat_map(move |(ring, radius)| {
                self.ring(bump.at, radius, if ring % 2 == 0 { 0.0 } else { 0.5 })
            });
            std::iter::once(middle).chain(rings)
        })
    }

    fn ring(&self, centre: Point, radius: f64, turn: f64) -> impl Iterator<Item = RingPoint> + '_ {
        (0..RING_POINTS)
            .map(move |number| {
                let angle = (number as f64 + turn) * RING_STEP;
                centre + Vector::new(angle.cos(), angle.sin()) * radius
            })
            .filter(move |&at| self.distance_m(at) >= 0.85 * radius)
            .map(move |at| RingPoint {
                at,
                step_m: RING_STEP * radius,
            })
    }
}

/// A point as the triangulation takes it: it refuses numbers that are closer
/// to zero than 1e-43 without being zero.
pub(super) fn spade_point(point: Point) -> Point2<f64> {
    spade::mitigate_underflow(Point2::new(point.x, point.y))
}
