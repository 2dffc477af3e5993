//! Why a coordinate reference system or a place in it is refused.

use thiserror::Error;

/// Why a coordinate reference system, or a place in it, is refused.
///
/// `Display` says what is wrong with which values; [`CrsError::help`] says
/// what to write instead.
#[derive(Clone, Debug, PartialEq, Error)]
pub enum CrsError {
    /// The EPSG registry has no projected system of this code.
    #[error("EPSG:{code} is not a projected coordinate reference system of the EPSG registry")]
    Unknown {
        /// The code asked for.
        code: u32,
    },
    /// The system counts in degrees, a plan in metres or feet.
    #[error(
        "EPSG:{code} ({name}) is in degrees; a plan needs a projected system in metres or feet"
    )]
    Geographic {
        /// The code asked for.
        code: u32,
        /// Its name in the registry.
        name: String,
    },
    /// The system did not agree with the second projection library, or could
    /// not be compared with it.
    #[error(
        "EPSG:{code}{} is not among the systems whose positions were checked", in_brackets(.name)
    )]
    Unchecked {
        /// The code asked for.
        code: u32,
        /// Its name in the registry, where known.
        name: Option<String>,
        /// Code and name of the nearest checked system.
        alternative: Option<(u32, String)>,
    },
    /// Grid coordinates outside the area the system was made and checked for.
    #[error("x = {x}, y = {y} lies outside the area of {crs}{}", roughly_at(.at))]
    GridOutside {
        /// The system's name.
        crs: String,
        /// Easting, in the system's unit.
        x: f64,
        /// Northing, in the system's unit.
        y: f64,
        /// Longitude and latitude of the place, where they could be computed.
        at: Option<(f64, f64)>,
        /// The area: west, south, east, north in degrees.
        area: [f64; 4],
    },
    /// A longitude and latitude outside the area the system was made and
    /// checked for.
    #[error("longitude {longitude}, latitude {latitude} lies outside the area of {crs}")]
    DegreesOutside {
        /// The system's name.
        crs: String,
        /// Degrees east on WGS 84.
        longitude: f64,
        /// Degrees north on WGS 84.
        latitude: f64,
        /// The area: west, south, east, north in degrees.
        area: [f64; 4],
    },
    /// A map projection in whose grid lengths are wrong at the place.
    #[error(
        "in {crs} lengths at x = {x}, y = {y} are wrong by {:.1} %, more than {:.0} %",
        .length_error * 100.0, .most * 100.0
    )]
    Distorted {
        /// The system's name.
        crs: String,
        /// Easting, in the system's unit.
        x: f64,
        /// Northing, in the system's unit.
        y: f64,
        /// |scale − 1| at the place.
        length_error: f64,
        /// The largest that is accepted.
        most: f64,
        /// The code of the UTM zone there.
        utm_zone: u32,
    },
    /// A coordinate that is no number.
    #[error("the coordinates ({first}, {second}) are not finite numbers")]
    NotFinite {
        /// x or longitude.
        first: f64,
        /// y or latitude.
        second: f64,
    },
    /// The origin of a local grid that no grid can be laid around.
    #[error("no local grid can be laid around longitude {longitude}, latitude {latitude}")]
    LocalOrigin {
        /// Degrees east.
        longitude: f64,
        /// Degrees north.
        latitude: f64,
    },
}

impl CrsError {
    /// What to write instead.
    pub fn help(&self) -> String {
        const LOCAL: &str = "{ origin = [longitude, latitude] } for a local grid in metres";
        match self {
            Self::Unknown { .. } => format!(
                "write the code of a projected system, such as \"EPSG:32633\" for UTM zone 33 \
                 north, or {LOCAL}"
            ),
            Self::Geographic { .. } => format!(
                "write the UTM zone of the site, \"EPSG:326zz\" north or \"EPSG:327zz\" south of \
                 the equator with zz = floor((longitude + 180)/6) + 1, and its coordinates; or \
                 {LOCAL}"
            ),
            Self::Unchecked {
                alternative: Some((code, name)),
                ..
            } => format!(
                "transform the coordinates to \"EPSG:{code}\" ({name}) and write that; or {LOCAL}"
            ),
            Self::Unchecked { .. } => {
                format!("transform the coordinates to the UTM zone of the site; or write {LOCAL}")
            }
            Self::GridOutside { area, .. } => format!(
                "check the order (x east, y north), the unit and the code; the area is {}",
                area_text(area)
            ),
            Self::DegreesOutside { area, .. } => format!(
                "check the order (longitude first) and the code; the area is {}",
                area_text(area)
            ),
            Self::Distorted { utm_zone, .. } => format!(
                "transform the coordinates to the UTM zone of the site, \"EPSG:{utm_zone}\", and \
                 write that; or {LOCAL}"
            ),
            Self::NotFinite { .. } => "write two finite numbers".to_owned(),
            Self::LocalOrigin { .. } => "write origin = [longitude, latitude] in degrees, \
                 longitude between -180 and 180, latitude between -89 and 89"
                .to_owned(),
        }
    }
}

fn in_brackets(name: &Option<String>) -> String {
    name.as_ref()
        .map_or_else(String::new, |name| format!(" ({name})"))
}

fn roughly_at(at: &Option<(f64, f64)>) -> String {
    at.map_or_else(String::new, |(longitude, latitude)| {
        format!(", near longitude {longitude:.2}, latitude {latitude:.2}")
    })
}

fn area_text(area: &[f64; 4]) -> String {
    let [west, south, east, north] = area;
    let east = if *east > 180.0 { east - 360.0 } else { *east };
    format!("longitude {west} to {east}, latitude {south} to {north}")
}
