//! Starts the program in a folder of its own.

use std::path::Path;
use std::process::Output;

use assert_cmd::Command;
use tempfile::TempDir;

/// An empty folder to work in.
pub fn folder() -> TempDir {
    tempfile::tempdir().expect("a temporary folder")
}

/// The program, in a folder, with nothing of the caller's surroundings.
pub fn mirrorwell(folder: &Path) -> Command {
    let mut command = Command::cargo_bin("mirrorwell").expect("the program is built");
    command
        .current_dir(folder)
        .env("NO_COLOR", "1")
        .timeout(std::time::Duration::from_secs(60));
    command
}

/// What the program does with some arguments.
pub fn outcome(folder: &Path, arguments: &[&str]) -> Output {
    mirrorwell(folder)
        .args(arguments)
        .output()
        .expect("it runs")
}

/// Exit status, standard output and standard error as one text.
pub fn printed(output: &Output) -> String {
    format!(
        "exit status {}\n--- standard output\n{}--- standard error\n{}",
        output.status.code().expect("it exits by itself"),
        String::from_utf8_lossy(&output.stdout),
        String::from_utf8_lossy(&output.stderr),
    )
}

/// Writes a plan and runs a command on it.
pub fn with_plan(plan: &str, command: &str) -> Output {
    let folder = folder();
    std::fs::write(folder.path().join("plan.toml"), plan).expect("a plan is written");
    outcome(folder.path(), &[command, "plan.toml"])
}

/// A small plan that works: one well beside a river.
pub const SMALL: &str = r#"
title = "Small"
crs = { origin = [15.0, 48.0] }
units = "metric"
[aquifer]
transmissivity = 500.0
roof = 40.0
[[river]]
name = "Ostra"
line = [[0.0, -1000.0], [0.0, 1000.0]]
stage = 60.0
[[well]]
name = "PW-1"
at = [100.0, 0.0]
pumping = 1000.0
radius = 0.15
[[neighbour]]
name = "Lot 14"
at = [200.0, 0.0]
allowed_drawdown = 0.3
"#;

/// A plan whose accuracy the rounding of its coordinates misses: a narrow well
/// 90 km from its river.
pub const FAR: &str = r#"
title = "Far from the river"
crs = { origin = [15.0, 48.0] }
units = "metric"
[aquifer]
transmissivity = 500.0
roof = 40.0
[accuracy]
head = 1e-9
[[river]]
name = "Ostra"
line = [[0.0, -1000.0], [0.0, 1000.0]]
stage = 60.0
[[well]]
name = "PW-1"
at = [90000.0, 0.0]
pumping = 1000.0
radius = 0.01
"#;
