//! Names the shape of a face and sets up its canonical frame, or hands it on as
//! a general outline.
//!
//! Sides count as parallel or square where turning them to the frame's axes
//! moves no place within the plan's extent by more than 1 mm; everything else
//! keeps the angle that it has.

use std::collections::BTreeSet;

use num_complex::Complex64;

use super::boundary::{self, Bit, Side};
use super::error::OutlineError;
use super::faces::Faces;
use super::frame::{Frame, Stretch};
use super::named::{self, Named};
use super::pieces::finish;
use super::scene::Scene;
use super::shape::{Kind, Shape};
use super::{Naming, Outline, Piece};
use super::{assemble, banks, clogged, refuse, stages};
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
    /// What is recognised by name.
    pub naming: Naming,
}

/// The outline of a face that holds wells.
pub(super) fn outline(
    context: Context<'_>,
    faces: &Faces<'_>,
    face: usize,
) -> Result<Outline, Vec<OutlineError>> {
    let (around, islands) = faces.loops(face);
    let bits = |cycle: usize| boundary::bits(context.site, &faces.arrangement, cycle);
    let loops = Loops {
        around: around.map(bits).unwrap_or_default(),
        islands: islands.into_iter().map(bits).collect(),
    };
    loops.check_stages(context.site)?;
    let outline = match named(context, &loops)? {
        Some(outline) => outline,
        None => general(context, &loops)?,
    };
    outline
        .check_drainage(context.site)
        .map_err(|error| vec![error])?;
    Ok(outline)
}

/// The loops of a face.
struct Loops {
    /// The one around it; empty where only islands bound it.
    around: Vec<Bit>,
    /// Those around islands in it.
    islands: Vec<Vec<Bit>>,
}

impl Loops {
    fn bits(&self) -> impl Iterator<Item = &Bit> {
        self.around.iter().chain(self.islands.iter().flatten())
    }

    fn has_river(&self) -> bool {
        self.bits().any(|bit| bit.kind == Kind::FixedHead)
    }

    /// Whether it runs to infinity nowhere.
    fn is_closed(&self) -> bool {
        !self.around.is_empty() && self.around.iter().all(|bit| bit.from.is_some())
    }

    /// That each river has one stage for each vertex, or one for all.
    fn check_stages(&self, site: &Site) -> Result<(), Vec<OutlineError>> {
        let edges: BTreeSet<usize> = self.bits().map(|bit| bit.edge).collect();
        let faults = edges
            .into_iter()
            .filter_map(|edge| banks::check_count(site, edge).err());
        let faults: Vec<OutlineError> = faults.collect();
        if faults.is_empty() {
            Ok(())
        } else {
            Err(faults)
        }
    }
}

/// The outline where it has a closed form, all conditions considered.
fn named(context: Context<'_>, loops: &Loops) -> Result<Option<Outline>, Vec<OutlineError>> {
    let site = context.site;
    let is_unnamed = context.naming == Naming::NoRivers
        && loops.has_river()
        && site.aquifer.influence_radius.is_none();
    if is_unnamed {
        return Ok(None);
    }
    match unclogged(context, loops) {
        Some(outline) => clogged::with_banks(site, outline).map_err(|error| vec![error]),
        None => Ok(None),
    }
}

/// The outline where it has a closed form with all banks clean.
fn unclogged(context: Context<'_>, loops: &Loops) -> Option<Outline> {
    match (loops.around.as_slice(), loops.islands.as_slice()) {
        ([], []) => Some(finish(context, &named::open_plane())),
        ([], [island]) => whole_circle(island).and_then(|edge| circle(context, edge, false)),
        ([_, ..], []) => match whole_circle(&loops.around) {
            Some(edge) => circle(context, edge, true),
            None if loops.bits().any(|bit| bit.is_chord) => None,
            None => straight(context, &sides(context, &loops.around)),
        },
        _ => None,
    }
}

/// The straight sides of a loop.
fn sides(context: Context<'_>, around: &[Bit]) -> Vec<Side> {
    boundary::sides(around, context.scene.angle_tolerance_rad())
}

/// The outline for the general solver: with a river, or closed.
fn general(context: Context<'_>, loops: &Loops) -> Result<Outline, Vec<OutlineError>> {
    if !loops.has_river() && !loops.is_closed() {
        return Err(vec![no_images(context, loops)]);
    }
    let is_stretched = context.scene.stretch != Stretch::none();
    if let Some(bit) = loops.bits().find(|bit| bit.is_chord && is_stretched) {
        return Err(vec![refuse::ellipse(context, bit.edge)]);
    }
    let around = std::iter::once(loops.around.clone()).filter(|around| !around.is_empty());
    let all: Vec<Vec<Bit>> = around.chain(loops.islands.iter().cloned()).collect();
    assemble::outline(context, &all)
}

/// Why an open outline of barriers alone has no image wells.
fn no_images(context: Context<'_>, loops: &Loops) -> OutlineError {
    let around = &loops.around;
    let arc = around.iter().find(|bit| bit.is_chord);
    match (loops.islands.first(), arc) {
        (Some(island), _) => match whole_circle(island).filter(|_| around.is_empty()) {
            Some(edge) => refuse::round_barrier(context, edge),
            None => refuse::island(context, island, !around.is_empty()),
        },
        (None, Some(bit)) => refuse::arc(context, bit.edge, around),
        (None, None) => refuse::straight(context, &sides(context, around)),
    }
}

/// The circle that a loop is, if it is all of one.
fn whole_circle(bits: &[boundary::Bit]) -> Option<usize> {
    let first = bits.first()?;
    let same = |bit: &boundary::Bit| bit.is_chord && bit.edge == first.edge;
    bits.iter().all(same).then_some(first.edge)
}

/// The disk within a round river, or the plane around it, where it is a circle
/// also when stretched.
fn circle(context: Context<'_>, edge: usize, inside: bool) -> Option<Outline> {
    let site = context.site;
    let is_river = boundary::kind_of(site, edge) == Kind::FixedHead;
    let is_stretched = context.scene.stretch != Stretch::none();
    let (centre, radius) = match site.edges.get(edge).map(|edge| &edge.shape) {
        Some(EdgeShape::Circle { centre, radius }) if is_river && !is_stretched => (centre, radius),
        _ => return None,
    };
    let radius_m = radius.si();
    let shape = if inside {
        Shape::Disk { radius_m }
    } else {
        Shape::DiskExterior { radius_m }
    };
    let piece = Piece {
        edge,
        along: 0.0..std::f64::consts::TAU,
        stage_m: banks::level_m(site, edge),
        stage_slope: 0.0,
    };
    Some(Outline {
        frame: Frame {
            stretch: context.scene.stretch,
            origin: Complex64::new(centre.x, centre.y),
            turn: Complex64::ONE,
        },
        shape,
        sides: vec![vec![piece]],
        wells: context.wells.to_vec(),
        neighbours: Vec::new(),
        boundary: None,
        finder: None,
    })
}

/// Names an outline of straight sides, where it has a name and its stages fit.
fn straight(context: Context<'_>, sides: &[Side]) -> Option<Outline> {
    let named = match sides {
        [side] if is_line(side) => named::half_plane(context, side),
        [first, second] if is_line(first) && is_line(second) => {
            named::strip(context, first, second)
        }
        [first, second] if comes_in(first) && goes_out(second) => {
            // A corner of 180° is no corner: one kind goes on as the other.
            let turn = first.direction.dot(&second.direction);
            let bit = second.bits.first()?;
            let tolerance = context.scene.angle_tolerance_rad();
            if turn > 0.0 && boundary::is_straight_on(first, bit, tolerance) {
                return None;
            }
            named::corner(context, first, second)
        }
        [first, base, last] if comes_in(first) && goes_out(last) => {
            named::half_strip(context, first, base, last)?
        }
        [_, _, _, _] if sides.iter().all(is_closed) => named::rectangle(context, sides)?,
        _ => return None,
    };
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
