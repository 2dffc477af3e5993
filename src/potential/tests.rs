//! Against published values and closed forms; the source stands beside each.

use std::f64::consts::{FRAC_PI_2, PI, TAU};

use num_complex::Complex64;

use super::*;
use Condition::{Clogged, Flux as N, Head as D};

/// Rounding of the reference values and of the sums.
const ROUNDING: f64 = 1e-13;

/// The L-shape of Gopal & Trefethen (2019), corners A to F.
const ELL: [(f64, f64); 6] = [(0., 0.), (2., 0.), (2., 1.), (1., 1.), (1., 2.), (0., 2.)];

fn c(x: f64, y: f64) -> Complex64 {
    Complex64::new(x, y)
}

fn polygon(corners: &[(f64, f64)], conditions: &[Condition]) -> Region {
    let next = corners.iter().cycle().skip(1);
    let sides = corners.iter().zip(next).zip(conditions);
    let sides = sides
        .map(|((a, b), condition)| Side::segment(c(a.0, a.1), c(b.0, b.1), *condition))
        .collect();
    Region::new(&[sides])
}

fn green_of(region: Region, pole: Complex64) -> Solution {
    let problem = Problem {
        poles: vec![(pole, 1.0)],
        weight: 1.0,
        ..Problem::default()
    };
    Solution::new(region, vec![problem], 1e-8)
}

fn with_heads(region: Region, heads_m: Vec<[f64; 2]>) -> Solution {
    let problem = Problem {
        heads_m,
        weight: 1.0,
        ..Problem::default()
    };
    Solution::new(region, vec![problem], 1e-8)
}

/// The bound is proven and small, and the value within it.
fn assert_within_bound(solution: &Solution, at: Complex64, expected: f64) {
    let value = solution.value(&solution.sum(&[1.0]), at);
    let error = (value - expected).abs();
    assert!(solution.bound_m() <= 2e-8, "bound {:e}", solution.bound_m());
    assert!(
        error <= solution.bound_m() + ROUNDING,
        "error {error:e} at {at}, bound {:e}",
        solution.bound_m()
    );
}

/// Well (0.5, 1.5), point (1.5, 0.5); by Schwarz–Christoffel mapping, computed
/// with mpmath.
#[test]
fn greens_function_of_the_l_shape_is_that_of_its_conformal_map() {
    for (conditions, expected) in [
        ([D; 6], 0.0021350523431811),
        ([N, D, N, N, N, N], 0.49826999987629),
    ] {
        let solution = green_of(polygon(&ELL, &conditions), c(0.5, 1.5));
        assert_within_bound(&solution, c(1.5, 0.5), expected);
    }
}

/// u = x² on the sides, u(0.99, 0.99) = 1.0267919261073: Gopal & Trefethen
/// (2019), SIAM J. Numer. Anal. 57:2074–2094. With ∇²v = 2 and v = 0 on the
/// sides, u = r²/2 − v + (x² − y²)/2.
#[test]
fn the_l_shape_of_gopal_and_trefethen_takes_its_published_value() {
    let problem = Problem {
        source_per_m: -2.0,
        weight: 1.0,
        ..Problem::default()
    };
    let solution = Solution::new(polygon(&ELL, &[D; 6]), vec![problem], 1e-9);
    let at = c(0.99, 0.99);
    let v = solution.value(&solution.sum(&[1.0]), at);
    let u = 0.5 * at.norm_sqr() - v + 0.5 * (at * at).re;
    assert!((u - 1.0267919261073).abs() <= solution.bound_m() + ROUNDING);
}

/// Table of harmonic measures by Schwarz–Christoffel mapping, sides AB to FA,
/// from (1.5, 0.5); the shares of a well there and the value of each measure.
#[test]
fn shares_of_the_l_shape_are_its_harmonic_measures() {
    let expected = [
        0.36921546538373,
        0.2614291217906,
        0.31733331200185,
        0.024866362735208,
        0.00187397023343,
        0.02528176785518,
    ];
    let well = c(1.5, 0.5);
    let solution = green_of(polygon(&ELL, &[D; 6]), well);
    let mut sum = 0.0;
    for (side, share) in expected.into_iter().enumerate() {
        let inflow = |along| -solution.outflow(0, side, along).unwrap();
        assert!((inflow(0.0..1.0) - share).abs() < 1e-9);
        assert!((inflow(0.0..0.3) + inflow(0.3..1.0) - inflow(0.0..1.0)).abs() < ROUNDING);
        sum += inflow(0.0..1.0);

        let mut heads_m = vec![[0.0; 2]; 6];
        heads_m[side] = [1.0; 2];
        assert_within_bound(&with_heads(polygon(&ELL, &[D; 6]), heads_m), well, share);
    }
    assert!((sum - 1.0).abs() < 1e-10);
}

/// Resistances √3 and 2K(¾)/K(¼) between electrode sides (Gaier 1972, from
/// memory; elliptic integrals by mpmath): flow = head difference / resistance.
#[test]
fn resistances_of_the_l_shape_are_the_published_ones() {
    for (electrodes, resistance) in [
        ([1, 4], 2.558_523_142_342_013),
        ([1, 5], 3f64.sqrt()),
        ([1, 3], 3f64.sqrt()),
    ] {
        let mut conditions = [N; 6];
        let mut heads_m = vec![[0.0; 2]; 6];
        for electrode in electrodes {
            conditions[electrode] = D;
        }
        heads_m[electrodes[0]] = [1.0; 2];
        let solution = with_heads(polygon(&ELL, &conditions), heads_m);
        let flow = solution.outflow(0, electrodes[0], 0.0..1.0).unwrap();
        assert!((1.0 / flow - resistance).abs() < 1e-8, "{electrodes:?}");
    }
}

/// The trapezium 0, 1, 1 + 2i, i between its end sides: K(¾)/K(¼), Papamichael
/// & Stylianopoulos (2010), from memory.
#[test]
fn the_trapezium_has_its_published_modulus() {
    let corners = [(0., 0.), (1., 0.), (1., 2.), (0., 1.)];
    let heads_m = vec![[1.0; 2], [0.0; 2], [0.0; 2], [0.0; 2]];
    let solution = with_heads(polygon(&corners, &[D, N, D, N]), heads_m);
    let flow = solution.outflow(0, 0, 0.0..1.0).unwrap();
    assert!((1.0 / flow - 1.279_261_571_171_006).abs() < 1e-8);
}

/// Ends of a 10 × 1 rectangle from its centre: problem 10 of the SIAM 100-digit
/// challenge (Bornemann et al. 2004).
#[test]
fn the_long_rectangle_meets_the_hundred_digit_challenge() {
    let corners = [(0., 0.), (10., 0.), (10., 1.), (0., 1.)];
    let heads_m = vec![[0.0; 2], [1.0; 2], [0.0; 2], [1.0; 2]];
    let solution = with_heads(polygon(&corners, &[D; 4]), heads_m);
    assert_within_bound(&solution, c(5.0, 0.5), 3.837_587_979_251_226e-7);
}

/// (Z − Z̄₀)/(Z − Z₀) with Z = z^(π/α), and its mixed form.
fn wedge(at: Complex64, pole: Complex64, angle: f64, is_mixed: bool) -> f64 {
    let power = if is_mixed { FRAC_PI_2 } else { PI } / angle;
    let mapped =
        |z: Complex64| Complex64::from_polar(z.norm().powf(power), z.arg().rem_euclid(TAU) * power);
    let (z, p) = (mapped(at), mapped(pole));
    let ratio = if is_mixed {
        (z - p.conj()) * (z + p) / ((z - p) * (z + p.conj()))
    } else {
        (z - p.conj()) / (z - p)
    };
    ratio.norm().ln() / TAU
}

#[test]
fn half_lines_enclose_wedges_with_the_greens_function_of_their_conformal_map() {
    for first in [D, N] {
        for degrees in [7.0f64, 70.0, 90.0, 130.0, 180.0, 250.0, 330.0] {
            let angle = degrees.to_radians();
            let sides = vec![
                Side::ray_in(c(0., 0.), Complex64::cis(angle), 1.0, first),
                Side::ray_out(c(0., 0.), c(1., 0.), 1.0, D),
            ];
            let pole = Complex64::from_polar(1.3, 0.4 * angle);
            let solution = green_of(Region::new(&[sides]), pole);
            for at in [
                Complex64::from_polar(2.2, 0.7 * angle),
                Complex64::from_polar(1e-3, 0.9 * angle),
                Complex64::from_polar(50.0, 1e-6 * angle),
            ] {
                assert_within_bound(&solution, at, wedge(at, pole, angle, first == N));
            }
        }
    }
}

/// Two rivers of different stage that meet: linear in the angle.
#[test]
fn a_jump_of_the_head_at_a_corner_and_at_infinity_is_linear_in_the_angle() {
    for degrees in [70.0f64, 180.0, 250.0] {
        let angle = degrees.to_radians();
        let sides = vec![
            Side::ray_in(c(0., 0.), Complex64::cis(angle), 1.0, D),
            Side::ray_out(c(0., 0.), c(1., 0.), 1.0, D),
        ];
        let solution = with_heads(Region::new(&[sides]), vec![[3.0; 2], [1.0; 2]]);
        for share in [1e-6, 0.3, 0.8] {
            for radius in [1e-6, 0.7, 1e5] {
                let at = Complex64::from_polar(radius, share * angle);
                assert_within_bound(&solution, at, 1.0 + 2.0 * share);
            }
        }
    }
}

/// Hantush (1965); exponential integrals by mpmath.
#[test]
fn behind_a_clogged_bank_the_half_plane_has_its_closed_form() {
    let bank = Clogged { skin_m: 0.7 };
    let sides = vec![
        Side::ray_in(c(0., 0.), c(0., 1.), 1.0, bank),
        Side::ray_out(c(0., 0.), c(0., -1.), 1.0, bank),
    ];
    let solution = green_of(Region::new(&[sides]), c(1., 0.));
    for (at, expected) in [
        (c(0.5, 0.3), 0.259888691167),
        (c(0., 0.), 0.147841315878),
        (c(0., 2.), 0.0514561429716),
        (c(2., -1.5), 0.151152441756),
    ] {
        // The values are given to twelve digits.
        let value = solution.value(&solution.sum(&[1.0]), at);
        assert!((value - expected).abs() <= solution.bound_m() + 1e-12);
    }
    let one_metre = 0.5;
    let share = solution.outflow(0, 0, one_metre..1.0).unwrap()
        + solution.outflow(0, 1, 0.0..one_metre).unwrap();
    assert!((-share - 0.364874353454).abs() < 1e-9);
}

/// One image by inversion.
#[test]
fn around_a_lake_of_four_arcs_the_plane_has_one_image() {
    let arc = |quarter: i32| {
        Side::arc(
            c(0., 0.),
            1.0,
            -FRAC_PI_2 * f64::from(quarter),
            -FRAC_PI_2,
            D,
        )
    };
    let pole = c(1.001, 0.4);
    let solution = green_of(Region::new(&[(0..4).map(arc).collect()]), pole);
    for at in [c(-1.2, 0.9), c(30.0, -500.0), c(1.0, 1e-9), c(1.0005, 0.4)] {
        let image = (1.0 - at * pole.conj()) / (at - pole);
        assert_within_bound(&solution, at, image.norm().ln() / TAU);
    }
}

/// A well a millimetre from a river and a barrier: images in a quarter-plane.
#[test]
fn a_well_a_millimetre_from_two_edges_is_solved_within_the_bound() {
    let sides = vec![
        Side::ray_in(c(0., 0.), c(0., 1.), 100.0, N),
        Side::ray_out(c(0., 0.), c(1., 0.), 100.0, D),
    ];
    let pole = c(0.001, 0.001);
    let solution = green_of(Region::new(&[sides]), pole);
    for at in [c(0.002, 0.0005), c(0.0, 0.001), c(40.0, 3.0), c(0.5, 0.0)] {
        assert_within_bound(&solution, at, wedge(at, pole, FRAC_PI_2, true));
    }
}

/// Where a river meets a barrier at 20° the panels end far below the rounding
/// of coordinates: only offsets from the corner tell their nodes apart.
#[test]
fn a_sharp_corner_far_from_the_origin_is_solved_like_one_at_the_origin() {
    let solved = |shift: Complex64| {
        let corners = [
            (0.0, 0.0),
            (1.0, 0.0),
            (20f64.to_radians().cos(), 20f64.to_radians().sin()),
        ];
        let moved = corners.map(|(x, y)| (x + shift.re, y + shift.im));
        let solution = green_of(polygon(&moved, &[D, N, N]), c(0.7, 0.1) + shift);
        let value = solution.value(&solution.sum(&[1.0]), c(0.3, 0.05) + shift);
        (value, solution.bound_m())
    };
    let (here, there) = (solved(c(0.0, 0.0)), solved(c(4000.0, 550.0)));
    assert!(here.1 <= 2e-8 && there.1 <= 2e-8, "{here:?} {there:?}");
    // A coordinate of 4000 is rounded to 5e-13.
    let allowed = here.1 + there.1 + 1e-11;
    assert!((here.0 - there.0).abs() <= allowed, "{here:?} {there:?}");
}

#[test]
fn values_in_batches_are_those_of_single_places() {
    let well = c(1.5, 0.5);
    let solution = green_of(polygon(&ELL, &[N, D, N, N, D, N]), well);
    let layer = solution.sum(&[1.0]);
    let fraction = |index: i32, step: f64| (f64::from(index) * step).fract();
    let places: Vec<_> = (0..3000)
        .map(|index| c(2.0 * fraction(index, 0.618), fraction(index, 0.755)))
        .collect();
    let mut sums = vec![0.0; places.len()];
    let pole = RimmedPole {
        at: well,
        strength: 1.0,
        rim_m: 0.0,
    };
    solution.add_values(&layer, &[pole], &places, &mut sums);
    for (place, sum) in places.iter().zip(&sums) {
        assert!((solution.value(&layer, *place) - sum).abs() < ROUNDING);
    }
}

#[test]
fn gradients_are_those_of_the_values() {
    let mut heads_m = vec![[0.0; 2]; 6];
    heads_m[1] = [1.0, 2.0];
    let solution = with_heads(polygon(&ELL, &[N, D, D, N, D, N]), heads_m);
    let layer = solution.sum(&[1.0]);
    let (at, step) = (c(1.1, 0.3), 1e-5);
    let value = |x| solution.value(&layer, x);
    let along_x = (value(at + step) - value(at - step)) / (2.0 * step);
    let along_y = (value(at + c(0., step)) - value(at - c(0., step))) / (2.0 * step);
    // Central differences: step² and rounding/step, both about 1e-10.
    assert!((solution.gradient(&layer, at) - c(along_x, along_y)).norm() < 1e-8);
}
