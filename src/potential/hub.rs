//! A straight side of several panels as seen from afar: as few charges.
//!
//! For places at least [`FAR`] half lengths from its middle, ln|x − y| along a
//! side of length 2h is its polynomial through [`NODES`] Gauss nodes y_c to
//! 1e-15, so that a charge q at t acts as the charges q ℓ_c(t) at them, ℓ_c the
//! Lagrange polynomials.

use num_complex::Complex64;

use super::batch::Circle;
use super::kernel::Source;
use super::legendre::Rule;
use super::mesh::Stretch;
use super::panel::Panel;
use super::region::Side;

/// Number of nodes.
pub(super) const NODES: usize = 16;

/// A place so many half lengths away sees a side as its hub: its ρ is at least
/// 8.66, and 8.66⁻¹⁶ is 1e-15.
const FAR: f64 = 4.4;

/// Sides of fewer panels gain nothing.
const FEWEST_PANELS: usize = 3;

/// The charges of one side.
#[derive(Clone, Debug)]
pub(super) struct Hub {
    /// The side as one panel.
    pub source: Source,
    centre: Complex64,
    far_squared: f64,
    /// For each node of the side's panels, the density it makes at each node here.
    transfer: Vec<[f64; NODES]>,
}

impl Hub {
    /// The hub of a side, if it is straight between two places and has panels
    /// enough.
    pub fn of(side: &Side, stretch: &Stretch, rule: &Rule, hub_rule: &Rule) -> Option<Self> {
        let is_straight = !side.comes_in() && !side.goes_out() && side.curve.c().norm() == 0.0;
        if !is_straight || stretch.panels.len() < FEWEST_PANELS {
            return None;
        }
        let whole = Panel::of_curve(stretch.panels.first()?.side, side.curve);
        let (from, to) = (side.curve.at(0.0), side.curve.at(1.0));
        let far_m = FAR * 0.5 * (to - from).norm();
        let nodes = stretch.panels.iter().flat_map(|panel| {
            let nodes = rule.nodes.iter().zip(&rule.weights);
            nodes.map(|(&t, &weight)| (panel.ends_at(t)[0], weight))
        });
        Some(Self {
            source: Source::new(&whole, hub_rule),
            centre: 0.5 * (from + to),
            far_squared: far_m * far_m,
            transfer: nodes
                .map(|(u, weight)| shares(hub_rule, 2.0 * u - 1.0).map(|share| share * weight))
                .collect(),
        })
    }

    /// Whether a place sees the side as these charges.
    pub fn is_far(&self, x: Complex64) -> bool {
        (x - self.centre).norm_sqr() >= self.far_squared
    }

    /// The circle outside which it is far.
    pub fn near_zone(&self) -> Circle {
        Circle {
            centre: self.centre,
            radius: self.far_squared.sqrt(),
        }
    }

    /// For each node of the side, the density that it makes at each node here.
    pub fn transfer(&self) -> &[[f64; NODES]] {
        &self.transfer
    }

    /// The densities here that stand for those of the side's nodes, so many to a
    /// node.
    pub fn densities(&self, at_nodes: &[f64], count: usize) -> Vec<f64> {
        let mut densities = vec![0.0; NODES * count];
        for (block, shares) in at_nodes.chunks(count).zip(&self.transfer) {
            for (slots, share) in densities.chunks_mut(count).zip(shares) {
                for (slot, density) in slots.iter_mut().zip(block) {
                    *slot += share * density;
                }
            }
        }
        densities
    }
}

/// Density at each node of what a unit charge at t makes.
fn shares(rule: &Rule, t: f64) -> [f64; NODES] {
    let mut shares = [0.0; NODES];
    let each = shares.iter_mut().zip(&rule.weights).enumerate();
    for (node, (share, weight)) in each {
        let unit = (0..NODES).map(|other| f64::from(other == node));
        *share = rule.interpolate(t, unit) / weight;
    }
    shares
}
