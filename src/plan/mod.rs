//! Reads what the user wrote and points at the exact place when it is wrong.

pub mod crs;
