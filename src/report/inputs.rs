//! What the plan gives, as it is written and in metres and days.

use serde::Serialize;

use crate::layers::words::{one_line, short};
use crate::plan::{Input, Plan};

/// Inputs that are shown unfolded, at most.
const MOST_OPEN: usize = 60;
/// The longest plan that the page holds whole, bytes.
const LONGEST_PLAN: usize = 300_000;

/// The inputs.
#[derive(Serialize)]
pub struct Inputs {
    open: Vec<InputRow>,
    folded: Vec<InputRow>,
    /// The plan's text; none where it is too long for a page.
    plan: Option<String>,
}

#[derive(Serialize)]
struct InputRow {
    of: String,
    key: &'static str,
    written: String,
    si: String,
}

/// The inputs of a plan.
pub fn inputs(plan: &Plan) -> Inputs {
    let mut open: Vec<InputRow> = plan.inputs.iter().map(row).collect();
    let folded = open.split_off(open.len().min(MOST_OPEN));
    let text = plan.text();
    Inputs {
        open,
        folded,
        plan: (text.len() <= LONGEST_PLAN).then(|| readable(text)),
    }
}

fn row(input: &Input) -> InputRow {
    InputRow {
        of: one_line(&input.of).replace('`', ""),
        key: input.key,
        written: short(&input.written, 40),
        si: input.in_si(),
    }
}

/// A text of several lines that cannot turn the page around it.
fn readable(text: &str) -> String {
    text.lines().map(|line| one_line(line) + "\n").collect()
}
