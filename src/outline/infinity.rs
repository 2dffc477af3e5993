//! The half-lines of a general boundary on their way to infinity.
//!
//! Between a half-line that goes out and the next that comes in the aquifer
//! opens by an angle. Where the two count as parallel they are made so, which
//! moves no place within the plan's extent by more than 1 mm; else they would
//! meet far away, or open, as chance has it.

use num_complex::Complex64;

use super::error::OutlineError;
use super::frame::Frame;
use super::general::{BoundarySide, Curve};
use super::names;
use super::recognise::Context;
use super::shape::Kind;
use super::stroke::TOUCH_M;

/// Stages that differ by less count as the same, metres.
const SAME_STAGE_M: f64 = 1e-9;

/// A chain: whether it is closed, and its sides.
type Chain = (bool, Vec<BoundarySide>);

/// Makes half-lines parallel that count as parallel.
///
/// # Errors
/// `ParallelStages` where both are rivers and their stages differ.
pub(super) fn align(
    context: Context<'_>,
    frame: &Frame,
    chains: &mut [Chain],
) -> Result<(), Box<OutlineError>> {
    let open = chains.iter().take_while(|(closed, _)| !closed).count();
    let tolerance_rad = context.scene.angle_tolerance_rad();
    for number in 0..open {
        let next = (number + 1) % open;
        let out = chains.get(number).and_then(|(_, sides)| sides.last());
        let back = chains.get(next).and_then(|(_, sides)| sides.first());
        let (Some(out), Some(back)) = (out, back) else {
            continue;
        };
        let Some(direction) = common(out, back, tolerance_rad) else {
            continue;
        };
        check_stages(context, frame, out, back)?;
        if let Some(Curve::RayOut { direction: old, .. }) = last_curve(chains, number) {
            *old = direction;
        }
        if let Some(Curve::RayIn { from_direction, .. }) = first_curve(chains, next) {
            *from_direction = direction;
        }
    }
    Ok(())
}

fn last_curve(chains: &mut [Chain], chain: usize) -> Option<&mut Curve> {
    let side = chains.get_mut(chain)?.1.last_mut()?;
    Some(&mut side.curve)
}

fn first_curve(chains: &mut [Chain], chain: usize) -> Option<&mut Curve> {
    let side = chains.get_mut(chain)?.1.first_mut()?;
    Some(&mut side.curve)
}

/// The common direction of two half-lines that run to infinity side by side,
/// the aquifer between them.
fn common(out: &BoundarySide, back: &BoundarySide, tolerance_rad: f64) -> Option<Complex64> {
    let (
        Curve::RayOut { from, direction },
        Curve::RayIn {
            to,
            from_direction: other,
        },
    ) = (out.curve, back.curve)
    else {
        return None;
    };
    let turn = (direction.conj() * other).arg();
    let mean = direction + other;
    let is_between = turn.abs() <= tolerance_rad && lies_left(direction, from, to);
    is_between.then(|| mean / mean.norm())
}

/// Whether a place lies to the left of a half-line; on the other bank of the
/// same one it does not.
pub(super) fn lies_left(direction: Complex64, from: Complex64, place: Complex64) -> bool {
    (direction.conj() * (place - from)).im > TOUCH_M
}

/// That two parallel rivers have one stage far away.
fn check_stages(
    context: Context<'_>,
    frame: &Frame,
    out: &BoundarySide,
    back: &BoundarySide,
) -> Result<(), Box<OutlineError>> {
    let both_rivers = [out, back]
        .iter()
        .all(|side| side.condition.kind() == Kind::FixedHead);
    let stages_m = [out.stage_m[1], back.stage_m[0]];
    if !both_rivers || (stages_m[0] - stages_m[1]).abs() <= SAME_STAGE_M {
        return Ok(());
    }
    let apart_m = out.curve.from().zip(back.curve.to()).map_or(0.0, |ends| {
        let direction = out.curve.heading(0.0);
        (direction.conj() * (ends.1 - ends.0)).im
    });
    let across = frame.direction_to_site(out.curve.heading(0.0) * Complex64::I * apart_m);
    Err(Box::new(OutlineError::ParallelStages {
        river: names::edge(context.site, out.edge.max(back.edge)),
        other: names::edge(context.site, out.edge.min(back.edge)),
        apart: names::length(across.norm()),
        stages_m: if out.edge > back.edge {
            stages_m
        } else {
            [stages_m[1], stages_m[0]]
        },
    }))
}
