//! A plan solved in closed form and by the general solver agree.

use mirrorwell::field::WellField;
use mirrorwell::outline::{self, Outline};
use mirrorwell::site::{Refusal, Site};
use proptest::prelude::*;

use crate::HEAD_TOLERANCE_M;
use crate::drawings::{Drawing, case_of, drawing_with_river};

type Found = Result<Vec<Outline>, Vec<Refusal>>;

/// The field of the only aquifer.
fn field(site: &Site, find: impl Fn(&Site) -> Found) -> WellField {
    let solved = find(site).and_then(|outlines| {
        let [outline] = <[_; 1]>::try_from(outlines).expect("one aquifer");
        WellField::solve(site, outline)
    });
    solved.unwrap_or_else(|refusals| panic!("{refusals:?}"))
}

/// A stage that falls along an endless bank goes on falling in closed form, but
/// is held beyond the drawn end by the general solver.
fn falls_without_end(drawing: &Drawing) -> bool {
    !drawing.is_closed()
        && drawing
            .edges
            .iter()
            .any(|edge| edge.stages_m[0] != edge.stages_m[1])
}

proptest! {
    #![proptest_config(crate::cases(24))]

    #[test]
    fn a_plan_in_closed_form_and_by_the_general_solver_agrees_within_the_bound(
        (drawing, setting) in case_of(drawing_with_river())
    ) {
        prop_assume!(!falls_without_end(&drawing));
        let mut site = drawing.site(&setting);
        site.head_tolerance = mirrorwell::site::Length::from_si(1e-5);
        let closed = field(&site, outline::find);
        let general = field(&site, outline::find_unnamed);
        let bound_m = general.error_bound_m() + HEAD_TOLERANCE_M;
        prop_assert!(bound_m <= 1.1e-5, "bound {bound_m} on {:?}", drawing.form);
        let points = drawing.places_in(&setting);
        let differ = |one: Vec<f64>, other: Vec<f64>| {
            let pairs = one.into_iter().zip(other);
            pairs.map(|(a, b)| (a - b).abs()).fold(0.0, f64::max)
        };
        let heads_m = differ(closed.heads_m(&points), general.heads_m(&points));
        prop_assert!(heads_m <= bound_m, "heads {heads_m} of {bound_m}, {:?}", drawing.form);
        let drawdowns_m = differ(closed.drawdowns_m(&points), general.drawdowns_m(&points));
        prop_assert!(drawdowns_m <= bound_m, "drawdowns {drawdowns_m} of {bound_m}");
        for well in 0..site.wells.len() {
            let own_m = closed.own_drawdown_m(well) - general.own_drawdown_m(well);
            prop_assert!(own_m.abs() <= bound_m, "own {own_m} of {bound_m}");
            for edge in 0..site.edges.len() {
                // Water is T times a head, over the length that a metre of
                // head is spread across: at least a tenth of the distance.
                let share = closed.inflow_m3_d(edge, well) - general.inflow_m3_d(edge, well);
                let allowed = 10.0 * bound_m * site.aquifer.transmissivity.si();
                prop_assert!(share.abs() <= allowed, "inflow {share} of {allowed}");
            }
        }
    }
}
