//! Solves, measures what the solution misses, and refines until the error is
//! proven to be small enough.
//!
//! The error e of a solution is harmonic, so it is largest on the sides. On
//! head sides it is measured there: at most δ. On flux sides its slope is: at
//! most ε(p) on panel p, in the panel's own measure. On clogged sides the sum
//! ∂e/∂n + e/skin is; a constant δ outweighs it where it is at most δ/skin, so
//! it counts as head where the skin is thin for its panel and as slope elsewhere.
//! Let φ be harmonic, zero on head sides, with slope ω(p) ≥ ε(p) on flux sides
//! (on clogged sides slope and head together; zero where they count as head): then |e| ≤ δ + φ everywhere. φ is one more solution of
//! the same system; its own residual, δ′ in head and a share ε′ of ω in slope,
//! obeys the same rule, so that
//!
//!     |e| ≤ δ + (max φ̂ + δ′)/(1 − ε′).
//!
//! Residuals are measured between the nodes and beside the ends of each panel,
//! where those of a polynomial collocation are largest; [`BETWEEN_CHECKS`]
//! covers what they may rise to in between.

use super::mesh::{Mesh, Place};
use super::problem::{Posed, Problem};
use super::region::Region;
use super::system::{Densities, System, asked_by};

/// Residuals between two checks exceed the larger of both at most by this: a
/// parabola through three checks of a Legendre polynomial stays within 1.3.
const BETWEEN_CHECKS: f64 = 1.5;

/// ω is at least this share of the largest ε, so that φ is resolved anywhere.
const SMALLEST_OMEGA: f64 = 1e-2;

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
    rounds: usize,
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
    /// The region must fix the head somewhere. `order` nodes a panel.
    pub fn new(region: Region, problems: Vec<Problem>, target_m: f64) -> Self {
        let order = order_for(&region);
        let poles: Vec<_> = problems
            .iter()
            .flat_map(|problem| problem.poles.iter().map(|(pole, _)| *pole))
            .collect();
        let posed: Vec<_> = problems
            .into_iter()
            .map(|problem| Posed::new(&region, problem))
            .collect();
        let mut mesh = Mesh::new(&region, &poles, order);
        let mut best: Option<(System, Densities, f64)> = None;
        let mut aim_m = 0.25 * target_m;
        let mut rounds = 0;
        loop {
            rounds += 1;
            let system = System::new(&region, mesh);
            let densities = solve(&region, &posed, &system);
            let measure = measure(&region, &posed, &system, &densities, target_m);
            let bound_m = measure.bound_m;
            let excess = measure.excess(aim_m);
            let is_idle = excess.iter().all(|&excess| excess <= 1.0);
            let finer = system.mesh.refined(&region, &excess);
            let is_stuck = !is_idle && finer.panels == system.mesh.panels;
            if best.as_ref().is_none_or(|best| bound_m <= best.2) {
                best = Some((system, densities, bound_m));
                if bound_m <= target_m {
                    break;
                }
            }
            if rounds >= MOST_ROUNDS || is_stuck || finer.unknowns() > MOST_UNKNOWNS {
                break;
            }
            if is_idle {
                aim_m *= 0.25;
            }
            mesh = finer;
        }
        let (system, densities, bound_m) = match best {
            Some(best) => best,
            None => {
                let system = System::new(&region, Mesh::new(&region, &poles, order));
                let densities = solve(&region, &posed, &system);
                (system, densities, f64::INFINITY)
            }
        };
        let node_slopes = system.fields(&densities, system.nodes()).slopes;
        Self {
            region,
            posed,
            node_slopes,
            system,
            densities,
            bound_m,
            rounds,
        }
    }

    /// The proven bound on the weighted sum of errors, anywhere in the region.
    pub fn bound_m(&self) -> f64 {
        self.bound_m
    }

    /// How often the mesh was made finer, the first mesh counted.
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
        parts.map(|(residual, weight)| residual.abs() * weight).sum()
    });
    let sums: Vec<f64> = sums.collect();
    let (heads_m, slopes) = largest(system, &checks, &sums);
    let head_m = heads_m.iter().copied().fold(0.0, f64::max);
    let slope = slopes.iter().copied().fold(0.0, f64::max);
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
    panels
        .map(|(places, sums)| {
            let largest = BETWEEN_CHECKS * sums.iter().copied().fold(0.0, f64::max);
            if places.first().is_some_and(|place| place.counts_head) {
                (largest, 0.0)
            } else {
                (0.0, largest)
            }
        })
        .unzip()
}

/// The bound on φ whose slopes exceed the given ones.
fn comparison(region: &Region, system: &System, checks: &[Place], slopes: &[f64]) -> f64 {
    let floor = SMALLEST_OMEGA * slopes.iter().copied().fold(0.0, f64::max);
    let omega: Vec<f64> = slopes.iter().map(|slope| slope.max(floor)).collect();
    let asked = |_: usize, place: &Place| {
        if place.counts_head {
            0.0
        } else {
            omega.get(place.panel).copied().unwrap_or(floor)
        }
    };
    let densities = system.solve(&asked, &[0.0]);
    let fields = system.fields(&densities, checks);
    let residuals = fields.residuals(checks, 1, &asked);
    let highest = fields.values.iter().copied().fold(0.0, f64::max);
    let (heads_m, slopes) = largest(
        system,
        checks,
        &residuals.iter().map(|residual| residual.abs()).collect::<Vec<_>>(),
    );
    let head_m = heads_m.iter().copied().fold(0.0, f64::max);
    let shares = slopes.iter().zip(&omega).map(|(slope, omega)| slope / omega);
    let share = shares.fold(0.0, f64::max);
    if share < 1.0 && region.has_head() {
        (highest + head_m) / (1.0 - share)
    } else {
        f64::INFINITY
    }
}

impl Measure {
    /// For each panel by what factor it misses its aim.
    fn excess(&self, aim_m: f64) -> Vec<f64> {
        let of_slopes = self.slopes.iter().filter(|slope| **slope > 0.0).count();
        // A panel's slope residual raises the head by about twice itself, and
        // those of many panels of random sign add up as their root.
        let slope_aim_m = aim_m / (2.0 * (of_slopes.max(1) as f64).sqrt());
        let panels = self.heads_m.iter().zip(&self.slopes);
        panels
            .map(|(head_m, slope)| (head_m / aim_m).max(slope / slope_aim_m))
            .collect()
    }
}
