//! The section along the line through the wells: heads before and after, the
//! aquifer's roof, ground and lowest levels.

use serde::Serialize;

use super::line::SectionLine;
use super::profile::{self, Curve, Profile, WellMark};
use crate::layers::Planned;
use crate::layers::words::Words;
use crate::site::Point;

/// Even samples along the line.
const SAMPLES: f64 = 480.0;

/// The section as the page sets it.
#[derive(Serialize)]
pub struct Section {
    picture: String,
    note: String,
}

/// Draws the section; none where no well lies on the map.
pub fn section(planned: &Planned<'_>, line: &SectionLine) -> Option<Section> {
    let (stations_m, places) = samples(planned, line);
    let length_m = *stations_m.last()?;
    if length_m <= 0.0 {
        return None;
    }
    let units = planned.units();
    let curve = |values_m: Vec<f64>| -> Curve {
        let points = stations_m.iter().zip(values_m);
        points
            .map(|(&station_m, value_m)| [units.length(station_m), units.length(value_m)])
            .collect()
    };
    let before = places.iter().map(|&p| planned.solution.ambient_head_m(p));
    let profile = Profile {
        length: units.length(length_m),
        unit: units.length_ending(),
        before: curve(before.collect()),
        after: curve(planned.solution.heads_m(&places)),
        roof: planned
            .solution
            .site()
            .aquifer
            .roof
            .map(|roof| units.length(roof.si())),
        wells: marks(planned, line),
    };
    let drawn = profile::drawn(&profile);
    let all = planned.findings.wells.len();
    let shown = if line.wells.len() < all {
        format!(
            "the {} wells of {all} that change the head most",
            line.wells.len()
        )
    } else if all == 1 {
        "the well".to_owned()
    } else {
        "all wells".to_owned()
    };
    Some(Section {
        picture: drawn.svg,
        note: format!(
            "From A to A′ through {shown}, heights exaggerated {} times. The level in a well lies below the head in the aquifer beside it by the well loss.",
            drawn.exaggeration
        ),
    })
}

/// The wells on the line.
fn marks(planned: &Planned<'_>, line: &SectionLine) -> Vec<WellMark> {
    let words = Words::of(planned);
    let units = planned.units();
    let stations_m = vertex_stations(&line.points);
    let of_wells = stations_m.into_iter().skip(1);
    of_wells
        .zip(&line.wells)
        .filter_map(|(station_m, &index)| {
            let finding = planned.findings.wells.get(index)?;
            let well = planned.solution.site().wells.get(index)?;
            Some(WellMark {
                name: words.well(index),
                station: units.length(station_m),
                level: units.length(finding.level_m()),
                ground: well.ground.map(|level| units.length(level.si())),
                lowest: well.lowest_level.map(|level| units.length(level.si())),
            })
        })
        .collect()
}

/// Distances of a line's vertices from its beginning, metres.
fn vertex_stations(points: &[Point]) -> Vec<f64> {
    let mut station_m = 0.0;
    let mut last: Option<Point> = None;
    points
        .iter()
        .map(|&point| {
            station_m += last.map_or(0.0, |last| (point - last).norm());
            last = Some(point);
            station_m
        })
        .collect()
}

/// Places along the line with their distances from its beginning, metres:
/// even, and ever closer toward each well's rim.
fn samples(planned: &Planned<'_>, line: &SectionLine) -> (Vec<f64>, Vec<Point>) {
    let vertices_m = vertex_stations(&line.points);
    let Some(&length_m) = vertices_m.last() else {
        return (vec![], vec![]);
    };
    // Truncation is meant: the count is small.
    let mut stations_m: Vec<f64> = (0..=SAMPLES as u32)
        .map(|step| length_m * f64::from(step) / SAMPLES)
        .collect();
    for (&station_m, &well) in vertices_m.iter().skip(1).zip(&line.wells) {
        let wells = &planned.solution.site().wells;
        let mut off_m = wells.get(well).map_or(0.1, |well| well.radius.si());
        stations_m.push(station_m);
        while off_m < length_m / SAMPLES * 2.0 {
            stations_m.extend([station_m - off_m, station_m + off_m]);
            off_m *= 1.5;
        }
    }
    stations_m.retain(|station_m| (0.0..=length_m).contains(station_m));
    stations_m.sort_by(f64::total_cmp);
    stations_m.dedup();
    let places = stations_m
        .iter()
        .map(|&station_m| place_at(&line.points, &vertices_m, station_m))
        .collect();
    (stations_m, places)
}

/// The place at a distance along a line.
fn place_at(points: &[Point], vertices_m: &[f64], station_m: f64) -> Point {
    let stretches = points.iter().zip(points.iter().skip(1));
    let ends = vertices_m.iter().zip(vertices_m.iter().skip(1));
    for ((&a, &b), (&from_m, &to_m)) in stretches.zip(ends) {
        if station_m <= to_m && to_m > from_m {
            return a + (b - a) * ((station_m - from_m) / (to_m - from_m));
        }
    }
    points.last().copied().unwrap_or_else(Point::origin)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// A line of 3 m east and 4 m north, by hand.
    #[test]
    fn a_place_is_found_by_its_distance_along_the_line() {
        let points = [
            Point::new(0.0, 0.0),
            Point::new(3.0, 0.0),
            Point::new(3.0, 4.0),
        ];
        let vertices = vertex_stations(&points);
        assert_eq!(vertices, [0.0, 3.0, 7.0]);
        assert_eq!(place_at(&points, &vertices, 5.0), Point::new(3.0, 2.0));
    }
}
