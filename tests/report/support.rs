//! Plans and their pages.

use std::path::Path;

use mirrorwell::findings::{Findings, MapWindow, Solution, Survey};
use mirrorwell::layers::{Drawn, Levels, Planned, Units};
use mirrorwell::plan::Plan;
use mirrorwell::report;
use scraper::{ElementRef, Html, Selector};

/// The demo.
pub const DEMO: &str = include_str!("../../examples/demo.toml");

/// Does something with a plan and all that is found of it.
pub fn with<T>(plan: &str, act: impl FnOnce(&Planned<'_>) -> T) -> T {
    let plan = Plan::from_text("plan.toml", plan, Path::new(".")).unwrap();
    let solution = Solution::of(plan.site.clone()).unwrap();
    let survey = Survey::of(&solution, MapWindow::of(&solution).unwrap()).unwrap();
    let findings = Findings::of(&solution, &survey).unwrap();
    act(&Planned {
        plan: &plan,
        solution: &solution,
        survey: &survey,
        levels: Levels::of(&survey, Units(plan.units), plan.site.map.interval).unwrap(),
        findings: &findings,
        drawn: Drawn::default(),
    })
}

/// The page of a plan.
pub fn page(plan: &str) -> String {
    with(plan, |planned| {
        String::from_utf8(report::page(planned).unwrap()).unwrap()
    })
}

/// All elements that a selector finds.
pub fn all<'h>(html: &'h Html, selector: &str) -> Vec<ElementRef<'h>> {
    html.select(&Selector::parse(selector).unwrap()).collect()
}

/// The text of an element, its white space made single.
pub fn text(element: ElementRef<'_>) -> String {
    let text: Vec<&str> = element.text().collect();
    text.join(" ")
        .split_whitespace()
        .collect::<Vec<_>>()
        .join(" ")
}

/// The texts of all elements that a selector finds.
pub fn texts(html: &Html, selector: &str) -> Vec<String> {
    all(html, selector).into_iter().map(text).collect()
}
