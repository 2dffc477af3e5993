//! A boundary as the sides of a region that the solver takes.
//!
//! Whole circles and wide arcs are cut into quarters. Two half-lines that run to
//! infinity side by side make a channel, in which nothing reaches far: what
//! disturbs the head there fades as e^(−x/ℓ), so the channel is closed by a wall
//! [`FADED`] ℓ beyond everything drawn, and places beyond have the head abreast of
//! them at the wall, but for a uniform flow along the channel. For a width L,
//! ℓ = 2L/π between any clean edges; behind a skin b on both or opposite a barrier
//! the slowest fading k obeys kL tan kL ≥ L/b or the like, and 1/k is at most
//! 2L/π + √(bL).

use std::f64::consts::{FRAC_PI_2, PI};
use std::ops::Range;

use num_complex::Complex64;

use crate::outline::{Boundary, BoundarySide, Condition, Curve, Opening};
use crate::potential::{self, Region, Side};

/// e^(−38) is below rounding.
const FADED: f64 = 38.0;

/// Share of its distance by which a place may lie beside a channel and still
/// count as in it.
const ON_EDGE: f64 = 1e-9;

/// A boundary made ready.
pub(super) struct Sides {
    pub region: Region,
    /// For each side of the region its heads at both ends.
    pub heads_m: Vec<[f64; 2]>,
    /// For each side of the boundary, the sides of the region that make it.
    pub parts: Vec<Range<usize>>,
    /// Channels that are closed far away.
    pub channels: Vec<Channel>,
}

/// A channel between two half-lines side by side.
#[derive(Clone, Copy, Debug)]
pub(super) struct Channel {
    /// The side of the boundary that goes out.
    out: usize,
    /// The side of the boundary that comes in, to its left.
    back: usize,
    start: Complex64,
    end: Complex64,
    direction: Complex64,
    width_m: f64,
    /// Distance of its wall from `start`.
    length_m: f64,
}

impl Channel {
    /// Distance of a place along it from `start`.
    fn along_m(&self, place: Complex64) -> f64 {
        ((place - self.start) * self.direction.conj()).re
    }

    /// Length of the side that comes in.
    fn back_length_m(&self) -> f64 {
        self.length_m - self.along_m(self.end)
    }

    /// Where its wall begins and ends.
    fn wall(&self) -> (Complex64, Complex64) {
        (
            self.start + self.direction * self.length_m,
            self.end + self.direction * self.back_length_m(),
        )
    }

    /// The place of its closed end abreast of a place beyond; none elsewhere.
    pub fn end_abreast(&self, x: Complex64) -> Option<Complex64> {
        let seen = (x - self.start) * self.direction.conj();
        let slack = ON_EDGE * seen.norm();
        let is_beyond =
            seen.re > self.length_m && seen.im >= -slack && seen.im <= self.width_m + slack;
        is_beyond.then(|| self.start + self.direction * Complex64::new(self.length_m, seen.im))
    }
}

impl Sides {
    /// The sides of a boundary; `places` are all places drawn.
    pub fn of(boundary: &Boundary, places: &[Complex64]) -> Self {
        let mut sides = Self {
            region: Region::new(&[]),
            heads_m: Vec::new(),
            parts: vec![0..0; boundary.sides.len()],
            channels: channels(boundary, places),
        };
        let scale_m = places.iter().map(|place| place.norm()).fold(0.0, f64::max);
        let scale_m = if scale_m > 0.0 { scale_m } else { 1.0 };
        let mut chains: Vec<Vec<Side>> = Vec::new();
        let mut is_done = vec![false; boundary.chains.len()];
        for first in sides.starts(boundary) {
            let mut chain = Vec::new();
            let mut number = first;
            while !is_done.get(number).copied().unwrap_or(true) {
                if let Some(done) = is_done.get_mut(number) {
                    *done = true;
                }
                let last = sides.add_chain(boundary, number, scale_m, &mut chain);
                let mut channels = sides.channels.iter();
                let Some(channel) = channels.find(|channel| Some(channel.out) == last).copied()
                else {
                    break;
                };
                let (from, to) = channel.wall();
                chain.push(Side::closing(from, to));
                sides.heads_m.push([0.0; 2]);
                number = chain_of(boundary, channel.back);
            }
            if !chain.is_empty() {
                chains.push(chain);
            }
        }
        sides.region = Region::new(&chains);
        sides
    }

    /// The channel that a side of the boundary runs along.
    pub fn channel_of(&self, side: usize) -> Option<&Channel> {
        let mut channels = self.channels.iter();
        channels.find(|channel| channel.out == side || channel.back == side)
    }

    /// Whether both sides of every channel have one stage, or one is a barrier.
    pub fn have_channels_one_stage(&self, boundary: &Boundary) -> bool {
        let stage_m = |side: usize| {
            let side = boundary.sides.get(side);
            side.filter(|side| side.condition != Condition::NoFlow)
                .map(|side| side.stage_m[0])
        };
        self.channels.iter().all(|channel| {
            let stages_m = stage_m(channel.out).zip(stage_m(channel.back));
            stages_m.is_none_or(|(one, other)| one == other)
        })
    }

    /// The chains in an order in which those that a channel leads into come
    /// last: they stand after the one that they continue.
    fn starts(&self, boundary: &Boundary) -> Vec<usize> {
        let is_led_into = |number: &usize| {
            let mut channels = self.channels.iter();
            channels.any(|channel| chain_of(boundary, channel.back) == *number)
        };
        let (last, mut first): (Vec<_>, Vec<_>) = (0..boundary.chains.len()).partition(is_led_into);
        first.extend(last);
        first
    }

    /// Appends the sides of a chain; the number of its last side.
    fn add_chain(
        &mut self,
        boundary: &Boundary,
        number: usize,
        scale_m: f64,
        chain: &mut Vec<Side>,
    ) -> Option<usize> {
        let range = boundary.chains.get(number)?.sides.clone();
        for index in range.clone() {
            let side = boundary.sides.get(index)?;
            let channel = self.channel_of(index).copied();
            let pieces = pieces(side, channel, scale_m);
            let count = self.heads_m.len();
            self.heads_m.extend(pieces.iter().map(|_| side.stage_m));
            if let Some(part) = self.parts.get_mut(index) {
                *part = count..self.heads_m.len();
            }
            chain.extend(pieces);
        }
        range.last()
    }

    /// What a range along a side of the boundary covers of one of its pieces;
    /// empty if nothing.
    pub fn within(
        &self,
        side: usize,
        curve: &Curve,
        piece: usize,
        along: &Range<f64>,
    ) -> Range<f64> {
        let whole = match (*curve, self.channel_of(side)) {
            (Curve::Arc { sweep_rad, .. }, _) => {
                let sweep_rad = sweep_rad.abs() / arcs(sweep_rad) as f64;
                piece as f64 * sweep_rad..(piece + 1) as f64 * sweep_rad
            }
            (Curve::RayOut { .. }, Some(channel)) => 0.0..channel.length_m,
            (Curve::RayIn { .. }, Some(channel)) => -channel.back_length_m()..0.0,
            _ => curve.along(),
        };
        along.start.max(whole.start)..along.end.min(whole.end)
    }
}

/// The channels of a boundary, their walls beyond all places drawn.
fn channels(boundary: &Boundary, places: &[Complex64]) -> Vec<Channel> {
    let channel = |opening: &Opening| {
        let (out, back) = (opening.out, opening.back);
        let (one, other) = (boundary.sides.get(out)?, boundary.sides.get(back)?);
        let width_m = opening.width_m?;
        let mut channel = Channel {
            out,
            back,
            start: one.curve.from()?,
            end: other.curve.to()?,
            direction: one.curve.heading(0.0),
            width_m,
            length_m: 0.0,
        };
        let drawn = places.iter().map(|place| channel.along_m(*place));
        let fading_m = 2.0 * width_m / PI + (skin_m(one, other) * width_m).sqrt();
        channel.length_m = drawn.fold(0.0, f64::max) + FADED * fading_m;
        Some(channel)
    };
    boundary.openings().iter().filter_map(channel).collect()
}

/// The skin that slows the fading between two sides: the thinner of two, or
/// the one opposite a barrier.
fn skin_m(one: &BoundarySide, other: &BoundarySide) -> f64 {
    let skin_m = |side: &BoundarySide| match side.condition {
        Condition::Head => 0.0,
        Condition::NoFlow => f64::INFINITY,
        Condition::Clogged { skin_m } => skin_m,
    };
    let thinner_m = skin_m(one).min(skin_m(other));
    if thinner_m.is_finite() {
        thinner_m
    } else {
        0.0
    }
}

fn chain_of(boundary: &Boundary, side: usize) -> usize {
    let mut chains = boundary.chains.iter();
    let found = chains.position(|chain| chain.sides.contains(&side));
    found.unwrap_or(boundary.chains.len())
}

/// The sides of a region that make one side of a boundary.
fn pieces(side: &BoundarySide, channel: Option<Channel>, scale_m: f64) -> Vec<Side> {
    let condition = match side.condition {
        Condition::Head => potential::Condition::Head,
        Condition::NoFlow => potential::Condition::Flux,
        Condition::Clogged { skin_m } => potential::Condition::Clogged { skin_m },
    };
    match side.curve {
        Curve::Segment { from, to } => vec![Side::segment(from, to, condition)],
        Curve::RayIn { to, from_direction } => vec![match channel {
            Some(channel) => Side::segment(channel.wall().1, to, condition),
            None => Side::ray_in(to, from_direction, scale_m, condition),
        }],
        Curve::RayOut { from, direction } => vec![match channel {
            Some(channel) => Side::segment(from, channel.wall().0, condition),
            None => Side::ray_out(from, direction, scale_m, condition),
        }],
        Curve::Arc {
            centre,
            radius,
            start_rad,
            sweep_rad,
        } => {
            let count = arcs(sweep_rad);
            let sweep_rad = sweep_rad / count as f64;
            let arc = |index: usize| {
                let start_rad = start_rad + index as f64 * sweep_rad;
                Side::arc(centre, radius, start_rad, sweep_rad, condition)
            };
            (0..count).map(arc).collect()
        }
    }
}

/// Into how many arcs of at most a quarter turn a sweep is cut.
fn arcs(sweep_rad: f64) -> usize {
    ((sweep_rad.abs() / FRAC_PI_2 - 1e-9).ceil() as usize).max(1)
}
