//! The style of each layer as OGC SLD 1.0.0, from the files of `maps/`.
//!
//! The files hold the look and are styles of a metric plan as they stand. Here
//! property names get the plan's units, and what depends on the plan's levels
//! is repeated for each: what stands between `<!-- each …: … -->` and
//! `<!-- end -->`, with words in capitals for its values. No text of the plan
//! goes in, only numbers and colours.
//! Source: OGC 02-070, SLD 1.0.0.

use super::contours::level;
use super::map_svg::{band_colour, band_share, mixed};
use super::property::Property;
use super::{Planned, Units};
use crate::plan::UnitSystem;

/// The lowest and the highest head: sand, and the map's water.
const SAND: [f64; 3] = [239.0, 230.0, 210.0];
const WATER: [f64; 3] = [31.0, 86.0, 115.0];

/// How a style comes about; each with its file.
#[derive(Clone, Copy, Debug)]
pub(super) enum Style {
    /// The same for every plan.
    Fixed(&'static str),
    /// A rule for each band of drawdown.
    Bands(&'static str),
    /// A colour for each level of drawdown.
    Drawdowns(&'static str),
    /// A colour for each level of head.
    Heads(&'static str),
}

/// The finished style of a layer with these properties.
pub(super) fn written(style: Style, properties: &[Property], planned: &Planned<'_>) -> Vec<u8> {
    let filled = match style {
        Style::Fixed(text) => text.to_owned(),
        Style::Bands(text) => {
            let bands = bands(planned);
            let (rises, falls): (Vec<_>, Vec<_>) = bands.into_iter().partition(|band| band.rises);
            let text = repeated(text, "rise", rises.iter().map(|band| &band.words));
            repeated(&text, "band", falls.iter().map(|band| &band.words))
        }
        Style::Drawdowns(text) => {
            let colour = |level_m: f64, _| band_colour(band_share(planned, level_m));
            let levels_m = &planned.levels.drawdowns_m;
            let range_m = planned.survey.drawdown_range_m();
            let entries = entries(planned.units(), levels_m, range_m, colour);
            repeated(text, "level", entries.iter())
        }
        Style::Heads(text) => {
            let colour = |_, share| mixed(SAND, WATER, share);
            let (levels_m, range_m) = (&planned.levels.heads_m, planned.survey.head_range_m());
            let entries = entries(planned.units(), levels_m, range_m, colour);
            repeated(text, "level", entries.iter())
        }
    };
    renamed(filled, properties, planned.units()).into_bytes()
}

/// What is put in the place of each word.
type Words = Vec<(&'static str, String)>;

/// A band of drawdown.
struct BandWords {
    /// Whether the head rises in it.
    rises: bool,
    words: Words,
}

/// The bands between the levels, and between them and the extremes.
fn bands(planned: &Planned<'_>) -> Vec<BandWords> {
    let units = planned.units();
    let limits_m = limits(
        &planned.levels.drawdowns_m,
        planned.survey.drawdown_range_m(),
    );
    limits_m
        .windows(2)
        .filter_map(|pair| match *pair {
            [from_m, to_m] => Some((from_m, to_m)),
            _ => None,
        })
        .map(|(from_m, to_m)| {
            let (from, to) = (level(units, from_m), level(units, to_m));
            let (low, high) = (figures(from), figures(to));
            BandWords {
                rises: to <= 0.0,
                words: vec![
                    ("FROM", from.to_string()),
                    ("TO", to.to_string()),
                    ("COLOUR", band_colour(band_share(planned, from_m.max(0.0)))),
                    ("LABEL", format!("{low} to {high}")),
                    ("UNIT", units.length_ending().into()),
                ],
            }
        })
        .collect()
}

/// An entry for each level and the extremes; `colour` is given a level and
/// its place from the lowest (0) to the highest (1).
fn entries(
    units: Units,
    levels_m: &[f64],
    range_m: Option<[f64; 2]>,
    colour: impl Fn(f64, f64) -> String,
) -> Vec<Words> {
    let limits_m = limits(levels_m, range_m);
    let (low_m, high_m) = match (limits_m.first(), limits_m.last()) {
        (Some(&low_m), Some(&high_m)) => (low_m, high_m),
        _ => return vec![],
    };
    let entry = |&level_m: &f64| {
        let share = if high_m > low_m {
            (level_m - low_m) / (high_m - low_m)
        } else {
            0.0
        };
        vec![
            ("COLOUR", colour(level_m, share)),
            ("QUANTITY", level(units, level_m).to_string()),
            ("LABEL", figures(level(units, level_m))),
            ("UNIT", units.length_ending().into()),
        ]
    };
    limits_m.iter().map(entry).collect()
}

/// The levels between the smallest and the largest value, and these two.
fn limits(levels_m: &[f64], range_m: Option<[f64; 2]>) -> Vec<f64> {
    let Some([low_m, high_m]) = range_m else {
        return vec![];
    };
    let between = levels_m
        .iter()
        .copied()
        .filter(|&level_m| level_m > low_m && level_m < high_m);
    let mut limits_m: Vec<f64> = std::iter::once(low_m).chain(between).collect();
    if high_m > low_m {
        limits_m.push(high_m);
    }
    limits_m
}

/// A level for people: no more than three decimals.
fn figures(value: f64) -> String {
    let rounded = (value * 1000.0).round() / 1000.0 + 0.0;
    rounded.to_string()
}

/// The text with the part that is marked for each `what` repeated.
fn repeated<'w>(text: &str, what: &str, each: impl Iterator<Item = &'w Words>) -> String {
    const END: &str = "<!-- end -->";
    let begin = format!("<!-- each {what}:");
    let parts = text.split_once(&begin).and_then(|(before, rest)| {
        let (_, rest) = rest.split_once("-->")?;
        let (pattern, after) = rest.split_once(END)?;
        Some((before, pattern.trim_end(), after))
    });
    let Some((before, pattern, after)) = parts else {
        return text.to_owned();
    };
    let mut filled = before.trim_end().to_owned();
    for words in each {
        let mut copy = pattern.to_owned();
        for (word, value) in words {
            copy = copy.replace(word, value);
        }
        filled.push_str(&copy);
    }
    filled + after
}

/// The text with the properties' names in the plan's units.
fn renamed(mut text: String, properties: &[Property], units: Units) -> String {
    let metric = Units(UnitSystem::Metric);
    for property in properties {
        let (from, to) = (property.name(metric), property.name(units));
        if from != to {
            text = text.replace(&format!(">{from}<"), &format!(">{to}<"));
        }
    }
    text
}
