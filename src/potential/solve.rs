//! Solves, measures what the solution misses, and refines until the error is
//! proven to be small enough.
//!
//! The error e of a solution is harmonic, so it is largest on the sides. On
//! head sides it is measured there: at most δ. On flux sides its slope is: at
//! most ε(p) on panel p, in the panel's own measure. On clogged sides the sum
//! ∂e/∂n + e/skin is; a constant δ outweighs it where it is at most δ/skin, so
//! it counts as head where the skin is thin for its panel and as slope elsewhere.
//! [`comparison`] turns the slopes into a head that exceeds what they make of one:
//! |e| ≤ δ + φ everywhere.
//!
//! Residuals are measured between the nodes and beside the ends of each panel,
//! where those of a polynomial collocation are largest; [`BETWEEN_CHECKS`]
//! covers what they may rise to in between.

use super::comparison::Parts;
use super::kernel::Wanted;
use super::mesh::Mesh;
use super::panel::Place;
use super::problem::{Posed, Problem};
use super::region::Region;
use super::system::{Densities, System, asked_by};

/// Residuals between two checks exceed the larger of both at most by this: a
/// parabola through three checks of a Legendre polynomial stays within 1.3. Sides of
/// few functions have fewer checks on each panel, but more than twice as many as
/// unknowns.
pub(super) const BETWEEN_CHECKS: f64 = 1.5;

/// Share of the target that a panel's residual is to stay below.
const FIRST_AIM: f64 = 0.25;

/// Parts that together let less than this share of the water through are not
/// refined before the others.
const SMALL_SHARE: f64 = 0.02;

/// Where the bound is known, the parts that are not refined may make up this share
/// of the target.
const REST_SHARE: f64 = 0.4;

/// Where all panels keep their aim and the bound is still too large, the aim is
/// lowered to no less than this share of the target.
const LEAST_AIM: f64 = 1e-4;

/// Nodes of a panel.
const ORDER: usize = 10;

/// Refinement ends after so many rounds.
const MOST_ROUNDS: usize = 24;

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
        let mut system = System::new(region, mesh);
        let densities = solve(region, posed, &system);
        let measure = measure(region, posed, &system, &densities, target_m);
        system.forget_factors();
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

    /// The side that misses most, in head or in the water that it lets through.
    fn hardest_side(&self) -> Option<usize> {
        let measure = &self.measure;
        let misses = measure.heads_m.iter().zip(&measure.amounts_m);
        let misses = misses.map(|(head_m, amount_m)| head_m.max(*amount_m));
        let panels = self.system.mesh.panels().zip(misses);
        panels
            .max_by(|(_, one), (_, other)| one.total_cmp(other))
            .map(|(panel, _)| panel.side)
    }
}

/// How large the residuals of one mesh are.
struct Measure {
    /// For each panel the largest residual in head; zero off head sides.
    heads_m: Vec<f64>,
    /// For each panel its residual in slope as a share of the largest of its part.
    slope_shares: Vec<f64>,
    /// For each panel the water that the residuals in slope let through its part;
    /// zero on head sides.
    amounts_m: Vec<f64>,
    /// What each part lets through, the least first.
    of_parts_m: Vec<f64>,
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
            Mesh::new(&region, &poles, ORDER, target_m),
            target_m,
        );
        let mut latest: Option<Attempt> = None;
        let mut aim_m = FIRST_AIM * target_m;
        let mut rounds = 1;
        while best.measure.bound_m > target_m && rounds < MOST_ROUNDS {
            let from = latest.as_ref().unwrap_or(&best);
            let mut excess = from.measure.excess(aim_m, target_m);
            while excess.iter().all(|&excess| excess == 0.0) && aim_m > LEAST_AIM * target_m {
                aim_m *= FIRST_AIM;
                excess = from.measure.excess(aim_m, target_m);
            }
            let finer = from.system.mesh.refined(&region, &excess);
            let Some(finer) = finer.filter(|mesh| mesh.unknowns() <= MOST_UNKNOWNS) else {
                break;
            };
            let next = Attempt::on(&region, &posed, finer, target_m);
            rounds += 1;
            if next.measure.bound_m <= best.measure.bound_m {
                best = next;
                latest = None;
            } else {
                latest = Some(next);
            }
        }
        let node_slopes = best
            .system
            .fields(&best.densities, best.system.nodes(), |_| Wanted::ALL);
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
    let fields = system.fields(densities, &checks, Wanted::by);
    let residuals = fields.residuals(&checks, posed.len(), &asked);
    let weights: Vec<f64> = posed.iter().map(|problem| problem.weight().abs()).collect();
    let sums = residuals.chunks(posed.len()).map(|residuals| {
        let parts = residuals.iter().zip(&weights);
        parts
            .map(|(residual, weight)| residual.abs() * weight)
            .sum()
    });
    let sums: Vec<f64> = sums.collect();
    let (heads_m, slopes_m) = largest_on_panels(system, &checks, &sums);
    let parts = Parts::of(system, &checks);
    let slopes = parts.largest(&sums);
    let amounts_m = parts.amounts(&slopes);
    let head_m = highest(heads_m.iter().copied());
    let amount_m = highest(amounts_m.iter().copied());
    // φ is not worth solving for while the residuals alone exceed the target.
    let bound_m = if amount_m == 0.0 {
        head_m
    } else if head_m.max(amount_m) > target_m {
        f64::INFINITY
    } else {
        head_m + parts.highest(region, &slopes)
    };
    Measure {
        heads_m,
        slope_shares: parts.shares(&slopes_m),
        amounts_m,
        of_parts_m: parts.sorted_amounts(&slopes),
        bound_m,
    }
}

/// For each panel its largest residual in head and in slope; infinite where one
/// is not a number.
fn largest_on_panels(system: &System, checks: &[Place], sums: &[f64]) -> (Vec<f64>, Vec<f64>) {
    let panels = system.sources.len();
    let (mut heads_m, mut slopes_m) = (vec![0.0; panels], vec![0.0; panels]);
    for (place, sum) in checks.iter().zip(sums) {
        let residuals = if place.counts_head() {
            &mut heads_m
        } else {
            &mut slopes_m
        };
        if let Some(residual) = residuals.get_mut(place.panel) {
            *residual = highest([*residual, BETWEEN_CHECKS * sum].into_iter());
        }
    }
    (heads_m, slopes_m)
}

/// The largest of some values and zero; infinite where one is not a number, so
/// that nothing undefined passes for small.
pub(super) fn highest(values: impl Iterator<Item = f64>) -> f64 {
    values.fold(0.0, |highest, value| {
        if value.is_nan() {
            f64::INFINITY
        } else {
            highest.max(value)
        }
    })
}

impl Measure {
    /// For each panel by what factor it misses its aim; zero where it keeps it.
    fn excess(&self, aim_m: f64, target_m: f64) -> Vec<f64> {
        // φ is about what all parts let through together: those that let most
        // through are refined, until the others make up no more than the aim, or
        // no more of the bound than the target leaves them; at first, a small share.
        let all_m: f64 = self.of_parts_m.iter().sum();
        let rest_m = if self.bound_m.is_finite() {
            aim_m.min(all_m * REST_SHARE * target_m / self.bound_m)
        } else {
            aim_m.max(SMALL_SHARE * all_m)
        };
        let mut sum_m = 0.0;
        let small = self.of_parts_m.iter().take_while(|amount_m| {
            sum_m += **amount_m;
            sum_m <= rest_m
        });
        let small_m = highest(small.copied());
        let each_m = small_m.max(aim_m / self.of_parts_m.len().max(2) as f64);
        let slopes = self.slope_shares.iter().zip(&self.amounts_m);
        let panels = self.heads_m.iter().zip(slopes);
        let excess = |(head_m, (share, amount_m)): (&f64, (&f64, &f64))| {
            let of_slope = if *amount_m > small_m {
                share * amount_m / each_m
            } else {
                0.0
            };
            let excess = (head_m / aim_m).max(of_slope);
            if excess > 1.0 { excess } else { 0.0 }
        };
        panels.map(excess).collect()
    }
}
