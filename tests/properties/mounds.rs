//! With recharge N the head obeys T ∇²h = −N, is still the stage on rivers and
//! level square to barriers, and all the recharge leaves through the rivers.

use std::f64::consts::{PI, TAU};

use mirrorwell::findings::Solution;
use mirrorwell::outline::Kind::{FixedHead, NoFlow};
use mirrorwell::site::Flux;
use num_complex::Complex64;
use proptest::prelude::*;

use crate::HEAD_TOLERANCE_M;
use crate::drawings::{Course, Drawing, Form, Setting, case_of, drawing_with_river};

const PLACES_ON_CIRCLE: usize = 24;

/// Drawings that drain recharge.
fn drained() -> impl Strategy<Value = Drawing> {
    drawing_with_river().prop_filter("it drains", |drawing| match drawing.form {
        Form::Strip(_) | Form::Box(..) | Form::Disk => true,
        Form::HalfStrip(_) => {
            let upright = |edge: &&crate::drawings::DrawnEdge| edge.normal().re.abs() > 0.5;
            let mut sides = drawing.edges.iter().filter(upright);
            sides.any(|edge| edge.kind == FixedHead)
        }
        _ => false,
    })
}

/// Solves with the recharge that would lift the middle of a strip of the drawing's size
/// by so many metres.
fn solve(drawing: &Drawing, setting: &Setting, lift_m: f64) -> (Solution, f64) {
    let mut site = drawing.site(setting);
    let size_m = drawing.size_m * setting.scale;
    let share = 8.0 * lift_m / (size_m * size_m);
    site.aquifer.recharge = Flux::from_si(share * drawing.transmissivity_m2_d);
    (Solution::of(site).expect("it drains"), share)
}

proptest! {
    #![proptest_config(crate::cases(150))]

    /// The mean over a circle is the head less N ρ²/(4T), for constant N
    /// exactly; see `harmonicity` for the circle.
    #[test]
    fn the_head_curves_as_the_recharge_asks(
        (drawing, setting) in case_of(drained()),
        lift_m in -3.0..3.0_f64,
    ) {
        let (solution, share) = solve(&drawing, &setting, lift_m);
        for &place in &drawing.places {
            let distance_m = drawing
                .distance_to_edges_m(place)
                .min(drawing.distance_to_wells_m(place))
                .min(drawing.size_m);
            if distance_m < 2.0 {
                continue;
            }
            let radius_m = 0.3 * distance_m;
            let around: Vec<_> = (0..PLACES_ON_CIRCLE)
                .map(|number| TAU * number as f64 / PLACES_ON_CIRCLE as f64)
                .map(|angle| setting.place(place + Complex64::from_polar(radius_m, angle)))
                .collect();
            let mean_m = solution.heads_m(&around).iter().sum::<f64>() / PLACES_ON_CIRCLE as f64;
            let expected_m = solution.heads_m(&[setting.place(place)])[0]
                - 0.25 * share * (radius_m * setting.scale).powi(2);
            let off_m = (mean_m - expected_m).abs();
            prop_assert!(off_m <= HEAD_TOLERANCE_M, "{off_m} m at {place}");
        }
    }

    #[test]
    fn rivers_keep_their_stage_and_barriers_their_water(
        (drawing, setting) in case_of(drained()),
        lift_m in -3.0..3.0_f64,
    ) {
        let drawing = drawing.level();
        let (solution, share) = solve(&drawing, &setting, lift_m);
        for edge in &drawing.edges {
            for along in &drawing.along {
                let place = edge.place(*along);
                let point = setting.place(place);
                if edge.kind == NoFlow {
                    let gradient = solution.fields()[0].head_gradient(point);
                    let gradient = setting.gradient_of_drawing(gradient);
                    let crossing = (gradient * edge.normal().conj()).re.abs();
                    let of_wells = drawing.strength_m() / drawing.distance_to_wells_m(place);
                    let of_mound = share.abs() * drawing.size_m * setting.scale;
                    let scale = gradient.norm() + of_wells + of_mound;
                    prop_assert!(crossing <= 1e-9 * scale, "{crossing} of {scale} at {place}");
                } else {
                    let off_m = (solution.heads_m(&[point])[0] - edge.stage_m(place)).abs();
                    prop_assert!(off_m <= HEAD_TOLERANCE_M, "{off_m} m off at {place}");
                }
            }
        }
    }

    /// N times the area, which the stretch keeps; 1e-12 of it for the sums.
    #[test]
    fn all_the_recharge_leaves_through_the_rivers(
        (drawing, setting) in case_of(drained().prop_filter("it is closed", |drawing| {
            matches!(drawing.form, Form::Box(..) | Form::Disk)
        })),
    ) {
        let (solution, share) = solve(&drawing, &setting, 1.0);
        let field = &solution.fields()[0];
        let parts: Option<Vec<f64>> = (0..solution.site().edges.len())
            .map(|edge| field.recharge_to_m3_d(edge))
            .collect();
        let sum: f64 = parts.expect("nothing is endless").iter().sum();
        let expected = share * drawing.transmissivity_m2_d * area_m2(&drawing) * setting.scale.powi(2);
        prop_assert!((sum / expected - 1.0).abs() <= 1e-12, "{sum} of {expected}");
    }
}

/// Area of a closed drawing.
fn area_m2(drawing: &Drawing) -> f64 {
    let ends = drawing.edges.iter().flat_map(|edge| match edge.course {
        Course::Round(radius) => vec![
            Complex64::new(radius * PI.sqrt(), radius * PI.sqrt()),
            Complex64::ZERO,
        ],
        Course::Straight { reach, .. } => reach.to_vec(),
    });
    let (mut low, mut high) = ([f64::INFINITY; 2], [f64::NEG_INFINITY; 2]);
    for end in ends {
        low = [low[0].min(end.re), low[1].min(end.im)];
        high = [high[0].max(end.re), high[1].max(end.im)];
    }
    (high[0] - low[0]) * (high[1] - low[1])
}
