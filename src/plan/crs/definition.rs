//! Makes a projection from its definition, with another datum shift where the
//! checked list gives one.
//!
//! The sweep that checks the codes compiles this same file, so that what was
//! checked is what runs.

use proj4rs::Proj;
use proj4rs::adaptors::transform_vertex_2d;

/// WGS 84 longitude and latitude.
const DEGREES: &str = "+proj=longlat +datum=WGS84 +no_defs";

/// A grid and the way from it to WGS 84 and back.
#[derive(Clone, Debug)]
pub(crate) struct Projection {
    grid: Proj,
    degrees: Proj,
}

impl Projection {
    /// The grid of a PROJ.4 definition; `shift`, three or seven numbers with
    /// commas between, replaces the definition's own datum shift.
    pub(crate) fn new(
        definition: &str,
        shift: Option<&str>,
    ) -> Result<Self, proj4rs::errors::Error> {
        let grid = match shift {
            None => Proj::from_proj_string(definition)?,
            Some(shift) => Proj::from_proj_string(&with_shift(definition, shift))?,
        };
        Ok(Self {
            grid,
            degrees: Proj::from_proj_string(DEGREES)?,
        })
    }

    /// Metres in one unit of the grid.
    #[allow(dead_code, reason = "the sweep takes the unit from PROJ")]
    pub(crate) fn metres_per_unit(&self) -> f64 {
        self.grid.to_meter()
    }

    /// Degrees to grid; none where the library fails.
    pub(crate) fn forward(&self, longitude: f64, latitude: f64) -> Option<(f64, f64)> {
        let place = (longitude.to_radians(), latitude.to_radians());
        finite(transform_vertex_2d(&self.degrees, &self.grid, place).ok()?)
    }

    /// Grid to degrees, longitude within −180 to 180; none where the library
    /// fails.
    pub(crate) fn backward(&self, x: f64, y: f64) -> Option<(f64, f64)> {
        let (longitude, latitude) = transform_vertex_2d(&self.grid, &self.degrees, (x, y)).ok()?;
        let longitude = longitude.to_degrees();
        let turns = ((longitude + 180.0) / 360.0).floor();
        finite((longitude - 360.0 * turns, latitude.to_degrees()))
    }
}

fn finite(pair: (f64, f64)) -> Option<(f64, f64)> {
    (pair.0.is_finite() && pair.1.is_finite()).then_some(pair)
}

/// The definition with its datum shift, whatever its form, replaced.
fn with_shift(definition: &str, shift: &str) -> String {
    let kept = definition
        .split_whitespace()
        .filter(|word| !word.starts_with("+towgs84=") && !word.starts_with("+nadgrids="));
    let mut words: Vec<&str> = kept.collect();
    let shift = format!("+towgs84={shift}");
    words.push(&shift);
    words.join(" ")
}
