//! Reads points in the plan's CRS, as metres of its grid.

use crate::site::{Extent, Length, Point};

use super::fault::Fault;
use super::keys::{Form, Key, LARGEST_COORDINATE_M, Measure};
use super::reader::{Reading, Section};
use super::source::Place;
use super::units::{self, Dimension};
use super::value::{Node, Value};

/// A point and where it was written.
#[derive(Clone, Copy, Debug)]
pub(super) struct Vertex {
    pub(super) at: Point,
    pub(super) place: Place,
}

impl Section<'_> {
    /// The point at a key.
    pub(super) fn point(&self, key: &Key, reading: &mut Reading<'_>) -> Option<Vertex> {
        let value = self.value(key)?;
        self.vertex(key, value, reading)
    }

    /// The points at a key; all of them, or none where one is refused.
    pub(super) fn points(&self, key: &Key, reading: &mut Reading<'_>) -> Option<Vec<Vertex>> {
        let value = self.value(key)?;
        let Some(items) = value.list() else {
            reading.refuse(self.wrong_kind(key, value, "a list of points [[x, y], [x, y], …]"));
            return None;
        };
        let mut vertices = Vec::with_capacity(items.len());
        for item in items {
            vertices.extend(self.vertex(key, item, reading));
        }
        (vertices.len() == items.len()).then_some(vertices)
    }

    /// The rectangle at a key.
    pub(super) fn extent(&self, key: &Key, reading: &mut Reading<'_>) -> Option<Extent> {
        let value = self.value(key)?;
        let Some([west, south, east, north]) = value.list() else {
            reading.refuse(self.wrong_size(key, value, "[xmin, ymin, xmax, ymax]"));
            return None;
        };
        let corners = [(west, south), (east, north)].map(|(x, y)| {
            let x = self.coordinate(key, x, reading);
            let y = self.coordinate(key, y, reading);
            let corner = Point::new(x?, y?);
            self.on_earth(key, corner, value, reading)
        });
        let [Some(min), Some(max)] = corners else {
            return None;
        };
        if min.x < max.x && min.y < max.y {
            return Some(Extent { min, max });
        }
        let written = reading.written(value);
        let what = format!(
            "{}: `{}` is {written}, which spans no area",
            self.title, key.name
        );
        let help = "write [xmin, ymin, xmax, ymax] with xmin below xmax and ymin below ymax";
        reading.refuse(Fault::new(value.place, what, help).label("empty or inverted"));
        None
    }

    fn vertex(&self, key: &Key, value: &Value, reading: &mut Reading<'_>) -> Option<Vertex> {
        let Some([x, y]) = value.list() else {
            reading.refuse(self.wrong_size(key, value, "[x, y]"));
            return None;
        };
        let x = self.coordinate(key, x, reading);
        let y = self.coordinate(key, y, reading);
        let at = self.on_earth(key, Point::new(x?, y?), value, reading)?;
        Some(Vertex {
            at,
            place: value.place,
        })
    }

    /// One coordinate, in metres of the grid.
    fn coordinate(&self, key: &Key, value: &Value, reading: &mut Reading<'_>) -> Option<f64> {
        const COORDINATE: Measure = Measure {
            dimension: Dimension::Length,
            in_grid_units: true,
            least: -LARGEST_COORDINATE_M,
            above: false,
            most: LARGEST_COORDINATE_M,
        };
        self.measured(key, COORDINATE, value, reading)
    }

    /// A point of the grid, unless the CRS cannot place it.
    fn on_earth(
        &self,
        key: &Key,
        point: Point,
        value: &Value,
        reading: &mut Reading<'_>,
    ) -> Option<Point> {
        let Some(crs) = &reading.crs else {
            return Some(point);
        };
        let per_unit = crs.metres_per_unit();
        let error = crs
            .to_longitude_latitude(point.x / per_unit, point.y / per_unit)
            .err();
        let Some(error) = error else {
            return Some(point);
        };
        let what = format!(
            "{}: `{}` lies where {} has no place on Earth",
            self.title,
            key.name,
            crs.name()
        );
        let fault = Fault::new(value.place, what, error.help())
            .label("outside the CRS")
            .why(error.to_string());
        reading.refuse(fault);
        None
    }

    fn wrong_size(&self, key: &Key, value: &Value, wanted: &str) -> Fault {
        match &value.node {
            Node::List(items) => {
                let count = items.len();
                let what = format!(
                    "{}: `{}` needs {wanted}, not {count} items",
                    self.title, key.name
                );
                let help = format!("write {wanted} in the plan's CRS");
                Fault::new(value.place, what, help).label(format!("{count} items"))
            }
            _ => self.wrong_kind(key, value, wanted),
        }
    }

    /// The place on Earth that a local grid begins at.
    pub(super) fn longitude_latitude(
        &self,
        key: &Key,
        reading: &mut Reading<'_>,
    ) -> Option<(f64, f64)> {
        let value = self.value(key)?;
        let Some([longitude, latitude]) = value.list() else {
            reading.refuse(self.wrong_size(key, value, "[longitude, latitude]"));
            return None;
        };
        let longitude = self.degrees(key, longitude, 180.0, reading);
        let latitude = self.degrees(key, latitude, 90.0, reading);
        Some((longitude?, latitude?))
    }

    fn degrees(
        &self,
        key: &Key,
        value: &Value,
        most: f64,
        reading: &mut Reading<'_>,
    ) -> Option<f64> {
        let measure = Measure {
            dimension: Dimension::Angle,
            in_grid_units: false,
            least: -most,
            above: false,
            most,
        };
        self.measured(key, measure, value, reading)
    }

    /// The length at a key.
    pub(super) fn length(&self, key: &Key, reading: &mut Reading<'_>) -> Option<Length> {
        debug_assert!(matches!(
            key.form,
            Form::Quantity(Measure {
                dimension: units::Dimension::Length,
                ..
            })
        ));
        self.quantity(key, reading).map(Length::from_si)
    }
}
