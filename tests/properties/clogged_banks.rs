//! On a clogged bank what the river gives to a metre is D (stage − h)/c: the
//! head's slope into the aquifer is (h − stage)/(K c), also before pumping, and
//! the river gives all that the wells pump.

use mirrorwell::findings::Solution;
use mirrorwell::outline::Kind::FixedHead;
use mirrorwell::site::{EdgeKind, Length, Time};
use num_complex::Complex64;
use proptest::prelude::*;

use crate::drawings::{Drawing, Form, Setting, case_of, drawing_of};

const THICKNESS_M: f64 = 20.0;

fn solve(drawing: &Drawing, setting: &Setting, days: f64) -> Solution {
    let mut site = drawing.site(setting);
    site.aquifer.thickness = Some(Length::from_si(THICKNESS_M));
    for edge in &mut site.edges {
        if let EdgeKind::River {
            bank_resistance, ..
        } = &mut edge.kind
        {
            *bank_resistance = Some(Time::from_si(days));
        }
    }
    Solution::of(site).expect("a half-plane behind a clogged bank")
}

proptest! {
    #![proptest_config(crate::cases(150))]

    /// In the drawing a metre of bank is `stretched` metres of the site, so the drawing's skin is
    /// T c/(D · stretched): the discharge through corresponding lengths is
    /// the same, as the stretch keeps areas up to the scale's square.
    #[test]
    fn the_slope_at_the_bank_is_the_head_lost_in_it_over_the_skin(
        (drawing, setting) in case_of(drawing_of(Just(Form::HalfPlane(FixedHead)))),
        log_days in -3.0..4.0_f64,
    ) {
        let days = 10.0_f64.powf(log_days);
        let solution = solve(&drawing, &setting, days);
        let field = &solution.fields()[0];
        let edge = &drawing.edges[0];
        let inward = [Complex64::ONE, -Complex64::ONE]
            .map(|sign| sign * edge.normal())
            .into_iter()
            .find(|normal| ((drawing.places[0] - edge.place(0.5)) * normal.conj()).re > 0.0)
            .expect("the aquifer lies on one side");
        for along in &drawing.along {
            let place = edge.place(*along);
            let one_on = place + inward * Complex64::i();
            let stretched = (setting.place(one_on) - setting.place(place)).norm();
            let skin = drawing.transmissivity_m2_d * days / (THICKNESS_M * stretched);
            let point = setting.place(place);
            let gradient = setting.gradient_of_drawing(field.head_gradient(point));
            let slope = (gradient * inward.conj()).re;
            let lost_m = solution.heads_m(&[point])[0] - edge.stage_m(place);
            // Heads of some 100 m and slopes of wells at a distance keep 1e-12
            // of themselves; places on the bank move by 1e-12 m.
            let scale = drawing.strength_m() / drawing.distance_to_wells_m(place) + drawing.slope.norm();
            prop_assert!(
                (slope - lost_m / skin).abs() <= 1e-9 * scale + 1e-11 / skin,
                "{slope} {lost_m} {skin}"
            );
        }
        for (number, well) in solution.site().wells.iter().enumerate() {
            let given: f64 = (0..solution.site().edges.len())
                .map(|edge| field.inflow_m3_d(edge, number))
                .sum();
            prop_assert!((given / well.pumping.si() - 1.0).abs() <= 1e-12);
        }
    }
}
