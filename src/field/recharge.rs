//! The mound that recharge builds between the edges before any pumping, and
//! where its water goes.
//!
//! Recharge N (a depth a day) obeys T ∇²u = −N with u = 0 on rivers and no
//! flow across barriers; u adds to the head that the stages fix. The stretch
//! to isotropy keeps areas, so N is the same in every frame.
//!
//! | outline | (T/N) u |
//! |---|---|
//! | disk | (R² − r²)/4 |
//! | strip between rivers | x (W − x)/2 |
//! | strip, half-strip or box with a barrier across x | its half, W twice the width |
//! | half-strip, box with rivers on one axis only | the same parabola |
//! | half-strip on a river y = 0 | x (W − x)/2 − S(y) |
//! | box, rivers at y = 0 and y = V | x (W − x)/2 − Σₘ (−1)^m (S(y + mV) + S(V − y + mV)) |
//!
//! S is the harmonic function that is the parabola at y = 0 and fades far away,
//!
//!   S = (4W²/π³) Im χ₃(e^w),  w = π(ix − y)/W,
//!
//! the parabola's sine series (n odd, sin(nπx/W) e^(−nπy/W)/n³) in closed form with
//! Legendre's χ₃ (`chi`). The alternating sum over m is 1/(1 + e^(−nπV/W)) of each
//! wave unfolded; the parabola runs along the shorter of W and V, so its terms fall at
//! least as e^(−πm). Re χ₃ is the stream function: it gives what flows into any
//! reach of a river without a quadrature.
//! Accuracy: absolute error ≤ 1e-14 W² N/T. Cost: one to 26 χ₃.
//! Source: the parabola and the disk are textbook results, for instance Bear
//! (1979), *Hydraulics of Groundwater*, from memory; the rest follows from
//! them by separation of variables.

mod chi;

use std::f64::consts::PI;
use std::ops::Range;

use num_complex::Complex64;

use crate::outline::{Axis, Kind, Outline, Shape};
use crate::site::{Flux, Site};
use chi::chi;

/// Waves that have faded to e^(−40) are left out.
const FADED: f64 = 40.0;

/// The rise of the head by recharge, in an outline's canonical frame.
#[derive(Clone, Copy, Debug)]
pub(super) struct Recharge {
    /// N, metres a day.
    flux_m_d: f64,
    transmissivity_m2_d: f64,
    mound: Mound,
}

/// The form of the rise.
#[derive(Clone, Copy, Debug)]
enum Mound {
    /// Within a circle of a radius.
    Round(f64),
    /// Between rivers across one axis.
    Straight(Straight),
}

/// A parabola across one axis, and what the edges across the other make of it.
#[derive(Clone, Copy, Debug)]
struct Straight {
    /// Whether the parabola runs along y.
    is_turned: bool,
    across: Span,
    along: Ends,
}

/// Rivers across the other axis.
#[derive(Clone, Copy, Debug)]
enum Ends {
    /// None.
    Free,
    /// One, at 0; the aquifer goes on for ever.
    One,
    /// Two, or one and a barrier that mirrors it.
    Two(Span),
}

/// Two edges, at least one a river, unfolded to two rivers.
#[derive(Clone, Copy, Debug)]
struct Span {
    /// Distance of the two edges.
    width: f64,
    kinds: [Kind; 2],
}

impl Span {
    /// None between two barriers.
    fn of(axis: Axis) -> Option<Self> {
        match axis {
            Axis::TwoEdges { width_m, kinds } if kinds.contains(&Kind::FixedHead) => Some(Self {
                width: width_m,
                kinds,
            }),
            _ => None,
        }
    }

    /// Distance of the two rivers: a barrier mirrors the one.
    fn unfolded(&self) -> f64 {
        if self.kinds.contains(&Kind::NoFlow) {
            2.0 * self.width
        } else {
            self.width
        }
    }

    /// Whether distances count from the edge at `width`.
    fn is_reversed(&self) -> bool {
        self.kinds == [Kind::NoFlow, Kind::FixedHead]
    }

    /// Distance from the river that positions count from.
    fn measured(&self, position: f64) -> f64 {
        if self.is_reversed() {
            self.width - position
        } else {
            position
        }
    }

    /// Which way `measured` grows.
    fn direction(&self) -> f64 {
        if self.is_reversed() { -1.0 } else { 1.0 }
    }
}

/// One term of the sum over m, seen from a place.
struct Wave {
    sign: f64,
    /// Distance from where the wave starts.
    distance: f64,
    /// +1 where the distance grows with y, else −1.
    direction: f64,
}

/// The rise by a site's recharge in closed form; none without recharge, and
/// none in a general outline.
pub(super) fn of(site: &Site, outline: &Outline) -> Option<Recharge> {
    let flux_m_d = site.aquifer.recharge.si();
    if flux_m_d == 0.0 {
        return None;
    }
    Mound::of(&outline.shape).map(|mound| Recharge {
        flux_m_d,
        transmissivity_m2_d: site.aquifer.transmissivity.si(),
        mound,
    })
}

impl Recharge {
    /// Rise of the head at a canonical place, metres.
    pub fn rise_m(&self, z: Complex64) -> f64 {
        let form = match self.mound {
            Mound::Round(radius) => 0.25 * (radius * radius - z.norm_sqr()),
            Mound::Straight(straight) => straight.rise(z),
        };
        self.flux_m_d / self.transmissivity_m2_d * form
    }

    /// ∂/∂x + i ∂/∂y of the rise.
    pub fn gradient(&self, z: Complex64) -> Complex64 {
        let form = match self.mound {
            Mound::Round(_) => -0.5 * z,
            Mound::Straight(straight) => straight.gradient(z),
        };
        self.flux_m_d / self.transmissivity_m2_d * form
    }

    /// Water of the recharge that leaves through a part of a canonical side,
    /// m³/d; none where the part is endless.
    pub fn through_m3_d(&self, side: usize, along: &Range<f64>) -> Option<f64> {
        let area_m2 = match self.mound {
            Mound::Round(radius) => 0.5 * radius * radius * (along.end - along.start),
            Mound::Straight(straight) => straight.drained_area(side, along)?,
        };
        Some(self.flux_m_d * area_m2)
    }

    /// A bound on the error of the rise, metres.
    pub fn error_m(&self) -> f64 {
        let width = match self.mound {
            Mound::Round(radius) => radius,
            Mound::Straight(straight) => straight.across.unfolded(),
        };
        1e-14 * width * width * (self.flux_m_d / self.transmissivity_m2_d).abs()
    }

    /// What the reader should know of it.
    pub fn note(&self) -> String {
        format!(
            "The head before pumping includes the recharge of {}, which the rivers take up.",
            Flux::from_si(self.flux_m_d)
        )
    }
}

impl Mound {
    /// None where the outline cannot drain recharge, or has no closed form.
    fn of(shape: &Shape) -> Option<Self> {
        let (x, y) = match *shape {
            Shape::Disk { radius_m } => return Some(Self::Round(radius_m)),
            Shape::Axes { x, y } => (x, y),
            Shape::Wedge { .. }
            | Shape::CloggedHalfPlane { .. }
            | Shape::DiskExterior { .. }
            | Shape::General => return None,
        };
        if !matches!(x, Axis::TwoEdges { .. }) {
            return None;
        }
        let straight = match (Span::of(x), Span::of(y), y) {
            (Some(across), Some(along), _) if along.unfolded() < across.unfolded() => Straight {
                is_turned: true,
                across: along,
                along: Ends::Two(across),
            },
            (Some(across), Some(along), _) => Straight {
                is_turned: false,
                across,
                along: Ends::Two(along),
            },
            (Some(across), None, Axis::OneEdge(Kind::FixedHead)) => Straight {
                is_turned: false,
                across,
                along: Ends::One,
            },
            (Some(across), None, _) => Straight {
                is_turned: false,
                across,
                along: Ends::Free,
            },
            (None, Some(across), _) => Straight {
                is_turned: true,
                across,
                along: Ends::Free,
            },
            (None, None, _) => return None,
        };
        Some(Self::Straight(straight))
    }
}

impl Straight {
    /// x and y in the places they have here.
    fn turned(&self, z: Complex64) -> Complex64 {
        if self.is_turned {
            Complex64::new(z.im, z.re)
        } else {
            z
        }
    }

    /// 4W²/π³.
    fn factor(&self) -> f64 {
        4.0 * self.across.unfolded().powi(2) / PI.powi(3)
    }

    /// (T/N) u.
    fn rise(&self, z: Complex64) -> f64 {
        let z = self.turned(z);
        let (x, w) = (self.across.measured(z.re), self.across.unfolded());
        let ends: f64 = self
            .waves(self.y_measured(z.im))
            .map(|wave| wave.sign * chi(self.phase(x, wave.distance))[0].im)
            .sum();
        0.5 * x * (w - x) - self.factor() * ends
    }

    /// The gradient of (T/N) u.
    fn gradient(&self, z: Complex64) -> Complex64 {
        let z = self.turned(z);
        let (x, w) = (self.across.measured(z.re), self.across.unfolded());
        // ∂S/∂x = (4W/π²) Re χ₂, ∂S/∂y = −(4W/π²) Im χ₂.
        let mut ends = Complex64::ZERO;
        for wave in self.waves(self.y_measured(z.im)) {
            let [_, second] = chi(self.phase(x, wave.distance));
            ends += wave.sign * Complex64::new(second.re, -wave.direction * second.im);
        }
        let slope = 0.5 * w - x - self.factor() * PI / w * ends;
        let y_direction = match self.along {
            Ends::Two(span) => span.direction(),
            _ => 1.0,
        };
        self.turned(Complex64::new(
            slope.re * self.across.direction(),
            slope.im * y_direction,
        ))
    }

    /// The part of the aquifer's area whose recharge leaves through a part of
    /// a side; none where that is endless.
    fn drained_area(&self, side: usize, along: &Range<f64>) -> Option<f64> {
        let side = if self.is_turned { (side + 2) % 4 } else { side };
        let w = self.across.unfolded();
        let [start, end] = if side < 2 {
            if self.across.kinds.get(side) != Some(&Kind::FixedHead) {
                return Some(0.0);
            }
            if !(along.start.is_finite() && along.end.is_finite()) {
                return None;
            }
            [along.start, along.end].map(|y| {
                let y = self.y_measured(y);
                0.5 * w * y + self.factor() * self.stream(0.0, y)
            })
        } else {
            let is_river = match self.along {
                Ends::Free => false,
                Ends::One => true,
                Ends::Two(span) => span.kinds.get(side - 2) == Some(&Kind::FixedHead),
            };
            if !is_river {
                return Some(0.0);
            }
            [along.start, along.end]
                .map(|x| -self.factor() * self.stream(self.across.measured(x), 0.0))
        };
        Some((end - start).abs())
    }

    /// Σ ± Re χ₃, the stream function of the sum of S.
    fn stream(&self, x: f64, y: f64) -> f64 {
        self.waves(y)
            .map(|wave| wave.sign * wave.direction * chi(self.phase(x, wave.distance))[0].re)
            .sum()
    }

    /// w = π(ix − d)/W.
    fn phase(&self, x: f64, distance: f64) -> Complex64 {
        Complex64::new(-distance, x) * (PI / self.across.unfolded())
    }

    fn y_measured(&self, y: f64) -> f64 {
        match self.along {
            Ends::Two(span) => span.measured(y),
            _ => y,
        }
    }

    /// The terms that are felt at a distance y from the river across y.
    fn waves(&self, y: f64) -> impl Iterator<Item = Wave> {
        let reach = FADED * self.across.unfolded() / PI;
        let (count, period) = match self.along {
            Ends::Free => (0.0, 0.0),
            Ends::One => (1.0, f64::INFINITY),
            Ends::Two(span) => ((reach / span.unfolded()).ceil() + 1.0, span.unfolded()),
        };
        let forward = (0..count as u32).map(move |m| (m, y, 1.0));
        let backward = (0..count as u32).map(move |m| (m, period - y, -1.0));
        forward
            .chain(backward)
            .map(move |(m, first, direction)| Wave {
                sign: if m % 2 == 0 { 1.0 } else { -1.0 },
                distance: if m == 0 {
                    first
                } else {
                    first + f64::from(m) * period
                },
                direction,
            })
            .filter(move |wave| wave.distance < reach)
    }
}
