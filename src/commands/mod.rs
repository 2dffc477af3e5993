//! The command line: one file a command, glue only.
//!
//! Results go to standard output; progress, notes and errors to standard
//! error. Exit status: 0 done; 1 a fault in the program itself; 2 the command
//! line or the plan is refused, or a file cannot be read or written; 3 with
//! `--strict`, when a limit is broken or the plan's accuracy missed.

mod check;
mod completions;
mod console;
mod failure;
mod heads;
mod layers;
mod manual;
mod materials;
mod points;
mod progress;
mod run;
mod schema;
mod source;
mod summary;

use std::process::ExitCode;

use clap::{Parser, Subcommand};

use console::Console;
use failure::Failure;

/// Plans groundwater well fields before anything is drilled: heads, drawdown,
/// interference between wells, and what each river gives.
///
/// Screening-level results for a homogeneous, confined aquifer in steady
/// state. A licensed hydrogeologist reviews them before anything is drilled
/// or permitted; local permits and codes decide.
#[derive(Debug, Parser)]
#[command(name = "mirrorwell", version, max_term_width = 88)]
#[command(
    after_help = "Example: plan the well field that is built in, then look at the files:\n  \
                        mirrorwell run\n  ls mirrorwell-out"
)]
pub struct Cli {
    #[command(subcommand)]
    command: Command,

    /// Say nothing but results and errors
    #[arg(long, short, global = true)]
    quiet: bool,

    /// Use this many threads; the results do not depend on it
    #[arg(long, value_name = "N", global = true,
          value_parser = clap::value_parser!(u16).range(1..=1024))]
    threads: Option<u16>,
}

#[derive(Debug, Subcommand)]
enum Command {
    /// Plan the well field and write every layer and table
    Run(run::Arguments),
    /// Read the plan and say what was found in it; write nothing
    Check(check::Arguments),
    /// Heads and drawdowns at points, as CSV
    Heads(heads::Arguments),
    /// What a run writes: outputs, their files, properties and units
    Layers(layers::Arguments),
    /// The JSON Schema of the plan file, for editors
    Schema(schema::Arguments),
    /// The aquifer materials that a plan can name, and their sources
    Materials(materials::Arguments),
    /// A completion script for a shell
    Completions(completions::Arguments),
    /// The manual page, in roff
    Manual(manual::Arguments),
}

/// Runs the program as its user started it.
pub fn start() -> ExitCode {
    let run = std::panic::catch_unwind(|| {
        let cli = Cli::parse();
        let console = Console::new(cli.quiet);
        match dispatch(&cli, &console) {
            Ok(()) => ExitCode::SUCCESS,
            Err(failure) => failure.report(&console),
        }
    });
    // The panic's own message has been printed by then.
    run.unwrap_or_else(|_| {
        eprintln!("This is a fault in mirrorwell itself; no file was changed by it.");
        ExitCode::from(1)
    })
}

/// Runs the command that was asked for.
fn dispatch(cli: &Cli, console: &Console) -> Result<(), Failure> {
    if let Some(threads) = cli.threads {
        rayon::ThreadPoolBuilder::new()
            .num_threads(usize::from(threads))
            .build_global()
            .map_err(|error| {
                Failure::Refused(format!("cannot start {threads} threads: {error}"))
            })?;
    }
    match &cli.command {
        Command::Run(arguments) => run::run(arguments, console),
        Command::Check(arguments) => check::run(arguments, console),
        Command::Heads(arguments) => heads::run(arguments, console),
        Command::Layers(arguments) => layers::run(arguments, console),
        Command::Schema(_) => schema::run(console),
        Command::Materials(arguments) => materials::run(arguments, console),
        Command::Completions(arguments) => completions::run(arguments, console),
        Command::Manual(_) => manual::run(console),
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use clap::CommandFactory;

    /// Clap's own check of the whole definition.
    #[test]
    fn the_command_line_is_well_defined() {
        Cli::command().debug_assert();
    }

    #[test]
    fn every_command_shows_a_worked_example() {
        for command in Cli::command().get_subcommands_mut() {
            let help = command.render_long_help().to_string();
            assert!(help.contains("Example"), "{}", command.get_name());
        }
    }
}
