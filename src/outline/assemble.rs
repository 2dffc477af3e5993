//! Assembles the general boundary of a face from the loops around it.
//!
//! Each loop is parted where it passes infinity; each part becomes a chain of
//! straight and round sides. A straight side is cut where the plan's stages
//! bend, and joined with the next of its edge where both lie on one line and
//! share one linear stage.

use std::f64::consts::TAU;

use num_complex::Complex64;

use super::Outline;
use super::banks;
use super::boundary::Bit;
use super::error::OutlineError;
use super::frame::Frame;
use super::general::{Boundary, BoundaryChain, BoundarySide, Condition, Curve};
use super::infinity;
use super::join;
use super::named::{centre_of_wells, number, place};
use super::recognise::Context;
use super::shape::{Kind, Piece, Shape};
use super::slits;
use crate::site::{EdgeShape, Point, Vector};

/// The outline of a face between loops of pieces.
///
/// # Errors
/// Where an edge has the aquifer on both its banks, a stage or a bank cannot be read, parallel rivers of different stage
/// run to infinity, or the sides cross one another.
pub(super) fn outline(
    context: Context<'_>,
    loops: &[Vec<Bit>],
) -> Result<Outline, Vec<OutlineError>> {
    slits::check(context, loops)?;
    let frame = Frame {
        stretch: context.scene.stretch,
        origin: centre_of_wells(context),
        turn: Complex64::ONE,
    };
    let boundary = boundary(context, &frame, loops).map_err(|error| vec![*error])?;
    let sides = boundary.sides.iter().map(|side| vec![piece(side)]);
    let sides = sides.collect();
    Outline::general(frame, boundary, sides, context)
}

/// The chains of all loops, the open ones first.
fn boundary(
    context: Context<'_>,
    frame: &Frame,
    loops: &[Vec<Bit>],
) -> Result<Boundary, Box<OutlineError>> {
    let mut chains: Vec<(bool, Vec<BoundarySide>)> = Vec::new();
    for bits in loops {
        let bits = joined_on_circles(context, with_whole_arcs(bits));
        for chain in parted_at_infinity(&bits) {
            let closed = chain.first().is_some_and(|bit| bit.from.is_some());
            let sides = sides(context, frame, chain)?;
            chains.push((closed, join::sides(&sides)));
        }
    }
    // Open chains all belong to one loop; sorting keeps their order.
    chains.sort_by_key(|(closed, _)| *closed);
    infinity::align(context, &mut chains);
    let mut boundary = Boundary {
        sides: Vec::new(),
        chains: Vec::new(),
    };
    for (closed, sides) in chains {
        let start = boundary.sides.len();
        boundary.sides.extend(sides);
        boundary.chains.push(BoundaryChain {
            sides: start..boundary.sides.len(),
            closed,
        });
    }
    Ok(boundary)
}

/// The same loop, begun where no arc is cut in two.
fn with_whole_arcs(bits: &[Bit]) -> Vec<Bit> {
    let mut bits = bits.to_vec();
    let before = bits.iter().cycle().skip(bits.len().saturating_sub(1));
    let mut pairs = bits.iter().zip(before);
    let start = pairs.position(|(here, before)| !goes_round(before, here));
    if bits.first().is_some_and(|bit| bit.from.is_some()) {
        bits.rotate_left(start.unwrap_or(0));
    }
    bits
}

/// Whether two consecutive pieces are chords of one circle.
fn goes_round(before: &Bit, here: &Bit) -> bool {
    before.is_chord && here.is_chord && before.edge == here.edge
}

/// The pieces of a loop between its gaps at infinity.
fn parted_at_infinity(bits: &[Bit]) -> Vec<&[Bit]> {
    let mut chains = Vec::new();
    let mut rest = bits;
    while !rest.is_empty() {
        let later = rest.iter().skip(1).position(|bit| bit.from.is_none());
        let (chain, after) = rest.split_at(later.map_or(rest.len(), |place| place + 1));
        chains.push(chain);
        rest = after;
    }
    chains
}

/// Moves the joints at the ends of arcs, which lie within the tolerance of
/// their circles, onto them.
fn joined_on_circles(context: Context<'_>, mut bits: Vec<Bit>) -> Vec<Bit> {
    let joints: Vec<Option<Point>> = bits
        .iter()
        .zip(bits.iter().cycle().skip(1))
        .map(|(here, next)| {
            let joint = here.to?;
            let chord = [here, next].into_iter().find(|bit| bit.is_chord);
            let circle = chord.and_then(|chord| circle(context, chord.edge));
            let Some((centre, radius_m)) = circle else {
                return Some(joint);
            };
            Some(centre + (joint - centre).normalize() * radius_m)
        })
        .collect();
    let before = joints.iter().cycle().skip(joints.len().saturating_sub(1));
    for ((bit, to), from) in bits.iter_mut().zip(&joints).zip(before) {
        bit.from = bit.from.and(*from);
        bit.to = bit.to.and(*to);
    }
    bits
}

/// Centre and radius of an edge that is a circle; circles are not stretched.
fn circle(context: Context<'_>, edge: usize) -> Option<(Point, f64)> {
    match context.site.edges.get(edge).map(|edge| &edge.shape) {
        Some(EdgeShape::Circle { centre, radius }) => Some((*centre, radius.si())),
        _ => None,
    }
}

/// The sides of one chain, arcs whole and straight pieces cut at the stages.
fn sides(
    context: Context<'_>,
    frame: &Frame,
    chain: &[Bit],
) -> Result<Vec<BoundarySide>, Box<OutlineError>> {
    let mut sides = Vec::new();
    let mut rest = chain;
    while let Some((first, after)) = rest.split_first() {
        if first.is_chord {
            let follows = |pair: &[Bit]| match pair {
                [before, here] => goes_round(before, here),
                _ => false,
            };
            let more = rest.windows(2).take_while(|pair| follows(pair)).count();
            let (arc, others) = rest.split_at(more + 1);
            sides.push(round(context, frame, arc)?);
            rest = others;
        } else {
            sides.extend(straight(context, frame, first)?);
            rest = after;
        }
    }
    Ok(sides)
}

/// The arc that consecutive chords stand for.
fn round(
    context: Context<'_>,
    frame: &Frame,
    chords: &[Bit],
) -> Result<BoundarySide, Box<OutlineError>> {
    let edge = chords.first().map_or(0, |bit| bit.edge);
    let (centre, radius) = circle(context, edge).unwrap_or((Point::origin(), 0.0));
    let site = context.site;
    let angle = |place: Option<Point>| {
        let outward = place.unwrap_or(centre) - centre;
        outward.y.atan2(outward.x)
    };
    let swept = |chord: &Bit| {
        let turn = (angle(chord.to) - angle(chord.from)).rem_euclid(TAU);
        if turn > TAU / 2.0 { turn - TAU } else { turn }
    };
    let sweep_rad: f64 = chords.iter().map(swept).sum();
    let ends = (
        chords.first().and_then(|bit| bit.from),
        chords.last().and_then(|bit| bit.to),
    );
    let sweep_rad = if ends.0 == ends.1 {
        TAU.copysign(sweep_rad)
    } else {
        sweep_rad
    };
    let along = chords.first().map_or(Vector::x(), |bit| bit.direction);
    let condition = banks::condition(site, &frame.stretch, edge, along)?;
    banks::check_count(site, edge)?;
    let stage_m = banks::level_m(site, edge);
    Ok(BoundarySide {
        curve: Curve::Arc {
            centre: place(centre) - frame.origin,
            radius,
            start_rad: angle(ends.0),
            sweep_rad,
        },
        edge,
        condition,
        stage_m: [stage_m; 2],
    })
}

/// A straight piece, cut where the stages along it bend.
fn straight(
    context: Context<'_>,
    frame: &Frame,
    bit: &Bit,
) -> Result<Vec<BoundarySide>, Box<OutlineError>> {
    let site = context.site;
    let condition = banks::condition(site, &frame.stretch, bit.edge, bit.direction)?;
    let side = |curve, stage_m| BoundarySide {
        curve,
        edge: bit.edge,
        condition,
        stage_m: match condition {
            Condition::NoFlow => [0.0; 2],
            _ => stage_m,
        },
    };
    let anchor = bit.from.or(bit.to).unwrap_or(bit.anchor);
    let knots = banks::knots(site, &frame.stretch, bit, anchor)?;
    let canonical = |point: Point| place(point) - frame.origin;
    let heading = number(bit.direction);
    // On a ray the stage of the drawn end is held, so it has no cut.
    let (from, to) = match (bit.from, bit.to) {
        (Some(from), Some(to)) => (from, to),
        (None, Some(to)) => {
            let curve = Curve::RayIn {
                to: canonical(to),
                from_direction: -heading,
            };
            return Ok(vec![side(curve, [knots.at(f64::NEG_INFINITY); 2])]);
        }
        (Some(from), None) => {
            let curve = Curve::RayOut {
                from: canonical(from),
                direction: heading,
            };
            return Ok(vec![side(curve, [knots.at(f64::INFINITY); 2])]);
        }
        (None, None) => return Ok(Vec::new()),
    };
    let length_m = (to - from).norm();
    let cuts = knots.between(0.0, length_m);
    let at = |along: f64| canonical(from) + (canonical(to) - canonical(from)) * (along / length_m);
    let inner = || cuts.iter().map(|along| (*along, at(*along)));
    let starts = std::iter::once((0.0, canonical(from))).chain(inner());
    let ends = inner().chain([(length_m, canonical(to))]);
    let segment = |((start, from), (end, to)): ((f64, Complex64), (f64, Complex64))| {
        side(
            Curve::Segment { from, to },
            [knots.at(start), knots.at(end)],
        )
    };
    Ok(starts.zip(ends).map(segment).collect())
}

/// The piece that a boundary side is.
fn piece(side: &BoundarySide) -> Piece {
    let along = side.curve.along();
    let [start_m, end_m] = side.stage_m;
    let length = along.end - along.start;
    let stage_slope = if length.is_finite() && side.condition.kind() == Kind::FixedHead {
        (end_m - start_m) / length
    } else {
        0.0
    };
    Piece {
        edge: side.edge,
        along,
        stage_m: start_m,
        stage_slope,
    }
}

impl Outline {
    /// An outline of shape `General`, with its boundary examined.
    fn general(
        frame: Frame,
        boundary: Boundary,
        sides: Vec<Vec<Piece>>,
        context: Context<'_>,
    ) -> Result<Self, Vec<OutlineError>> {
        let outline = Self {
            frame,
            shape: Shape::General,
            sides,
            wells: context.wells.to_vec(),
            neighbours: Vec::new(),
            finder: super::finder::Finder::of(&frame, &boundary, context).map(std::sync::Arc::new),
            boundary: Some(std::sync::Arc::new(boundary)),
        };
        super::examine::faults(context, &outline)?;
        Ok(outline)
    }
}
