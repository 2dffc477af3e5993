//! What a grid is, as other programs are told.
//!
//! Source: well-known text as in OGC 01-009, which GeoPackage asks for.

/// WGS 84 longitude and latitude as well-known text.
pub const WGS_84: &str = "GEOGCS[\"WGS 84\",DATUM[\"WGS_1984\",SPHEROID[\"WGS 84\",6378137,\
298.257223563,AUTHORITY[\"EPSG\",\"7030\"]],AUTHORITY[\"EPSG\",\"6326\"]],\
PRIMEM[\"Greenwich\",0,AUTHORITY[\"EPSG\",\"8901\"]],\
UNIT[\"degree\",0.0174532925199433,AUTHORITY[\"EPSG\",\"9122\"]],AUTHORITY[\"EPSG\",\"4326\"]]";

/// A registered grid, or a local one.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum GridSystem {
    /// A projected system of the EPSG registry.
    Epsg(u32),
    /// Transverse Mercator in metres on WGS 84: scale 1 on the origin's
    /// meridian, x and y zero at the origin.
    Local {
        /// Longitude of the origin, degrees.
        longitude_deg: f64,
        /// Latitude of the origin, degrees.
        latitude_deg: f64,
    },
}

impl GridSystem {
    /// Its well-known text; x is east and y north.
    pub fn well_known_text(self) -> String {
        match self {
            Self::Epsg(code) => super::registered(code)
                .map_or_else(String::new, |definition| definition.wkt.to_owned()),
            Self::Local {
                longitude_deg,
                latitude_deg,
            } => format!(
                "PROJCS[\"{}\",{WGS_84},PROJECTION[\"Transverse_Mercator\"],\
                 PARAMETER[\"latitude_of_origin\",{latitude_deg}],\
                 PARAMETER[\"central_meridian\",{longitude_deg}],\
                 PARAMETER[\"scale_factor\",1],PARAMETER[\"false_easting\",0],\
                 PARAMETER[\"false_northing\",0],UNIT[\"metre\",1,AUTHORITY[\"EPSG\",\"9001\"]],\
                 AXIS[\"Easting\",EAST],AXIS[\"Northing\",NORTH]]",
                self.name()
            ),
        }
    }

    /// The name a person knows it by, without its code.
    pub fn name(self) -> String {
        match self {
            Self::Epsg(code) => super::name_of_code(code),
            Self::Local {
                longitude_deg,
                latitude_deg,
            } => format!("local grid around longitude {longitude_deg}, latitude {latitude_deg}"),
        }
    }
}
