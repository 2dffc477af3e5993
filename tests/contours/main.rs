//! Contours and bands, true to the field.

#![allow(
    clippy::unwrap_used,
    clippy::panic,
    clippy::indexing_slicing,
    reason = "helpers of tests fail loudly"
)]

mod fields;
mod outlines;
mod properties;
mod support;
