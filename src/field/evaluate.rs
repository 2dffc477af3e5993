//! Heads, drawdowns and slopes at points: in batches, on all cores.

use num_complex::Complex64;
use rayon::prelude::*;

use super::{FieldWell, WellField};
use crate::green::Source;
use crate::site::{Point, Vector};

/// Points that one task evaluates: enough to hide the cost of a task.
const POINTS_A_TASK: usize = 2048;

impl WellField {
    /// Heads, metres, in point order; NaN outside the aquifer. Parallel.
    pub fn heads_m(&self, points: &[Point]) -> Vec<f64> {
        self.evaluate(points, |places| {
            let before_m = self.heads_before_m(places).into_iter();
            let heads = before_m.zip(self.drawdowns_at_m(places));
            heads.map(|(before, drawdown)| before - drawdown).collect()
        })
    }

    /// Drawdowns, metres, positive where the head falls; NaN outside. Parallel.
    pub fn drawdowns_m(&self, points: &[Point]) -> Vec<f64> {
        self.evaluate(points, |places| self.drawdowns_at_m(places))
    }

    /// The head before any pumping, metres; NaN outside.
    pub fn ambient_head_m(&self, point: Point) -> f64 {
        if !self.holds(point) {
            return f64::NAN;
        }
        let z = self.outline.frame.to_canonical(point);
        self.ambient
            .head_m(z, self.green.as_ref(), &self.outline.shape)
    }

    /// Heads before any pumping, metres, in point order; NaN outside. Parallel.
    pub fn ambient_heads_m(&self, points: &[Point]) -> Vec<f64> {
        self.evaluate(points, |places| self.heads_before_m(places))
    }

    /// Gradient of the head, metres a metre; NaN outside the aquifer, zero
    /// within a well's rim.
    pub fn head_gradient(&self, point: Point) -> Vector {
        if !self.holds(point) {
            return Vector::repeat(f64::NAN);
        }
        let z = self.outline.frame.to_canonical(point);
        if self
            .wells
            .iter()
            .any(|well| (z - well.pole).norm() < well.rim_m)
        {
            return Vector::zeros();
        }
        let step_m = 1e-3 * self.outline.distance_to_edge_m(point);
        let before = self.ambient.gradient(z, self.green.as_ref(), step_m);
        let pumped = self.green.superposed_gradient(&self.sources(), z);
        self.outline.frame.gradient_to_site(before - pumped)
    }

    /// Flow of water through the aquifer's whole thickness, m³/d for each
    /// metre of width across it: −T·∇h, T the tensor of an anisotropic
    /// aquifer. NaN outside the aquifer, zero within a well's rim.
    pub fn flow_m2_d(&self, point: Point) -> Vector {
        let gradient = self.head_gradient(point);
        let stretch = &self.outline.frame.stretch;
        stretch.conductivity_over_mean(gradient) * -self.transmissivity_m2_d
    }

    /// The wells as Green's functions see them.
    fn sources(&self) -> Vec<Source> {
        let source = |well: &FieldWell| Source {
            pole: well.pole,
            strength_m: self.strength_m(well),
            rim_m: well.rim_m,
        };
        self.wells.iter().map(source).collect()
    }

    /// Heads before any pumping at canonical places of the aquifer.
    fn heads_before_m(&self, places: &[Complex64]) -> Vec<f64> {
        let (green, shape) = (self.green.as_ref(), &self.outline.shape);
        self.ambient.heads_m(places, green, shape)
    }

    /// Σ Q/T G at canonical places of the aquifer.
    fn drawdowns_at_m(&self, places: &[Complex64]) -> Vec<f64> {
        let at_datum: f64 = self
            .wells
            .iter()
            .map(|well| self.strength_m(well) * self.green_at_datum(well))
            .sum();
        let mut drawdowns_m = vec![-at_datum; places.len()];
        self.green
            .superpose(&self.sources(), places, &mut drawdowns_m);
        drawdowns_m
    }

    /// What `values` makes of the canonical places of those points that lie in
    /// the aquifer, in point order; NaN elsewhere. Parallel.
    fn evaluate(
        &self,
        points: &[Point],
        values: impl Fn(&[Complex64]) -> Vec<f64> + Sync,
    ) -> Vec<f64> {
        let places: Vec<Option<Complex64>> = points
            .par_iter()
            .with_min_len(POINTS_A_TASK)
            .map(|point| {
                self.holds(*point)
                    .then(|| self.outline.frame.to_canonical(*point))
            })
            .collect();
        // The general solver shares its work out itself, by where places are.
        let points_a_task = match self.outline.boundary {
            Some(_) => points.len().max(1),
            None => POINTS_A_TASK,
        };
        let mut all = vec![f64::NAN; points.len()];
        places
            .par_chunks(points_a_task)
            .zip(all.par_chunks_mut(points_a_task))
            .for_each(|(places, all)| {
                let held: Vec<_> = places.iter().copied().flatten().collect();
                let slots = all.iter_mut().zip(places);
                let slots = slots.filter(|(_, place)| place.is_some());
                for ((slot, _), value) in slots.zip(values(&held)) {
                    *slot = value;
                }
            });
        all
    }
}
