//! Contours and bands, true to the field.

mod fields;
mod outlines;
mod properties;
mod support;
