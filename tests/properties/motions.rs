//! Moving, turning, mirroring and enlarging a plan carries the answer along.
//!
//! Enlarging multiplies every length of the plan: heads and the ratio Q/T stay.

use proptest::prelude::*;

use crate::HEAD_TOLERANCE_M;
use crate::drawings::{Setting, case_of, drawing};

proptest! {
    #![proptest_config(crate::cases(200))]

    #[test]
    fn a_moved_turned_mirrored_and_enlarged_plan_has_the_same_heads(
        (drawing, setting) in case_of(drawing()),
    ) {
        let unmoved = Setting { ratio: setting.ratio, axis: setting.axis, ..Setting::plain() };
        let (here, there) = (drawing.solve(&unmoved), drawing.solve(&setting));
        let heads_m = |setting: &Setting, solution: &mirrorwell::findings::Solution| {
            let mut points = drawing.places_in(setting);
            points.extend(drawing.wells.iter().map(|well| setting.place(well.at)));
            points.extend(drawing.edges.iter().map(|edge| setting.place(edge.place(0.37))));
            solution.heads_m(&points)
        };
        for (here_m, there_m) in heads_m(&unmoved, &here).iter().zip(heads_m(&setting, &there)) {
            prop_assert!((here_m - there_m).abs() <= HEAD_TOLERANCE_M, "{here_m}, {there_m}");
        }
        let names = |site: &mirrorwell::site::Site| {
            let outlines = mirrorwell::outline::find(site).expect("found before");
            outlines.iter().map(|outline| outline.shape.name()).collect::<Vec<_>>()
        };
        prop_assert_eq!(names(here.site()), names(there.site()));
        for well in 0..drawing.wells.len() {
            for edge in 0..drawing.edges.len() {
                let inflow = |solution: &mirrorwell::findings::Solution| {
                    solution.fields()[0].inflow_m3_d(edge, well)
                };
                let pumping = here.site().wells[well].pumping.si().abs();
                prop_assert!((inflow(&here) - inflow(&there)).abs() <= 1e-11 * pumping);
            }
        }
    }

    /// An isotropic aquifer written as an anisotropic one of ratio 1 + 1e-12
    /// has the same heads.
    #[test]
    fn a_vanishing_anisotropy_changes_nothing(
        (drawing, setting) in case_of(drawing()), axis in 0.0..6.0_f64,
    ) {
        let isotropic = Setting { ratio: 1.0, ..setting };
        prop_assume!(!matches!(
            drawing.form,
            crate::drawings::Form::Disk | crate::drawings::Form::Lake
        ));
        let nearly = Setting { ratio: 1.0 + 1e-12, axis, ..setting };
        let points = drawing.places_in(&isotropic);
        let exact_m = drawing.solve(&isotropic).heads_m(&points);
        let nearly_m = drawing.solve(&nearly).heads_m(&points);
        for (exact_m, nearly_m) in exact_m.iter().zip(nearly_m) {
            prop_assert!((exact_m - nearly_m).abs() <= HEAD_TOLERANCE_M);
        }
    }
}
