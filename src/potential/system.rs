//! The linear system of a mesh: one condition at each node.
//!
//! Unknown are the density at each node and one constant; the charges of a
//! problem and of its panels sum to zero, so that nothing comes from infinity.
//! Solved by dense LU with partial pivoting: N³·2/3 operations, 8N² bytes.

use faer::linalg::lu::partial_pivoting::{factor, solve};
use faer::{Mat, MatMut, MatRef, Par, dyn_stack};
use rayon::prelude::*;

use super::kernel::{OnSide, Source, sources};
use super::mesh::{Mesh, Place};
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
    nodes: Vec<Place>,
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
        let sources = sources(&mesh);
        let mut factors = assemble(&mesh, &sources, &nodes);
        let size = nodes.len() + 1;
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
            nodes,
            factors,
            forward,
            backward,
        }
    }

    /// Number of equations.
    pub fn size(&self) -> usize {
        self.nodes.len() + 1
    }

    pub fn nodes(&self) -> &[Place] {
        &self.nodes
    }

    /// The densities that meet, at each node, what `asked` returns for each
    /// problem, with the given sums of charges.
    pub fn solve(
        &self,
        asked: &(dyn Fn(usize, &Place) -> f64 + Sync),
        charges: &[f64],
    ) -> Densities {
        let size = self.size();
        let count = charges.len();
        let mut right = Mat::<f64>::zeros(size, count);
        for (problem, charge) in charges.iter().enumerate() {
            for (row, place) in self.nodes.iter().enumerate() {
                right[(row, problem)] = scale(place) * asked(problem, place);
            }
            right[(size - 1, problem)] = *charge;
        }
        self.back_substitute(right.as_mut());
        let at_nodes = (0..size - 1)
            .flat_map(|row| (0..count).map(move |problem| (row, problem)))
            .map(|at| right[at])
            .collect();
        let constants = (0..count).map(|problem| right[(size - 1, problem)]);
        Densities {
            count,
            at_nodes,
            constants: constants.collect(),
        }
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

    /// What the panels and constants make of all problems at places of sides.
    pub fn fields(&self, densities: &Densities, places: &[Place]) -> Fields {
        let count = densities.count;
        let order = self.mesh.rule.order();
        let mut values = vec![0.0; places.len() * count];
        let mut slopes = vec![0.0; places.len() * count];
        places
            .par_iter()
            .zip(values.par_chunks_mut(count))
            .zip(slopes.par_chunks_mut(count))
            .with_min_len(8)
            .for_each(|((place, values), slopes)| {
                values.copy_from_slice(&densities.constants);
                let mut effect = OnSide::NONE;
                let blocks = densities.at_nodes.chunks(order * count);
                for ((index, source), block) in self.sources.iter().enumerate().zip(blocks) {
                    source.on_side(&self.mesh.rule, index, place, &mut effect);
                    let effects = effect.values.iter().zip(&effect.slopes);
                    for (densities, (value, slope)) in block.chunks(count).zip(effects) {
                        for ((sum, rise), density) in
                            values.iter_mut().zip(slopes.iter_mut()).zip(densities)
                        {
                            *sum += value * density;
                            *rise += slope * density;
                        }
                    }
                }
            });
        Fields { values, slopes }
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
fn row(place: &Place, value: f64, slope: f64) -> f64 {
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
fn scale(place: &Place) -> f64 {
    match place.condition {
        Condition::Head | Condition::Flux => 1.0,
        Condition::Clogged { skin_m } => place.conductance(skin_m).max(1.0).recip(),
    }
}

/// The matrix, column after column.
fn assemble(mesh: &Mesh, sources: &[Source], nodes: &[Place]) -> Vec<f64> {
    let size = nodes.len() + 1;
    let order = mesh.rule.order();
    let mut columns = vec![0.0; size * size];
    columns
        .par_chunks_mut(size * order)
        .zip(sources.par_iter().enumerate())
        .for_each(|(block, (index, source))| {
            let mut effect = OnSide::NONE;
            for (row_index, place) in nodes.iter().enumerate() {
                source.on_side(&mesh.rule, index, place, &mut effect);
                let effects = effect.values.iter().zip(&effect.slopes);
                for (column, (value, slope)) in block.chunks_mut(size).zip(effects) {
                    if let Some(entry) = column.get_mut(row_index) {
                        *entry = scale(place) * row(place, *value, *slope);
                    }
                }
            }
            for (column, weight) in block.chunks_mut(size).zip(&mesh.rule.weights) {
                if let Some(entry) = column.last_mut() {
                    *entry = *weight;
                }
            }
        });
    if let Some(column) = columns.chunks_mut(size).last() {
        for (entry, place) in column.iter_mut().zip(nodes) {
            *entry = scale(place) * row(place, 1.0, 0.0);
        }
    }
    columns
}
