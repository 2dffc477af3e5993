//! No water crosses a barrier.
//!
//! Flow is square to a barrier where the isotropic head is: the drawing's
//! gradient is compared with the barrier's normal in the drawing. All rivers have
//! one stage: what stages of their own make of the slope is a difference of
//! harmonic measures, which needs room on both sides of a place.

use mirrorwell::outline::Kind::NoFlow;
use proptest::prelude::*;

use crate::drawings::{case_of, drawing};

proptest! {
    #![proptest_config(crate::cases(200))]

    #[test]
    fn no_water_crosses_a_barrier((drawing, setting) in case_of(drawing())) {
        let drawing = drawing.level();
        let solution = drawing.solve(&setting);
        for edge in drawing.edges.iter().filter(|edge| edge.kind == NoFlow) {
            for along in &drawing.along {
                let place = edge.place(*along);
                let gradient = solution.fields()[0].head_gradient(setting.place(place));
                let gradient = setting.gradient_of_drawing(gradient);
                let crossing = (gradient * edge.normal().conj()).re.abs();
                // 1e-9 of the slope that the wells alone would make there.
                let distance_m = drawing.distance_to_wells_m(place);
                let scale = gradient.norm() + drawing.strength_m() / distance_m;
                prop_assert!(
                    crossing <= 1e-9 * scale,
                    "{crossing} of {scale} crosses {edge:?} at {place}"
                );
            }
        }
    }
}
