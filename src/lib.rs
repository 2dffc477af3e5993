//! Plans groundwater well fields before anything is drilled.
//!
//! Data goes one way: plan → outline → green → field → findings → layers.
//! `site` is the problem as physics sees it and knows nothing of the others.

pub mod commands;
pub mod contours;
pub mod field;
pub mod findings;
pub mod green;
pub mod layers;
pub mod outline;
pub mod plan;
pub mod potential;
pub mod report;
pub mod site;
