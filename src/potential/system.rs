//! The linear system of a mesh: as many conditions at nodes as unknowns.
//!
//! Unknown are the density at each node, or each side's few functions, and one
//! constant; the charges of a
//! problem and of its panels sum to zero, so that nothing comes from infinity.
//! Solved by dense LU with partial pivoting: N³·2/3 operations, 8N² bytes.

use faer::linalg::lu::partial_pivoting::{factor, solve};
use faer::{Mat, MatMut, MatRef, Par, dyn_stack};
use rayon::prelude::*;

use super::hub::{self, Hub};
use super::kernel::{OnSide, Source, Wanted};
use super::legendre::Rule;
use super::mesh::{Mesh, Stretch};
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

/// The nodes that ask their condition: all, or on a side of few functions as
/// many.
fn rows(mesh: &Mesh, nodes: &[Place]) -> Vec<Place> {
    let mut rest = nodes;
    let mut rows = Vec::with_capacity(mesh.unknowns());
    for stretch in &mesh.stretches {
        let count = stretch.panels.len() * mesh.rule.order();
        let Some((here, after)) = rest.split_at_checked(count) else {
            break;
        };
        rest = after;
        match &stretch.span {
            Some(span) => rows.extend(span.rows.iter().filter_map(|row| here.get(*row))),
            None => rows.extend(here),
        }
    }
    rows
}

/// What the matrix is made of.
struct Assembly<'a> {
    mesh: &'a Mesh,
    sources: &'a [Source],
    hub_rule: &'a Rule,
    rows: &'a [Place],
}

impl Assembly<'_> {
    /// The matrix, column after column.
    fn columns(&self, hubs: &[Option<Hub>]) -> Vec<f64> {
        let size = self.rows.len() + 1;
        let mut columns = vec![0.0; size * size];
        let mut rest = columns.as_mut_slice();
        let mut blocks = Vec::with_capacity(self.mesh.stretches.len());
        let mut first = 0;
        for (stretch, hub) in self.mesh.stretches.iter().zip(hubs) {
            let (block, after) = rest.split_at_mut(size * stretch.unknowns(&self.mesh.rule));
            rest = after;
            blocks.push((stretch, hub.as_ref(), first, block));
            first += stretch.panels.len();
        }
        blocks
            .into_par_iter()
            .for_each(|(stretch, hub, first, block)| self.fill(stretch, hub, first, block));
        for (entry, place) in rest.iter_mut().zip(self.rows) {
            *entry = scale(place) * row(place, 1.0, 0.0);
        }
        columns
    }

    /// Fills the columns of one stretch, whose panels count from `first`.
    fn fill(&self, stretch: &Stretch, hub: Option<&Hub>, first: usize, block: &mut [f64]) {
        let size = self.rows.len() + 1;
        let count = stretch.unknowns(&self.mesh.rule);
        let sources = self.sources.iter().enumerate().skip(first);
        let sources: Vec<_> = sources.take(stretch.panels.len()).collect();
        let far = hub.map(|hub| (hub, functions_at_hub(stretch, hub, count)));
        let (mut effects, mut sums) = (Vec::new(), vec![0.0; count]);
        let mut effect = OnSide::NONE;
        for (index, place) in self.rows.iter().enumerate() {
            effects.clear();
            let far = far.as_ref().filter(|(hub, _)| hub.is_far(place.x));
            if let Some((hub, functions)) = far {
                hub.source
                    .as_points_on_side(self.hub_rule, place, Wanted::by(place), &mut effect);
                push_row(place, &effect, hub::NODES, &mut effects);
                combine(&effects, functions.chunks(count), &mut sums);
            } else {
                for (index, source) in &sources {
                    source.on_side(&self.mesh.rule, *index, place, &mut effect);
                    push_row(place, &effect, self.mesh.rule.order(), &mut effects);
                }
                combine_nodes(stretch, &effects, &mut sums);
            }
            let entries = block.iter_mut().skip(index).step_by(size);
            entries.zip(&sums).for_each(|(entry, sum)| *entry = *sum);
        }
        let nodes = stretch.panels.len() * self.mesh.rule.order();
        let weights = self.mesh.rule.weights.iter().cycle().take(nodes);
        combine_nodes(stretch, &weights.copied().collect::<Vec<_>>(), &mut sums);
        let entries = block.iter_mut().skip(size - 1).step_by(size);
        entries.zip(&sums).for_each(|(entry, sum)| *entry = *sum);
    }
}

/// Appends what so many nodes do in the row of a place.
fn push_row(place: &Place, effect: &OnSide, nodes: usize, effects: &mut Vec<f64>) {
    let parts = effect.values.iter().zip(&effect.slopes).take(nodes);
    effects.extend(parts.map(|(value, slope)| scale(place) * row(place, *value, *slope)));
}

/// What the unknowns of a stretch do, from what its nodes do.
fn combine_nodes(stretch: &Stretch, effects: &[f64], sums: &mut [f64]) {
    match &stretch.span {
        Some(span) => combine(effects, span.at_nodes(), sums),
        None => sums.copy_from_slice(effects),
    }
}

/// What functions do, from what nodes do and the functions' values there.
fn combine<'a>(effects: &[f64], functions: impl Iterator<Item = &'a [f64]>, sums: &mut [f64]) {
    sums.fill(0.0);
    for (effect, values) in effects.iter().zip(functions) {
        for (sum, value) in sums.iter_mut().zip(values) {
            *sum += effect * value;
        }
    }
}

/// For each node of a hub what each unknown of its stretch makes there.
fn functions_at_hub(stretch: &Stretch, hub: &Hub, count: usize) -> Vec<f64> {
    let mut functions = vec![0.0; hub::NODES * count];
    let mut add = |node: usize, unknown: usize, value: f64| {
        if let Some(slot) = functions.get_mut(node * count + unknown) {
            *slot += value;
        }
    };
    match &stretch.span {
        Some(span) => {
            for (shares, values) in hub.transfer().iter().zip(span.at_nodes()) {
                for (node, share) in shares.iter().enumerate() {
                    let parts = values.iter().enumerate();
                    parts.for_each(|(unknown, value)| add(node, unknown, share * value));
                }
            }
        }
        None => {
            for (unknown, shares) in hub.transfer().iter().enumerate() {
                let parts = shares.iter().enumerate();
                parts.for_each(|(node, share)| add(node, unknown, *share));
            }
        }
    }
    functions
}
