//! The worst point of a neighbour: where the wells draw it down most.
//!
//! Method: drawdown is harmonic away from the wells, so over an area its
//! largest value lies on the area's boundary or at the rim of a pumping well
//! inside (maximum principle). Each edge is sampled, more finely where a well
//! comes close, and every leading sample is refined by golden section. Only
//! the part of an area within an aquifer counts; where an outline cuts
//! through the area, the cut is one of its edges.
//!
//! Departure: with an influence radius an injecting well's rise ends in a
//! kink, which may put the largest drawdown inside the area. There the
//! inside is searched too, on a lattice, then by halving steps.
//!
//! Accuracy: the worst point to within 1e-7 of an edge's length, its drawdown
//! to within rounding; a peak narrower than 1/64 of an edge is seen when a
//! well causes it, and only wells cause peaks.
//! Cost: about 100 evaluations an edge, and 36 batches of 8 for the refinement.

use geo::{Area, BooleanOps, Contains, Coord, LineString, MultiPolygon, Polygon};

use super::Solution;
use super::window::extent_of;
use crate::field::WellField;
use crate::site::{Place, Point};

/// Even samples an edge.
const EDGE_SAMPLES: u32 = 64;
/// Samples that are refined, largest first.
const REFINED: usize = 8;
/// Golden sections: 0.618^34 is 8e-8.
const GOLDEN_SECTIONS: usize = 34;
/// Nodes a side of the lattice inside an area.
const LATTICE: u32 = 48;

/// A well whose rate is changed, to see what that does.
#[derive(Clone, Copy, Debug)]
pub struct RateChange {
    /// The well, by its index in `Site::wells`.
    pub well: usize,
    /// What its rate is multiplied by.
    pub factor: f64,
}

/// A place and the drawdown there.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Peak {
    /// Where.
    pub at: Point,
    /// Drawdown, metres.
    pub drawdown_m: f64,
}

/// The worst point of a place, with one well's rate changed where asked; none
/// where the place lies outside every aquifer.
pub fn worst_point(solution: &Solution, place: &Place, change: Option<RateChange>) -> Option<Peak> {
    let peaks = solution.fields().iter().filter_map(|field| match place {
        Place::At(at) => peak_of(&Changed { field, change }.drawdowns(vec![*at])),
        Place::Area(ring) => worst_of_area(solution, &Changed { field, change }, ring),
    });
    larger_of(peaks)
}

/// A field with one rate changed.
struct Changed<'a> {
    field: &'a WellField,
    change: Option<RateChange>,
}

impl Changed<'_> {
    /// Places with their drawdowns; those outside the aquifer are left out.
    fn drawdowns(&self, points: Vec<Point>) -> Vec<Peak> {
        let drawdowns_m = self.field.drawdowns_m(&points);
        points
            .into_iter()
            .zip(drawdowns_m)
            .filter(|(_, drawdown_m)| !drawdown_m.is_nan())
            .map(|(at, drawdown_m)| Peak {
                at,
                drawdown_m: drawdown_m + self.added_m(at),
            })
            .collect()
    }

    /// What the change of rate adds to the drawdown.
    fn added_m(&self, at: Point) -> f64 {
        match self.change {
            Some(change) if self.field.outline().wells.contains(&change.well) => {
                (change.factor - 1.0) * self.field.drawdown_by_m(change.well, at)
            }
            _ => 0.0,
        }
    }
}

/// One straight edge of an area.
struct Edge {
    from: Point,
    to: Point,
}

impl Edge {
    fn at(&self, along: f64) -> Point {
        self.from + (self.to - self.from) * along
    }

    /// Even positions, and closer ones beside each well that comes near.
    fn positions(&self, wells: &[Point]) -> Vec<f64> {
        let span = self.to - self.from;
        let length = span.norm();
        let step = 1.0 / f64::from(EDGE_SAMPLES);
        let mut positions: Vec<f64> = (0..=EDGE_SAMPLES).map(|k| f64::from(k) * step).collect();
        if length > 0.0 {
            for well in wells {
                let foot = (well - self.from).dot(&span) / (length * length);
                let off = (well - self.at(foot)).norm() / length;
                if off < 4.0 * step {
                    let near = [-4.0, -2.0, -1.0, -0.5, 0.0, 0.5, 1.0, 2.0, 4.0];
                    positions.extend(near.iter().map(|n| foot + n * off));
                }
            }
        }
        positions.retain(|along| (0.0..=1.0).contains(along));
        positions.sort_by(f64::total_cmp);
        positions.dedup();
        positions
    }
}

/// The worst point of an area within one aquifer.
fn worst_of_area(solution: &Solution, field: &Changed<'_>, ring: &[Point]) -> Option<Peak> {
    let polygons = within_aquifer(field.field, ring);
    let wells: Vec<Point> = field
        .field
        .outline()
        .wells
        .iter()
        .filter_map(|&well| solution.site().wells.get(well))
        .map(|well| well.at)
        .collect();
    let on_edges = worst_of_edges(field, &edges_of(&polygons), &wells);
    let inside: Vec<Point> = wells
        .into_iter()
        .filter(|well| polygons.contains(&geo::Point::new(well.x, well.y)))
        .collect();
    let at_wells = peak_of(&field.drawdowns(inside));
    let in_lattice = needs_lattice(solution)
        .then(|| worst_of_lattice(field, &polygons, ring))
        .flatten();
    larger_of([on_edges, at_wells, in_lattice].into_iter().flatten())
}

/// The part of an area that lies in an aquifer.
fn within_aquifer(field: &WellField, ring: &[Point]) -> MultiPolygon {
    let line: LineString = ring.iter().map(|p| Coord { x: p.x, y: p.y }).collect();
    let area = Polygon::new(line, vec![]);
    let Some(extent) = extent_of(ring) else {
        return MultiPolygon::new(vec![]);
    };
    let clipped = field.outline().clip(extent);
    let size = extent.max - extent.min;
    if clipped.unsigned_area() >= size.x * size.y * (1.0 - 1e-12) {
        // Wholly inside: the area keeps its own exact vertices.
        return MultiPolygon::new(vec![area]);
    }
    area.intersection(&clipped)
}

/// All edges of all rings.
fn edges_of(polygons: &MultiPolygon) -> Vec<Edge> {
    polygons
        .iter()
        .flat_map(|polygon| std::iter::once(polygon.exterior()).chain(polygon.interiors()))
        .flat_map(LineString::lines)
        .map(|line| Edge {
            from: Point::new(line.start.x, line.start.y),
            to: Point::new(line.end.x, line.end.y),
        })
        .collect()
}

/// Samples the edges and refines the leading samples.
fn worst_of_edges(field: &Changed<'_>, edges: &[Edge], wells: &[Point]) -> Option<Peak> {
    let mut leading: Vec<(Peak, &Edge, [f64; 2])> = Vec::new();
    for edge in edges {
        let positions = edge.positions(wells);
        let mut last = f64::NEG_INFINITY;
        let peaks: Vec<Peak> = positions
            .iter()
            .map(|&t| edge.at(t))
            .collect::<Vec<_>>()
            .chunks(4096)
            .flat_map(|chunk| evaluate_all(field, chunk))
            .collect();
        for (place, peak) in peaks.iter().enumerate() {
            let next = peaks
                .get(place + 1)
                .map_or(f64::NEG_INFINITY, |p| p.drawdown_m);
            if peak.drawdown_m >= last && peak.drawdown_m >= next {
                let low = positions
                    .get(place.saturating_sub(1))
                    .copied()
                    .unwrap_or(0.0);
                let high = positions.get(place + 1).copied().unwrap_or(1.0);
                leading.push((*peak, edge, [low, high]));
            }
            last = peak.drawdown_m;
        }
    }
    leading.sort_by(|a, b| b.0.drawdown_m.total_cmp(&a.0.drawdown_m));
    leading.truncate(REFINED);
    let brackets = leading
        .iter()
        .map(|&(_, edge, [low, high])| Bracket::new(edge, low, high))
        .collect();
    // The samples themselves stay in: a peak may sit exactly on a corner.
    let sampled = leading.iter().map(|&(peak, ..)| peak);
    larger_of(sampled.chain(golden_sections(field, brackets)))
        .filter(|peak| peak.drawdown_m.is_finite())
}

/// One value a point, −∞ outside the aquifer.
fn evaluate_all(field: &Changed<'_>, points: &[Point]) -> Vec<Peak> {
    let drawdowns_m = field.field.drawdowns_m(points);
    points
        .iter()
        .zip(drawdowns_m)
        .map(|(&at, drawdown_m)| Peak {
            at,
            drawdown_m: if drawdown_m.is_nan() {
                f64::NEG_INFINITY
            } else {
                drawdown_m + field.added_m(at)
            },
        })
        .collect()
}

/// A part of an edge that holds a peak, and the two places in it that are
/// compared.
struct Bracket<'a> {
    edge: &'a Edge,
    low: f64,
    high: f64,
    left: f64,
    right: f64,
}

/// The part of a bracket that the next one keeps: 1/φ, so that one of the two
/// places is used again.
const GOLDEN: f64 = 0.618_033_988_749_894_9;

impl<'a> Bracket<'a> {
    fn new(edge: &'a Edge, low: f64, high: f64) -> Self {
        let part = GOLDEN * (high - low);
        Self {
            edge,
            low,
            high,
            left: high - part,
            right: low + part,
        }
    }

    /// Keeps the part below `right` or above `left`; returns the new place.
    fn narrow(&mut self, keeps_left: bool) -> Point {
        let along = if keeps_left {
            self.high = self.right;
            self.right = self.left;
            self.left = self.high - GOLDEN * (self.high - self.low);
            self.left
        } else {
            self.low = self.left;
            self.left = self.right;
            self.right = self.low + GOLDEN * (self.high - self.low);
            self.right
        };
        self.edge.at(along)
    }
}

/// The largest drawdown within each bracket (Kiefer 1953). All are narrowed
/// in step, so that each step is one batch.
fn golden_sections(field: &Changed<'_>, mut brackets: Vec<Bracket<'_>>) -> Vec<Peak> {
    let lefts: Vec<Point> = brackets.iter().map(|b| b.edge.at(b.left)).collect();
    let rights: Vec<Point> = brackets.iter().map(|b| b.edge.at(b.right)).collect();
    let mut at_lefts = evaluate_all(field, &lefts);
    let mut at_rights = evaluate_all(field, &rights);
    for _ in 0..GOLDEN_SECTIONS {
        let keep_left: Vec<bool> = at_lefts
            .iter()
            .zip(&at_rights)
            .map(|(left, right)| left.drawdown_m >= right.drawdown_m)
            .collect();
        let places: Vec<Point> = brackets
            .iter_mut()
            .zip(&keep_left)
            .map(|(bracket, &keeps_left)| bracket.narrow(keeps_left))
            .collect();
        let news = evaluate_all(field, &places).into_iter().zip(keep_left);
        let pairs = at_lefts.iter_mut().zip(&mut at_rights);
        for ((left, right), (new, keeps_left)) in pairs.zip(news) {
            if keeps_left {
                (*left, *right) = (new, *left);
            } else {
                (*left, *right) = (*right, new);
            }
        }
    }
    let best = |(left, right)| larger_of([left, right]);
    at_lefts
        .into_iter()
        .zip(at_rights)
        .filter_map(best)
        .collect()
}

/// Whether the maximum principle fails inside areas: see the module's header.
fn needs_lattice(solution: &Solution) -> bool {
    let site = solution.site();
    site.aquifer.influence_radius.is_some() && site.wells.iter().any(|w| w.pumping.si() < 0.0)
}

/// Searches the inside of an area.
fn worst_of_lattice(field: &Changed<'_>, polygons: &MultiPolygon, ring: &[Point]) -> Option<Peak> {
    let extent = extent_of(ring)?;
    let step = (extent.max - extent.min) / f64::from(LATTICE);
    let inside = |p: &Point| polygons.contains(&geo::Point::new(p.x, p.y));
    let nodes = (0..=LATTICE)
        .flat_map(|row| (0..=LATTICE).map(move |column| (f64::from(column), f64::from(row))))
        .map(|(x, y)| extent.min + step.component_mul(&nalgebra::Vector2::new(x, y)))
        .filter(inside)
        .collect();
    let mut best = peak_of(&field.drawdowns(nodes))?;
    let mut step = step;
    for _ in 0..24 {
        let around = [(1.0, 0.0), (-1.0, 0.0), (0.0, 1.0), (0.0, -1.0)]
            .iter()
            .map(|&(x, y)| best.at + step.component_mul(&nalgebra::Vector2::new(x, y)))
            .filter(inside)
            .collect();
        match peak_of(&field.drawdowns(around)) {
            Some(better) if better.drawdown_m > best.drawdown_m => best = better,
            _ => step *= 0.5,
        }
    }
    Some(best)
}

/// The peak among sampled places.
fn peak_of(peaks: &[Peak]) -> Option<Peak> {
    larger_of(peaks.iter().copied())
}

/// The largest of some peaks, the first of equals.
fn larger_of(peaks: impl IntoIterator<Item = Peak>) -> Option<Peak> {
    peaks.into_iter().reduce(|best, peak| {
        if peak.drawdown_m > best.drawdown_m {
            peak
        } else {
            best
        }
    })
}
