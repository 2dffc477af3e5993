//! Aquifers without a closed form: what the general solver is asked for.

mod far;

use std::sync::Arc;

use num_complex::Complex64;

use super::{FieldWell, steady};
use crate::green::{Before, General, WeightedPole};
use crate::outline::{Kind, Outline};
use crate::site::{Refusal, Site, Subject};

/// The solver's share of the head error that the plan allows; the rest is for
/// rounding.
const SHARE_OF_ERROR: f64 = 0.9;

/// The solution of an aquifer without a closed form.
#[derive(Clone)]
pub(super) struct Solved {
    /// Its Green's function and its head before pumping.
    pub general: Arc<General>,
    /// ∂h/∂x + i ∂h/∂y far away, where the edges leave it free.
    pub far_flow: Option<Complex64>,
}

impl Solved {
    /// The edge near which the error is largest.
    pub fn hardest_edge(&self, outline: &Outline) -> Option<usize> {
        let side = self.general.hardest_side()?;
        let boundary = outline.boundary.as_ref()?;
        boundary.sides.get(side).map(|side| side.edge)
    }
}

impl std::fmt::Debug for Solved {
    fn fmt(&self, formatter: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        formatter
            .debug_struct("Solved")
            .field("unknowns", &self.general.unknowns())
            .field("far_flow", &self.far_flow)
            .finish()
    }
}

/// Solves an outline with a boundary; none for outlines in closed form.
///
/// `stated` is the gradient of `[ambient]` in the canonical frame.
///
/// # Errors
/// Where barriers alone bound the aquifer.
pub(super) fn solve(
    site: &Site,
    outline: &Outline,
    wells: &[FieldWell],
    stated: Complex64,
) -> Result<Option<Solved>, Refusal> {
    let Some(boundary) = &outline.boundary else {
        return Ok(None);
    };
    if !boundary.kinds().contains(&Kind::FixedHead) {
        return Err(without_river(outline));
    }
    let transmissivity_m2_d = site.aquifer.transmissivity.si();
    let weighted = |well: &FieldWell| WeightedPole {
        at: well.pole,
        strength_m: well.pumping_m3_d / transmissivity_m2_d,
    };
    let weighted: Vec<_> = wells.iter().map(weighted).collect();
    let source_per_m = site.aquifer.recharge.si() / transmissivity_m2_d;
    let far = far::of(boundary, stated, source_per_m)
        .map_err(|undrained| undrained.refusal(site, outline))?;
    let before = Before {
        flow: far.flow,
        source_per_m,
    };
    let target_m = SHARE_OF_ERROR * site.head_tolerance.si();
    let general = General::new(boundary, &weighted, before, target_m);
    Ok(Some(Solved {
        general: Arc::new(general),
        far_flow: far.is_free.then_some(far.flow),
    }))
}

fn without_river(outline: &Outline) -> Refusal {
    Refusal {
        subject: Subject::Aquifer(None),
        what: "barriers alone bound the aquifer, and it is no box".to_owned(),
        why: Some(
            "without a river the general solver can prove no bound on its error: nothing holds \
             the head anywhere"
                .to_owned(),
        ),
        remedy: "give the aquifer a river, or simplify the barriers to a box".to_owned(),
        related: steady::edges_of(outline),
    }
}
