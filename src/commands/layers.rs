//! `mirrorwell layers`: what a run writes.

use comfy_table::{ColumnConstraint, ContentArrangement, Table, presets};
use serde_json::{Value, json};

use super::console::{COLUMNS, Console, wrapped};
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
    table
        .load_preset(presets::NOTHING)
        .set_content_arrangement(ContentArrangement::Dynamic)
        .set_width(COLUMNS as u16)
        .set_header(["  property", "in a us plan", "unit", "meaning"]);
    for property in output.properties {
        let [name, us_name] = SYSTEMS.map(|system| property.name(Units(system)));
        let us_name = if us_name == name {
            String::new()
        } else {
            us_name
        };
        let unit = match either(SYSTEMS.map(|system| property.unit(Units(system)))) {
            none if none.is_empty() => property.type_name().to_owned(),
            unit => unit,
        };
        let about = property.about.to_owned();
        table.add_row([format!("  {name}"), us_name, unit, about]);
    }
    for column in table.column_iter_mut().take(3) {
        column.set_constraint(ColumnConstraint::ContentWidth);
    }
    let lines = table.to_string();
    let lines = lines.lines().map(|line| format!(" {}\n", line.trim_end()));
    text + &lines.collect::<String>()
}

/// A metric plan's word and a US plan's, once where they are the same.
fn either([metric, us]: [String; 2]) -> String {
    if metric == us {
        metric
    } else {
        format!("{metric} or {us}")
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
