//! The shapes of aquifer that have a name, each in its own canonical frame.

use std::f64::consts::{PI, TAU};
use std::ops::Range;

use num_complex::Complex64;

/// What an edge of the outline does to the head.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Kind {
    /// The head is given: a river. Images change sign. Behind a clogged bank
    /// the river's stage is given, not the head.
    FixedHead,
    /// No flow crosses: a barrier. Images keep their sign.
    NoFlow,
}

/// The edges across one axis of an axis-parallel outline.
///
/// The six products of two such sets are the plane, half-plane, strip,
/// quarter-plane, half-strip and box.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Axis {
    /// No edge: the coordinate runs from −∞ to ∞.
    Open,
    /// One edge at 0; the aquifer lies at positive coordinates.
    OneEdge(Kind),
    /// Edges at 0 and at `width_m`, the aquifer between them.
    TwoEdges {
        /// Distance of the two edges, metres, > 0.
        width_m: f64,
        /// The kinds of the edge at 0 and of the edge at `width_m`.
        kinds: [Kind; 2],
    },
}

/// A shape in its canonical frame (stretched, moved and turned).
///
/// The canonical sides come in this order: x low, x high, y low, y high, as
/// far as they exist; a wedge has arg z = 0, then arg z = angle; a disk has
/// its circle; a general outline the sides of its boundary.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Shape {
    /// An axis-parallel outline: the product of two mirror sets. An axis with
    /// fewer edges never comes first: a half-plane has its edge on x = 0, a
    /// half-strip its two long sides at x = 0 and x = width and its base on
    /// y = 0.
    Axes {
        /// Edges across the x axis.
        x: Axis,
        /// Edges across the y axis.
        y: Axis,
    },
    /// 0 < arg z < `angle_rad`, apex at 0.
    Wedge {
        /// Opening angle, 0 < angle ≤ 2π, not π/2 or π (those are products).
        angle_rad: f64,
        /// The kinds of the sides at arg z = 0 and arg z = angle.
        kinds: [Kind; 2],
    },
    /// x > 0 beside a river on x = 0 whose bank is clogged.
    CloggedHalfPlane {
        /// b of the bank's condition ∂s/∂x = s/b for the drawdown s, metres,
        /// > 0: the aquifer's conductivity times the bank's resistance.
        skin_m: f64,
    },
    /// abs z < `radius_m` inside a river.
    Disk {
        /// Radius, metres.
        radius_m: f64,
    },
    /// abs z > `radius_m` around a lake.
    DiskExterior {
        /// Radius, metres.
        radius_m: f64,
    },
    /// Any other outline: its sides are those of `Outline::boundary`.
    General,
}

impl Shape {
    /// The name a person knows the shape by.
    pub fn name(&self) -> &'static str {
        use Axis::{OneEdge, Open, TwoEdges};
        match self {
            Self::Axes { x, y } => match (x, y) {
                (Open, Open) => "open plane",
                (OneEdge(_), Open) | (Open, OneEdge(_)) => "half-plane",
                (TwoEdges { .. }, Open) | (Open, TwoEdges { .. }) => "strip",
                (OneEdge(_), OneEdge(_)) => "quarter-plane",
                (TwoEdges { .. }, OneEdge(_)) | (OneEdge(_), TwoEdges { .. }) => "half-strip",
                (TwoEdges { .. }, TwoEdges { .. }) => "box",
            },
            Self::Wedge { .. } => "wedge",
            Self::CloggedHalfPlane { .. } => "half-plane behind a clogged bank",
            Self::Disk { .. } => "disk",
            Self::DiskExterior { .. } => "plane around a lake",
            Self::General => "general outline",
        }
    }

    /// The shape with the same sides, all banks clean: where it lies.
    pub fn unclogged(self) -> Self {
        match self {
            Self::CloggedHalfPlane { .. } => Self::Axes {
                x: Axis::OneEdge(Kind::FixedHead),
                y: Axis::Open,
            },
            other => other,
        }
    }

    /// arg z of a place in a wedge, 0 to its angle; 0 in other shapes.
    pub fn angle_of(&self, z: Complex64) -> f64 {
        match *self {
            Self::Wedge { angle_rad, .. } => argument_in_wedge(z, angle_rad),
            _ => 0.0,
        }
    }

    /// A place of the aquifer, moved off straight sides by 1e-14 of the
    /// aquifer's width, or of the distance from its corner where it is open:
    /// what jumps at a side is then asked on the right side of it.
    pub fn hair_inside(&self, z: Complex64) -> Complex64 {
        const HAIR: f64 = 1e-14;
        let corner_m = z.norm().max(f64::MIN_POSITIVE / HAIR);
        let within = |axis: Axis, value: f64, open_m: f64| match axis {
            Axis::Open => value,
            Axis::OneEdge(_) => value.max(HAIR * open_m),
            Axis::TwoEdges { width_m, .. } => value.clamp(HAIR * width_m, (1.0 - HAIR) * width_m),
        };
        match *self {
            Self::Axes { x, y } => {
                let open_m = match x {
                    Axis::TwoEdges { width_m, .. } => width_m,
                    Axis::Open | Axis::OneEdge(_) => corner_m,
                };
                Complex64::new(within(x, z.re, open_m), within(y, z.im, open_m))
            }
            Self::Wedge { angle_rad, .. } => {
                let angle = argument_in_wedge(z, angle_rad);
                let inside = angle.clamp(HAIR * angle_rad, (1.0 - HAIR) * angle_rad);
                if inside == angle {
                    z
                } else {
                    Complex64::from_polar(corner_m, inside)
                }
            }
            // Behind a clogged bank nothing jumps.
            Self::CloggedHalfPlane { .. }
            | Self::Disk { .. }
            | Self::DiskExterior { .. }
            | Self::General => z,
        }
    }

    /// The kinds of the canonical sides, in their order. Those of a general
    /// outline the shape alone does not know: see `Outline::side_kinds`.
    pub fn side_kinds(&self) -> Vec<Kind> {
        match *self {
            Self::Axes { x, y } => [x, y]
                .iter()
                .flat_map(|axis| match *axis {
                    Axis::Open => vec![],
                    Axis::OneEdge(kind) => vec![kind],
                    Axis::TwoEdges { kinds, .. } => kinds.to_vec(),
                })
                .collect(),
            Self::Wedge { kinds, .. } => kinds.to_vec(),
            Self::CloggedHalfPlane { .. } | Self::Disk { .. } | Self::DiskExterior { .. } => {
                vec![Kind::FixedHead]
            }
            Self::General => Vec::new(),
        }
    }
}

/// A piece of a canonical side that one river or barrier of the site makes.
///
/// Positions along a side: y on a side across x, x on a side across y, the
/// distance from the apex on a wedge; on a circle the arc angle, 0 to 2π; on a
/// side of a general outline those of its `Curve`.
#[derive(Clone, Debug, PartialEq)]
pub struct Piece {
    /// Index in `Site::edges`.
    pub edge: usize,
    /// Where the piece lies along its side; infinite where the side is.
    pub along: Range<f64>,
    /// The stage at position a along the side is `stage_m + slope · a`;
    /// zero on a barrier.
    pub stage_m: f64,
    /// Rise of the stage along the side; zero where it is constant.
    pub stage_slope: f64,
}

/// arg z between 0 and `angle`. Rounding may put a point of a side just
/// outside; the cut lies opposite the wedge, so that it still counts as on it.
pub fn argument_in_wedge(z: Complex64, angle: f64) -> f64 {
    let direct = z.arg();
    let is_past_the_cut = direct < 0.5 * angle - PI;
    let argument = if is_past_the_cut {
        direct + TAU
    } else {
        direct
    };
    argument.clamp(0.0, angle)
}
