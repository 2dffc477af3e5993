//! What goes on far away in an open outline: a uniform flow, or recharge that
//! endless edges drain.
//!
//! Between half-lines that open by an angle a flow goes on where it is square
//! to the rivers and runs along the barriers among them. Between half-lines side
//! by side the rivers fix the flow, and recharge is drained if there is one; the
//! head is a parabola across them, level where it meets a barrier.

use num_complex::Complex64;

use crate::outline::{Boundary, Condition, Curve, Kind, Opening, Outline};
use crate::site::{Refusal, Site, Subject};

/// Half-lines count as parallel or square to within this angle, radians.
const PARALLEL_RAD: f64 = 1e-9;

/// Stages that differ by less count as the same, metres.
const SAME_STAGE_M: f64 = 1e-9;

/// The head far away, but for what the stages fix.
#[derive(Clone, Copy, Debug, Default)]
pub(super) struct Far {
    /// ∂h/∂x + i ∂h/∂y of its uniform part.
    pub flow: Complex64,
    /// Whether that is the plan's to state.
    pub is_free: bool,
    /// The unit number across the edges that drain recharge.
    pub drained_across: Option<Complex64>,
}

/// What cannot go on for ever.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) enum FarError {
    /// Recharge that no river within reach takes up.
    Undrained,
    /// Two rivers side by side of different stage, and endless barriers.
    UnlikeStages(Opening),
}

/// A half-line.
#[derive(Clone, Copy, Debug)]
struct Ray {
    /// Unit number to infinity.
    direction: Complex64,
    start: Complex64,
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
) -> Result<Far, FarError> {
    if boundary.is_bounded() {
        return Ok(Far::default());
    }
    let openings = boundary.openings();
    let rays: Vec<Ray> = (boundary.sides.iter())
        .filter_map(|side| ray(&side.curve, side.condition))
        .collect();
    if source_per_m != 0.0 {
        return drained(boundary, &openings, &rays, source_per_m);
    }
    check_stages(boundary, &openings, &rays)?;
    let flow = free_flow(boundary, &openings, &rays, stated);
    Ok(Far {
        flow: flow.unwrap_or_default(),
        is_free: flow.is_some(),
        drained_across: None,
    })
}

fn ray(curve: &Curve, condition: Condition) -> Option<Ray> {
    let (start, direction) = match *curve {
        Curve::RayIn { to, from_direction } => (to, from_direction),
        Curve::RayOut { from, direction } => (from, direction),
        Curve::Segment { .. } | Curve::Arc { .. } => return None,
    };
    Some(Ray {
        direction,
        start,
        kind: condition.kind(),
    })
}

fn kind_of(boundary: &Boundary, side: usize) -> Option<Kind> {
    boundary.sides.get(side).map(|side| side.condition.kind())
}

/// Whether two rivers run side by side: their stages alone fix the flow.
fn is_between_rivers(boundary: &Boundary, opening: &Opening) -> bool {
    let sides = [opening.out, opening.back];
    let is_river = |side| kind_of(boundary, side) == Some(Kind::FixedHead);
    opening.width_m.is_some() && sides.into_iter().all(is_river)
}

/// The part of a stated uniform flow that can go on far away; none where the
/// edges leave no flow free.
fn free_flow(
    boundary: &Boundary,
    openings: &[Opening],
    rays: &[Ray],
    stated: Complex64,
) -> Option<Complex64> {
    let Some(axis) = rays.first().map(Ray::axis) else {
        return Some(stated);
    };
    let is_across = |ray: &Ray| (axis.conj() * ray.axis()).im.abs() > PARALLEL_RAD;
    let is_fixed = |opening: &Opening| is_between_rivers(boundary, opening);
    if rays.iter().any(is_across) || openings.iter().any(is_fixed) {
        return None;
    }
    Some(axis * (axis.conj() * stated).re)
}

/// Beside endless barriers the flow between two rivers would not fade.
fn check_stages(boundary: &Boundary, openings: &[Opening], rays: &[Ray]) -> Result<(), FarError> {
    let stage_m = |side: usize| boundary.sides.get(side).map_or(0.0, |side| side.stage_m[0]);
    let is_unlike = |opening: &&Opening| {
        is_between_rivers(boundary, opening)
            && (stage_m(opening.out) - stage_m(opening.back)).abs() > SAME_STAGE_M
    };
    let has_barrier = rays.iter().any(|ray| ray.kind == Kind::NoFlow);
    match openings.iter().find(is_unlike) {
        Some(opening) if has_barrier => Err(FarError::UnlikeStages(*opening)),
        _ => Ok(()),
    }
}

/// Recharge between half-lines side by side, each pair with a river.
fn drained(
    boundary: &Boundary,
    openings: &[Opening],
    rays: &[Ray],
    source_per_m: f64,
) -> Result<Far, FarError> {
    let has_river = |opening: &Opening| {
        let sides = [opening.out, opening.back];
        let mut kinds = sides.into_iter().filter_map(|side| kind_of(boundary, side));
        opening.width_m.is_some() && kinds.any(|kind| kind == Kind::FixedHead)
    };
    let Some(along) = rays.first().map(|ray| ray.direction) else {
        return Err(FarError::Undrained);
    };
    let is_across = |ray: &Ray| (along.conj() * ray.direction).im.abs() > PARALLEL_RAD;
    if rays.iter().any(is_across) || !openings.iter().all(has_river) {
        return Err(FarError::Undrained);
    }
    let across = along * Complex64::I;
    let barriers = rays.iter().filter(|ray| ray.kind == Kind::NoFlow);
    let mut places = barriers.map(|ray| (across.conj() * ray.start).re);
    let crest = places.next();
    let is_elsewhere = |place: f64| (place - crest.unwrap_or(place)).abs() > 1e-6;
    if places.any(is_elsewhere) {
        return Err(FarError::Undrained);
    }
    check_stages(boundary, openings, rays)?;
    if crest.is_some() && openings.iter().any(|one| is_between_rivers(boundary, one)) {
        return Err(FarError::Undrained);
    }
    Ok(Far {
        flow: across * (source_per_m * crest.unwrap_or_default()),
        is_free: false,
        drained_across: Some(across),
    })
}

impl FarError {
    /// What the plan's author should know.
    pub fn refusal(&self, site: &Site, outline: &Outline, boundary: &Boundary) -> Refusal {
        match self {
            Self::Undrained => Refusal {
                subject: Subject::Aquifer(Some("recharge")),
                what: format!(
                    "the {} goes on to infinity and has a recharge of {} m/d",
                    outline.shape.name(),
                    site.aquifer.recharge.si()
                ),
                why: Some(
                    "far away, recharge can drain only between two parallel edges of which one \
                     is a river, and all that go on for ever must run that way"
                        .to_owned(),
                ),
                remedy: "close the aquifer with a river or a barrier, or leave out recharge"
                    .to_owned(),
                related: Vec::new(),
            },
            Self::UnlikeStages(opening) => {
                let side = |side: usize| boundary.sides.get(side);
                let edge = |number| side(number).map_or(0, |side| side.edge);
                let stage_m = |number| side(number).map_or(0.0, |side| side.stage_m[0]);
                Refusal {
                    subject: Subject::Edge(edge(opening.out), Some("stage")),
                    what: format!(
                        "two rivers run to infinity side by side with stages of {} m and {} m, \
                         and barriers go on to infinity elsewhere",
                        stage_m(opening.out),
                        stage_m(opening.back)
                    ),
                    why: Some(
                        "water would cross between the rivers all the way to infinity and press \
                         against the barriers without fading"
                            .to_owned(),
                    ),
                    remedy: "close the valley between the rivers with a barrier or a river, give \
                             both one stage, or end the barriers at another edge"
                        .to_owned(),
                    related: vec![(
                        Subject::Edge(edge(opening.back), None),
                        "the other river".to_owned(),
                    )],
                }
            }
        }
    }
}
