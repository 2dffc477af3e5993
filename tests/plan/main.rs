//! What the plan file means, and how a plan that is wrong is refused.

#![allow(
    clippy::expect_used,
    clippy::indexing_slicing,
    clippy::panic,
    clippy::unwrap_used,
    reason = "a test that fails may panic"
)]

mod support;

mod aquifer_values;
mod contract;
mod diagnostics;
mod faults;
mod frame;
mod layer_faults;
mod layers;
mod limits;
mod schema;
mod spans;
mod unit_tables;
