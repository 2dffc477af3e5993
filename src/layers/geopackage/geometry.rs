//! Geometries as GeoPackage stores them: a header with the bounds, then
//! well-known binary.
//!
//! Source: OGC 12-128r17, clause 2.1.3; OGC 06-103r4 for the binary.

use super::super::layer::Shape;
use super::super::output::Kind;
use super::super::rings::{Position, resolved, signed_area};
use crate::plan::Plan;
use crate::site::Point;

/// Steps of a polygon's rounded coordinates in a unit of the grid.
const STEPS: f64 = 1e3;

/// A geometry in the grid's coordinates.
pub struct Encoded {
    /// As it is stored.
    pub bytes: Vec<u8>,
    /// West, south, east, north.
    pub bounds: [f64; 4],
}

/// A shape as it is stored; none where nothing is left of it.
pub fn encoded(plan: &Plan, system: i64, kind: Kind, shape: &Shape) -> Option<Encoded> {
    match shape {
        Shape::Point(at) => {
            let place = position(plan, *at);
            let mut bytes = Bytes::new(system, None);
            bytes.head(1);
            bytes.position(place);
            let [x, y] = place;
            Some(bytes.with_bounds([x, y, x, y]))
        }
        Shape::Line(line) => {
            let mut places: Vec<Position> = line.iter().map(|&at| position(plan, at)).collect();
            places.dedup();
            let bounds = bounds(&places).filter(|_| places.len() > 1)?;
            let mut bytes = Bytes::new(system, Some(bounds));
            bytes.head(2);
            bytes.positions(&places);
            Some(bytes.with_bounds(bounds))
        }
        Shape::Polygons(polygons) => {
            let sound: Vec<Vec<Vec<Position>>> = polygons
                .iter()
                .flat_map(|polygon| resolved(rounded(plan, polygon), STEPS))
                .collect();
            let bounds = bounds(sound.iter().flatten().flatten())?;
            let mut bytes = Bytes::new(system, Some(bounds));
            match sound.as_slice() {
                [only] if kind != Kind::Polygons => bytes.polygon(only),
                several => {
                    bytes.head(6);
                    bytes.count(several.len());
                    several.iter().for_each(|polygon| bytes.polygon(polygon));
                }
            }
            Some(bytes.with_bounds(bounds))
        }
    }
}

/// A place in the grid's coordinates.
fn position(plan: &Plan, at: Point) -> Position {
    let (x, y) = plan.to_plan_xy(at);
    [x, y]
}

/// Closed rings, rounded: counter-clockwise outside, clockwise around holes.
fn rounded(plan: &Plan, polygon: &[Vec<Point>]) -> Vec<Vec<Position>> {
    let round = |value: f64| (value * STEPS).round() / STEPS;
    let ring = |(index, ring): (usize, &Vec<Point>)| {
        let closing = ring.first().filter(|first| ring.last() != Some(first));
        let mut places: Vec<Position> = ring
            .iter()
            .chain(closing)
            .map(|&at| position(plan, at).map(round))
            .collect();
        places.dedup();
        if (signed_area(&places) > 0.0) != (index == 0) {
            places.reverse();
        }
        places
    };
    polygon.iter().enumerate().map(ring).collect()
}

/// West, south, east, north of all positions.
fn bounds<'p>(positions: impl IntoIterator<Item = &'p Position>) -> Option<[f64; 4]> {
    let each = positions.into_iter().map(|&[x, y]| [x, y, x, y]);
    each.reduce(|[w, s, e, n], [west, south, east, north]| {
        [w.min(west), s.min(south), e.max(east), n.max(north)]
    })
}

/// A geometry in the making, its numbers with the lowest byte first.
struct Bytes(Vec<u8>);

impl Bytes {
    /// The header; a point needs no bounds.
    fn new(system: i64, bounds: Option<[f64; 4]>) -> Self {
        const VERSION_1: u8 = 0;
        const LOWEST_BYTE_FIRST: u8 = 1;
        const WITH_BOUNDS: u8 = 1 << 1;
        let flags = LOWEST_BYTE_FIRST | if bounds.is_some() { WITH_BOUNDS } else { 0 };
        let mut bytes = Self(vec![b'G', b'P', VERSION_1, flags]);
        // Codes have 16 bits, and the local grid's number little more.
        bytes.0.extend((system as i32).to_le_bytes());
        if let Some([west, south, east, north]) = bounds {
            for value in [west, east, south, north] {
                bytes.0.extend(value.to_le_bytes());
            }
        }
        bytes
    }

    /// Byte order and kind of what follows.
    fn head(&mut self, kind: u32) {
        self.0.push(1);
        self.0.extend(kind.to_le_bytes());
    }

    fn count(&mut self, count: usize) {
        // A layer of more than 4 billion positions does not fit any memory.
        self.0.extend((count as u32).to_le_bytes());
    }

    fn position(&mut self, [x, y]: Position) {
        self.0.extend(x.to_le_bytes());
        self.0.extend(y.to_le_bytes());
    }

    fn positions(&mut self, positions: &[Position]) {
        self.count(positions.len());
        positions.iter().for_each(|&place| self.position(place));
    }

    fn polygon(&mut self, rings: &[Vec<Position>]) {
        self.head(3);
        self.count(rings.len());
        rings.iter().for_each(|ring| self.positions(ring));
    }

    fn with_bounds(self, bounds: [f64; 4]) -> Encoded {
        Encoded {
            bytes: self.0,
            bounds,
        }
    }
}
