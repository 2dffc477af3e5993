//! Where on the map the head falls below the aquifer's roof: there the
//! aquifer is no longer confined, and the results no longer hold.
//!
//! The area is measured between the contour of the roof's elevation and the
//! outline. The lowest head is looked for at the grid's nodes and at the rims
//! of the wells: the head has no minimum elsewhere inside an aquifer that loses
//! no water over its area (minimum principle), only on its edges. Where `recharge` is
//! negative the nodes must be fine enough.

use super::flag::Cause;
use super::neighbour::largest;
use super::remedy::{CommonFactor, NewRate, Rates, Remedy, largest_factor};
use super::{Solution, Survey, SurveyError, WellFinding};
use crate::site::Point;

/// Heads against the roof, on the map.
#[derive(Clone, Debug, PartialEq)]
pub struct RoofFinding {
    /// Elevation of the roof, metres.
    pub roof_m: f64,
    /// Area of the map where the head is below it, m².
    pub area_m2: f64,
    /// The lowest head below the roof, metres; none where no head is.
    pub lowest_m: Option<f64>,
    /// The well that draws that place down most.
    pub cause: Option<Cause>,
    /// What would lift the head above the roof at every node and well.
    pub remedy: Remedy,
}

/// A place below the roof.
struct Low {
    at: Point,
    ambient_m: f64,
    drawdown_m: f64,
}

impl Low {
    fn head_m(&self) -> f64 {
        self.ambient_m - self.drawdown_m
    }
}

/// Measures the map against the roof; none where the plan gives no roof.
pub fn finding(
    solution: &Solution,
    wells: &[WellFinding],
    survey: &Survey<'_>,
) -> Result<Option<RoofFinding>, SurveyError> {
    let Some(roof) = solution.site().aquifer.roof else {
        return Ok(None);
    };
    let roof_m = roof.si();
    let lows = lows(solution, wells, survey, roof_m);
    let lowest = lows
        .iter()
        .reduce(|a, b| if b.head_m() < a.head_m() { b } else { a });
    let cause = lowest.and_then(|lowest| cause_at(solution, lowest.at));
    let remedy = match lowest {
        Some(_) => Remedy::new(
            cause.and_then(|cause| alone(solution, &lows, cause.well, roof_m)),
            together(&lows, roof_m),
        ),
        None => Remedy::new(None, None),
    };
    Ok(Some(RoofFinding {
        roof_m,
        area_m2: survey.area_below_m2(roof_m)?,
        lowest_m: lowest.map(Low::head_m),
        cause,
        remedy,
    }))
}

/// The nodes and well rims below the roof.
fn lows(solution: &Solution, wells: &[WellFinding], survey: &Survey<'_>, roof_m: f64) -> Vec<Low> {
    let window = &survey.window;
    let may_be_low = survey
        .head_range_m()
        .is_none_or(|[low_m, _]| low_m < roof_m);
    let heads_m: &[f64] = if may_be_low {
        &survey.at_nodes().heads_m
    } else {
        &[]
    };
    let on_grid = window
        .nodes()
        .zip(heads_m.iter().copied())
        .filter(|&(_, head_m)| head_m < roof_m)
        .map(|(at, head_m)| {
            let ambient_m = solution.ambient_head_m(at);
            Low {
                at,
                ambient_m,
                drawdown_m: ambient_m - head_m,
            }
        });
    let at_wells = wells
        .iter()
        .zip(&solution.site().wells)
        .filter(|(finding, well)| finding.rim_head_m() < roof_m && window.shows(well.at))
        .map(|(finding, well)| Low {
            at: well.at,
            ambient_m: finding.ambient_m,
            drawdown_m: finding.own_m + finding.interference_m,
        });
    on_grid.chain(at_wells).collect()
}

/// The well that draws a place down most.
fn cause_at(solution: &Solution, at: Point) -> Option<Cause> {
    let parts: Vec<f64> = (0..solution.site().wells.len())
        .map(|well| solution.drawdown_by_m(well, at))
        .collect();
    let well = largest(&parts)?;
    Some(Cause {
        well,
        drawdown_m: *parts.get(well)?,
    })
}

/// The rate of one well at which every low place is lifted to the roof.
fn alone(solution: &Solution, lows: &[Low], well: usize, roof_m: f64) -> Option<NewRate> {
    let factor = lows
        .iter()
        .map(|low| {
            let part_m = solution.drawdown_by_m(well, low.at);
            largest_factor(
                part_m,
                0.0,
                low.ambient_m - roof_m - (low.drawdown_m - part_m),
            )
        })
        .try_fold(1.0, |smallest: f64, factor| Some(smallest.min(factor?)))?;
    let rate_m3_d = solution.site().wells.get(well)?.pumping.si();
    Some(NewRate::scaled(well, rate_m3_d, factor))
}

/// The factor on all rates at which every low place is lifted to the roof.
fn together(lows: &[Low], roof_m: f64) -> Option<CommonFactor> {
    let factor = lows
        .iter()
        .map(|low| largest_factor(low.drawdown_m, 0.0, low.ambient_m - roof_m))
        .try_fold(1.0, |smallest: f64, factor| Some(smallest.min(factor?)))?;
    Some(CommonFactor {
        rates: Rates::All,
        factor,
    })
}
