//! Draws a plan's map as an SVG picture, such as the one in the README:
//!
//! ```text
//! cargo run --release --example draw_map -- examples/demo.toml map.svg
//! ```

use std::error::Error;
use std::path::Path;

use mirrorwell::findings::{Findings, MapWindow, Solution, Survey};
use mirrorwell::layers::{Levels, Planned, Units, map_svg};
use mirrorwell::plan::Plan;

fn main() -> Result<(), Box<dyn Error>> {
    let mut arguments = std::env::args().skip(1);
    let plan_path = arguments.next().unwrap_or("examples/demo.toml".into());
    let map_path = arguments.next().unwrap_or("map.svg".into());

    let plan = Plan::read(Path::new(&plan_path))?;
    let solution = Solution::of(plan.site.clone()).map_err(|refusals| plan.diagnose(&refusals))?;
    let window = MapWindow::of(&solution).map_err(|refusal| plan.diagnose(&[refusal]))?;
    let survey = Survey::of(&solution, window)?;
    let findings = Findings::of(&solution, &survey)?;
    let levels = Levels::of(&survey, Units(plan.units), plan.site.map.interval)
        .map_err(|refusal| plan.diagnose(&[refusal]))?;
    let planned = Planned {
        plan: &plan,
        solution: &solution,
        survey: &survey,
        levels,
        findings: &findings,
        drawn: Default::default(),
    };
    std::fs::write(&map_path, map_svg(&planned)?)?;
    println!("drew {map_path}");
    Ok(())
}
