//! A sound plan to spoil, and short ways to look at the result.

use std::path::Path;

use mirrorwell::plan::{Plan, PlanFaults};

/// The shortest plan that says everything needed.
pub const SOUND: &str = r#"crs = "EPSG:32633"
units = "metric"

[aquifer]
transmissivity = 800.0

[[river]]
name = "Ostra"
line = [[412000.0, 5360000.0], [413500.0, 5362600.0]]
stage = 61.4

[[well]]
name = "PW-1"
at = [412450.0, 5361020.0]
pumping = 2160.0
radius = 0.2
"#;

/// Reads a plan that has no layers.
pub fn read(text: &str) -> Result<Plan, PlanFaults> {
    Plan::from_text("plan.toml", text, Path::new("."))
}

/// The sound plan with one piece of its text replaced.
pub fn spoilt(old: &str, new: &str) -> String {
    assert!(SOUND.contains(old), "the sound plan has no {old:?}");
    SOUND.replacen(old, new, 1)
}

/// The faults of a plan as a person sees them.
pub fn refusal(text: &str) -> String {
    read(text).expect_err("the plan was accepted").render(false)
}

/// Holds what a user reads of several plans that are wrong, each with its title.
macro_rules! assert_refusals {
    ([$($case:expr),* $(,)?]) => {
        insta::with_settings!({ omit_expression => true }, {
            insta::assert_snapshot!($crate::support::gallery(&[$($case),*]));
        })
    };
}
pub(crate) use assert_refusals;

/// Several refusals under their titles, for one snapshot.
pub fn gallery(cases: &[(&str, String)]) -> String {
    let pages = cases
        .iter()
        .map(|(title, text)| format!("## {title}\n\n{}\n", refusal(text)));
    pages.collect::<Vec<_>>().join("\n\n")
}
