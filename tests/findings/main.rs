//! Tests of `src/findings`: laws that hold for every plan, and closed forms.

#![allow(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::indexing_slicing,
    reason = "a test that meets something unexpected should fail"
)]

mod accuracy;
mod ambient_flow;
mod awkward_outlines;
mod exchange;
mod inflow;
mod near_edges;
mod plans;
mod remedies;
mod roof;
mod splits;
mod worst;
