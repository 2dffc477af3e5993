//! Writes what was found as one page to read, print and sign.
//!
//! Method: the findings become a typed view of texts and drawings, and a
//! template sets it. The template, its styles and its script are files of
//! `maps/`; the template engine escapes every text, and only drawings made by
//! this program pass as they are. The page asks nothing of any network and
//! holds no clock time: the same plan gives the same bytes.

mod answer;
mod assumptions;
mod flags;
mod grid;
mod inputs;
mod line;
mod maps;
mod matrix;
mod method;
mod policy;
mod profile;
mod section;
mod tables;

use minijinja::{AutoEscape, Environment};
use serde::Serialize;

use crate::layers::words::{one_line, short};
use crate::layers::{CAUTION, LayerError, Planned};

/// The template, its styles and its script.
const TEMPLATE: &str = include_str!("../../maps/report.html");
const STYLES: &str = include_str!("../../maps/report.css");
const SCRIPT: &str = include_str!("../../maps/report.js");

/// Letters of the title, at most.
const LONGEST_TITLE: usize = 160;

/// Everything that the template sets.
#[derive(Serialize)]
struct View {
    title: String,
    policy: String,
    styles: &'static str,
    script: &'static str,
    crs: String,
    units: String,
    version: &'static str,
    plan_sha256: String,
    caution: &'static str,
    answer: answer::Answer,
    maps: Vec<maps::MapView>,
    section: Option<section::Section>,
    wells: tables::Table,
    neighbours: tables::Table,
    rivers: Option<tables::Table>,
    matrix: matrix::Matrix,
    flags: Vec<flags::FlagGroup>,
    method: method::Method,
    inputs: inputs::Inputs,
    assumptions: Vec<assumptions::Assumption>,
}

/// The page.
///
/// # Errors
/// Where the contours cannot be drawn, or the page cannot be set.
pub fn page(planned: &Planned<'_>) -> Result<Vec<u8>, LayerError> {
    set(&view(planned)?).map_err(|error| LayerError::Page(error.to_string()))
}

fn view(planned: &Planned<'_>) -> Result<View, LayerError> {
    let line = line::through_wells(planned);
    Ok(View {
        title: short(&planned.plan.title, LONGEST_TITLE),
        policy: policy::policy(STYLES, SCRIPT),
        styles: STYLES,
        script: SCRIPT,
        crs: one_line(&planned.plan.crs.name()),
        units: units_in_words(planned),
        version: env!("CARGO_PKG_VERSION"),
        plan_sha256: planned.plan.sha256.clone(),
        caution: CAUTION,
        answer: answer::answer(planned),
        maps: maps::maps(planned, &line.points)?,
        section: section::section(planned, &line),
        wells: tables::wells(planned),
        neighbours: tables::neighbours(planned),
        rivers: tables::rivers(planned),
        matrix: matrix::matrix(planned),
        flags: flags::groups(planned),
        method: method::method(planned),
        inputs: inputs::inputs(planned.plan),
        assumptions: assumptions::assumptions(planned),
    })
}

fn units_in_words(planned: &Planned<'_>) -> String {
    format!(
        "lengths and heads in {}, rates in {}",
        planned.units().length_ending(),
        planned.units().rate_words()
    )
}

fn set(view: &View) -> Result<Vec<u8>, minijinja::Error> {
    let mut environment = Environment::new();
    environment.set_auto_escape_callback(|_| AutoEscape::Html);
    environment.set_trim_blocks(true);
    environment.set_lstrip_blocks(true);
    environment.add_template("report.html", TEMPLATE)?;
    let page = environment.get_template("report.html")?.render(view)?;
    Ok(page.into_bytes())
}
