//! `mirrorwell materials`.

use super::console::{Console, wrapped};
use super::failure::Failure;
use crate::plan::{Material, materials};

/// What the command takes.
#[derive(Debug, clap::Args)]
#[command(after_help = "Example: what a plan can write after `material =`:\n  \
                        mirrorwell materials")]
pub struct Arguments {
    /// Print one JSON document
    #[arg(long)]
    json: bool,
}

/// Prints the materials with their published ranges and sources.
pub fn run(arguments: &Arguments, console: &Console) -> Result<(), Failure> {
    let text = if arguments.json {
        let list: Vec<serde_json::Value> = materials().iter().map(document).collect();
        serde_json::to_string_pretty(&list)
            .map(|text| text + "\n")
            .map_err(|error| Failure::Refused(error.to_string()))?
    } else {
        let mut text = String::from(
            "Hydraulic conductivity, m/d: typical (lowest to highest published). A pumping\n\
             test at the site is worth more than any of these.\n\n",
        );
        materials()
            .iter()
            .for_each(|material| text.push_str(&entry(material)));
        text
    };
    Ok(console.result(&text)?)
}

/// One material for people.
fn entry(material: &Material) -> String {
    let range = material.conductivity;
    let figures = |value: f64| significant(value);
    format!(
        "{}\n  {}: {} ({} to {})\n{}{}",
        material.key,
        material.name,
        figures(range.typical().si()),
        figures(range.least.si()),
        figures(range.most.si()),
        wrapped(&material.source, "  source: ", "    "),
        wrapped(&material.caution, "  caution: ", "    "),
    )
}

/// A number to two figures.
fn significant(value: f64) -> String {
    if value == 0.0 || !value.is_finite() {
        return value.to_string();
    }
    let power = 10_f64.powf(value.abs().log10().floor() - 1.0);
    let rounded = (value / power).round() * power;
    let decimals = (-power.log10()).ceil().max(0.0) as usize;
    format!("{rounded:.decimals$}")
}

/// One material for other programs.
fn document(material: &Material) -> serde_json::Value {
    serde_json::json!({
        "key": material.key,
        "name": material.name,
        "conductivity_m_per_d": {
            "least": material.conductivity.least.si(),
            "typical": material.conductivity.typical().si(),
            "most": material.conductivity.most.si(),
        },
        "source": material.source,
        "caution": material.caution,
    })
}
