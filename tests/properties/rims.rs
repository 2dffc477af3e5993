//! The level in a well does not depend on where in its rim one looks, to
//! within r_w/distance; and outside the rim its cone is Thiem's.

use mirrorwell::site::Vector;
use num_complex::Complex64;
use proptest::prelude::*;

use crate::HEAD_TOLERANCE_M;
use crate::drawings::{Drawing, case_of, drawing};

/// Distance from a well to the next well or edge, metres of the drawing.
fn distance_m(drawing: &Drawing, well: usize) -> f64 {
    let at = drawing.wells[well].at;
    let others = drawing
        .wells
        .iter()
        .enumerate()
        .filter(|(other, _)| *other != well);
    let others = others.map(|(_, other)| (other.at - at).norm());
    others
        .fold(drawing.distance_to_edges_m(at), f64::min)
        .min(drawing.size_m)
}

/// How much the head may vary within r of a well's centre, its own logarithm
/// left out: other wells slope it by Q/(2πT d) each; the images of the well
/// itself by less than 2 Q/(2πT d), as the conformal radius does (Koebe); each
/// mirror of an aquifer without river does both again, and up to 5 sizes of
/// radius reach over at most some 8 mirrors; the flow before pumping adds its
/// slope and what stages of 40 m difference make over d.
fn variation_m(drawing: &Drawing, well: usize, r_m: f64) -> f64 {
    let mirrors = if drawing.influence_radius_m.is_some() {
        8.0
    } else {
        2.0
    };
    (mirrors * 2.0 * drawing.strength_m() + 40.0) * r_m / distance_m(drawing, well)
        + drawing.slope.norm() * r_m
}

proptest! {
    #![proptest_config(crate::cases(200))]

    #[test]
    fn the_level_in_a_well_is_the_same_all_over_its_rim((drawing, setting) in case_of(drawing())) {
        let solution = drawing.solve(&setting);
        for (number, well) in solution.site().wells.iter().enumerate() {
            let rim_m = setting.surely_in_rim(drawing.wells[number].radius_m);
            let looks = [0.0, 0.3, 0.7, 0.999].into_iter().enumerate().map(|(turn, share)| {
                let (sin, cos) = (1.0 + 2.0 * turn as f64).sin_cos();
                well.at + share * rim_m * Vector::new(cos, sin)
            });
            let heads_m = solution.heads_m(&looks.collect::<Vec<_>>());
            let stretched_m = 2.0 * drawing.wells[number].radius_m;
            let allowed_m = HEAD_TOLERANCE_M + variation_m(&drawing, number, stretched_m);
            for head_m in &heads_m {
                prop_assert!((head_m - heads_m[0]).abs() <= allowed_m, "{heads_m:?}, {allowed_m}");
            }
        }
    }

    #[test]
    fn a_wells_own_drawdown_is_the_fields_value_in_its_rim((drawing, setting) in case_of(drawing())) {
        let solution = drawing.solve(&setting);
        let field = &solution.fields()[0];
        for (number, well) in solution.site().wells.iter().enumerate() {
            let own_m = field.own_drawdown_m(number);
            let in_rim_m = field.drawdown_by_m(number, well.at);
            prop_assert!((own_m - in_rim_m).abs() <= HEAD_TOLERANCE_M, "{own_m}, {in_rim_m}");
        }
    }

    /// Thiem (1906): s(r_w) − s(r) = Q/(2πT) ln(r/r_w), as long as r is far
    /// less than the distance to anything else.
    #[test]
    fn the_cone_beside_a_well_is_thiems((drawing, setting) in case_of(drawing()), angle in 0.0..6.3_f64) {
        let setting = crate::drawings::Setting { ratio: 1.0, ..setting };
        let solution = drawing.solve(&setting);
        let field = &solution.fields()[0];
        for (number, well) in drawing.wells.iter().enumerate() {
            let r_m = 3.0 * well.radius_m;
            let point = setting.place(well.at + Complex64::from_polar(r_m, angle));
            // Not where an influence radius cuts the cone.
            let own_m = field.own_drawdown_m(number);
            let fall_m = own_m - field.drawdown_by_m(number, point);
            let thiem_m = well.strength_m / std::f64::consts::TAU * 3.0_f64.ln();
            let allowed_m = HEAD_TOLERANCE_M + variation_m(&drawing, number, r_m);
            prop_assert!((fall_m - thiem_m).abs() <= allowed_m, "{fall_m} for {thiem_m}");
        }
    }
}
