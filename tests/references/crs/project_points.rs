//! Projects points exactly as the program does, also by codes it refuses, for
//! `sweep_epsg.py` to compare against PROJ.
//!
//! Reads lines `code,shift,longitude,latitude,x,y`: degrees on WGS 84, x and y
//! in the grid's own unit, `shift` a datum shift of numbers with semicolons
//! between or empty. Writes for each `x,y,longitude,latitude`: the point
//! projected, and the grid coordinates taken back to degrees. What cannot be
//! computed is written as `NaN`.

#[path = "../../../src/plan/crs/definition.rs"]
mod definition;

use std::collections::HashMap;
use std::io::{BufWriter, Write, stdin, stdout};

use definition::Projection;

fn projection(code: &str, shift: &str) -> Option<Projection> {
    let definition = crs_definitions::from_code(code.parse().ok()?)?;
    let shift = shift.replace(';', ",");
    let shift = (!shift.is_empty()).then_some(shift.as_str());
    Projection::new(definition.proj4, shift).ok()
}

fn main() -> Result<(), Box<dyn std::error::Error>> {
    let mut known = HashMap::new();
    let mut output = BufWriter::new(stdout().lock());
    for line in stdin().lines() {
        let line = line?;
        let fields: Vec<&str> = line.split(',').collect();
        let [code, shift, numbers @ ..] = fields.as_slice() else {
            return Err("a code, a shift and four numbers a line".into());
        };
        let numbers: Vec<f64> = numbers
            .iter()
            .map(|n| n.parse())
            .collect::<Result<_, _>>()?;
        let [longitude, latitude, x, y] = numbers.try_into().map_err(|_| "four numbers a line")?;
        let grid = known
            .entry(format!("{code},{shift}"))
            .or_insert_with(|| projection(code, shift));
        let none = (f64::NAN, f64::NAN);
        let forward = grid
            .as_ref()
            .and_then(|grid| grid.forward(longitude, latitude));
        let backward = grid.as_ref().and_then(|grid| grid.backward(x, y));
        let ((x, y), (longitude, latitude)) = (forward.unwrap_or(none), backward.unwrap_or(none));
        writeln!(output, "{x},{y},{longitude},{latitude}")?;
    }
    Ok(())
}
