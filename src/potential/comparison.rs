//! A head φ that exceeds what given residuals of slope can make of one.
//!
//! Let φ be harmonic, zero on head sides, with slope ω ≥ ε on flux sides, ε the
//! size of the residual there (on clogged sides slope and head together): then an
//! error with that residual is at most φ everywhere. φ is one more solution of the
//! same system; its own residual, δ′ in head and a share ε′ of ω in slope, obeys
//! the same rule, so that
//!
//! > φ ≤ (max φ̂ + δ′)/(1 − ε′).
//!
//! ω is a number for each panel, or a number times [`Span::profile`] for each side
//! of few functions, so that the system can meet it.
//!
//! [`Span::profile`]: super::span::Span::profile

use rayon::prelude::*;

use super::kernel::Wanted;
use super::panel::{Place, Reach};
use super::region::{Condition, Region};
use super::solve::{self, BETWEEN_CHECKS};
use super::system::System;

/// ω is at least this share of the largest ε.
const SMALLEST: f64 = 1e-4;

/// ω is lifted and φ solved for anew at most so often.
const MOST_LIFTS: usize = 5;

/// Where φ misses a larger share of ω, ω was too rough and is lifted.
const LARGEST_SHARE: f64 = 0.4;

/// A panel, or a side of few functions: what has one number of ω.
struct Part {
    reach: Reach,
    /// Half of what it lets through where ω is its profile.
    size: f64,
}

/// The parts of a mesh, with the checks on it.
pub(super) struct Parts<'a> {
    system: &'a System,
    checks: &'a [Place],
    /// For each check the profile of its part there.
    profiles: Vec<f64>,
    parts: Vec<Part>,
    /// For each panel its part.
    of_panels: Vec<usize>,
}

impl<'a> Parts<'a> {
    /// The parts of a system's mesh.
    pub fn of(system: &'a System, checks: &'a [Place]) -> Self {
        let mesh = &system.mesh;
        let (mut parts, mut of_panels) = (Vec::new(), Vec::new());
        for stretch in &mesh.stretches {
            if stretch.span.is_some() {
                of_panels.extend(stretch.panels.iter().map(|_| parts.len()));
                parts.push(Part {
                    reach: Reach::of_all(&stretch.panels),
                    size: 0.0,
                });
            } else {
                for panel in &stretch.panels {
                    of_panels.push(parts.len());
                    parts.push(Part {
                        reach: Reach::of(panel),
                        size: 0.0,
                    });
                }
            }
        }
        let mut all = Self {
            system,
            checks,
            profiles: checks.iter().map(|place| mesh.profile(place)).collect(),
            parts,
            of_panels,
        };
        for (place, weight) in system.nodes().iter().zip(mesh.rule.weights.iter().cycle()) {
            let part = all.of_place(place);
            if let Some(part) = all.parts.get_mut(part) {
                part.size += 0.5 * weight * mesh.profile(place);
            }
        }
        all
    }

    fn of_place(&self, place: &Place) -> usize {
        self.of_panels.get(place.panel).copied().unwrap_or_default()
    }

    /// For each part the largest residual of slope, in its profile; infinite
    /// where one is not a number.
    pub fn largest(&self, residuals: &[f64]) -> Vec<f64> {
        let mut largest = vec![0.0; self.parts.len()];
        for ((place, profile), residual) in self.checks.iter().zip(&self.profiles).zip(residuals) {
            if place.counts_head() {
                continue;
            }
            if let Some(slot) = largest.get_mut(self.of_place(place)) {
                let seen = BETWEEN_CHECKS * residual.abs() / profile;
                *slot = solve::highest([*slot, seen].into_iter());
            }
        }
        largest
    }

    /// For each panel the water that given slopes let through its part, in halves.
    pub fn amounts(&self, slopes: &[f64]) -> Vec<f64> {
        let of_part = |part: &usize| {
            let part = self.parts.get(*part).zip(slopes.get(*part));
            part.map_or(0.0, |(part, slope)| part.size * slope)
        };
        self.of_panels.iter().map(of_part).collect()
    }

    /// The residual of each panel as a share of the largest of its part.
    pub fn shares(&self, of_panels: &[f64]) -> Vec<f64> {
        let mut largest = vec![f64::MIN_POSITIVE; self.parts.len()];
        for (part, residual) in self.of_panels.iter().zip(of_panels) {
            if let Some(slot) = largest.get_mut(*part) {
                *slot = residual.max(*slot);
            }
        }
        let share = |(part, residual): (&usize, &f64)| {
            let share = residual / largest.get(*part).copied().unwrap_or(f64::INFINITY);
            // Infinite over infinite: no smaller than any other.
            if share.is_nan() { 1.0 } else { share }
        };
        self.of_panels.iter().zip(of_panels).map(share).collect()
    }

    /// What given slopes let through each part on a flux side, in halves, the
    /// least first.
    pub fn sorted_amounts(&self, slopes: &[f64]) -> Vec<f64> {
        let amounts = self.parts.iter().zip(slopes);
        let amounts = amounts.map(|(part, slope)| part.size * slope);
        let mut amounts: Vec<f64> = amounts.filter(|amount| *amount > 0.0).collect();
        amounts.sort_by(f64::total_cmp);
        amounts
    }

    /// ω: no smaller than the given slopes anywhere, nor than what the water that
    /// they let through elsewhere makes of slope there, so that φ is as smooth on
    /// every part as ω asks for.
    fn smoothed(&self, slopes: &[f64]) -> Vec<f64> {
        let amounts = self.parts.iter().zip(slopes);
        let amounts: Vec<f64> = amounts.map(|(part, slope)| part.size * slope).collect();
        let floor = SMALLEST * solve::highest(amounts.iter().copied());
        let strong: Vec<_> = self.parts.iter().zip(&amounts).collect();
        let strong: Vec<_> = strong.into_iter().filter(|(_, a)| **a > floor).collect();
        let omega = self.parts.par_iter().zip(slopes).map(|(part, slope)| {
            let seen = strong
                .iter()
                .map(|(other, a)| *a * part.reach.sees(&other.reach));
            slope.max(seen.fold(floor, f64::max) / part.size)
        });
        omega.collect()
    }

    /// The largest φ whose slopes exceed the given ones.
    pub fn highest(&self, region: &Region, slopes: &[f64]) -> f64 {
        if !region.has_head() {
            return f64::INFINITY;
        }
        let mut omega = self.smoothed(slopes);
        for _ in 0..=MOST_LIFTS {
            let asked = |_: usize, place: &Place| match place.condition {
                Condition::Head => 0.0,
                Condition::Flux | Condition::Clogged { .. } => {
                    let omega = omega.get(self.of_place(place)).copied();
                    omega.unwrap_or_default() * self.system.mesh.profile(place)
                }
            };
            let (highest_m, missed) = solve(self.system, self.checks, &asked);
            let missed = self.largest(&missed);
            let shares = missed.iter().zip(&omega);
            let share = solve::highest(shares.map(|(missed, omega)| missed / omega));
            if share <= LARGEST_SHARE {
                return highest_m / (1.0 - share);
            }
            for (omega, missed) in omega.iter_mut().zip(missed) {
                *omega = omega.max(4.0 * missed);
            }
        }
        f64::INFINITY
    }
}

/// The largest value of φ, its residual in head included, and its residuals.
fn solve(
    system: &System,
    checks: &[Place],
    asked: &(dyn Fn(usize, &Place) -> f64 + Sync),
) -> (f64, Vec<f64>) {
    let densities = system.solve(asked, &[0.0]);
    let fields = system.fields(&densities, checks, |_| Wanted::ALL);
    let residuals = fields.residuals(checks, 1, asked);
    let of_heads = checks.iter().zip(&residuals);
    let of_heads = of_heads.filter(|(place, _)| place.counts_head());
    let missed_m = solve::highest(of_heads.map(|(_, residual)| residual.abs()));
    let highest_m = solve::highest(fields.values.iter().copied());
    (highest_m + BETWEEN_CHECKS * missed_m, residuals)
}
