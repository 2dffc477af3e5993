//! Turns a named shape into an outline with the pieces of its sides.

use super::boundary::Bit;
use super::frame::Frame;
use super::named::{Named, Placed, number, place};
use super::recognise::Context;
use super::{Outline, Piece};
use crate::site::Point;

/// The outline of a named shape; stages are still zero.
pub(super) fn finish(context: Context<'_>, named: &Named<'_>) -> Outline {
    let frame = Frame {
        stretch: context.scene.stretch,
        origin: named.origin * named.turn,
        turn: named.turn,
    };
    let sides = named
        .sides
        .iter()
        .map(|placed| pieces(&frame, placed))
        .collect();
    Outline {
        frame,
        shape: named.shape,
        sides,
        wells: context.wells.to_vec(),
        neighbours: Vec::new(),
        boundary: None,
        finder: None,
    }
}

/// The pieces of a side in order along it, without gaps.
fn pieces(frame: &Frame, placed: &Placed<'_>) -> Vec<Piece> {
    let along = |point: Point| {
        let z = (place(point) - frame.origin) * frame.turn.conj();
        (z * placed.axis.conj()).re
    };
    let forward = number(placed.side.direction) * (frame.turn * placed.axis).conj();
    let mut bits: Vec<&Bit> = placed.side.bits.iter().collect();
    if forward.re < 0.0 {
        bits.reverse();
    }
    let [low, high] = placed.limits;
    let mut pieces: Vec<Piece> = Vec::new();
    for bit in bits {
        let end = if forward.re < 0.0 { bit.from } else { bit.to };
        let end = end.map_or(high, along).clamp(low, high);
        let start = pieces.last().map_or(low, |piece| piece.along.end);
        match pieces.last_mut() {
            Some(piece) if piece.edge == bit.edge => piece.along.end = end.max(start),
            _ => pieces.push(Piece {
                edge: bit.edge,
                along: start..end.max(start),
                stage_m: 0.0,
                stage_slope: 0.0,
            }),
        }
    }
    if let Some(last) = pieces.last_mut() {
        last.along.end = high;
    }
    pieces
}
