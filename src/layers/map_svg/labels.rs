//! Names and contour labels, placed where they do not cover each other.

use super::canvas::{Canvas, INK};
use crate::contours::ContourLine;
use crate::layers::words::one_line;
use crate::layers::{Planned, boundaries};
use crate::site::{Place, Point};

/// Width of a letter, pixels, roughly.
const LETTER: f64 = 6.0;
/// A contour shorter than this has no label, pixels.
const SHORTEST_LABELLED: f64 = 90.0;

/// The boxes that are taken: left, top, right, bottom, pixels.
#[derive(Default)]
pub struct Taken(Vec<[f64; 4]>);

impl Taken {
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

/// Names of wells, neighbours and edges. A name that finds no room is left
/// out; the tables have it.
pub fn names(canvas: &mut Canvas, planned: &Planned<'_>, taken: &mut Taken) {
    let site = planned.solution.site();
    let wells = site.wells.iter().map(|well| (well.at, &well.name, true));
    let neighbours = site
        .neighbours
        .iter()
        .map(|neighbour| match &neighbour.place {
            Place::At(at) => (*at, &neighbour.name, false),
            Place::Area(ring) => (middle(ring), &neighbour.name, false),
        });
    let all: Vec<(Point, &String, bool)> = wells.chain(neighbours).collect();
    for &(at, ..) in &all {
        let [x, y] = canvas.place(at);
        taken.0.push([x - 7.0, y - 7.0, x + 7.0, y + 7.0]);
    }
    for (at, name, is_well) in all {
        let weight = if is_well { "font-weight=\"bold\"" } else { "" };
        name_beside(canvas, taken, canvas.place(at), &one_line(name), weight);
    }
    for (index, edge) in site.edges.iter().enumerate() {
        if let Some(line) = boundaries::lines(planned, index).first() {
            name_along(canvas, taken, line, &one_line(&edge.name));
        }
    }
}

/// A name right, left, above or below its symbol.
fn name_beside(
    canvas: &mut Canvas,
    taken: &mut Taken,
    [x, y]: [f64; 2],
    name: &str,
    attributes: &str,
) {
    let width = name.chars().count() as f64 * LETTER;
    let places = [
        (x + 13.0, y + 4.0, "start"),
        (x - 13.0 - width, y + 4.0, "start"),
        (x - 0.5 * width, y - 13.0, "start"),
        (x - 0.5 * width, y + 22.0, "start"),
    ];
    for (left, base, anchor) in places {
        let inside = canvas.shows([left, base - 10.0]) && canvas.shows([left + width, base + 3.0]);
        if inside && taken.take([left, base - 10.0, left + width, base + 3.0]) {
            let attributes = format!("text-anchor=\"{anchor}\" {attributes}");
            canvas.text([left, base], name, &attributes);
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
            let attributes = format!(
                "text-anchor=\"middle\" font-style=\"italic\" font-size=\"13\" transform=\"rotate({angle:.1} {x:.1} {y:.1})\""
            );
            canvas.text([x, y + 4.0], name, &attributes);
            return;
        }
    }
}

/// Labels on head contours.
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
        let half = 0.5 * text.chars().count() as f64 * 5.5 + 2.0;
        for share in [0.5, 0.35, 0.65, 0.2, 0.8, 0.1, 0.9] {
            let Some(([x, y], angle)) = at_share(&pixels, share) else {
                break;
            };
            let box_around = [x - half - 3.0, y - half, x + half + 3.0, y + half];
            let inside = canvas.shows([x - half, y - half]) && canvas.shows([x + half, y + half]);
            if inside && taken.take(box_around) {
                let attributes = format!(
                    "text-anchor=\"middle\" font-size=\"10\" fill=\"{INK}\" transform=\"rotate({angle:.1} {x:.1} {y:.1})\""
                );
                canvas.text([x, y + 3.4], &text, &attributes);
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
