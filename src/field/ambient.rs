//! The head before any pumping: what the rivers fix, and the uniform flow that
//! the edges leave free.
//!
//! | outline | head before pumping |
//! |---|---|
//! | no river | level + gradient · (x − at), along the barriers |
//! | one stage on all rivers | that stage |
//! | rivers across one axis only | linear from stage to stage |
//! | wedge between two rivers | linear in the angle |
//! | half-plane, stage falling along the river | linear along the river |
//! | other rivers of different stage | Σ stage · harmonic measure of the river |
//! | no closed form | all of it by the general solver |
//! | half-plane, river across an open end | plus slope · distance from the river |
//! | half-plane, river behind a clogged bank | plus slope · (distance from the river + skin) |
//! | plane around a lake | plus g · x (1 − R²/r²), uniform far away |
//!
//! Recharge adds its own mound (`recharge`).
//! The harmonic measure of a river seen from x is the share that it would give
//! to a well at x, so `green` knows it; on the river itself it jumps with the
//! last digit of x, so x is taken a hair inside. What the plan states is held against
//! it (`stated`).

use std::ops::Range;

use num_complex::Complex64;

use super::ambient_error::AmbientError;
use super::free_flow;
use super::recharge::Recharge;
use super::solved::Solved;
use super::stated::{Comparison, fix_level, stated_gradient};
use crate::green::Green;
use crate::outline::{Axis, Kind, Outline, Piece, Shape};
use crate::site::{Site, Vector};

/// The head before any pumping, in an outline's canonical frame.
#[derive(Clone, Debug, Default)]
pub(super) struct AmbientHead {
    /// Head at the canonical origin, without the other parts.
    pub(super) level_m: f64,
    /// ∂h/∂x + i ∂h/∂y of the linear part.
    pub(super) slope: Complex64,
    /// Around a lake the linear part is bent so that the shore stays level.
    pub(super) lake_radius_m: Option<f64>,
    /// Rise of the head over the angle of a wedge, metres a radian.
    pub(super) per_radian_m: f64,
    /// Parts of sides whose stage differs from `level_m`, and by how much.
    pub(super) measured: Vec<(usize, Range<f64>, f64)>,
    /// All of it, where the outline has no closed form.
    pub(super) solved: Option<Solved>,
    /// The mound built by recharge, where there is some.
    pub(super) recharge: Option<Recharge>,
}

/// What a head before pumping is built from beside stages and uniform flow.
pub(super) enum Built {
    /// The mound of recharge, where there is some.
    InClosedForm(Option<Recharge>),
    /// All of it, the mound and the uniform flow included.
    BySolver(Solved),
}

impl AmbientHead {
    /// Heads before pumping at canonical places, metres. Parallel where the
    /// outline has no closed form.
    pub fn heads_m(&self, places: &[Complex64], green: &dyn Green, shape: &Shape) -> Vec<f64> {
        let closed_form = places.iter().map(|z| self.closed_form_m(*z, green, shape));
        let mut heads_m = closed_form.collect::<Vec<_>>();
        if let Some(solved) = &self.solved {
            solved.general.add_heads_before_m(places, &mut heads_m);
        }
        heads_m
    }

    /// Head before pumping at a canonical place, metres.
    pub fn head_m(&self, z: Complex64, green: &dyn Green, shape: &Shape) -> f64 {
        let solved = self.solved.as_ref();
        solved.map_or(0.0, |solved| solved.general.head_before_m(z))
            + self.closed_form_m(z, green, shape)
    }

    fn closed_form_m(&self, z: Complex64, green: &dyn Green, shape: &Shape) -> f64 {
        let linear = (self.slope.conj() * z).re;
        let bend = self
            .lake_radius_m
            .map_or(1.0, |radius| 1.0 - radius * radius / z.norm_sqr());
        let turned = self.per_radian_m * shape.angle_of(z);
        let inside = shape.hair_inside(z);
        let measured: f64 = self
            .measured
            .iter()
            .map(|(side, along, rise_m)| rise_m * green.share(*side, along.clone(), inside))
            .sum();
        let mound = self.recharge.map_or(0.0, |recharge| recharge.rise_m(z));
        self.level_m + linear * bend + turned + measured + mound
    }

    /// ∂h/∂x + i ∂h/∂y at a canonical place. The part of harmonic measures is
    /// a central difference over `step_m`, good to 1e-9 of its size where the
    /// step is a thousandth of the distance to the edge.
    pub fn gradient(&self, z: Complex64, green: &dyn Green, step_m: f64) -> Complex64 {
        let i = Complex64::i();
        let linear = match self.lake_radius_m {
            None => self.slope,
            Some(radius) => {
                // h = Re(s̄ (z − R²/z̄)) = Re(s̄z) − R² Re(s/z)
                let inner = (-self.slope / (z * z)).conj();
                self.slope - radius * radius * inner
            }
        };
        let turned = match self.per_radian_m {
            0.0 => Complex64::ZERO,
            rise_m => rise_m * i * z / z.norm_sqr(),
        };
        let measured: Complex64 = self
            .measured
            .iter()
            .map(|(side, along, rise_m)| {
                let share = |place| green.share(*side, along.clone(), place);
                let along_x = share(z + step_m) - share(z - step_m);
                let along_y = share(z + i * step_m) - share(z - i * step_m);
                rise_m * Complex64::new(along_x, along_y) / (2.0 * step_m)
            })
            .sum();
        let mound = self.recharge.map(|recharge| recharge.gradient(z));
        let solved = self.solved.as_ref();
        let solved = solved.map(|solved| solved.general.gradient_before(z));
        linear + turned + measured + mound.unwrap_or_default() + solved.unwrap_or_default()
    }

    /// The uniform flow that a plan states as the one far away, where the
    /// edges leave one free and bend it.
    pub(super) fn far_flow(&self) -> Option<Complex64> {
        match (&self.solved, self.lake_radius_m) {
            (Some(solved), _) => solved.far_flow,
            (None, Some(_)) => Some(self.slope),
            (None, None) => None,
        }
    }
}

/// Finds the head before pumping of one aquifer.
///
/// `notes` receives what the reader should know of it.
pub(super) fn solve(
    site: &Site,
    outline: &Outline,
    green: &dyn Green,
    built: Built,
    notes: &mut Vec<String>,
) -> Result<AmbientHead, Vec<AmbientError>> {
    let stated = stated_gradient(site)?;
    let mut head = match built {
        Built::BySolver(solved) => AmbientHead {
            solved: Some(solved),
            ..AmbientHead::default()
        },
        Built::InClosedForm(recharge) => {
            notes.extend(recharge.map(|recharge| recharge.note()));
            let mut head = fixed_by_rivers(outline);
            add_free_flow(&mut head, outline, stated);
            AmbientHead { recharge, ..head }
        }
    };
    let has_river = outline.side_kinds().contains(&Kind::FixedHead);
    let Some(ambient) = &site.ambient else {
        return if has_river {
            Ok(head)
        } else {
            Err(vec![AmbientError::Missing])
        };
    };
    if has_river {
        let compared = Comparison {
            site,
            outline,
            green,
            head: &head,
        };
        compared.check(ambient, stated, notes)?;
    } else {
        fix_level(&mut head, ambient, outline, stated, notes)?;
    }
    Ok(head)
}

/// Adds what the edges leave free of a stated uniform flow.
fn add_free_flow(head: &mut AmbientHead, outline: &Outline, stated: Vector) {
    let free = free_flow::part_of(&outline.shape, outline.frame.gradient_to_canonical(stated));
    head.slope += free;
    match outline.shape {
        // ∂h/∂x = (h − stage)/b: the flow through the bank takes a step of head.
        Shape::CloggedHalfPlane { skin_m } => head.level_m += free.re * skin_m,
        Shape::DiskExterior { radius_m } => head.lake_radius_m = Some(radius_m),
        _ => {}
    }
}

/// The head that the rivers fix, without any uniform flow.
fn fixed_by_rivers(outline: &Outline) -> AmbientHead {
    let kinds = outline.side_kinds();
    let rivers: Vec<(usize, &Piece)> = kinds
        .iter()
        .zip(&outline.sides)
        .enumerate()
        .filter(|(_, (kind, _))| **kind == Kind::FixedHead)
        .flat_map(|(side, (_, pieces))| pieces.iter().map(move |piece| (side, piece)))
        .collect();
    let mut head = AmbientHead {
        level_m: rivers.first().map_or(0.0, |(_, piece)| piece.stage_m),
        ..AmbientHead::default()
    };
    // A half-plane's rivers may fall along its side, x = 0, all alike; their
    // levels at y = 0 may differ.
    let fall = rivers.first().map_or(0.0, |(_, piece)| piece.stage_slope);
    head.slope = Complex64::new(0.0, fall);
    // Several rivers that make one side at one stage count as one.
    let mut sides: Vec<(usize, f64)> = rivers
        .iter()
        .map(|(side, piece)| (*side, piece.stage_m))
        .collect();
    sides.dedup();
    if let [(first_side, first_m), (second_side, second_m)] = sides.as_slice() {
        let rise_m = second_m - first_m;
        if let Some(across) = across_one_axis(&outline.shape, *first_side, *second_side) {
            head.slope = across * rise_m;
            return head;
        }
        if let (Shape::Wedge { angle_rad, .. }, true) = (outline.shape, first_side != second_side) {
            head.per_radian_m = rise_m / angle_rad;
            return head;
        }
    }
    head.measured = rivers
        .iter()
        .map(|(side, piece)| (*side, piece.along.clone(), piece.stage_m - head.level_m))
        .filter(|(_, _, rise_m)| *rise_m != 0.0)
        .collect();
    head
}

/// 1/width along the axis between two opposite rivers, where these are the
/// only ones.
fn across_one_axis(shape: &Shape, first: usize, second: usize) -> Option<Complex64> {
    let Shape::Axes { x, y } = *shape else {
        return None;
    };
    match (first, second, x, y) {
        (0, 1, Axis::TwoEdges { width_m, .. }, _) => Some(Complex64::new(width_m.recip(), 0.0)),
        (2, 3, _, Axis::TwoEdges { width_m, .. }) => Some(Complex64::new(0.0, width_m.recip())),
        _ => None,
    }
}
