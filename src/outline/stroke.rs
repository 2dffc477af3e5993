//! Straight strokes: the pieces of edges from which the aquifers' outlines
//! are put together, and where two of them touch.
//!
//! Coordinates are stretched site coordinates, metres. Touching has a
//! tolerance of 1 mm, and far from the site (beyond 10,000 km, where corners
//! of almost parallel edges lie) of 1e-10 of the distance.

use crate::site::{Point, Vector};

/// Distance at which two places count as one, metres.
pub(super) const TOUCH_M: f64 = 1e-3;

/// How a stroke came to be.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Role {
    /// The plan draws it.
    Given,
    /// A free end carried straight on.
    Extension,
    /// A chord that stands for part of a circle; used for topology alone.
    Chord,
}

/// A straight piece of one edge, finite or a ray.
#[derive(Clone, Copy, Debug)]
pub(super) struct Stroke {
    /// Index in `Site::edges`.
    pub edge: usize,
    /// How it came to be.
    pub role: Role,
    /// First and last vertex of the edge's line that it stands for.
    pub vertices: (usize, usize),
    /// Where it begins.
    pub from: Point,
    /// Unit vector along it.
    pub direction: Vector,
    /// Its length, infinite on a ray.
    pub length_m: f64,
    /// Strokes of one heading count as parallel; see `heading`.
    pub heading: usize,
}

impl Stroke {
    /// The stroke between two different places.
    pub fn between(edge: usize, role: Role, vertices: (usize, usize), ends: [Point; 2]) -> Self {
        let [from, to] = ends;
        let length_m = (to - from).norm();
        Self {
            edge,
            role,
            vertices,
            from,
            direction: (to - from) / length_m,
            length_m,
            heading: 0,
        }
    }

    /// Where it ends, unless it is a ray.
    pub fn end(&self) -> Option<Point> {
        self.length_m.is_finite().then(|| self.at(self.length_m))
    }

    /// The place at a distance from its beginning.
    pub fn at(&self, along_m: f64) -> Point {
        self.from + self.direction * along_m
    }

    /// How far along its line a place lies.
    pub fn along(&self, place: Point) -> f64 {
        self.direction.dot(&(place - self.from))
    }

    /// Distance of a place from its line, positive to the left.
    pub fn offset(&self, place: Point) -> f64 {
        cross(self.direction, place - self.from)
    }

    /// The position on the stroke that is nearest to a place.
    pub fn nearest(&self, place: Point) -> f64 {
        self.along(place).clamp(0.0, self.length_m)
    }

    /// Distance of a place from the stroke.
    pub fn distance(&self, place: Point) -> f64 {
        (place - self.at(self.nearest(place))).norm()
    }

    /// Its beginning and, unless it is a ray, its end, with their positions.
    pub fn tips(&self) -> impl Iterator<Item = (f64, Point)> {
        std::iter::once((0.0, self.from)).chain(self.end().map(|end| (self.length_m, end)))
    }

    /// Whether the boxes around two strokes lie apart.
    fn lies_apart_from(&self, other: &Self) -> bool {
        (0..2).any(|axis| {
            let (low, high) = self.span(axis);
            let (other_low, other_high) = other.span(axis);
            low > other_high || other_low > high
        })
    }

    /// The range of one coordinate, widened by the tolerance.
    fn span(&self, axis: usize) -> (f64, f64) {
        let start = self.from.coords.get(axis).copied().unwrap_or(0.0);
        let slope = self.direction.get(axis).copied().unwrap_or(0.0);
        let reach = if slope == 0.0 {
            0.0
        } else {
            slope * self.length_m
        };
        let margin = 2.0 * tolerance_at(self.from);
        let far = start + reach;
        let far_margin = if far.is_finite() {
            1e-10 * far.abs()
        } else {
            0.0
        };
        let margin = margin + far_margin;
        (start.min(far) - margin, start.max(far) + margin)
    }
}

/// The third component of the cross product.
pub(super) fn cross(a: Vector, b: Vector) -> f64 {
    a.x * b.y - a.y * b.x
}

/// The tolerance for touching at a place, metres.
pub(super) fn tolerance_at(place: Point) -> f64 {
    TOUCH_M.max(1e-10 * place.coords.norm())
}

/// A place where two strokes touch or cross.
#[derive(Clone, Copy, Debug)]
pub(super) struct Contact {
    /// Position along the first stroke.
    pub on_first: f64,
    /// Position along the second stroke.
    pub on_second: f64,
    /// The place.
    pub at: Point,
}

/// Where two strokes touch: at a tip that lies on the other, or else at a
/// crossing. Two contacts or more mean that they overlap.
pub(super) fn contacts(first: &Stroke, second: &Stroke) -> Vec<Contact> {
    if first.lies_apart_from(second) {
        return Vec::new();
    }
    let mut found = tip_contacts(first, second);
    if found.is_empty() && first.heading != second.heading {
        found.extend(crossing(first, second));
    }
    found
}

/// Contacts at the tips of either stroke, each place once.
fn tip_contacts(first: &Stroke, second: &Stroke) -> Vec<Contact> {
    let of_first = first.tips().map(|(on_first, at)| Contact {
        on_first,
        on_second: second.nearest(at),
        at,
    });
    let of_second = second.tips().map(|(on_second, at)| Contact {
        on_first: first.nearest(at),
        on_second,
        at,
    });
    let mut found: Vec<Contact> = Vec::new();
    for contact in of_first.chain(of_second) {
        let gap = (first.at(contact.on_first) - second.at(contact.on_second)).norm();
        let tolerance = tolerance_at(contact.at);
        let known = |other: &Contact| (other.at - contact.at).norm() <= 2.0 * tolerance;
        if gap <= tolerance && !found.iter().any(known) {
            found.push(contact);
        }
    }
    found
}

/// The crossing of two strokes that are not parallel.
fn crossing(first: &Stroke, second: &Stroke) -> Option<Contact> {
    let turn = cross(first.direction, second.direction);
    let between = second.from - first.from;
    let on_first = cross(between, second.direction) / turn;
    let on_second = cross(between, first.direction) / turn;
    let inside = |along: f64, stroke: &Stroke| along >= 0.0 && along <= stroke.length_m;
    (inside(on_first, first) && inside(on_second, second)).then(|| Contact {
        on_first,
        on_second,
        at: if on_first <= on_second {
            first.at(on_first)
        } else {
            second.at(on_second)
        },
    })
}
