//! Tests of `src/outline`: what shapes are found, how ends are carried on,
//! what is refused, and laws that hold for every place and direction.
//!
//! Expected values are elementary geometry, worked out by hand beside each
//! check.

mod areas;
mod extensions;
mod laws;
mod placements;
mod plans;
mod refusals;
mod shapes;
