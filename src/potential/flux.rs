//! The flux of a solution through parts of its sides.
//!
//! The slope of the panels' potential at the nodes is integrated with their
//! Gauss rule; that of poles is the angle under which they see the part, in
//! closed form.

use std::f64::consts::TAU;
use std::ops::Range;

use num_complex::Complex64;

use super::curve::Curve;
use super::mesh::Panel;
use super::solve::Solution;

impl Solution {
    /// ∫ ∂u/∂n dl of each problem through the part of a side between two of
    /// its parameters, n pointing out of the region. Not finite where a jump of
    /// the head makes it so.
    pub fn outflows(&self, side: usize, along: Range<f64>) -> Vec<f64> {
        let count = self.densities.count;
        let mut sums = vec![0.0; count];
        if self.region.sides().get(side).is_none() {
            return sums;
        }
        let order = self.system.mesh.rule.order();
        let places = self.system.nodes().chunks(order);
        let slopes = self.node_slopes.chunks(order * count);
        for ((panel, places), slopes) in self.system.mesh.panels.iter().zip(places).zip(slopes) {
            if panel.side != side {
                continue;
            }
            let weights = self.weights_within(panel, &along);
            let nodes = slopes.chunks(count).zip(places).zip(&weights);
            for ((slopes, place), weight) in nodes.filter(|(_, weight)| **weight != 0.0) {
                let parts = sums.iter_mut().zip(slopes).zip(&self.posed);
                for ((sum, slope), posed) in parts {
                    *sum += weight * (slope + posed.slope_without_poles(&self.region, place));
                }
            }
        }
        if let Some(side) = self.region.sides().get(side) {
            for (sum, posed) in sums.iter_mut().zip(&self.posed) {
                for (pole, strength) in posed.poles() {
                    *sum -= strength * angle(&side.curve, &along, *pole) / TAU;
                }
            }
        }
        sums
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
