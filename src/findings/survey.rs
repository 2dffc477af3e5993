//! The map's aquifers cut into triangles, with heads and drawdowns at their
//! nodes: what contours, bands and areas are read from.

use std::sync::OnceLock;

use crate::contours::{self, Bump, ContourError, Mesh, MeshError, Region, ScalarField};
use crate::field::WellField;
use crate::site::{Point, direction_of_azimuth};

use super::{MapWindow, Solution};

/// A place this far from an aquifer counts as on its edge, metres: what
/// rounding moves, and then what the chord of a round shore cuts off.
const HAIRS_M: [f64; 2] = [1e-6, 1e-3];

/// The heads of one aquifer, as something to contour.
pub struct Heads<'a>(pub &'a WellField);

impl ScalarField for Heads<'_> {
    fn values(&self, points: &[Point]) -> Vec<f64> {
        on_edge_too(self.0, points, WellField::heads_m)
    }
}

/// The drawdowns in one aquifer, as something to contour.
pub struct Drawdowns<'a>(pub &'a WellField);

impl ScalarField for Drawdowns<'_> {
    fn values(&self, points: &[Point]) -> Vec<f64> {
        on_edge_too(self.0, points, WellField::drawdowns_m)
    }
}

/// The heads in one aquifer before any pumping, as something to sample.
struct AmbientHeads<'a>(&'a WellField);

impl ScalarField for AmbientHeads<'_> {
    fn values(&self, points: &[Point]) -> Vec<f64> {
        on_edge_too(self.0, points, WellField::ambient_heads_m)
    }
}

/// Values in an aquifer and on its edge. A vertex of the edge that rounding
/// has put outside takes the value a micrometre away, on the side where there
/// is one: heads differ by less than 1e-7 m there. A chord of a lake's shore
/// lies up to 0.5 mm within the lake; a millimetre away heads differ by a
/// millimetre times their slope.
fn on_edge_too(
    field: &WellField,
    points: &[Point],
    evaluate: impl Fn(&WellField, &[Point]) -> Vec<f64>,
) -> Vec<f64> {
    let mut values = evaluate(field, points);
    for (value, &point) in values.iter_mut().zip(points) {
        if value.is_nan() {
            let around: Vec<Point> = HAIRS_M
                .into_iter()
                .flat_map(|hair_m| {
                    let azimuths = (0..8).map(|step| 45.0 * f64::from(step));
                    azimuths.map(move |azimuth| point + direction_of_azimuth(azimuth) * hair_m)
                })
                .collect();
            let near = evaluate(field, &around);
            *value = near.into_iter().find(|v| !v.is_nan()).unwrap_or(*value);
        }
    }
    values
}

/// Why a map cannot be surveyed.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum SurveyError {
    /// The aquifer cannot be cut into triangles.
    #[error(transparent)]
    Mesh(#[from] MeshError),
    /// A field cannot be contoured.
    #[error(transparent)]
    Field(#[from] ContourError),
}

/// One aquifer on the map.
pub struct SurveyedAquifer<'a> {
    /// Its heads.
    pub field: &'a WellField,
    /// Its triangles within the map.
    pub mesh: Mesh,
    /// Heads at the nodes, metres.
    pub heads_m: Vec<f64>,
    /// Drawdowns at the nodes, metres.
    pub drawdowns_m: Vec<f64>,
}

/// The whole map.
pub struct Survey<'a> {
    /// The rectangle and grid.
    pub window: MapWindow,
    /// The aquifers that reach into it.
    pub aquifers: Vec<SurveyedAquifer<'a>>,
    solution: &'a Solution,
    at_nodes: OnceLock<AtNodes>,
}

/// Values at the nodes of the map's grid, in the order of
/// [`MapWindow::nodes`]; NaN outside every aquifer.
#[derive(Clone, Debug, Default)]
pub struct AtNodes {
    /// Heads, metres.
    pub heads_m: Vec<f64>,
    /// Drawdowns, metres.
    pub drawdowns_m: Vec<f64>,
}

impl<'a> Survey<'a> {
    /// Surveys every aquifer within the window.
    ///
    /// # Errors
    /// [`SurveyError`] where a mesh cannot be made or a head is no number.
    pub fn of(solution: &'a Solution, window: MapWindow) -> Result<Self, SurveyError> {
        let mut aquifers = Vec::new();
        for field in solution.fields() {
            let polygons = field.outline().clip(window.extent);
            if polygons.0.is_empty() {
                continue;
            }
            let region = Region {
                polygons,
                extent: window.extent,
                spacing_m: window.spacing_m,
            };
            let mesh = contours::mesh(&region, &bumps(solution, field))?;
            // Superposing the wells is what takes long: once is enough.
            let drawdowns_m = contours::sample(&mesh, &Drawdowns(field))?;
            let ambient_m = contours::sample(&mesh, &AmbientHeads(field))?;
            let both_m = ambient_m.iter().zip(&drawdowns_m);
            let heads_m = both_m
                .map(|(ambient_m, drawdown_m)| ambient_m - drawdown_m)
                .collect();
            aquifers.push(SurveyedAquifer {
                field,
                mesh,
                heads_m,
                drawdowns_m,
            });
        }
        Ok(Self {
            window,
            aquifers,
            solution,
            at_nodes: OnceLock::new(),
        })
    }

    /// Heads and drawdowns at the map's nodes, computed when first asked for.
    /// Superposing the wells is what takes long; where the triangles stand on
    /// the same nodes, what is known there is not computed again.
    pub fn at_nodes(&self) -> &AtNodes {
        self.at_nodes.get_or_init(|| {
            let (columns, rows) = self.window.node_counts();
            let count = columns * rows;
            let mut found = AtNodes {
                heads_m: vec![f64::NAN; count],
                drawdowns_m: vec![f64::NAN; count],
            };
            for aquifer in &self.aquifers {
                let spacing_m = self.window.spacing_m;
                let known = |values| aquifer.mesh.on_grid(values, columns, spacing_m);
                let known_m = (known(&aquifer.heads_m), known(&aquifer.drawdowns_m));
                if let (Some(heads_m), Some(drawdowns_m)) = known_m {
                    fill(&mut found.heads_m, heads_m);
                    fill(&mut found.drawdowns_m, drawdowns_m);
                }
            }
            self.compute_missing(&mut found);
            found
        })
    }

    /// Computes what no triangle's corner told, some rows at a time.
    fn compute_missing(&self, found: &mut AtNodes) {
        const NODES_AT_A_TIME: usize = 1 << 16;
        let missing = self.window.nodes().enumerate();
        let mut missing: Vec<(usize, Point)> = missing
            .filter(|(node, _)| {
                found
                    .heads_m
                    .get(*node)
                    .is_some_and(|head_m| head_m.is_nan())
            })
            .collect();
        while !missing.is_empty() {
            let rest = missing.split_off(missing.len().saturating_sub(NODES_AT_A_TIME));
            let (nodes, points): (Vec<usize>, Vec<Point>) = rest.into_iter().unzip();
            let drawdowns_m = self.solution.drawdowns_m(&points);
            let ambient_m = self.solution.ambient_heads_m(&points);
            for (node, (ambient_m, drawdown_m)) in nodes
                .into_iter()
                .zip(ambient_m.into_iter().zip(drawdowns_m))
            {
                let slots = (found.heads_m.get_mut(node), found.drawdowns_m.get_mut(node));
                if let (Some(head), Some(drawdown)) = slots {
                    (*head, *drawdown) = (ambient_m - drawdown_m, drawdown_m);
                }
            }
        }
    }

    /// Smallest and largest head at a node, metres; none without nodes.
    pub fn head_range_m(&self) -> Option<[f64; 2]> {
        range(self.aquifers.iter().flat_map(|aquifer| &aquifer.heads_m))
    }

    /// Smallest and largest drawdown at a node, metres; none without nodes.
    pub fn drawdown_range_m(&self) -> Option<[f64; 2]> {
        range(
            self.aquifers
                .iter()
                .flat_map(|aquifer| &aquifer.drawdowns_m),
        )
    }

    /// Area of the map where the head is below a level, m².
    ///
    /// # Errors
    /// As [`contours::area_below`].
    pub fn area_below_m2(&self, level_m: f64) -> Result<f64, ContourError> {
        let areas = self.aquifers.iter().map(|aquifer| {
            contours::area_below(
                &aquifer.mesh,
                &aquifer.heads_m,
                &Heads(aquifer.field),
                level_m,
            )
        });
        areas.sum()
    }
}

/// Puts values where there are none yet.
fn fill(into: &mut [f64], values: &[f64]) {
    for (slot, value) in into.iter_mut().zip(values) {
        if slot.is_nan() {
            *slot = *value;
        }
    }
}

/// The wells of an aquifer as peaks.
fn bumps(solution: &Solution, field: &WellField) -> Vec<Bump> {
    field
        .outline()
        .wells
        .iter()
        .filter_map(|&well| solution.site().wells.get(well))
        .map(|well| Bump {
            at: well.at,
            rim_m: well.radius.si(),
        })
        .collect()
}

/// Smallest and largest of the values that are numbers.
fn range<'v>(values: impl Iterator<Item = &'v f64>) -> Option<[f64; 2]> {
    values
        .copied()
        .filter(|value| value.is_finite())
        .fold(None, |range, value| match range {
            None => Some([value, value]),
            Some([low, high]) => Some([f64::min(low, value), f64::max(high, value)]),
        })
}
