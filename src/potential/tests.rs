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

fn meander(count: usize) -> (Region, Vec<Complex64>) {
    // A river along the south with `count` − 2 vertices, valley walls north.
    let mut corners: Vec<(f64, f64)> = Vec::new();
    let n = count - 2;
    let length = 4000.0;
    for i in 0..n {
        let t = i as f64 / (n - 1) as f64;
        let x = -2000.0 + length * t + 25.0 * (69.0 * t).sin();
        let y = 120.0 * (TAU * 4.0 * t).sin() + 35.0 * (TAU * 11.0 * t + 0.7).sin() - 400.0;
        corners.push((x, y));
    }
    corners.push((2100.0, 900.0));
    corners.push((-2050.0, 1000.0));
    let mut kinds = vec![D; n - 1];
    kinds.extend([N, N, N]);
    let wells = [(-900., 100.), (-300., -80.), (150., 300.), (700., -50.), (1200., 200.)];
    (polygon(&corners, &kinds), wells.map(|w| c(w.0, w.1)).to_vec())
}

fn time_meander(count: usize, target: f64) {
    let (region, wells) = meander(count);
    let n = count - 3;
    let mut heads: Vec<[f64; 2]> = (0..n).map(|i| [60.0 - 2.0 * i as f64 / n as f64, 60.0 - 2.0 * (i + 1) as f64 / n as f64]).collect();
    heads.extend([[0.0; 2]; 3]);
    let mut problems: Vec<_> = wells.iter().map(|w| Problem { poles: vec![(*w, 1.0)], weight: 2.4, ..Problem::default() }).collect();
    problems.push(Problem { heads_m: heads, weight: 1.0, ..Problem::default() });
    let start = std::time::Instant::now();
    let solution = Solution::new(region, problems, target);
    println!("{count}: bound {:.2e} unknowns {} rounds {} {:?}", solution.bound_m(), solution.unknowns(), solution.rounds(), start.elapsed());
}

#[test]
#[ignore]
fn meanders() {
    time_meander(8, 1e-6);
    time_meander(50, 1e-4);
    time_meander(200, 1e-4);
}
#[test]
#[ignore]
fn meander_1000() {
    time_meander(1000, 1e-4);
}

#[test]
fn shares_of_the_l_shape() {
    let solution = green(polygon(&L, &[D; 6]), c(1.5, 0.5), 1e-9);
    let published = [0.36921546538373, 0.2614291217906, 0.31733331200185, 0.024866362735208, 0.00187397023343, 0.02528176785518];
    let mut total = 0.0;
    for (side, share) in published.iter().enumerate() {
        let computed = -solution.outflows(side, 0.0..1.0)[0];
        let parts: f64 = [0.0..0.2, 0.2..0.55, 0.55..1.0].into_iter().map(|r| -solution.outflows(side, r)[0]).sum();
        println!("share {side} {:.2e} {:.2e}", computed - share, parts - computed);
        total += computed;
    }
    println!("total {:.2e}", total - 1.0);
    let solution = green(polygon(&L, &[N, D, N, N, D, N]), c(1.5, 0.5), 1e-9);
    println!("mixed {:.2e}", -solution.outflows(1, 0.0..1.0)[0] - 0.80526157646408);
    // Batches agree with single places.
    let layer = solution.sum(&[1.0]);
    let places: Vec<_> = (0..3000).map(|i| c(0.002 + 1.9 * ((i as f64 * 0.618) % 1.0), 0.001 + 0.99 * ((i as f64 * 0.755) % 1.0))).collect();
    let mut sums = vec![0.0; places.len()];
    let pole = RimmedPole { at: c(1.5, 0.5), strength: 1.0, rim_m: 1e-3 };
    solution.add_values(&layer, &[pole], &places, &mut sums);
    let worst = places.iter().zip(&sums).map(|(x, sum)| (solution.value(&layer, *x) - sum).abs()).fold(0.0, f64::max);
    println!("batch {worst:.2e}");
    // Gradient by differences
    let x = c(1.1, 0.3);
    let h = 1e-5;
    let g = solution.gradient(&layer, x);
    let dx = (solution.value(&layer, x + h) - solution.value(&layer, x - h)) / (2.0 * h);
    let dy = (solution.value(&layer, x + c(0.0, h)) - solution.value(&layer, x - c(0.0, h))) / (2.0 * h);
    println!("gradient {:.2e}", (g - c(dx, dy)).norm());
}

#[test]
fn clogged_half_plane() {
    let b = 0.7;
    let k = Condition::Clogged { skin_m: b };
    let sides = vec![
        Side::ray_in(c(0., 0.), c(0., 1.), 1.0, k),
        Side::ray_out(c(0., 0.), c(0., -1.), 1.0, k),
    ];
    let solution = green(Region::new(&[sides]), c(1., 0.), 1e-8);
    let layer = solution.sum(&[1.0]);
    for (x, value) in [((0.5, 0.3), 0.259888691167), ((0., 0.), 0.147841315878), ((0., 2.), 0.0514561429716), ((2., -1.5), 0.151152441756)] {
        report("clogged", &solution, solution.value(&layer, c(x.0, x.1)) - value);
    }
    let s = 1.0 / 2.0;
    println!("reach {:.2e}", -solution.outflows(0, s..1.0)[0] - solution.outflows(1, 0.0..s)[0] - 0.364874353454);
}

#[test]
fn a_lake_in_the_plane() {
    // Half-turn arcs around a lake of radius 1: one image by inversion.
    let arc = |start: f64| Side::arc(c(0., 0.), 1.0, start, -FRAC_PI_2, D);
    let sides = vec![arc(0.0), arc(-FRAC_PI_2), arc(-PI), arc(-1.5 * PI)];
    let pole = c(1.7, 0.4);
    let solution = green(Region::new(&[sides]), pole, 1e-9);
    let layer = solution.sum(&[1.0]);
    let x = c(-1.2, 0.9);
    let exact = ((1.0 - x * pole.conj()) / (x - pole)).norm().ln() / TAU;
    report("lake", &solution, solution.value(&layer, x) - exact);
}
