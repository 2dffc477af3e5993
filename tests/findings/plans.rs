//! Plans for the tests.

use std::path::Path;

use mirrorwell::findings::{Findings, MapWindow, Solution, Survey};
use mirrorwell::plan::Plan;
use mirrorwell::site::Site;

/// The example plans, solved in the tests below.
pub const EXAMPLES: [&str; 4] = ["demo.toml", "box.toml", "us_units.toml", "two_banks.toml"];

/// The site of an example plan.
pub fn example(name: &str) -> Site {
    let path = Path::new(env!("CARGO_MANIFEST_DIR"))
        .join("examples")
        .join(name);
    Plan::read(&path).expect("a plan without a fault").site
}

/// The site of a plan's text.
pub fn site(text: &str) -> Site {
    let head = "crs = { origin = [15.0, 48.0] }\nunits = \"metric\"\n";
    Plan::from_text("plan.toml", &format!("{head}{text}"), Path::new("."))
        .expect("a plan without a fault")
        .site
}

/// A solved site.
pub fn solved(site: Site) -> Solution {
    Solution::of(site).expect("a steady state")
}

/// Everything found of a site.
pub fn found(solution: &Solution) -> Findings {
    let window = MapWindow::of(solution).expect("a map");
    let survey = Survey::of(solution, window).expect("a survey");
    Findings::of(solution, &survey).expect("findings")
}
