//! The half-lines of a general boundary on their way to infinity.
//!
//! Between a half-line that goes out and the next that comes in the aquifer
//! opens by an angle. Where the two count as parallel they are made so, which
//! moves no place within the plan's extent by more than 1 mm; else they would
//! meet far away, or open, as chance has it.

use num_complex::Complex64;

use super::general::{BoundarySide, Curve};
use super::recognise::Context;
use super::stroke::TOUCH_M;

/// A chain: whether it is closed, and its sides.
type Chain = (bool, Vec<BoundarySide>);

/// Makes half-lines parallel that count as parallel.
pub(super) fn align(context: Context<'_>, chains: &mut [Chain]) {
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
        if let Some(Curve::RayOut { direction: old, .. }) = last_curve(chains, number) {
            *old = direction;
        }
        if let Some(Curve::RayIn { from_direction, .. }) = first_curve(chains, next) {
            *from_direction = direction;
        }
    }
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
