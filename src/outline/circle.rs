//! The polygons that stand for circles while the edges are arranged.
//!
//! A polygon has a vertex wherever another edge or its extension meets the
//! circle, and beside every place near it: what crosses the circle then
//! crosses the polygon there, and what lies inside the one lies inside the
//! other.

use std::f64::consts::TAU;

use super::stroke::TOUCH_M;
use crate::site::{Point, Vector};

/// Corners of the polygon of a circle that nothing meets.
const CORNERS: usize = 180;

/// Angle between its corners.
const STEP_RAD: f64 = TAU / CORNERS as f64;

/// Largest sagitta between two places where something meets the circle within
/// less than a step, metres: below the tolerance for touching.
const SAGITTA_M: f64 = 0.25e-3;

/// A circle of the site.
#[derive(Clone, Copy, Debug)]
pub(super) struct Circle {
    /// Its centre.
    pub centre: Point,
    /// Its radius, metres.
    pub radius_m: f64,
}

/// A straight course that may meet a circle: from a place, along a unit
/// vector, over a length that may be infinite.
#[derive(Clone, Copy, Debug)]
pub(super) struct Course {
    /// Where it begins.
    pub from: Point,
    /// Unit vector along it.
    pub direction: Vector,
    /// Its length, metres.
    pub length_m: f64,
}

impl Circle {
    /// The corners of its polygon, counterclockwise.
    pub fn corners(&self, met: &[f64]) -> Vec<Point> {
        let at = |angle: f64| {
            let (sin, cos) = angle.sin_cos();
            Point::new(
                self.centre.x + self.radius_m * cos,
                self.centre.y + self.radius_m * sin,
            )
        };
        self.angles(met).into_iter().map(at).collect()
    }

    /// The angles where straight courses meet it, or come within 1 mm.
    pub fn met_by_course(&self, course: &Course) -> Vec<f64> {
        let to_centre = self.centre - course.from;
        let along = course.direction.dot(&to_centre);
        let foot = course.from + course.direction * along;
        let height = (self.centre - foot).norm();
        if height > self.radius_m + TOUCH_M {
            return Vec::new();
        }
        let half_squared = (self.radius_m - height) * (self.radius_m + height);
        let half = half_squared.max(0.0).sqrt();
        [along - half, along + half]
            .into_iter()
            .filter(|position| (-TOUCH_M..=course.length_m + TOUCH_M).contains(position))
            .map(|position| self.angle_of(course.from + course.direction * position))
            .collect()
    }

    /// The angles where it meets another circle, or comes within 1 mm of it;
    /// none where the two coincide.
    pub fn met_by_circle(&self, other: &Self) -> Vec<f64> {
        let between = other.centre - self.centre;
        let distance = between.norm();
        let (sum, difference) = (
            self.radius_m + other.radius_m,
            (self.radius_m - other.radius_m).abs(),
        );
        if distance > sum + TOUCH_M || distance < difference - TOUCH_M || distance <= TOUCH_M {
            return Vec::new();
        }
        // Law of cosines at this centre.
        let along = 0.5 * (distance + (self.radius_m - other.radius_m) * sum / distance);
        let half_angle = (along / self.radius_m).clamp(-1.0, 1.0).acos();
        let toward = between.y.atan2(between.x);
        vec![toward - half_angle, toward + half_angle]
    }

    /// The angle of a place that lies so near the circle that a chord might
    /// part the two.
    pub fn met_by_place(&self, place: Point) -> Option<f64> {
        let sagitta_m = self.radius_m * (1.0 - (0.5 * STEP_RAD).cos());
        let off_m = ((place - self.centre).norm() - self.radius_m).abs();
        (off_m <= 2.0 * sagitta_m).then(|| self.angle_of(place))
    }

    fn angle_of(&self, place: Point) -> f64 {
        let outward = place - self.centre;
        outward.y.atan2(outward.x)
    }

    /// The angles of the polygon's corners, increasing.
    fn angles(&self, met: &[f64]) -> Vec<f64> {
        let regular = (0..CORNERS).map(|step| STEP_RAD * step as f64);
        let mut special: Vec<f64> = met.iter().map(|angle| angle.rem_euclid(TAU)).collect();
        special.sort_by(f64::total_cmp);
        special.dedup_by(|next, before| (*next - *before) * self.radius_m <= TOUCH_M);
        let apart = |a: f64, b: f64| {
            let turn = (a - b).rem_euclid(TAU);
            turn.min(TAU - turn)
        };
        if let [first, .., last] = *special.as_slice()
            && apart(first, last) * self.radius_m <= TOUCH_M
        {
            special.pop();
        }
        let following = special.iter().cycle().skip(1);
        let between: Vec<f64> = special
            .iter()
            .zip(following)
            .flat_map(|(&here, &next)| self.between(here, (next - here).rem_euclid(TAU)))
            .collect();
        let is_free = |angle: &f64| {
            let after = special.partition_point(|at| at <= angle);
            let neighbours = [
                special.get(after).or(special.first()),
                special.get(after.wrapping_sub(1)).or(special.last()),
            ];
            let mut near = neighbours.into_iter().flatten();
            near.all(|&at| apart(at, *angle) > 0.5 * STEP_RAD)
        };
        let mut angles: Vec<f64> = regular.filter(is_free).collect();
        angles.extend(between);
        angles.extend(&special);
        angles.sort_by(f64::total_cmp);
        angles
    }

    /// The angles between two places less than a step apart that keep the
    /// polygon near the circle.
    fn between(&self, start: f64, gap: f64) -> Vec<f64> {
        if gap > STEP_RAD || gap == 0.0 {
            return Vec::new();
        }
        let sagitta_m = self.radius_m * (1.0 - (0.5 * gap).cos());
        let parts = (sagitta_m / SAGITTA_M).sqrt().ceil().max(1.0) as usize;
        let angle = |part: usize| (start + gap * part as f64 / parts as f64).rem_euclid(TAU);
        (1..parts).map(angle).collect()
    }
}
