//! The problem as physics sees it: an aquifer, its edges, the wells and the
//! neighbours, in SI metres and days in a local frame.
//!
//! Nothing here knows of files, coordinate systems or unit strings. The local
//! frame is the plan's own grid moved to an origin near the site, x to grid
//! east and y to grid north, so that no digits are lost to large coordinates.

mod quantity;
mod subject;

pub use quantity::{Conductivity, Flux, Length, Level, Rate, Time, Transmissivity, WellLoss};
pub use subject::{Refusal, Subject};

/// A place in the local frame, metres east and north of its origin.
pub type Point = nalgebra::Point2<f64>;

/// A displacement in the local frame, metres.
pub type Vector = nalgebra::Vector2<f64>;

/// Everything a plan says of the world, ready for computation.
#[derive(Clone, Debug)]
pub struct Site {
    /// The confined aquifer.
    pub aquifer: Aquifer,
    /// The head before any pumping, as far as the plan states it.
    pub ambient: Option<Ambient>,
    /// Rivers, then barriers, in the plan's order.
    pub edges: Vec<Edge>,
    /// The wells, in the plan's order.
    pub wells: Vec<Well>,
    /// Neighbouring wells, springs and properties, in the plan's order.
    pub neighbours: Vec<Neighbour>,
    /// A well is flagged when others cause more than this share (0 to 1) of
    /// its drawdown.
    pub interference_share: f64,
    /// The head error that the plan accepts.
    pub head_tolerance: Length,
    /// What the map should cover.
    pub map: MapRequest,
}

/// A confined, homogeneous aquifer.
#[derive(Clone, Debug)]
pub struct Aquifer {
    /// T; the geometric mean of its principal values when anisotropic.
    pub transmissivity: Transmissivity,
    /// Thickness, where the plan gives it.
    pub thickness: Option<Length>,
    /// Elevation of the aquifer's top, the base of its confining bed.
    pub roof: Option<Level>,
    /// Areal leakage into the aquifer.
    pub recharge: Flux,
    /// Direction-dependent conductivity.
    pub anisotropy: Option<Anisotropy>,
    /// R of the Thiem formula, where no fixed head bounds the aquifer.
    pub influence_radius: Option<Length>,
}

/// Conductivity that differs with direction.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Anisotropy {
    /// Largest over smallest principal conductivity, ≥ 1.
    pub ratio: f64,
    /// Azimuth of the largest, degrees clockwise from grid north.
    pub azimuth_deg: f64,
}

/// The head before any pumping, as the plan states it.
#[derive(Clone, Debug)]
pub struct Ambient {
    /// The head at `at`.
    pub head: Option<Level>,
    /// Where `head` holds.
    pub at: Option<Point>,
    /// Slope of the head, dimensionless, ≥ 0.
    pub gradient: f64,
    /// Azimuth it falls toward, degrees clockwise from grid north.
    pub toward_deg: Option<f64>,
}

/// A river or a barrier.
#[derive(Clone, Debug)]
pub struct Edge {
    /// Its name, as the plan gives it.
    pub name: String,
    /// What it does to the head.
    pub kind: EdgeKind,
    /// Where it is.
    pub shape: EdgeShape,
}

/// What an edge does to the head.
#[derive(Clone, Debug)]
pub enum EdgeKind {
    /// A fixed-head edge.
    River {
        /// Its water level.
        stage: Stage,
        /// Skin thickness over skin conductivity of a clogged bank.
        bank_resistance: Option<Time>,
    },
    /// A no-flow edge.
    Barrier,
}

/// The water level of a river.
#[derive(Clone, Debug, PartialEq)]
pub enum Stage {
    /// The same everywhere.
    Constant(Level),
    /// One value for each vertex of the line, linear between them.
    AtVertices(Vec<Level>),
}

/// Where an edge is.
#[derive(Clone, Debug)]
pub enum EdgeShape {
    /// A polyline of two vertices or more; a ring when first = last.
    Line(Vec<Point>),
    /// A circle.
    Circle {
        /// Its centre.
        centre: Point,
        /// Its radius.
        radius: Length,
    },
}

/// A pumping or injecting well that fully penetrates the aquifer.
#[derive(Clone, Debug)]
pub struct Well {
    /// Its name, as the plan gives it.
    pub name: String,
    /// Where it is.
    pub at: Point,
    /// Positive pumps, negative injects.
    pub pumping: Rate,
    /// Radius of the borehole wall at the screen.
    pub radius: Length,
    /// C of s = BQ + C Q².
    pub well_loss: WellLoss,
    /// The level that pumping must not draw the well below.
    pub lowest_level: Option<Level>,
    /// Ground elevation.
    pub ground: Option<Level>,
}

/// A neighbouring well, spring or property.
#[derive(Clone, Debug)]
pub struct Neighbour {
    /// Its name, as the plan gives it.
    pub name: String,
    /// Where it is.
    pub place: Place,
    /// The drawdown it may suffer.
    pub allowed_drawdown: Option<Length>,
}

/// A point, or an area of which the worst point counts.
#[derive(Clone, Debug)]
pub enum Place {
    /// A single point.
    At(Point),
    /// A simple polygon, without the repeated last vertex.
    Area(Vec<Point>),
}

/// What the map should cover, where the plan says so.
#[derive(Clone, Debug, Default)]
pub struct MapRequest {
    /// Its corners, aligned with the plan's grid.
    pub extent: Option<Extent>,
    /// Distance of the grid's nodes.
    pub spacing: Option<Length>,
    /// Contour interval.
    pub interval: Option<Length>,
}

/// A rectangle aligned with the local frame.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Extent {
    /// South-west corner.
    pub min: Point,
    /// North-east corner.
    pub max: Point,
}

/// The unit vector of an azimuth, degrees clockwise from grid north.
pub fn direction_of_azimuth(degrees: f64) -> Vector {
    let (sin, cos) = degrees.to_radians().sin_cos();
    Vector::new(sin, cos)
}
