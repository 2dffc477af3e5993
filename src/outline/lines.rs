//! The sides of a boundary as straight pieces, joined without gaps, for the
//! test of what lies inside.
//!
//! An arc becomes chords, each with the segment of the circle beyond it. A
//! half-line becomes a very long piece.

use std::f64::consts::FRAC_PI_8;

use geo::{Coord, GeoNum, Kernel, Orientation};
use num_complex::Complex64;

use super::general::{Boundary, BoundaryChain, BoundarySide, Curve};

/// A straight piece from `a` to `b`.
#[derive(Clone, Copy, Debug)]
pub(super) struct Line {
    /// Its beginning.
    pub a: Complex64,
    /// Its end.
    pub b: Complex64,
    /// The circle that it is a chord of.
    pub arc: Option<ArcBeyond>,
}

/// The arc beyond a chord.
#[derive(Clone, Copy, Debug)]
pub(super) struct ArcBeyond {
    centre: Complex64,
    radius: f64,
    /// Whether the arc lies to the left of its chord.
    lies_left: bool,
    /// Height of the arc above its chord.
    pub sagitta: f64,
}

/// Whether a place lies strictly to the left of the line from `a` to `b`; exact.
/// Source: Shewchuk (1997), adaptive predicates, as `geo` has them.
pub(super) fn lies_left(a: Complex64, b: Complex64, place: Complex64) -> bool {
    let coordinate = |z: Complex64| Coord { x: z.re, y: z.im };
    let turn = <f64 as GeoNum>::Ker::orient2d(coordinate(a), coordinate(b), coordinate(place));
    turn == Orientation::CounterClockwise
}

impl Line {
    /// Whether the way from `p` to `q` crosses the piece.
    ///
    /// Places on a line count as to its right, wherever they are asked about,
    /// so a way through a vertex crosses one of the two pieces that meet there
    /// or both or none as its two ends demand.
    pub fn is_crossed(&self, p: Complex64, q: Complex64) -> bool {
        lies_left(self.a, self.b, p) != lies_left(self.a, self.b, q)
            && lies_left(p, q, self.a) != lies_left(p, q, self.b)
    }

    /// Whether a place lies between the chord and its arc.
    pub fn holds_beyond(&self, place: Complex64) -> bool {
        self.arc.is_some_and(|arc| {
            (place - arc.centre).norm_sqr() < arc.radius * arc.radius
                && lies_left(self.a, self.b, place) == arc.lies_left
        })
    }

    /// Whether a place lies within a distance of the piece, or of its arc.
    pub fn is_near(&self, place: Complex64, distance: f64) -> bool {
        let chord = self.b - self.a;
        let Some(arc) = self.arc else {
            // Measured from the end nearer to the place, which the length of
            // a half-line does not blur.
            let from_a = (place - self.a).norm() <= (place - self.b).norm();
            let (near, chord) = if from_a {
                (self.a, chord)
            } else {
                (self.b, -chord)
            };
            let offset = (place - near) * chord.conj() / chord.norm();
            let past = offset.re.min(0.0);
            return offset.im.hypot(past) <= distance;
        };
        let outward = place - arc.centre;
        let middle = 0.5 * (self.a + self.b) - arc.centre;
        let height = (outward * middle.conj()).re / middle.norm();
        (outward.norm() - arc.radius).abs() <= distance && height >= middle.norm() - distance
    }
}

/// The pieces of all chains; `reach` is how long half-lines are.
pub(super) fn of(boundary: &Boundary, reach: f64) -> Vec<Line> {
    let chains = boundary.chains.iter();
    chains
        .flat_map(|chain| of_chain(boundary, chain, reach))
        .collect()
}

fn of_chain(boundary: &Boundary, chain: &BoundaryChain, reach: f64) -> Vec<Line> {
    let sides = boundary.sides_of(chain);
    let before = sides.iter().cycle().skip(sides.len().saturating_sub(1));
    let after = sides.iter().cycle().skip(1);
    let mut lines = Vec::new();
    for ((side, before), after) in sides.iter().zip(before).zip(after) {
        let straight = |a, b| Line { a, b, arc: None };
        match side.curve {
            Curve::Segment { from, to } => lines.push(straight(from, to)),
            Curve::RayIn { to, from_direction } => {
                lines.push(straight(to + from_direction * reach, to));
            }
            Curve::RayOut { from, direction } => {
                lines.push(straight(from, from + direction * reach));
            }
            Curve::Arc { .. } => {
                lines.extend(chords(side, joint(before, side), joint(side, after)))
            }
        }
    }
    lines
}

/// The place where two sides join, the same to the last bit whichever asks.
fn joint(first: &BoundarySide, second: &BoundarySide) -> Complex64 {
    let of_straight = match (first.curve, second.curve) {
        (Curve::Segment { to, .. } | Curve::RayIn { to, .. }, _) => Some(to),
        (_, Curve::Segment { from, .. } | Curve::RayOut { from, .. }) => Some(from),
        _ => second.curve.from(),
    };
    of_straight.unwrap_or_default()
}

/// The chords of an arc, none over more than 22.5°.
fn chords(side: &BoundarySide, from: Complex64, to: Complex64) -> Vec<Line> {
    let Curve::Arc {
        centre,
        radius,
        sweep_rad,
        ..
    } = side.curve
    else {
        return Vec::new();
    };
    let count = (sweep_rad.abs() / FRAC_PI_8).ceil().max(1.0);
    let arc = ArcBeyond {
        centre,
        radius,
        lies_left: sweep_rad < 0.0,
        sagitta: radius * (1.0 - (0.5 * sweep_rad / count).cos()),
    };
    let place = |step: f64| {
        if step == 0.0 {
            from
        } else if step == count {
            to
        } else {
            side.curve.at(sweep_rad.abs() * step / count)
        }
    };
    (0..count as u32)
        .map(|step| Line {
            a: place(f64::from(step)),
            b: place(f64::from(step + 1)),
            arc: Some(arc),
        })
        .collect()
}
