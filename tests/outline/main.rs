//! Tests of `src/outline`: what shapes are found, how ends are carried on,
//! what is refused, and laws that hold for every place and direction.
//!
//! Expected values are elementary geometry, worked out by hand beside each
//! check.

#![expect(
    clippy::panic,
    clippy::expect_used,
    clippy::unwrap_used,
    clippy::indexing_slicing,
    reason = "a test stops where its plan is not what it expects"
)]

mod areas;
mod extensions;
mod general;
mod general_laws;
mod laws;
mod placements;
mod plans;
mod refusals;
mod shapes;
