//! The outline of the mapped aquifer in short pieces, ready for the mesh.
//!
//! Vertices that coincide are joined, pieces are halved until they are no
//! longer than 3/4 of a grid step and, beside a well, no longer than its
//! distance allows, so the field along the outline is sampled as finely as
//! inside.

use std::collections::HashMap;

use super::MeshError;
use super::grid::Grid;
use super::rings::Wells;
use crate::site::Point;

/// Vertices closer than this are one, metres; far below the millimetre that
/// contours are held to, far above rounding errors at 1e6 m.
const SNAP_M: f64 = 1e-7;

/// Longest piece, in steps of the grid.
const LONGEST_STEPS: f64 = 0.75;

/// Cells within this many steps of the outline are cut by it.
pub(super) const MARGIN_STEPS: f64 = 0.25;

/// Largest coordinate, metres.
const FARTHEST_M: f64 = 1e9;

/// The outline as short pieces.
pub(super) struct Boundary {
    points: Vec<Point>,
    pieces: Vec<[usize; 2]>,
    /// Pieces by the cells within the margin.
    by_cell: HashMap<usize, Vec<usize>>,
}

impl Boundary {
    pub(super) fn new(
        polygons: &geo::MultiPolygon<f64>,
        grid: &Grid,
        wells: &Wells,
    ) -> Result<Self, MeshError> {
        let mut vertices = Vertices::default();
        let mut pieces = Vec::new();
        let rings = polygons
            .iter()
            .flat_map(|polygon| std::iter::once(polygon.exterior()).chain(polygon.interiors()));
        for ring in rings {
            let mut previous = None;
            for coordinate in ring {
                let point = Point::new(coordinate.x, coordinate.y);
                let vertex = vertices.join(point)?;
                if let Some(start) = previous.filter(|&start| start != vertex) {
                    pieces.push([start, vertex]);
                }
                previous = Some(vertex);
            }
        }
        let mut points = vertices.points;
        let pieces = halve(&mut points, pieces, grid, wells);
        let pieces = split_at_touching_vertices(&points, pieces, grid);
        let mut by_cell: HashMap<usize, Vec<usize>> = HashMap::new();
        let margin_m = MARGIN_STEPS * grid.step_m();
        for (number, (from, to)) in ends(&points, &pieces).enumerate() {
            for cell in grid.cells_around(from, to, margin_m) {
                by_cell.entry(cell).or_default().push(number);
            }
        }
        Ok(Self {
            points,
            pieces,
            by_cell,
        })
    }

    /// All vertices of the pieces.
    pub(super) fn points(&self) -> &[Point] {
        &self.points
    }

    /// Pieces as pairs of indices into `points`.
    pub(super) fn pieces(&self) -> &[[usize; 2]] {
        &self.pieces
    }

    /// Ends of all pieces.
    pub(super) fn ends(&self) -> impl Iterator<Item = (Point, Point)> + '_ {
        ends(&self.points, &self.pieces)
    }

    /// Cells that the outline cuts or nearly touches.
    pub(super) fn cells(&self) -> impl Iterator<Item = usize> + '_ {
        self.by_cell.keys().copied()
    }

    /// Whether a point is nearer to the outline than a distance of at most
    /// the margin.
    pub(super) fn is_near(&self, point: Point, distance_m: f64, grid: &Grid) -> bool {
        self.by_cell
            .get(&grid.cell_of(point))
            .into_iter()
            .flatten()
            .filter_map(|&number| self.pieces.get(number))
            .filter_map(|&[a, b]| Some((*self.points.get(a)?, *self.points.get(b)?)))
            .any(|(from, to)| distance_to_segment(point, from, to) < distance_m)
    }
}

fn ends<'a>(
    points: &'a [Point],
    pieces: &'a [[usize; 2]],
) -> impl Iterator<Item = (Point, Point)> + 'a {
    pieces
        .iter()
        .filter_map(|&[a, b]| Some((*points.get(a)?, *points.get(b)?)))
}

/// Vertices of the outline, those that coincide joined.
#[derive(Default)]
struct Vertices {
    points: Vec<Point>,
    buckets: HashMap<(i64, i64), Vec<usize>>,
}

impl Vertices {
    fn join(&mut self, point: Point) -> Result<usize, MeshError> {
        // Written so that what is no number is refused too.
        let usable = point.x.abs() <= FARTHEST_M && point.y.abs() <= FARTHEST_M;
        if !usable {
            return Err(MeshError::Coordinate {
                x_m: point.x,
                y_m: point.y,
            });
        }
        let bucket = |value: f64| (value / (4.0 * SNAP_M)).floor() as i64;
        let (column, row) = (bucket(point.x), bucket(point.y));
        for near in (-1..=1).flat_map(|x| (-1..=1).map(move |y| (column + x, row + y))) {
            let same = self.buckets.get(&near).into_iter().flatten().find(|&&old| {
                self.points
                    .get(old)
                    .is_some_and(|old| nalgebra::distance(old, &point) < SNAP_M)
            });
            if let Some(&same) = same {
                return Ok(same);
            }
        }
        let number = self.points.len();
        self.points.push(point);
        self.buckets.entry((column, row)).or_default().push(number);
        Ok(number)
    }
}

/// Halves pieces until each is short enough.
fn halve(
    points: &mut Vec<Point>,
    pieces: Vec<[usize; 2]>,
    grid: &Grid,
    wells: &Wells,
) -> Vec<[usize; 2]> {
    let step_m = LONGEST_STEPS * grid.step_x_m.min(grid.step_y_m);
    let mut short = Vec::with_capacity(pieces.len());
    let mut waiting = pieces;
    // The last piece comes off first: turn the order round to keep it.
    waiting.reverse();
    while let Some([a, b]) = waiting.pop() {
        let (Some(&from), Some(&to)) = (points.get(a), points.get(b)) else {
            continue;
        };
        let length_m = nalgebra::distance(&from, &to);
        let middle = nalgebra::center(&from, &to);
        if length_m <= wells.longest_piece_m(middle, length_m, step_m) {
            short.push([a, b]);
        } else {
            let between = points.len();
            points.push(middle);
            waiting.push([between, b]);
            waiting.push([a, between]);
        }
    }
    short
}

/// Splits pieces where a vertex of another piece lies on them, as where a hole
/// touches the outer ring.
fn split_at_touching_vertices(
    points: &[Point],
    pieces: Vec<[usize; 2]>,
    grid: &Grid,
) -> Vec<[usize; 2]> {
    let mut by_cell: HashMap<usize, Vec<usize>> = HashMap::new();
    for (number, &point) in points.iter().enumerate() {
        by_cell.entry(grid.cell_of(point)).or_default().push(number);
    }
    let split = |[a, b]: [usize; 2]| {
        let (Some(&from), Some(&to)) = (points.get(a), points.get(b)) else {
            return Vec::new();
        };
        let mut chain: Vec<(f64, usize)> = grid
            .cells_around(from, to, SNAP_M)
            .filter_map(|cell| by_cell.get(&cell))
            .flatten()
            .filter(|&&other| other != a && other != b)
            .filter_map(|&other| Some((other, *points.get(other)?)))
            .filter(|&(_, at)| distance_to_segment(at, from, to) < SNAP_M)
            .map(|(other, at)| (nalgebra::distance(&from, &at), other))
            .collect();
        chain.sort_by(|one, other| one.0.total_cmp(&other.0));
        let stops: Vec<usize> = std::iter::once(a)
            .chain(chain.into_iter().map(|(_, vertex)| vertex))
            .chain(std::iter::once(b))
            .collect();
        stops
            .windows(2)
            .filter_map(|pair| <[usize; 2]>::try_from(pair).ok())
            .collect()
    };
    pieces.into_iter().flat_map(split).collect()
}

fn distance_to_segment(point: Point, from: Point, to: Point) -> f64 {
    let along = to - from;
    let squared = along.norm_squared();
    let share = if squared > 0.0 {
        ((point - from).dot(&along) / squared).clamp(0.0, 1.0)
    } else {
        0.0
    };
    nalgebra::distance(&point, &(from + along * share))
}
