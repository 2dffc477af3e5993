//! The report: what stands on the page, and that nothing from outside breaks
//! it. How it looks and behaves is checked in `references/browser`.

#![allow(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::indexing_slicing,
    reason = "a test that meets something unexpected should fail"
)]

mod contents;
mod general;
mod large;
mod names;
mod soundness;
mod support;
