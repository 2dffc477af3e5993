//! Rings that stay sound when their positions are rounded.
//!
//! Rounding may lay two sides of a thin part of a polygon on each other.
//! Rounded positions are whole numbers of a step, so the polygon is resolved
//! again in exact integer arithmetic, which leaves sound polygons alone and
//! drops parts that have become lines.

use i_overlay::core::fill_rule::FillRule;
use i_overlay::core::overlay::{ContourDirection, IntOverlayOptions};
use i_overlay::core::simplify::Simplify;
use i_overlay::i_float::int::point::IntPoint;

/// Two coordinates: longitude and latitude, or x and y.
pub type Position = [f64; 2];

/// The integer arithmetic takes differences up to this many steps: 5.4 degrees
/// of 1e-8, or 536 km of millimetres.
const WIDEST: f64 = (1_i64 << 29) as f64;

/// A polygon, a list of closed rings with the exterior counter-clockwise, its
/// positions rounded to so many steps a unit, resolved into polygons that do
/// not cross or touch themselves along a line. A polygon too wide for the
/// arithmetic stays as it is.
pub(super) fn resolved(polygon: Vec<Vec<Position>>, steps: f64) -> Vec<Vec<Vec<Position>>> {
    let Some(&[west, south]) = polygon.first().and_then(|ring| ring.first()) else {
        return Vec::new();
    };
    let origin = [(west * steps).round(), (south * steps).round()];
    let whole = |ring: &Vec<Position>| -> Option<Vec<IntPoint>> {
        let open = ring.iter().take(ring.len().saturating_sub(1));
        open.map(|position| {
            let [x, y] = [0, 1].map(|axis: usize| {
                let (value, zero) = (position.get(axis), origin.get(axis));
                (value.unwrap_or(&0.0) * steps).round() - zero.unwrap_or(&0.0)
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
            (origin[0] + f64::from(point.x)) / steps,
            (origin[1] + f64::from(point.y)) / steps,
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

/// Twice the area within a ring, positive when it runs counter-clockwise.
pub(super) fn signed_area(ring: &[Position]) -> f64 {
    let Some([x0, y0]) = ring.first().copied() else {
        return 0.0;
    };
    ring.iter()
        .zip(ring.iter().skip(1))
        .map(|([ax, ay], [bx, by])| (ax - x0) * (by - y0) - (bx - x0) * (ay - y0))
        .sum()
}

#[cfg(test)]
mod tests {
    use super::*;

    const STEPS: f64 = 1e8;

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
        let polygons = resolved(vec![ring], STEPS);
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
        let polygons = resolved(vec![ring.clone()], STEPS);
        let mut got = polygons[0][0].clone();
        got.sort_by(|a, b| a.partial_cmp(b).unwrap());
        got.dedup();
        let mut expected = ring;
        expected.sort_by(|a, b| a.partial_cmp(b).unwrap());
        expected.dedup();
        assert_eq!(got, expected);
    }

    /// RFC 7946, section 3.1.6: exterior rings are counter-clockwise.
    #[test]
    fn a_counter_clockwise_ring_has_positive_area() {
        let ring = [[0.0, 0.0], [1.0, 0.0], [1.0, 1.0], [0.0, 1.0], [0.0, 0.0]];
        assert!(signed_area(&ring) > 0.0);
    }
}
