//! Source: Milne-Thomson (1940), "Hydrodynamical images", Proceedings of the
//! Cambridge Philosophical Society 36, the circle theorem, from memory: a well
//! and a circle of fixed head have one image of opposite sign at the inverse
//! point R²/z̄₀.

use std::f64::consts::FRAC_1_PI;

use mirrorwell::outline::Shape;
use num_complex::Complex64;

use crate::shapes::green;

/// Three logarithms of order 1 at 2 ε.
const TOLERANCE: f64 = 1e-14;

/// s T/Q = (1/2π) ln(|z − R²/z̄₀| · |z₀| / (R |z − z₀|)).
fn by_inverse_point(radius: f64, z: Complex64, well: Complex64) -> f64 {
    let inverse = radius * radius / well.conj();
    let ratio = (z - inverse).norm() * well.norm() / (radius * (z - well).norm());
    ratio.ln() * 0.5 * FRAC_1_PI
}

#[test]
fn a_well_on_an_island_has_its_image_at_the_inverse_point() {
    let island = green(&Shape::Disk { radius_m: 2.0 });
    let (z, well) = (Complex64::new(-0.8, 0.9), Complex64::new(0.5, 0.6));
    let ours = island.value(z, well);
    assert!((ours - by_inverse_point(2.0, z, well)).abs() <= TOLERANCE);
}

#[test]
fn a_well_beside_a_lake_has_its_image_at_the_inverse_point() {
    let lake = green(&Shape::DiskExterior { radius_m: 2.0 });
    let (z, well) = (Complex64::new(2.2, 1.9), Complex64::new(3.5, 0.6));
    let ours = lake.value(z, well);
    assert!((ours - by_inverse_point(2.0, z, well)).abs() <= TOLERANCE);
}

/// Far away the drawdown beside a lake becomes Q/(2πT) ln(|z₀|/R): the lake
/// gives all the water.
#[test]
fn far_from_a_lake_the_drawdown_becomes_that_of_the_distance_ratio() {
    let lake = green(&Shape::DiskExterior { radius_m: 350.0 });
    let well = Complex64::new(700.0, 0.0);
    let ours = lake.value(Complex64::new(0.0, 1e12), well);
    // The next term is of order R|z₀|/|z|² and |z₀|/|z|: 1e-9.
    assert!((ours - 2f64.ln() * 0.5 * FRAC_1_PI).abs() < 1e-9);
}
