//! Where the plan comes from: a file, or the demo that is built in.

use std::path::{Path, PathBuf};

use super::failure::Failure;
use crate::findings::Solution;
use crate::plan::Plan;

/// The demo: an invented place.
const DEMO: &str = include_str!("../../examples/demo.toml");

/// The name that the demo goes by.
const DEMO_NAME: &str = "examples/demo.toml";

/// The plan to work on.
#[derive(Debug, clap::Args)]
pub struct PlanArgument {
    /// The plan file (TOML); without it, the demo that is built in
    #[arg(value_name = "PLAN")]
    path: Option<PathBuf>,
}

impl PlanArgument {
    /// Reads the plan.
    ///
    /// # Errors
    /// All faults of the plan at once.
    pub fn read(&self) -> Result<Plan, Failure> {
        let plan = match &self.path {
            Some(path) => Plan::read(path)?,
            None => Plan::from_text(DEMO_NAME, DEMO, Path::new("."))?,
        };
        Ok(plan)
    }

    /// How the plan is called in sentences.
    pub fn name(&self) -> String {
        match &self.path {
            Some(path) => path.display().to_string(),
            None => "the built-in demo".into(),
        }
    }
}

/// Solves a plan's site.
///
/// # Errors
/// Every refusal, at its place in the plan.
pub fn solve(plan: &Plan) -> Result<Solution, Failure> {
    Solution::of(plan.site.clone()).map_err(|refusals| plan.diagnose(&refusals).into())
}
