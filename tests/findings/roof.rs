//! The area below the roof, against Thiem's formula.

use crate::plans::{found, site, solved};

/// One well in an open plane: s = Q/(2πT) ln(R/r), Thiem (1906). The head
/// falls below a roof b under the ambient head within
/// r = R exp(−2πT b/Q), a circle of area π r².
#[test]
fn the_area_below_the_roof_is_thiem_s_circle() {
    let (rate, transmissivity, radius, below): (f64, f64, f64, f64) = (2000.0, 300.0, 800.0, 2.5);
    let text = format!(
        "[aquifer]\ntransmissivity = {transmissivity}\ninfluence_radius = {radius}\nroof = {}\n\
         [ambient]\nhead = 50.0\nat = [0.0, 0.0]\n\
         [[well]]\nname = \"A\"\nat = [0.0, 0.0]\npumping = {rate}\nradius = 0.2\n",
        50.0 - below
    );
    let solution = solved(site(&text));
    let roof = found(&solution).roof.unwrap();
    let reach = radius * (-std::f64::consts::TAU * transmissivity * below / rate).exp();
    let expected_m2 = std::f64::consts::PI * reach * reach;
    // The contour is a polygon of exact points within the circle.
    assert!(roof.area_m2 < expected_m2 * (1.0 + 1e-9));
    assert!(
        roof.area_m2 > expected_m2 * 0.97,
        "{} {expected_m2}",
        roof.area_m2
    );
    let rim_m = 50.0 - rate / (std::f64::consts::TAU * transmissivity) * (radius / 0.2_f64).ln();
    assert!((roof.lowest_m.unwrap() - rim_m).abs() < 1e-9);
}
