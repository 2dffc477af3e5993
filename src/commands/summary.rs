//! What `run` prints: short, and for people.

use std::fmt::Write as _;
use std::path::Path;

use comfy_table::{CellAlignment, Table};

use super::console::wrapped;
use crate::layers::words::{Words, listed, one_line, percent};
use crate::layers::{CAUTION, Output, Planned};

/// Rows of a table that are printed; the layers hold all.
const MOST_ROWS: usize = 40;
/// Flags that are printed; `findings.json` holds all.
const MOST_FLAGS: usize = 25;

/// The summary of a run whose `outputs` are in the folder `out`.
pub fn of(planned: &Planned<'_>, outputs: &[&Output], out: &Path) -> String {
    let mut text = format!("{}\n", one_line(&planned.plan.title));
    text.push_str(&recognised(planned));
    text.push_str(&totals(planned));
    text.push_str(&exchange(planned));
    text.push('\n');
    text.push_str(&wells(planned));
    if !planned.findings.neighbours.is_empty() {
        text.push('\n');
        text.push_str(&neighbours(planned));
    }
    text.push('\n');
    text.push_str(&flags(planned));
    text.push('\n');
    text.push_str(&files(outputs, out));
    text.push('\n');
    text.push_str(&wrapped(CAUTION, "", ""));
    text
}

/// Which aquifers were found, and how they were solved.
pub fn recognised(planned: &Planned<'_>) -> String {
    let site = planned.solution.site();
    let words = Words::of(planned);
    let mut text = String::new();
    let several = planned.solution.fields().len() > 1;
    for field in planned.solution.fields() {
        let mut sentence = format!(
            "{}; {}",
            one_line(&field.outline().words(site)),
            field.method()
        );
        sentence = planned.plan.units.beside(&sentence);
        let _ = write!(sentence, "; {}", words.proven(field.error_bound_m()));
        if several {
            let _ = write!(sentence, "; {}", held_wells(&words, &field.outline().wells));
        }
        text.push_str(&wrapped(&capitalised(&sentence), "", "  "));
    }
    text
}

/// The wells of one aquifer among several.
fn held_wells(words: &Words<'_>, wells: &[usize]) -> String {
    let named: Vec<String> = wells.iter().take(5).map(|&well| words.well(well)).collect();
    let more = match wells.len().saturating_sub(named.len()) {
        0 => String::new(),
        more => format!(" and {more} more"),
    };
    format!("holds {}{more}", named.join(", "))
}

/// A sentence with a capital at its head.
pub fn capitalised(sentence: &str) -> String {
    let mut characters = sentence.chars();
    characters.next().map_or_else(String::new, |first| {
        first.to_uppercase().chain(characters).collect()
    })
}

/// What is pumped, injected and given by rivers.
fn totals(planned: &Planned<'_>) -> String {
    let words = Words::of(planned);
    let rates = planned.findings.wells.iter().map(|well| well.pumping_m3_d);
    let pumped: f64 = rates.clone().filter(|rate| *rate > 0.0).sum();
    let injected: f64 = -rates.filter(|rate| *rate < 0.0).sum::<f64>();
    let mut text = format!("Pumping {}", words.rate(pumped));
    if injected > 0.0 {
        let _ = write!(text, ", injecting {}", words.rate(injected));
    }
    let site = planned.solution.site();
    let given: Vec<String> = planned
        .findings
        .boundaries
        .iter()
        .zip(&site.edges)
        .filter(|(finding, _)| finding.inflow_m3_d() != 0.0)
        .map(|(finding, edge)| {
            format!(
                "{} {}",
                one_line(&edge.name),
                words.rate(finding.inflow_m3_d())
            )
        })
        .collect();
    if !given.is_empty() {
        let _ = write!(text, "; taken from {}", given.join(", "));
    }
    wrapped(&text, "", "  ")
}

/// What passes between rivers and aquifer before pumping and after, where
/// more than the error of the heads does before: a head wrong by δ moves T δ.
fn exchange(planned: &Planned<'_>) -> String {
    let words = Words::of(planned);
    let verb = |m3_d: f64| if m3_d < 0.0 { "takes" } else { "gives" };
    let site = planned.solution.site();
    let noise_m3_d = site.aquifer.transmissivity.si() * planned.solution.error_bound_m();
    let counts = |m3_d: &f64| m3_d.abs() > noise_m3_d;
    let boundaries = planned.findings.boundaries.iter().zip(&site.edges);
    let told: Vec<String> = boundaries
        .clone()
        .filter_map(|(finding, edge)| {
            let before = finding.exchange_before_m3_d.filter(counts)?;
            let after = finding.exchange_after_m3_d()?;
            let again = match verb(after) {
                same if same == verb(before) => String::new(),
                other => format!("{other} "),
            };
            Some(format!(
                "{} {} {} before pumping, {again}{} after",
                one_line(&edge.name),
                verb(before),
                words.rate(before.abs()),
                words.rate(after.abs())
            ))
        })
        .collect();
    if told.is_empty() {
        return String::new();
    }
    let mut text = told.join("; ");
    let open: Vec<String> = boundaries
        .filter(|(finding, _)| finding.bounds_an_aquifer && finding.exchange_before_m3_d.is_none())
        .map(|(_, edge)| one_line(&edge.name))
        .collect();
    if !open.is_empty() {
        let _ = write!(text, "; not determined for {}", listed(&open));
    }
    wrapped(&text, "", "  ")
}

/// A table with a plain heading and numbers to the right.
fn table(heading: &[&str], unit_row: &[String]) -> Table {
    let mut table = Table::new();
    table.load_preset("     ──            ");
    table.set_header(
        heading
            .iter()
            .zip(unit_row)
            .map(|(name, unit)| format!("{name}\n{unit}")),
    );
    for column in table.column_iter_mut().skip(1) {
        column.set_cell_alignment(CellAlignment::Right);
    }
    table
}

/// The table without spaces at line ends.
fn printed(table: &Table) -> String {
    table
        .to_string()
        .lines()
        .map(|line| format!("{}\n", line.trim_end()))
        .collect()
}

/// How many rows were left out, and where they are.
fn left_out(count: usize, most: usize, place: &str) -> String {
    if count > most {
        format!("… and {} more in {place}\n", count - most)
    } else {
        String::new()
    }
}

/// The table of wells.
fn wells(planned: &Planned<'_>) -> String {
    let words = Words::of(planned);
    let units = planned.units();
    let length = || units.length_ending().to_owned();
    let heading = [
        "Well", "pumping", "level", "drawdown", "own", "others", "loss", "share",
    ];
    let unit_row = [
        String::new(),
        units.rate_words().to_owned(),
        length(),
        length(),
        length(),
        length(),
        length(),
        "of others".to_owned(),
    ];
    let mut table = table(&heading, &unit_row);
    let wells = &planned.findings.wells;
    for finding in wells.iter().take(MOST_ROWS) {
        table.add_row([
            words.well(finding.well),
            words.bare_rate(finding.pumping_m3_d),
            words.bare_length(finding.level_m()),
            words.bare_length(finding.drawdown_m()),
            words.bare_length(finding.own_m),
            words.bare_length(finding.interference_m),
            words.bare_length(finding.well_loss_m),
            finding
                .interference_share
                .map_or_else(|| "–".into(), percent),
        ]);
    }
    printed(&table) + &left_out(wells.len(), MOST_ROWS, "wells.geojson")
}

/// The table of neighbours.
fn neighbours(planned: &Planned<'_>) -> String {
    let words = Words::of(planned);
    let length = || planned.units().length_ending().to_owned();
    let heading = ["Neighbour", "drawdown", "allowed", "mostly by", "its part"];
    let unit_row = [String::new(), length(), length(), String::new(), length()];
    let mut table = table(&heading, &unit_row);
    let site = planned.solution.site();
    let findings = &planned.findings.neighbours;
    let rows = findings.iter().zip(&site.neighbours).take(MOST_ROWS);
    for (finding, neighbour) in rows {
        let none = || "–".to_owned();
        let worst = finding.worst.as_ref();
        let cause = worst.and_then(|worst| {
            let well = worst.largest_cause?;
            Some((words.well(well), *worst.by_well_m.get(well)?))
        });
        table.add_row([
            one_line(&neighbour.name),
            worst.map_or_else(
                || "outside".to_owned(),
                |worst| words.bare_length(worst.drawdown_m),
            ),
            finding
                .allowed_m
                .map_or_else(none, |m| words.bare_length(m)),
            cause.as_ref().map_or_else(none, |(name, _)| name.clone()),
            cause.map_or_else(none, |(_, part_m)| words.bare_length(part_m)),
        ]);
    }
    printed(&table) + &left_out(findings.len(), MOST_ROWS, "neighbours.geojson")
}

/// The flags, most severe first.
fn flags(planned: &Planned<'_>) -> String {
    let words = Words::of(planned);
    let flags = &planned.findings.flags;
    if flags.is_empty() {
        return "No flag: every limit of the plan is kept.\n".into();
    }
    let mut text = String::from("Flags, most severe first\n");
    for flag in flags.iter().take(MOST_FLAGS) {
        let _ = writeln!(text, "  {}: {}", flag.code.name(), words.who(flag.who));
        text.push_str(&wrapped(&words.flag(flag), "    ", "    "));
    }
    text + &left_out(flags.len(), MOST_FLAGS, "findings.json")
}

/// Where the files are.
fn files(outputs: &[&Output], out: &Path) -> String {
    let styled = outputs.iter().any(|output| output.files.len() > 1);
    let names: Vec<&str> = outputs
        .iter()
        .filter_map(|output| output.files.first().copied())
        .chain(styled.then_some("and a style (.sld) for each layer"))
        .collect();
    wrapped(
        &names.join(", "),
        &format!("Written to {}: ", one_line(&out.display().to_string())),
        "  ",
    )
}
