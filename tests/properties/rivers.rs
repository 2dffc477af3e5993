//! The head is the stage on every river, with or without pumping.

use mirrorwell::outline::Kind::FixedHead;
use proptest::prelude::*;

use crate::HEAD_TOLERANCE_M;
use crate::drawings::{case_of, drawing_with_river};

proptest! {
    #![proptest_config(crate::cases(200))]

    #[test]
    fn the_head_is_the_stage_on_every_river((drawing, setting) in case_of(drawing_with_river())) {
        let solution = drawing.solve(&setting);
        for edge in drawing.edges.iter().filter(|edge| edge.kind == FixedHead) {
            for along in &drawing.along {
                let place = edge.place(*along);
                let point = setting.place(place);
                let head_m = solution.heads_m(&[point])[0];
                let off_m = (head_m - edge.stage_m(place)).abs();
                prop_assert!(off_m <= HEAD_TOLERANCE_M, "{off_m} m off at {place} on {edge:?}");
                let drawdown_m = solution.drawdowns_m(&[point])[0];
                prop_assert!(drawdown_m.abs() <= HEAD_TOLERANCE_M);
            }
        }
    }
}
