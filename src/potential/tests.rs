//! Against published values; see the sources beside each.
use num_complex::Complex64;
use std::f64::consts::{FRAC_PI_2, PI, TAU};

use super::*;

fn c(x: f64, y: f64) -> Complex64 {
    Complex64::new(x, y)
}

fn polygon(corners: &[(f64, f64)], conditions: &[Condition]) -> Region {
    let next = corners.iter().cycle().skip(1);
    let sides = corners.iter().zip(next).zip(conditions);
    let sides = sides.map(|((a, b), condition)| {
        Side::segment(c(a.0, a.1), c(b.0, b.1), *condition)
    });
    Region::new(&[sides.collect()])
}

const L: [(f64, f64); 6] = [(0., 0.), (2., 0.), (2., 1.), (1., 1.), (1., 2.), (0., 2.)];
use Condition::{Flux as N, Head as D};

fn green(region: Region, pole: Complex64, target: f64) -> Solution {
    let problem = Problem {
        poles: vec![(pole, 1.0)],
        weight: 1.0,
        ..Problem::default()
    };
    Solution::new(region, vec![problem], target)
}

fn report(name: &str, solution: &Solution, error: f64) {
    println!(
        "{name}: error {error:.2e} bound {:.2e} unknowns {} rounds {}",
        solution.bound_m(),
        solution.unknowns(),
        solution.rounds()
    );
}

#[test]
fn l_shape_greens_values() {
    let start = std::time::Instant::now();
    for (conditions, value) in [
        ([D; 6], 0.0021350523431811),
        ([N, D, N, N, N, N], 0.49826999987629),
    ] {
        let solution = green(polygon(&L, &conditions), c(0.5, 1.5), 1e-9);
        let layer = solution.sum(&[1.0]);
        let error = solution.value(&layer, c(1.5, 0.5)) - value;
        report("L", &solution, error);
        println!("{:?}", start.elapsed());
        assert!(error.abs() <= solution.bound_m() + 1e-13);
    }
}

#[test]
fn l_shape_harmonic_measure_with_jumps() {
    // From (0.5,0.5): edge AB.
    let mut heads = vec![[0.0; 2]; 6];
    heads[0] = [1.0; 2];
    let problem = Problem { heads_m: heads, weight: 1.0, ..Problem::default() };
    let solution = Solution::new(polygon(&L, &[D; 6]), vec![problem], 1e-9);
    let layer = solution.sum(&[1.0]);
    for (x, value) in [(c(0.5, 0.5), 0.39449723323891), (c(1.0, 0.5), 0.46627187249937)] {
        let error = solution.value(&layer, x) - value;
        report("L measure", &solution, error);
        assert!(error.abs() <= solution.bound_m() + 1e-13);
    }
}

#[test]
fn half_planes_strips_wedges() {
    let e = Complex64::cis;
    for (name, kinds) in [("DD", [D, D]), ("DN", [D, N])] {
        for angle in [70f64, 130., 180., 250.] {
            let angle = angle.to_radians();
            let sides = vec![
                Side::ray_in(c(0., 0.), e(angle), 1.0, kinds[1]),
                Side::ray_out(c(0., 0.), c(1., 0.), 1.0, kinds[0]),
            ];
            let pole = e(0.4 * angle) * 1.3;
            let start = std::time::Instant::now();
            let solution = green(Region::new(&[sides]), pole, 1e-8);
            let layer = solution.sum(&[1.0]);
            let at = e(0.7 * angle) * 2.2;
            let m = if kinds[1] == D { PI / angle } else { FRAC_PI_2 / angle };
            let (z, p) = (at.powf(m), pole.powf(m));
            let exact = if kinds[1] == D {
                ((z - p.conj()) / (z - p)).norm().ln() / TAU
            } else {
                ((z - p.conj()) * (z + p) / ((z - p) * (z + p.conj()))).norm().ln() / TAU
            };
            let error = solution.value(&layer, at) - exact;
            report(&format!("wedge {name} {}", angle.to_degrees()), &solution, error);
            println!("{:?}", start.elapsed());
            assert!(error.abs() <= solution.bound_m() + 1e-13);
        }
    }
}
