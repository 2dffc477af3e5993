//! Contour lines and bands of a field, true to the field and not only to its
//! grid.
//!
//! Method: the mapped aquifer is cut into triangles that share whole edges
//! ([`mesh()`]): two to a grid cell where nothing happens, a constrained
//! Delaunay triangulation along the outline and around wells, with rings of
//! points from each well's rim outward. Where a level falls between the values
//! at the two ends of an edge, the place of that level is searched for on the
//! exact field ([`Cuts::refine`]). Lines join these places through the
//! triangles; bands are bounded by the same places and by the outline, so
//! lines and bands agree to the last bit, lines cannot cross, and bands leave
//! neither gap nor overlap.
//!
//! Limits: between two places a line is straight. A bump of the field that
//! lies wholly within one triangle is not seen; a steady head has none, since
//! its extremes lie at wells and on edges, but for the broad crest of a mound
//! that recharge builds. Where the field jumps, as at a
//! corner of two rivers of different stage, levels meet within 0.1 µm.
//! Source: marching triangles is common practice; the root search is
//! Chandrupatla (1997), see `roots.rs`.

mod bands;
mod boundary;
mod cuts;
mod grid;
mod levels;
mod lines;
mod mesh;
mod nesting;
mod rings;
mod roots;
mod special;

pub use bands::{Band, area_below};
pub use cuts::{Cuts, extremes};
pub use levels::{LevelError, round_levels};
pub use lines::ContourLine;
pub use mesh::{Mesh, mesh, sample};

use crate::site::{Extent, Point};

/// What is to be contoured.
pub trait ScalarField: Sync {
    /// One value for each point, in order.
    ///
    /// Must be finite in the region, on its edge, and where rounding has moved
    /// a point of the edge out by a few units in the last place. Called with
    /// large batches; the implementation is parallel itself.
    fn values(&self, points: &[Point]) -> Vec<f64>;
}

/// The part of the aquifer that is mapped.
#[derive(Clone, Debug)]
pub struct Region {
    /// Aquifer within the map, site metres; valid rings in any direction,
    /// convex or not, with or without holes.
    pub polygons: geo::MultiPolygon<f64>,
    /// The map; covers the polygons.
    pub extent: Extent,
    /// Largest distance of the grid's nodes, metres.
    pub spacing_m: f64,
}

/// A well: a logarithmic peak that is cut off at its rim.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Bump {
    /// Where it is.
    pub at: Point,
    /// Radius within which the field is nearly constant, metres. Below 1 mm
    /// it is taken as 1 mm.
    pub rim_m: f64,
}

/// Why a region cannot be cut into triangles.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum MeshError {
    /// The map has no area, or a corner that is no number.
    #[error("the map's extent has no area: {width_m} m by {height_m} m")]
    Extent {
        /// Width, metres.
        width_m: f64,
        /// Height, metres.
        height_m: f64,
    },
    /// The spacing is not positive, or no number.
    #[error("a map spacing of {spacing_m} m: it must be above zero")]
    Spacing {
        /// The spacing, metres.
        spacing_m: f64,
    },
    /// More nodes than fit.
    #[error(
        "a map of {nodes:.3e} nodes is too fine: at most {most:.0e} fit; \
         a spacing of {workable_m} m would do"
    )]
    TooFine {
        /// Nodes asked for.
        nodes: f64,
        /// Nodes that fit.
        most: f64,
        /// A round spacing that fits, metres.
        workable_m: f64,
    },
    /// Two parts of the outline cross.
    #[error("the aquifer's outline crosses itself near x = {x_m} m, y = {y_m} m")]
    OutlineCrosses {
        /// East, site metres.
        x_m: f64,
        /// North, site metres.
        y_m: f64,
    },
    /// More wells than can have rings.
    #[error("{wells} wells are too many to contour at this spacing: at most about {most} fit")]
    TooManyWells {
        /// Wells on the map.
        wells: usize,
        /// Wells of such rims that fit.
        most: usize,
    },
    /// A vertex of the outline lies farther from the map than the map is
    /// large: the aquifer was not cut to the map.
    #[error("the aquifer's outline leaves the map: x = {x_m} m, y = {y_m} m")]
    OutsideMap {
        /// East, site metres.
        x_m: f64,
        /// North, site metres.
        y_m: f64,
    },
    /// A coordinate of the outline is no number, or beyond 1e9 m.
    #[error("the aquifer's outline has an unusable vertex: x = {x_m} m, y = {y_m} m")]
    Coordinate {
        /// East, site metres.
        x_m: f64,
        /// North, site metres.
        y_m: f64,
    },
}

/// Why a field cannot be contoured.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum ContourError {
    /// The field has no value at a point of the region.
    #[error("the field has no finite value at x = {x_m} m, y = {y_m} m: {value}")]
    NotFinite {
        /// East, site metres.
        x_m: f64,
        /// North, site metres.
        y_m: f64,
        /// What the field gave.
        value: f64,
    },
    /// Not one value for each point.
    #[error("the field gave {got} values for {expected} points")]
    Count {
        /// Points asked for.
        expected: usize,
        /// Values given.
        got: usize,
    },
    /// Levels must be finite and each above the one before.
    #[error("contour levels must rise: {after} follows {before}")]
    Levels {
        /// A level.
        before: f64,
        /// The one after it.
        after: f64,
    },
    /// More vertices than fit.
    #[error("{vertices} contour vertices are too many: use a larger interval or spacing")]
    TooMany {
        /// Vertices asked for.
        vertices: u64,
    },
}

/// Evaluates a field and makes sure that every value is a number.
fn evaluate(field: &dyn ScalarField, points: &[Point]) -> Result<Vec<f64>, ContourError> {
    let values = field.values(points);
    if values.len() != points.len() {
        return Err(ContourError::Count {
            expected: points.len(),
            got: values.len(),
        });
    }
    let bad = values.iter().zip(points).find(|(v, _)| !v.is_finite());
    match bad {
        Some((&value, at)) => Err(ContourError::NotFinite {
            x_m: at.x,
            y_m: at.y,
            value,
        }),
        None => Ok(values),
    }
}
