//! GeoJSON as RFC 7946 asks: WGS 84 longitude and latitude with 8 decimals
//! (1 mm), right-hand rings, `bbox`; each layer carries the caution as a
//! foreign member.
//!
//! A line that is straight in the plan's grid is not straight in longitude
//! and latitude, where GeoJSON draws it. Long segments are therefore halved
//! until each strays by less than 1 cm.
//! Limits: a layer across the antimeridian is not cut there.
//! Source: RFC 7946 (2016), sections 3.1, 3.1.6, 5, 6.1, 11.2.

use geojson::{Feature, FeatureCollection, Geometry};
use serde_json::Map;

use super::LayerError;
use super::caution::CAUTION;
use super::layer::{Layer, Shape};
use super::rings::{self, Position, signed_area};
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

/// Positions a degree: 8 decimals.
const STEPS: f64 = 1e8;

/// The layer as a file on one line.
///
/// # Errors
/// As [`document`].
pub fn file(plan: &Plan, layer: &Layer) -> Result<Vec<u8>, LayerError> {
    let mut bytes = serde_json::to_vec(&document(plan, layer)?)?;
    bytes.push(b'\n');
    Ok(bytes)
}

/// The layer as a document.
///
/// # Errors
/// A place that the plan's coordinate system has no longitude and latitude for.
pub fn document(plan: &Plan, layer: &Layer) -> Result<FeatureCollection, LayerError> {
    let mut writer = Writer { plan, bounds: None };
    let mut features = Vec::with_capacity(layer.features.len());
    for feature in &layer.features {
        if let Some(geometry) = writer.geometry(&feature.shape)? {
            features.push(Feature {
                geometry: Some(geometry),
                properties: Some(feature.properties.clone()),
                ..Feature::default()
            });
        }
    }
    Ok(FeatureCollection {
        bbox: writer.bounds.map(|bounds| bounds.to_vec()),
        features,
        foreign_members: Some(Map::from_iter(
            std::iter::once(("caution".into(), CAUTION.into()))
                .chain(layer.note.map(|note| ("note".into(), note.into()))),
        )),
    })
}

/// Takes places to longitude and latitude and keeps their bounds.
struct Writer<'a> {
    plan: &'a Plan,
    bounds: Option<[f64; 4]>,
}

impl Writer<'_> {
    /// A shape; none where rounding leaves nothing of it.
    fn geometry(&mut self, shape: &Shape) -> Result<Option<Geometry>, LayerError> {
        Ok(match shape {
            Shape::Point(at) => Some(Geometry::new_point(self.position(*at)?)),
            Shape::Line(line) => {
                let positions = self.line(line)?;
                (positions.len() > 1).then(|| Geometry::new_line_string(positions))
            }
            Shape::Polygons(polygons) => self.polygons(polygons)?,
        })
    }

    fn polygons(&mut self, polygons: &[Vec<Vec<Point>>]) -> Result<Option<Geometry>, LayerError> {
        let mut written = Vec::with_capacity(polygons.len());
        for rings in polygons {
            let mut polygon = Vec::with_capacity(rings.len());
            for (index, ring) in rings.iter().enumerate() {
                polygon.push(self.ring(ring, index == 0)?);
            }
            written.extend(rings::resolved(polygon, STEPS));
        }
        Ok(match written.as_slice() {
            [] => None,
            [only] => Some(Geometry::new_polygon(only.iter().cloned())),
            several => Some(Geometry::new_multi_polygon(
                several.iter().map(|polygon| polygon.iter().cloned()),
            )),
        })
    }

    /// A place, rounded, and counted in the layer's bounds.
    fn position(&mut self, at: Point) -> Result<Position, LayerError> {
        let exact = longitude_latitude(self.plan, at)?;
        let position = exact.map(|degrees| (degrees * STEPS).round() / STEPS + 0.0);
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
