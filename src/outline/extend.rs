//! Carries free line ends straight on until they meet another edge, or to
//! infinity.
//!
//! Method: all rays grow at the same speed. A ray stops at the first drawn
//! line it meets. Two rays whose paths cross both stop there, at a corner, if
//! the one that passes first is still growing when the other arrives; if it
//! has stopped further on by then, the other ends on it. Two rays that grow
//! toward each other on one line meet in the middle.

use super::scene::{FreeEnd, Scene};
use super::stroke::{Role, Stroke, TOUCH_M, contacts, tolerance_at};

/// The drawn strokes and the extensions of their free ends.
pub(super) fn strokes(scene: &Scene) -> Vec<Stroke> {
    let rays: Vec<Ray> = scene
        .free_ends
        .iter()
        .filter_map(|end| Ray::from(scene, *end))
        .collect();
    let mut events = with_drawn(scene, &rays);
    events.extend(with_each_other(&rays));
    events.sort_by(|a, b| a.time_m.total_cmp(&b.time_m).then(a.order.cmp(&b.order)));
    let mut lengths = vec![f64::INFINITY; rays.len()];
    for event in &events {
        resolve(event, &mut lengths);
    }
    let grown = rays.iter().zip(lengths).filter_map(|(ray, length_m)| {
        let long_enough = length_m > tolerance_at(ray.stroke.from);
        long_enough.then_some(Stroke {
            length_m,
            ..ray.stroke
        })
    });
    scene.strokes.iter().copied().chain(grown).collect()
}

/// A free end that grows.
struct Ray {
    /// The ray, of infinite length.
    stroke: Stroke,
    /// The stroke that it carries on.
    parent: usize,
}

impl Ray {
    fn from(scene: &Scene, end: FreeEnd) -> Option<Self> {
        let parent = scene.strokes.get(end.stroke)?;
        let (first, last) = parent.vertices;
        let (vertex, from, direction) = if end.at_end {
            (last, parent.end()?, parent.direction)
        } else {
            (first, parent.from, -parent.direction)
        };
        let stroke = Stroke {
            role: Role::Extension,
            vertices: (vertex, vertex),
            from,
            direction,
            length_m: f64::INFINITY,
            ..*parent
        };
        Some(Self {
            stroke,
            parent: end.stroke,
        })
    }
}

/// A meeting that may stop one ray or two.
struct Event {
    /// When the later party arrives: the distance it has grown by then.
    time_m: f64,
    /// Decides between meetings at the same time: corners first.
    order: u8,
    /// The rays that meet, with the distance each has grown.
    rays: [Option<(usize, f64)>; 2],
}

/// Meetings of rays with drawn strokes.
fn with_drawn(scene: &Scene, rays: &[Ray]) -> Vec<Event> {
    let mut events = Vec::new();
    for (index, ray) in rays.iter().enumerate() {
        for (number, drawn) in scene.strokes.iter().enumerate() {
            if number == ray.parent {
                continue;
            }
            let reached = contacts(&ray.stroke, drawn)
                .iter()
                .map(|contact| contact.on_first)
                .min_by(f64::total_cmp);
            events.extend(reached.map(|distance| Event {
                time_m: distance,
                order: 1,
                rays: [Some((index, distance)), None],
            }));
        }
    }
    events
}

/// Meetings of rays with rays.
fn with_each_other(rays: &[Ray]) -> Vec<Event> {
    let mut events = Vec::new();
    for (index, ray) in rays.iter().enumerate() {
        for (step, other) in rays.iter().enumerate().skip(index + 1) {
            let touching = contacts(&ray.stroke, &other.stroke);
            let distances = match touching.as_slice() {
                [] => continue,
                [contact] => [contact.on_first, contact.on_second],
                // On one line, toward each other: half the gap each.
                _ => [0.5 * (other.stroke.from - ray.stroke.from).norm(); 2],
            };
            let [first, second] = distances;
            events.push(Event {
                time_m: first.max(second),
                order: 0,
                rays: [Some((index, first)), Some((step, second))],
            });
        }
    }
    events
}

/// Stops the rays of a meeting, unless one of them never comes to it.
fn resolve(event: &Event, lengths: &mut [f64]) {
    let parties = || event.rays.iter().flatten();
    let comes = |&&(ray, distance): &&(usize, f64)| {
        let slack = TOUCH_M.max(1e-10 * distance);
        lengths
            .get(ray)
            .is_some_and(|&length| distance <= length + slack)
    };
    if parties().filter(comes).count() < parties().count() {
        return;
    }
    for &(ray, distance) in parties() {
        if let Some(length) = lengths.get_mut(ray)
            && length.is_infinite()
        {
            *length = distance;
        }
    }
}
