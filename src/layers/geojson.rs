//! GeoJSON as RFC 7946 asks: WGS 84 longitude and latitude with 8 decimals
//! (1 mm), right-hand rings, `bbox`; each layer carries the caution as a
//! foreign member.
//!
//! A line that is straight in the plan's grid is not straight in longitude
//! and latitude, where GeoJSON draws it. Long segments are therefore halved
//! until each strays by less than 1 cm.
//! Limits: a layer across the antimeridian is not cut there.
//! Source: RFC 7946 (2016), sections 3.1, 3.1.6, 5, 6.1, 11.2.

use serde_json::{Map, Value, json};

use super::LayerError;
use super::caution::CAUTION;
use super::units::{Properties, number};
use crate::plan::Plan;
use crate::site::Point;

/// A segment may stray by this much from its true course.
const STRAY_M: f64 = 0.005;
/// Shorter segments stray by less, whatever the projection.
const SHORT_M: f64 = 60.0;
/// Halvings of a segment, at most.
const HALVINGS: u32 = 12;
/// Metres a degree of a great circle.
const METRES_A_DEGREE: f64 = 111_320.0;

/// Longitude and latitude, degrees.
pub type Position = [f64; 2];

/// A layer in the making.
pub struct Layer<'a> {
    plan: &'a Plan,
    features: Vec<Value>,
    bounds: Option<[f64; 4]>,
}

impl<'a> Layer<'a> {
    /// An empty layer.
    pub fn new(plan: &'a Plan) -> Self {
        Self {
            plan,
            features: Vec::new(),
            bounds: None,
        }
    }

    /// Adds a point.
    pub fn add_point(&mut self, at: Point, properties: Properties) -> Result<(), LayerError> {
        let position = self.position(at)?;
        self.add("Point", json!(position), properties);
        Ok(())
    }

    /// Adds a line; nothing where it has less than two points.
    pub fn add_line(&mut self, line: &[Point], properties: Properties) -> Result<(), LayerError> {
        let positions = self.line(line)?;
        if positions.len() > 1 {
            self.add("LineString", coordinates(&positions), properties);
        }
        Ok(())
    }

    /// Adds polygons, each a list of rings, exterior first, in any direction;
    /// the last point of a ring may repeat the first.
    pub fn add_polygons(
        &mut self,
        polygons: &[Vec<Vec<Point>>],
        properties: Properties,
    ) -> Result<(), LayerError> {
        let mut written = Vec::with_capacity(polygons.len());
        for rings in polygons {
            let mut polygon = Vec::with_capacity(rings.len());
            for (index, ring) in rings.iter().enumerate() {
                let ring = self.ring(ring, index == 0)?;
                polygon.push(coordinates(&ring));
            }
            written.push(Value::Array(polygon));
        }
        match (written.pop(), written.is_empty()) {
            (None, _) => {}
            (Some(only), true) => self.add("Polygon", only, properties),
            (Some(last), false) => {
                written.push(last);
                self.add("MultiPolygon", Value::Array(written), properties);
            }
        }
        Ok(())
    }

    /// The finished layer.
    pub fn finish(self) -> Value {
        let mut layer = Map::new();
        layer.insert("type".into(), "FeatureCollection".into());
        if let Some(bounds) = self.bounds {
            layer.insert("bbox".into(), bounds.iter().map(|&b| number(b)).collect());
        }
        layer.insert("caution".into(), CAUTION.into());
        layer.insert("features".into(), Value::Array(self.features));
        Value::Object(layer)
    }

    fn add(&mut self, kind: &str, coordinates: Value, properties: Properties) {
        self.features.push(json!({
            "type": "Feature",
            "properties": Value::from(properties),
            "geometry": {"type": kind, "coordinates": coordinates},
        }));
    }

    /// A place, rounded, and counted in the layer's bounds.
    fn position(&mut self, at: Point) -> Result<Position, LayerError> {
        let exact = longitude_latitude(self.plan, at)?;
        let position = exact.map(|degrees| (degrees * 1e8).round() / 1e8 + 0.0);
        let [longitude, latitude] = position;
        self.bounds = Some(match self.bounds {
            None => [longitude, latitude, longitude, latitude],
            Some([west, south, east, north]) => [
                west.min(longitude),
                south.min(latitude),
                east.max(longitude),
                north.max(latitude),
            ],
        });
        Ok(position)
    }

    /// A line with its long segments halved; no position twice in a row.
    fn line(&mut self, line: &[Point]) -> Result<Vec<Position>, LayerError> {
        let mut positions = Vec::with_capacity(line.len());
        for point in straightened(self.plan, line)? {
            let position = self.position(point)?;
            if positions.last() != Some(&position) {
                positions.push(position);
            }
        }
        Ok(positions)
    }

    /// A closed ring: counter-clockwise outside, clockwise around holes.
    fn ring(&mut self, ring: &[Point], exterior: bool) -> Result<Vec<Position>, LayerError> {
        let mut closed = ring.to_vec();
        if ring.first() != ring.last() {
            closed.extend(ring.first());
        }
        let mut positions = self.line(&closed)?;
        if (signed_area(&positions) > 0.0) != exterior {
            positions.reverse();
        }
        Ok(positions)
    }
}

/// A place of the site as longitude and latitude, unrounded.
pub fn longitude_latitude(plan: &Plan, at: Point) -> Result<Position, LayerError> {
    let (longitude, latitude) =
        plan.to_longitude_latitude(at)
            .map_err(|reason| LayerError::Projection {
                x_m: at.x,
                y_m: at.y,
                reason: reason.to_string(),
            })?;
    if longitude.is_finite() && latitude.is_finite() {
        Ok([longitude, latitude])
    } else {
        Err(LayerError::Projection {
            x_m: at.x,
            y_m: at.y,
            reason: "it lies beyond the coordinate system".into(),
        })
    }
}

/// Positions as a JSON array.
fn coordinates(positions: &[Position]) -> Value {
    positions.iter().map(|position| json!(position)).collect()
}

/// Twice the area within a ring, positive when it runs counter-clockwise.
fn signed_area(ring: &[Position]) -> f64 {
    let Some([x0, y0]) = ring.first().copied() else {
        return 0.0;
    };
    ring.iter()
        .zip(ring.iter().skip(1))
        .map(|([ax, ay], [bx, by])| (ax - x0) * (by - y0) - (bx - x0) * (ay - y0))
        .sum()
}

/// A line with points added where it would stray.
fn straightened(plan: &Plan, line: &[Point]) -> Result<Vec<Point>, LayerError> {
    let mut straight = Vec::with_capacity(line.len());
    for (&from, &to) in line.iter().zip(line.iter().skip(1)) {
        straight.push(from);
        halve(plan, from, to, HALVINGS, &mut straight)?;
    }
    straight.extend(line.last());
    Ok(straight)
}

/// Adds the points between two ends, as many as needed.
fn halve(
    plan: &Plan,
    from: Point,
    to: Point,
    halvings: u32,
    into: &mut Vec<Point>,
) -> Result<(), LayerError> {
    if (to - from).norm() < SHORT_M || halvings == 0 {
        return Ok(());
    }
    let middle = nalgebra::center(&from, &to);
    let [west, south] = longitude_latitude(plan, from)?;
    let [east, north] = longitude_latitude(plan, to)?;
    let [longitude, latitude] = longitude_latitude(plan, middle)?;
    let east_m = (longitude - 0.5 * (west + east)) * latitude.to_radians().cos();
    let north_m = latitude - 0.5 * (south + north);
    if east_m.hypot(north_m) * METRES_A_DEGREE < STRAY_M {
        return Ok(());
    }
    halve(plan, from, middle, halvings - 1, into)?;
    into.push(middle);
    halve(plan, middle, to, halvings - 1, into)
}

#[cfg(test)]
mod tests {
    use super::*;

    /// RFC 7946, section 3.1.6: exterior rings are counter-clockwise.
    #[test]
    fn a_counter_clockwise_ring_has_positive_area() {
        let ring = [[0.0, 0.0], [1.0, 0.0], [1.0, 1.0], [0.0, 1.0], [0.0, 0.0]];
        assert!(signed_area(&ring) > 0.0);
    }
}
