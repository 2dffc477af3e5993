//! What the layers say, against laws and values from elsewhere.

#![allow(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::indexing_slicing,
    reason = "a test that meets something unexpected should fail"
)]

mod boundaries;
mod flow;
mod geopackage;
mod support;
