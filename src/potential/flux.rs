//! The flux of a solution through parts of its sides.
//!
//! The slope of the panels' potential at the nodes is integrated with their
//! Gauss rule; that of poles is the angle under which they see the part, in
//! closed form.

use std::f64::consts::TAU;
use std::ops::Range;

use num_complex::Complex64;

use super::curve::Curve;
use super::panel::Panel;
use super::solve::Solution;

impl Solution {
    /// ∫ ∂u/∂n dl of a problem through the part of a side between two of its
    /// parameters, n pointing out of the region; none for what does not
    /// exist. Where a jump of the head touches the part, the true flux is
    /// infinite and so is this.
    pub fn outflow(&self, problem: usize, side: usize, along: Range<f64>) -> Option<f64> {
        let posed = self.posed.get(problem)?;
        let curve = self.region.sides().get(side)?.curve;
        if posed.jumps_within(&self.region, side, &along) {
            return Some(f64::INFINITY);
        }
        let of_panels: f64 = (self.system.mesh.panels().enumerate())
            .filter(|(_, panel)| panel.side == side)
            .map(|(index, panel)| self.outflow_of_panel(problem, index, panel, &along))
            .sum();
        let poles = posed.poles().iter();
        let of_poles: f64 = poles
            .map(|(pole, strength)| strength * angle(&curve, &along, *pole) / TAU)
            .sum();
        Some(of_panels - of_poles)
    }

    /// The parameter of a place on a side, 0 to 1.
    pub fn parameter(&self, side: usize, x: Complex64) -> f64 {
        let side = self.region.sides().get(side);
        side.map_or(0.0, |side| {
            if x.is_finite() {
                side.curve.parameter(x).re.clamp(0.0, 1.0)
            } else {
                f64::from(side.goes_out())
            }
        })
    }

    /// The same without poles, through what a panel has of the range.
    fn outflow_of_panel(
        &self,
        problem: usize,
        index: usize,
        panel: &Panel,
        along: &Range<f64>,
    ) -> f64 {
        let order = self.system.mesh.rule.order();
        let count = self.densities.count;
        let nodes = self.system.nodes().iter().skip(index * order);
        let slopes = self
            .node_slopes
            .iter()
            .skip(index * order * count + problem);
        let weights = self.weights_within(panel, along);
        let parts = weights.iter().zip(nodes).zip(slopes.step_by(count));
        parts
            .map(|((weight, place), slope)| {
                let known = self
                    .posed
                    .get(problem)
                    .map_or(0.0, |posed| posed.slope_without_poles(&self.region, place));
                weight * (slope + known)
            })
            .sum()
    }

    /// The weights with which a panel's nodes integrate its part of a range.
    fn weights_within(&self, panel: &Panel, along: &Range<f64>) -> Vec<f64> {
        let rule = &self.system.mesh.rule;
        let counted = |s: f64| if panel.is_reversed { 1.0 - s } else { s };
        let ends = [panel.t(counted(along.start)), panel.t(counted(along.end))];
        let from = ends[0].min(ends[1]).clamp(-1.0, 1.0);
        let to = ends[0].max(ends[1]).clamp(-1.0, 1.0);
        if from == -1.0 && to == 1.0 {
            return rule.weights.clone();
        }
        let parts = rule.integrals_to(to).into_iter();
        parts
            .zip(rule.integrals_to(from))
            .map(|(upper, lower)| upper - lower)
            .collect()
    }
}

/// The angle by which the direction from a place of the region to a part of a
/// side turns.
fn angle(curve: &Curve, along: &Range<f64>, place: Complex64) -> f64 {
    let seen = curve.parameter(place);
    let turn = |from: Complex64, to: Complex64| {
        let ratio = to / from;
        if ratio.is_finite() { ratio.arg() } else { 0.0 }
    };
    let of_parameter = turn(along.start - seen, along.end - seen);
    let of_curve = if curve.c().norm() == 0.0 {
        0.0
    } else {
        turn(curve.below(along.start), curve.below(along.end))
    };
    of_parameter - of_curve
}
