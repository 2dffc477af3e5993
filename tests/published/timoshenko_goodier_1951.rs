//! Source: Timoshenko & Goodier (1951), *Theory of Elasticity*, 2nd edition,
//! article 95 and table 6, from memory: the stress function of a twisted bar of
//! rectangular section obeys ∇²φ = −2Gθ, φ = 0 on its outline, as the mound of
//! recharge does with 2Gθ for N/T. The largest stress, in the middle of the
//! long sides, is k · 2Gθa with 2a the shorter side; the torque is k₁ Gθ (2a)³(2b).

use mirrorwell::site::Point;

use crate::mounds::{Drawn, solve};

/// Three decimals are printed for k, four for k₁ at b = a, else three.
#[test]
fn the_mound_in_a_box_of_rivers_is_the_stress_function_of_a_twisted_bar() {
    for (ratio, k) in [
        (1.0, 0.675),
        (1.5, 0.848),
        (2.0, 0.930),
        (2.5, 0.968),
        (3.0, 0.985),
        (4.0, 0.997),
        (5.0, 0.999),
        (10.0, 1.000),
    ] {
        let field = solve(&Drawn::new("DD", 1.0, "DD", ratio));
        let slope = field.head_gradient(Point::new(0.0, 0.5 * ratio));
        assert!((2.0 * slope.x - k).abs() <= 5.1e-4, "{ratio}: {slope}, {k}");
    }
    for (ratio, k_1, half_digit) in [(1.0, 0.1406, 5e-5), (2.0, 0.229, 5e-4), (10.0, 0.312, 5e-4)] {
        let field = solve(&Drawn::new("DD", 1.0, "DD", ratio));
        // The mean of the mound by the midpoint rule: off by 1/(24 n²) of
        // the slopes at the edges, below 1e-5.
        let steps = 100;
        let at = |i: i32, j: i32| {
            let share = |k: i32| (f64::from(k) + 0.5) / f64::from(steps);
            field.ambient_head_m(Point::new(share(i), share(j) * ratio))
        };
        let sum: f64 = (0..steps * steps).map(|n| at(n / steps, n % steps)).sum();
        let mean = sum / f64::from(steps * steps);
        // The torque is twice the volume under φ = 2u.
        assert!(
            (4.0 * mean - k_1).abs() <= half_digit + 1e-5,
            "{ratio}: {}, {k_1}",
            4.0 * mean
        );
    }
}
