//! What the program computes against numbers from outside it: published
//! tables and formulas, and values of general-purpose libraries kept in
//! `tests/references/` with the scripts that made them. One file a source.

#![allow(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::panic,
    clippy::indexing_slicing,
    reason = "a test fails by panic"
)]

mod dlmf;
mod ferris_1962;
mod milne_thomson_1940;
mod projections;
mod reference_tables;
mod shapes;
mod table;
