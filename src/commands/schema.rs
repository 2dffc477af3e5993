//! `mirrorwell schema`.

use super::console::Console;
use super::failure::Failure;

/// What the command takes: nothing.
#[derive(Debug, clap::Args)]
#[command(
    after_help = "Example: let an editor check plans while they are written:\n  \
                        mirrorwell schema > plan.schema.json"
)]
pub struct Arguments {}

/// Prints the JSON Schema of the plan file.
pub fn run(console: &Console) -> Result<(), Failure> {
    let schema = crate::plan::schema();
    let text = serde_json::to_string_pretty(&schema)
        .map_err(|error| Failure::Refused(error.to_string()))?;
    Ok(console.result(&format!("{text}\n"))?)
}
