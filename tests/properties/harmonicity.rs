//! Steady flow without sources is harmonic: the head is the mean of the heads
//! on any circle that holds neither a well nor an edge.
//!
//! The mean of n equally spaced values of a harmonic function on a circle of
//! radius ρ is off by terms of (ρ/d)^n, d being the distance to what makes it
//! (Poisson's formula; trapezoidal rule). With ρ = 0.3 d and n = 24 that is
//! 3e-13 of the strength. Circles of the drawing are ellipses of an anisotropic
//! site. An influence radius cuts cones off, where heads are not harmonic.

use std::f64::consts::TAU;

use num_complex::Complex64;
use proptest::prelude::*;

use crate::HEAD_TOLERANCE_M;
use crate::drawings::{case_of, drawing};

const PLACES_ON_CIRCLE: usize = 24;

proptest! {
    #![proptest_config(crate::cases(150))]

    #[test]
    fn the_head_is_the_mean_of_the_heads_around_it(
        (drawing, setting) in case_of(drawing().prop_filter("no cones cut off", |drawing| {
            drawing.influence_radius_m.is_none()
        })),
    ) {
        let solution = drawing.solve(&setting);
        for &place in &drawing.places {
            let distance_m = drawing
                .distance_to_edges_m(place)
                .min(drawing.distance_to_wells_m(place))
                .min(drawing.size_m);
            // The rims, at most 0.3 m, stretched by at most 12^(1/4).
            if distance_m < 2.0 {
                continue;
            }
            let around = (0..PLACES_ON_CIRCLE).map(|number| {
                let angle = TAU * number as f64 / PLACES_ON_CIRCLE as f64;
                setting.place(place + Complex64::from_polar(0.3 * distance_m, angle))
            });
            let around: Vec<_> = around.collect();
            let mean_m = solution.heads_m(&around).iter().sum::<f64>() / PLACES_ON_CIRCLE as f64;
            let head_m = solution.heads_m(&[setting.place(place)])[0];
            let off_m = (mean_m - head_m).abs();
            prop_assert!(off_m <= HEAD_TOLERANCE_M, "{off_m} m at {place} of {head_m} m");
        }
    }
}
