//! Joins consecutive straight sides that are one.

use num_complex::Complex64;

use super::general::{BoundarySide, Curve};

/// Farthest that a joint may lie off the line of the two sides that it parts,
/// metres, and in shares of the distances from the canonical origin: rounding,
/// not the millimetre within which lines are straightened.
const OFF_LINE_M: f64 = 1e-9;
const OFF_LINE: f64 = 1e-14;

/// Stages that differ by less count as the same, metres.
const SAME_STAGE_M: f64 = 1e-9;

/// The sides of a chain with those joined that lie on one line and have one
/// edge and one linear stage.
pub(super) fn sides(parts: &[BoundarySide]) -> Vec<BoundarySide> {
    let mut sides: Vec<BoundarySide> = Vec::new();
    for part in parts {
        match sides.last().and_then(|side| joined(side, part)) {
            Some(joined) => {
                sides.pop();
                sides.extend(joined);
            }
            None => sides.push(part.clone()),
        }
    }
    sides
}

/// Two consecutive sides as one, where they are; a line without end stays two,
/// parted at the foot of the origin.
fn joined(first: &BoundarySide, second: &BoundarySide) -> Option<Vec<BoundarySide>> {
    if first.edge != second.edge || first.condition.kind() != second.condition.kind() {
        return None;
    }
    let joint = first.curve.to()?;
    let with = |curve, stage_m| {
        vec![BoundarySide {
            curve,
            stage_m,
            ..first.clone()
        }]
    };
    let [start_m, _] = first.stage_m;
    let [_, end_m] = second.stage_m;
    let is_level = level(first) && level(second) && (end_m - start_m).abs() <= SAME_STAGE_M;
    match (first.curve, second.curve) {
        (Curve::Segment { from, .. }, Curve::Segment { to, .. }) => {
            let share = (joint - from).norm() / (to - from).norm();
            let straight_m = start_m + share * (end_m - start_m);
            let is_linear = [first.stage_m[1], second.stage_m[0]]
                .iter()
                .all(|stage_m| (stage_m - straight_m).abs() <= SAME_STAGE_M);
            let is_one = is_linear && on_line(from, to - from, joint) && ahead(first, second);
            is_one.then(|| with(Curve::Segment { from, to }, [start_m, end_m]))
        }
        (Curve::RayIn { from_direction, .. }, Curve::Segment { to, .. }) => {
            let is_one = is_level && on_line(joint, from_direction, to) && ahead(first, second);
            is_one.then(|| with(Curve::RayIn { to, from_direction }, first.stage_m))
        }
        (Curve::Segment { from, .. }, Curve::RayOut { direction, .. }) => {
            let is_one = is_level && on_line(joint, direction, from) && ahead(first, second);
            is_one.then(|| with(Curve::RayOut { from, direction }, second.stage_m))
        }
        (Curve::RayIn { from_direction, .. }, Curve::RayOut { direction, .. }) => {
            // One line carried on both ways: opposite to the last bit or two.
            let is_one = is_level && (from_direction + direction).norm() <= 4.0 * f64::EPSILON;
            is_one.then(|| whole_line(first, second, joint, direction))
        }
        _ => None,
    }
}

/// A whole line, its two half-lines meeting at the foot of the origin.
fn whole_line(
    first: &BoundarySide,
    second: &BoundarySide,
    joint: Complex64,
    direction: Complex64,
) -> Vec<BoundarySide> {
    let foot = joint - direction * (joint * direction.conj()).re;
    let come = Curve::RayIn {
        to: foot,
        from_direction: -direction,
    };
    let go = Curve::RayOut {
        from: foot,
        direction,
    };
    let sides = [(first, come), (second, go)].map(|(side, curve)| BoundarySide {
        curve,
        ..side.clone()
    });
    sides.to_vec()
}

/// Whether a side has one stage.
fn level(side: &BoundarySide) -> bool {
    let [start_m, end_m] = side.stage_m;
    (end_m - start_m).abs() <= SAME_STAGE_M
}

/// Whether the second side goes on the way that the first went.
fn ahead(first: &BoundarySide, second: &BoundarySide) -> bool {
    let end = first.curve.along().end;
    (first.curve.heading(end) * second.curve.heading(0.0).conj()).re > 0.0
}

/// Whether a place lies on the line through another.
fn on_line(anchor: Complex64, direction: Complex64, place: Complex64) -> bool {
    let off = (direction.conj() * (place - anchor)).im / direction.norm();
    off.abs() <= OFF_LINE_M.max(OFF_LINE * (anchor.norm() + place.norm()))
}
