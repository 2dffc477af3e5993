//! `head_contours.geojson`, `drawdown_contours.geojson` and
//! `drawdown_bands.geojson`.

use std::sync::OnceLock;

use geo::{LineString, MultiPolygon};

use super::layer::Layer;
use super::property::Quantity;
use super::units::Properties;
use super::{LayerError, Planned, Units};
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
pub fn head_lines(planned: &Planned<'_>) -> Result<Layer, LayerError> {
    Ok(lines("head", all_head_lines(planned)?, planned.units()))
}

/// The drawdown contours.
pub fn drawdown_lines(planned: &Planned<'_>) -> Result<Layer, LayerError> {
    Ok(lines(
        "drawdown",
        all_drawdown_lines(planned)?,
        planned.units(),
    ))
}

/// Contours that stay within this of their start, metres, as where two stages
/// meet, are dots: longitudes and latitudes are too coarse to hold them.
const DOT_M: f64 = 0.002;

/// The largest distance of a line's points from its start.
fn reach_m(points: &[Point]) -> f64 {
    let start = points.first().copied().unwrap_or_default();
    let distances = points.iter().map(|point| (point - start).norm());
    distances.fold(0.0, f64::max)
}

/// Contours as a layer, each with its level.
fn lines(stem: &str, lines: &[ContourLine], units: Units) -> Layer {
    let mut layer = Layer::default();
    for line in lines.iter().filter(|line| reach_m(&line.points) > DOT_M) {
        let value = Some(level(units, line.level));
        let properties = Properties::new(units).number(stem, Quantity::Length, value);
        layer.add_line(line.points.clone(), properties);
    }
    layer
}

/// The bands between the drawdown contours.
pub fn drawdown_bands(planned: &Planned<'_>) -> Result<Layer, LayerError> {
    let units = planned.units();
    let mut layer = Layer::default();
    for band in all_drawdown_bands(planned)? {
        let properties = Properties::new(units)
            .number("from", Quantity::Length, Some(level(units, band.from)))
            .number("to", Quantity::Length, Some(level(units, band.to)));
        layer.add_polygons(rings(&band.polygons), properties);
    }
    Ok(layer)
}

/// The head contours, aquifer by aquifer, level by level.
pub fn all_head_lines<'p>(planned: &'p Planned<'_>) -> Result<&'p [ContourLine], LayerError> {
    once(&planned.drawn.heads, || {
        let mut lines = Vec::new();
        for aquifer in &planned.survey.aquifers {
            let field = Heads(aquifer.field);
            let levels_m = &planned.levels.heads_m;
            let cuts = Cuts::refine(&aquifer.mesh, &aquifer.heads_m, &field, levels_m)?;
            lines.extend(cuts.lines());
        }
        Ok(lines)
    })
    .map(Vec::as_slice)
}

/// The drawdown contours, aquifer by aquifer, level by level.
pub fn all_drawdown_lines<'p>(planned: &'p Planned<'_>) -> Result<&'p [ContourLine], LayerError> {
    drawdowns(planned).map(|(lines, _)| lines.as_slice())
}

/// The bands of drawdown, aquifer by aquifer, from the lowest up.
pub fn all_drawdown_bands<'p>(planned: &'p Planned<'_>) -> Result<&'p [Band], LayerError> {
    drawdowns(planned).map(|(_, bands)| bands.as_slice())
}

/// Contours and bands of drawdown, aquifer by aquifer.
fn drawdowns<'p>(
    planned: &'p Planned<'_>,
) -> Result<&'p (Vec<ContourLine>, Vec<Band>), LayerError> {
    once(&planned.drawn.drawdowns, || {
        let (mut lines, mut bands) = (Vec::new(), Vec::new());
        for aquifer in &planned.survey.aquifers {
            let field = Drawdowns(aquifer.field);
            let levels_m = &planned.levels.drawdowns_m;
            let cuts = Cuts::refine(&aquifer.mesh, &aquifer.drawdowns_m, &field, levels_m)?;
            lines.extend(cuts.lines());
            bands.extend(cuts.bands());
        }
        Ok((lines, bands))
    })
}

/// What a cell holds; made first where it is empty.
fn once<T>(
    cell: &OnceLock<T>,
    make: impl FnOnce() -> Result<T, LayerError>,
) -> Result<&T, LayerError> {
    if let Some(made) = cell.get() {
        return Ok(made);
    }
    let made = make()?;
    Ok(cell.get_or_init(|| made))
}

/// A level in the plan's unit. Levels are round there, so what lies beyond a
/// billionth is the rounding of the way through metres.
pub(super) fn level(units: Units, metres: f64) -> f64 {
    let exact = units.length(metres);
    let round = (exact * 1e9).round() / 1e9;
    if round.is_finite() { round } else { exact }
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
