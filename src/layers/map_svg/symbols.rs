//! What the map shows: bands, contours, edges, neighbours and wells.

use geo::LineString;

use super::canvas::{Canvas, INK, PAPER};
use crate::contours::ContourLine;
use crate::findings::{FlagCode, NeighbourFinding, Who};
use crate::layers::{LayerError, Planned, boundaries, contours};
use crate::site::{EdgeKind, Place, Point, Vector};

/// The lightest and the darkest band.
const LIGHT: [f64; 3] = [238.0, 243.0, 238.0];
const DARK: [f64; 3] = [70.0, 112.0, 120.0];
/// Rivers.
pub const WATER: &str = "#1f5673";
/// Barriers.
pub const ROCK: &str = "#5b4636";
/// Radius of the smallest symbol of a well, pixels.
const SMALLEST_RADIUS: f64 = 3.5;
/// Distance of the teeth of a barrier, pixels.
const TOOTH: f64 = 13.0;

/// The colour of a band by its place from the lightest (0) to the darkest (1).
pub fn band_colour(share: f64) -> String {
    mixed(LIGHT, DARK, share)
}

/// A colour between two, each red, green and blue from 0 to 255.
pub fn mixed(light: [f64; 3], dark: [f64; 3], share: f64) -> String {
    let mix = |light: f64, dark: f64| (light + (dark - light) * share).round() as u8;
    let [[lr, lg, lb], [dr, dg, db]] = [light, dark];
    format!("#{:02x}{:02x}{:02x}", mix(lr, dr), mix(lg, dg), mix(lb, db))
}

/// How dark a band is: its place among the levels of drawdown.
pub fn band_share(planned: &Planned<'_>, from_m: f64) -> f64 {
    let falls = planned
        .levels
        .drawdowns_m
        .iter()
        .filter(|&&level_m| level_m > 0.0);
    let below = falls
        .clone()
        .filter(|&&level_m| level_m <= from_m + 1e-9)
        .count();
    let most = falls.count().max(1);
    // Most of the map lies in the lowest few bands: give them the most room.
    (below as f64 / most as f64).sqrt()
}

/// The bands of drawdown; rises are dotted.
pub fn bands(canvas: &mut Canvas, planned: &Planned<'_>) -> Result<(), LayerError> {
    for band in contours::all_drawdown_bands(planned)? {
        let rings = band
            .polygons
            .iter()
            .flat_map(|polygon| std::iter::once(polygon.exterior()).chain(polygon.interiors()));
        let path: String = rings.map(|ring| canvas.path(&points(ring), true)).collect();
        if path.is_empty() {
            continue;
        }
        let fill = band_colour(band_share(planned, band.from.max(0.0)));
        canvas.add(&format!(
            "<path d=\"{path}\" fill=\"{fill}\" stroke=\"{fill}\" stroke-width=\"0.5\" fill-rule=\"evenodd\"/>"
        ));
        if band.to <= 1e-9 {
            canvas.add(&format!(
                "<path d=\"{path}\" fill=\"url(#{})\" fill-rule=\"evenodd\" opacity=\"0.45\"/>",
                canvas.id("rise")
            ));
        }
    }
    Ok(())
}

/// Contours; every fifth level is drawn bolder.
pub fn contours(canvas: &mut Canvas, lines: &[ContourLine], levels_m: &[f64]) {
    let step_m = levels_m
        .iter()
        .zip(levels_m.iter().skip(1))
        .map(|(low_m, high_m)| high_m - low_m)
        .fold(f64::INFINITY, f64::min);
    for line in lines {
        let path = canvas.path(&line.points, line.closed);
        if path.is_empty() {
            continue;
        }
        let is_fifth = (line.level / step_m).round() % 5.0 == 0.0;
        let width = if is_fifth { 1.5 } else { 0.8 };
        canvas.add(&format!(
            "<path d=\"{path}\" fill=\"none\" stroke=\"{INK}\" stroke-width=\"{width}\"/>"
        ));
    }
}

/// What a river's symbol has between its two lines where its bank is clogged.
pub const SILT: &str = "stroke-width=\"3\" stroke-dasharray=\"2.5 3\"";

/// Rivers as double lines, barriers with teeth on their far side.
pub fn edges(canvas: &mut Canvas, planned: &Planned<'_>) {
    let site = planned.solution.site();
    for (index, edge) in site.edges.iter().enumerate() {
        for line in boundaries::lines(planned, index) {
            let path = canvas.path(&line, false);
            match edge.kind {
                EdgeKind::River {
                    bank_resistance, ..
                } => {
                    canvas.add(&format!(
                        "<path d=\"{path}\" fill=\"none\" stroke=\"{WATER}\" stroke-width=\"7\"/>"
                    ));
                    canvas.add(&format!(
                        "<path d=\"{path}\" fill=\"none\" stroke=\"{PAPER}\" stroke-width=\"3\"/>"
                    ));
                    if bank_resistance.is_some() {
                        canvas.add(&format!(
                            "<path d=\"{path}\" fill=\"none\" stroke=\"{WATER}\" {SILT}/>"
                        ));
                    }
                }
                EdgeKind::Barrier => {
                    let teeth = teeth(canvas, planned, &line);
                    canvas.add(&format!(
                        "<path d=\"{path}{teeth}\" fill=\"none\" stroke=\"{ROCK}\" stroke-width=\"2\"/>"
                    ));
                }
            }
        }
    }
}

/// Strokes across a barrier, away from the aquifer.
fn teeth(canvas: &Canvas, planned: &Planned<'_>, line: &[Point]) -> String {
    let step_m = TOOTH / canvas.pixels_a_metre();
    let mut teeth = String::new();
    for (&from, &to) in line.iter().zip(line.iter().skip(1)) {
        let span = to - from;
        let length_m = span.norm();
        if length_m < step_m {
            continue;
        }
        let along = span / length_m;
        let across = Vector::new(-along.y, along.x) * (0.6 * step_m);
        let middle = from + span * 0.5;
        let away = if planned.solution.field_at(middle + across).is_none() {
            across
        } else {
            -across
        };
        let mut at_m = 0.5 * step_m;
        while at_m < length_m {
            let foot = from + along * at_m;
            teeth.push_str(&canvas.path(&[foot, foot + away + along * (0.3 * step_m)], false));
            at_m += step_m;
        }
    }
    teeth
}

/// How a neighbour fares.
#[derive(Clone, Copy, PartialEq, Eq)]
pub enum State {
    /// Within its limit.
    Within,
    /// Over its limit.
    Over,
    /// Without a limit, or outside the aquifer.
    Unjudged,
}

/// How a neighbour fares.
pub fn state(finding: &NeighbourFinding) -> State {
    if finding.excess_m().is_some() {
        State::Over
    } else if finding.allowed_m.is_none() || finding.worst.is_none() {
        State::Unjudged
    } else {
        State::Within
    }
}

/// Areas of neighbours: hatched over their limit, dashed without one.
pub fn neighbour_areas(canvas: &mut Canvas, planned: &Planned<'_>) {
    let site = planned.solution.site();
    for (finding, neighbour) in planned.findings.neighbours.iter().zip(&site.neighbours) {
        if let Place::Area(ring) = &neighbour.place {
            let path = canvas.path(ring, true);
            let (fill, dashes) = match state(finding) {
                State::Within => ("none".to_owned(), ""),
                State::Over => (format!("url(#{})", canvas.id("over")), ""),
                State::Unjudged => ("none".to_owned(), " stroke-dasharray=\"5 3\""),
            };
            canvas.add(&format!(
                "<path d=\"{path}\" fill=\"{fill}\" stroke=\"{INK}\" stroke-width=\"1.6\"{dashes}/>"
            ));
        }
    }
}

/// Neighbours at a point: squares, filled over their limit.
pub fn neighbours(canvas: &mut Canvas, planned: &Planned<'_>) {
    let site = planned.solution.site();
    for (finding, neighbour) in planned.findings.neighbours.iter().zip(&site.neighbours) {
        if let Place::At(at) = neighbour.place {
            canvas.symbol(canvas.place(at), &neighbour_symbol(state(finding)));
        }
    }
}

/// The square of a neighbour.
pub fn neighbour_symbol(state: State) -> String {
    let (fill, dashes) = match state {
        State::Within => (PAPER, ""),
        State::Over => (INK, ""),
        State::Unjudged => (PAPER, " stroke-dasharray=\"2.5 1.8\""),
    };
    format!(
        "<rect x=\"-4.5\" y=\"-4.5\" width=\"9\" height=\"9\" fill=\"{fill}\" stroke=\"{INK}\" stroke-width=\"1.5\"{dashes}/>"
    )
}

/// Wells: discs pump, diamonds inject; a ring around those with a flag.
pub fn wells(canvas: &mut Canvas, planned: &Planned<'_>) {
    let site = planned.solution.site();
    for (finding, well) in planned.findings.wells.iter().zip(&site.wells) {
        let flagged = planned
            .findings
            .flags_of(Who::Well(finding.well))
            .any(|flag| flag.code != FlagCode::NoLimitGiven);
        let radius = well_radius(planned, finding.well);
        let symbol = well_symbol(radius, finding.pumping_m3_d < 0.0, flagged);
        canvas.symbol(canvas.place(well.at), &symbol);
    }
}

/// Radius of a well's symbol, pixels: its area goes with the rate.
pub fn well_radius(planned: &Planned<'_>, well: usize) -> f64 {
    let rates = || planned.findings.wells.iter().map(|w| w.pumping_m3_d.abs());
    let most = rates().fold(0.0, f64::max);
    let own = rates().nth(well).unwrap_or(0.0);
    let largest = largest_radius(planned);
    let share = if most > 0.0 { own / most } else { 1.0 };
    (largest * share.sqrt()).max(SMALLEST_RADIUS)
}

/// Radius of the symbol of the largest well, pixels.
pub fn largest_radius(planned: &Planned<'_>) -> f64 {
    if planned.findings.wells.len() > 30 {
        6.0
    } else {
        9.0
    }
}

/// The disc or diamond of a well, as large as a disc of this radius.
pub fn well_symbol(radius: f64, injects: bool, flagged: bool) -> String {
    let mut symbol = if injects {
        // A square on its tip with half the diagonal r √(π/2) has the disc's area.
        let r = radius * std::f64::consts::FRAC_PI_2.sqrt();
        format!(
            "<path d=\"M{:.1} 0l{r:.1} {:.1}l{r:.1} {r:.1}l{:.1} {r:.1}Z\" fill=\"{PAPER}\" stroke=\"{INK}\" stroke-width=\"2\"/>",
            -r, -r, -r
        )
    } else {
        format!(
            "<circle r=\"{radius:.1}\" fill=\"{INK}\" stroke=\"{PAPER}\" stroke-width=\"1.5\"/>"
        )
    };
    if flagged {
        symbol.push_str(&format!(
            "<circle r=\"{:.1}\" fill=\"none\" stroke=\"{INK}\" stroke-width=\"1.8\"/>",
            radius + 4.5
        ));
    }
    symbol
}

/// The points of a ring.
fn points(ring: &LineString) -> Vec<Point> {
    ring.coords().map(|c| Point::new(c.x, c.y)).collect()
}
