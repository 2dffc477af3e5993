//! Makes outputs of a plan without writing them.

use std::path::Path;

use mirrorwell::findings::{Findings, MapWindow, Solution, Survey};
use mirrorwell::layers::{Drawn, Levels, Planned, Units, make, outputs_named};
use mirrorwell::plan::Plan;

/// The first file of an output.
pub fn made(plan: &str, output: &str) -> Vec<u8> {
    let plan = Plan::from_text("plan.toml", plan, Path::new("")).unwrap();
    let solution = Solution::of(plan.site.clone()).unwrap();
    let window = MapWindow::of(&solution).unwrap();
    let survey = Survey::of(&solution, window).unwrap();
    let findings = Findings::of(&solution, &survey).unwrap();
    let levels = Levels::of(&survey, Units(plan.units), None).unwrap();
    let planned = Planned {
        plan: &plan,
        solution: &solution,
        survey: &survey,
        levels,
        findings: &findings,
        drawn: Drawn::default(),
    };
    let outputs = outputs_named(&[output.to_owned()]).unwrap();
    make(&planned, outputs).unwrap().swap_remove(0).bytes
}
