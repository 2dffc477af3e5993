//! Puts holes into the rings that hold them.

use geo::{Coord, LineString, MultiPolygon, Polygon};

use super::mesh::NONE;

/// A closed ring, without the repeated last vertex, what it bounds to its
/// left.
#[derive(Clone, Debug, Default)]
pub(super) struct Ring {
    coordinates: Vec<Coord<f64>>,
    /// By vertex: the node that it is, or NONE.
    nodes: Vec<u32>,
}

impl Ring {
    pub(super) fn push(&mut self, coordinate: Coord<f64>, node: u32) {
        self.coordinates.push(coordinate);
        self.nodes.push(node);
    }

    pub(super) fn is_empty(&self) -> bool {
        self.coordinates.is_empty()
    }

    /// Splits a ring that passes a node twice into rings that pass it once
    /// each, as GIS formats demand.
    pub(super) fn split(self) -> Vec<Ring> {
        let mut sorted: Vec<u32> = self.nodes.iter().copied().filter(|&n| n != NONE).collect();
        sorted.sort_unstable();
        if sorted.windows(2).all(|pair| pair.first() != pair.last()) {
            return vec![self];
        }
        let mut rings = Vec::new();
        let mut open = Ring::default();
        for (coordinate, node) in self.coordinates.into_iter().zip(self.nodes) {
            let met = open
                .nodes
                .iter()
                .position(|&old| old == node && node != NONE);
            if let Some(met) = met {
                rings.push(Ring {
                    coordinates: open.coordinates.split_off(met),
                    nodes: open.nodes.split_off(met),
                });
            }
            open.push(coordinate, node);
        }
        rings.push(open);
        rings
    }

    /// Area by the shoelace formula, positive counter-clockwise, m².
    pub(super) fn signed_area_m2(&self) -> f64 {
        // Measured from a vertex, far coordinates cost no digits.
        let Some(&origin) = self.coordinates.first() else {
            return 0.0;
        };
        let ahead = self.coordinates.iter().cycle().skip(1);
        let doubled: f64 = self
            .coordinates
            .iter()
            .zip(ahead)
            .map(|(&a, &b)| {
                let (a, b) = (a - origin, b - origin);
                a.x * b.y - a.y * b.x
            })
            .sum();
        0.5 * doubled
    }

    fn into_line(self) -> LineString<f64> {
        let mut line = LineString::new(self.coordinates);
        line.close();
        line
    }

    fn holds(&self, point: Coord<f64>) -> bool {
        let ahead = self.coordinates.iter().cycle().skip(1);
        let crossed = self.coordinates.iter().zip(ahead).filter(|&(a, b)| {
            (a.y > point.y) != (b.y > point.y)
                && point.x < a.x + (b.x - a.x) * ((point.y - a.y) / (b.y - a.y))
        });
        crossed.count() % 2 == 1
    }
}

/// An outer ring with what it takes to find its holes.
struct Outer {
    ring: Ring,
    area_m2: f64,
    low: Coord<f64>,
    high: Coord<f64>,
    holes: Vec<LineString<f64>>,
}

impl Outer {
    fn new(ring: Ring, area_m2: f64) -> Self {
        let limit = |fold: fn(f64, f64) -> f64, start: f64| {
            let from = Coord { x: start, y: start };
            ring.coordinates.iter().fold(from, |far, c| Coord {
                x: fold(far.x, c.x),
                y: fold(far.y, c.y),
            })
        };
        let low = limit(f64::min, f64::INFINITY);
        let high = limit(f64::max, f64::NEG_INFINITY);
        Self {
            ring,
            area_m2,
            low,
            high,
            holes: Vec::new(),
        }
    }

    /// Whether a hole lies inside; it may touch the outer ring at nodes.
    fn holds(&self, hole: &Ring) -> bool {
        let free = hole
            .coordinates
            .iter()
            .zip(&hole.nodes)
            .find(|(_, node)| **node == NONE || !self.ring.nodes.contains(node));
        let Some((&point, _)) = free else {
            return false;
        };
        let within = |low: f64, value: f64, high: f64| low <= value && value <= high;
        within(self.low.x, point.x, self.high.x)
            && within(self.low.y, point.y, self.high.y)
            && self.ring.holds(point)
    }
}

/// The polygons that rings of one band bound.
pub(super) fn nest(rings: Vec<Ring>) -> MultiPolygon<f64> {
    let mut outers = Vec::new();
    let mut holes = Vec::new();
    for ring in rings {
        let area_m2 = ring.signed_area_m2();
        if area_m2 > 0.0 {
            outers.push(Outer::new(ring, area_m2));
        } else if area_m2 < 0.0 {
            holes.push(ring);
        }
    }
    let mut by_size: Vec<usize> = (0..outers.len()).collect();
    by_size.sort_by(|&a, &b| {
        let area = |index: usize| outers.get(index).map_or(0.0, |outer| outer.area_m2);
        area(a).total_cmp(&area(b))
    });
    for hole in holes {
        let around = by_size
            .iter()
            .copied()
            .find(|&index| outers.get(index).is_some_and(|outer| outer.holds(&hole)));
        if let Some(outer) = around.and_then(|index| outers.get_mut(index)) {
            outer.holes.push(hole.into_line());
        }
    }
    outers
        .into_iter()
        .map(|outer| Polygon::new(outer.ring.into_line(), outer.holes))
        .collect()
}
