//! Reads the tables of `tests/references/`.

use std::collections::HashMap;
use std::path::Path;

/// A row of a table, by the names of its columns.
pub struct Row(HashMap<String, String>);

impl Row {
    pub fn text(&self, column: &str) -> &str {
        self.0
            .get(column)
            .unwrap_or_else(|| panic!("the table has no column {column}"))
    }

    pub fn number(&self, column: &str) -> f64 {
        let text = self.text(column);
        text.parse()
            .unwrap_or_else(|_| panic!("{column} = {text:?} is no number"))
    }
}

/// The rows of `tests/references/<name>.csv`.
pub fn rows(name: &str) -> Vec<Row> {
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join(format!("tests/references/{name}.csv"));
    let mut reader = csv::Reader::from_path(&path).expect("the table is there");
    let rows: Vec<Row> = reader
        .deserialize()
        .map(|row| Row(row.expect("the table is sound")))
        .collect();
    assert!(!rows.is_empty(), "{name} has rows");
    rows
}
