//! Speed of the Green's functions: nanoseconds a node and well.
//!
//! A map of 1000 × 1000 nodes with 20 wells, on one thread and on all cores;
//! beside them the floor, one vectorised logarithm a node and well, and the
//! same half-plane sum in numpy (`half_plane_numpy.py`), run in this session.
//!
//! Run: `cargo bench --bench kernels`. It prints a table in Markdown.

use std::hint::black_box;
use std::path::Path;
use std::process::Command;
use std::time::Instant;

use mirrorwell::green::{self, Green, Source};
use mirrorwell::outline::{Axis, Kind, Shape};
use num_complex::Complex64;
use pulp::{Arch, Simd, WithSimd};
use rayon::prelude::*;

const SIDE: usize = 1000;
const WELLS: usize = 20;
/// Repeats of each timing; the median counts.
const REPEATS: usize = 9;

fn main() {
    // `cargo test` builds benches and runs them with --test or none; only
    // `cargo bench` passes --bench.
    if !std::env::args().any(|argument| argument == "--bench") {
        println!("benchmarks run under `cargo bench` only");
        return;
    }
    let cores = rayon::current_num_threads();
    println!("1000 x 1000 nodes, 20 wells, {cores} threads; nanoseconds a node and well\n");
    println!("| what | one thread | x floor | all cores | x floor |");
    println!("|---|---|---|---|---|");
    let floor = [true, false].map(|single| time(|| logarithms(single)));
    row("floor: one vectorised logarithm", floor, floor);
    let mut half_plane = floor;
    for (name, shape) in shapes() {
        let green = green::of(&shape, None).expect("a steady state");
        let points = nodes();
        let sources = wells();
        let times = [true, false].map(|single| {
            time(|| {
                black_box(superpose(green.as_ref(), &sources, &points, single));
            })
        });
        if name == "half-plane" {
            half_plane = times;
        }
        row(name, times, floor);
    }
    numpy(half_plane);
}

fn row(name: &str, [one, all]: [f64; 2], floor: [f64; 2]) {
    println!(
        "| {name} | {one:.2} | {:.2} | {all:.2} | {:.2} |",
        one / floor[0],
        all / floor[1]
    );
}

fn shapes() -> Vec<(&'static str, Shape)> {
    use Kind::{FixedHead as River, NoFlow as Barrier};
    let between = |width_m, kinds| Axis::TwoEdges { width_m, kinds };
    let axes = |x, y| Shape::Axes { x, y };
    vec![
        ("half-plane", axes(Axis::OneEdge(River), Axis::Open)),
        (
            "strip, two rivers",
            axes(between(1200.0, [River, River]), Axis::Open),
        ),
        (
            "strip, river and barrier",
            axes(between(1200.0, [River, Barrier]), Axis::Open),
        ),
        (
            "box, four rivers",
            axes(
                between(1200.0, [River, River]),
                between(1300.0, [River, River]),
            ),
        ),
        (
            "box, a river and three barriers",
            axes(
                between(1200.0, [River, Barrier]),
                between(1300.0, [Barrier, Barrier]),
            ),
        ),
        (
            "wedge of 70°, two rivers",
            Shape::Wedge {
                angle_rad: 70.0_f64.to_radians(),
                kinds: [River, River],
            },
        ),
        ("circle", Shape::Disk { radius_m: 2000.0 }),
    ]
}

/// The nodes of a map of 1 km², well inside every shape.
fn nodes() -> Vec<Complex64> {
    (0..SIDE * SIDE)
        .map(|node| {
            let (row, column) = (node / SIDE, node % SIDE);
            Complex64::new(100.5 + column as f64, 100.5 + row as f64)
        })
        .collect()
}

fn wells() -> Vec<Source> {
    (0..WELLS)
        .map(|well| {
            let turn = 2.4 * well as f64;
            let distance = 90.0 * (well as f64).sqrt();
            Source {
                pole: Complex64::new(600.0, 600.0) + Complex64::from_polar(distance, turn),
                strength_m: 1.0 + 0.1 * well as f64,
                rim_m: 0.2,
            }
        })
        .collect()
}

fn superpose(
    green: &dyn Green,
    sources: &[Source],
    points: &[Complex64],
    single: bool,
) -> Vec<f64> {
    let mut sums = vec![0.0; points.len()];
    if single {
        green.superpose(sources, points, &mut sums);
    } else {
        points
            .par_chunks(2048)
            .zip(sums.par_chunks_mut(2048))
            .for_each(|(points, sums)| green.superpose(sources, points, sums));
    }
    sums
}

/// Median nanoseconds a node and well, after one run to warm up.
fn time(mut work: impl FnMut()) -> f64 {
    work();
    let mut times: Vec<f64> = (0..REPEATS)
        .map(|_| {
            let start = Instant::now();
            work();
            start.elapsed().as_secs_f64()
        })
        .collect();
    times.sort_by(f64::total_cmp);
    times[REPEATS / 2] * 1e9 / (SIDE * SIDE * WELLS) as f64
}

/// The floor: 20 logarithms a node with the vector kernel of the library,
/// added up.
fn logarithms(single: bool) {
    let values: Vec<f64> = (0..SIDE * SIDE)
        .map(|node| 1.0 + 1e-3 * node as f64)
        .collect();
    let mut sums = vec![0.0; values.len()];
    if single {
        Arch::new().dispatch(Logarithms {
            values: &values,
            sums: &mut sums,
        });
    } else {
        values
            .par_chunks(2048)
            .zip(sums.par_chunks_mut(2048))
            .for_each(|(values, sums)| Arch::new().dispatch(Logarithms { values, sums }));
    }
    black_box(sums);
}

struct Logarithms<'a> {
    values: &'a [f64],
    sums: &'a mut [f64],
}

impl WithSimd for Logarithms<'_> {
    type Output = ();

    #[inline(always)]
    fn with_simd<S: Simd>(self, simd: S) {
        let values = S::as_simd_f64s(self.values).0;
        let sums = S::as_mut_simd_f64s(self.sums).0;
        for (sum, value) in sums.iter_mut().zip(values) {
            for well in 0..WELLS {
                let factor = simd.splat_f64s(1.0 + well as f64);
                let logarithm = green::ln_lanes(simd, simd.mul_f64s(*value, factor));
                *sum = simd.add_f64s(*sum, logarithm);
            }
        }
    }
}

/// The same half-plane sum in numpy, where Python has it.
fn numpy([one, all]: [f64; 2]) {
    let script = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/bench/half_plane_numpy.py");
    let python = std::env::var("PYTHON").unwrap_or_else(|_| "python3".to_owned());
    let output = Command::new(python).arg(script).output();
    let printed = output.map(|output| String::from_utf8_lossy(&output.stdout).trim().to_owned());
    match printed.ok().and_then(|text| text.parse::<f64>().ok()) {
        Some(numpy) => println!(
            "| half-plane in numpy | {numpy:.2} | | | |\n\nnumpy over half-plane: {:.1} x on one \
             thread, {:.1} x on all cores",
            numpy / one,
            numpy / all
        ),
        None => println!("\nnumpy is not installed (set PYTHON to an interpreter that has it)"),
    }
}
