//! Coordinates of the plan's grid around a map.

use std::fmt::Write as _;

use super::canvas::{Canvas, INK};
use crate::layers::words::grouped;
use crate::plan::Plan;
use crate::site::{Extent, Point};

/// Distance of two ticks, pixels, at least.
const CLOSEST: f64 = 110.0;
/// Half the width of a coordinate, pixels, roughly.
const ROOM: f64 = 32.0;
/// Length of a tick, pixels.
const LENGTH: f64 = 6.0;

/// Ticks at round coordinates below and left of the map, as SVG in the map's
/// own pixels.
pub fn ticks(canvas: &Canvas, plan: &Plan, extent: Extent) -> String {
    let [width, height] = canvas.size();
    let (west, south) = plan.to_plan_xy(extent.min);
    let (east, north) = plan.to_plan_xy(extent.max);
    let step = round_step((east - west) * CLOSEST / width);
    let mut svg = String::new();
    for x in multiples(west, east, step) {
        let [at, _] = canvas.place(plan.to_site(x, south));
        let _ = write!(
            svg,
            "<path d=\"M{at:.1} {height:.1}v{LENGTH}M{at:.1} 0v-{LENGTH}\" stroke=\"{INK}\"/>",
        );
        if has_room(at, width) {
            let _ = write!(
                svg,
                "<text x=\"{at:.1}\" y=\"{:.1}\" text-anchor=\"middle\">{}</text>",
                height + LENGTH + 13.0,
                coordinate(x)
            );
        }
    }
    for y in multiples(south, north, step) {
        let [_, at]: [f64; 2] = canvas.place(plan.to_site(west, y));
        let _ = write!(
            svg,
            "<path d=\"M0 {at:.1}h-{LENGTH}M{width:.1} {at:.1}h{LENGTH}\" stroke=\"{INK}\"/>",
        );
        if has_room(at, height) {
            let _ = write!(
                svg,
                "<text transform=\"translate({:.1} {at:.1}) rotate(-90)\" text-anchor=\"middle\">{}</text>",
                -LENGTH - 5.0,
                coordinate(y)
            );
        }
    }
    svg
}

/// Whether a coordinate has room at a tick: at a corner it would be cut.
fn has_room(at: f64, length: f64) -> bool {
    (ROOM..=length - ROOM).contains(&at)
}

/// A place of the site on the map, for scripts: the plan's coordinates of the
/// upper left corner and the plan's units a pixel.
pub fn frame_of(canvas: &Canvas, plan: &Plan, extent: Extent) -> [f64; 3] {
    let (x, y) = plan.to_plan_xy(Point::new(extent.min.x, extent.max.y));
    let (east, _) = plan.to_plan_xy(extent.max);
    [x, y, (east - x) / canvas.size()[0]]
}

/// The least of 1, 2, 5 × 10^k that is no smaller.
pub fn round_step(least: f64) -> f64 {
    let power = 10_f64.powf(least.log10().floor());
    [1.0, 2.0, 5.0]
        .into_iter()
        .map(|step| step * power)
        .find(|&step| step >= least)
        .unwrap_or(10.0 * power)
}

/// The multiples of a step between two values.
pub fn multiples(from: f64, to: f64, step: f64) -> impl Iterator<Item = f64> {
    // Truncation is meant: a map has some ten ticks.
    let (first, last) = ((from / step).ceil() as i64, (to / step).floor() as i64);
    (first..=last).map(move |count| count as f64 * step)
}

/// A coordinate with its thousands set apart.
fn coordinate(value: f64) -> String {
    let round = (value * 1e6).round() / 1e6;
    grouped(&format!("{round}").replace('-', "−"))
}

#[cfg(test)]
mod tests {
    use super::*;

    /// By hand.
    #[test]
    fn ticks_stand_at_round_coordinates() {
        assert_eq!(round_step(130.0), 200.0);
        assert_eq!(round_step(0.6), 1.0);
        let ticks: Vec<f64> = multiples(411_250.0, 412_300.0, 500.0).collect();
        assert_eq!(ticks, [411_500.0, 412_000.0]);
        assert_eq!(coordinate(-412_000.0), "−412,000");
    }
}
