//! Which strokes count as parallel.
//!
//! Lines drawn by hand or rounded to a file's digits are never parallel to
//! the last bit. Two strokes have the same heading when turning one to the
//! other moves no place within the plan's extent by more than 1 mm. Headings
//! are ranges of angle, each no wider than that, found from the sorted angles.

use std::f64::consts::PI;

use super::stroke::Stroke;

/// Gives every stroke its heading; `tolerance_rad` is the width of one.
pub(super) fn assign(strokes: &mut [Stroke], tolerance_rad: f64) {
    let mut angles: Vec<(f64, usize)> = strokes
        .iter()
        .enumerate()
        .map(|(index, stroke)| (axis_angle(stroke), index))
        .collect();
    angles.sort_by(|a, b| a.0.total_cmp(&b.0));
    rotate_to_widest_gap(&mut angles);
    let mut heading = 0;
    let mut first: Option<f64> = None;
    for (angle, index) in angles {
        let start = *first.get_or_insert(angle);
        if (angle - start).rem_euclid(PI) > tolerance_rad && angle != start {
            heading += 1;
            first = Some(angle);
        }
        if let Some(stroke) = strokes.get_mut(index) {
            stroke.heading = heading;
        }
    }
}

/// Angle of the stroke's line, from 0 up to π.
fn axis_angle(stroke: &Stroke) -> f64 {
    let angle = stroke.direction.y.atan2(stroke.direction.x).rem_euclid(PI);
    if angle >= PI { 0.0 } else { angle }
}

/// Starts the cycle of angles where no heading can straddle its ends.
fn rotate_to_widest_gap(angles: &mut [(f64, usize)]) {
    let before = angles.iter().cycle().skip(angles.len().saturating_sub(1));
    let widest = angles
        .iter()
        .zip(before)
        .map(|(here, previous)| (here.0 - previous.0).rem_euclid(PI))
        .enumerate()
        .max_by(|a, b| a.1.total_cmp(&b.1));
    if let Some((start, _)) = widest {
        angles.rotate_left(start);
    }
}
