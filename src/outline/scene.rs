//! Reads the edges of a site into straight strokes in stretched coordinates:
//! joins line ends within 1 mm, drops vertices that lie within 1 mm of a
//! straight run, and cuts circles into chords.

use super::chords;
use super::error::OutlineError;
use super::frame::Stretch;
use super::heading;
use super::limits::FARTHEST_M;
use super::names;
use super::stroke::{Role, Stroke, TOUCH_M};
use crate::site::{EdgeShape, Place, Point, Site};

/// Straight pieces that may make up the edges; the search for crossings looks
/// at every pair.
const PIECES_LIMIT: usize = 4000;

/// The edges of a site, ready to be carried on and joined.
pub(super) struct Scene {
    /// The stretch that was applied.
    pub stretch: Stretch,
    /// Everything the plan draws.
    pub strokes: Vec<Stroke>,
    /// The line ends that no other line end joins.
    pub free_ends: Vec<FreeEnd>,
    /// Diagonal of the box around all vertices, wells, neighbours and the
    /// map's corners; straightening may move no edge by 1 mm within it.
    pub extent_m: f64,
    /// Centre of that box.
    pub centre: Point,
}

/// A line end that is carried on.
#[derive(Clone, Copy, Debug)]
pub(super) struct FreeEnd {
    /// Index of the stroke it ends.
    pub stroke: usize,
    /// Whether it is the stroke's end, not its beginning.
    pub at_end: bool,
}

impl Scene {
    /// Reads a site whose coordinates are finite, with what is wrong with
    /// its edges; the faulty ones are left out.
    pub fn read(site: &Site) -> (Self, Vec<OutlineError>) {
        let stretch = match site.aquifer.anisotropy {
            Some(anisotropy) if anisotropy.ratio != 1.0 => Stretch::of(anisotropy),
            _ => Stretch::none(),
        };
        let lines = joined_lines(site);
        let mut of_edges: Vec<Vec<Stroke>> = lines
            .iter()
            .enumerate()
            .map(|(index, line)| {
                let line = line.as_ref();
                line.map_or_else(Vec::new, |line| line.strokes(index, &stretch))
            })
            .collect();
        if let Some(error) = too_many(site, &of_edges) {
            return (Self::empty(site, stretch), vec![error]);
        }
        let joined: Vec<[bool; 2]> = lines
            .iter()
            .map(|line| line.as_ref().map_or([true; 2], |line| line.joined))
            .collect();
        chords::add(site, &stretch, &joined, &mut of_edges);
        let mut errors = Vec::new();
        let mut strokes: Vec<Stroke> = Vec::new();
        let mut free_ends = Vec::new();
        for (index, (line, of_edge)) in lines.iter().zip(of_edges).enumerate() {
            let first = strokes.len();
            strokes.extend(of_edge);
            if strokes.len() == first {
                let edge = names::edge(site, index);
                errors.push(OutlineError::NoLength { edge });
            } else if let Some(line) = line {
                free_ends.extend(line.free_ends(first, strokes.len() - 1));
            }
        }
        let (centre, extent_m) = extent(site, &stretch);
        heading::assign(&mut strokes, TOUCH_M / extent_m);
        let scene = Self {
            stretch,
            strokes,
            free_ends,
            extent_m,
            centre,
        };
        (scene, errors)
    }

    /// A site whose edges are left out.
    fn empty(site: &Site, stretch: Stretch) -> Self {
        let (centre, extent_m) = extent(site, &stretch);
        Self {
            stretch,
            strokes: Vec::new(),
            free_ends: Vec::new(),
            extent_m,
            centre,
        }
    }

    /// The angle within which two lines count as parallel or square.
    pub fn angle_tolerance_rad(&self) -> f64 {
        TOUCH_M / self.extent_m
    }
}

/// The edge that makes the straight pieces of all lines too many.
fn too_many(site: &Site, of_edges: &[Vec<Stroke>]) -> Option<OutlineError> {
    let mut pieces = 0;
    let counts = of_edges.iter().map(Vec::len).enumerate();
    for (index, count) in counts {
        pieces += count;
        if pieces > PIECES_LIMIT {
            return Some(OutlineError::TooManyPieces {
                edge: names::edge(site, index),
                pieces,
                limit: PIECES_LIMIT,
            });
        }
    }
    None
}

/// One polyline with its ends joined.
struct Line {
    /// Its vertices in site coordinates, joined ends in their common place.
    points: Vec<Point>,
    /// Whether another line end is at its first and at its last vertex.
    joined: [bool; 2],
}

/// The polylines of the edges; none for a circle.
fn joined_lines(site: &Site) -> Vec<Option<Line>> {
    let mut lines: Vec<Option<Line>> = site
        .edges
        .iter()
        .map(|edge| match &edge.shape {
            EdgeShape::Line(points) => Some(Line {
                points: points.clone(),
                joined: [false; 2],
            }),
            EdgeShape::Circle { .. } => None,
        })
        .collect();
    let mut meetings: Vec<(Point, usize)> = Vec::new();
    let ends: Vec<Point> = lines.iter().flatten().flat_map(Line::ends).collect();
    let mut places = Vec::with_capacity(ends.len());
    for end in ends {
        let near = |(place, _): &(Point, usize)| (place - end).norm() <= TOUCH_M;
        let at = meetings.iter().position(near).unwrap_or(meetings.len());
        match meetings.get_mut(at) {
            Some((_, count)) => *count += 1,
            None => meetings.push((end, 1)),
        }
        places.push(at);
    }
    let mut places = places.iter().filter_map(|&at| meetings.get(at));
    for line in lines.iter_mut().flatten() {
        let joined = line.joined.iter_mut();
        let ends = [true, false];
        for (is_joined, first) in joined.zip(ends) {
            let vertex = if first {
                line.points.first_mut()
            } else {
                line.points.last_mut()
            };
            if let (Some(vertex), Some((place, count))) = (vertex, places.next()) {
                *vertex = *place;
                *is_joined = *count > 1;
            }
        }
    }
    lines
}

impl Line {
    fn ends(&self) -> impl Iterator<Item = Point> + use<> {
        let ends = [self.points.first().copied(), self.points.last().copied()];
        ends.into_iter().flatten()
    }

    /// Its straight pieces, none shorter than 1 mm.
    fn strokes(&self, edge: usize, stretch: &Stretch) -> Vec<Stroke> {
        let vertices: Vec<(usize, Point)> = self
            .points
            .iter()
            .enumerate()
            .map(|(index, &point)| (index, stretch.apply(point)))
            .collect();
        let kept = without_flat_vertices(&without_repeats(&vertices));
        kept.iter()
            .zip(kept.iter().skip(1))
            .map(|(from, to)| Stroke::between(edge, Role::Given, (from.0, to.0), [from.1, to.1]))
            .collect()
    }

    /// The ends that no other line end joins.
    fn free_ends(&self, first: usize, last: usize) -> impl Iterator<Item = FreeEnd> + use<> {
        let ends = [(first, false), (last, true)];
        self.joined
            .into_iter()
            .zip(ends)
            .filter(|(joined, _)| !joined)
            .map(|(_, (stroke, at_end))| FreeEnd { stroke, at_end })
    }
}

/// The vertices that lie at least 1 mm from the one before; the last vertex
/// stays rather than its neighbour.
fn without_repeats(vertices: &[(usize, Point)]) -> Vec<(usize, Point)> {
    let mut kept: Vec<(usize, Point)> = Vec::with_capacity(vertices.len());
    for (place, vertex) in vertices.iter().enumerate() {
        let repeats = kept
            .last()
            .is_some_and(|last| (last.1 - vertex.1).norm() <= TOUCH_M);
        if repeats && place + 1 == vertices.len() && kept.len() > 1 {
            kept.pop();
        } else if repeats {
            continue;
        }
        kept.push(*vertex);
    }
    kept
}

/// The vertices that remain when runs within 1 mm of their chord become
/// straight. Source: Douglas & Peucker (1973), from memory.
fn without_flat_vertices(vertices: &[(usize, Point)]) -> Vec<(usize, Point)> {
    let mut keep = vec![false; vertices.len()];
    let last = vertices.len().saturating_sub(1);
    let mut open = vec![(0, last)];
    while let Some((from, to)) = open.pop() {
        for end in [from, to] {
            if let Some(flag) = keep.get_mut(end) {
                *flag = true;
            }
        }
        let run = vertices.get(from..=to).unwrap_or_default();
        let (Some(start), Some(end)) = (run.first(), run.last()) else {
            continue;
        };
        let farthest = run
            .iter()
            .enumerate()
            .map(|(step, vertex)| (step, distance_to_chord(vertex.1, start.1, end.1)))
            .max_by(|a, b| a.1.total_cmp(&b.1));
        if let Some((step, distance)) = farthest
            && distance > TOUCH_M
        {
            open.push((from, from + step));
            open.push((from + step, to));
        }
    }
    let kept = vertices.iter().zip(keep).filter(|(_, keep)| *keep);
    kept.map(|(vertex, _)| *vertex).collect()
}

/// Distance of a place from the segment between two others.
fn distance_to_chord(place: Point, from: Point, to: Point) -> f64 {
    let chord = to - from;
    let length_squared = chord.norm_squared();
    if length_squared == 0.0 {
        return (place - from).norm();
    }
    let share = (chord.dot(&(place - from)) / length_squared).clamp(0.0, 1.0);
    (place - (from + chord * share)).norm()
}

/// Centre and diagonal of the box around all that the plan places.
fn extent(site: &Site, stretch: &Stretch) -> (Point, f64) {
    let mut low = Point::new(f64::INFINITY, f64::INFINITY);
    let mut high = Point::new(f64::NEG_INFINITY, f64::NEG_INFINITY);
    // A map's corners may still be anything.
    let tame = |place: &Point| place.iter().all(|value| value.abs() <= FARTHEST_M);
    for place in places(site).filter(tame) {
        let place = stretch.apply(place);
        low = Point::new(low.x.min(place.x), low.y.min(place.y));
        high = Point::new(high.x.max(place.x), high.y.max(place.y));
    }
    if low.x > high.x {
        return (Point::origin(), 1.0);
    }
    (nalgebra::center(&low, &high), (high - low).norm().max(1.0))
}

/// Every place that the plan names.
pub(super) fn places(site: &Site) -> impl Iterator<Item = Point> {
    let edges = site.edges.iter().flat_map(|edge| edge_places(&edge.shape));
    let wells = site.wells.iter().map(|well| well.at);
    let neighbours = site
        .neighbours
        .iter()
        .flat_map(|neighbour| neighbour_places(&neighbour.place))
        .copied();
    let map = site.map.extent.iter().flat_map(|map| [map.min, map.max]);
    edges.chain(wells).chain(neighbours).chain(map)
}

/// The vertices of a line; the corners of the square around a circle.
pub(super) fn edge_places(shape: &EdgeShape) -> Vec<Point> {
    match shape {
        EdgeShape::Line(points) => points.clone(),
        EdgeShape::Circle { centre, radius } => {
            let reach = crate::site::Vector::new(radius.si(), radius.si());
            vec![centre - reach, centre + reach]
        }
    }
}

/// The point, or the vertices of the area.
pub(super) fn neighbour_places(place: &Place) -> &[Point] {
    match place {
        Place::At(point) => std::slice::from_ref(point),
        Place::Area(points) => points,
    }
}
