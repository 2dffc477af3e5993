//! Solves, measures what the solution misses, and refines until the error is
//! proven to be small enough.
//!
//! The error e of a solution is harmonic, so it is largest on the sides. On
//! head sides it is measured there: at most δ. On flux sides its slope is: at
//! most ε(p) on panel p, in the panel's own measure. On clogged sides the sum
//! ∂e/∂n + e/skin is; a constant δ outweighs it where it is at most δ/skin, so
//! it counts as head where the skin is thin for its panel and as slope elsewhere.
//! Let φ be harmonic, zero on head sides, with slope ω(p) ≥ ε(p) on flux sides
//! (on clogged sides slope and head together): then |e| ≤ δ + φ everywhere. φ is one more solution of
//! the same system; its own residual, δ′ in head and a share ε′ of ω in slope,
//! obeys the same rule, so that
//!
//! > |e| ≤ δ + (max φ̂ + δ′)/(1 − ε′).
//!
//! Residuals are measured between the nodes and beside the ends of each panel,
//! where those of a polynomial collocation are largest; [`BETWEEN_CHECKS`]
//! covers what they may rise to in between.

use rayon::prelude::*;

use super::mesh::{Mesh, Place, Reach};
use super::problem::{Posed, Problem};
use super::region::{Condition, Region};
use super::system::{Densities, System, asked_by};

/// Residuals between two checks exceed the larger of both at most by this: a
/// parabola through three checks of a Legendre polynomial stays within 1.3.
const BETWEEN_CHECKS: f64 = 1.5;

/// ω is at least this share of the largest ε.
const SMALLEST_OMEGA: f64 = 1e-4;

/// ω is lifted and φ solved for anew at most so often.
const MOST_LIFTS: usize = 3;

/// Share of the target that a panel's residual is to stay below.
const FIRST_AIM: f64 = 0.25;

/// Where all panels keep their aim and the bound is still too large, the aim is
/// lowered to no less than this share.
const LEAST_STEP: f64 = 1e-2;

/// Refinement ends after so many rounds.
const MOST_ROUNDS: usize = 14;

/// Most unknowns: 8 · 18,000² bytes are 2.6 GB.
const MOST_UNKNOWNS: usize = 18_000;

/// Several problems of one region, solved together.
pub struct Solution {
    pub(super) region: Region,
    pub(super) posed: Vec<Posed>,
    pub(super) system: System,
    pub(super) densities: Densities,
    /// Outward slope of the panels' potential at each node, for each problem.
    pub(super) node_slopes: Vec<f64>,
    bound_m: f64,
    hardest_side: Option<usize>,
    rounds: usize,
}

/// A solution on one mesh.
struct Attempt {
    system: System,
    densities: Densities,
    measure: Measure,
}

impl Attempt {
    fn on(region: &Region, posed: &[Posed], mesh: Mesh, target_m: f64) -> Self {
        let system = System::new(region, mesh);
        let densities = solve(region, posed, &system);
        let measure = measure(region, posed, &system, &densities, target_m);
        Self {
            system,
            densities,
            measure,
        }
    }

    /// What rounding adds to a value that is summed up from the panels, metres:
    /// each charge meets a logarithm of at most 64, good to a few ε.
    fn rounding_m(&self, posed: &[Posed]) -> f64 {
        let weights = self.system.mesh.rule.weights.iter().cycle();
        let nodes = self.densities.at_nodes.chunks(posed.len().max(1));
        let charges = nodes.zip(weights).map(|(densities, weight)| {
            let parts = densities.iter().zip(posed);
            let sum: f64 = parts.map(|(q, posed)| (q * posed.weight()).abs()).sum();
            weight * sum
        });
        64.0 * f64::EPSILON * charges.sum::<f64>()
    }

    /// The side with the panel that misses its aim by most.
    fn hardest_side(&self) -> Option<usize> {
        let excess = self.measure.excess(1.0);
        let panels = self.system.mesh.panels.iter().zip(excess);
        panels
            .max_by(|(_, one), (_, other)| one.total_cmp(other))
            .map(|(panel, _)| panel.side)
    }
}

/// How large the residuals of one mesh are.
struct Measure {
    /// For each panel the largest residual in head; zero off head sides.
    heads_m: Vec<f64>,
    /// For each panel the largest residual in slope; zero on head sides.
    slopes: Vec<f64>,
    /// The proven bound; infinite where φ is not resolved.
    bound_m: f64,
}

impl Solution {
    /// Solves problems together, on one mesh fine enough that the sum of their
    /// errors, each times the size of its weight, is at most `target_m` — or,
    /// where that takes more than the machine should give, as near as it came.
    /// The region must fix the head somewhere.
    pub fn new(region: Region, problems: Vec<Problem>, target_m: f64) -> Self {
        let poles: Vec<_> = problems
            .iter()
            .flat_map(|problem| problem.poles.iter().map(|(pole, _)| *pole))
            .collect();
        let posed: Vec<_> = problems
            .into_iter()
            .map(|problem| Posed::new(&region, problem))
            .collect();
        let mut best = Attempt::on(
            &region,
            &posed,
            Mesh::new(&region, &poles, order_for(&region)),
            target_m,
        );
        let mut latest: Option<Attempt> = None;
        let mut aim_m = FIRST_AIM * target_m;
        let mut rounds = 1;
        while best.measure.bound_m > target_m && rounds < MOST_ROUNDS {
            let from = latest.as_ref().unwrap_or(&best);
            let excess = from.measure.excess(aim_m);
            if excess.iter().all(|&excess| excess <= 1.0) {
                let missed = (target_m / from.measure.bound_m).max(LEAST_STEP);
                aim_m *= FIRST_AIM.min(0.5 * missed);
            }
            let finer = from
                .system
                .mesh
                .refined(&region, &from.measure.excess(aim_m));
            let is_stuck = finer.panels == from.system.mesh.panels;
            if is_stuck || finer.unknowns() > MOST_UNKNOWNS {
                break;
            }
            let next = Attempt::on(&region, &posed, finer, target_m);
            rounds += 1;
            if next.measure.bound_m <= best.measure.bound_m {
                best = next;
                latest = None;
            } else {
                latest = Some(next);
            }
        }
        let node_slopes = best.system.fields(&best.densities, best.system.nodes());
        Self {
            node_slopes: node_slopes.slopes,
            hardest_side: best.hardest_side(),
            bound_m: best.measure.bound_m + best.rounding_m(&posed),
            system: best.system,
            densities: best.densities,
            region,
            posed,
            rounds,
        }
    }

    /// The proven bound on the weighted sum of errors, anywhere in the region.
    pub fn bound_m(&self) -> f64 {
        self.bound_m
    }

    /// The side near which the error is largest.
    pub fn hardest_side(&self) -> Option<usize> {
        self.hardest_side
    }

    /// How many meshes were solved on.
    pub fn rounds(&self) -> usize {
        self.rounds
    }

    /// Number of unknown densities.
    pub fn unknowns(&self) -> usize {
        self.system.mesh.unknowns()
    }

    /// How many problems were solved.
    pub fn problems(&self) -> usize {
        self.posed.len()
    }
}

/// Few nodes where there are many sides, each with little to tell.
fn order_for(region: &Region) -> usize {
    match region.sides().len() {
        0..=60 => 10,
        61..=250 => 8,
        _ => 6,
    }
}

fn solve(region: &Region, posed: &[Posed], system: &System) -> Densities {
    let charges: Vec<f64> = posed.iter().map(|problem| -problem.charge()).collect();
    system.solve(&asked_by(region, posed), &charges)
}

/// The residuals of a solution, and the bound that they prove.
fn measure(
    region: &Region,
    posed: &[Posed],
    system: &System,
    densities: &Densities,
    target_m: f64,
) -> Measure {
    let checks = system.mesh.checks(region);
    let asked = asked_by(region, posed);
    let fields = system.fields(densities, &checks);
    let residuals = fields.residuals(&checks, posed.len(), &asked);
    let weights: Vec<f64> = posed.iter().map(|problem| problem.weight().abs()).collect();
    let sums = residuals.chunks(posed.len()).map(|residuals| {
        let parts = residuals.iter().zip(&weights);
        parts
            .map(|(residual, weight)| residual.abs() * weight)
            .sum()
    });
    let sums: Vec<f64> = sums.collect();
    let (heads_m, slopes) = largest(system, &checks, &sums);
    let head_m = highest(heads_m.iter().copied());
    let slope = highest(slopes.iter().copied());
    // φ is not worth solving for while the residuals alone exceed the target.
    let bound_m = if slope == 0.0 {
        head_m
    } else if head_m.max(slope) > target_m {
        f64::INFINITY
    } else {
        head_m + comparison(region, system, &checks, &slopes)
    };
    Measure {
        heads_m,
        slopes,
        bound_m,
    }
}

/// For each panel its largest residual, in head and in slope.
fn largest(system: &System, checks: &[Place], sums: &[f64]) -> (Vec<f64>, Vec<f64>) {
    let a_panel = system.mesh.rule.checks.len();
    let panels = checks.chunks(a_panel).zip(sums.chunks(a_panel));
    let largest = |places: &[Place], sums: &[f64], counts_head: bool| {
        let parts = places.iter().zip(sums);
        let counted = parts.filter(|(place, _)| place.counts_head() == counts_head);
        BETWEEN_CHECKS * highest(counted.map(|(_, sum)| *sum))
    };
    panels
        .map(|(places, sums)| (largest(places, sums, true), largest(places, sums, false)))
        .unzip()
}

/// The largest of some values and zero; infinite where one is not a number, so
/// that nothing undefined passes for small.
fn highest(values: impl Iterator<Item = f64>) -> f64 {
    values.fold(0.0, |highest, value| {
        if value.is_nan() {
            f64::INFINITY
        } else {
            highest.max(value)
        }
    })
}

/// The bound on φ whose slopes exceed the given ones.
///
/// Where φ misses ω by much, ω was too rough for the mesh; it is lifted there.
fn comparison(region: &Region, system: &System, checks: &[Place], slopes: &[f64]) -> f64 {
    if !region.has_head() {
        return f64::INFINITY;
    }
    let mut omega = smoothed(&system.mesh.reaches(), slopes);
    for _ in 0..=MOST_LIFTS {
        let (highest_m, missed) = solve_comparison(system, checks, &omega);
        let shares = missed.iter().zip(&omega);
        let share = highest(shares.map(|(missed, omega)| missed / omega));
        if share <= 0.7 {
            return highest_m / (1.0 - share);
        }
        for (omega, missed) in omega.iter_mut().zip(missed) {
            *omega = omega.max(4.0 * missed);
        }
    }
    f64::INFINITY
}

/// The largest value of φ, its residual in head included, and by how much its
/// slope misses ω on each panel.
fn solve_comparison(
    system: &System,
    checks: &[Place],
    omega: &[f64],
) -> (f64, Vec<f64>) {
    let asked = |_: usize, place: &Place| match place.condition {
        Condition::Head => 0.0,
        Condition::Flux | Condition::Clogged { .. } => {
            omega.get(place.panel).copied().unwrap_or_default()
        }
    };
    let densities = system.solve(&asked, &[0.0]);
    let fields = system.fields(&densities, checks);
    let residuals = fields.residuals(checks, 1, &asked);
    let residuals: Vec<f64> = residuals.iter().map(|residual| residual.abs()).collect();
    let (heads_m, missed) = largest(system, checks, &residuals);
    let highest_m = highest(fields.values.iter().copied()) + highest(heads_m.iter().copied());
    (highest_m, missed)
}

/// ω: no smaller than the given slopes anywhere, nor than what the water that
/// they let through on other panels makes of slope there, so that φ is as
/// smooth on every panel as ω asks for.
fn smoothed(reaches: &[Reach], slopes: &[f64]) -> Vec<f64> {
    let floor = SMALLEST_OMEGA * highest(slopes.iter().copied());
    let strong: Vec<_> = reaches
        .iter()
        .zip(slopes)
        .filter(|(_, slope)| **slope > floor)
        .collect();
    let omega = reaches.par_iter().zip(slopes).map(|(reach, slope)| {
        let seen = strong.iter().map(|(other, slope)| *slope * reach.sees(other));
        seen.fold(slope.max(floor), f64::max)
    });
    omega.collect()
}

impl Measure {
    /// For each panel by what factor it misses its aim.
    fn excess(&self, aim_m: f64) -> Vec<f64> {
        let of_slopes = self.slopes.iter().filter(|slope| **slope > 0.0).count();
        // φ adds up the slopes of all panels, each a fraction of a metre a metre.
        let slope_aim_m = aim_m * (4.0 / of_slopes.max(1) as f64).min(0.5);
        let panels = self.heads_m.iter().zip(&self.slopes);
        panels
            .map(|(head_m, slope)| (head_m / aim_m).max(slope / slope_aim_m))
            .collect()
    }
}
