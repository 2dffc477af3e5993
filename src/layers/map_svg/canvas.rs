//! The sheet that the map is drawn on: pixels, paths and text.

use std::fmt::Write as _;

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

/// A drawing in the making.
pub struct Canvas {
    extent: Extent,
    pixels_a_metre: f64,
    body: String,
}

impl Canvas {
    /// An empty sheet for an extent, its map so many pixels wide.
    pub fn new(extent: Extent, width: f64) -> Self {
        let size = extent.max - extent.min;
        // A tall map is drawn narrower, so that it fits a page.
        let pixels_a_metre = (width / size.x).min(1.25 * width / size.y);
        Self {
            extent,
            pixels_a_metre,
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

    /// The `d` of a path through pixels; points closer than a tenth of a
    /// pixel to the last are left out.
    pub fn pixel_path(&self, points: impl Iterator<Item = [f64; 2]>, closed: bool) -> String {
        let mut path = String::new();
        let mut last: Option<[f64; 2]> = None;
        for [x, y] in points {
            let here = [(x * 10.0).round() / 10.0, (y * 10.0).round() / 10.0];
            if last == Some(here) {
                continue;
            }
            let letter = if last.is_none() { "M" } else { "L" };
            let _ = write!(path, "{letter}{} {}", here[0] + 0.0, here[1] + 0.0);
            last = Some(here);
        }
        if closed {
            path.push('Z');
        }
        path
    }

    /// Adds text with a halo that keeps it readable on the map.
    pub fn text(&mut self, [x, y]: [f64; 2], text: &str, attributes: &str) {
        let text = escaped(text);
        // Two texts, since not every viewer can paint a stroke under a fill.
        self.add(&format!(
            "<text x=\"{x:.1}\" y=\"{y:.1}\" class=\"halo\" {attributes}>{text}</text>\
             <text x=\"{x:.1}\" y=\"{y:.1}\" {attributes}>{text}</text>"
        ));
    }

    /// The finished picture.
    pub fn finish(self, title: &str, legend: &str) -> String {
        let [width, height] = self.size();
        let page_width = width + LEGEND + 3.0 * MARGIN;
        let page_height = height + HEADING + FOOTING + MARGIN;
        let title = escaped(title);
        let (left, top, beside) = (MARGIN, HEADING + 6.0, width + 2.0 * MARGIN);
        let below = top + height + 18.0;
        let note = "Screening-level results; a licensed hydrogeologist must review them before anything is drilled or permitted.";
        format!(
            "<svg xmlns=\"http://www.w3.org/2000/svg\" viewBox=\"0 0 {page_width:.0} {page_height:.0}\" \
             width=\"{page_width:.0}\" height=\"{page_height:.0}\" role=\"img\" aria-label=\"{title}\" \
             font-family=\"Georgia, 'Times New Roman', serif\" font-size=\"12\" fill=\"{INK}\">\n\
             <title>{title}</title>\n{STYLE}\n\
             <rect width=\"100%\" height=\"100%\" fill=\"{PAPER}\"/>\n\
             <text x=\"{left}\" y=\"28\" font-size=\"19\">{title}</text>\n\
             <g transform=\"translate({left} {top})\" clip-path=\"url(#map)\">\n{body}</g>\n\
             <g transform=\"translate({beside:.1} {top})\">\n{legend}</g>\n\
             <text x=\"{left}\" y=\"{below:.1}\" font-size=\"10.5\" font-style=\"italic\">{note}</text>\n\
             <defs><clipPath id=\"map\"><rect width=\"{width:.1}\" height=\"{height:.1}\"/></clipPath></defs>\n\
             </svg>\n",
            body = self.body,
        )
    }
}

/// Halos and the patterns of rises and of areas over their limit.
const STYLE: &str = "<style>.halo{stroke:#fbfaf5;stroke-width:3px;stroke-linejoin:round}</style>
<defs>
<pattern id=\"rise\" width=\"6\" height=\"6\" patternUnits=\"userSpaceOnUse\"><circle cx=\"3\" cy=\"3\" r=\"1\" fill=\"#24302f\"/></pattern>
<pattern id=\"over\" width=\"7\" height=\"7\" patternUnits=\"userSpaceOnUse\" patternTransform=\"rotate(45)\"><path d=\"M0 0V7\" stroke=\"#24302f\" stroke-width=\"1.6\"/></pattern>
</defs>";

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
