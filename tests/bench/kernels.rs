//! Speed of the Green's functions: nanoseconds a node and well.
//!
//! A map of 1000 × 1000 nodes with 20 wells, on one thread and on all cores;
//! beside them the floor, one vectorised logarithm a node and well, and the
//! same half-plane sum in numpy (`half_plane_numpy.py`), run along with it.
//!
//! Run: `cargo bench --bench kernels`. After criterion's own report it prints a
//! table in Markdown. PYTHON names an interpreter that has numpy.

use std::hint::black_box;
use std::path::Path;
use std::process::Command;
use std::time::Duration;

use criterion::{Criterion, Throughput};
use mirrorwell::green::{self, Green, Source};
use mirrorwell::outline::{Axis, Kind, Shape};
use num_complex::Complex64;
use pulp::{Arch, Simd, WithSimd};
use rayon::prelude::*;

const SIDE: usize = 1000;
const WELLS: usize = 20;
const PAIRS: u64 = (SIDE * SIDE * WELLS) as u64;
const FLOOR: &str = "floor: one vectorised logarithm";
const THREADS: [&str; 2] = ["one thread", "all cores"];

fn main() {
    let mut criterion = Criterion::default()
        .sample_size(10)
        .warm_up_time(Duration::from_millis(500))
        .measurement_time(Duration::from_secs(2))
        .configure_from_args();
    let points = nodes();
    let sources = wells();
    let mut names = vec![FLOOR];
    let values: Vec<f64> = (0..SIDE * SIDE)
        .map(|node| 1.0 + 1e-3 * node as f64)
        .collect();
    measure(&mut criterion, FLOOR, |single| {
        black_box(logarithms(&values, single));
    });
    for (name, shape) in shapes() {
        let Ok(green) = green::of(&shape, None) else {
            continue;
        };
        names.push(name);
        measure(&mut criterion, name, |single| {
            black_box(superpose(green.as_ref(), &sources, &points, single));
        });
    }
    criterion.final_summary();
    // `cargo test --benches` runs each work once, unmeasured.
    if std::env::args().any(|argument| argument == "--bench") {
        print_table(&names);
    }
}

/// Measures some work on one thread and on all cores.
fn measure(criterion: &mut Criterion, name: &str, work: impl Fn(bool)) {
    let mut group = criterion.benchmark_group(name);
    group.throughput(Throughput::Elements(PAIRS));
    for threads in THREADS {
        group.bench_function(threads, |bencher| {
            bencher.iter(|| work(threads == THREADS[0]));
        });
    }
    group.finish();
}

/// The medians as nanoseconds a node and well, beside the floor and numpy.
fn print_table(names: &[&str]) {
    let cores = rayon::current_num_threads();
    println!("\n1000 x 1000 nodes, 20 wells, {cores} threads; nanoseconds a node and well\n");
    println!("| what | one thread | × floor | all cores | × floor |");
    println!("|---|---|---|---|---|");
    let median = |name: &str| THREADS.map(|threads| median_ns(name, threads).unwrap_or(f64::NAN));
    let floor = median(FLOOR);
    for name in names {
        let [one, all] = median(name);
        let [times_one, times_all] = [one / floor[0], all / floor[1]];
        println!("| {name} | {one:.2} | {times_one:.2} | {all:.2} | {times_all:.2} |");
    }
    numpy(median("half-plane"));
}

/// The median that criterion has just written, as nanoseconds a pair.
fn median_ns(name: &str, threads: &str) -> Option<f64> {
    let folder = std::env::var("CARGO_TARGET_DIR").unwrap_or_else(|_| "target".to_owned());
    let path = Path::new(&folder)
        .join("criterion")
        .join(name.replace([':', '/'], "_"))
        .join(threads)
        .join("new/estimates.json");
    let text = std::fs::read_to_string(path).ok()?;
    let estimates: serde_json::Value = serde_json::from_str(&text).ok()?;
    Some(estimates.pointer("/median/point_estimate")?.as_f64()? / PAIRS as f64)
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

/// The floor: 20 logarithms a node with the vector kernel of the library,
/// added up.
fn logarithms(values: &[f64], single: bool) -> Vec<f64> {
    let mut sums = vec![0.0; values.len()];
    let add_up = |(values, sums)| Arch::new().dispatch(Logarithms { values, sums });
    if single {
        add_up((values, sums.as_mut_slice()));
    } else {
        values
            .par_chunks(2048)
            .zip(sums.par_chunks_mut(2048))
            .for_each(add_up);
    }
    sums
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
