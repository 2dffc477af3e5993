//! What the plan states of the head before pumping, against what the edges fix: a
//! contradiction is refused with both numbers, and what they leave open is taken.

use super::ambient::AmbientHead;
use super::ambient_error::AmbientError;
use crate::green::Green;
use crate::outline::Outline;
use crate::site::{Ambient, Point, Site, Vector, direction_of_azimuth};

/// A stated head may differ from the one that the rivers fix by this much.
const HEAD_TOLERANCE_M: f64 = 0.01;

/// A stated gradient may differ from the one that the edges fix by this share
/// of itself: one degree of azimuth, as azimuths are read off maps.
const GRADIENT_TOLERANCE: f64 = 0.0175;

/// Gradients below this are taken for none: a centimetre in ten kilometres.
const NO_GRADIENT: f64 = 1e-6;

/// ∇h of the plan's `[ambient]`, in the site's frame.
pub(super) fn stated_gradient(site: &Site) -> Result<Vector, Vec<AmbientError>> {
    match &site.ambient {
        Some(ambient) if ambient.gradient > 0.0 => match ambient.toward_deg {
            Some(azimuth) => Ok(-ambient.gradient * direction_of_azimuth(azimuth)),
            None => Err(vec![AmbientError::NoDirection {
                gradient: ambient.gradient,
            }]),
        },
        _ => Ok(Vector::zeros()),
    }
}

/// Without a river `[ambient]` fixes the level.
pub(super) fn fix_level(
    head: &mut AmbientHead,
    ambient: &Ambient,
    outline: &Outline,
    stated: Vector,
    notes: &mut Vec<String>,
) -> Result<(), Vec<AmbientError>> {
    let mut faults = Vec::new();
    let free = outline.frame.gradient_to_site(head.slope);
    let off = (stated - free).norm();
    if off > GRADIENT_TOLERANCE * stated.norm() && stated.norm() > NO_GRADIENT {
        faults.push(AmbientError::AcrossBarrier { stated, free });
    } else if off > 1e-9 * stated.norm() {
        notes.push(straightened(stated, free));
    }
    match (ambient.head, ambient.at) {
        (None, _) => faults.push(AmbientError::NoLevel),
        (Some(level), Some(at)) => {
            let linear = head.slope.conj() * outline.frame.to_canonical(at);
            head.level_m = level.si() - linear.re;
        }
        (Some(level), None) if head.slope.norm() == 0.0 => head.level_m = level.si(),
        (Some(_), None) => faults.push(AmbientError::NoPlace),
    }
    if faults.is_empty() {
        Ok(())
    } else {
        Err(faults)
    }
}

fn straightened(stated: Vector, used: Vector) -> String {
    format!(
        "The ambient flow is taken toward azimuth {:.2}° with gradient {:.6}, as the edges need; \
         [ambient] says {:.2}° and {:.6}.",
        azimuth_deg(-used),
        used.norm(),
        azimuth_deg(-stated),
        stated.norm()
    )
}

/// Azimuth of a direction, 0° to 360° clockwise from grid north.
pub(super) fn azimuth_deg(direction: Vector) -> f64 {
    direction
        .x
        .atan2(direction.y)
        .to_degrees()
        .rem_euclid(360.0)
}

/// What the plan states against what the edges fix.
pub(super) struct Comparison<'a> {
    pub site: &'a Site,
    pub outline: &'a Outline,
    pub green: &'a dyn Green,
    pub head: &'a AmbientHead,
}

impl Comparison<'_> {
    /// Refuses a level or gradient that the edges contradict, with both numbers.
    pub fn check(
        &self,
        ambient: &Ambient,
        stated: Vector,
        notes: &mut Vec<String>,
    ) -> Result<(), Vec<AmbientError>> {
        let place = match ambient.at {
            Some(at) if self.outline.holds(at) => at,
            Some(at) => return self.outside(at, notes),
            None => self.middle_of_wells(),
        };
        let z = self.outline.frame.to_canonical(place);
        let mut faults = Vec::new();
        if let Some(level) = ambient.head {
            let fixed_m = self.head.head_m(z, self.green, &self.outline.shape);
            if ambient.at.is_none() && !self.is_level() {
                faults.push(AmbientError::NoPlace);
            } else if (level.si() - fixed_m).abs() > HEAD_TOLERANCE_M {
                faults.push(AmbientError::HeadDiffers {
                    stated_m: level.si(),
                    fixed_m,
                    cause: match self.head.recharge {
                        Some(_) => "the rivers and the recharge",
                        None => "the rivers",
                    },
                });
            }
        }
        if stated.norm() > NO_GRADIENT {
            let step_m = 1e-3 * self.outline.distance_to_edge_m(place);
            let gradient = match self.head.far_flow() {
                Some(flow) => flow,
                None => self.head.gradient(z, self.green, step_m),
            };
            let fixed = self.outline.frame.gradient_to_site(gradient);
            let off = (stated - fixed).norm();
            if off > GRADIENT_TOLERANCE * stated.norm() {
                faults.push(AmbientError::GradientDiffers { stated, fixed });
            } else if off > 1e-9 * stated.norm() {
                notes.push(straightened(stated, fixed));
            }
        }
        if faults.is_empty() {
            Ok(())
        } else {
            Err(faults)
        }
    }

    /// With several aquifers `at` lies in one of them and says nothing of the
    /// others.
    fn outside(&self, at: Point, notes: &mut Vec<String>) -> Result<(), Vec<AmbientError>> {
        if self.outline.wells.len() == self.site.wells.len() {
            return Err(vec![AmbientError::Outside { at }]);
        }
        notes.push(
            "[ambient] is given at a place in another aquifer; here the rivers alone fix the head."
                .to_owned(),
        );
        Ok(())
    }

    fn is_level(&self) -> bool {
        let head = self.head;
        head.slope.norm() == 0.0
            && head.per_radian_m == 0.0
            && head.measured.is_empty()
            && head.solved.is_none()
            && head.recharge.is_none()
    }

    fn middle_of_wells(&self) -> Point {
        let places = self
            .outline
            .wells
            .iter()
            .filter_map(|&well| self.site.wells.get(well));
        let (sum, count) = places.fold((Vector::zeros(), 0.0), |(sum, count), well| {
            (sum + well.at.coords, count + 1.0)
        });
        Point::from(sum / f64::max(count, 1.0))
    }
}
