//! `mirrorwell check`: what a plan says, without writing anything.

use std::fmt::Write as _;

use serde_json::{Value, json};

use super::console::{Console, wrapped};
use super::failure::Failure;
use super::source::{PlanArgument, solve};
use crate::field::WellField;
use crate::findings::{Solution, WellsAndNeighbours, oddities};
use crate::layers::words::{Words, one_line, steady_state};
use crate::layers::{CAUTION, Properties, Units};
use crate::plan::{Plan, PlanFaults};
use crate::site::Site;

/// What the command takes.
#[derive(Debug, clap::Args)]
#[command(after_help = "Example: look a plan over before running it:\n  \
                        mirrorwell check my-plan.toml")]
pub struct Arguments {
    #[command(flatten)]
    plan: PlanArgument,

    /// Print one JSON document, also when the plan is refused
    #[arg(long)]
    json: bool,
}

/// Reads and solves the plan, and says what was found.
pub fn run(arguments: &Arguments, console: &Console) -> Result<(), Failure> {
    let solved = arguments.plan.read().and_then(|plan| {
        let solution = solve(&plan)?;
        let found = WellsAndNeighbours::of(&solution);
        Ok((plan, solution, found))
    });
    match solved {
        Ok((plan, solution, found)) => {
            let report = Report::of(&plan, &solution, &found);
            let text = if arguments.json {
                pretty(&report.json())?
            } else {
                report.text(&arguments.plan.name())
            };
            Ok(console.result(&text)?)
        }
        Err(Failure::Plan(faults)) if arguments.json => {
            console.result(&pretty(&refused(&faults))?)?;
            Err(Failure::Said)
        }
        Err(failure) => Err(failure),
    }
}

/// A document for other programs.
fn pretty(document: &Value) -> Result<String, Failure> {
    serde_json::to_string_pretty(document)
        .map(|text| text + "\n")
        .map_err(|error| Failure::Refused(error.to_string()))
}

/// The document of a refused plan.
fn refused(faults: &PlanFaults) -> Value {
    json!({"solvable": false, "faults": faults.list(), "caution": CAUTION})
}

/// What was found.
struct Report<'a> {
    plan: &'a Plan,
    solution: &'a Solution,
    notes: Vec<String>,
    oddities: Vec<String>,
}

impl<'a> Report<'a> {
    fn of(plan: &'a Plan, solution: &'a Solution, found: &WellsAndNeighbours) -> Self {
        let words = Words::new(solution.site(), Units(plan.units));
        let oddities = oddities(solution, &found.wells, &found.neighbours)
            .iter()
            .map(|oddity| words.oddity(oddity))
            .collect();
        Self {
            plan,
            solution,
            notes: crate::layers::notes(plan, solution),
            oddities,
        }
    }

    fn text(&self, name: &str) -> String {
        let site = self.solution.site();
        let words = Words::new(site, Units(self.plan.units));
        let mut text = format!("{}\n", one_line(&self.plan.title));
        let mut line = |label: &str, value: &str| {
            text.push_str(&wrapped(value, &format!("{label:<14}"), &" ".repeat(14)));
        };
        line("plan", name);
        line("grid", &self.plan.crs.name());
        for field in self.solution.fields() {
            let told = |text: &str| self.plan.units.beside(text);
            line("outline", &told(&one_line(&field.outline().words(site))));
            line("method", &told(&field.method()));
            line("accuracy", &accuracy(&words, site, field));
            line("steady state", &steady_state(self.solution, field));
        }
        let counts = format!(
            "{} and {}",
            counted(site.wells.len(), "well"),
            counted(site.neighbours.len(), "neighbour")
        );
        line("holds", &counts);
        list(&mut text, "Notes", &self.notes);
        list(&mut text, "What looks wrong", &self.oddities);
        if self.oddities.is_empty() {
            text.push_str("\nNothing looks wrong.\n");
        }
        let _ = write!(text, "\n{}", wrapped(CAUTION, "", ""));
        text
    }

    fn json(&self) -> Value {
        let site = self.solution.site();
        let told = |text: &str| self.plan.units.beside(text);
        let outlines: Vec<Value> = self
            .solution
            .fields()
            .iter()
            .map(|field| {
                Properties::new(Units(self.plan.units))
                    .with("shape", field.outline().shape.name())
                    .with("words", told(&field.outline().words(site)))
                    .with("method", told(&field.method()))
                    .length("error_bound", field.error_bound_m())
                    .with("accuracy_reached", field.is_accurate(site.head_tolerance))
                    .with("steady_state", steady_state(self.solution, field))
                    .into()
            })
            .collect();
        json!({
            "solvable": true,
            "title": self.plan.title,
            "plan_sha256": self.plan.sha256,
            "crs": self.plan.crs.name(),
            "units": self.plan.units.name(),
            "outlines": outlines,
            "wells": site.wells.len(),
            "neighbours": site.neighbours.len(),
            "notes": self.notes,
            "looks_wrong": self.oddities,
            "caution": CAUTION,
        })
    }
}

/// How far an aquifer's heads are right, and whether that is enough.
fn accuracy(words: &Words<'_>, site: &Site, field: &WellField) -> String {
    let bound_m = field.error_bound_m();
    if field.is_accurate(site.head_tolerance) {
        words.proven(bound_m)
    } else {
        words.inexact(bound_m, site.head_tolerance.si())
    }
}

/// "1 well", "5 wells".
fn counted(count: usize, what: &str) -> String {
    let plural = if count == 1 { "" } else { "s" };
    format!("{count} {what}{plural}")
}

/// A heading with a list, or nothing.
fn list(text: &mut String, heading: &str, items: &[String]) {
    if !items.is_empty() {
        let _ = writeln!(text, "\n{heading}");
        for item in items {
            text.push_str(&wrapped(item, "- ", "  "));
        }
    }
}
