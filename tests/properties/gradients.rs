//! The gradient of the head is what heads differ by over a small step.
//!
//! A central difference over h = d/1000, d being the distance to wells and
//! edges, misses a harmonic gradient of size g by g (h/d)² = 1e-6 g; heads of
//! 80 m carry 1e-13 m, which over h ≥ 2e-3 m is 1e-10.

use mirrorwell::site::Vector;
use proptest::prelude::*;

use crate::drawings::{case_of, drawing};

proptest! {
    #![proptest_config(crate::cases(150))]

    #[test]
    fn the_gradient_is_what_heads_differ_by(
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
            // Off the rims, at most 0.3 m, stretched by at most 12^(1/4).
            if distance_m < 2.0 {
                continue;
            }
            let point = setting.place(place);
            // The drawing's distance may be shortened by 12^(1/4) in the site.
            let step_m = 5e-4 * distance_m * setting.scale;
            let difference = |axis: Vector| {
                let heads_m = solution.heads_m(&[point + axis * step_m, point - axis * step_m]);
                (heads_m[0] - heads_m[1]) / (2.0 * step_m)
            };
            let expected = Vector::new(difference(Vector::x()), difference(Vector::y()));
            let found = solution.fields()[0].head_gradient(point);
            // Stages differ by up to 40 m.
            let scale = (drawing.strength_m() + 40.0) / (distance_m * setting.scale);
            let off = (found - expected).norm();
            prop_assert!(off <= 1e-5 * scale, "{found} for {expected} at {place}");
        }
    }
}
