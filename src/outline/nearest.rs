//! The distance of a place from the nearest side of a general boundary, in
//! metres of the site.
//!
//! Method: a tree of boxes around the sides, halved at the median along their
//! longer axis; a box farther away than a side found is passed over.

use super::frame::Frame;
use super::general::{BoundarySide, Curve};
use crate::site::{Point, Vector};

/// Sides in a leaf.
const CAPACITY: usize = 4;

/// The tree: sides in its order, and its nodes with the root last.
#[derive(Debug)]
pub(super) struct Nearest {
    sides: Vec<Course>,
    nodes: Vec<Node>,
}

#[derive(Debug)]
struct Node {
    area: Area,
    kind: NodeKind,
}

#[derive(Debug)]
enum NodeKind {
    Leaf(std::ops::Range<usize>),
    Pair(usize, usize),
}

/// An upright rectangle.
#[derive(Clone, Copy, Debug)]
struct Area {
    low: Point,
    high: Point,
}

/// A side in the site.
#[derive(Clone, Copy, Debug)]
enum Course {
    /// From a place, along a unit vector, over a length.
    Straight(Point, Vector, f64),
    /// Centre, radius, direction of its middle, cosine of half its sweep, ends.
    Round(Point, f64, Vector, f64, [Point; 2]),
}

impl Nearest {
    /// The tree of some sides.
    pub fn of(frame: &Frame, sides: &[BoundarySide]) -> Self {
        let mut courses: Vec<Course> = sides
            .iter()
            .map(|side| Course::of(frame, &side.curve))
            .collect();
        let mut nodes = Vec::new();
        let count = courses.len();
        if count > 0 {
            grow(&mut courses, 0, &mut nodes);
        }
        Self {
            sides: courses,
            nodes,
        }
    }

    /// Distance of a place from the nearest side; infinite without sides.
    pub fn distance_m(&self, place: Point) -> f64 {
        let mut nearest = f64::INFINITY;
        let mut waiting = Vec::with_capacity(32);
        waiting.extend(self.nodes.len().checked_sub(1));
        while let Some(node) = waiting.pop().and_then(|number| self.nodes.get(number)) {
            if node.area.distance(place) >= nearest {
                continue;
            }
            match &node.kind {
                NodeKind::Leaf(range) => {
                    let sides = self.sides.get(range.clone()).unwrap_or_default();
                    let distances = sides.iter().map(|side| side.distance(place));
                    nearest = distances.fold(nearest, f64::min);
                }
                NodeKind::Pair(first, second) => {
                    let far = |child: &usize| {
                        let area = self.nodes.get(*child).map(|node| node.area);
                        area.map_or(f64::INFINITY, |area| area.distance(place))
                    };
                    // The nearer one comes off first.
                    if far(first) <= far(second) {
                        waiting.extend([*second, *first]);
                    } else {
                        waiting.extend([*first, *second]);
                    }
                }
            }
        }
        nearest
    }
}

/// Adds the tree of some sides, which begin at a number; its root is the last
/// node, whose number is returned.
fn grow(sides: &mut [Course], start: usize, nodes: &mut Vec<Node>) -> usize {
    let areas = sides.iter().map(Course::area);
    let area = areas.fold(Area::nothing(), Area::with);
    let kind = if sides.len() <= CAPACITY {
        NodeKind::Leaf(start..start + sides.len())
    } else {
        let places = sides.iter().map(Course::anchor);
        let spread = places.fold(Area::nothing(), |area, place| {
            area.with(Area {
                low: place,
                high: place,
            })
        });
        let size = spread.high - spread.low;
        let across = |side: &Course| {
            let place = side.anchor();
            if size.x >= size.y { place.x } else { place.y }
        };
        sides.sort_by(|a, b| across(a).total_cmp(&across(b)));
        let half = sides.len() / 2;
        let (low, high) = sides.split_at_mut(half);
        let first = grow(low, start, nodes);
        NodeKind::Pair(first, grow(high, start + half, nodes))
    };
    nodes.push(Node { area, kind });
    nodes.len() - 1
}

impl Course {
    fn of(frame: &Frame, curve: &Curve) -> Self {
        let site = |z| frame.to_site(z);
        let straight = |from, to| {
            let (from, to): (Point, Point) = (site(from), site(to));
            let length = (to - from).norm();
            Self::Straight(from, (to - from) / length, length)
        };
        let ray = |from, direction| {
            let step = frame.direction_to_site(direction);
            Self::Straight(site(from), step.normalize(), f64::INFINITY)
        };
        match *curve {
            Curve::Segment { from, to } => straight(from, to),
            Curve::RayIn { to, from_direction } => ray(to, from_direction),
            Curve::RayOut { from, direction } => ray(from, direction),
            Curve::Arc {
                centre,
                radius,
                sweep_rad,
                ..
            } => {
                let half = 0.5 * sweep_rad.abs();
                let middle = frame.direction_to_site(curve.at(half) - centre).normalize();
                let ends = [curve.at(0.0), curve.at(2.0 * half)].map(site);
                Self::Round(site(centre), radius, middle, half.cos(), ends)
            }
        }
    }

    fn distance(&self, place: Point) -> f64 {
        match *self {
            Self::Straight(from, along, length) => {
                let nearest = along.dot(&(place - from)).clamp(0.0, length);
                (place - (from + along * nearest)).norm()
            }
            Self::Round(centre, radius, middle, cosine, ends) => {
                let outward = place - centre;
                let distance = outward.norm();
                if distance == 0.0 {
                    radius
                } else if middle.dot(&outward) >= cosine * distance {
                    (distance - radius).abs()
                } else {
                    let [first, last] = ends.map(|end| (place - end).norm());
                    first.min(last)
                }
            }
        }
    }

    /// A place to sort it by.
    fn anchor(&self) -> Point {
        match *self {
            Self::Straight(from, along, length) if length.is_finite() => {
                from + along * (0.5 * length)
            }
            Self::Straight(from, _, _) => from,
            Self::Round(centre, radius, middle, _, _) => centre + middle * radius,
        }
    }

    fn area(&self) -> Area {
        match *self {
            Self::Straight(from, along, length) => {
                let end = |start: f64, step: f64| {
                    if step == 0.0 {
                        start
                    } else {
                        start + step * length
                    }
                };
                let to = Point::new(end(from.x, along.x), end(from.y, along.y));
                Area {
                    low: from.inf(&to),
                    high: from.sup(&to),
                }
            }
            Self::Round(centre, radius, ..) => {
                let reach = Vector::repeat(radius);
                Area {
                    low: centre - reach,
                    high: centre + reach,
                }
            }
        }
    }
}

impl Area {
    fn nothing() -> Self {
        Self {
            low: Point::new(f64::INFINITY, f64::INFINITY),
            high: Point::new(f64::NEG_INFINITY, f64::NEG_INFINITY),
        }
    }

    fn with(self, other: Self) -> Self {
        Self {
            low: self.low.inf(&other.low),
            high: self.high.sup(&other.high),
        }
    }

    /// Distance of a place from the rectangle, zero within it; a rounding
    /// less, so that no side is passed over that is as near.
    fn distance(&self, place: Point) -> f64 {
        let gap = |value: f64, low: f64, high: f64| (low - value).max(value - high).max(0.0);
        let across = gap(place.x, self.low.x, self.high.x);
        let up = gap(place.y, self.low.y, self.high.y);
        across.hypot(up) * (1.0 - 1e-12)
    }
}
