//! The boundary of one face as straight sides.
//!
//! Consecutive pieces of the same kind become one side where they lie within
//! 1 mm of one straight line, or their directions differ by no more than
//! 1e-9 rad.

use super::arrangement::Arrangement;
use super::shape::Kind;
use super::stroke::{Role, TOUCH_M, cross};
use crate::site::{EdgeKind, Point, Site, Vector};

/// A piece of one edge on the boundary of a face; the face lies to its left.
#[derive(Clone, Copy, Debug)]
pub(super) struct Bit {
    /// Index in `Site::edges`.
    pub edge: usize,
    /// What the edge does.
    pub kind: Kind,
    /// First and last vertex of the edge's line that it stands for.
    pub vertices: (usize, usize),
    /// Where it begins, unless at infinity.
    pub from: Option<Point>,
    /// Where it ends, unless at infinity.
    pub to: Option<Point>,
    /// Unit vector along it.
    pub direction: Vector,
    /// A place of the plan on its line.
    pub anchor: Point,
    /// Whether it stands for part of a circle.
    pub is_chord: bool,
}

/// A straight side of a face, to the left of which the face lies.
#[derive(Clone, Debug)]
pub(super) struct Side {
    /// What it does to the head.
    pub kind: Kind,
    /// Its pieces, in order.
    pub bits: Vec<Bit>,
    /// Unit vector along it.
    pub direction: Vector,
    /// A place of the plan on its line.
    pub anchor: Point,
}

impl Side {
    /// Where it begins, unless at infinity.
    pub fn from(&self) -> Option<Point> {
        self.bits.first().and_then(|bit| bit.from)
    }

    /// Where it ends, unless at infinity.
    pub fn to(&self) -> Option<Point> {
        self.bits.last().and_then(|bit| bit.to)
    }

    /// The lowest number among its edges.
    pub fn lowest_edge(&self) -> usize {
        self.bits
            .iter()
            .map(|bit| bit.edge)
            .min()
            .unwrap_or(usize::MAX)
    }
}

/// The kind of an edge.
pub(super) fn kind_of(site: &Site, edge: usize) -> Kind {
    match site.edges.get(edge).map(|edge| &edge.kind) {
        Some(EdgeKind::River { .. }) => Kind::FixedHead,
        _ => Kind::NoFlow,
    }
}

/// The pieces of a loop, beginning after a gap at infinity, if it has one,
/// else at its sharpest corner.
pub(super) fn bits(site: &Site, arrangement: &Arrangement, cycle: usize) -> Vec<Bit> {
    let mut bits: Vec<Bit> = arrangement
        .cycle(cycle)
        .map(|half| Bit {
            edge: half.stroke.edge,
            kind: kind_of(site, half.stroke.edge),
            vertices: half.stroke.vertices,
            from: arrangement.place(half.from),
            to: arrangement.place(half.to),
            direction: half.direction,
            anchor: half.stroke.from,
            is_chord: half.stroke.role == Role::Chord,
        })
        .collect();
    let before = bits.iter().cycle().skip(bits.len().saturating_sub(1));
    let start = bits
        .iter()
        .zip(before)
        .map(|(here, before)| match here.from {
            None => f64::INFINITY,
            Some(_) => cross(before.direction, here.direction)
                .atan2(before.direction.dot(&here.direction))
                .abs(),
        })
        .enumerate()
        .max_by(|a, b| a.1.total_cmp(&b.1).then(b.0.cmp(&a.0)));
    bits.rotate_left(start.map_or(0, |(start, _)| start));
    bits
}

/// Joins pieces into straight sides.
pub(super) fn sides(bits: &[Bit], angle_tolerance_rad: f64) -> Vec<Side> {
    let mut sides: Vec<Side> = Vec::new();
    for bit in bits {
        let goes_on = sides
            .last()
            .is_some_and(|side| carries_on(side, bit, angle_tolerance_rad));
        match sides.last_mut() {
            Some(side) if goes_on => side.bits.push(*bit),
            _ => sides.push(Side {
                kind: bit.kind,
                bits: vec![*bit],
                direction: bit.direction,
                anchor: bit.anchor,
            }),
        }
        if let Some(side) = sides.last_mut() {
            aim(side);
        }
    }
    sides
}

/// Whether a piece lies on the line of the side before it.
fn carries_on(side: &Side, bit: &Bit, angle_tolerance_rad: f64) -> bool {
    if side.kind != bit.kind || side.to().is_none() || side.direction.dot(&bit.direction) <= 0.0 {
        return false;
    }
    is_straight_on(side, bit, angle_tolerance_rad)
}

/// Whether a piece, whatever its kind, goes straight on from a side.
pub(super) fn is_straight_on(side: &Side, bit: &Bit, angle_tolerance_rad: f64) -> bool {
    let turn = cross(side.direction, bit.direction).abs();
    if turn <= 1e-9 {
        return true;
    }
    let mut longer = side.clone();
    longer.bits.push(*bit);
    aim(&mut longer);
    let offset = |place: Point| cross(longer.direction, place - longer.anchor);
    let places = longer.bits.iter().flat_map(|bit| [bit.from, bit.to]);
    let near = places.flatten().all(|place| offset(place).abs() <= TOUCH_M);
    let rays = [longer.bits.first(), longer.bits.last()];
    let aligned = rays.into_iter().flatten().all(|bit| {
        let finite = bit.from.is_some() && bit.to.is_some();
        finite || cross(bit.direction, longer.direction).abs() <= angle_tolerance_rad
    });
    near && aligned
}

/// Sets the line of a side: from its beginning to its end, or along the ray
/// at its beginning or end.
fn aim(side: &mut Side) {
    let (Some(first), Some(last)) = (side.bits.first(), side.bits.last()) else {
        return;
    };
    match (first.from, last.to) {
        (Some(from), Some(to)) if from != to => {
            side.direction = (to - from).normalize();
            side.anchor = nalgebra::center(&from, &to);
        }
        (Some(_), None) => {
            side.direction = last.direction;
            side.anchor = last.anchor;
        }
        _ => {
            side.direction = first.direction;
            side.anchor = first.anchor;
        }
    }
}
