//! `mirrorwell manual`.

use clap::CommandFactory;

use super::console::Console;
use super::failure::Failure;

/// What the command takes: nothing.
#[derive(Debug, clap::Args)]
#[command(after_help = "Example: read the manual page at once:\n  \
                        mirrorwell manual > mirrorwell.1 && man ./mirrorwell.1")]
pub struct Arguments {}

/// Prints the manual page: the program, then each command.
pub fn run(console: &Console) -> Result<(), Failure> {
    let mut page = Vec::new();
    let mut command = super::Cli::command();
    command.build();
    clap_mangen::Man::new(command.clone()).render(&mut page)?;
    for subcommand in command.get_subcommands() {
        let man = clap_mangen::Man::new(subcommand.clone());
        page.extend(b".SH \"\"\n");
        man.render_name_section(&mut page)?;
        man.render_synopsis_section(&mut page)?;
        man.render_options_section(&mut page)?;
        man.render_extra_section(&mut page)?;
    }
    Ok(console.result(&String::from_utf8_lossy(&page))?)
}
