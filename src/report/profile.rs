//! Draws a section as an SVG picture.

use std::fmt::Write as _;

use crate::layers::words::{fixed, grouped};
use crate::layers::{INK, PAPER, WATER, escaped, multiples, round_step};

/// Places of a curve: distance and height, in the plan's unit; heights that
/// are no number part it.
pub type Curve = Vec<[f64; 2]>;

/// What a section shows, in the plan's unit of length.
pub struct Profile {
    /// Length of the line.
    pub length: f64,
    /// The unit.
    pub unit: &'static str,
    /// The head before pumping.
    pub before: Curve,
    /// The head while the wells run.
    pub after: Curve,
    /// Elevation of the aquifer's roof.
    pub roof: Option<f64>,
    /// The wells on the line, in order.
    pub wells: Vec<WellMark>,
}

/// A well on the line.
pub struct WellMark {
    /// Its name.
    pub name: String,
    /// Its distance along the line.
    pub station: f64,
    /// The level in it.
    pub level: f64,
    /// Elevation of the ground.
    pub ground: Option<f64>,
    /// The level that it must not fall below.
    pub lowest: Option<f64>,
}

/// A drawn section.
pub struct Drawn {
    /// The picture.
    pub svg: String,
    /// How many times heights are exaggerated, in words.
    pub exaggeration: String,
}

/// Size of the graph and the room around it, pixels.
const WIDTH: f64 = 880.0;
const HEIGHT: f64 = 300.0;
const LEFT: f64 = 66.0;
const RIGHT: f64 = 16.0;
const ROW: f64 = 17.0;
const BELOW: f64 = 84.0;
/// Distance of two ticks, pixels, at least.
const CLOSEST: [f64; 2] = [90.0, 36.0];
/// Width of a letter, pixels, roughly.
const LETTER: f64 = 7.6;

/// From the section's units to pixels of the graph.
struct Scales {
    length: f64,
    low: f64,
    high: f64,
}

impl Scales {
    fn x(&self, station: f64) -> f64 {
        station / self.length * WIDTH
    }

    fn y(&self, level: f64) -> f64 {
        (self.high - level) / (self.high - self.low) * HEIGHT
    }
}

/// Draws it.
pub fn drawn(profile: &Profile) -> Drawn {
    let [low, high] = range(profile);
    let scales = Scales {
        length: profile.length,
        low,
        high,
    };
    let rows = name_rows(profile, &scales);
    let count = rows.iter().max().map_or(0, |row| row + 1);
    let above = count as f64 * ROW + 12.0;
    let mut body = axes(profile, &scales);
    body.push_str(&curves(profile, &scales));
    for (well, row) in profile.wells.iter().zip(&rows) {
        body.push_str(&well_mark(well, *row, &scales));
    }
    let (width, height) = (LEFT + WIDTH + RIGHT, above + HEIGHT + BELOW);
    let exaggeration = (HEIGHT / (high - low)) / (WIDTH / profile.length);
    Drawn {
        svg: format!(
            "<svg class=\"section\" viewBox=\"0 0 {width:.0} {height:.0}\" role=\"img\" aria-label=\"Section along the line A to A′\" font-size=\"13\" fill=\"{INK}\">\n\
             <g transform=\"translate({LEFT} {above:.0})\">\n{body}{}</g></svg>",
            key(profile)
        ),
        exaggeration: grouped(&fixed(exaggeration, usize::from(exaggeration < 10.0))),
    }
}

/// The lowest and the highest level that the graph shows.
fn range(profile: &Profile) -> [f64; 2] {
    let curves = profile.before.iter().chain(&profile.after).map(|p| p[1]);
    let wells = profile.wells.iter();
    let wells = wells.flat_map(|w| [Some(w.level), w.ground, w.lowest]);
    let levels = wells.chain([profile.roof]).flatten();
    let [low, high] = curves
        .chain(levels)
        .filter(|level| level.is_finite())
        .fold([f64::INFINITY, f64::NEG_INFINITY], |[low, high], level| {
            [low.min(level), high.max(level)]
        });
    let room = 0.06 * (high - low).max(0.5);
    [low - room, high + room]
}

/// The row of each well's name above the graph: the first in which it is
/// clear of the names before it.
fn name_rows(profile: &Profile, scales: &Scales) -> Vec<usize> {
    let mut ends: Vec<f64> = Vec::new();
    profile
        .wells
        .iter()
        .map(|well| {
            let half = 0.5 * LETTER * shown(&well.name).chars().count() as f64;
            let middle = name_place(well, scales);
            let free = ends.iter().position(|end| *end < middle - half);
            let row = free.unwrap_or(ends.len());
            if row == ends.len() {
                ends.push(0.0);
            }
            if let Some(end) = ends.get_mut(row) {
                *end = middle + half + 8.0;
            }
            row
        })
        .collect()
}

/// A well's name as the graph has room for it.
fn shown(name: &str) -> String {
    crate::layers::words::short(name, 20)
}

/// Where the middle of a well's name stands: within the graph.
fn name_place(well: &WellMark, scales: &Scales) -> f64 {
    let half = 0.5 * LETTER * shown(&well.name).chars().count() as f64;
    let least = (half - LEFT + 4.0).min(0.5 * WIDTH);
    let most = (WIDTH + RIGHT - half - 4.0).max(0.5 * WIDTH);
    scales.x(well.station).clamp(least, most)
}

/// Frame, ticks and their numbers.
fn axes(profile: &Profile, scales: &Scales) -> String {
    let mut svg = format!(
        "<rect width=\"{WIDTH}\" height=\"{HEIGHT}\" fill=\"{PAPER}\" stroke=\"{INK}\"/>\n"
    );
    let step = round_step((scales.high - scales.low) * CLOSEST[1] / HEIGHT);
    // Truncation is meant: a step has some digits at most.
    let decimals = (-step.log10().floor()).clamp(0.0, 6.0) as usize;
    for level in multiples(scales.low, scales.high, step) {
        let _ = writeln!(
            svg,
            "<path d=\"M0 {y:.1}H{WIDTH}\" stroke=\"{INK}\" stroke-opacity=\"0.18\"/>\
             <text x=\"-8\" y=\"{:.1}\" text-anchor=\"end\">{}</text>",
            scales.y(level) + 4.5,
            grouped(&fixed(level, decimals)),
            y = scales.y(level)
        );
    }
    let step = round_step(profile.length * CLOSEST[0] / WIDTH);
    for station in multiples(0.0, profile.length, step) {
        let x = scales.x(station);
        let _ = writeln!(
            svg,
            "<path d=\"M{x:.1} {HEIGHT}v6\" stroke=\"{INK}\"/>\
             <text x=\"{x:.1}\" y=\"{:.1}\" text-anchor=\"middle\">{}</text>",
            HEIGHT + 20.0,
            grouped(&format!("{}", (station * 1e6).round() / 1e6))
        );
    }
    let _ = writeln!(
        svg,
        "<text transform=\"translate(-50 {:.1}) rotate(-90)\" text-anchor=\"middle\">elevation, {}</text>\n\
         <text x=\"{:.1}\" y=\"{:.1}\" text-anchor=\"middle\">distance along the line, {}</text>\n\
         <text x=\"2\" y=\"{:.1}\" font-weight=\"bold\" font-size=\"15\">A</text>\
         <text x=\"{WIDTH}\" y=\"{:.1}\" text-anchor=\"end\" font-weight=\"bold\" font-size=\"15\">A′</text>",
        0.5 * HEIGHT,
        profile.unit,
        0.5 * WIDTH,
        HEIGHT + 40.0,
        profile.unit,
        HEIGHT + 40.0,
        HEIGHT + 40.0
    );
    svg
}

/// Roof and heads.
fn curves(profile: &Profile, scales: &Scales) -> String {
    let mut svg = String::new();
    if let Some(roof) = profile.roof {
        let y = scales.y(roof);
        let mut teeth = String::new();
        let mut x = 0.0;
        while x < WIDTH {
            let _ = write!(teeth, "M{x:.0} {y:.1}l5 6");
            x += 12.0;
        }
        let _ = writeln!(
            svg,
            "<path d=\"M0 {y:.1}H{WIDTH}\" stroke=\"{INK}\" stroke-width=\"1.6\"/>\
             <path d=\"{teeth}\" stroke=\"{INK}\" stroke-width=\"0.8\"/>"
        );
    }
    let _ = writeln!(
        svg,
        "<path d=\"{}\" fill=\"none\" stroke=\"{INK}\" stroke-width=\"1.4\" stroke-dasharray=\"6 4\"/>\n\
         <path d=\"{}\" fill=\"none\" stroke=\"{WATER}\" stroke-width=\"2.6\" stroke-linejoin=\"round\"/>",
        path(&profile.before, scales),
        path(&profile.after, scales)
    );
    svg
}

/// The `d` of a curve, parted where it has no value.
fn path(curve: &Curve, scales: &Scales) -> String {
    let mut path = String::new();
    let mut is_open = false;
    for &[station, level] in curve {
        if level.is_finite() {
            let letter = if is_open { "L" } else { "M" };
            let _ = writeln!(
                path,
                "{letter}{:.1} {:.1}",
                scales.x(station),
                scales.y(level)
            );
        }
        is_open = level.is_finite();
    }
    path
}

/// A well: its bore, the level in it, ground and lowest level.
fn well_mark(well: &WellMark, row: usize, scales: &Scales) -> String {
    let (x, y) = (scales.x(well.station), scales.y(well.level));
    let name_base = -8.0 - ROW * row as f64;
    let mut svg = format!(
        "<path d=\"M{x:.1} {:.1}V{HEIGHT}\" stroke=\"{INK}\" stroke-width=\"1\" stroke-dasharray=\"1 3\"/>\
         <path d=\"M{x:.1} {y:.1}l-6 -10h12Z\" fill=\"{PAPER}\" stroke=\"{INK}\" stroke-width=\"1.6\"/>\
         <text x=\"{:.1}\" y=\"{name_base:.1}\" text-anchor=\"middle\" font-weight=\"bold\">{}</text>",
        name_base + 3.0,
        name_place(well, scales),
        escaped(&shown(&well.name))
    );
    if let Some(lowest) = well.lowest {
        let y = scales.y(lowest);
        let _ = write!(
            svg,
            "<path d=\"M{:.1} {y:.1}h20\" stroke=\"{INK}\" stroke-width=\"3.2\"/>",
            x - 10.0
        );
    }
    if let Some(ground) = well.ground {
        let y = scales.y(ground);
        let _ = write!(
            svg,
            "<path d=\"M{:.1} {y:.1}h28m-24 0l-4 6m12 -6l-4 6m12 -6l-4 6m12 -6l-4 6\" fill=\"none\" stroke=\"{INK}\" stroke-width=\"1.6\"/>",
            x - 14.0
        );
    }
    svg
}

/// What the lines and marks are, below the graph.
fn key(profile: &Profile) -> String {
    let ground = profile.wells.iter().any(|well| well.ground.is_some());
    let lowest = profile.wells.iter().any(|well| well.lowest.is_some());
    let entries = [
        (
            true,
            format!(
                "<path d=\"M0 0h30\" stroke=\"{INK}\" stroke-width=\"1.4\" stroke-dasharray=\"6 4\"/>"
            ),
            "head before",
        ),
        (
            true,
            format!("<path d=\"M0 0h30\" stroke=\"{WATER}\" stroke-width=\"2.6\"/>"),
            "head after",
        ),
        (
            profile.roof.is_some(),
            format!(
                "<path d=\"M0 -2h30m-30 0l5 6m7 -6l5 6m7 -6l5 6\" fill=\"none\" stroke=\"{INK}\" stroke-width=\"1.4\"/>"
            ),
            "aquifer’s roof",
        ),
        (
            true,
            format!(
                "<path d=\"M15 5l-6 -10h12Z\" fill=\"{PAPER}\" stroke=\"{INK}\" stroke-width=\"1.6\"/>"
            ),
            "level in a well",
        ),
        (
            lowest,
            format!("<path d=\"M5 0h20\" stroke=\"{INK}\" stroke-width=\"3.2\"/>"),
            "lowest level",
        ),
        (
            ground,
            format!(
                "<path d=\"M1 -2h28m-24 0l-4 6m12 -6l-4 6m12 -6l-4 6m12 -6l-4 6\" fill=\"none\" stroke=\"{INK}\" stroke-width=\"1.6\"/>"
            ),
            "ground",
        ),
    ];
    let mut svg = String::new();
    let mut x = 0.0;
    for (_, symbol, text) in entries.iter().filter(|(given, ..)| *given) {
        let _ = writeln!(
            svg,
            "<g transform=\"translate({x:.0} {:.0})\">{symbol}<text x=\"36\" y=\"4\">{text}</text></g>",
            HEIGHT + 66.0
        );
        x += 58.0 + LETTER * text.chars().count() as f64;
    }
    svg
}

#[cfg(test)]
mod tests {
    use super::*;

    fn well(name: &str, station: f64) -> WellMark {
        WellMark {
            name: name.into(),
            station,
            level: 5.0,
            ground: None,
            lowest: None,
        }
    }

    #[test]
    fn names_that_would_touch_stand_in_rows() {
        let profile = Profile {
            length: 1000.0,
            unit: "m",
            before: vec![[0.0, 10.0], [1000.0, 10.0]],
            after: vec![[0.0, 10.0], [500.0, f64::NAN], [1000.0, 9.0]],
            roof: None,
            wells: vec![
                well("PW-1", 500.0),
                well("PW-2", 510.0),
                well("PW-3", 900.0),
            ],
        };
        let [low, high] = range(&profile);
        let scales = Scales {
            length: 1000.0,
            low,
            high,
        };
        assert_eq!(name_rows(&profile, &scales), [0, 1, 0]);
        assert_eq!(path(&profile.after, &scales).matches('M').count(), 2);
    }
}
