//! What a user sees of each command: success and refusal, as snapshots.
//!
//! The snapshots hold what the program printed when a person last looked at
//! it; numbers in them are checked against sources elsewhere (`published`,
//! `properties`).

#![allow(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::indexing_slicing,
    reason = "a test that meets something unexpected should fail"
)]

mod bad_input;
mod check;
mod files;
mod heads;
mod help;
mod layers;
mod outputs;
mod run;
mod support;
