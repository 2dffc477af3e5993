//! Reads the geometry of a layer's feature, projected into the plan's CRS.

use crate::site::Point;

use super::fault::{Fault, shown};
use super::layers::Feature;
use super::points::Vertex;
use super::reader::Reading;
use super::source::Place;
use super::value::{Node, Value};

/// A geometry, in metres of the plan's grid.
pub(super) enum Geometry {
    Point(Vertex),
    Line(Vec<Vertex>),
    /// The outer ring, first vertex repeated at its end.
    Polygon(Vec<Vertex>),
}

/// What a part of the plan can be made of.
#[derive(Clone, Copy)]
pub(super) enum Wanted {
    Line,
    Point,
    PointOrPolygon,
}

impl Wanted {
    fn types(self) -> &'static [&'static str] {
        match self {
            Self::Line => &["LineString"],
            Self::Point => &["Point"],
            Self::PointOrPolygon => &["Point", "Polygon"],
        }
    }
}

impl Feature {
    /// Its geometry as metres of the plan's grid; `used_at` is where the plan
    /// asks for it.
    pub(super) fn geometry(
        &self,
        wanted: Wanted,
        used_at: Place,
        reading: &mut Reading<'_>,
    ) -> Option<Geometry> {
        let read = self.read_geometry(wanted, reading);
        match read {
            Ok(geometry) => geometry,
            Err(fault) => {
                reading.refuse(fault.related(used_at, "used here"));
                None
            }
        }
    }

    fn read_geometry(
        &self,
        wanted: Wanted,
        reading: &Reading<'_>,
    ) -> Result<Option<Geometry>, Fault> {
        let written = self.geometry.as_ref();
        let kind = written.and_then(|value| value.get("type"));
        let name = kind.and_then(Value::text).unwrap_or("none");
        let place = kind.map_or(self.place, |kind| kind.place);
        let coordinates = written.and_then(|value| value.get("coordinates"));
        let Some(coordinates) = coordinates else {
            return Err(self.wrong_geometry(place, name, wanted));
        };
        let (single, coordinates) = self.single_part(place, name, coordinates)?;
        if !wanted.types().contains(&single) {
            return Err(self.wrong_geometry(place, name, wanted));
        }
        // Without a CRS nothing can be projected; that is a fault already.
        if reading.crs.is_none() {
            return Ok(None);
        }
        let geometry = match single {
            "Point" => Geometry::Point(self.vertex(coordinates, reading)?),
            "LineString" => Geometry::Line(self.vertices(coordinates, reading)?),
            _ => Geometry::Polygon(self.outer_ring(coordinates, reading)?),
        };
        Ok(Some(geometry))
    }

    /// The part of a geometry, where it has just one.
    fn single_part<'v>(
        &self,
        place: Place,
        name: &'v str,
        coordinates: &'v Value,
    ) -> Result<(&'v str, &'v Value), Fault> {
        let Some(single) = name.strip_prefix("Multi") else {
            return Ok((name, coordinates));
        };
        match coordinates.list() {
            Some([only]) => Ok((single, only)),
            parts => {
                let count = parts.map_or(0, <[Value]>::len);
                let what = format!("{} is a {} of {count} parts", self.title, shown(name));
                let help = format!("split it into features of one {} each", shown(single));
                Err(Fault::new(place, what, help).label(format!("{count} parts")))
            }
        }
    }

    fn wrong_geometry(&self, place: Place, name: &str, wanted: Wanted) -> Fault {
        let types = wanted.types().join(" or ");
        let name = shown(name);
        let what = format!(
            "{} must be a {types}, but its geometry is {name}",
            self.title
        );
        let help = match (name.as_str(), wanted) {
            ("Polygon" | "MultiPolygon", Wanted::Line) => {
                "export the polygon's outline as a line, or write it as `circle` or `line`"
                    .to_owned()
            }
            _ => format!("name a feature that is a {types}"),
        };
        Fault::new(place, what, help).label("wrong geometry")
    }

    fn outer_ring(&self, coordinates: &Value, reading: &Reading<'_>) -> Result<Vec<Vertex>, Fault> {
        match coordinates.list() {
            Some([outer]) => self.vertices(outer, reading),
            Some([_, hole, ..]) => {
                let what = format!("{} has a hole", self.title);
                let help = "take the hole out: the worst point of the whole area counts";
                Err(Fault::new(hole.place, what, help).label("a hole"))
            }
            _ => Err(self.no_position(coordinates)),
        }
    }

    fn vertices(&self, line: &Value, reading: &Reading<'_>) -> Result<Vec<Vertex>, Fault> {
        let items = line.list().ok_or_else(|| self.no_position(line))?;
        items
            .iter()
            .map(|item| self.vertex(item, reading))
            .collect()
    }

    fn vertex(&self, position: &Value, reading: &Reading<'_>) -> Result<Vertex, Fault> {
        let Some([longitude, latitude, ..]) = position.list() else {
            return Err(self.no_position(position));
        };
        let (Node::Number(longitude), Node::Number(latitude)) = (&longitude.node, &latitude.node)
        else {
            return Err(self.no_position(position));
        };
        if longitude.abs() > 180.0 || latitude.abs() > 90.0 {
            let what = format!(
                "{} has the position {longitude}, {latitude}, which is no longitude and latitude",
                self.title
            );
            let help = "export the layer as RFC 7946 GeoJSON, in WGS 84 longitude/latitude";
            let fault = Fault::new(position.place, what, help)
                .label("out of range")
                .why("longitudes are within ±180° and latitudes within ±90°");
            return Err(fault);
        }
        self.project(*longitude, *latitude, position.place, reading)
    }

    fn project(
        &self,
        longitude: f64,
        latitude: f64,
        place: Place,
        reading: &Reading<'_>,
    ) -> Result<Vertex, Fault> {
        let Some(crs) = &reading.crs else {
            return Err(self.no_position_at(place));
        };
        let (x, y) = crs
            .from_longitude_latitude(longitude, latitude)
            .map_err(|error| {
                let what = format!(
                    "{}: {} cannot place longitude {longitude}, latitude {latitude}",
                    self.title,
                    crs.name()
                );
                Fault::new(place, what, error.help()).why(error.to_string())
            })?;
        let per_unit = crs.metres_per_unit();
        let at = Point::new(x * per_unit, y * per_unit);
        Ok(Vertex { at, place })
    }

    fn no_position(&self, value: &Value) -> Fault {
        self.no_position_at(value.place)
    }

    fn no_position_at(&self, place: Place) -> Fault {
        let what = format!(
            "{} has coordinates that are not [longitude, latitude]",
            self.title
        );
        let help = "export the layer again as GeoJSON (RFC 7946)";
        Fault::new(place, what, help).label("no position")
    }
}
