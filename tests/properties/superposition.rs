//! Wells superpose, and drawdown is proportional to the rates.

use proptest::prelude::*;

use crate::HEAD_TOLERANCE_M;
use crate::drawings::{DrawnWell, case_of, drawing};

proptest! {
    #![proptest_config(crate::cases(150))]

    #[test]
    fn drawdown_is_the_sum_of_each_wells(
        (drawing, setting) in case_of(drawing()),
    ) {
        let solution = drawing.solve(&setting);
        let field = &solution.fields()[0];
        let mut points = drawing.places_in(&setting);
        points.extend(solution.site().wells.iter().map(|well| well.at));
        let drawdowns_m = field.drawdowns_m(&points);
        let heads_m = field.heads_m(&points);
        for ((point, drawdown_m), head_m) in points.iter().zip(drawdowns_m).zip(heads_m) {
            let each = (0..drawing.wells.len()).map(|well| field.drawdown_by_m(well, *point));
            let sum_m: f64 = each.sum();
            prop_assert!((sum_m - drawdown_m).abs() <= HEAD_TOLERANCE_M, "{sum_m} for {drawdown_m}");
            let before_m = field.ambient_head_m(*point);
            prop_assert!((before_m - drawdown_m - head_m).abs() <= HEAD_TOLERANCE_M);
        }
    }

    #[test]
    fn two_halves_of_a_well_field_superpose(
        (drawing, setting) in case_of(drawing().prop_filter("each half must stand alone", |drawing| {
            !drawing.is_closed() && drawing.wells.len() > 1
        })),
    ) {
        let points = drawing.places_in(&setting);
        let (first, second) = drawing.wells.split_at(drawing.wells.len() / 2);
        let drawdowns_m = |wells: &[DrawnWell]| {
            drawing.with_wells(wells.to_vec()).solve(&setting).drawdowns_m(&points)
        };
        let (first, second) = (drawdowns_m(first), drawdowns_m(second));
        for ((all, one), other) in drawdowns_m(&drawing.wells).iter().zip(first).zip(second) {
            prop_assert!((one + other - all).abs() <= HEAD_TOLERANCE_M, "{one} + {other} for {all}");
        }
    }

    /// Doubling is exact in binary numbers, so the doubled drawdown is too.
    #[test]
    fn double_rates_make_double_drawdowns((drawing, setting) in case_of(drawing())) {
        let doubled = drawing.wells.iter().map(|well| DrawnWell {
            strength_m: 2.0 * well.strength_m,
            ..*well
        });
        let doubled = drawing.with_wells(doubled.collect());
        let mut points = drawing.places_in(&setting);
        points.extend(drawing.wells.iter().map(|well| setting.place(well.at)));
        let single_m = drawing.solve(&setting).drawdowns_m(&points);
        let double_m = doubled.solve(&setting).drawdowns_m(&points);
        for (single_m, double_m) in single_m.iter().zip(double_m) {
            let off_m = (2.0 * single_m - double_m).abs();
            prop_assert!(off_m <= 1e-13 * double_m.abs(), "{single_m}, {double_m}");
        }
    }
}
