//! Contours and bands, true to the field.

#![allow(
    clippy::unwrap_used,
    clippy::panic,
    clippy::indexing_slicing,
    reason = "what tests share fails loudly too"
)]

mod bends;
mod fields;
mod outlines;
mod properties;
mod support;
