//! The line of the section: through the wells that draw down most, in order
//! along their common direction, and on to where the aquifer or the map ends.
//!
//! The common direction is the principal axis of the wells' positions; for a
//! single well the way to the nearest river or barrier.

use crate::layers::Planned;
use crate::layers::boundaries;
use crate::site::{Point, Vector};

/// Wells on the line, at most.
const MOST_WELLS: usize = 8;
/// Steps in which the end of the aquifer is looked for.
const STEPS: u32 = 240;

/// A line through wells.
pub struct SectionLine {
    /// Its vertices: an end, the wells, the other end. Empty where no well
    /// lies on the map.
    pub points: Vec<Point>,
    /// The wells on it, by index, in order.
    pub wells: Vec<usize>,
}

/// The line through a plan's wells.
pub fn through_wells(planned: &Planned<'_>) -> SectionLine {
    let mut wells = chosen(planned);
    let site = planned.solution.site();
    let place = |well: usize| site.wells.get(well).map_or(Point::origin(), |w| w.at);
    let places: Vec<Point> = wells.iter().map(|&well| place(well)).collect();
    let direction = direction(planned, &places);
    wells.sort_by(|&a, &b| {
        let along = |well: usize| place(well).coords.dot(&direction);
        along(a).total_cmp(&along(b))
    });
    let (Some(&first), Some(&last)) = (wells.first(), wells.last()) else {
        return SectionLine {
            points: vec![],
            wells,
        };
    };
    let mut points = vec![end(planned, place(first), -direction)];
    points.extend(wells.iter().map(|&well| place(well)));
    points.push(end(planned, place(last), direction));
    SectionLine { points, wells }
}

/// The wells on the map that draw down, or lift, most.
fn chosen(planned: &Planned<'_>) -> Vec<usize> {
    let site = planned.solution.site();
    let mut wells: Vec<(usize, f64)> = planned
        .findings
        .wells
        .iter()
        .zip(&site.wells)
        .filter(|(_, well)| planned.survey.window.shows(well.at))
        .map(|(finding, _)| (finding.well, finding.drawdown_m().abs()))
        .collect();
    // Stable: equals keep the plan's order.
    wells.sort_by(|a, b| b.1.total_cmp(&a.1));
    wells.truncate(MOST_WELLS);
    wells.into_iter().map(|(well, _)| well).collect()
}

/// The principal axis of some places, eastward; of a single place the way to
/// the nearest edge, or else east.
fn direction(planned: &Planned<'_>, places: &[Point]) -> Vector {
    let count = places.len().max(1) as f64;
    let middle = places
        .iter()
        .fold(Vector::zeros(), |sum, place| sum + place.coords / count);
    let spread = |f: fn(Vector) -> f64| places.iter().map(|p| f(p.coords - middle)).sum::<f64>();
    let (xx, yy, xy) = (
        spread(|v| v.x * v.x),
        spread(|v| v.y * v.y),
        spread(|v| v.x * v.y),
    );
    if xx + yy > 1e-6 {
        // The axis of the 2 × 2 covariance, from the double angle.
        let angle = 0.5 * (2.0 * xy).atan2(xx - yy);
        return Vector::new(angle.cos(), angle.sin());
    }
    places
        .first()
        .and_then(|&place| to_nearest_edge(planned, place))
        .unwrap_or_else(Vector::x)
}

/// The direction from a place to the nearest river or barrier.
fn to_nearest_edge(planned: &Planned<'_>, from: Point) -> Option<Vector> {
    let edges = 0..planned.solution.site().edges.len();
    let lines: Vec<Vec<Point>> = edges
        .flat_map(|edge| boundaries::lines(planned, edge))
        .collect();
    let ways = lines.iter().flat_map(|line| {
        line.iter()
            .zip(line.iter().skip(1))
            .map(|(&a, &b)| foot(from, a, b) - from)
    });
    let shortest = ways.min_by(|a, b| a.norm().total_cmp(&b.norm()))?;
    (shortest.norm() > 0.0).then(|| shortest.normalize())
}

/// The point of a stretch that is nearest to a place.
fn foot(from: Point, a: Point, b: Point) -> Point {
    let span = b - a;
    let share = (from - a).dot(&span) / span.norm_squared().max(1e-12);
    a + span * share.clamp(0.0, 1.0)
}

/// Where a ray from a well leaves the map or, a little before, the aquifer.
fn end(planned: &Planned<'_>, from: Point, direction: Vector) -> Point {
    let extent = planned.survey.window.extent;
    let reach = |at: f64, along: f64, low: f64, high: f64| {
        if along > 0.0 {
            (high - at) / along
        } else if along < 0.0 {
            (low - at) / along
        } else {
            f64::INFINITY
        }
    };
    let (x, y) = (
        reach(from.x, direction.x, extent.min.x, extent.max.x),
        reach(from.y, direction.y, extent.min.y, extent.max.y),
    );
    let length = x.min(y).max(0.0);
    let ray: Vec<Point> = (1..=STEPS)
        .map(|step| from + direction * (length * f64::from(step) / f64::from(STEPS)))
        .collect();
    let heads_m = planned.solution.heads_m(&ray);
    let inside = heads_m.iter().take_while(|head_m| head_m.is_finite());
    // One step farther: the section shows what ends the aquifer.
    let last = inside.count().min(ray.len().saturating_sub(1));
    ray.get(last).copied().unwrap_or(from)
}
