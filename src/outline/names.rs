//! Words for edges, wells, neighbours, lengths and angles.

use super::error::Named;
use crate::site::{EdgeKind, Site, Subject};

/// "river Ostra", "barrier granite edge"; by number where it has no name.
pub(super) fn edge(site: &Site, index: usize) -> Named {
    let words = site.edges.get(index).map_or_else(String::new, |edge| {
        let kind = match edge.kind {
            EdgeKind::River { .. } => "river",
            EdgeKind::Barrier => "barrier",
        };
        joined(kind, &edge.name, index)
    });
    Named {
        subject: Subject::Edge(index, None),
        words,
    }
}

/// "well PW-1".
pub(super) fn well(site: &Site, index: usize) -> Named {
    let name = site.wells.get(index).map_or("", |well| &well.name);
    Named {
        subject: Subject::Well(index, None),
        words: joined("well", name, index),
    }
}

/// "neighbour Lot 14".
pub(super) fn neighbour(site: &Site, index: usize) -> Named {
    let name = site.neighbours.get(index).map_or("", |part| &part.name);
    Named {
        subject: Subject::Neighbour(index, None),
        words: joined("neighbour", name, index),
    }
}

fn joined(kind: &str, name: &str, index: usize) -> String {
    if name.is_empty() {
        format!("{kind} number {}", index + 1)
    } else {
        format!("{kind} {name}")
    }
}

/// A length for people: "0.4 mm", "12.3 m", "1,240 m".
pub(super) fn length(metres: f64) -> String {
    if metres < 0.01 {
        format!("{:.1} mm", metres * 1000.0)
    } else if metres < 1.0 {
        format!("{metres:.3} m")
    } else if metres < 100.0 {
        format!("{metres:.1} m")
    } else {
        format!("{} m", grouped(metres))
    }
}

/// A whole number with commas between groups of three digits.
fn grouped(value: f64) -> String {
    let digits = format!("{value:.0}");
    let mut text = String::new();
    for (place, digit) in digits.chars().enumerate() {
        if place > 0 && (digits.len() - place).is_multiple_of(3) {
            text.push(',');
        }
        text.push(digit);
    }
    text
}

/// An angle for people, in degrees: as many digits as its distance from a
/// multiple of 90° needs, at most nine.
pub(super) fn angle(radians: f64) -> String {
    let degrees = radians.to_degrees();
    let away = (degrees - (degrees / 90.0).round() * 90.0).abs();
    let digits = if away < 1e-9 || away >= 0.5 {
        1
    } else {
        ((-away.log10()).ceil().max(0.0) as usize + 1).clamp(1, 9)
    };
    format!("{degrees:.digits$}°")
}

/// "a", "a and b", "a, b and c".
pub(super) fn listed(parts: &[String]) -> String {
    match parts {
        [] => String::new(),
        [only] => only.clone(),
        [firsts @ .., last] => format!("{} and {last}", firsts.join(", ")),
    }
}
