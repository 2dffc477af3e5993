//! Names the shape of a face and sets up its canonical frame.
//!
//! Sides count as parallel or square where turning them to the frame's axes
//! moves no place within the plan's extent by more than 1 mm; everything else
//! keeps the angle that it has.

use num_complex::Complex64;

use super::boundary::{self, Side};
use super::clogged;
use super::error::OutlineError;
use super::faces::Faces;
use super::frame::Frame;
use super::named::{self, Named};
use super::pieces::finish;
use super::refuse;
use super::scene::Scene;
use super::shape::{Kind, Shape};
use super::stages;
use super::{Outline, Piece};
use crate::site::{EdgeShape, Site};

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
    let outline = unclogged(context, faces, face)?;
    clogged::with_banks(context.site, outline)
}

/// The outline of a face as if all banks were clean.
fn unclogged(
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
        ([], []) => Ok(finish(context, &named::open_plane())),
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
    let (stage_m, stage_slope) = stages::on_circle(site, edge).map_err(|error| vec![*error])?;
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

/// Names an outline of straight sides.
fn straight(context: Context<'_>, sides: &[Side]) -> Result<Outline, Vec<OutlineError>> {
    if let Some(error) = refuse::continued(context, sides) {
        return Err(vec![error]);
    }
    let named = match sides {
        [side] if is_line(side) => Some(named::half_plane(context, side)),
        [first, second] if is_line(first) && is_line(second) => {
            Some(named::strip(context, first, second))
        }
        [first, second] if comes_in(first) && goes_out(second) => {
            Some(named::corner(context, first, second))
        }
        [first, base, last] if comes_in(first) && goes_out(last) => {
            named::half_strip(context, first, base, last)
        }
        [_, _, _, _] if sides.iter().all(is_closed) => named::rectangle(context, sides),
        _ => None,
    };
    let named = named.ok_or_else(|| vec![refuse::straight(context, sides)])?;
    let outline = finish(context, &named);
    stages::set(context.site, &named_sides(&named), outline)
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
