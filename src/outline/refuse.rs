//! Puts into words why a face has no closed form, and what to draw instead.

use std::collections::BTreeMap;
use std::f64::consts::{PI, TAU};

use super::boundary::{Bit, Side};
use super::error::{Named, OutlineError};
use super::names;
use super::recognise::Context;
use super::stroke::cross;

/// Corners whose angles are worth listing.
const ANGLES_LISTED: usize = 6;

const COVERED: &str = "leave out edges far from the wells, or simplify the outline to a straight \
     line, a strip, a wedge, a half-strip, a box or a single circle";

/// Starts a refusal with its subject and the edges that take part.
fn refusal(
    context: Context<'_>,
    edge: usize,
    edges: &[usize],
    outline: String,
    why: Option<String>,
    remedy: String,
) -> OutlineError {
    let others = edges.iter().filter(|other| **other != edge);
    let others = others.take(names::LISTED);
    OutlineError::NoClosedForm {
        well: match context.wells.first() {
            Some(&well) => names::well(context.site, well),
            None => Named {
                subject: crate::site::Subject::Plan,
                words: "a well".to_owned(),
            },
        },
        edge: names::edge(context.site, edge),
        outline,
        why,
        remedy,
        others: others
            .map(|&other| names::edge(context.site, other))
            .collect(),
    }
}

/// A face with islands.
pub(super) fn island(context: Context<'_>, island: &[Bit], bounded: bool) -> OutlineError {
    let edge = island.first().map_or(0, |bit| bit.edge);
    let edges = edges_of(island);
    let name = names::few(&words(context, &edges));
    let outline = if bounded {
        format!("an aquifer with an island inside it: {name}")
    } else {
        format!("the plane around {name}")
    };
    let why = "a closed form covers a single round lake in an otherwise open plane".to_owned();
    let remedy = format!(
        "leave {name} out if it lies far from the wells, or simplify the outline to a single \
         round lake"
    );
    refusal(context, edge, &edges, outline, Some(why), remedy)
}

/// A face bounded by part of a circle.
pub(super) fn arc(context: Context<'_>, circle: usize, around: &[Bit]) -> OutlineError {
    let edges = edges_of(around);
    let name = names::edge(context.site, circle);
    let outline = format!(
        "an aquifer bounded by an arc of {name} and by other edges: {}",
        names::few(&words(context, &edges))
    );
    let why = "a closed form covers a circle that no other edge meets".to_owned();
    let remedy = format!("leave {name} out, or draw its bank as a straight line");
    refusal(context, circle, &edges, outline, Some(why), remedy)
}

/// The open plane around a barrier that is a circle.
pub(super) fn round_barrier(context: Context<'_>, circle: usize) -> OutlineError {
    let name = names::edge(context.site, circle);
    let outline = format!("the aquifer around the round {name}");
    let why = "without a river the cones end at influence_radius, which needs image wells, and a \
               round barrier has none"
        .to_owned();
    let remedy = "make it a river, leave it out, or draw straight barriers".to_owned();
    refusal(context, circle, &[], outline, Some(why), remedy)
}

/// A circle in an anisotropic aquifer.
pub(super) fn ellipse(context: Context<'_>, circle: usize) -> OutlineError {
    let name = names::edge(context.site, circle);
    let outline = format!("an anisotropic aquifer bounded by the circle of {name}");
    let ratio = context.site.aquifer.anisotropy.map_or(1.0, |a| a.ratio);
    let why = format!(
        "where conductivity differs with direction (ratio {ratio}) a circle acts as an ellipse"
    );
    let remedy = "leave `anisotropy` out, or the circle".to_owned();
    refusal(context, circle, &[], outline, Some(why), remedy)
}

/// An outline of straight sides that is none of the named ones.
pub(super) fn straight(context: Context<'_>, sides: &[Side]) -> OutlineError {
    let mut edges: Vec<usize> = Vec::new();
    for edge in sides.iter().flat_map(|side| &side.bits).map(|bit| bit.edge) {
        if !edges.contains(&edge) {
            edges.push(edge);
        }
    }
    let angles = corner_angles(sides);
    let is_open = sides.iter().any(|side| side.to().is_none());
    let closed = if is_open {
        "an aquifer"
    } else {
        "a closed aquifer"
    };
    let corners = match angles.len() {
        1 => "1 corner".to_owned(),
        count => format!("{count} corners"),
    };
    let outline = format!(
        "{closed} with {corners}: {}",
        names::few(&words(context, &edges))
    );
    let measured: Vec<String> = angles.iter().map(|angle| names::angle(*angle)).collect();
    let why = (angles.len() <= ANGLES_LISTED && !angles.is_empty()).then(|| {
        let corners = if angles.len() == 1 {
            "its corner measures"
        } else {
            "its corners measure"
        };
        format!(
            "{corners} {}{}",
            names::listed(&measured),
            not_parallel(context, sides)
        )
    });
    refusal(
        context,
        breaking_edge(sides, &angles),
        &edges,
        outline,
        why,
        remedy(context, sides, is_open),
    )
}

/// What to draw instead of an outline of straight sides.
fn remedy(context: Context<'_>, sides: &[Side], is_open: bool) -> String {
    let extent = names::length(context.scene.extent_m);
    match (sides.len(), is_open) {
        (3, true) => format!(
            "draw its two long sides parallel and square to the short one, to within 1 mm over \
             the plan's extent of {extent}; or {COVERED}"
        ),
        (4, false) => format!(
            "draw its four sides square to one another, to within 1 mm over the plan's extent of \
             {extent}; or {COVERED}"
        ),
        _ => COVERED.to_owned(),
    }
}

/// How far the long sides of an open outline with three sides are from
/// parallel.
fn not_parallel(context: Context<'_>, sides: &[Side]) -> String {
    let ([first, _, last], true) = (sides, sides.iter().any(|side| side.to().is_none())) else {
        return String::new();
    };
    let turn = cross(first.direction, -last.direction)
        .atan2(-first.direction.dot(&last.direction))
        .abs();
    if turn <= context.scene.angle_tolerance_rad() {
        return String::new();
    }
    format!("; its long sides are {} from parallel", names::angle(turn))
}

/// The angles inside the face at its corners, in order.
fn corner_angles(sides: &[Side]) -> Vec<f64> {
    let following = sides.iter().cycle().skip(1);
    sides
        .iter()
        .zip(following)
        .filter(|(side, _)| side.to().is_some())
        .map(|(side, next)| {
            let turn =
                cross(side.direction, next.direction).atan2(side.direction.dot(&next.direction));
            (PI - turn).rem_euclid(TAU)
        })
        .collect()
}

/// The edge to point at: in an outline of up to four corners the later one
/// at the corner furthest from a right angle, else the one with most sides.
fn breaking_edge(sides: &[Side], angles: &[f64]) -> usize {
    let after = sides.iter().cycle().skip(1);
    let corners = sides
        .iter()
        .zip(after)
        .filter(|(side, _)| side.to().is_some());
    let worst = corners
        .zip(angles)
        .map(|(sides, angle)| (sides, (angle - PI / 2.0).abs()))
        .max_by(|a, b| a.1.total_cmp(&b.1));
    if let Some(((side, next), _)) = worst
        && angles.len() <= 4
    {
        return side.lowest_edge().max(next.lowest_edge());
    }
    let mut counts: BTreeMap<usize, usize> = BTreeMap::new();
    for side in sides {
        *counts.entry(side.lowest_edge()).or_default() += 1;
    }
    let most = counts.iter().max_by(|a, b| a.1.cmp(b.1).then(b.0.cmp(a.0)));
    most.map_or(0, |(edge, _)| *edge)
}

/// The edges of some pieces, each once, in order.
fn edges_of(bits: &[Bit]) -> Vec<usize> {
    let mut edges = Vec::new();
    for bit in bits {
        if !edges.contains(&bit.edge) {
            edges.push(bit.edge);
        }
    }
    edges
}

fn words(context: Context<'_>, edges: &[usize]) -> Vec<String> {
    let name = |edge: &usize| names::edge(context.site, *edge).words;
    edges.iter().map(name).collect()
}
