//! Cost of the general solver: time, unknowns and bound against the number of
//! vertices, and a map of 10⁶ nodes.
//!
//! Run: `cargo bench --bench general`. It prints two tables, the first of which
//! is comma-separated and ready to plot. The plans are made by `outlines.py`;
//! `finite_elements.py` solves the same ones for comparison.

use std::path::Path;
use std::time::Instant;

use mirrorwell::field::WellField;
use mirrorwell::outline;
use mirrorwell::plan::Plan;
use mirrorwell::site::{Length, Point};

/// Plan, the head error asked for in metres.
const PLANS: [(&str, f64); 7] = [
    ("fold_8", 1e-6),
    ("valley_25", 1e-4),
    ("valley_50", 1e-4),
    ("valley_100", 1e-4),
    ("valley_200", 1e-4),
    ("valley_500", 1e-4),
    ("valley_1000", 1e-4),
];

/// Nodes along each side of the map.
const SIDE: usize = 1000;

fn main() {
    // `cargo test --benches` builds it and leaves it at that.
    if !std::env::args().any(|argument| argument == "--bench") {
        return;
    }
    println!("plan,vertices,wells,asked_m,bound_m,unknowns,seconds,map_seconds");
    for (name, asked_m) in PLANS {
        match measure(name, asked_m) {
            Ok(line) => println!("{line}"),
            Err(why) => println!("{name}: {why}"),
        }
    }
}

/// One line of the table.
fn measure(name: &str, asked_m: f64) -> Result<String, String> {
    let file = format!("tests/bench/plans/{name}.toml");
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join(file);
    let mut plan = Plan::read(&path).map_err(|faults| faults.to_string())?;
    plan.site.head_tolerance = Length::from_si(asked_m);
    let start = Instant::now();
    let outlines = outline::find(&plan.site).map_err(|faults| format!("{faults:?}"))?;
    let outline = outlines.into_iter().next().ok_or("no aquifer")?;
    let vertices = outline.sides.len();
    let field = WellField::solve(&plan.site, outline).map_err(|faults| format!("{faults:?}"))?;
    let seconds = start.elapsed().as_secs_f64();
    let start = Instant::now();
    let heads_m = field.heads_m(&nodes(&plan));
    let map_seconds = start.elapsed().as_secs_f64();
    if heads_m.iter().all(|head_m| head_m.is_nan()) {
        return Err("the map misses the aquifer".to_owned());
    }
    Ok(format!(
        "{name},{vertices},{},{asked_m:e},{:.1e},{},{seconds:.2},{map_seconds:.2}",
        plan.site.wells.len(),
        field.error_bound_m(),
        field.unknowns().unwrap_or(0),
    ))
}

/// A square grid over all wells and some way around them.
fn nodes(plan: &Plan) -> Vec<Point> {
    let places: Vec<Point> = plan.site.wells.iter().map(|well| well.at).collect();
    let low = places
        .iter()
        .fold(Point::new(f64::MAX, f64::MAX), |low, at| low.inf(at));
    let high = places
        .iter()
        .fold(Point::new(f64::MIN, f64::MIN), |high, at| high.sup(at));
    let margin = 0.2 * (high - low);
    let at = |index: usize, low: f64, size: f64| low + size * index as f64 / SIDE as f64;
    (0..SIDE * SIDE)
        .map(|node| {
            Point::new(
                at(
                    node % SIDE,
                    low.x - margin.x,
                    high.x - low.x + 2.0 * margin.x,
                ),
                at(
                    node / SIDE,
                    low.y - margin.y,
                    high.y - low.y + 2.0 * margin.y,
                ),
            )
        })
        .collect()
}
