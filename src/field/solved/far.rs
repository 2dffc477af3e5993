//! What goes on far away in an open outline: a uniform flow, or recharge that
//! endless rivers drain.
//!
//! A flow goes on where it is square to all endless rivers and runs along all
//! endless barriers; between two rivers side by side their stages fix it. Recharge
//! drains where the aquifer goes on between edges side by side only, with a river
//! beside each stretch.

use num_complex::Complex64;

use crate::outline::{Boundary, BoundarySide, Curve, Kind, Opening, Outline};
use crate::site::{Refusal, Site, Subject};

/// Half-lines count as parallel or square to within this angle, radians.
const PARALLEL_RAD: f64 = 1e-9;

/// The head far away, but for what the stages fix.
#[derive(Clone, Copy, Debug, Default)]
pub(super) struct Far {
    /// ∂h/∂x + i ∂h/∂y of its uniform part.
    pub flow: Complex64,
    /// Whether that is the plan's to state.
    pub is_free: bool,
}

/// Recharge that no river within reach takes up.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Undrained;

/// A half-line.
#[derive(Clone, Copy, Debug)]
struct Ray {
    /// Unit number to infinity.
    direction: Complex64,
    kind: Kind,
}

impl Ray {
    /// The one direction in which a uniform flow may run beside it.
    fn axis(&self) -> Complex64 {
        match self.kind {
            Kind::FixedHead => self.direction * Complex64::I,
            Kind::NoFlow => self.direction,
        }
    }
}

/// What goes on far away under a stated uniform flow and recharge.
pub(super) fn of(
    boundary: &Boundary,
    stated: Complex64,
    source_per_m: f64,
) -> Result<Far, Undrained> {
    if boundary.is_bounded() {
        return Ok(Far::default());
    }
    let openings = boundary.openings();
    if source_per_m != 0.0 {
        let is_drained = |opening: &Opening| {
            opening.width_m.is_some() && kinds(boundary, opening).contains(&Some(Kind::FixedHead))
        };
        let drains = !openings.is_empty() && openings.iter().all(is_drained);
        return drains.then(Far::default).ok_or(Undrained);
    }
    let flow = free_flow(boundary, &openings, stated);
    Ok(Far {
        flow: flow.unwrap_or_default(),
        is_free: flow.is_some(),
    })
}

fn ray(side: &BoundarySide) -> Option<Ray> {
    let direction = match side.curve {
        Curve::RayIn { from_direction, .. } => from_direction,
        Curve::RayOut { direction, .. } => direction,
        Curve::Segment { .. } | Curve::Arc { .. } => return None,
    };
    Some(Ray {
        direction,
        kind: side.condition.kind(),
    })
}

fn kinds(boundary: &Boundary, opening: &Opening) -> [Option<Kind>; 2] {
    [opening.out, opening.back].map(|side| {
        let side = boundary.sides.get(side);
        side.map(|side| side.condition.kind())
    })
}

/// The part of a stated uniform flow that can go on far away; none where the
/// edges leave no flow free.
fn free_flow(boundary: &Boundary, openings: &[Opening], stated: Complex64) -> Option<Complex64> {
    let rays: Vec<Ray> = boundary.sides.iter().filter_map(ray).collect();
    let Some(axis) = rays.first().map(Ray::axis) else {
        return Some(stated);
    };
    let is_across = |ray: &Ray| (axis.conj() * ray.axis()).im.abs() > PARALLEL_RAD;
    let is_fixed = |opening: &Opening| {
        opening.width_m.is_some() && kinds(boundary, opening) == [Some(Kind::FixedHead); 2]
    };
    if rays.iter().any(is_across) || openings.iter().any(is_fixed) {
        return None;
    }
    Some(axis * (axis.conj() * stated).re)
}

impl Undrained {
    /// What the plan's author should know.
    pub fn refusal(self, site: &Site, outline: &Outline) -> Refusal {
        Refusal {
            subject: Subject::Aquifer(Some("recharge")),
            what: format!(
                "the {} goes on to infinity and has a recharge of {}",
                outline.shape.name(),
                site.aquifer.recharge
            ),
            why: Some(
                "far away, recharge drains only between two parallel edges of which one is a river"
                    .to_owned(),
            ),
            remedy: "close the aquifer with a river or a barrier, or leave out recharge".to_owned(),
            related: Vec::new(),
        }
    }
}
