//! The matrix of a mesh: what each unknown does at each node that asks.

use rayon::prelude::*;

use super::hub::{self, Hub};
use super::kernel::{OnSide, Source, Wanted};
use super::legendre::Rule;
use super::mesh::{Mesh, Stretch};
use super::panel::Place;
use super::system::{row, scale};

/// What the matrix is made of.
pub(super) struct Assembly<'a> {
    pub mesh: &'a Mesh,
    pub sources: &'a [Source],
    pub hub_rule: &'a Rule,
    pub rows: &'a [Place],
}

impl Assembly<'_> {
    /// The matrix, column after column.
    pub fn columns(&self, hubs: &[Option<Hub>]) -> Vec<f64> {
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

/// The nodes that ask their condition: all, or on a side of few functions as
/// many.
pub(super) fn rows(mesh: &Mesh, nodes: &[Place]) -> Vec<Place> {
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
