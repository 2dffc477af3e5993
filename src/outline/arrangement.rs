//! The planar arrangement of all strokes: half-edges and the loops they make.
//!
//! Each piece of a stroke between two nodes is a pair of half-edges that run
//! opposite ways; a ray's last piece runs to infinity. At a node a loop turns
//! as far left as it can, so a loop has its face to the left. At infinity the
//! rays are sorted counterclockwise, first by heading, then by offset, and a
//! loop that leaves along one ray comes back along the next.

use std::collections::{BTreeMap, BTreeSet};

use super::scene::Scene;
use super::stroke::{Stroke, TOUCH_M, contacts, tolerance_at};
use crate::site::{Point, Vector};

/// One side of a piece of a stroke.
#[derive(Clone, Copy, Debug)]
pub(super) struct HalfEdge {
    /// The stroke it is part of.
    pub stroke: Stroke,
    /// Its first node; none where it comes from infinity.
    pub from: Option<usize>,
    /// Its last node; none where it runs to infinity.
    pub to: Option<usize>,
    /// Unit vector along it.
    pub direction: Vector,
    /// The loop that it is part of.
    pub cycle: usize,
}

/// Half-edges in pairs (number n runs opposite to n with its last bit
/// flipped), their nodes and the successor of each.
pub(super) struct Arrangement {
    /// Where the nodes are.
    pub nodes: Vec<Point>,
    /// All half-edges.
    pub halves: Vec<HalfEdge>,
    /// For each half-edge the next one of its loop.
    pub next: Vec<usize>,
    /// For each node the half-edges that leave it, counterclockwise.
    pub stars: Vec<Vec<usize>>,
    /// The half-edges that run to infinity, counterclockwise, with angles.
    pub to_infinity: Vec<(f64, usize)>,
    /// The half-edges of each loop, in order.
    pub cycles: Vec<Vec<usize>>,
}

impl Arrangement {
    /// Arranges strokes that do not overlap.
    pub fn of(scene: &Scene, strokes: &[Stroke]) -> Self {
        let mut nodes = Nodes::default();
        let halves = pieces(strokes, &mut nodes);
        let mut arrangement = Self {
            stars: stars(&halves, nodes.places.len()),
            to_infinity: to_infinity(scene, strokes, &halves),
            next: vec![0; halves.len()],
            nodes: nodes.places,
            halves,
            cycles: Vec::new(),
        };
        arrangement.link();
        arrangement.trace();
        arrangement
    }

    /// Sets the successor of every half-edge.
    fn link(&mut self) {
        let around = self.stars.iter().flat_map(|star| {
            // Arriving against `here`, the leftmost way on is the one before
            // it counterclockwise.
            let before = star.iter().cycle().skip(star.len().saturating_sub(1));
            star.iter()
                .zip(before)
                .map(|(here, before)| (here ^ 1, *before))
        });
        let following = self.to_infinity.iter().cycle().skip(1);
        let at_infinity = self
            .to_infinity
            .iter()
            .zip(following)
            .map(|((_, here), (_, following))| (*here, following ^ 1));
        for (half, next) in around.chain(at_infinity) {
            if let Some(slot) = self.next.get_mut(half) {
                *slot = next;
            }
        }
    }

    /// Follows every loop once.
    fn trace(&mut self) {
        let mut seen = vec![false; self.halves.len()];
        for start in 0..self.halves.len() {
            let mut cycle = Vec::new();
            let mut here = start;
            while let Some(flag @ false) = seen.get_mut(here) {
                *flag = true;
                cycle.push(here);
                if let Some(half) = self.halves.get_mut(here) {
                    half.cycle = self.cycles.len();
                }
                here = self.next.get(here).copied().unwrap_or(start);
            }
            if !cycle.is_empty() {
                self.cycles.push(cycle);
            }
        }
    }

    /// The place of a node.
    pub fn place(&self, node: Option<usize>) -> Option<Point> {
        self.nodes.get(node?).copied()
    }

    /// The half-edges of a loop, in order.
    pub fn cycle(&self, cycle: usize) -> impl Iterator<Item = &HalfEdge> {
        let numbers = self.cycles.get(cycle).into_iter().flatten();
        numbers.filter_map(|&number| self.halves.get(number))
    }
}

/// Nodes, each place within the tolerance once.
#[derive(Default)]
struct Nodes {
    places: Vec<Point>,
    /// Nodes by square of 1 cm.
    near: BTreeMap<(i64, i64), Vec<usize>>,
    /// Nodes where the tolerance exceeds 1 mm.
    far: Vec<usize>,
}

impl Nodes {
    /// The node at a place, made where there is none.
    fn at(&mut self, place: Point) -> usize {
        let tolerance = tolerance_at(place);
        let is_far = tolerance > TOUCH_M;
        let square = |step: i64, value: f64| (value * 100.0).floor() as i64 + step;
        let around = (-1..=1).flat_map(|i| (-1..=1).map(move |j| (i, j)));
        let candidates: Vec<usize> = if is_far {
            self.far.clone()
        } else {
            around
                .filter_map(|(i, j)| self.near.get(&(square(i, place.x), square(j, place.y))))
                .flatten()
                .copied()
                .collect()
        };
        let known = candidates.into_iter().find(|&node| {
            let other = self.places.get(node);
            other.is_some_and(|other| (other - place).norm() <= tolerance)
        });
        known.unwrap_or_else(|| {
            let node = self.places.len();
            self.places.push(place);
            if is_far {
                self.far.push(node);
            } else {
                let key = (square(0, place.x), square(0, place.y));
                self.near.entry(key).or_default().push(node);
            }
            node
        })
    }
}

/// The strokes cut at every contact, as pairs of half-edges.
fn pieces(strokes: &[Stroke], nodes: &mut Nodes) -> Vec<HalfEdge> {
    let mut cuts: Vec<Vec<(f64, usize)>> = strokes
        .iter()
        .map(|stroke| {
            stroke
                .tips()
                .map(|(along, at)| (along, nodes.at(at)))
                .collect()
        })
        .collect();
    for (index, first) in strokes.iter().enumerate() {
        for (other, second) in strokes.iter().enumerate().skip(index + 1) {
            for contact in contacts(first, second) {
                let node = nodes.at(contact.at);
                let sides = [(index, contact.on_first), (other, contact.on_second)];
                for (stroke, along) in sides {
                    if let Some(cuts) = cuts.get_mut(stroke) {
                        cuts.push((along, node));
                    }
                }
            }
        }
    }
    let mut halves = Vec::new();
    let mut known = BTreeSet::new();
    for (stroke, mut cuts) in strokes.iter().zip(cuts) {
        cuts.sort_by(|a, b| a.0.total_cmp(&b.0));
        cuts.dedup_by_key(|cut| cut.1);
        let ends = cuts.iter().map(|cut| cut.1);
        for (from, to) in ends.clone().zip(ends.clone().skip(1)) {
            if known.insert((from.min(to), from.max(to))) {
                halves.extend(pair(stroke, from, Some(to)));
            }
        }
        if let (Some(last), None) = (ends.last(), stroke.end()) {
            halves.extend(pair(stroke, last, None));
        }
    }
    halves
}

/// The two half-edges of a piece.
fn pair(stroke: &Stroke, from: usize, to: Option<usize>) -> [HalfEdge; 2] {
    let forward = HalfEdge {
        stroke: *stroke,
        from: Some(from),
        to,
        direction: stroke.direction,
        cycle: 0,
    };
    let backward = HalfEdge {
        from: to,
        to: Some(from),
        direction: -stroke.direction,
        ..forward
    };
    [forward, backward]
}

/// The half-edges that leave each node, counterclockwise.
fn stars(halves: &[HalfEdge], count: usize) -> Vec<Vec<usize>> {
    let mut stars: Vec<Vec<(f64, usize)>> = vec![Vec::new(); count];
    for (number, half) in halves.iter().enumerate() {
        if let Some(star) = half.from.and_then(|node| stars.get_mut(node)) {
            star.push((angle(half.direction), number));
        }
    }
    let sorted = |mut star: Vec<(f64, usize)>| {
        star.sort_by(|a, b| a.0.total_cmp(&b.0));
        star.into_iter().map(|(_, number)| number).collect()
    };
    stars.into_iter().map(sorted).collect()
}

/// The half-edges that run to infinity, counterclockwise; those of one
/// heading from right to left.
fn to_infinity(scene: &Scene, strokes: &[Stroke], halves: &[HalfEdge]) -> Vec<(f64, usize)> {
    let mut headings: BTreeMap<usize, Vector> = BTreeMap::new();
    for stroke in strokes {
        headings.entry(stroke.heading).or_insert(stroke.direction);
    }
    let mut rays: Vec<(f64, f64, usize)> = Vec::new();
    for (number, half) in halves
        .iter()
        .enumerate()
        .filter(|(_, half)| half.to.is_none())
    {
        let axis = headings
            .get(&half.stroke.heading)
            .unwrap_or(&half.direction);
        let direction = *axis * axis.dot(&half.direction).signum();
        let line = Stroke {
            from: scene.centre,
            direction,
            ..half.stroke
        };
        let near_centre = half.stroke.at(half.stroke.along(scene.centre));
        rays.push((angle(direction), line.offset(near_centre), number));
    }
    rays.sort_by(|a, b| a.0.total_cmp(&b.0).then(a.1.total_cmp(&b.1)));
    rays.into_iter()
        .map(|(angle, _, number)| (angle, number))
        .collect()
}

/// Angle of a vector from the x axis, −π to π.
pub(super) fn angle(vector: Vector) -> f64 {
    vector.y.atan2(vector.x)
}
