//! Reads `[limits]`, `[accuracy]` and `[map]`.

use crate::site::{Extent, Length, MapRequest, Neighbour, Place, Point, Well};

use super::fault::Fault;
use super::keys::{
    ACCURACY, ACCURACY_TABLE, EXTENT, HEAD_ACCURACY, INTERFERENCE_SHARE, INTERVAL, LIMITS,
    LIMITS_TABLE, MAP, MAP_TABLE, SPACING,
};
use super::quantities::number;
use super::reader::{Reading, Section};
use super::source_map::SourceMap;
use super::units::Dimension;

/// Others may cause this share of a well's drawdown before it is flagged.
const DEFAULT_INTERFERENCE_SHARE: f64 = 0.20;

/// The head error that is accepted, in the plan's unit of length.
const DEFAULT_HEAD_ACCURACY: f64 = 0.0001;

/// More nodes than this do not fit a map that is still drawn in seconds.
const MOST_NODES: f64 = 25e6;

/// The share above which interference is flagged.
pub(super) fn read_interference_share(plan: &Section<'_>, reading: &mut Reading<'_>) -> f64 {
    let opened = plan.value(&LIMITS);
    let section = opened.and_then(|value| Section::open(&LIMITS_TABLE, value, reading));
    section
        .and_then(|section| section.quantity(&INTERFERENCE_SHARE, reading))
        .unwrap_or(DEFAULT_INTERFERENCE_SHARE)
}

/// The head error that the plan accepts.
pub(super) fn read_accuracy(plan: &Section<'_>, reading: &mut Reading<'_>) -> Length {
    let opened = plan.value(&ACCURACY);
    let section = opened.and_then(|value| Section::open(&ACCURACY_TABLE, value, reading));
    let given = section.and_then(|section| section.length(&HEAD_ACCURACY, reading));
    let per_unit = reading.units.si_per_unit(Dimension::Length);
    given.unwrap_or(Length::from_si(DEFAULT_HEAD_ACCURACY * per_unit))
}

/// What the map should cover, in metres of the plan's grid.
pub(super) fn read_map(
    plan: &Section<'_>,
    wells: &[Well],
    neighbours: &[Neighbour],
    map: &mut SourceMap,
    reading: &mut Reading<'_>,
) -> Option<MapRequest> {
    let section = Section::open(&MAP_TABLE, plan.value(&MAP)?, reading)?;
    map.map = Some(section.places());
    let extent = section.extent(&EXTENT, reading);
    let spacing = section.length(&SPACING, reading);
    let interval = section.length(&INTERVAL, reading);
    let covered = extent.or_else(|| extent_of(wells, neighbours));
    if let (Some(spacing), Some(covered)) = (spacing, covered) {
        refuse_too_many_nodes(&section, spacing.si(), covered, reading);
    }
    Some(MapRequest {
        extent,
        spacing,
        interval,
    })
}

/// The least that a map without an extent must cover.
fn extent_of(wells: &[Well], neighbours: &[Neighbour]) -> Option<Extent> {
    let well_points = wells.iter().map(|well| well.at);
    let neighbour_points = neighbours
        .iter()
        .flat_map(|neighbour| match &neighbour.place {
            Place::At(point) => std::slice::from_ref(point),
            Place::Area(corners) => corners.as_slice(),
        });
    well_points
        .chain(neighbour_points.copied())
        .map(|point| Extent {
            min: point,
            max: point,
        })
        .reduce(|a, b| Extent {
            min: Point::new(a.min.x.min(b.min.x), a.min.y.min(b.min.y)),
            max: Point::new(a.max.x.max(b.max.x), a.max.y.max(b.max.y)),
        })
}

fn nodes(covered: Extent, spacing_m: f64) -> f64 {
    let size = covered.max - covered.min;
    ((size.x / spacing_m).floor() + 1.0) * ((size.y / spacing_m).floor() + 1.0)
}

fn refuse_too_many_nodes(
    section: &Section<'_>,
    spacing_m: f64,
    covered: Extent,
    reading: &mut Reading<'_>,
) {
    let count = nodes(covered, spacing_m);
    if count <= MOST_NODES {
        return;
    }
    let Some(value) = section.value(&SPACING) else {
        return;
    };
    let fits = number(smallest_spacing(covered) / reading.metres_per_unit());
    let what = format!(
        "[map]: a spacing of {} gives {} nodes; {MOST_NODES} is the most",
        reading.written(value),
        number(count)
    );
    let help = format!("write a spacing of at least {fits}, or a smaller `extent`");
    reading.refuse(Fault::new(value.place, what, help).label("too fine"));
}

/// The smallest spacing that fits, rounded up to two digits, metres.
fn smallest_spacing(covered: Extent) -> f64 {
    let size = covered.max - covered.min;
    // (w/s + 1)(h/s + 1) = N solved for s.
    let sum = size.x + size.y;
    let exact = (sum + (sum * sum + 4.0 * (MOST_NODES - 1.0) * size.x * size.y).sqrt())
        / (2.0 * (MOST_NODES - 1.0));
    let step = 10f64.powf(exact.log10().floor() - 1.0);
    (exact / step).ceil() * step
}
