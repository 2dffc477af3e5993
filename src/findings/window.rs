//! Which part of the plane the map shows, and how fine its grid is.
//!
//! Without a wish in the plan: the wells and neighbours with a margin, the
//! nearest reach of each edge where it is close, trimmed to the aquifer; some
//! 150 to 225 nodes on the long side, at a round distance.

use geo::BoundingRect;

use super::Solution;
use crate::site::{EdgeShape, Extent, Place, Point, Refusal, Site, Subject, Vector};

/// More nodes than this are refused.
pub const MOST_NODES: f64 = 25e6;
/// The least width of an extent, metres: wells have radii of millimetres.
const THINNEST_M: f64 = 0.01;
/// An extent may be so many times as long as it is wide.
const LONGEST: f64 = 1000.0;
/// Nodes on the long side, at least, where the plan leaves the choice.
const NODES_ON_LONG_SIDE: f64 = 150.0;
/// The margin around wells and neighbours, as a share of their spread.
const MARGIN: f64 = 0.35;
/// The margin, metres, at least.
const SMALLEST_MARGIN_M: f64 = 250.0;
/// Space left around an aquifer that ends within the map, as a share of it.
const RIM: f64 = 0.03;

/// The map's extent and grid.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct MapWindow {
    /// The rectangle shown, aligned with the plan's grid.
    pub extent: Extent,
    /// Distance of the grid's nodes, metres.
    pub spacing_m: f64,
}

impl MapWindow {
    /// The window that a site asks for, or one chosen for it.
    ///
    /// # Errors
    /// When the grid would have more than [`MOST_NODES`] nodes, or the extent
    /// is a mere line or shows nothing of the aquifer.
    pub fn of(solution: &Solution) -> Result<Self, Refusal> {
        let site = solution.site();
        let extent = match site.map.extent {
            Some(extent) => extent,
            None => chosen_extent(solution),
        };
        if trimmed(solution, extent).is_none() {
            return Err(Refusal {
                subject: Subject::Map(Some("extent")),
                what: "the map's extent shows nothing of the aquifer that holds the wells".into(),
                why: None,
                remedy: "move the extent over the wells, or leave `extent` out to have it chosen"
                    .into(),
                related: vec![],
            });
        }
        let size = extent.max - extent.min;
        if size.max() > LONGEST * size.min() || size.min() < THINNEST_M {
            return Err(too_thin(size));
        }
        let spacing_m = site
            .map
            .spacing
            .map_or_else(|| round_spacing(size.max()), |spacing| spacing.si());
        let nodes = (size.x / spacing_m + 1.0) * (size.y / spacing_m + 1.0);
        if nodes.is_nan() || nodes > MOST_NODES {
            return Err(too_many_nodes(size, spacing_m, nodes));
        }
        Ok(Self { extent, spacing_m })
    }

    /// Whether the map shows a place.
    pub fn shows(&self, point: Point) -> bool {
        let (min, max) = (self.extent.min, self.extent.max);
        point.x >= min.x && point.x <= max.x && point.y >= min.y && point.y <= max.y
    }

    /// Columns and rows of the grid's nodes.
    pub fn node_counts(&self) -> (usize, usize) {
        let size = self.extent.max - self.extent.min;
        // Truncation is meant: the counts are small and positive.
        let count = |length: f64| (length / self.spacing_m * (1.0 + 1e-12)) as usize + 1;
        (count(size.x), count(size.y))
    }

    /// The grid's nodes, row by row from the south-west corner.
    pub fn nodes(&self) -> impl Iterator<Item = Point> {
        let (columns, rows) = self.node_counts();
        let (min, spacing_m) = (self.extent.min, self.spacing_m);
        (0..rows).flat_map(move |row| {
            (0..columns).map(move |column| min + Vector::new(column as f64, row as f64) * spacing_m)
        })
    }
}

/// The refusal of an extent that is hardly more than a line.
fn too_thin(size: Vector) -> Refusal {
    Refusal {
        subject: Subject::Map(Some("extent")),
        what: format!(
            "the map's extent is {} m by {} m, too thin to draw contours on",
            size.x, size.y
        ),
        why: None,
        remedy: format!(
            "make it at least {THINNEST_M} m wide and no more than {LONGEST} times as long as wide, \
             or leave `extent` out to have it chosen"
        ),
        related: vec![],
    }
}

/// The refusal of a grid too fine for its extent.
fn too_many_nodes(size: Vector, spacing_m: f64, nodes: f64) -> Refusal {
    let enough_m = (size.x * size.y / MOST_NODES * 4.0).sqrt();
    Refusal {
        subject: Subject::Map(Some("spacing")),
        what: format!(
            "a map of {:.0} m by {:.0} m with nodes every {spacing_m:?} m has {nodes:.1e} nodes, more than the {MOST_NODES:.1e} that are drawn",
            size.x, size.y
        ),
        why: None,
        remedy: format!(
            "choose a spacing of {enough_m:.3} m or more, or a smaller extent; contours are true to the field at any spacing"
        ),
        related: vec![],
    }
}

/// The wells and neighbours with a margin, trimmed to the aquifers.
fn chosen_extent(solution: &Solution) -> Extent {
    let site = solution.site();
    let Some(core) = extent_of(&places(site)) else {
        return Extent {
            min: Point::new(-SMALLEST_MARGIN_M, -SMALLEST_MARGIN_M),
            max: Point::new(SMALLEST_MARGIN_M, SMALLEST_MARGIN_M),
        };
    };
    let spread_m = (core.max - core.min).max();
    let margin_m = (MARGIN * spread_m).max(SMALLEST_MARGIN_M);
    let with_edges: Vec<Point> = nearby_edges(site, core, 2.0 * margin_m)
        .into_iter()
        .chain([core.min, core.max])
        .collect();
    let wide = padded(extent_of(&with_edges).unwrap_or(core), margin_m);
    trimmed(solution, wide).unwrap_or(wide)
}

/// What of an extent the aquifers fill, with a little space around; none
/// where they fill nothing.
fn trimmed(solution: &Solution, extent: Extent) -> Option<Extent> {
    let corners: Vec<Point> = solution
        .fields()
        .iter()
        .filter_map(|field| field.outline().clip(extent).bounding_rect())
        .flat_map(|rect| {
            [
                Point::new(rect.min().x, rect.min().y),
                Point::new(rect.max().x, rect.max().y),
            ]
        })
        .collect();
    let filled = extent_of(&corners)?;
    let rim_m = RIM * (filled.max - filled.min).max();
    Some(padded(filled, rim_m))
}

/// All wells and neighbours.
fn places(site: &Site) -> Vec<Point> {
    let neighbours = site.neighbours.iter().flat_map(|n| match &n.place {
        Place::At(at) => vec![*at],
        Place::Area(ring) => ring.clone(),
    });
    site.wells
        .iter()
        .map(|well| well.at)
        .chain(neighbours)
        .collect()
}

/// The point of each edge that comes nearest to the middle of an extent,
/// where it lies within `reach_m` of the extent.
fn nearby_edges(site: &Site, core: Extent, reach_m: f64) -> Vec<Point> {
    let middle = nalgebra::center(&core.min, &core.max);
    let wide = padded(core, reach_m);
    site.edges
        .iter()
        .filter_map(|edge| match &edge.shape {
            EdgeShape::Line(line) => line
                .iter()
                .zip(line.iter().skip(1))
                .map(|(&from, &to)| nearest_on_segment(from, to, middle))
                .min_by(|a, b| (a - middle).norm().total_cmp(&(b - middle).norm())),
            EdgeShape::Circle { centre, radius } => {
                let offset = middle - centre;
                let distance = offset.norm();
                (distance > 0.0).then(|| centre + offset * (radius.si() / distance))
            }
        })
        .filter(|p| {
            p.x >= wide.min.x && p.x <= wide.max.x && p.y >= wide.min.y && p.y <= wide.max.y
        })
        .collect()
}

/// The point of a segment nearest to a place.
fn nearest_on_segment(from: Point, to: Point, place: Point) -> Point {
    let span = to - from;
    let length_squared = span.norm_squared();
    if length_squared == 0.0 {
        return from;
    }
    from + span * ((place - from).dot(&span) / length_squared).clamp(0.0, 1.0)
}

/// The smallest extent that holds all points.
pub(super) fn extent_of(points: &[Point]) -> Option<Extent> {
    let first = *points.first()?;
    Some(points.iter().fold(
        Extent {
            min: first,
            max: first,
        },
        |extent, point| Extent {
            min: extent.min.inf(point),
            max: extent.max.sup(point),
        },
    ))
}

/// An extent, grown on all sides.
fn padded(extent: Extent, by_m: f64) -> Extent {
    let by = Vector::new(by_m, by_m);
    Extent {
        min: extent.min - by,
        max: extent.max + by,
    }
}

/// The round distance that gives enough nodes on a side of this length.
fn round_spacing(long_side_m: f64) -> f64 {
    let widest_m = long_side_m / NODES_ON_LONG_SIDE;
    let power = 10.0_f64.powf(widest_m.log10().floor());
    [8.0, 6.0, 5.0, 4.0, 3.0, 2.5, 2.0, 1.5]
        .into_iter()
        .map(|step| step * power)
        .find(|&step_m| step_m <= widest_m)
        .unwrap_or(power)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// 1000 m / 150 = 6.67 m, so the next round distance below is 6 m.
    #[test]
    fn the_chosen_spacing_is_round_and_fine_enough() {
        assert_eq!(round_spacing(1000.0), 6.0);
        assert_eq!(round_spacing(1500.0), 10.0);
    }
}
