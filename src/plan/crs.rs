//! Stand-in until the coordinate systems are merged.

/// A projected coordinate system.
#[derive(Clone, Debug)]
pub struct Crs {
    epsg: Option<u32>,
    origin: (f64, f64),
}

/// Why a coordinate system cannot be used.
#[derive(Clone, Debug, thiserror::Error)]
#[error("{what}")]
pub struct CrsError {
    what: String,
}

impl CrsError {
    /// What to write instead.
    pub fn help(&self) -> String {
        "use a projected CRS or `{ origin = [longitude, latitude] }`".to_owned()
    }
}

#[allow(missing_docs)]
impl Crs {
    pub fn from_epsg(code: u32) -> Result<Crs, CrsError> {
        match code {
            32600..=32660 => Ok(Self {
                epsg: Some(code),
                origin: (15.0, 48.4),
            }),
            2263 => Ok(Self {
                epsg: Some(code),
                origin: (-74.0, 40.7),
            }),
            4326 => Err(CrsError {
                what: "EPSG:4326 is geographic".to_owned(),
            }),
            _ => Err(CrsError {
                what: format!("EPSG:{code} is not known"),
            }),
        }
    }
    pub fn local(longitude_deg: f64, latitude_deg: f64) -> Result<Crs, CrsError> {
        Ok(Self {
            epsg: None,
            origin: (longitude_deg, latitude_deg),
        })
    }
    pub fn metres_per_unit(&self) -> f64 {
        if self.epsg == Some(2263) {
            1200.0 / 3937.0
        } else {
            1.0
        }
    }
    pub fn to_longitude_latitude(&self, x: f64, y: f64) -> Result<(f64, f64), CrsError> {
        Ok((self.origin.0 + x / 1e5, self.origin.1 + y / 1e5))
    }
    pub fn from_longitude_latitude(&self, lon: f64, lat: f64) -> Result<(f64, f64), CrsError> {
        Ok(((lon - self.origin.0) * 1e5, (lat - self.origin.1) * 1e5))
    }
    pub fn name(&self) -> String {
        match self.epsg {
            Some(code) => format!("EPSG:{code}"),
            None => format!("local grid at {}, {}", self.origin.0, self.origin.1),
        }
    }
    pub fn epsg(&self) -> Option<u32> {
        self.epsg
    }
    pub fn note(&self) -> Option<String> {
        None
    }
}
