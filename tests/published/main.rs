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
mod general_tables;
mod glover_balmer_1954;
mod hantush_1965;
mod kruseman_de_ridder_1990;
mod milne_thomson_1940;
mod mounds;
mod muskat_1937;
mod newsom_wilson_1988;
mod nist_sp_811;
mod plans;
mod projections;
mod reference_tables;
mod shapes;
mod table;
mod thiem_1906;
mod timoshenko_goodier_1951;
mod walton_1962;
