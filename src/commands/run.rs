//! `mirrorwell run`: the main job.

use std::path::{Path, PathBuf};

use super::console::Console;
use super::failure::Failure;
use super::progress::Progress;
use super::source::{PlanArgument, solve};
use super::summary;
use crate::findings::{Findings, FlagCode, MapWindow, Solution, Survey};
use crate::layers::{self, Drawn, Levels, OUTPUTS, Output, Planned, Units};
use crate::plan::Plan;

/// What the command takes.
#[derive(Debug, clap::Args)]
#[command(
    after_help = "Example: plan a well field, and stop a script when a limit is broken:\n  \
                        mirrorwell run my-plan.toml --out my-layers --strict"
)]
pub struct Arguments {
    #[command(flatten)]
    plan: PlanArgument,

    /// The folder for layers and tables; files of an earlier run in it are
    /// replaced, others left alone
    #[arg(long, value_name = "DIR", default_value = "mirrorwell-out")]
    out: PathBuf,

    /// Write these outputs alone, named as `mirrorwell layers` lists them;
    /// other files of an earlier run stay as they are
    #[arg(long, value_name = "NAME,…", value_delimiter = ',')]
    only: Vec<String>,

    /// End with status 3 when a limit is broken or the accuracy is missed
    #[arg(long)]
    strict: bool,
}

/// Solves the plan, writes every output and prints the summary.
pub fn run(arguments: &Arguments, console: &Console) -> Result<(), Failure> {
    let outputs = wanted(&arguments.only)?;
    let progress = Progress::start(console, 5);
    progress.stage("reading the plan");
    let plan = arguments.plan.read()?;
    progress.stage("solving");
    let solution = solve(&plan)?;
    let window =
        MapWindow::of(&solution).map_err(|refusal| Failure::from(plan.diagnose(&[refusal])))?;
    progress.stage("surveying the map");
    let survey = Survey::of(&solution, window)?;
    let findings = Findings::of(&solution, &survey)?;
    progress.stage("drawing contours");
    let planned = planned(&plan, &solution, &survey, &findings)?;
    let files = layers::make(&planned, outputs.iter().copied())?;
    progress.stage("writing files");
    layers::write_all(&arguments.out, &files)?;
    drop(progress);
    say(&planned, &outputs, &arguments.out, console)?;
    if arguments.strict {
        return strictly(&findings);
    }
    Ok(())
}

/// The outputs of these names; all where none is named.
fn wanted(names: &[String]) -> Result<Vec<&'static Output>, Failure> {
    if names.is_empty() {
        return Ok(OUTPUTS.iter().collect());
    }
    layers::outputs_named(names).map_err(|unknown| Failure::Refused(format!("--only: {unknown}")))
}

/// Refuses to end well where a limit is broken or the accuracy is missed.
fn strictly(findings: &Findings) -> Result<(), Failure> {
    let count = |counts: fn(FlagCode) -> bool| {
        let flags = findings.flags.iter();
        flags.filter(|flag| counts(flag.code)).count()
    };
    let limits = count(FlagCode::breaks_a_limit);
    let aquifers = count(|code| code == FlagCode::AccuracyNotReached);
    if limits + aquifers > 0 {
        return Err(Failure::NotKept { limits, aquifers });
    }
    Ok(())
}

/// Puts together what the outputs are made from.
fn planned<'a>(
    plan: &'a Plan,
    solution: &'a Solution,
    survey: &'a Survey<'a>,
    findings: &'a Findings,
) -> Result<Planned<'a>, Failure> {
    let levels = Levels::of(survey, Units(plan.units), plan.site.map.interval)
        .map_err(|refusal| Failure::from(plan.diagnose(&[refusal])))?;
    Ok(Planned {
        plan,
        solution,
        survey,
        levels,
        findings,
        drawn: Drawn::default(),
    })
}

/// Prints the summary and, to standard error, the notes.
fn say(
    planned: &Planned<'_>,
    outputs: &[&Output],
    out: &Path,
    console: &Console,
) -> Result<(), Failure> {
    for note in planned.notes() {
        console.note(&super::console::wrapped(&note, "note: ", "      "));
    }
    if !console.is_quiet() {
        console.result(&summary::of(planned, outputs, out))?;
    }
    Ok(())
}
