//! Refuses lines and areas that cannot be an edge or a property: too few
//! vertices, the same vertex twice, a line that crosses or touches itself.
//!
//! Method: exact orientation predicates (Shewchuk's, in the `geo` crate)
//! decide crossings; segments sorted by their western end keep the search
//! short. Limits: 20,000 vertices.

use geo::{Intersects, Line, coord};

use super::fault::Fault;
use super::keys::Key;
use super::points::Vertex;
use super::reader::{Reading, Section};
use super::source::Place;

const MOST_VERTICES: usize = 20_000;

impl Section<'_> {
    /// A line that can be an edge.
    pub(super) fn sound_line(
        &self,
        key: &Key,
        place: Place,
        vertices: Vec<Vertex>,
        reading: &mut Reading<'_>,
    ) -> Option<Vec<Vertex>> {
        self.sound(key, place, vertices, Sort::Line, reading)
    }

    /// An area, without the repeated last vertex.
    pub(super) fn sound_area(
        &self,
        key: &Key,
        place: Place,
        mut vertices: Vec<Vertex>,
        reading: &mut Reading<'_>,
    ) -> Option<Vec<Vertex>> {
        if let [first, _, .., last] = vertices.as_slice()
            && first.at == last.at
        {
            vertices.pop();
        }
        self.sound(key, place, vertices, Sort::Area, reading)
    }

    fn sound(
        &self,
        key: &Key,
        place: Place,
        vertices: Vec<Vertex>,
        sort: Sort,
        reading: &mut Reading<'_>,
    ) -> Option<Vec<Vertex>> {
        let fault = self
            .count_fault(key, place, vertices.len(), sort)
            .or_else(|| self.repeat_fault(key, &vertices, sort))
            .or_else(|| self.crossing_fault(key, &vertices, sort));
        match fault {
            Some(fault) => {
                reading.refuse(fault);
                None
            }
            None => Some(vertices),
        }
    }

    fn count_fault(&self, key: &Key, place: Place, count: usize, sort: Sort) -> Option<Fault> {
        let least = sort.fewest_vertices();
        let subject = format!("{}: `{}`", self.title, key.name);
        if count < least {
            let what = format!("{subject} needs at least {least} vertices, but has {count}");
            let help = "write [[x, y], [x, y], …]";
            return Some(Fault::new(place, what, help).label("too short"));
        }
        if count > MOST_VERTICES {
            let what = format!("{subject} has {count} vertices; {MOST_VERTICES} is the most");
            let help =
                "simplify it: a bend far smaller than its distance to the wells says nothing";
            return Some(Fault::new(place, what, help).label("too long"));
        }
        None
    }

    fn repeat_fault(&self, key: &Key, vertices: &[Vertex], sort: Sort) -> Option<Fault> {
        let (first, second) = sort
            .sides(vertices)
            .into_iter()
            .find(|(start, end)| start.at == end.at)?;
        let subject = format!("{}: `{}`", self.title, key.name);
        let what = format!("{subject} has the same vertex twice in a row, a side of no length");
        let fault = Fault::new(second.place, what, "remove one of the two vertices")
            .label("the same again")
            .related(first.place, "first here");
        Some(fault)
    }

    fn crossing_fault(&self, key: &Key, vertices: &[Vertex], sort: Sort) -> Option<Fault> {
        let sides = sort.sides(vertices);
        let closed = sort.closes(vertices);
        let (earlier, later) = first_crossing(&sides, closed)?;
        let ((start, _), (from, _)) = (sides.get(earlier)?, sides.get(later)?);
        let what = format!(
            "{}: `{}` crosses or touches itself: side {} meets side {}",
            self.title,
            key.name,
            earlier + 1,
            later + 1
        );
        let help = "put the vertices in the order in which the line runs, without a loop or a spur";
        let fault = Fault::new(from.place, what, help)
            .label(format!("side {} begins here", later + 1))
            .related(start.place, format!("side {} begins here", earlier + 1));
        Some(fault)
    }
}

/// A side, from vertex to vertex.
type Side = (Vertex, Vertex);

/// An open line, or an area whose last side goes back to its first vertex.
#[derive(Clone, Copy)]
enum Sort {
    Line,
    Area,
}

impl Sort {
    fn fewest_vertices(self) -> usize {
        match self {
            Self::Line => 2,
            Self::Area => 3,
        }
    }

    fn closes(self, vertices: &[Vertex]) -> bool {
        let ends = vertices.first().zip(vertices.last());
        matches!(self, Self::Area) || ends.is_some_and(|(first, last)| first.at == last.at)
    }

    fn sides(self, vertices: &[Vertex]) -> Vec<Side> {
        let mut sides: Vec<Side> = vertices
            .iter()
            .copied()
            .zip(vertices.iter().copied().skip(1))
            .collect();
        if let (Self::Area, Some((first, last))) = (self, vertices.first().zip(vertices.last())) {
            sides.push((*last, *first));
        }
        sides
    }
}

/// The first two sides, by index, that share more than the vertex between
/// neighbours.
fn first_crossing(sides: &[Side], closed: bool) -> Option<(usize, usize)> {
    let mut order: Vec<(usize, &Side)> = sides.iter().enumerate().collect();
    let west = |side: &Side| side.0.at.x.min(side.1.at.x);
    let east = |side: &Side| side.0.at.x.max(side.1.at.x);
    order.sort_by(|a, b| west(a.1).total_cmp(&west(b.1)));
    let mut found: Option<(usize, usize)> = None;
    for (position, (index, side)) in order.iter().enumerate() {
        let beside = order.iter().skip(position + 1);
        for (other_index, other) in beside.take_while(|(_, other)| west(other) <= east(side)) {
            let pair = (*index.min(other_index), *index.max(other_index));
            if found.is_some_and(|known| known <= pair) {
                continue;
            }
            if meet_wrongly(sides, pair, closed, (side, other)) {
                found = Some(pair);
            }
        }
    }
    found
}

fn meet_wrongly(
    sides: &[Side],
    pair: (usize, usize),
    closed: bool,
    (side, other): (&Side, &Side),
) -> bool {
    let follows = pair.1 == pair.0 + 1;
    let closes = closed && pair.0 == 0 && pair.1 + 1 == sides.len();
    if follows || closes {
        let (Some(first), Some(second)) = (sides.get(pair.0), sides.get(pair.1)) else {
            return false;
        };
        // A ring of two sides, there and back, is both.
        return if follows {
            folds_back(first, second)
        } else {
            folds_back(second, first)
        };
    }
    as_line(side).intersects(&as_line(other))
}

/// Whether the second of two joined sides runs back along the first.
fn folds_back(first: &Side, second: &Side) -> bool {
    let along = first.1.at - first.0.at;
    let next = second.1.at - second.0.at;
    let ends = [first.0, second.1].map(|vertex| coord! { x: vertex.at.x, y: vertex.at.y });
    let corner = coord! { x: first.1.at.x, y: first.1.at.y };
    let [start, end] = ends;
    let straight =
        Line::new(start, corner).intersects(&end) || Line::new(corner, end).intersects(&start);
    straight && along.dot(&next) < 0.0
}

fn as_line(side: &Side) -> Line<f64> {
    Line::new(
        coord! { x: side.0.at.x, y: side.0.at.y },
        coord! { x: side.1.at.x, y: side.1.at.y },
    )
}
