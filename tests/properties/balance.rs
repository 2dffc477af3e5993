//! Rivers give the wells what they pump; each river a share of 0 to 1.
//!
//! The shares are harmonic measures: between 0 and 1 by the maximum principle,
//! and they sum to 1, as the constant head 1 on all rivers is 1 everywhere.
//! Their closed forms are arctangents and Fourier sums that stop at 1e-16;
//! 1e-12 leaves room for the sum of some dozens.

use mirrorwell::site::EdgeKind;
use proptest::prelude::*;

use crate::drawings::{Form, case_of, drawing, drawing_with_river};

const SHARE_TOLERANCE: f64 = 1e-12;

proptest! {
    #![proptest_config(crate::cases(200))]

    #[test]
    fn rivers_give_every_well_what_it_pumps((drawing, setting) in case_of(drawing_with_river())) {
        let solution = drawing.solve(&setting);
        let (site, field) = (solution.site(), &solution.fields()[0]);
        for (number, well) in site.wells.iter().enumerate() {
            let pumping = well.pumping.si();
            let inflows = (0..site.edges.len()).map(|edge| field.inflow_m3_d(edge, number));
            let inflows: Vec<f64> = inflows.collect();
            for (edge, inflow) in site.edges.iter().zip(&inflows) {
                let share = inflow / pumping;
                if matches!(edge.kind, EdgeKind::Barrier) {
                    prop_assert_eq!(*inflow, 0.0);
                }
                prop_assert!((0.0..=1.0 + SHARE_TOLERANCE).contains(&share), "{share}");
            }
            let sum: f64 = inflows.iter().sum();
            prop_assert!((sum / pumping - 1.0).abs() <= SHARE_TOLERANCE, "{sum} for {pumping}");
        }
    }

    #[test]
    fn barriers_alone_give_nothing(
        (drawing, setting) in case_of(drawing().prop_filter("no river", |drawing| !drawing.has_river())),
    ) {
        let solution = drawing.solve(&setting);
        let (site, field) = (solution.site(), &solution.fields()[0]);
        for well in 0..site.wells.len() {
            for edge in 0..site.edges.len() {
                prop_assert_eq!(field.inflow_m3_d(edge, well), 0.0);
            }
        }
    }

    /// Before pumping, what enters a box leaves it again: each inflow carries
    /// four roundings of 1e-16.
    #[test]
    fn a_box_keeps_no_water_before_pumping(
        (drawing, setting) in case_of(drawing_with_river()
            .prop_filter("no box", |drawing| matches!(drawing.form, Form::Box(..)))),
    ) {
        let solution = drawing.solve(&setting);
        let (site, field) = (solution.site(), &solution.fields()[0]);
        let inflows: Option<Vec<f64>> =
            (0..site.edges.len()).map(|edge| field.ambient_inflow_m3_d(edge)).collect();
        if let Some(inflows) = inflows {
            let (sum, size) = inflows.iter().fold((0.0, 0.0), |(sum, size), inflow| {
                (sum + inflow, f64::max(size, inflow.abs()))
            });
            prop_assert!(f64::abs(sum) <= 1e-14 * size, "{sum} of {size}");
        }
    }

    /// What a river gives is the flux across it: T ∂h/∂n along its whole
    /// length, here summed with the trapezoidal rule in the angle of a circle,
    /// which converges geometrically, by (r/R)^n with r/R ≤ 0.92: 0.92^400 is
    /// 3e-15.
    #[test]
    fn the_flux_across_a_round_shore_is_the_sum_of_the_pumping(
        (drawing, setting) in case_of(crate::drawings::drawing_of(
            Just(crate::drawings::Form::Disk),
        )),
    ) {
        let solution = drawing.solve(&setting);
        let places = 400;
        let flux: f64 = (0..places).map(|number| {
            let along = f64::from(number) / f64::from(places);
            let place = drawing.edges[0].place(along);
            let gradient = solution.fields()[0].head_gradient(setting.place(place));
            let gradient = setting.gradient_of_drawing(gradient);
            (gradient * place.conj()).re * std::f64::consts::TAU / f64::from(places)
        }).sum();
        let pumping: f64 = drawing.wells.iter().map(|well| well.strength_m).sum();
        prop_assert!((flux - pumping).abs() <= 1e-9, "{flux} for {pumping}");
    }
}
