//! Why the head before pumping contradicts the edges, with the numbers.

use thiserror::Error;

use super::stated::azimuth_deg;
use crate::site::{Point, Refusal, Subject, Vector};

/// A contradiction between `[ambient]` and the edges, or a gap in it.
#[derive(Clone, Debug, Error)]
pub(super) enum AmbientError {
    #[error("no river fixes the head before pumping, and the plan has no [ambient]")]
    Missing,
    #[error("no river fixes the head before pumping, and [ambient] gives no `head`")]
    NoLevel,
    #[error("[ambient] gives a head but not where it holds, and the head is not level")]
    NoPlace,
    #[error("[ambient] gives the gradient {gradient} but not where it falls toward")]
    NoDirection { gradient: f64 },
    #[error("the ambient flow crosses a barrier: {}", both(*stated, *free))]
    AcrossBarrier { stated: Vector, free: Vector },
    #[error("the ambient gradient contradicts the edges: {}", both(*stated, *fixed))]
    GradientDiffers { stated: Vector, fixed: Vector },
    #[error(
        "the ambient head is {stated_m:.3} m, but {cause} make it {fixed_m:.3} m there \
         ({:+.3} m)", fixed_m - stated_m
    )]
    HeadDiffers {
        stated_m: f64,
        fixed_m: f64,
        /// What fixes it.
        cause: &'static str,
    },
    #[error("[ambient] is given at ({:.1}, {:.1}) m from the site's origin, outside the aquifer", at.x, at.y)]
    Outside { at: Point },
}

/// Two gradients in words.
fn both(stated: Vector, possible: Vector) -> String {
    let possible = if possible.norm() < 1e-12 {
        "the edges allow no uniform flow there".to_owned()
    } else {
        format!(
            "the edges allow {:.6} toward {:.1}°",
            possible.norm(),
            azimuth_deg(-possible)
        )
    };
    format!(
        "the plan says {:.6} toward {:.1}°, {possible}",
        stated.norm(),
        azimuth_deg(-stated)
    )
}

impl From<AmbientError> for Refusal {
    fn from(error: AmbientError) -> Self {
        let (key, why, remedy) = match &error {
            AmbientError::Missing => (
                None,
                "heads are elevations, and something must say how high the water stands",
                "add [ambient] with `head`, or a river".to_owned(),
            ),
            AmbientError::NoLevel => (
                None,
                "heads are elevations, and something must say how high the water stands",
                "add `head` to [ambient]".to_owned(),
            ),
            AmbientError::NoPlace => (
                Some("head"),
                "where the head slopes, a level means nothing without its place",
                "add `at = [x, y]` to [ambient]".to_owned(),
            ),
            AmbientError::NoDirection { .. } => (
                Some("gradient"),
                "a slope needs a direction",
                "add `toward`, degrees clockwise from grid north".to_owned(),
            ),
            AmbientError::AcrossBarrier { free, .. } => (
                Some("toward"),
                "no water crosses a barrier, so the head cannot slope across it",
                use_instead(*free),
            ),
            AmbientError::GradientDiffers { fixed, .. } => (
                Some("gradient"),
                "a river of constant stage is level along its course, and stages fix the slope \
                 between rivers",
                use_instead(*fixed),
            ),
            AmbientError::HeadDiffers { fixed_m, .. } => (
                Some("head"),
                "where a river fixes the level, [ambient] may only repeat it",
                format!("leave `head` out, write {fixed_m:.3} m, or correct the stage or gradient"),
            ),
            AmbientError::Outside { .. } => (
                Some("at"),
                "the ambient head is wanted in the aquifer that holds the wells",
                "give a place on the wells' side of the edges, or leave `head` and `at` out"
                    .to_owned(),
            ),
        };
        Self {
            subject: Subject::Ambient(key),
            what: error.to_string(),
            why: Some(why.to_owned()),
            remedy,
            related: Vec::new(),
        }
    }
}

fn use_instead(possible: Vector) -> String {
    if possible.norm() < 1e-12 {
        "leave `gradient` and `toward` out, or correct the edges".to_owned()
    } else {
        format!(
            "write gradient = {:.6} and toward = {:.1}, or correct the edges",
            possible.norm(),
            azimuth_deg(-possible)
        )
    }
}
