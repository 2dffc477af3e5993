//! A boundary as the sides of a region that the solver takes.
//!
//! Whole circles and wide arcs are cut into quarters. Where two half-lines run
//! to infinity side by side, both start abreast. Between two barriers nothing
//! reaches far: what varies across fades as e^(−πx/L), so the channel of width L
//! is closed [`WIDTHS`] widths beyond everything drawn, where that is 1e-27, and
//! places beyond have the head of its end.

use std::f64::consts::FRAC_PI_2;
use std::ops::Range;

use num_complex::Complex64;

use crate::outline::{Boundary, BoundarySide, Condition, Curve, Opening};
use crate::potential::{self, Region, Side};

/// Widths of a channel from the last drawn place to its closed end.
const WIDTHS: f64 = 20.0;

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
    /// For each side of the boundary, how long a drawn part its half-line has.
    leads_m: Vec<f64>,
    /// For each side of the boundary, whether it is a wall of a channel.
    is_channel: Vec<bool>,
    /// Channels that are closed far away.
    pub channels: Vec<Channel>,
}

/// A channel between two barriers that goes on for ever.
#[derive(Clone, Copy, Debug)]
pub(super) struct Channel {
    start: Complex64,
    direction: Complex64,
    width_m: f64,
    length_m: f64,
}

impl Channel {
    /// The place of its closed end abreast of a place beyond; none elsewhere.
    pub fn end_abreast(&self, x: Complex64) -> Option<Complex64> {
        let seen = (x - self.start) * self.direction.conj();
        let slack = ON_EDGE * seen.norm();
        let is_beyond =
            seen.re > self.length_m && seen.im >= -slack && seen.im <= self.width_m + slack;
        is_beyond.then(|| self.start + self.direction * Complex64::new(self.length_m, seen.im))
    }
}

/// Two half-lines side by side, of one that goes out and the next that comes in.
#[derive(Clone, Copy, Debug)]
struct Abreast {
    out: usize,
    back: usize,
    start: Complex64,
    end: Complex64,
    direction: Complex64,
    width_m: f64,
    /// Whether both are barriers.
    is_channel: bool,
}

impl Sides {
    /// The sides of a boundary; `places` are all places drawn.
    pub fn of(boundary: &Boundary, places: &[Complex64]) -> Self {
        let pairs = pairs(boundary);
        let mut sides = Self {
            region: Region::new(&[]),
            heads_m: Vec::new(),
            parts: vec![0..0; boundary.sides.len()],
            leads_m: vec![0.0; boundary.sides.len()],
            is_channel: vec![false; boundary.sides.len()],
            channels: Vec::new(),
        };
        for pair in &pairs {
            sides.set_leads(pair, places);
        }
        let scale_m = places.iter().map(|place| place.norm()).fold(0.0, f64::max);
        let scale_m = if scale_m > 0.0 { scale_m } else { 1.0 };
        let mut chains: Vec<Vec<Side>> = Vec::new();
        let mut count = 0;
        let mut is_done = vec![false; boundary.chains.len()];
        for first in starts(boundary, &pairs) {
            let mut chain = Vec::new();
            let mut number = first;
            while !is_done.get(number).copied().unwrap_or(true) {
                if let Some(done) = is_done.get_mut(number) {
                    *done = true;
                }
                let last = sides.add_chain(boundary, number, scale_m, &mut count, &mut chain);
                let mut channels = pairs.iter().filter(|pair| pair.is_channel);
                let Some(channel) = channels.find(|pair| Some(pair.out) == last) else {
                    break;
                };
                chain.push(sides.wall(channel, &mut count));
                number = chain_of(boundary, channel.back);
            }
            if !chain.is_empty() {
                chains.push(chain);
            }
        }
        sides.region = Region::new(&chains);
        sides
    }

    /// Appends the sides of a chain; the number of its last side.
    fn add_chain(
        &mut self,
        boundary: &Boundary,
        number: usize,
        scale_m: f64,
        count: &mut usize,
        chain: &mut Vec<Side>,
    ) -> Option<usize> {
        let range = boundary.chains.get(number)?.sides.clone();
        for index in range.clone() {
            let side = boundary.sides.get(index)?;
            let lead_m = self.leads_m.get(index).copied().unwrap_or_default();
            let is_channel = self.is_channel.get(index).copied().unwrap_or_default();
            let pieces = pieces(side, lead_m, is_channel, scale_m);
            self.heads_m.extend(pieces.iter().map(|_| side.stage_m));
            if let Some(part) = self.parts.get_mut(index) {
                *part = *count..*count + pieces.len();
            }
            *count += pieces.len();
            chain.extend(pieces);
        }
        range.last()
    }

    /// How far two half-lines side by side are drawn before they count as such.
    fn set_leads(&mut self, pair: &Abreast, places: &[Complex64]) {
        let along = |place: Complex64| ((place - pair.start) * pair.direction.conj()).re;
        let back_m = along(pair.end);
        let abreast_m = if pair.is_channel {
            let farthest_m = places.iter().map(|place| along(*place)).fold(0.0, f64::max);
            farthest_m.max(back_m) + WIDTHS * pair.width_m
        } else {
            back_m.max(0.0)
        };
        for (side, lead_m) in [(pair.out, abreast_m), (pair.back, abreast_m - back_m)] {
            let slots = self
                .leads_m
                .get_mut(side)
                .zip(self.is_channel.get_mut(side));
            if let Some((lead, is_channel)) = slots {
                (*lead, *is_channel) = (lead_m, pair.is_channel);
            }
        }
        if pair.is_channel {
            self.channels.push(Channel {
                start: pair.start,
                direction: pair.direction,
                width_m: pair.width_m,
                length_m: abreast_m,
            });
        }
    }

    /// The closed end of a channel.
    fn wall(&mut self, pair: &Abreast, count: &mut usize) -> Side {
        let lead_m = |side: usize| self.leads_m.get(side).copied().unwrap_or_default();
        let from = pair.start + pair.direction * lead_m(pair.out);
        let to = pair.end + pair.direction * lead_m(pair.back);
        self.heads_m.push([0.0; 2]);
        *count += 1;
        Side::closing(from, to)
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
        let lead_m = self.leads_m.get(side).copied().unwrap_or_default();
        let is_channel = self.is_channel.get(side).copied().unwrap_or_default();
        let whole = match *curve {
            Curve::Arc { sweep_rad, .. } => {
                let sweep_rad = sweep_rad.abs() / arcs(sweep_rad) as f64;
                piece as f64 * sweep_rad..(piece + 1) as f64 * sweep_rad
            }
            Curve::RayOut { .. } if lead_m > 0.0 && piece == 0 => 0.0..lead_m,
            Curve::RayOut { .. } => lead_m..f64::INFINITY,
            Curve::RayIn { .. } if piece == 0 && !is_channel => f64::NEG_INFINITY..-lead_m,
            Curve::RayIn { .. } => -lead_m..0.0,
            Curve::Segment { .. } => curve.along(),
        };
        along.start.max(whole.start)..along.end.min(whole.end)
    }
}

/// The half-lines that run to infinity side by side.
fn pairs(boundary: &Boundary) -> Vec<Abreast> {
    let pair = |opening: &Opening| {
        let (out, back) = (opening.out, opening.back);
        let (one, other) = (boundary.sides.get(out)?, boundary.sides.get(back)?);
        let is_barrier = |side: &&BoundarySide| side.condition == Condition::NoFlow;
        Some(Abreast {
            out,
            back,
            start: one.curve.from()?,
            end: other.curve.to()?,
            direction: one.curve.heading(0.0),
            width_m: opening.width_m?,
            is_channel: [one, other].iter().all(is_barrier),
        })
    };
    boundary.openings().iter().filter_map(pair).collect()
}

/// The chains in an order in which those that a channel leads into come last:
/// they stand after the one that they continue.
fn starts(boundary: &Boundary, pairs: &[Abreast]) -> Vec<usize> {
    let is_led_into = |number: &usize| {
        let mut channels = pairs.iter().filter(|pair| pair.is_channel);
        channels.any(|pair| chain_of(boundary, pair.back) == *number)
    };
    let (last, mut first): (Vec<_>, Vec<_>) = (0..boundary.chains.len()).partition(is_led_into);
    first.extend(last);
    first
}

fn chain_of(boundary: &Boundary, side: usize) -> usize {
    let mut chains = boundary.chains.iter();
    let found = chains.position(|chain| chain.sides.contains(&side));
    found.unwrap_or(boundary.chains.len())
}

/// The sides of a region that make one side of a boundary.
fn pieces(side: &BoundarySide, lead_m: f64, is_channel: bool, scale_m: f64) -> Vec<Side> {
    let condition = match side.condition {
        Condition::Head => potential::Condition::Head,
        Condition::NoFlow => potential::Condition::Flux,
        Condition::Clogged { skin_m } => potential::Condition::Clogged { skin_m },
    };
    match side.curve {
        Curve::Segment { from, to } => vec![Side::segment(from, to, condition)],
        Curve::RayIn { to, from_direction } => {
            let start = to + from_direction * lead_m;
            let lead = (lead_m > 0.0).then(|| Side::segment(start, to, condition));
            let ray =
                (!is_channel).then(|| Side::ray_in(start, from_direction, scale_m, condition));
            ray.into_iter().chain(lead).collect()
        }
        Curve::RayOut { from, direction } => {
            let start = from + direction * lead_m;
            let lead = (lead_m > 0.0).then(|| Side::segment(from, start, condition));
            let ray = (!is_channel).then(|| Side::ray_out(start, direction, scale_m, condition));
            lead.into_iter().chain(ray).collect()
        }
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
