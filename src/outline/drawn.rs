//! Checks that the drawn edges neither lie on one another nor cross
//! themselves.

use super::error::OutlineError;
use super::names;
use super::stroke::{Contact, Role, Stroke, contacts};
use crate::site::Site;

/// The faults of the edges as drawn, at most one for each pair of edges.
pub(super) fn faults(site: &Site, strokes: &[Stroke]) -> Vec<OutlineError> {
    let mut found: Vec<(usize, usize)> = Vec::new();
    let mut errors = Vec::new();
    for (index, first) in strokes.iter().enumerate() {
        for (step, second) in strokes.iter().skip(index + 1).enumerate() {
            let pair = (first.edge, second.edge);
            if both_of_one_circle(first, second) || found.contains(&pair) {
                continue;
            }
            let error = if first.edge == second.edge {
                crossing_itself(site, strokes, index, index + 1 + step)
            } else {
                overlap(site, first, second)
            };
            if let Some(error) = error {
                found.push(pair);
                errors.push(error);
            }
        }
    }
    errors
}

fn both_of_one_circle(first: &Stroke, second: &Stroke) -> bool {
    first.edge == second.edge && first.role == Role::Chord
}

/// Length over which two contacts or more lie, if there are two.
fn shared_length(contacts: &[Contact]) -> Option<f64> {
    let (first, last) = (contacts.first()?, contacts.last()?);
    (contacts.len() > 1).then(|| (last.at - first.at).norm())
}

/// Two edges that share more than one place of a stroke.
fn overlap(site: &Site, first: &Stroke, second: &Stroke) -> Option<OutlineError> {
    let length = shared_length(&contacts(first, second))?;
    Some(OutlineError::Overlap {
        edge: names::edge(site, second.edge),
        other: names::edge(site, first.edge),
        length: names::length(length),
    })
}

/// Two strokes of one line that touch elsewhere than at their common vertex.
fn crossing_itself(
    site: &Site,
    strokes: &[Stroke],
    first: usize,
    second: usize,
) -> Option<OutlineError> {
    let (one, other) = (strokes.get(first)?, strokes.get(second)?);
    let touching = contacts(one, other);
    let contact = touching.first()?;
    let of_edge = |stroke: &&Stroke| stroke.edge == one.edge;
    let whole: f64 = strokes.iter().filter(of_edge).map(|s| s.length_m).sum();
    let before: f64 = strokes
        .iter()
        .take(first)
        .filter(of_edge)
        .map(|s| s.length_m)
        .sum();
    let follows = second == first + 1;
    let closes = before == 0.0 && strokes.get(second + 1).is_none_or(|s| s.edge != one.edge);
    let slack = 2.0 * super::stroke::tolerance_at(contact.at);
    let at_shared_vertex = (follows && contact.on_second <= slack)
        || (closes && contact.on_first <= slack && contact.on_second + slack >= other.length_m);
    if touching.len() == 1 && at_shared_vertex {
        return None;
    }
    let from_start = (before + contact.on_first).min(whole);
    Some(OutlineError::CrossesItself {
        edge: names::edge(site, one.edge),
        from_start: names::length(from_start),
    })
}
