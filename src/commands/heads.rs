//! `mirrorwell heads`: heads and drawdowns at points, as CSV.

use std::path::PathBuf;

use super::console::Console;
use super::failure::Failure;
use super::points::{self, NamedPoint};
use super::source::{PlanArgument, solve};
use super::summary::capitalised;
use crate::findings::{Solution, WellsAndNeighbours, edge_between};
use crate::layers::words::Words;
use crate::layers::{Units, safe_cell};
use crate::plan::Plan;
use crate::site::{Place, Point};

/// What the command takes.
#[derive(Debug, clap::Args)]
#[command(
    after_help = "Example: the head at one point of the built-in demo's grid:\n  \
                        echo 412600,5361200 | mirrorwell heads --points -\n\n\
                        Columns in: x,y[,name], in the plan's coordinates; a heading is optional.\n\
                        Columns out: name,x,y,head,drawdown,note, in the plan's units."
)]
pub struct Arguments {
    #[command(flatten)]
    plan: PlanArgument,

    /// The points, a CSV file or - for standard input; without it, the wells
    /// and neighbours of the plan
    #[arg(long, value_name = "FILE.csv")]
    points: Option<PathBuf>,
}

/// One line of the result.
struct Row {
    name: String,
    x: String,
    y: String,
    head_m: Option<f64>,
    drawdown_m: Option<f64>,
    note: String,
}

/// Prints the heads.
pub fn run(arguments: &Arguments, console: &Console) -> Result<(), Failure> {
    let plan = arguments.plan.read()?;
    let wanted = arguments.points.as_deref().map(points::read).transpose()?;
    let solution = solve(&plan)?;
    for note in crate::layers::notes(&plan, &solution) {
        console.note(&super::console::wrapped(&note, "note: ", "      "));
    }
    for text in inexact(&plan, &solution) {
        let sentence = format!("{}.", capitalised(&text));
        console.note(&super::console::wrapped(&sentence, "note: ", "      "));
    }
    let rows = match wanted {
        Some(wanted) => at_points(&plan, &solution, wanted),
        None => at_wells_and_neighbours(&plan, &solution)?,
    };
    let table =
        table(&rows, Units(plan.units)).map_err(|error| Failure::Refused(error.to_string()))?;
    Ok(console.result(&table)?)
}

/// Which aquifers' heads are less exact than the plan accepts.
fn inexact(plan: &Plan, solution: &Solution) -> Vec<String> {
    let words = Words::new(solution.site(), Units(plan.units));
    let fields = solution.fields().iter();
    fields
        .filter(|field| !field.is_accurate(solution.site().head_tolerance))
        .map(|field| words.inexact(field.error_bound_m(), solution.site().head_tolerance.si()))
        .collect()
}

/// The rows as CSV in the plan's units.
fn table(rows: &[Row], units: Units) -> Result<String, csv::Error> {
    let mut writer = csv::Writer::from_writer(Vec::new());
    writer.write_record(["name", "x", "y", "head", "drawdown", "note"])?;
    let length = |metres: Option<f64>| match metres {
        Some(metres) => (units.length(metres) + 0.0).to_string(),
        None => String::new(),
    };
    for row in rows {
        writer.write_record([
            safe_cell(&row.name),
            row.x.clone(),
            row.y.clone(),
            length(row.head_m),
            length(row.drawdown_m),
            safe_cell(&row.note),
        ])?;
    }
    let bytes = writer.into_inner().map_err(|error| error.into_error())?;
    Ok(String::from_utf8_lossy(&bytes).into_owned())
}

/// Heads at the points that were asked for.
fn at_points(plan: &Plan, solution: &Solution, wanted: Vec<NamedPoint>) -> Vec<Row> {
    let places: Vec<Point> = wanted.iter().map(|p| plan.to_site(p.x, p.y)).collect();
    let heads_m = solution.heads_m(&places);
    let drawdowns_m = solution.drawdowns_m(&places);
    wanted
        .into_iter()
        .zip(places)
        .zip(heads_m.into_iter().zip(drawdowns_m))
        .map(|((point, place), (head_m, drawdown_m))| {
            let [x, y] = point.written;
            Row {
                name: point.name,
                x,
                y,
                head_m: Some(head_m).filter(|head_m| head_m.is_finite()),
                drawdown_m: Some(drawdown_m).filter(|drawdown_m| drawdown_m.is_finite()),
                note: note_on(solution, place, head_m),
            }
        })
        .collect()
}

/// What must be said of a point.
fn note_on(solution: &Solution, place: Point, head_m: f64) -> String {
    let site = solution.site();
    if !head_m.is_finite() {
        let edge = edge_between(solution, place).and_then(|edge| site.edges.get(edge));
        return match edge {
            Some(edge) => format!("outside the aquifer: beyond {}", edge.name),
            None => "outside the aquifer".into(),
        };
    }
    let within = site
        .wells
        .iter()
        .find(|well| (well.at - place).norm() <= well.radius.si());
    within.map_or_else(String::new, |well| {
        format!(
            "within {}: the head at its rim, without well loss",
            well.name
        )
    })
}

/// Levels in the wells, and heads at the neighbours' worst points.
fn at_wells_and_neighbours(plan: &Plan, solution: &Solution) -> Result<Vec<Row>, Failure> {
    let site = solution.site();
    let found = WellsAndNeighbours::of(solution);
    let wells = found.wells.iter().zip(&site.wells).map(|(finding, well)| {
        let (x, y) = plan.to_plan_xy(well.at);
        Row {
            name: well.name.clone(),
            x: x.to_string(),
            y: y.to_string(),
            head_m: Some(finding.level_m()),
            drawdown_m: Some(finding.drawdown_m()),
            note: "level in the well".into(),
        }
    });
    let neighbours = found.neighbours.iter().zip(&site.neighbours);
    let neighbours = neighbours.map(|(finding, neighbour)| {
        let worst = finding.worst.as_ref();
        let first = match &neighbour.place {
            Place::At(at) => Some(*at),
            Place::Area(ring) => ring.first().copied(),
        };
        let xy = worst
            .map(|worst| worst.at)
            .or(first)
            .map(|at| plan.to_plan_xy(at));
        let note = match (worst, &neighbour.place) {
            (None, _) => "outside the aquifer",
            (Some(_), Place::Area(_)) => "worst point of the area",
            (Some(_), Place::At(_)) => "",
        };
        Row {
            name: neighbour.name.clone(),
            x: xy.map_or_else(String::new, |(x, _)| x.to_string()),
            y: xy.map_or_else(String::new, |(_, y)| y.to_string()),
            head_m: worst.map(|worst| worst.head_m),
            drawdown_m: worst.map(|worst| worst.drawdown_m),
            note: note.into(),
        }
    });
    Ok(wells.chain(neighbours).collect())
}
