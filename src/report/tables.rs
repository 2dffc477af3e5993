//! The tables of wells, neighbours and rivers.

use serde::Serialize;

use crate::findings::{NeighbourFinding, Who, Worst};
use crate::layers::Planned;
use crate::layers::words::{Words, grouped, percent};
use crate::site::{EdgeKind, Point};

/// Wells whose parts in a neighbour's drawdown are all listed, at most.
const ALL_PARTS: usize = 12;
/// Parts that are listed of more wells.
const LARGEST_PARTS: usize = 5;

/// A table whose first column names its rows.
#[derive(Serialize)]
pub struct Table {
    columns: Vec<Column>,
    rows: Vec<Row>,
}

#[derive(Serialize)]
struct Column {
    name: &'static str,
    unit: String,
    is_text: bool,
}

#[derive(Serialize)]
struct Row {
    cells: Vec<String>,
    /// Whether a flag is about it.
    flagged: bool,
}

/// A column of numbers.
fn numbers(name: &'static str, unit: &str) -> Column {
    Column {
        name,
        unit: unit.to_owned(),
        is_text: false,
    }
}

/// A column of texts.
fn texts(name: &'static str) -> Column {
    Column {
        name,
        unit: String::new(),
        is_text: true,
    }
}

/// Where there is no value.
fn none() -> String {
    "–".to_owned()
}

/// The wells.
pub fn wells(planned: &Planned<'_>) -> Table {
    let words = Words::of(planned);
    let length = planned.units().length_ending();
    let site = planned.solution.site();
    let columns = vec![
        texts("Well"),
        numbers("East", ""),
        numbers("North", ""),
        numbers("Pumping", planned.units().rate_words()),
        numbers("Head before", length),
        numbers("Level", length),
        numbers("Drawdown", length),
        numbers("Own part", length),
        numbers("By others", length),
        numbers("Well loss", length),
        numbers("Share of others", ""),
        numbers("Lowest level", length),
        texts("Flags"),
    ];
    let rows = planned.findings.wells.iter().zip(&site.wells);
    let rows = rows.map(|(finding, well)| {
        let [east, north] = coordinates(planned, well.at);
        let flags = flags_in_words(planned, Who::Well(finding.well));
        Row {
            flagged: !flags.is_empty(),
            cells: vec![
                words.well(finding.well),
                east,
                north,
                words.bare_rate(finding.pumping_m3_d),
                words.bare_length(finding.ambient_m),
                words.bare_length(finding.level_m()),
                words.bare_length(finding.drawdown_m()),
                words.bare_length(finding.own_m),
                words.bare_length(finding.interference_m),
                words.bare_length(finding.well_loss_m),
                finding.interference_share.map_or_else(none, percent),
                well.lowest_level
                    .map_or_else(none, |level| words.bare_length(level.si())),
                or_none(flags),
            ],
        }
    });
    Table {
        columns,
        rows: rows.collect(),
    }
}

/// The neighbours, with what each well does to them.
pub fn neighbours(planned: &Planned<'_>) -> Table {
    let words = Words::of(planned);
    let length = planned.units().length_ending();
    let columns = vec![
        texts("Neighbour"),
        numbers("Head before", length),
        numbers("Head after", length),
        numbers("Drawdown", length),
        numbers("Allowed", length),
        texts("Verdict"),
        texts("Each well’s part, and its share"),
    ];
    let rows = planned.findings.neighbours.iter().map(|finding| {
        let worst = finding.worst.as_ref();
        let of_worst = |value: fn(&Worst) -> f64| {
            worst.map_or_else(none, |worst| words.bare_length(value(worst)))
        };
        Row {
            flagged: finding.excess_m().is_some(),
            cells: vec![
                words.neighbour(finding.neighbour),
                of_worst(|worst| worst.head_m + worst.drawdown_m),
                of_worst(|worst| worst.head_m),
                of_worst(|worst| worst.drawdown_m),
                finding
                    .allowed_m
                    .map_or_else(none, |m| words.bare_length(m)),
                verdict(&words, finding),
                worst.map_or_else(none, |worst| parts(&words, worst)),
            ],
        }
    });
    Table {
        columns,
        rows: rows.collect(),
    }
}

/// How a neighbour fares, in a few words.
fn verdict(words: &Words<'_>, finding: &NeighbourFinding) -> String {
    match (finding.excess_m(), finding.allowed_m, &finding.worst) {
        (Some(excess_m), ..) => format!("over by {}", words.length(excess_m)),
        (_, _, None) => "outside every aquifer with a well".into(),
        (_, None, _) => "no limit given".into(),
        _ => "within".into(),
    }
}

/// What each well causes, the most first: "PW-2 0.62 (41%), …".
fn parts(words: &Words<'_>, worst: &Worst) -> String {
    let whole_m: f64 = worst.by_well_m.iter().sum();
    let mut ordered: Vec<(usize, f64)> = worst.by_well_m.iter().copied().enumerate().collect();
    ordered.retain(|(_, part_m)| *part_m != 0.0);
    // Stable: equals keep the plan's order.
    ordered.sort_by(|a, b| b.1.abs().total_cmp(&a.1.abs()));
    let listed = if ordered.len() > ALL_PARTS {
        LARGEST_PARTS
    } else {
        ordered.len()
    };
    let told = |name: String, part_m: f64| {
        let share = if whole_m > 0.0 {
            format!(" ({})", percent(part_m / whole_m))
        } else {
            String::new()
        };
        format!("{name} {}{share}", words.bare_length(part_m))
    };
    let mut text: Vec<String> = ordered
        .iter()
        .take(listed)
        .map(|&(well, part_m)| told(words.well(well), part_m))
        .collect();
    let others = ordered.len() - listed;
    if others > 0 {
        let rest_m = ordered.iter().skip(listed).map(|(_, part_m)| part_m).sum();
        text.push(told(format!("{others} others"), rest_m));
    }
    text.join(", ")
}

/// The rivers, where there are any.
pub fn rivers(planned: &Planned<'_>) -> Option<Table> {
    let words = Words::of(planned);
    let rate = planned.units().rate_words();
    let site = planned.solution.site();
    let rivers = planned.findings.boundaries.iter().zip(&site.edges);
    let rivers = rivers.filter(|(_, edge)| matches!(edge.kind, EdgeKind::River { .. }));
    let whole_m3_d: f64 = rivers.clone().map(|(river, _)| river.inflow_m3_d()).sum();
    let rows: Vec<Row> = rivers
        .map(|(river, _)| {
            let share = river.inflow_m3_d() / whole_m3_d;
            let exchange = |m3_d: Option<f64>| m3_d.map_or_else(none, |m3_d| words.bare_rate(m3_d));
            Row {
                flagged: false,
                cells: vec![
                    words.edge(river.edge),
                    words.bare_rate(river.inflow_m3_d()),
                    if share.is_finite() {
                        percent(share)
                    } else {
                        none()
                    },
                    exchange(river.exchange_before_m3_d),
                    exchange(river.exchange_after_m3_d()),
                    if river.bounds_an_aquifer {
                        "yes".into()
                    } else {
                        "no".into()
                    },
                ],
            }
        })
        .collect();
    (!rows.is_empty()).then(|| Table {
        columns: vec![
            texts("River"),
            numbers("Gives to the wells", rate),
            numbers("Share", ""),
            numbers("To the aquifer before", rate),
            numbers("To the aquifer after", rate),
            texts("Bounds an aquifer with a well"),
        ],
        rows,
    })
}

/// A place in the plan's own coordinates, to the tenth.
fn coordinates(planned: &Planned<'_>, at: Point) -> [String; 2] {
    let (x, y) = planned.plan.to_plan_xy(at);
    [x, y].map(|value| grouped(&crate::layers::words::fixed(value, 1)))
}

/// The codes of the flags about someone, as a list.
fn flags_in_words(planned: &Planned<'_>, who: Who) -> String {
    let mut codes: Vec<&str> = planned
        .findings
        .flags_of(who)
        .map(|flag| flag.code.name())
        .collect();
    codes.dedup();
    codes.join(", ")
}

fn or_none(text: String) -> String {
    if text.is_empty() { none() } else { text }
}
