//! What a well at a does at b, a well at b does at a; and it is a drawdown.
//!
//! Reciprocity is Green's own (1828): −∇² with such edges is symmetric. The
//! sign is the maximum principle's. In a closed basin a single well has no
//! steady state, and its unit drawdown is only a part of a balanced sum.

use mirrorwell::site::{Rate, Site};
use proptest::prelude::*;

use crate::drawings::{case_of, drawing};
use mirrorwell::findings::Solution;

/// One of two wells' unit drawdown at the other, times T.
fn green(solution: &Solution, site: &Site, by: usize, at: usize) -> f64 {
    let unit = solution.fields()[0].unit_drawdown_by(by, site.wells[at].at);
    unit * site.aquifer.transmissivity.si()
}

proptest! {
    #![proptest_config(crate::cases(200))]

    #[test]
    fn a_well_does_to_another_what_the_other_would_do_to_it(
        (drawing, setting) in case_of(drawing().prop_filter("no basin", |drawing| !drawing.is_closed())),
    ) {
        let solution = drawing.solve(&setting);
        let site = solution.site();
        for a in 0..site.wells.len() {
            for b in 0..site.wells.len() {
                let (there, back) = (green(&solution, site, a, b), green(&solution, site, b, a));
                // Rounding of places, 1e-12 of their size, and of sums of logarithms.
                if a != b {
                    prop_assert!((there - back).abs() <= 1e-11 + 1e-10 * there.abs(), "{there}, {back}");
                }
                if drawing.has_river() {
                    prop_assert!(there > 0.0, "{there} at {b} by {a}");
                } else {
                    prop_assert!(there >= 0.0, "{there} at {b} by {a}");
                }
            }
        }
    }

    #[test]
    fn pumping_lowers_the_head_everywhere(
        (drawing, setting) in case_of(drawing().prop_filter("no basin", |drawing| !drawing.is_closed())),
    ) {
        let mut site = drawing.site(&setting);
        for well in &mut site.wells {
            well.pumping = Rate::from_si(well.pumping.si().abs());
        }
        let solution = Solution::of(site).expect("the same plan with other rates");
        for drawdown_m in solution.drawdowns_m(&drawing.places_in(&setting)) {
            let least = if drawing.has_river() { f64::MIN_POSITIVE } else { 0.0 };
            prop_assert!(drawdown_m >= least, "{drawdown_m}");
        }
    }
}
