//! Superposes wells on the ambient head; evaluates points and grids in
//! parallel and in batches.

use crate::outline::Outline;
use crate::site::{Point, Refusal, Site, Vector};

/// The heads of one aquifer with its wells.
pub struct WellField {}

#[allow(unused_variables)]
impl WellField {
    /// Solves one aquifer.
    ///
    /// # Errors
    /// Where no steady state exists, or the ambient head contradicts the
    /// edges; the refusal says which numbers disagree and what would help.
    pub fn solve(site: &Site, outline: Outline) -> Result<Self, Vec<Refusal>> {
        Ok(Self {})
    }

    /// The outline it was solved on.
    pub fn outline(&self) -> &Outline {
        unimplemented!()
    }

    /// Whether a point lies in this aquifer or on its edge.
    pub fn holds(&self, point: Point) -> bool {
        unimplemented!()
    }

    /// Heads, metres, in point order; NaN outside the aquifer. Parallel.
    pub fn heads_m(&self, points: &[Point]) -> Vec<f64> {
        unimplemented!()
    }

    /// Drawdowns, metres, positive where the head falls; NaN outside. Parallel.
    pub fn drawdowns_m(&self, points: &[Point]) -> Vec<f64> {
        unimplemented!()
    }

    /// The head before any pumping, metres; NaN outside.
    pub fn ambient_head_m(&self, point: Point) -> f64 {
        unimplemented!()
    }

    /// Gradient of the head, metres a metre.
    pub fn head_gradient(&self, point: Point) -> Vector {
        unimplemented!()
    }

    /// Drawdown, metres, that the well `Site::wells[well]` of this aquifer
    /// causes at a point; its own rim's drawdown within its rim. Well loss is
    /// left out.
    pub fn drawdown_by_m(&self, well: usize, point: Point) -> f64 {
        unimplemented!()
    }

    /// Drawdown at `point` by each m³/d that `well` pumps: G/T, d/m².
    pub fn unit_drawdown_by(&self, well: usize, point: Point) -> f64 {
        unimplemented!()
    }

    /// The well's own drawdown at its rim, metres, well loss left out:
    /// Q/(2πT) ln(1/r_w) + Q/T · R.
    pub fn own_drawdown_m(&self, well: usize) -> f64 {
        unimplemented!()
    }

    /// Water that edge `Site::edges[edge]` gives to well `Site::wells[well]`,
    /// m³/d; negative for an injecting well.
    pub fn inflow_m3_d(&self, edge: usize, well: usize) -> f64 {
        unimplemented!()
    }

    /// A bound on the rounding error of a head, metres.
    pub fn error_bound_m(&self) -> f64 {
        unimplemented!()
    }

    /// How it was computed, in a few words: "image wells in closed form".
    pub fn method(&self) -> &'static str {
        unimplemented!()
    }

    /// What the reader should know of this solution: assumptions made where
    /// the plan was silent.
    pub fn notes(&self) -> &[String] {
        unimplemented!()
    }

    /// The nearest images of a well in site coordinates, nearest first, with
    /// sign (±1) and order; at most `count`.
    pub fn images(&self, well: usize, count: usize) -> Vec<(Point, f64, u32)> {
        unimplemented!()
    }
}
