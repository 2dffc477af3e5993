//! Finds where a field takes given values on many segments at once.
//!
//! Method: Chandrupatla's bracketing search, inverse quadratic interpolation
//! where it is safe and bisection elsewhere, one step of all searches for each
//! batch of field values. Departure: the first step is linear interpolation,
//! which is close on a fine mesh.
//! Accuracy: ends when the value is within the tolerance, or the bracket below
//! 1e-9 m.
//! Source: Chandrupatla (1997), A new hybrid quadratic/bisection algorithm for
//! finding the zero of a nonlinear function without using derivatives,
//! Advances in Engineering Software 28(3), 145–149; from memory.

use super::{ContourError, ScalarField, evaluate};
use crate::site::Point;

/// Brackets shorter than this are points, metres.
const LEAST_BRACKET_M: f64 = 1e-9;

/// Bisection alone would need 64 steps for 1e10 m; this is twice that.
const MOST_STEPS: usize = 128;

/// One search on a segment; positions are shares of its length.
#[derive(Clone, Copy, Debug)]
pub(super) struct Search {
    from: Point,
    to: Point,
    level: f64,
    /// Latest place, the other end of the bracket, and the place before.
    places: [f64; 3],
    /// Value less level at those places.
    misses: [f64; 3],
    /// Where to look next; in the end, the answer.
    pub(super) place: f64,
    /// Value less level at the answer.
    miss: f64,
    done: bool,
}

impl Search {
    /// A search for a level between two places of a segment, the value below
    /// the level at the first and above it at the second.
    ///
    /// A value that rounding has put on the wrong side ends the search at its
    /// place.
    pub(super) fn new(segment: [Point; 2], level: f64, places: [f64; 2], values: [f64; 2]) -> Self {
        let [from, to] = segment;
        let [low, high] = values.map(|value| value - level);
        let [start, end] = places;
        let mut search = Self {
            from,
            to,
            level,
            places: [start, end, end],
            misses: [low, high, high],
            place: start,
            miss: low,
            done: true,
        };
        if low >= 0.0 {
            return search;
        }
        if high <= 0.0 {
            search.place = end;
            search.miss = high;
            return search;
        }
        let share = (low / (low - high)).clamp(1e-6, 1.0 - 1e-6);
        search.place = start + (end - start) * share;
        search.done = false;
        search
    }

    /// Where on the segment the answer is.
    pub(super) fn point(&self, place: f64) -> Point {
        self.from + (self.to - self.from) * place
    }

    /// Length of the segment, metres.
    pub(super) fn length_m(&self) -> f64 {
        nalgebra::distance(&self.from, &self.to)
    }

    /// The value found at the answer.
    pub(super) fn value(&self) -> f64 {
        self.level + self.miss
    }

    /// Takes in the value at `place` and chooses where to look next.
    fn step(&mut self, value: f64, tolerance: f64) {
        let miss = value - self.level;
        let [x1, x2, _] = self.places;
        let [f1, f2, _] = self.misses;
        let (x, f) = (self.place, miss);
        (self.places, self.misses) = if (f > 0.0) == (f1 > 0.0) {
            ([x, x2, x1], [f, f2, f1])
        } else {
            ([x, x1, x2], [f, f1, f2])
        };
        self.miss = miss;
        let [x1, x2, _] = self.places;
        let bracket_m = (x1 - x2).abs() * self.length_m();
        if miss.abs() <= tolerance || bracket_m <= LEAST_BRACKET_M {
            self.done = true;
            return;
        }
        self.place = x1 + self.share() * (x2 - x1);
    }

    /// Where in the bracket to look next, as a share of it.
    fn share(&self) -> f64 {
        let [x1, x2, x3] = self.places;
        let [f1, f2, f3] = self.misses;
        let xi = (x1 - x2) / (x3 - x2);
        let phi = (f1 - f2) / (f3 - f2);
        // Where the points allow it, the inverse parabola through them stays
        // inside the bracket. What is no number fails the comparison.
        if phi * phi < xi && (1.0 - phi) * (1.0 - phi) < 1.0 - xi {
            let alpha = (x3 - x1) / (x2 - x1);
            let share =
                f1 / (f2 - f1) * (f3 / (f2 - f3)) + alpha * (f1 / (f3 - f1)) * (f2 / (f3 - f2));
            if share > 0.0 && share < 1.0 {
                return share.clamp(1e-6, 1.0 - 1e-6);
            }
        }
        0.5
    }
}

/// Runs all searches to their end.
pub(super) fn solve(
    searches: &mut [Search],
    field: &dyn ScalarField,
    tolerance: f64,
) -> Result<(), ContourError> {
    for _ in 0..MOST_STEPS {
        let mut waiting: Vec<&mut Search> = searches.iter_mut().filter(|s| !s.done).collect();
        if waiting.is_empty() {
            return Ok(());
        }
        let points: Vec<Point> = waiting.iter().map(|s| s.point(s.place)).collect();
        let values = evaluate(field, &points)?;
        for (search, value) in waiting.iter_mut().zip(values) {
            search.step(value, tolerance);
        }
    }
    Ok(())
}

#[cfg(test)]
mod tests {
    use super::*;

    struct AlongX<F>(F);

    impl<F: Fn(f64) -> f64 + Sync> ScalarField for AlongX<F> {
        fn values(&self, points: &[Point]) -> Vec<f64> {
            points.iter().map(|point| (self.0)(point.x)).collect()
        }
    }

    fn root(f: impl Fn(f64) -> f64 + Sync, from: f64, to: f64, level: f64) -> (f64, usize) {
        let count = std::sync::atomic::AtomicUsize::new(0);
        let field = AlongX(|x| {
            count.fetch_add(1, std::sync::atomic::Ordering::Relaxed);
            f(x)
        });
        let segment = [Point::new(from, 0.0), Point::new(to, 0.0)];
        let mut search = [Search::new(segment, level, [0.0, 1.0], [f(from), f(to)])];
        solve(&mut search, &field, 1e-10).unwrap();
        (search[0].point(search[0].place).x, count.into_inner())
    }

    /// Roots in closed form: e², 2^(1/3), and the jump itself.
    #[test]
    fn searches_end_at_roots_known_in_closed_form() {
        let (x, steps) = root(f64::ln, 1e-3, 1e3, 2.0);
        approx::assert_relative_eq!(x, 2f64.exp(), max_relative = 1e-9);
        assert!(steps < 30, "{steps}");
        let (x, steps) = root(|x| x.powi(3), 0.0, 3.0, 2.0);
        approx::assert_relative_eq!(x, 2f64.cbrt(), max_relative = 1e-9);
        assert!(steps < 15, "{steps}");
        let (x, _) = root(|x| if x < 0.7 { -1.0 } else { 5.0 }, 0.0, 1.0, 0.0);
        approx::assert_abs_diff_eq!(x, 0.7, epsilon = 2e-9);
    }
}
