//! A layer before it is written: features in the site's frame.

use serde_json::{Map, Value};

use super::Properties;
use crate::site::Point;

/// Where a feature is.
#[derive(Clone, Debug)]
pub enum Shape {
    /// A point.
    Point(Point),
    /// A line of two points or more.
    Line(Vec<Point>),
    /// Polygons, each a list of rings, exterior first, in any direction; the
    /// last point of a ring may repeat the first.
    Polygons(Vec<Vec<Vec<Point>>>),
}

/// Something on the map.
#[derive(Clone, Debug)]
pub struct Feature {
    /// Where it is.
    pub shape: Shape,
    /// What is said of it.
    pub properties: Map<String, Value>,
}

/// Features of one kind.
#[derive(Clone, Debug, Default)]
pub struct Layer {
    /// In the order in which they are written.
    pub features: Vec<Feature>,
    /// What their reader must know besides the caution.
    pub note: Option<&'static str>,
}

impl Layer {
    /// Adds a point.
    pub fn add_point(&mut self, at: Point, properties: Properties) {
        self.add(Shape::Point(at), properties);
    }

    /// Adds a line; nothing where it has less than two points.
    pub fn add_line(&mut self, line: Vec<Point>, properties: Properties) {
        if line.len() > 1 {
            self.add(Shape::Line(line), properties);
        }
    }

    /// Adds polygons as one feature.
    pub fn add_polygons(&mut self, polygons: Vec<Vec<Vec<Point>>>, properties: Properties) {
        self.add(Shape::Polygons(polygons), properties);
    }

    fn add(&mut self, shape: Shape, properties: Properties) {
        self.features.push(Feature {
            shape,
            properties: properties.finish(),
        });
    }
}
