//! The sheet that the map is drawn on: pixels, paths and text.

use std::fmt::Write as _;

use geo::{Coord, LineString, Simplify};

use crate::site::{Extent, Point};

/// Space around the map, pixels.
pub const MARGIN: f64 = 16.0;
/// Height of the title above the map, pixels.
const HEADING: f64 = 34.0;
/// Width of the legend beside the map, pixels.
const LEGEND: f64 = 236.0;
/// Height of the note below the map, pixels.
const FOOTING: f64 = 26.0;

/// The sheet's background.
pub const PAPER: &str = "#fbfaf5";
/// Text and fine lines.
pub const INK: &str = "#24302f";

/// Points closer than this to the line through their neighbours are left out
/// of a path, pixels: less than a screen or a printer shows.
const FINEST: f64 = 0.15;

/// A drawing in the making.
pub struct Canvas {
    extent: Extent,
    pixels_a_metre: f64,
    ids: &'static str,
    body: String,
}

/// A text on the map.
pub struct Label<'t> {
    /// The place that it belongs to, pixels.
    pub at: [f64; 2],
    /// Where its baseline begins, seen from that place, pixels.
    pub offset: [f64; 2],
    /// Degrees that it is turned by, clockwise.
    pub angle: f64,
    /// What it says.
    pub text: &'t str,
    /// Attributes of the SVG text.
    pub attributes: &'t str,
}

impl Canvas {
    /// An empty sheet for an extent, its map so many pixels wide. Its patterns
    /// have names that begin with `ids`, so that a page may hold several maps.
    pub fn new(extent: Extent, width: f64, ids: &'static str) -> Self {
        let size = extent.max - extent.min;
        // A tall map is drawn narrower, so that it fits a page.
        let pixels_a_metre = (width / size.x).min(1.25 * width / size.y);
        Self {
            extent,
            pixels_a_metre,
            ids,
            body: String::new(),
        }
    }

    /// Width and height of the map, pixels.
    pub fn size(&self) -> [f64; 2] {
        let size = (self.extent.max - self.extent.min) * self.pixels_a_metre;
        [size.x, size.y]
    }

    /// Pixels on the map for one metre.
    pub fn pixels_a_metre(&self) -> f64 {
        self.pixels_a_metre
    }

    /// Where a place of the site lies on the map.
    pub fn place(&self, point: Point) -> [f64; 2] {
        let from_west = (point.x - self.extent.min.x) * self.pixels_a_metre;
        let from_north = (self.extent.max.y - point.y) * self.pixels_a_metre;
        [from_west, from_north]
    }

    /// Whether the map shows a place, given in pixels.
    pub fn shows(&self, [x, y]: [f64; 2]) -> bool {
        let [width, height] = self.size();
        (0.0..=width).contains(&x) && (0.0..=height).contains(&y)
    }

    /// Adds SVG as it is.
    pub fn add(&mut self, svg: &str) {
        self.body.push_str(svg);
        self.body.push('\n');
    }

    /// The `d` of a path through places of the site.
    pub fn path(&self, points: &[Point], closed: bool) -> String {
        self.pixel_path(points.iter().map(|&point| self.place(point)), closed)
    }

    /// The `d` of a path through pixels, in steps of a tenth of a pixel; points
    /// that no eye would miss are left out, and with them a path that has
    /// shrunk to one place.
    pub fn pixel_path(&self, points: impl Iterator<Item = [f64; 2]>, closed: bool) -> String {
        let line: LineString = points.map(|[x, y]| Coord { x, y }).collect();
        let mut path = String::new();
        let mut last: Option<[i64; 2]> = None;
        let mut steps = 0;
        for Coord { x, y } in line.simplify(FINEST).into_inner() {
            // Truncation is meant: pixels are few.
            let here = [(x * 10.0).round() as i64, (y * 10.0).round() as i64];
            let _ = match last {
                None => write!(path, "M{} {}", tenths(here[0]), tenths(here[1])),
                Some(last) if last == here => continue,
                Some(last) => {
                    let [dx, dy] = [here[0] - last[0], here[1] - last[1]];
                    write!(path, "l{} {}", tenths(dx), tenths(dy))
                }
            };
            steps += 1;
            last = Some(here);
        }
        if steps < 2 {
            return String::new();
        }
        if closed {
            path.push('Z');
        }
        path
    }

    /// Opens a group that can be shown and hidden.
    pub fn group(&mut self, layer: &str) {
        self.add(&format!("<g data-layer=\"{layer}\">"));
    }

    /// Closes a group.
    pub fn end_group(&mut self) {
        self.add("</g>");
    }

    /// Adds a symbol drawn around zero; it keeps its size when the map grows.
    pub fn symbol(&mut self, [x, y]: [f64; 2], svg: &str) {
        self.add(&format!(
            "<g transform=\"translate({x:.1} {y:.1})\"><g class=\"keep\">{svg}</g></g>"
        ));
    }

    /// Adds text with a halo that keeps it readable on the map.
    pub fn text(&mut self, label: &Label<'_>) {
        let Label {
            at: [x, y],
            offset: [dx, dy],
            angle,
            attributes,
            ..
        } = label;
        let text = escaped(label.text);
        let turned = if *angle == 0.0 {
            String::new()
        } else {
            format!(" rotate({angle:.1})")
        };
        // Two texts, since not every viewer can paint a stroke under a fill.
        self.add(&format!(
            "<g transform=\"translate({x:.1} {y:.1}){turned}\"><g class=\"keep\">\
             <text x=\"{dx:.1}\" y=\"{dy:.1}\" class=\"halo\" {attributes}>{text}</text>\
             <text x=\"{dx:.1}\" y=\"{dy:.1}\" {attributes}>{text}</text></g></g>"
        ));
    }

    /// What was drawn.
    pub fn into_body(self) -> String {
        self.body
    }

    /// The name of one of the map's patterns.
    pub fn id(&self, name: &str) -> String {
        format!("{}{name}", self.ids)
    }

    /// The patterns of rises and of areas over their limit, and the map's rim.
    pub fn definitions(&self) -> String {
        let [width, height] = self.size();
        let [rise, over, map] = ["rise", "over", "map"].map(|name| self.id(name));
        format!(
            "<defs>\n\
             <pattern id=\"{rise}\" width=\"6\" height=\"6\" patternUnits=\"userSpaceOnUse\"><circle cx=\"3\" cy=\"3\" r=\"1\" fill=\"{INK}\"/></pattern>\n\
             <pattern id=\"{over}\" width=\"7\" height=\"7\" patternUnits=\"userSpaceOnUse\" patternTransform=\"rotate(45)\"><path d=\"M0 0V7\" stroke=\"{INK}\" stroke-width=\"1.6\"/></pattern>\n\
             <clipPath id=\"{map}\"><rect width=\"{width:.1}\" height=\"{height:.1}\"/></clipPath>\n\
             </defs>"
        )
    }

    /// The finished picture.
    pub fn finish(self, title: &str, legend: &str) -> String {
        let [width, height] = self.size();
        let page_width = width + LEGEND + 3.0 * MARGIN;
        let page_height = height + HEADING + FOOTING + MARGIN;
        let title = escaped(title);
        let definitions = self.definitions();
        let map = self.id("map");
        let (left, top, beside) = (MARGIN, HEADING + 6.0, width + 2.0 * MARGIN);
        let below = top + height + 18.0;
        let note = "Screening-level results; a licensed hydrogeologist must review them before anything is drilled or permitted.";
        format!(
            "<svg xmlns=\"http://www.w3.org/2000/svg\" viewBox=\"0 0 {page_width:.0} {page_height:.0}\" \
             width=\"{page_width:.0}\" height=\"{page_height:.0}\" role=\"img\" aria-label=\"{title}\" \
             font-family=\"Georgia, 'Times New Roman', serif\" font-size=\"12\" fill=\"{INK}\">\n\
             <title>{title}</title>\n{STYLE}\n{definitions}\n\
             <rect width=\"100%\" height=\"100%\" fill=\"{PAPER}\"/>\n\
             <text x=\"{left}\" y=\"28\" font-size=\"19\">{title}</text>\n\
             <g transform=\"translate({left} {top})\" clip-path=\"url(#{map})\">\n{body}</g>\n\
             <g transform=\"translate({beside:.1} {top})\">\n{legend}</g>\n\
             <text x=\"{left}\" y=\"{below:.1}\" font-size=\"10.5\" font-style=\"italic\">{note}</text>\n\
             </svg>\n",
            body = self.body,
        )
    }
}

/// Halos.
const STYLE: &str = "<style>.halo{stroke:#fbfaf5;stroke-width:3px;stroke-linejoin:round}</style>";

/// A number of tenths: "12", "-0.3".
fn tenths(count: i64) -> String {
    format!("{}", count as f64 / 10.0)
}

/// A text as XML, on one line.
pub fn escaped(text: &str) -> String {
    let mut safe = String::with_capacity(text.len());
    for character in text.chars() {
        match character {
            '&' => safe.push_str("&amp;"),
            '<' => safe.push_str("&lt;"),
            '>' => safe.push_str("&gt;"),
            '"' => safe.push_str("&quot;"),
            other if other.is_control() => safe.push(' '),
            other => safe.push(other),
        }
    }
    safe
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn names_cannot_break_out_of_the_picture() {
        assert_eq!(escaped("<a & \"b\">\n"), "&lt;a &amp; &quot;b&quot;&gt; ");
    }
}
