//! A map of the results as a stand-alone SVG picture.
//!
//! Nothing depends on colour alone: bands of drawdown run from light to dark,
//! rises are dotted, rivers are double lines and barriers are toothed, wells
//! differ by shape and neighbours by fill, so that the map can be read in
//! greyscale and by the colour-blind.

mod canvas;
mod furniture;
mod labels;
mod symbols;

use super::{LayerError, Planned};
use crate::site::Extent;
use canvas::Canvas;
pub(super) use symbols::{band_colour, band_share, mixed};

/// Width of the map itself, pixels.
const WIDTH: f64 = 760.0;

/// Draws the map.
///
/// # Errors
/// Where the contours cannot be drawn.
pub fn map_svg(planned: &Planned<'_>) -> Result<String, LayerError> {
    let extent: Extent = planned.survey.window.extent;
    let mut canvas = Canvas::new(extent, WIDTH);
    symbols::bands(&mut canvas, planned)?;
    let heads = super::contours::all_head_lines(planned)?;
    symbols::contours(&mut canvas, heads);
    symbols::neighbour_areas(&mut canvas, planned);
    symbols::edges(&mut canvas, planned);
    let mut taken = labels::Taken::default();
    labels::names(&mut canvas, planned, &mut taken);
    labels::contours(&mut canvas, planned, heads, &mut taken);
    symbols::neighbours(&mut canvas, planned);
    symbols::wells(&mut canvas, planned);
    furniture::frame(&mut canvas);
    furniture::scale_bar(&mut canvas, planned.units());
    furniture::north_arrow(&mut canvas);
    let legend = furniture::legend(&canvas, planned);
    Ok(canvas.finish(&planned.plan.title, &legend))
}
