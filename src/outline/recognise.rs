//! Names the shape of a face and sets up its canonical frame.
//!
//! Sides count as parallel or square where turning them to the frame's axes
//! moves no place within the plan's extent by more than 1 mm; everything else
//! keeps the angle that it has.

use num_complex::Complex64;

use super::boundary::{self, Side};
use super::error::OutlineError;
use super::faces::Faces;
use super::frame::Frame;
use super::refuse;
use super::scene::Scene;
use super::shape::{Axis, Kind, Shape};
use super::stages;
use super::{Outline, Piece};
use crate::site::{EdgeShape, Point, Site, Vector};

/// What a face is recognised with.
#[derive(Clone, Copy)]
pub(super) struct Context<'a> {
    /// The problem.
    pub site: &'a Site,
    /// Its edges, stretched.
    pub scene: &'a Scene,
    /// The wells that stand in the face.
    pub wells: &'a [usize],
}

/// The outline of a face that holds wells.
pub(super) fn outline(
    context: Context<'_>,
    faces: &Faces<'_>,
    face: usize,
) -> Result<Outline, Vec<OutlineError>> {
    let (around, islands) = faces.loops(face);
    let site = context.site;
    let bits = |cycle: &usize| boundary::bits(site, &faces.arrangement, *cycle);
    let around = around.as_ref().map(bits).unwrap_or_default();
    let islands: Vec<_> = islands.iter().map(bits).collect();
    match (around.as_slice(), islands.as_slice()) {
        ([], [island]) if let Some(edge) = whole_circle(island) => circle(context, edge, false),
        ([_, ..], []) if let Some(edge) = whole_circle(&around) => circle(context, edge, true),
        (_, [island, ..]) => Err(vec![refuse::island(context, island, !around.is_empty())]),
        ([], []) => Ok(finish(context, &open_plane())),
        (around, []) => {
            if let Some(bit) = around.iter().find(|bit| bit.is_chord) {
                return Err(vec![refuse::arc(context, bit.edge, around)]);
            }
            let sides = boundary::sides(around, context.scene.angle_tolerance_rad());
            straight(context, &sides)
        }
    }
}

/// The circle that a loop is, if it is all of one.
fn whole_circle(bits: &[boundary::Bit]) -> Option<usize> {
    let first = bits.first()?;
    let same = |bit: &boundary::Bit| bit.is_chord && bit.edge == first.edge;
    bits.iter().all(same).then_some(first.edge)
}

/// The disk within a circle, or the plane around it.
fn circle(context: Context<'_>, edge: usize, inside: bool) -> Result<Outline, Vec<OutlineError>> {
    let site = context.site;
    let Some(EdgeShape::Circle { centre, radius }) = site.edges.get(edge).map(|edge| &edge.shape)
    else {
        return Err(Vec::new());
    };
    if boundary::kind_of(site, edge) == Kind::NoFlow {
        return Err(vec![refuse::round_barrier(context, edge, inside)]);
    }
    if site
        .aquifer
        .anisotropy
        .is_some_and(|anisotropy| anisotropy.ratio != 1.0)
    {
        return Err(vec![refuse::ellipse(context, edge)]);
    }
    let radius_m = radius.si();
    let shape = if inside {
        Shape::Disk { radius_m }
    } else {
        Shape::DiskExterior { radius_m }
    };
    let (stage_m, stage_slope) = stages::on_circle(site, edge).map_err(|error| vec![error])?;
    let piece = Piece {
        edge,
        along: 0.0..std::f64::consts::TAU,
        stage_m,
        stage_slope,
    };
    Ok(Outline {
        frame: Frame {
            stretch: context.scene.stretch,
            origin: Complex64::new(centre.x, centre.y),
            turn: Complex64::ONE,
        },
        shape,
        sides: vec![vec![piece]],
        wells: context.wells.to_vec(),
        neighbours: Vec::new(),
    })
}

/// A shape with straight sides in its place, before its pieces are made.
struct Named<'a> {
    shape: Shape,
    /// The canonical x axis, in stretched coordinates.
    turn: Complex64,
    /// The canonical origin, in the turned frame.
    origin: Complex64,
    /// The sides in canonical order.
    sides: Vec<Placed<'a>>,
}

/// A side, the direction in which positions along it grow, and its ends.
struct Placed<'a> {
    side: &'a Side,
    axis: Complex64,
    limits: [f64; 2],
}

/// Names an outline of straight sides.
fn straight(context: Context<'_>, sides: &[Side]) -> Result<Outline, Vec<OutlineError>> {
    if let Some(error) = refuse::continued(context, sides) {
        return Err(vec![error]);
    }
    let named = match sides {
        [side] if is_line(side) => Some(half_plane(context, side)),
        [first, second] if is_line(first) && is_line(second) => Some(strip(context, first, second)),
        [first, second] if comes_in(first) && goes_out(second) => {
            Some(corner(context, first, second))
        }
        [first, base, last] if comes_in(first) && goes_out(last) => {
            half_strip(context, first, base, last)
        }
        [_, _, _, _] if sides.iter().all(is_closed) => rectangle(context, sides),
        _ => None,
    };
    let named = named.ok_or_else(|| vec![refuse::straight(context, sides)])?;
    let outline = finish(context, &named);
    let errors = stages::set(context.site, &named_sides(&named), outline);
    errors
}

/// The sides of a named outline with their bits, for the stages.
fn named_sides<'a>(named: &Named<'a>) -> Vec<&'a Side> {
    named.sides.iter().map(|placed| placed.side).collect()
}

fn is_line(side: &Side) -> bool {
    side.from().is_none() && side.to().is_none()
}

fn comes_in(side: &Side) -> bool {
    side.from().is_none() && side.to().is_some()
}

fn goes_out(side: &Side) -> bool {
    side.from().is_some() && side.to().is_none()
}

fn is_closed(side: &Side) -> bool {
    side.from().is_some() && side.to().is_some()
}

fn number(vector: Vector) -> Complex64 {
    Complex64::new(vector.x, vector.y)
}

fn place(point: Point) -> Complex64 {
    Complex64::new(point.x, point.y)
}

fn unit(z: Complex64) -> Complex64 {
    z / z.norm()
}

/// The mean of the wells' places, stretched.
fn centre_of_wells(context: Context<'_>) -> Complex64 {
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

fn open_plane<'a>() -> Named<'a> {
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

fn half_plane<'a>(context: Context<'_>, side: &'a Side) -> Named<'a> {
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

fn strip<'a>(context: Context<'_>, first: &'a Side, second: &'a Side) -> Named<'a> {
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
fn corner<'a>(context: Context<'_>, first: &'a Side, second: &'a Side) -> Named<'a> {
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

fn half_strip<'a>(
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
fn rectangle<'a>(context: Context<'_>, sides: &'a [Side]) -> Option<Named<'a>> {
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

/// The outline of a named shape; stages are still zero.
fn finish(context: Context<'_>, named: &Named<'_>) -> Outline {
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
    }
}

/// The pieces of a side in order along it, without gaps.
fn pieces(frame: &Frame, placed: &Placed<'_>) -> Vec<Piece> {
    let along = |point: Point| {
        let z = (place(point) - frame.origin) * frame.turn.conj();
        (z * placed.axis.conj()).re
    };
    let forward = number(placed.side.direction) * (frame.turn * placed.axis).conj();
    let mut bits: Vec<&boundary::Bit> = placed.side.bits.iter().collect();
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
