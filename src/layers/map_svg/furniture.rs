//! What every map needs around it: frame, scale bar, north arrow and legend.

use std::fmt::Write as _;

use super::canvas::{Canvas, INK, PAPER, escaped};
use super::symbols::{State, band_colour, band_share, neighbour_symbol, well_symbol};
use crate::layers::{Planned, Units};

/// Height of a line of the legend, pixels.
const LINE: f64 = 21.0;

/// A thin line around the map.
pub fn frame(canvas: &mut Canvas) {
    let [width, height] = canvas.size();
    canvas.add(&format!(
        "<rect x=\"0.5\" y=\"0.5\" width=\"{:.1}\" height=\"{:.1}\" fill=\"none\" stroke=\"{INK}\" stroke-width=\"1\"/>",
        width - 1.0,
        height - 1.0
    ));
}

/// A bar of round length in the plan's unit, lower left.
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
    let (x, y) = (14.0, height - 16.0);
    canvas.add(&format!(
        "<rect x=\"{:.1}\" y=\"{:.1}\" width=\"{:.1}\" height=\"34\" fill=\"{PAPER}\" opacity=\"0.85\"/>",
        x - 6.0,
        y - 24.0,
        2.0 * half + 62.0
    ));
    canvas.add(&format!(
        "<rect x=\"{x}\" y=\"{y:.1}\" width=\"{half:.1}\" height=\"5\" fill=\"{INK}\" stroke=\"{INK}\"/>\
         <rect x=\"{:.1}\" y=\"{y:.1}\" width=\"{half:.1}\" height=\"5\" fill=\"{PAPER}\" stroke=\"{INK}\"/>",
        x + half
    ));
    canvas.text([x, y - 7.0], "0", "");
    let end = format!("{length} {}", units.length_ending());
    canvas.text([x + 2.0 * half - 8.0, y - 7.0], &end, "");
}

/// An arrow to grid north, upper right.
pub fn north_arrow(canvas: &mut Canvas) {
    let [width, _] = canvas.size();
    let x = width - 26.0;
    canvas.add(&format!(
        "<circle cx=\"{x:.1}\" cy=\"33\" r=\"22\" fill=\"{PAPER}\" opacity=\"0.85\"/>\
         <path d=\"M{x:.1} 14l7 26l-7 -6l-7 6Z\" fill=\"{INK}\"/>\
         <path d=\"M{x:.1} 14l7 26l-7 -6Z\" fill=\"{PAPER}\" stroke=\"{INK}\" stroke-width=\"1\"/>"
    ));
    canvas.text([x, 53.0], "N", "text-anchor=\"middle\" font-size=\"11\"");
}

/// The legend, as SVG with its origin in its upper left corner.
pub fn legend(canvas: &Canvas, planned: &Planned<'_>) -> String {
    let [_, height] = canvas.size();
    let mut legend = String::new();
    let mut y = 14.0;
    let mut entry = |symbol: &str, text: &str| {
        let _ = writeln!(
            legend,
            "<g transform=\"translate(0 {y:.1})\">{symbol}<text x=\"34\" y=\"4\">{}</text></g>",
            escaped(text)
        );
        y += LINE;
    };
    let at = [13.0, 0.0];
    entry(&well_symbol(at, false, false), "pumping well");
    entry(&well_symbol(at, true, false), "injecting well");
    entry(&well_symbol(at, false, true), "well with a flag");
    entry(
        &neighbour_symbol(at, State::Within),
        "neighbour within its limit",
    );
    entry(
        &neighbour_symbol(at, State::Over),
        "neighbour over its limit",
    );
    entry(
        &neighbour_symbol(at, State::Unjudged),
        "neighbour without a limit",
    );
    entry(
        &format!(
            "<path d=\"M0 0H26\" stroke=\"#1f5673\" stroke-width=\"7\"/><path d=\"M0 0H26\" stroke=\"{PAPER}\" stroke-width=\"3\"/>"
        ),
        "river (fixed head)",
    );
    entry(
        "<path d=\"M0 3H26M3 3l3 -7M11 3l3 -7M19 3l3 -7\" fill=\"none\" stroke=\"#5b4636\" stroke-width=\"2\"/>",
        "barrier (no flow)",
    );
    let ending = planned.units().length_ending();
    entry(
        &format!("<path d=\"M0 0H26\" stroke=\"{INK}\" stroke-width=\"0.8\"/>"),
        &format!("head, {ending}"),
    );
    let _ = writeln!(
        legend,
        "<text x=\"0\" y=\"{:.1}\">drawdown, {ending}</text>",
        y + 12.0
    );
    legend.push_str(&band_key(planned, y + 24.0, height));
    legend
}

/// The bands from low to high, as many as there is room for.
fn band_key(planned: &Planned<'_>, top: f64, height: f64) -> String {
    let mut falls: Vec<f64> = vec![0.0];
    falls.extend(
        planned
            .levels
            .drawdowns_m
            .iter()
            .filter(|&&level_m| level_m > 0.0),
    );
    let room = (((height - top) / 15.0) as usize).clamp(4, 40);
    let stride = falls.len().div_ceil(room).max(1);
    let mut key = String::new();
    let mut y = top;
    for from_m in falls.iter().step_by(stride) {
        let level = planned.units().length(*from_m);
        let _ = writeln!(
            key,
            "<rect x=\"0\" y=\"{y:.1}\" width=\"26\" height=\"15\" fill=\"{}\" stroke=\"{INK}\" stroke-width=\"0.4\"/>\
             <text x=\"34\" y=\"{:.1}\" font-size=\"11\">from {}</text>",
            band_colour(band_share(planned, *from_m)),
            y + 11.5,
            (level * 1e6).round() / 1e6
        );
        y += 15.0;
    }
    if planned
        .levels
        .drawdowns_m
        .iter()
        .any(|&level_m| level_m < 0.0)
    {
        let _ = writeln!(
            key,
            "<rect x=\"0\" y=\"{y:.1}\" width=\"26\" height=\"15\" fill=\"{}\"/>\
             <rect x=\"0\" y=\"{y:.1}\" width=\"26\" height=\"15\" fill=\"url(#rise)\" stroke=\"{INK}\" stroke-width=\"0.4\"/>\
             <text x=\"34\" y=\"{:.1}\" font-size=\"11\">rise</text>",
            band_colour(0.0),
            y + 11.5
        );
    }
    key
}
