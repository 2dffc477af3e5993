//! A map of the results as an SVG picture: to stand alone, or as a part of a
//! page.
//!
//! Nothing depends on colour alone: bands of drawdown run from light to dark,
//! rises are dotted, rivers are double lines and barriers are toothed, wells
//! differ by shape and neighbours by fill, so that the map can be read in
//! greyscale and by the colour-blind.

mod canvas;
mod furniture;
mod labels;
mod symbols;
mod ticks;

use super::{LayerError, Planned, contours};
use crate::contours::ContourLine;
use crate::site::{Extent, Point};
use canvas::{Canvas, Label};
pub use canvas::{INK, PAPER, escaped};
pub use symbols::WATER;
pub(super) use symbols::{band_colour, band_share, mixed};
pub use ticks::{multiples, round_step};

/// Width of the map itself, pixels.
const WIDTH: f64 = 760.0;
/// Room for coordinates left of and below a map, and for ticks at its other
/// sides, pixels.
const LEFT: f64 = 30.0;
const BELOW: f64 = 30.0;
const RIM: f64 = 8.0;

/// What a map shows.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Theme {
    /// Contours of head.
    Head,
    /// Contours and bands of drawdown.
    Drawdown,
    /// Contours of head over bands of drawdown.
    Both,
}

/// A map as a part of a page.
pub struct MapPicture {
    /// The map with coordinates around it, an SVG element.
    pub map: String,
    /// Its legend, an SVG element.
    pub legend: String,
    /// Where the map lies in the picture: left, top, width, height, pixels.
    pub frame: [f64; 4],
    /// The plan's coordinates of the map's upper left corner, and units of the
    /// plan's grid a pixel.
    pub grid: [f64; 3],
}

/// Draws the map to stand alone.
///
/// # Errors
/// Where the contours cannot be drawn.
pub fn map_svg(planned: &Planned<'_>) -> Result<String, LayerError> {
    let extent: Extent = planned.survey.window.extent;
    let mut canvas = Canvas::new(extent, WIDTH, "");
    content(&mut canvas, planned, Theme::Both, &[])?;
    furniture::frame(&mut canvas);
    furniture::scale_bar(&mut canvas, planned.units());
    furniture::north_arrow(&mut canvas);
    let legend = furniture::legend(&canvas, planned, Theme::Both).body;
    Ok(canvas.finish(&planned.plan.title, &legend))
}

/// Draws a map for a page, with coordinates around it and a line of section;
/// `ids` begins the names of its parts, and `title` names it for those who
/// cannot see it.
///
/// # Errors
/// Where the contours cannot be drawn.
pub fn map_picture(
    planned: &Planned<'_>,
    theme: Theme,
    ids: &'static str,
    title: &str,
    section: &[Point],
) -> Result<MapPicture, LayerError> {
    let extent: Extent = planned.survey.window.extent;
    let mut canvas = Canvas::new(extent, WIDTH, ids);
    let ticks = ticks::ticks(&canvas, planned.plan, extent);
    let grid = ticks::frame_of(&canvas, planned.plan, extent);
    let definitions = canvas.definitions();
    canvas.add("<g class=\"view\">");
    content(&mut canvas, planned, theme, section)?;
    canvas.end_group();
    furniture::frame(&mut canvas);
    furniture::scale_bar(&mut canvas, planned.units());
    furniture::north_arrow(&mut canvas);
    let legend = furniture::legend(&canvas, planned, theme);
    let ([width, height], clip) = (canvas.size(), canvas.id("map"));
    let (sheet_width, sheet_height) = (width + LEFT + RIM, height + RIM + BELOW);
    let title = escaped(title);
    let map = format!(
        "<svg class=\"map\" viewBox=\"0 0 {sheet_width:.0} {sheet_height:.0}\" width=\"{sheet_width:.0}\" height=\"{sheet_height:.0}\" role=\"img\" aria-label=\"{title}\" font-size=\"13\" fill=\"{INK}\">\n\
         {definitions}\n<g class=\"ticks\" font-size=\"12\" transform=\"translate({LEFT} {RIM})\">{ticks}</g>\n\
         <g transform=\"translate({LEFT} {RIM})\" clip-path=\"url(#{clip})\"><rect width=\"{width:.1}\" height=\"{height:.1}\" fill=\"{PAPER}\"/>\n{}</g></svg>",
        canvas.into_body()
    );
    let legend = format!(
        "<svg class=\"legend\" viewBox=\"-4 0 240 {height:.0}\" width=\"240\" height=\"{height:.0}\" role=\"img\" aria-label=\"Legend\" font-size=\"13\" fill=\"{INK}\">\n{}</svg>",
        legend.body,
        height = legend.height + 6.0
    );
    Ok(MapPicture {
        map,
        legend,
        frame: [LEFT, RIM, width, height],
        grid,
    })
}

/// Everything within the map's frame, from the ground up.
fn content(
    canvas: &mut Canvas,
    planned: &Planned<'_>,
    theme: Theme,
    section: &[Point],
) -> Result<(), LayerError> {
    if theme != Theme::Head {
        canvas.group("bands");
        symbols::bands(canvas, planned)?;
        canvas.end_group();
    }
    let (lines, levels_m) = contour_lines(planned, theme)?;
    canvas.group("contours");
    symbols::contours(canvas, lines, levels_m);
    canvas.end_group();
    canvas.group("neighbours");
    symbols::neighbour_areas(canvas, planned);
    canvas.end_group();
    canvas.group("edges");
    symbols::edges(canvas, planned);
    canvas.end_group();
    let mut taken = labels::Taken::default();
    section_line(canvas, section, &mut taken);
    furniture::reserve(canvas, &mut taken);
    labels::reserve_symbols(canvas, planned, &mut taken);
    canvas.group("names");
    labels::names(canvas, planned, &mut taken);
    canvas.end_group();
    canvas.group("contours");
    labels::contours(canvas, planned, lines, &mut taken);
    canvas.end_group();
    canvas.group("neighbours");
    symbols::neighbours(canvas, planned);
    canvas.end_group();
    canvas.group("wells");
    symbols::wells(canvas, planned);
    canvas.end_group();
    Ok(())
}

/// The contours of a theme and their levels.
fn contour_lines<'p>(
    planned: &'p Planned<'_>,
    theme: Theme,
) -> Result<(&'p [ContourLine], &'p [f64]), LayerError> {
    Ok(match theme {
        Theme::Drawdown => (
            contours::all_drawdown_lines(planned)?,
            &planned.levels.drawdowns_m,
        ),
        Theme::Head | Theme::Both => (contours::all_head_lines(planned)?, &planned.levels.heads_m),
    })
}

/// The line of a section, with a letter at each end.
fn section_line(canvas: &mut Canvas, section: &[Point], taken: &mut labels::Taken) {
    let (Some(&first), Some(&last)) = (section.first(), section.last()) else {
        return;
    };
    let path = canvas.path(section, false);
    canvas.group("section");
    canvas.add(&format!(
        "<path d=\"{path}\" fill=\"none\" stroke=\"{INK}\" stroke-width=\"1.6\" stroke-dasharray=\"9 3 2 3\"/>"
    ));
    let [width, height] = canvas.size();
    for (end, text) in [(first, "A"), (last, "A′")] {
        let [x, y] = canvas.place(end);
        let at = [
            x.clamp(14.0, width - 14.0),
            (y - 9.0).clamp(20.0, height - 12.0),
        ];
        taken.reserve([at[0] - 10.0, at[1] - 14.0, at[0] + 12.0, at[1] + 6.0]);
        canvas.text(&Label {
            at,
            offset: [0.0, 0.0],
            angle: 0.0,
            text,
            attributes: "text-anchor=\"middle\" font-weight=\"bold\" font-size=\"15\"",
        });
    }
    canvas.end_group();
}
