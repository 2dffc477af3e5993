//! Coordinate reference systems: between a plan's grid and WGS 84 longitude
//! and latitude.
//!
//! Method: definitions of the EPSG registry (crs-definitions) computed by
//! proj4rs. Both are wrong without a word for some codes, so only those are
//! accepted that a sweep over the whole registry found equal to PROJ within a
//! metre, forward and back over their area of use; `crs/checked.txt` lists
//! them. Datum shifts are those PROJ uses without grid files.
//! Limits: a place outside the swept area of its system is refused. Grid x is
//! taken as east and y as north, whatever order the registry gives; systems
//! whose axes point west or south are refused.
//! Source: the sweep, `tests/references/crs/sweep_epsg.py`.

mod checked;
mod definition;
mod error;
mod system;

use checked::{Accepted, Domain, Verdict};
use definition::Projection;
pub use error::CrsError;
pub use system::{GridSystem, WGS_84};

/// Semi-major axis of WGS 84, metres. Source: EPSG ellipsoid 7030.
const SEMI_MAJOR_M: f64 = 6_378_137.0;
/// Flattening of WGS 84. Source: EPSG ellipsoid 7030.
const FLATTENING: f64 = 1.0 / 298.257_223_563;

/// Farthest a local grid reaches from its origin along each axis, metres;
/// lengths are 0.11 % too long there.
const LOCAL_REACH_M: f64 = 300_000.0;

/// A projected coordinate reference system that was checked, or a local grid.
///
/// ```
/// use mirrorwell::plan::crs::Crs;
///
/// let crs = Crs::from_epsg(32633)?;
/// let (longitude, latitude) = crs.to_longitude_latitude(500_000.0, 5_000_000.0)?;
/// assert!((longitude - 15.0).abs() < 1e-9 && (latitude - 45.15).abs() < 0.01);
/// # Ok::<(), mirrorwell::plan::crs::CrsError>(())
/// ```
#[derive(Clone, Debug)]
pub struct Crs {
    projection: Projection,
    name: String,
    system: GridSystem,
    note: Option<String>,
    domain: Domain,
}

impl Crs {
    /// The projected system of an EPSG code.
    ///
    /// # Errors
    /// [`CrsError::Geographic`] for systems in degrees, [`CrsError::Unchecked`]
    /// for those not found equal to the second library, with the nearest one
    /// that was; [`CrsError::Unknown`] for all other codes.
    pub fn from_epsg(code: u32) -> Result<Self, CrsError> {
        let registered = registered(code);
        let name = registered.map(|definition| name_of(definition.wkt));
        let unchecked = |alternative: Option<u32>| CrsError::Unchecked {
            code,
            name: name.clone(),
            alternative: alternative.map(|code| (code, name_of_code(code))),
        };
        match (registered, checked::look_up(code)) {
            (Some(definition), Some(Verdict::Accepted(accepted))) => {
                Projection::new(definition.proj4, accepted.shift)
                    .map(|projection| Self {
                        projection,
                        name: format!("{} (EPSG:{code})", name_of(definition.wkt)),
                        system: GridSystem::Epsg(code),
                        note: note(&accepted),
                        domain: accepted.domain,
                    })
                    .map_err(|_| unchecked(None))
            }
            (_, Some(Verdict::Refused { alternative })) => Err(unchecked(alternative)),
            (Some(definition), None) if definition.proj4.contains("+proj=longlat") => {
                Err(CrsError::Geographic {
                    code,
                    name: name_of(definition.wkt),
                })
            }
            (Some(_), None) => Err(unchecked(None)),
            (None, _) => Err(CrsError::Unknown { code }),
        }
    }

    /// A local grid in metres, x east and y north of a WGS 84 place: the
    /// transverse Mercator projection with scale 1 on the origin's meridian.
    ///
    /// Lengths are too long by x²/(2R²): 0.0012 % at 30 km east or west.
    ///
    /// # Errors
    /// [`CrsError::LocalOrigin`] unless −180 ≤ longitude ≤ 180 and
    /// −89 ≤ latitude ≤ 89.
    pub fn local(longitude_deg: f64, latitude_deg: f64) -> Result<Self, CrsError> {
        let refused = || CrsError::LocalOrigin {
            longitude: longitude_deg,
            latitude: latitude_deg,
        };
        if !(longitude_deg.abs() <= 180.0 && latitude_deg.abs() <= 89.0) {
            return Err(refused());
        }
        let system = GridSystem::Local {
            longitude_deg,
            latitude_deg,
        };
        let definition = format!(
            "+proj=tmerc +lat_0={latitude_deg} +lon_0={longitude_deg} +k=1 +x_0=0 +y_0=0 \
             +datum=WGS84 +units=m +no_defs"
        );
        let reach_deg = LOCAL_REACH_M / METRES_A_DEGREE;
        let wide_deg = (1.1 * reach_deg / latitude_deg.to_radians().cos()).min(180.0);
        Ok(Self {
            projection: Projection::new(&definition, None).map_err(|_| refused())?,
            name: system.name(),
            system,
            note: None,
            domain: Domain {
                west: longitude_deg - wide_deg,
                south: (latitude_deg - reach_deg).max(-90.0),
                east: longitude_deg + wide_deg,
                north: (latitude_deg + reach_deg).min(90.0),
            },
        })
    }

    /// Metres in one unit of the grid: 1, or the length of its foot.
    pub fn metres_per_unit(&self) -> f64 {
        self.projection.metres_per_unit()
    }

    /// WGS 84 longitude and latitude, degrees, of grid coordinates in the
    /// system's own unit.
    ///
    /// Accuracy: 1 cm, or what [`Crs::note`] says.
    ///
    /// # Errors
    /// [`CrsError::NotFinite`], and [`CrsError::GridOutside`] beyond the area
    /// of the system.
    pub fn to_longitude_latitude(&self, x: f64, y: f64) -> Result<(f64, f64), CrsError> {
        if !(x.is_finite() && y.is_finite()) {
            return Err(CrsError::NotFinite {
                first: x,
                second: y,
            });
        }
        let found = self.projection.backward(x, y);
        found
            .filter(|&(longitude, latitude)| {
                self.domain.holds(longitude, latitude) && self.comes_back(longitude, latitude, x, y)
            })
            .ok_or_else(|| CrsError::GridOutside {
                crs: self.name.clone(),
                x,
                y,
                at: found,
                area: self.area(),
            })
    }

    /// Grid coordinates, in the system's own unit, of a WGS 84 longitude and
    /// latitude in degrees.
    ///
    /// Accuracy: 1 cm, or what [`Crs::note`] says.
    ///
    /// # Errors
    /// [`CrsError::NotFinite`], and [`CrsError::DegreesOutside`] beyond the
    /// area of the system.
    pub fn from_longitude_latitude(
        &self,
        longitude: f64,
        latitude: f64,
    ) -> Result<(f64, f64), CrsError> {
        if !(longitude.is_finite() && latitude.is_finite()) {
            return Err(CrsError::NotFinite {
                first: longitude,
                second: latitude,
            });
        }
        self.domain
            .holds(longitude, latitude)
            .then(|| self.projection.forward(longitude, latitude))
            .flatten()
            .ok_or_else(|| CrsError::DegreesOutside {
                crs: self.name.clone(),
                longitude,
                latitude,
                area: self.area(),
            })
    }

    /// The name a person knows the system by, with its code.
    pub fn name(&self) -> String {
        self.name.clone()
    }

    /// The EPSG code; none for a local grid.
    pub fn epsg(&self) -> Option<u32> {
        match self.system {
            GridSystem::Epsg(code) => Some(code),
            GridSystem::Local { .. } => None,
        }
    }

    /// What it is, as other programs are told.
    pub fn system(&self) -> GridSystem {
        self.system
    }

    /// What a reader should know of the system's accuracy.
    pub fn note(&self) -> Option<String> {
        self.note.clone()
    }

    /// Refuses a place where the grid's lengths cannot be taken for metres or
    /// feet: wrong by more than 2 %. Survey grids are within 0.3 %; world maps
    /// are not. The limit is our choice.
    ///
    /// # Errors
    /// [`CrsError::Distorted`], and those of [`Crs::to_longitude_latitude`].
    pub fn check_lengths(&self, x: f64, y: f64) -> Result<(), CrsError> {
        const MOST: f64 = 0.02;
        let length_error = self.length_error(x, y)?;
        if length_error <= MOST {
            return Ok(());
        }
        let (longitude, latitude) = self.to_longitude_latitude(x, y)?;
        Err(CrsError::Distorted {
            crs: self.name.clone(),
            x,
            y,
            length_error,
            most: MOST,
            utm_zone: utm_zone(longitude, latitude),
        })
    }

    /// By how much lengths in the grid are wrong at a place, in the worst
    /// direction: |scale − 1|. About 0.0004 in a UTM zone; 0.5 in a world map
    /// at middle latitudes, where no distance can be trusted.
    ///
    /// Accuracy: 1e-7, from a difference over 100 m.
    ///
    /// # Errors
    /// Those of [`Crs::to_longitude_latitude`].
    pub fn length_error(&self, x: f64, y: f64) -> Result<f64, CrsError> {
        let (longitude, latitude) = self.to_longitude_latitude(x, y)?;
        let half = 50.0 / self.metres_per_unit();
        let (sin, cos) = latitude.to_radians().sin_cos();
        let squared_eccentricity = FLATTENING * (2.0 - FLATTENING);
        let w = 1.0 - squared_eccentricity * sin * sin;
        let across_m = SEMI_MAJOR_M / w.sqrt() * cos;
        let along_m = SEMI_MAJOR_M * (1.0 - squared_eccentricity) / (w * w.sqrt());
        let ground = |before: (f64, f64), after: (f64, f64)| {
            let turn = (after.0 - before.0 + 540.0).rem_euclid(360.0) - 180.0;
            nalgebra::Vector2::new(
                turn.to_radians() * across_m,
                (after.1 - before.1).to_radians() * along_m,
            ) / 100.0
        };
        let at = |x: f64, y: f64| self.projection.backward(x, y);
        let (Some(west), Some(east), Some(south), Some(north)) = (
            at(x - half, y),
            at(x + half, y),
            at(x, y - half),
            at(x, y + half),
        ) else {
            return Err(CrsError::GridOutside {
                crs: self.name.clone(),
                x,
                y,
                at: Some((longitude, latitude)),
                area: self.area(),
            });
        };
        let map = nalgebra::Matrix2::from_columns(&[ground(west, east), ground(south, north)]);
        let ground_per_grid = map.singular_values();
        Ok((1.0 / ground_per_grid.max() - 1.0)
            .abs()
            .max((1.0 / ground_per_grid.min() - 1.0).abs()))
    }

    /// Whether a place projects back onto the grid coordinates it came from,
    /// to 2 m, twice what the list lets pass: false where the inverse has left
    /// its branch.
    fn comes_back(&self, longitude: f64, latitude: f64, x: f64, y: f64) -> bool {
        const SLACK_M: f64 = 2.0;
        self.projection
            .forward(longitude, latitude)
            .is_some_and(|(again_x, again_y)| {
                (again_x - x).hypot(again_y - y) * self.metres_per_unit() <= SLACK_M
            })
    }

    fn area(&self) -> [f64; 4] {
        let Domain {
            west,
            south,
            east,
            north,
        } = self.domain;
        [west, south, east, north]
    }
}

/// Metres in a degree of latitude, about.
const METRES_A_DEGREE: f64 = 111_320.0;

/// The EPSG code of the WGS 84 / UTM zone of a place, the special zones of
/// Norway and Svalbard left out.
pub fn utm_zone(longitude_deg: f64, latitude_deg: f64) -> u32 {
    let turned = (longitude_deg + 180.0).rem_euclid(360.0);
    let zone = (turned / 6.0).floor().clamp(0.0, 59.0) as u32 + 1;
    if latitude_deg < 0.0 {
        32700 + zone
    } else {
        32600 + zone
    }
}

fn registered(code: u32) -> Option<crs_definitions::Def> {
    crs_definitions::from_code(u16::try_from(code).ok()?)
}

fn name_of_code(code: u32) -> String {
    registered(code).map_or_else(String::new, |definition| name_of(definition.wkt))
}

/// The first quoted text of a well-known text: the system's name.
fn name_of(well_known_text: &str) -> String {
    well_known_text
        .split('"')
        .nth(1)
        .unwrap_or_default()
        .to_owned()
}

fn note(accepted: &Accepted<'_>) -> Option<String> {
    let difference = accepted.difference_mm.map(|millimetres| {
        let centimetres = (millimetres / 10.0).ceil();
        format!("longitudes and latitudes differ by up to {centimetres} cm from those of PROJ")
    });
    let shift = accepted.shift_accuracy_m.map(|metres| {
        format!(
            "longitudes and latitudes rest on a datum shift that the EPSG registry gives an \
             accuracy of {metres} m"
        )
    });
    let sentences: Vec<String> = [difference, shift].into_iter().flatten().collect();
    (!sentences.is_empty()).then(|| {
        format!(
            "{}; heads and distances in the plan's own grid are not affected",
            sentences.join("; ")
        )
    })
}
