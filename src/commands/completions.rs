//! `mirrorwell completions`.

use clap::CommandFactory;
use clap_complete::Shell;

use super::console::Console;
use super::failure::Failure;

/// What the command takes.
#[derive(Debug, clap::Args)]
#[command(
    after_help = "Example: completions for bash, for the current user:\n  \
                        mirrorwell completions bash > ~/.local/share/bash-completion/completions/mirrorwell"
)]
pub struct Arguments {
    /// The shell to write for
    shell: Shell,
}

/// Prints a completion script.
pub fn run(arguments: &Arguments, console: &Console) -> Result<(), Failure> {
    let mut script = Vec::new();
    clap_complete::generate(
        arguments.shell,
        &mut super::Cli::command(),
        "mirrorwell",
        &mut script,
    );
    Ok(console.result(&String::from_utf8_lossy(&script))?)
}
