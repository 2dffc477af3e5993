//! `interference.csv`: who draws down whom, as a table for a spreadsheet.
//!
//! One row an affected well, then one a neighbour (at its worst point), in
//! the plan's order; one column a causing well. The first cell names the
//! quantity and its unit. A well's own drawdown stands on the diagonal; well
//! loss is left out. Cells are empty where a neighbour lies outside every
//! aquifer.
//!
//! Spreadsheets run a cell that begins with = + - @, a tab or a return as a
//! formula, so a name that begins so, or with an apostrophe, gets a leading
//! apostrophe. To read such a name back, drop one leading apostrophe.

use super::{LayerError, Planned};

/// The table, UTF-8 with `\n` line ends.
pub fn table(planned: &Planned<'_>) -> Result<Vec<u8>, LayerError> {
    let units = planned.units();
    let site = planned.solution.site();
    let mut writer = csv::Writer::from_writer(Vec::new());
    let mut heading = vec![format!("drawdown_{}", units.length_ending())];
    heading.extend(site.wells.iter().map(|well| safe_cell(&well.name)));
    writer.write_record(&heading)?;
    let matrix = &planned.findings.interference;
    let well_rows = site
        .wells
        .iter()
        .map(|well| &well.name)
        .zip(matrix.well_rows().iter().map(Some));
    let neighbour_rows = site
        .neighbours
        .iter()
        .map(|neighbour| &neighbour.name)
        .zip(matrix.neighbour_rows().iter().map(Option::as_ref));
    for (name, row) in well_rows.chain(neighbour_rows) {
        let mut record = vec![safe_cell(name)];
        match row {
            Some(row) => record.extend(
                row.iter()
                    .map(|&drawdown_m| format!("{}", units.length(drawdown_m) + 0.0)),
            ),
            None => record.extend(site.wells.iter().map(|_| String::new())),
        }
        writer.write_record(&record)?;
    }
    writer
        .into_inner()
        .map_err(|error| LayerError::Table(error.to_string()))
}

/// A text that no spreadsheet runs as a formula.
pub fn safe_cell(text: &str) -> String {
    if text.starts_with(['=', '+', '-', '@', '\t', '\r', '\'']) {
        format!("'{text}")
    } else {
        text.to_owned()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The characters that OWASP's page on CSV injection lists, from memory.
    #[test]
    fn names_that_a_spreadsheet_would_run_are_made_text() {
        assert_eq!(safe_cell("=1+1"), "'=1+1");
        assert_eq!(safe_cell("@cmd"), "'@cmd");
        assert_eq!(safe_cell("PW-1"), "PW-1");
        assert_eq!(safe_cell("'s Gravenhage"), "''s Gravenhage");
    }
}
