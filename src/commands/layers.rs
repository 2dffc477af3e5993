//! `mirrorwell layers`: what a run writes.

use comfy_table::{Table, presets};
use serde_json::{Value, json};

use super::console::{Console, wrapped};
use super::failure::Failure;
use crate::layers::{OUTPUTS, Output, Property, Units};
use crate::plan::UnitSystem;

/// What the command takes.
#[derive(Debug, clap::Args)]
#[command(
    after_help = "Example: find the name of an output, then write it alone:\n  \
                        mirrorwell layers\n  mirrorwell run my-plan.toml --only head_contours"
)]
pub struct Arguments {
    /// Print one JSON document
    #[arg(long)]
    json: bool,
}

/// The two kinds of plans, metric first.
const SYSTEMS: [UnitSystem; 2] = [UnitSystem::Metric, UnitSystem::Us];

/// Prints the outputs with their properties and units.
pub fn run(arguments: &Arguments, console: &Console) -> Result<(), Failure> {
    let text = if arguments.json {
        let list: Vec<Value> = OUTPUTS.iter().map(document).collect();
        serde_json::to_string_pretty(&list)
            .map(|text| text + "\n")
            .map_err(|error| Failure::Refused(error.to_string()))?
    } else {
        let entries: Vec<String> = OUTPUTS.iter().map(entry).collect();
        entries.join("\n")
    };
    Ok(console.result(&text)?)
}

/// One output for people.
fn entry(output: &Output) -> String {
    let mut text = format!("{}: {}\n", output.name, output.files.join(", "));
    text.push_str(&wrapped(&format!("{}.", output.about), "  ", "  "));
    if output.properties.is_empty() {
        return text;
    }
    let mut table = Table::new();
    table.load_preset(presets::NOTHING);
    for property in output.properties {
        let names = SYSTEMS.map(|system| property.name(Units(system)));
        let units = SYSTEMS.map(|system| property.unit(Units(system)));
        let kind = match units.iter().all(String::is_empty) {
            true => property.type_name().to_owned(),
            false => either(units),
        };
        table.add_row([format!("   {}", either(names)), kind]);
        table.add_row([format!("     {}", property.about), String::new()]);
    }
    let lines = table.to_string();
    let lines = lines.lines().map(|line| line.trim_end().to_owned() + "\n");
    text + &lines.collect::<String>()
}

/// A metric plan's word and a US plan's, once where they are the same.
fn either([metric, us]: [String; 2]) -> String {
    if metric == us {
        metric
    } else {
        format!("{metric} (us: {us})")
    }
}

/// One output for other programs.
fn document(output: &Output) -> Value {
    let [metric, us] = SYSTEMS.map(|system| -> Vec<Value> {
        let of = |property: &Property| property.document(Units(system));
        output.properties.iter().map(of).collect()
    });
    json!({
        "name": output.name,
        "files": output.files,
        "about": output.about,
        "properties": { "metric": metric, "us": us },
    })
}
