//! Rings that stay sound when their positions are rounded.
//!
//! Rounding to 8 decimals may lay two sides of a thin part of a polygon on
//! each other. Positions are whole numbers of 1e-8 degrees, so the polygon is
//! resolved again in exact integer arithmetic, which leaves sound polygons
//! alone and drops parts that have become lines.

use i_overlay::core::fill_rule::FillRule;
use i_overlay::core::overlay::{ContourDirection, IntOverlayOptions};
use i_overlay::core::simplify::Simplify;
use i_overlay::i_float::int::point::IntPoint;

use super::geojson::Position;

/// Positions a degree: 8 decimals.
pub(super) const STEPS: f64 = 1e8;

/// The integer arithmetic takes differences up to this many steps, 5.4 degrees.
const WIDEST: f64 = (1_i64 << 29) as f64;

/// Polygons, each a list of closed rings of rounded positions with exteriors
/// counter-clockwise, resolved into polygons that do not cross or touch
/// themselves along a line. A polygon too wide for the arithmetic stays as
/// it is.
pub(super) fn resolved(polygon: Vec<Vec<Position>>) -> Vec<Vec<Vec<Position>>> {
    let Some(&[west, south]) = polygon.first().and_then(|ring| ring.first()) else {
        return Vec::new();
    };
    let origin = [(west * STEPS).round(), (south * STEPS).round()];
    let whole = |ring: &Vec<Position>| -> Option<Vec<IntPoint>> {
        let open = ring.iter().take(ring.len().saturating_sub(1));
        open.map(|position| {
            let [x, y] = [0, 1].map(|axis: usize| {
                let (value, zero) = (position.get(axis), origin.get(axis));
                (value.unwrap_or(&0.0) * STEPS).round() - zero.unwrap_or(&0.0)
            });
            let fits = x.abs() < WIDEST && y.abs() < WIDEST;
            fits.then(|| IntPoint::new(x as i32, y as i32))
        })
        .collect()
    };
    let Some(rings) = polygon.iter().map(whole).collect::<Option<Vec<_>>>() else {
        return vec![polygon];
    };
    let options = IntOverlayOptions {
        preserve_input_collinear: true,
        output_direction: ContourDirection::CounterClockwise,
        preserve_output_collinear: true,
        min_output_area: 0,
        ogc: true,
    };
    let back = |point: &IntPoint| {
        [
            (origin[0] + f64::from(point.x)) / STEPS,
            (origin[1] + f64::from(point.y)) / STEPS,
        ]
    };
    let closed = |ring: &Vec<IntPoint>| -> Vec<Position> {
        ring.iter().chain(ring.first()).map(back).collect()
    };
    rings
        .simplify(FillRule::NonZero, options)
        .iter()
        .map(|shape| shape.iter().map(closed).collect())
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_ring_that_runs_out_and_straight_back_loses_that_part() {
        let ring = [
            [0, 0],
            [40, 0],
            [40, 40],
            [20, 40],
            [20, 90],
            [20, 40],
            [0, 40],
            [0, 0],
        ];
        let ring = ring
            .map(|position| position.map(|step| f64::from(step) / STEPS))
            .to_vec();
        let polygons = resolved(vec![ring]);
        let [polygon] = polygons.as_slice() else {
            panic!("one polygon, not {}", polygons.len());
        };
        assert!(polygon[0].iter().all(|[_, y]| *y <= 40.0 / STEPS));
    }

    #[test]
    fn a_sound_polygon_keeps_its_positions() {
        let ring = [[0, 0], [20, 0], [40, 0], [40, 40], [0, 40], [0, 0]];
        let ring = ring
            .map(|position| position.map(|step| f64::from(step) / STEPS))
            .to_vec();
        let polygons = resolved(vec![ring.clone()]);
        let mut got = polygons[0][0].clone();
        got.sort_by(|a, b| a.partial_cmp(b).unwrap());
        got.dedup();
        let mut expected = ring;
        expected.sort_by(|a, b| a.partial_cmp(b).unwrap());
        expected.dedup();
        assert_eq!(got, expected);
    }
}
