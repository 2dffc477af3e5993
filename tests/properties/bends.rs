//! The laws, for plans that only the general solver solves: within its bound.
//!
//! A head wrong by δ makes the stream function wrong by about as much, so an
//! inflow by T δ; ten times that near corners.

use mirrorwell::findings::Solution;
use mirrorwell::outline::Kind;
use mirrorwell::site::Point;
use proptest::prelude::*;

use crate::bent_drawings::{BentDrawing, TRANSMISSIVITY_M2_D, bent_case};
use crate::drawings::{DrawnWell, Setting};

/// What is asked of heads, metres.
const ASKED_M: f64 = 1e-3;

/// The solution and its bound, which must be as small as asked for; beside
/// clogged banks the solver may stop short, and says so.
fn solved(drawing: &BentDrawing, setting: &Setting, asked_m: f64) -> (Solution, f64) {
    let solution = Solution::of(drawing.site(setting, asked_m)).unwrap_or_else(|refusals| {
        let texts: Vec<String> = refusals.iter().map(ToString::to_string).collect();
        panic!("refused: {}", texts.join("\n"))
    });
    let bound_m = solution.fields()[0].error_bound_m();
    let has_skin = drawing.legs.iter().any(|leg| leg.resistance_d.is_some());
    let most_m = if has_skin { 0.1 } else { asked_m };
    assert!(bound_m <= most_m, "bound {bound_m} of {asked_m}");
    (solution, bound_m)
}

fn points(drawing: &BentDrawing, setting: &Setting) -> Vec<Point> {
    let beside = drawing.beside_legs(0.37, 1e-3).into_iter().map(|(_, z)| z);
    let rims = drawing.wells.iter().map(|well| well.at + 0.5);
    let places = drawing.places.iter().copied().chain(beside).chain(rims);
    places.map(|z| setting.place(z)).collect()
}

fn differ_m(one: &[f64], other: &[f64]) -> f64 {
    let apart = one.iter().zip(other).map(|(a, b)| (a - b).abs());
    // A value that is no number must not pass.
    apart.fold(0.0, |most, apart| if apart <= most { most } else { apart })
}

proptest! {
    #![proptest_config(crate::cases(4))]

    /// Heads on rivers are the stage; all lie between the stages without pumping;
    /// pumping lowers them; rivers give what is pumped, and before pumping as much as
    /// they take; G(a, b) = G(b, a).
    #[test]
    fn a_bent_outline_obeys_the_laws_of_one_solution((drawing, setting) in bent_case()) {
        let (solution, bound_m) = solved(&drawing, &setting, ASKED_M);
        let field = &solution.fields()[0];
        let hair_m = 1e-4;
        for along in [0.03, 0.5, 0.9] {
            for (number, z) in drawing.beside_legs(along, hair_m) {
                let leg = &drawing.legs[number];
                if leg.kind == Kind::NoFlow || leg.resistance_d.is_some() {
                    continue;
                }
                let at = setting.place(z);
                let stage_m = leg.stages_m[0] + (leg.stages_m[1] - leg.stages_m[0]) * along;
                let rise_m = 2.0 * field.head_gradient(at).norm() * hair_m * setting.scale * 6.0;
                let head_m = solution.heads_m(&[at])[0];
                prop_assert!(
                    (head_m - stage_m).abs() <= bound_m + rise_m,
                    "head {head_m} at stage {stage_m}, leg {number} at {along}, bound {bound_m}, {rise_m}"
                );
            }
        }
        let points = points(&drawing, &setting);
        let [low_m, high_m] = drawing.stages_m();
        for at in &points {
            let before_m = solution.ambient_head_m(*at);
            prop_assert!(before_m >= low_m - bound_m && before_m <= high_m + bound_m, "{before_m}");
        }
        let together_m = solution.drawdowns_m(&points);
        for drawdown_m in &together_m {
            prop_assert!(*drawdown_m >= -bound_m, "{drawdown_m} of {bound_m}");
        }
        // What is asked along with a place does not matter.
        let alone_m: Vec<f64> = points.iter().map(|at| solution.drawdowns_m(&[*at])[0]).collect();
        let apart_m = differ_m(&together_m, &alone_m);
        prop_assert!(apart_m <= 1e-9, "{apart_m} m by itself");
        let allowed_m3_d = 10.0 * bound_m * TRANSMISSIVITY_M2_D;
        // Before pumping what enters leaves again, where no jump makes it infinite.
        let exchanges = (0..solution.site().edges.len()).map(|edge| field.ambient_inflow_m3_d(edge));
        if let Some(exchanges) = exchanges.collect::<Option<Vec<f64>>>() {
            let sum: f64 = exchanges.iter().sum();
            let allowed = allowed_m3_d * exchanges.len() as f64;
            prop_assert!(!drawing.is_closed() || sum.abs() <= allowed, "{sum} m³/d of {exchanges:?}");
        }
        let (wells, edges) = (drawing.wells.len(), solution.site().edges.len());
        for well in 0..wells {
            let pumping_m3_d = drawing.wells[well].strength_m * TRANSMISSIVITY_M2_D;
            let inflows: Vec<f64> = (0..edges).map(|edge| field.inflow_m3_d(edge, well)).collect();
            for inflow in &inflows {
                prop_assert!(*inflow >= -allowed_m3_d && *inflow <= pumping_m3_d + allowed_m3_d);
            }
            let missing = inflows.iter().sum::<f64>() - pumping_m3_d;
            prop_assert!(missing.abs() <= allowed_m3_d, "{missing} of {pumping_m3_d} m³/d, {allowed_m3_d}");
            for other in 0..well {
                let to = |one: usize, other: usize| {
                    field.unit_drawdown_by(one, setting.place(drawing.wells[other].at))
                };
                let weight = |one: usize| drawing.wells[one].strength_m * TRANSMISSIVITY_M2_D;
                let apart = (to(well, other) - to(other, well)).abs();
                let allowed = bound_m / weight(well) + bound_m / weight(other);
                prop_assert!(apart <= allowed, "{apart} of {allowed}");
            }
        }
    }

    /// The bound holds: against a second solution with a hundredth of it.
    #[test]
    fn a_bent_outline_is_right_within_its_bound((drawing, setting) in bent_case()) {
        let (coarse, bound_m) = solved(&drawing, &setting, ASKED_M);
        let (fine, fine_bound_m) = solved(&drawing, &setting, 0.01 * ASKED_M);
        let points = points(&drawing, &setting);
        let apart_m = differ_m(&coarse.heads_m(&points), &fine.heads_m(&points));
        prop_assert!(apart_m <= bound_m + fine_bound_m, "{apart_m} of {bound_m}");
        for well in 0..drawing.wells.len() {
            let own_m = |solution: &Solution| solution.fields()[0].own_drawdown_m(well);
            let apart_m = (own_m(&coarse) - own_m(&fine)).abs();
            prop_assert!(apart_m <= bound_m + fine_bound_m, "own {apart_m} of {bound_m}");
        }
    }

    /// Wells superpose, and double rates double drawdowns.
    #[test]
    fn wells_in_a_bent_outline_superpose((drawing, setting) in bent_case()) {
        let (all, bound_m) = solved(&drawing, &setting, ASKED_M);
        let doubled = |well: &DrawnWell| DrawnWell { strength_m: 2.0 * well.strength_m, ..*well };
        let twice = drawing.with_wells(drawing.wells.iter().map(doubled).collect());
        let (twice, twice_bound_m) = solved(&twice, &setting, ASKED_M);
        let (one, one_bound_m) = solved(&drawing.with_wells(vec![drawing.wells[0]]), &setting, ASKED_M);
        let points = points(&drawing, &setting);
        let all_m = all.drawdowns_m(&points);
        let doubled_m: Vec<f64> = all_m.iter().map(|drawdown_m| 2.0 * drawdown_m).collect();
        let apart_m = differ_m(&doubled_m, &twice.drawdowns_m(&points));
        prop_assert!(apart_m <= 2.0 * bound_m + twice_bound_m, "doubled {apart_m}");
        let by_first_m: Vec<f64> = points.iter().map(|at| all.drawdown_by_m(0, *at)).collect();
        let apart_m = differ_m(&by_first_m, &one.drawdowns_m(&points));
        prop_assert!(apart_m <= bound_m + one_bound_m, "alone {apart_m}");
    }

    /// Moving, turning, mirroring and enlarging carry heads and inflows along.
    #[test]
    fn a_bent_outline_may_be_moved((drawing, setting) in bent_case()) {
        let unmoved = Setting { ratio: setting.ratio, axis: setting.axis, ..Setting::plain() };
        let (here, here_bound_m) = solved(&drawing, &unmoved, ASKED_M);
        let (there, there_bound_m) = solved(&drawing, &setting, ASKED_M);
        let bound_m = here_bound_m + there_bound_m;
        let here_m = here.heads_m(&points(&drawing, &unmoved));
        let there_m = there.heads_m(&points(&drawing, &setting));
        let apart_m = differ_m(&here_m, &there_m);
        prop_assert!(apart_m <= bound_m, "heads {apart_m} of {bound_m}");
        for well in 0..drawing.wells.len() {
            for edge in 0..here.site().edges.len() {
                let inflow = |solution: &Solution| solution.fields()[0].inflow_m3_d(edge, well);
                let apart = (inflow(&here) - inflow(&there)).abs();
                let allowed = 10.0 * bound_m * TRANSMISSIVITY_M2_D;
                prop_assert!(apart <= allowed, "inflow {apart} of {allowed}");
            }
        }
    }
}
