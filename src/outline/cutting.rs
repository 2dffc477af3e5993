//! Cuts rings at a line.
//!
//! At a line the places where rings leave a half-plane and come back alternate,
//! so each leave is joined with the next return. A vertex on the line counts as
//! outside, so a side along it stays where the aquifer lies within, drawn by
//! that join, and else vanishes.

use crate::site::Point;

/// A ring, its last vertex joined with the first; the aquifer to its left.
pub(super) type Ring = Vec<Point>;

/// A line of the rim, the kept half-plane on one side.
#[derive(Clone, Copy)]
pub(super) struct CutLine {
    axis: usize,
    limit: f64,
    keeps_above: bool,
}

/// A part of a ring within the half-plane: where along the line it comes in
/// and goes out, and its vertices.
struct Fragment {
    enters: f64,
    leaves: f64,
    vertices: Vec<Point>,
}

impl CutLine {
    /// The half-plane beyond a limit on an axis, 0 for x and 1 for y.
    pub fn new(axis: usize, limit: f64, keeps_above: bool) -> Self {
        Self {
            axis,
            limit,
            keeps_above,
        }
    }

    fn coordinate(&self, point: Point) -> f64 {
        if self.axis == 0 { point.x } else { point.y }
    }

    fn keeps(&self, point: Point) -> bool {
        if self.keeps_above {
            self.coordinate(point) > self.limit
        } else {
            self.coordinate(point) < self.limit
        }
    }

    /// Position along the line, the kept half-plane to the left.
    fn along(&self, point: Point) -> f64 {
        let other = if self.axis == 0 { point.y } else { point.x };
        if (self.axis == 0) == self.keeps_above {
            -other
        } else {
            other
        }
    }

    /// Where the way between two places on different sides meets the line.
    fn meeting(&self, a: Point, b: Point) -> Point {
        let (low, high) = (self.coordinate(a), self.coordinate(b));
        let share = (self.limit - low) / (high - low);
        let place = a + (b - a) * share;
        if self.axis == 0 {
            Point::new(self.limit, place.y)
        } else {
            Point::new(place.x, self.limit)
        }
    }

    /// The rings within the half-plane.
    pub fn cut(&self, rings: Vec<Ring>) -> Vec<Ring> {
        let mut whole = Vec::new();
        let mut fragments = Vec::new();
        for ring in rings {
            let kept = ring.iter().filter(|point| self.keeps(**point)).count();
            if kept == ring.len() {
                whole.push(ring);
            } else if kept > 0 {
                fragments.extend(self.fragments(&ring));
            }
        }
        whole.extend(joined(fragments));
        whole
    }

    /// The parts of a ring that crosses the line.
    fn fragments(&self, ring: &[Point]) -> Vec<Fragment> {
        let outside = ring.iter().position(|point| !self.keeps(*point));
        let places = ring.iter().cycle().skip(outside.unwrap_or(0));
        let places: Vec<Point> = places.take(ring.len() + 1).copied().collect();
        let mut fragments: Vec<Fragment> = Vec::new();
        for (here, next) in places.iter().zip(places.iter().skip(1)) {
            match (self.keeps(*here), self.keeps(*next)) {
                (false, true) => {
                    let start = self.meeting(*here, *next);
                    fragments.push(Fragment {
                        enters: self.along(start),
                        leaves: 0.0,
                        vertices: vec![start, *next],
                    });
                }
                (true, true) => {
                    if let Some(last) = fragments.last_mut() {
                        last.vertices.push(*next);
                    }
                }
                (true, false) => {
                    let end = self.meeting(*here, *next);
                    if let Some(last) = fragments.last_mut() {
                        last.leaves = self.along(end);
                        last.vertices.push(end);
                    }
                }
                (false, false) => {}
            }
        }
        fragments
    }
}

/// Joins each end of a fragment with the next beginning along the line.
fn joined(fragments: Vec<Fragment>) -> Vec<Ring> {
    let order = |key: &dyn Fn(&Fragment) -> f64| {
        let mut order: Vec<usize> = (0..fragments.len()).collect();
        let of = |index: &usize| fragments.get(*index).map_or(0.0, key);
        order.sort_by(|a, b| of(a).total_cmp(&of(b)));
        order
    };
    let leaving = order(&|fragment| fragment.leaves);
    let entering = order(&|fragment| fragment.enters);
    let mut next = vec![0; fragments.len()];
    for (leave, enter) in leaving.iter().zip(&entering) {
        if let Some(slot) = next.get_mut(*leave) {
            *slot = *enter;
        }
    }
    let mut seen = vec![false; fragments.len()];
    let mut rings = Vec::new();
    for start in 0..fragments.len() {
        let mut ring = Vec::new();
        let mut here = start;
        while let Some(flag @ false) = seen.get_mut(here) {
            *flag = true;
            if let Some(fragment) = fragments.get(here) {
                ring.extend(&fragment.vertices);
            }
            here = next.get(here).copied().unwrap_or(start);
        }
        if !ring.is_empty() {
            rings.push(ring);
        }
    }
    rings
}
