//! Harmonic functions in regions of any outline, with a proven bound on their
//! error.

mod assembly;
mod batch;
mod comparison;
mod curve;
mod cut;
mod flux;
mod hub;
mod kernel;
mod layer;
mod legendre;
mod mesh;
mod panel;
mod problem;
mod region;
mod solve;
mod span;
mod system;
mod taper;

pub use batch::RimmedPole;
pub use curve::Curve;
pub use layer::Layer;
pub use problem::Problem;
pub use region::{Condition, Region, Side};
pub use solve::Solution;

#[cfg(test)]
mod tests;
