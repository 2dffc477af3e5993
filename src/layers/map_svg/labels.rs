//! Names and contour labels, placed where they do not cover each other.

use super::canvas::{Canvas, INK, Label};
use super::symbols;
use crate::contours::ContourLine;
use crate::layers::words::short;
use crate::layers::{Planned, boundaries};
use crate::site::{Place, Point};

/// Width of a letter and of a digit, pixels, roughly.
const LETTER: f64 = 7.2;
const DIGIT: f64 = 7.0;
/// Letters of a name on the map, at most.
const LONGEST_NAME: usize = 28;
/// A contour shorter than this has no label, pixels.
const SHORTEST_LABELLED: f64 = 90.0;

/// The boxes that are taken: left, top, right, bottom, pixels.
#[derive(Default)]
pub struct Taken(Vec<[f64; 4]>);

impl Taken {
    /// Takes a box whether or not something overlaps it.
    pub fn reserve(&mut self, corners: [f64; 4]) {
        self.0.push(corners);
    }

    /// Takes a box if nothing overlaps it.
    fn take(&mut self, [left, top, right, bottom]: [f64; 4]) -> bool {
        let free = self
            .0
            .iter()
            .all(|[l, t, r, b]| right < *l || left > *r || bottom < *t || top > *b);
        if free {
            self.0.push([left, top, right, bottom]);
        }
        free
    }
}

/// Keeps names off the symbols of wells and neighbours.
pub fn reserve_symbols(canvas: &Canvas, planned: &Planned<'_>, taken: &mut Taken) {
    let site = planned.solution.site();
    let wells = site.wells.iter().enumerate();
    let wells = wells.map(|(index, well)| (well.at, symbols::well_radius(planned, index)));
    let neighbours = site.neighbours.iter().filter_map(|n| match n.place {
        Place::At(at) => Some((at, 5.0)),
        Place::Area(_) => None,
    });
    for (at, radius) in wells.chain(neighbours) {
        let ([x, y], half) = (canvas.place(at), radius + 2.0);
        taken.reserve([x - half, y - half, x + half, y + half]);
    }
}

/// Names of wells, neighbours and edges. A name that finds no room is left
/// out; the tables have it.
pub fn names(canvas: &mut Canvas, planned: &Planned<'_>, taken: &mut Taken) {
    let site = planned.solution.site();
    for (index, well) in site.wells.iter().enumerate() {
        let radius = symbols::well_radius(planned, index) + 4.0;
        let attributes = "font-weight=\"bold\"";
        name_beside(canvas, taken, well.at, radius, &well.name, attributes);
    }
    for neighbour in &site.neighbours {
        match &neighbour.place {
            Place::At(at) => name_beside(canvas, taken, *at, 7.0, &neighbour.name, ""),
            Place::Area(ring) => name_beside(canvas, taken, middle(ring), 0.0, &neighbour.name, ""),
        }
    }
    for (index, edge) in site.edges.iter().enumerate() {
        if let Some(line) = boundaries::lines(planned, index).first() {
            name_along(canvas, taken, line, &on_map(&edge.name));
        }
    }
}

/// A name as the map has room for it.
fn on_map(name: &str) -> String {
    short(name, LONGEST_NAME)
}

/// A name right, left, above or below its symbol.
fn name_beside(
    canvas: &mut Canvas,
    taken: &mut Taken,
    at: Point,
    radius: f64,
    name: &str,
    attributes: &str,
) {
    let name = on_map(name);
    let [x, y] = canvas.place(at);
    let width = name.chars().count() as f64 * LETTER;
    let aside = radius + 3.0;
    let offsets = [
        [aside, 4.5],
        [-aside - width, 4.5],
        [-0.5 * width, -radius - 5.0],
        [-0.5 * width, radius + 13.0],
        [aside, -radius],
        [aside, radius + 9.0],
    ];
    for [dx, dy] in offsets {
        let (left, base) = (x + dx, y + dy);
        let corners = [left, base - 11.0, left + width, base + 4.0];
        let inside = canvas.shows([left, base - 11.0]) && canvas.shows([left + width, base + 4.0]);
        if inside && taken.take(corners) {
            // A name left of its place ends there, however wide it turns out.
            let (dx, anchor) = match dx {
                dx if dx >= 0.0 => (dx, "start"),
                dx if dx > -width => (0.0, "middle"),
                _ => (-aside, "end"),
            };
            let attributes = format!("text-anchor=\"{anchor}\" {attributes}");
            canvas.text(&Label {
                at: [x, y],
                offset: [dx, dy],
                angle: 0.0,
                text: &name,
                attributes: &attributes,
            });
            return;
        }
    }
}

/// A name along a line, near its middle.
fn name_along(canvas: &mut Canvas, taken: &mut Taken, line: &[Point], name: &str) {
    let pixels: Vec<[f64; 2]> = line.iter().map(|&p| canvas.place(p)).collect();
    for share in [0.5, 0.3, 0.7, 0.2, 0.8] {
        let Some(([x, y], angle)) = at_share(&pixels, share) else {
            return;
        };
        let half = 0.5 * name.chars().count() as f64 * LETTER + 4.0;
        // The name stands aside of the line, turned along it.
        let (sin, cos) = angle.to_radians().sin_cos();
        let [x, y] = [x + 13.0 * sin, y - 13.0 * cos];
        let (w, h) = (half * cos.abs() + 7.0, half * sin.abs() + 7.0);
        if canvas.shows([x - w, y - h])
            && canvas.shows([x + w, y + h])
            && taken.take([x - w, y - h, x + w, y + h])
        {
            canvas.text(&Label {
                at: [x, y],
                offset: [0.0, 4.0],
                angle,
                text: name,
                attributes: "text-anchor=\"middle\" font-style=\"italic\" font-size=\"14\"",
            });
            return;
        }
    }
}

/// Labels on contours, along their lines.
pub fn contours(
    canvas: &mut Canvas,
    planned: &Planned<'_>,
    lines: &[ContourLine],
    taken: &mut Taken,
) {
    for line in lines {
        let pixels: Vec<[f64; 2]> = line.points.iter().map(|&p| canvas.place(p)).collect();
        if length(&pixels) < SHORTEST_LABELLED {
            continue;
        }
        let level = planned.units().length(line.level);
        let text = format!("{}", (level * 1e6).round() / 1e6);
        let half = 0.5 * text.chars().count() as f64 * DIGIT + 2.0;
        for share in [0.5, 0.35, 0.65, 0.2, 0.8, 0.1, 0.9] {
            let Some(([x, y], angle)) = at_share(&pixels, share) else {
                break;
            };
            let (sin, cos) = angle.to_radians().sin_cos();
            let (w, h) = (
                half * cos.abs() + 7.0 * sin.abs(),
                half * sin.abs() + 7.0 * cos.abs(),
            );
            let inside = canvas.shows([x - w, y - h]) && canvas.shows([x + w, y + h]);
            if inside && taken.take([x - w, y - h, x + w, y + h]) {
                let attributes = format!("text-anchor=\"middle\" font-size=\"12\" fill=\"{INK}\"");
                canvas.text(&Label {
                    at: [x, y],
                    offset: [0.0, 4.0],
                    angle,
                    text: &text,
                    attributes: &attributes,
                });
                break;
            }
        }
    }
}

/// Length of a line, pixels.
fn length(line: &[[f64; 2]]) -> f64 {
    line.iter()
        .zip(line.iter().skip(1))
        .map(|([ax, ay], [bx, by])| (bx - ax).hypot(by - ay))
        .sum()
}

/// The place at a share of a line's length, and the line's direction there,
/// degrees, never upside down.
fn at_share(line: &[[f64; 2]], share: f64) -> Option<([f64; 2], f64)> {
    let mut left = share * length(line);
    for (&[ax, ay], &[bx, by]) in line.iter().zip(line.iter().skip(1)) {
        let step = (bx - ax).hypot(by - ay);
        if left <= step && step > 0.0 {
            let part = left / step;
            let angle = (by - ay).atan2(bx - ax).to_degrees();
            let upright = if angle > 90.0 {
                angle - 180.0
            } else if angle <= -90.0 {
                angle + 180.0
            } else {
                angle
            };
            return Some(([ax + part * (bx - ax), ay + part * (by - ay)], upright));
        }
        left -= step;
    }
    None
}

/// The middle of a ring's vertices.
fn middle(ring: &[Point]) -> Point {
    let count = ring.len().max(1) as f64;
    let sum = ring
        .iter()
        .fold(Point::origin(), |sum, point| sum + point.coords);
    sum / count
}
