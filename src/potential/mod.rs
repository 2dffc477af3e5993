//! Harmonic functions in regions of any outline, with a proven bound on their
//! error.

mod batch;
mod curve;
mod flux;
mod kernel;
mod layer;
mod legendre;
mod mesh;
mod problem;
mod region;
mod solve;
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
