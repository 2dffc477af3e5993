//! The shapes of straight sides, each with the frame in which it is canonical.

use num_complex::Complex64;

use super::boundary::Side;
use super::recognise::Context;
use super::shape::{Axis, Shape};
use crate::site::{Point, Vector};

/// A shape with straight sides in its place, before its pieces are made.
pub(super) struct Named<'a> {
    /// Its name and dimensions.
    pub shape: Shape,
    /// The canonical x axis, in stretched coordinates.
    pub turn: Complex64,
    /// The canonical origin, in the turned frame.
    pub origin: Complex64,
    /// The sides in canonical order.
    pub sides: Vec<Placed<'a>>,
}

/// A side, the direction in which positions along it grow, and its ends.
pub(super) struct Placed<'a> {
    /// The side.
    pub side: &'a Side,
    /// Unit number, in the canonical frame, along which positions grow.
    pub axis: Complex64,
    /// Positions of its two ends.
    pub limits: [f64; 2],
}

pub(super) fn number(vector: Vector) -> Complex64 {
    Complex64::new(vector.x, vector.y)
}

pub(super) fn place(point: Point) -> Complex64 {
    Complex64::new(point.x, point.y)
}

fn unit(z: Complex64) -> Complex64 {
    z / z.norm()
}

/// The mean of the wells' places, stretched.
pub(super) fn centre_of_wells(context: Context<'_>) -> Complex64 {
    let places = context
        .wells
        .iter()
        .filter_map(|&well| context.site.wells.get(well));
    let sum: Complex64 = places
        .map(|well| place(context.scene.stretch.apply(well.at)))
        .sum();
    sum / context.wells.len().max(1) as f64
}

/// Whether a side runs along an axis to within the tolerance.
fn runs_along(context: Context<'_>, side: &Side, axis: Complex64) -> bool {
    let ratio = number(side.direction) * axis.conj();
    ratio.re > 0.0 && ratio.im.abs() <= context.scene.angle_tolerance_rad()
}

pub(super) fn open_plane<'a>() -> Named<'a> {
    Named {
        shape: Shape::Axes {
            x: Axis::Open,
            y: Axis::Open,
        },
        turn: Complex64::ONE,
        origin: Complex64::ZERO,
        sides: Vec::new(),
    }
}

/// The coordinate of a side's line across an axis.
fn across(side: &Side, turn: Complex64) -> f64 {
    (place(side.anchor) * turn.conj()).re
}

/// Positions without end.
const ENDLESS: [f64; 2] = [f64::NEG_INFINITY, f64::INFINITY];

pub(super) fn half_plane<'a>(context: Context<'_>, side: &'a Side) -> Named<'a> {
    let turn = number(side.direction) * Complex64::I;
    let along = (centre_of_wells(context) * turn.conj()).im;
    Named {
        shape: Shape::Axes {
            x: Axis::OneEdge(side.kind),
            y: Axis::Open,
        },
        turn,
        origin: Complex64::new(across(side, turn), along),
        sides: vec![Placed {
            side,
            axis: Complex64::I,
            limits: ENDLESS,
        }],
    }
}

pub(super) fn strip<'a>(context: Context<'_>, first: &'a Side, second: &'a Side) -> Named<'a> {
    let (low, high) = if first.lowest_edge() <= second.lowest_edge() {
        (first, second)
    } else {
        (second, first)
    };
    let turn = unit(number(low.direction) - number(high.direction)) * Complex64::I;
    let along = (centre_of_wells(context) * turn.conj()).im;
    let start = across(low, turn);
    let endless = |side| Placed {
        side,
        axis: Complex64::I,
        limits: ENDLESS,
    };
    Named {
        shape: Shape::Axes {
            x: Axis::TwoEdges {
                width_m: across(high, turn) - start,
                kinds: [low.kind, high.kind],
            },
            y: Axis::Open,
        },
        turn,
        origin: Complex64::new(start, along),
        sides: vec![endless(low), endless(high)],
    }
}

/// A quarter-plane or a wedge.
pub(super) fn corner<'a>(context: Context<'_>, first: &'a Side, second: &'a Side) -> Named<'a> {
    let (inward, outward) = (-number(first.direction), number(second.direction));
    let square = unit(outward - inward * Complex64::I);
    let is_square =
        runs_along(context, first, -square * Complex64::I) && runs_along(context, second, square);
    let limits = [0.0, f64::INFINITY];
    let kinds = [second.kind, first.kind];
    if is_square {
        let x = across(first, square);
        let y = across(second, square * Complex64::I);
        return Named {
            shape: Shape::Axes {
                x: Axis::OneEdge(first.kind),
                y: Axis::OneEdge(second.kind),
            },
            turn: square,
            origin: Complex64::new(x, y),
            sides: vec![
                Placed {
                    side: first,
                    axis: Complex64::I,
                    limits,
                },
                Placed {
                    side: second,
                    axis: Complex64::ONE,
                    limits,
                },
            ],
        };
    }
    let turned = inward * outward.conj();
    let angle = turned.arg().rem_euclid(std::f64::consts::TAU);
    // Two banks of one half-line.
    let angle_rad = if angle == 0.0 {
        std::f64::consts::TAU
    } else {
        angle
    };
    let apex = first.to().map_or(Complex64::ZERO, place);
    Named {
        shape: Shape::Wedge { angle_rad, kinds },
        turn: outward,
        origin: apex * outward.conj(),
        sides: vec![
            Placed {
                side: second,
                axis: Complex64::ONE,
                limits,
            },
            Placed {
                side: first,
                axis: unit(turned),
                limits,
            },
        ],
    }
}

pub(super) fn half_strip<'a>(
    context: Context<'_>,
    first: &'a Side,
    base: &'a Side,
    last: &'a Side,
) -> Option<Named<'a>> {
    let up = unit(number(last.direction) - number(first.direction));
    let turn = -up * Complex64::I;
    let is_square = runs_along(context, first, -up)
        && runs_along(context, base, turn)
        && runs_along(context, last, up);
    let start = across(first, turn);
    let width_m = across(last, turn) - start;
    let rising = |side| Placed {
        side,
        axis: Complex64::I,
        limits: [0.0, f64::INFINITY],
    };
    is_square.then(|| Named {
        shape: Shape::Axes {
            x: Axis::TwoEdges {
                width_m,
                kinds: [first.kind, last.kind],
            },
            y: Axis::OneEdge(base.kind),
        },
        turn,
        origin: Complex64::new(start, across(base, up)),
        sides: vec![
            rising(first),
            rising(last),
            Placed {
                side: base,
                axis: Complex64::ONE,
                limits: [0.0, width_m],
            },
        ],
    })
}

/// A box: of its four sides, counterclockwise, the one that becomes y low is
/// chosen so that x is the shorter width and x low has the lower edge number.
pub(super) fn rectangle<'a>(context: Context<'_>, sides: &'a [Side]) -> Option<Named<'a>> {
    let around = |start: usize| sides.iter().cycle().skip(start).take(4);
    let choices = (0..4).filter_map(|start| {
        let four: Vec<&Side> = around(start).collect();
        match four.as_slice() {
            &[bottom, right, top, left] => {
                let named = box_on(context, [bottom, right, top, left])?;
                Some((left.lowest_edge(), bottom.lowest_edge(), named))
            }
            _ => None,
        }
    });
    let best = choices.min_by_key(|choice| (choice.0, choice.1));
    best.map(|(_, _, named)| named)
}

/// The box on a certain side as its y low, if its x width is the shorter one.
fn box_on<'a>(context: Context<'_>, sides: [&'a Side; 4]) -> Option<Named<'a>> {
    let [bottom, right, top, left] = sides;
    let turn = unit(number(bottom.direction) - number(top.direction));
    let up = turn * Complex64::I;
    let axes = [turn, up, -turn, -up];
    let is_square = sides
        .iter()
        .zip(axes)
        .all(|(side, axis)| runs_along(context, side, axis));
    let (x, y) = (across(left, turn), across(bottom, up));
    let (width_m, height_m) = (across(right, turn) - x, across(top, up) - y);
    let is_upright = width_m <= height_m * (1.0 + 1e-12);
    let vertical = |side| Placed {
        side,
        axis: Complex64::I,
        limits: [0.0, height_m],
    };
    let level = |side| Placed {
        side,
        axis: Complex64::ONE,
        limits: [0.0, width_m],
    };
    (is_square && is_upright).then(|| Named {
        shape: Shape::Axes {
            x: Axis::TwoEdges {
                width_m,
                kinds: [left.kind, right.kind],
            },
            y: Axis::TwoEdges {
                width_m: height_m,
                kinds: [bottom.kind, top.kind],
            },
        },
        turn,
        origin: Complex64::new(x, y),
        sides: vec![vertical(left), vertical(right), level(bottom), level(top)],
    })
}
