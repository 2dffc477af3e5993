//! Projects points with the definitions and the projection library the
//! program uses, for `sweep_epsg.py` to compare against PROJ.
//!
//! Reads lines `code,longitude,latitude,x,y` (degrees on WGS 84; x and y in the
//! grid's own unit) and writes for each `x,y,longitude,latitude`: the point
//! projected, and the grid coordinates taken back to degrees. What cannot be
//! computed is written as `nan`.

use std::collections::HashMap;
use std::io::{BufWriter, Write, stdin, stdout};

use proj4rs::Proj;
use proj4rs::adaptors::transform_vertex_2d;

const NOT_COMPUTED: (f64, f64) = (f64::NAN, f64::NAN);

fn definition(code: u16) -> Option<Proj> {
    Proj::from_proj_string(crs_definitions::from_code(code)?.proj4).ok()
}

fn main() -> Result<(), Box<dyn std::error::Error>> {
    let degrees = Proj::from_proj_string("+proj=longlat +datum=WGS84 +no_defs")?;
    let mut known = HashMap::new();
    let mut output = BufWriter::new(stdout().lock());
    for line in stdin().lines() {
        let line = line?;
        let mut fields = line.split(',');
        let code: u16 = fields.next().unwrap_or_default().parse()?;
        let numbers = fields.map(str::parse).collect::<Result<Vec<f64>, _>>()?;
        let [longitude, latitude, x, y] = numbers.try_into().map_err(|_| "five fields a line")?;
        let grid = known.entry(code).or_insert_with(|| definition(code));
        let (forward, backward) = grid.as_ref().map_or((NOT_COMPUTED, NOT_COMPUTED), |grid| {
            let place = (longitude.to_radians(), latitude.to_radians());
            (
                transform_vertex_2d(&degrees, grid, place).unwrap_or(NOT_COMPUTED),
                transform_vertex_2d(grid, &degrees, (x, y)).unwrap_or(NOT_COMPUTED),
            )
        });
        writeln!(
            output,
            "{},{},{},{}",
            forward.0,
            forward.1,
            backward.0.to_degrees(),
            backward.1.to_degrees()
        )?;
    }
    Ok(())
}
