//! The linear system of a mesh: as many conditions at nodes as unknowns.
//!
//! Unknown are the density at each node, or each side's few functions, and one
//! constant; the charges of a
//! problem and of its panels sum to zero, so that nothing comes from infinity.
//! Solved by dense LU with partial pivoting: N³·2/3 operations, 8N² bytes.

use faer::linalg::lu::partial_pivoting::{factor, solve};
use faer::{Mat, MatMut, MatRef, Par, dyn_stack};
use rayon::prelude::*;

use super::assembly::{Assembly, rows};
use super::hub::{self, Hub};
use super::kernel::{OnSide, Source, Wanted};
use super::legendre::Rule;
use super::mesh::Mesh;
use super::panel::Place;
use super::problem::Posed;
use super::region::{Condition, Region};

/// Work is split as for this many threads however many there are, so that the
/// same sums are made in the same order.
fn parallelism() -> Par {
    Par::rayon(4)
}

/// A factored system.
pub(super) struct System {
    pub mesh: Mesh,
    pub sources: Vec<Source>,
    /// For each stretch of the mesh its hub, if it has one.
    pub hubs: Vec<Option<Hub>>,
    pub hub_rule: Rule,
    nodes: Vec<Place>,
    /// The nodes whose condition is asked.
    rows: Vec<Place>,
    /// The factors L and U, column after column.
    factors: Vec<f64>,
    forward: Vec<usize>,
    backward: Vec<usize>,
}

/// The densities and constants of several problems, node after node.
#[derive(Clone, Debug)]
pub(super) struct Densities {
    /// How many problems.
    pub count: usize,
    /// For each node, one density for each problem.
    pub at_nodes: Vec<f64>,
    /// One constant for each problem.
    pub constants: Vec<f64>,
}

/// Potentials and outward slopes at places, for each problem in turn.
pub(super) struct Fields {
    pub values: Vec<f64>,
    pub slopes: Vec<f64>,
}

impl System {
    pub fn new(region: &Region, mesh: Mesh) -> Self {
        let nodes = mesh.nodes(region);
        let sources: Vec<_> = (mesh.panels().map(|panel| Source::new(panel, &mesh.rule))).collect();
        let hub_rule = Rule::new(hub::NODES);
        let sides = region.sides().iter().zip(&mesh.stretches);
        let hubs: Vec<_> = sides
            .map(|(side, stretch)| Hub::of(side, stretch, &mesh.rule, &hub_rule))
            .collect();
        let rows = rows(&mesh, &nodes);
        let mut factors = Assembly {
            mesh: &mesh,
            sources: &sources,
            hub_rule: &hub_rule,
            rows: &rows,
        }
        .columns(&hubs);
        let size = rows.len() + 1;
        let (mut forward, mut backward) = (vec![0; size], vec![0; size]);
        let memory = factor::lu_in_place_scratch::<usize, f64>(
            size,
            size,
            parallelism(),
            Default::default(),
        );
        factor::lu_in_place(
            MatMut::from_column_major_slice_mut(&mut factors, size, size),
            &mut forward,
            &mut backward,
            parallelism(),
            dyn_stack::MemStack::new(&mut dyn_stack::MemBuffer::new(memory)),
            Default::default(),
        );
        Self {
            mesh,
            sources,
            hubs,
            hub_rule,
            nodes,
            rows,
            factors,
            forward,
            backward,
        }
    }

    /// Number of equations.
    pub fn size(&self) -> usize {
        self.rows.len() + 1
    }

    pub fn nodes(&self) -> &[Place] {
        &self.nodes
    }

    /// The densities that meet, at each node that asks, what `asked` returns for
    /// each problem, with the given sums of charges.
    pub fn solve(
        &self,
        asked: &(dyn Fn(usize, &Place) -> f64 + Sync),
        charges: &[f64],
    ) -> Densities {
        let size = self.size();
        let count = charges.len();
        let mut right = Mat::<f64>::zeros(size, count);
        for (problem, charge) in charges.iter().enumerate() {
            for (row, place) in self.rows.iter().enumerate() {
                right[(row, problem)] = scale(place) * asked(problem, place);
            }
            right[(size - 1, problem)] = *charge;
        }
        self.back_substitute(right.as_mut());
        let constants = (0..count).map(|problem| right[(size - 1, problem)]);
        Densities {
            count,
            at_nodes: self.at_nodes(right.as_ref()),
            constants: constants.collect(),
        }
    }

    /// The densities at all nodes that the unknowns stand for.
    fn at_nodes(&self, unknowns: MatRef<'_, f64>) -> Vec<f64> {
        let count = unknowns.ncols();
        let order = self.mesh.rule.order();
        let mut densities = Vec::with_capacity(self.nodes.len() * count);
        let mut first = 0;
        for stretch in &self.mesh.stretches {
            match &stretch.span {
                Some(span) => {
                    for functions in span.at_nodes() {
                        densities.extend((0..count).map(|problem| {
                            let parts = functions.iter().enumerate();
                            parts
                                .map(|(part, value)| value * unknowns[(first + part, problem)])
                                .sum::<f64>()
                        }));
                    }
                    first += span.count();
                }
                None => {
                    let last = first + stretch.panels.len() * order;
                    let rows = first..last;
                    densities.extend(
                        rows.flat_map(|row| (0..count).map(move |problem| (row, problem)))
                            .map(|at| unknowns[at]),
                    );
                    first = last;
                }
            }
        }
        densities
    }

    /// Gives back the memory of the factors; nothing can be solved for after.
    pub fn forget_factors(&mut self) {
        self.factors = Vec::new();
    }

    fn back_substitute(&self, right: MatMut<'_, f64>) {
        let size = self.size();
        let factors = MatRef::from_column_major_slice(&self.factors, size, size);
        let permutation = faer::perm::PermRef::new_checked(&self.forward, &self.backward, size);
        let memory =
            solve::solve_in_place_scratch::<usize, f64>(size, right.ncols(), parallelism());
        solve::solve_in_place(
            factors,
            factors,
            permutation,
            right,
            parallelism(),
            dyn_stack::MemStack::new(&mut dyn_stack::MemBuffer::new(memory)),
        );
    }

    /// For each stretch with a hub its densities there, for each problem.
    pub fn at_hubs(&self, at_nodes: &[f64], count: usize) -> Vec<Vec<f64>> {
        let mut rest = at_nodes;
        let stretches = self.mesh.stretches.iter().zip(&self.hubs);
        stretches
            .map(|(stretch, hub)| {
                let nodes = stretch.panels.len() * self.mesh.rule.order() * count;
                let (here, after) = rest.split_at(nodes.min(rest.len()));
                rest = after;
                hub.as_ref()
                    .map_or_else(Vec::new, |hub| hub.densities(here, count))
            })
            .collect()
    }

    /// What the panels and constants make of all problems at places of sides; what
    /// is not wanted there may be left out.
    pub fn fields(
        &self,
        densities: &Densities,
        places: &[Place],
        wanted: impl Fn(&Place) -> Wanted + Sync,
    ) -> Fields {
        let count = densities.count;
        let at_hubs = self.at_hubs(&densities.at_nodes, count);
        let mut values = vec![0.0; places.len() * count];
        let mut slopes = vec![0.0; places.len() * count];
        places
            .par_iter()
            .zip(values.par_chunks_mut(count))
            .zip(slopes.par_chunks_mut(count))
            .with_min_len(8)
            .for_each(|((place, values), slopes)| {
                values.copy_from_slice(&densities.constants);
                let wanted = wanted(place);
                self.add_fields(densities, &at_hubs, place, wanted, [values, slopes]);
            });
        Fields { values, slopes }
    }

    /// Adds what the panels make of all problems at one place.
    fn add_fields(
        &self,
        densities: &Densities,
        at_hubs: &[Vec<f64>],
        place: &Place,
        wanted: Wanted,
        [values, slopes]: [&mut [f64]; 2],
    ) {
        let count = densities.count;
        let mut effect = OnSide::NONE;
        let block = self.mesh.rule.order() * count;
        let mut sources = self.sources.iter().enumerate();
        let mut blocks = densities.at_nodes.chunks(block);
        let mut add = |effect: &OnSide, block: &[f64]| {
            if wanted.values {
                add_parts(&effect.values, block, values);
            }
            if wanted.slopes {
                add_parts(&effect.slopes, block, slopes);
            }
        };
        for ((stretch, hub), at_hub) in self.mesh.stretches.iter().zip(&self.hubs).zip(at_hubs) {
            let panels = stretch.panels.len();
            if let Some(hub) = hub.as_ref().filter(|hub| hub.is_far(place.x)) {
                hub.source
                    .as_points_on_side(&self.hub_rule, place, wanted, &mut effect);
                add(&effect, at_hub);
                sources.by_ref().take(panels).for_each(drop);
                blocks.by_ref().take(panels).for_each(drop);
            } else {
                for ((index, source), block) in sources.by_ref().take(panels).zip(blocks.by_ref()) {
                    source.on_side(&self.mesh.rule, index, place, &mut effect);
                    add(&effect, block);
                }
            }
        }
    }
}

/// Adds what each node does, times its density, to the sum of each problem.
fn add_parts(effects: &[f64], block: &[f64], sums: &mut [f64]) {
    for (densities, effect) in block.chunks(sums.len()).zip(effects) {
        for (sum, density) in sums.iter_mut().zip(densities) {
            *sum += effect * density;
        }
    }
}

impl Fields {
    /// By how much each problem misses what `asked` returns, place after place;
    /// a head, or a slope where the side asks for one.
    pub fn residuals(
        &self,
        places: &[Place],
        count: usize,
        asked: &(dyn Fn(usize, &Place) -> f64 + Sync),
    ) -> Vec<f64> {
        let mut residuals = vec![0.0; self.values.len()];
        places
            .par_iter()
            .zip(residuals.par_chunks_mut(count))
            .zip(self.values.par_chunks(count))
            .zip(self.slopes.par_chunks(count))
            .for_each(|(((place, residuals), values), slopes)| {
                let fields = values.iter().zip(slopes).enumerate();
                for (residual, (problem, (value, slope))) in residuals.iter_mut().zip(fields) {
                    let missed = row(place, *value, *slope) - asked(problem, place);
                    *residual = missed / unit(place);
                }
            });
        residuals
    }
}

/// Problems on their region, as rows ask for them.
pub(super) fn asked_by<'a>(
    region: &'a Region,
    problems: &'a [Posed],
) -> impl Fn(usize, &Place) -> f64 + Sync + 'a {
    move |problem, place| {
        let problem = problems.get(problem);
        problem.map_or(0.0, |problem| problem.asked(region, place))
    }
}

/// What a place's condition looks at.
pub(super) fn row(place: &Place, value: f64, slope: f64) -> f64 {
    match place.condition {
        Condition::Head => value,
        Condition::Flux => slope,
        Condition::Clogged { skin_m } => slope + value * place.conductance(skin_m),
    }
}

/// What one metre of head residual amounts to in a place's row, or one of slope.
fn unit(place: &Place) -> f64 {
    match place.condition {
        Condition::Clogged { skin_m } if place.counts_head() => place.conductance(skin_m),
        _ => 1.0,
    }
}

/// Rows of thin skins are scaled back to the size of heads.
pub(super) fn scale(place: &Place) -> f64 {
    match place.condition {
        Condition::Head | Condition::Flux => 1.0,
        Condition::Clogged { skin_m } => place.conductance(skin_m).max(1.0).recip(),
    }
}
