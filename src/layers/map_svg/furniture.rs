//! What every map needs around it: frame, scale bar, north arrow and legend.

use std::fmt::Write as _;

use super::Theme;
use super::canvas::{Canvas, INK, PAPER, escaped};
use super::labels::Taken;
use super::symbols::{
    ROCK, SILT, State, WATER, band_colour, band_share, largest_radius, neighbour_symbol,
    well_symbol,
};
use crate::layers::{Planned, Units};
use crate::site::{Edge, EdgeKind};

/// Height of a line of the legend, pixels.
const LINE: f64 = 21.0;
/// Height of a band in the legend, pixels.
const BAND: f64 = 15.0;

/// A thin line around the map.
pub fn frame(canvas: &mut Canvas) {
    let [width, height] = canvas.size();
    canvas.add(&format!(
        "<rect x=\"0.5\" y=\"0.5\" width=\"{:.1}\" height=\"{:.1}\" fill=\"none\" stroke=\"{INK}\" stroke-width=\"1\"/>",
        width - 1.0,
        height - 1.0
    ));
}

/// The scale bar's and the north arrow's places.
pub fn reserve(canvas: &Canvas, taken: &mut Taken) {
    let [width, height] = canvas.size();
    taken.reserve([0.0, height - 46.0, 0.22 * width + 70.0, height]);
    taken.reserve([width - 50.0, 0.0, width, 62.0]);
}

/// A bar of round length in the plan's unit, lower left. Its `data-` attributes
/// let a script redraw it when the map grows.
pub fn scale_bar(canvas: &mut Canvas, units: Units) {
    let [width, height] = canvas.size();
    let pixels_a_unit = canvas.pixels_a_metre() / units.length(1.0);
    let longest = 0.22 * width / pixels_a_unit;
    let power = 10_f64.powf(longest.log10().floor());
    let length = [5.0, 2.0, 1.0]
        .into_iter()
        .map(|step| step * power)
        .find(|&length| length <= longest)
        .unwrap_or(power);
    let half = 0.5 * length * pixels_a_unit;
    let end = format!("{length} {}", units.length_ending());
    canvas.add(&format!(
        "<g class=\"scale\" data-pixels-a-unit=\"{pixels_a_unit}\" data-unit=\"{}\" transform=\"translate(14 {:.1})\">\
         <rect x=\"-6\" y=\"-25\" width=\"{:.1}\" height=\"36\" fill=\"{PAPER}\" opacity=\"0.9\"/>\
         <rect width=\"{half:.1}\" height=\"5\" fill=\"{INK}\" stroke=\"{INK}\"/>\
         <rect x=\"{half:.1}\" width=\"{half:.1}\" height=\"5\" fill=\"{PAPER}\" stroke=\"{INK}\"/>\
         <text y=\"-8\">0</text><text x=\"{:.1}\" y=\"-8\">{end}</text></g>",
        units.length_ending(),
        height - 18.0,
        2.0 * half + 66.0,
        2.0 * half - 8.0
    ));
}

/// An arrow to grid north, upper right.
pub fn north_arrow(canvas: &mut Canvas) {
    let [width, _] = canvas.size();
    let x = width - 26.0;
    canvas.add(&format!(
        "<g transform=\"translate({x:.1} 0)\">\
         <circle cy=\"33\" r=\"23\" fill=\"{PAPER}\" opacity=\"0.9\"/>\
         <path d=\"M0 13l7 25l-7 -6l-7 6Z\" fill=\"{INK}\"/>\
         <path d=\"M0 13l7 25l-7 -6Z\" fill=\"{PAPER}\" stroke=\"{INK}\" stroke-width=\"1\"/>\
         <text y=\"52\" text-anchor=\"middle\" font-size=\"12\">N</text></g>"
    ));
}

/// A legend: SVG with its origin in its upper left corner, and its height.
pub struct Legend {
    /// The SVG.
    pub body: String,
    /// Height, pixels.
    pub height: f64,
}

impl Legend {
    /// Adds a line.
    fn entry(&mut self, symbol: &str, text: &str) {
        let _ = writeln!(
            self.body,
            "<g transform=\"translate(0 {:.1})\">{symbol}<text x=\"34\" y=\"4\">{}</text></g>",
            self.height,
            escaped(text)
        );
        self.height += LINE;
    }
}

/// The legend of a map, no higher than the map where the bands allow.
pub fn legend(canvas: &Canvas, planned: &Planned<'_>, theme: Theme) -> Legend {
    let [_, height] = canvas.size();
    let mut legend = Legend {
        body: String::new(),
        height: 14.0,
    };
    symbols_key(&mut legend, planned);
    edges_key(&mut legend, planned);
    let ending = planned.units().length_ending();
    let line = |text: &str, legend: &mut Legend| {
        let symbol = format!("<path d=\"M0 0H26\" stroke=\"{INK}\" stroke-width=\"0.8\"/>");
        legend.entry(&symbol, &format!("{text}, {ending}"));
    };
    match theme {
        Theme::Drawdown => line("contour of drawdown", &mut legend),
        Theme::Head | Theme::Both => line("contour of head", &mut legend),
    }
    if theme != Theme::Both {
        legend.entry(
            &format!("<path d=\"M0 0H26\" stroke=\"{INK}\" stroke-width=\"1.6\" stroke-dasharray=\"9 3 2 3\"/>"),
            "line of the section",
        );
    }
    if theme != Theme::Head {
        let _ = writeln!(
            legend.body,
            "<text x=\"0\" y=\"{:.1}\">drawdown, {ending}</text>",
            legend.height + 12.0
        );
        legend.height += 24.0;
        band_key(&mut legend, planned, height, canvas.id("rise"));
    }
    legend
}

/// Wells and neighbours.
fn symbols_key(legend: &mut Legend, planned: &Planned<'_>) {
    let mut well = |injects, flagged, text| {
        let radius = largest_radius(planned).min(7.0);
        let symbol = well_symbol(radius, injects, flagged);
        legend.entry(&in_key(&symbol), text);
    };
    well(false, false, "pumping well, area by rate");
    well(true, false, "injecting well, area by rate");
    well(false, true, "well with a flag");
    let mut neighbour = |state, text| legend.entry(&in_key(&neighbour_symbol(state)), text);
    neighbour(State::Within, "neighbour within its limit");
    neighbour(State::Over, "neighbour over its limit");
    neighbour(State::Unjudged, "neighbour not judged");
}

/// Rivers and barriers.
fn edges_key(legend: &mut Legend, planned: &Planned<'_>) {
    let water = format!(
        "<path d=\"M0 0H26\" stroke=\"{WATER}\" stroke-width=\"7\"/><path d=\"M0 0H26\" stroke=\"{PAPER}\" stroke-width=\"3\"/>"
    );
    legend.entry(&water, "river (fixed head)");
    let is_clogged = |edge: &Edge| matches!(&edge.kind, EdgeKind::River { bank_resistance, .. } if bank_resistance.is_some());
    if planned.solution.site().edges.iter().any(is_clogged) {
        legend.entry(
            &format!("{water}<path d=\"M0 0H26\" stroke=\"{WATER}\" {SILT}/>"),
            "river with a clogged bank",
        );
    }
    legend.entry(
        &format!("<path d=\"M0 3H26M3 3l3 -7M11 3l3 -7M19 3l3 -7\" fill=\"none\" stroke=\"{ROCK}\" stroke-width=\"2\"/>"),
        "barrier (no flow)",
    );
}

/// A symbol in the middle of its place in the legend.
fn in_key(symbol: &str) -> String {
    format!("<g transform=\"translate(13 0)\">{symbol}</g>")
}

/// The bands from low to high, as many as there is room for.
fn band_key(legend: &mut Legend, planned: &Planned<'_>, height: f64, rise: String) {
    let levels_m = &planned.levels.drawdowns_m;
    let mut falls: Vec<f64> = vec![0.0];
    falls.extend(levels_m.iter().filter(|&&level_m| level_m > 0.0));
    // Truncation is meant: the room is small.
    let room = (((height - legend.height) / BAND) as usize).clamp(8, 40);
    let stride = falls.len().div_ceil(room).max(1);
    let mut box_of = |fill: &str, pattern: Option<String>, text: &str| {
        let y = legend.height;
        let pattern = pattern.map_or_else(String::new, |id| {
            format!("<rect y=\"{y:.1}\" width=\"26\" height=\"{BAND}\" fill=\"url(#{id})\"/>")
        });
        let _ = writeln!(
            legend.body,
            "<rect y=\"{y:.1}\" width=\"26\" height=\"{BAND}\" fill=\"{fill}\" stroke=\"{INK}\" stroke-width=\"0.4\"/>{pattern}\
             <text x=\"34\" y=\"{:.1}\" font-size=\"12\">{text}</text>",
            y + BAND - 3.5
        );
        legend.height += BAND;
    };
    for &from_m in falls.iter().step_by(stride) {
        let level = planned.units().length(from_m);
        let fill = band_colour(band_share(planned, from_m));
        box_of(
            &fill,
            None,
            &format!("from {}", (level * 1e6).round() / 1e6),
        );
    }
    if levels_m.iter().any(|&level_m| level_m < 0.0) {
        box_of(&band_colour(0.0), Some(rise), "rise");
    }
}
