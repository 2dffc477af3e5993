//! Rings of points around wells, from the rim outward.
//!
//! Between two rings whose radii have a fixed ratio a logarithmic cone falls
//! by a fixed amount, so geometric rings follow it evenly from a borehole's
//! rim to the spacing of the grid, and every contour round a well has at least
//! 48 vertices however small it is.

use std::collections::HashSet;
use std::f64::consts::TAU;

use spade::{DelaunayTriangulation, HierarchyHintGenerator, Point2, Triangulation};

use super::grid::Grid;
use super::{Bump, MeshError};
use crate::site::{Point, Vector};

/// Points on a ring. Departure from theory: tuned for looks, a 24-gon's
/// contour strays from the circle by 0.2 % of its radius.
const RING_POINTS: usize = 24;

/// Ratio of the radii of neighbouring rings; tuned so that triangles between
/// rings are about as tall as wide.
const RING_RATIO: f64 = 1.3;

/// Rings end at this many steps of the grid, where their points are nearly as
/// far apart as its nodes.
const REACH_STEPS: f64 = 2.5;

/// Most points of rings; they take about 3 GB and a minute.
const MOST_POINTS: f64 = 1e7;

/// No rim is smaller, metres.
const LEAST_RIM_M: f64 = 1e-3;

/// Distance of neighbours on a ring, as a share of its radius.
pub(super) const RING_STEP: f64 = TAU / RING_POINTS as f64;

type Index = DelaunayTriangulation<Point2<f64>, (), (), (), HierarchyHintGenerator<f64>>;

/// The wells that need rings: those within reach of the map whose rim is
/// smaller than the reach of rings.
pub(super) struct Wells {
    bumps: Vec<Bump>,
    /// By well: the radius within which no point is nearer to another well.
    own_m: Vec<f64>,
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
    pub(super) fn new(bumps: &[Bump], grid: &Grid) -> Result<Self, MeshError> {
        let reach_m = REACH_STEPS * grid.step_m();
        let low = grid.place(0, 0) - Vector::repeat(reach_m);
        let high = grid.node(grid.node_count() - 1) + Vector::repeat(reach_m);
        let on_map =
            |at: Point| (low.x..=high.x).contains(&at.x) && (low.y..=high.y).contains(&at.y);
        let kept: Vec<Bump> = bumps
            .iter()
            .map(|bump| Bump {
                at: bump.at,
                rim_m: bump.rim_m.max(LEAST_RIM_M),
            })
            .filter(|bump| on_map(bump.at) && bump.rim_m < reach_m)
            .collect();
        let rims = kept.iter().map(|bump| bump.rim_m);
        let least_rim_m = rims.fold(f64::INFINITY, f64::min);
        refuse_too_many(kept.len(), least_rim_m, reach_m)?;
        let mut index = Index::new();
        let mut seen = HashSet::new();
        for bump in &kept {
            let coords = bump.at.coords;
            let place = [coords.x, coords.y].map(f64::to_bits);
            if seen.insert(place) && index.insert(spade_point(bump.at)).is_err() {
                return Err(MeshError::Coordinate {
                    x_m: coords.x,
                    y_m: coords.y,
                });
            }
        }
        let own_m = kept
            .iter()
            .map(|bump| own_radius_m(&index, bump.at))
            .collect();
        Ok(Self {
            bumps: kept,
            own_m,
            index,
            reach_m,
            least_rim_m,
        })
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
        self.bumps
            .iter()
            .zip(&self.own_m)
            .flat_map(move |(bump, &own_m)| {
                let middle = RingPoint {
                    at: bump.at,
                    step_m: RING_STEP * bump.rim_m,
                };
                let radii =
                    std::iter::successors(Some(bump.rim_m), |radius| Some(radius * RING_RATIO))
                        .take_while(|&radius| radius <= self.reach_m)
                        .enumerate();
                let rings = radii.flat_map(move |(number, radius)| {
                    let turn = if number % 2 == 0 { 0.0 } else { 0.5 };
                    ring(bump.at, radius, turn).filter(move |point| {
                        radius <= own_m || self.distance_m(point.at) >= 0.85 * radius
                    })
                });
                std::iter::once(middle).chain(rings)
            })
    }
}

fn refuse_too_many(wells: usize, least_rim_m: f64, reach_m: f64) -> Result<(), MeshError> {
    if wells == 0 {
        return Ok(());
    }
    let rings = (reach_m / least_rim_m).ln() / RING_RATIO.ln() + 2.0;
    let most = (MOST_POINTS / (RING_POINTS as f64 * rings)) as usize;
    if wells > most {
        return Err(MeshError::TooManyWells { wells, most });
    }
    Ok(())
}

/// Half the distance from a well to the nearest other one, which is one of its
/// neighbours in the Delaunay triangulation of all wells.
fn own_radius_m(index: &Index, at: Point) -> f64 {
    let well = index.nearest_neighbor(spade_point(at));
    let neighbours = well.into_iter().flat_map(|well| well.out_edges());
    neighbours
        .map(|edge| edge.to().position())
        .map(|other| 0.5 * (other.x - at.x).hypot(other.y - at.y))
        .fold(f64::INFINITY, f64::min)
}

/// The points of one ring.
fn ring(centre: Point, radius: f64, turn: f64) -> impl Iterator<Item = RingPoint> {
    (0..RING_POINTS).map(move |number| {
        let angle = (number as f64 + turn) * RING_STEP;
        RingPoint {
            at: centre + Vector::new(angle.cos(), angle.sin()) * radius,
            step_m: RING_STEP * radius,
        }
    })
}

/// A point as the triangulation takes it: it refuses numbers that are closer
/// to zero than 1e-43 without being zero.
pub(super) fn spade_point(point: Point) -> Point2<f64> {
    spade::mitigate_underflow(Point2::new(point.x, point.y))
}
