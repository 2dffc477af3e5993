//! `head_contours.geojson`, `drawdown_contours.geojson` and
//! `drawdown_bands.geojson`.

use geo::{LineString, MultiPolygon};
use geojson::FeatureCollection;
use serde_json::Value;

use super::geojson::Layer;
use super::units::Properties;
use super::{LayerError, Planned, Units, number};
use crate::contours::{Band, ContourLine, Cuts, LevelError, round_levels};
use crate::findings::{Drawdowns, Heads, Survey};
use crate::site::{Length, Point, Refusal, Subject};

/// The levels that contours are drawn at, metres, rising.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Levels {
    /// Of heads.
    pub heads_m: Vec<f64>,
    /// Of drawdowns, and the limits of the bands.
    pub drawdowns_m: Vec<f64>,
}

impl Levels {
    /// Round levels in the plan's units, at the plan's interval if it has one.
    ///
    /// # Errors
    /// When the interval gives too many levels; the refusal names one that
    /// works.
    pub fn of(
        survey: &Survey<'_>,
        units: Units,
        interval: Option<Length>,
    ) -> Result<Self, Refusal> {
        let levels = |range: Option<[f64; 2]>| {
            let Some([low_m, high_m]) = range else {
                return Ok(vec![]);
            };
            let unit_in_metres = 1.0 / units.length(1.0);
            round_levels(low_m, high_m, unit_in_metres, interval.map(Length::si))
                .map_err(|error| refusal(&error))
        };
        Ok(Self {
            heads_m: levels(survey.head_range_m())?,
            drawdowns_m: levels(survey.drawdown_range_m())?,
        })
    }
}

/// Why no levels can be chosen, as the plan's reader needs it.
fn refusal(error: &LevelError) -> Refusal {
    Refusal {
        subject: Subject::Map(Some("interval")),
        what: error.to_string(),
        why: None,
        remedy: "leave `interval` out to have a round one chosen, or choose a larger one".into(),
        related: vec![],
    }
}

/// The head contours.
pub fn head_lines(planned: &Planned<'_>) -> Result<FeatureCollection, LayerError> {
    let mut layer = Layer::new(planned.plan);
    for line in all_head_lines(planned)? {
        let name = format!("head_{}", planned.units().length_ending());
        let properties =
            Properties::new(planned.units()).with(&name, level(planned.units(), line.level));
        layer.add_line(&line.points, properties)?;
    }
    Ok(layer.finish())
}

/// The drawdown contours.
pub fn drawdown_lines(planned: &Planned<'_>) -> Result<FeatureCollection, LayerError> {
    let mut layer = Layer::new(planned.plan);
    for line in all_drawdown_lines(planned)? {
        let name = format!("drawdown_{}", planned.units().length_ending());
        let properties =
            Properties::new(planned.units()).with(&name, level(planned.units(), line.level));
        layer.add_line(&line.points, properties)?;
    }
    Ok(layer.finish())
}

/// The bands between the drawdown contours.
pub fn drawdown_bands(planned: &Planned<'_>) -> Result<FeatureCollection, LayerError> {
    let mut layer = Layer::new(planned.plan);
    let ending = planned.units().length_ending();
    for band in all_drawdown_bands(planned)? {
        let properties = Properties::new(planned.units())
            .with(&format!("from_{ending}"), level(planned.units(), band.from))
            .with(&format!("to_{ending}"), level(planned.units(), band.to));
        layer.add_polygons(&rings(&band.polygons), properties)?;
    }
    Ok(layer.finish())
}

/// The head contours, aquifer by aquifer, level by level.
pub fn all_head_lines(planned: &Planned<'_>) -> Result<Vec<ContourLine>, LayerError> {
    let mut lines = Vec::new();
    for aquifer in &planned.survey.aquifers {
        let cuts = Cuts::refine(
            &aquifer.mesh,
            &aquifer.heads_m,
            &Heads(aquifer.field),
            &planned.levels.heads_m,
        )?;
        lines.extend(cuts.lines());
    }
    Ok(lines)
}

/// The drawdown contours, aquifer by aquifer, level by level.
pub fn all_drawdown_lines(planned: &Planned<'_>) -> Result<Vec<ContourLine>, LayerError> {
    Ok(drawdown_cuts(planned)?
        .iter()
        .flat_map(Cuts::lines)
        .collect())
}

/// The bands of drawdown, aquifer by aquifer, from the lowest up.
pub fn all_drawdown_bands(planned: &Planned<'_>) -> Result<Vec<Band>, LayerError> {
    Ok(drawdown_cuts(planned)?
        .iter()
        .flat_map(Cuts::bands)
        .collect())
}

/// Where the drawdown's levels cut the triangles of each aquifer.
fn drawdown_cuts<'a>(planned: &'a Planned<'_>) -> Result<Vec<Cuts<'a>>, LayerError> {
    let cuts = planned.survey.aquifers.iter().map(|aquifer| {
        Cuts::refine(
            &aquifer.mesh,
            &aquifer.drawdowns_m,
            &Drawdowns(aquifer.field),
            &planned.levels.drawdowns_m,
        )
    });
    Ok(cuts.collect::<Result<_, _>>()?)
}

/// A level in the plan's unit. Levels are round there, so what lies beyond a
/// billionth is the rounding of the way through metres.
fn level(units: Units, metres: f64) -> Value {
    let exact = units.length(metres);
    let round = (exact * 1e9).round() / 1e9;
    number(if round.is_finite() { round } else { exact })
}

/// Polygons as lists of rings, exterior first.
fn rings(polygons: &MultiPolygon) -> Vec<Vec<Vec<Point>>> {
    let points = |ring: &LineString| ring.coords().map(|c| Point::new(c.x, c.y)).collect();
    polygons
        .iter()
        .map(|polygon| {
            std::iter::once(polygon.exterior())
                .chain(polygon.interiors())
                .map(points)
                .collect()
        })
        .collect()
}
