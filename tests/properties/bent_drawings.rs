//! Random plans without a closed form: closed polygons and open coasts of rivers
//! and barriers with bends, a lake or a barrier island inside, falling stages,
//! clogged banks and jumps between rivers.

use std::f64::consts::TAU;

use mirrorwell::outline::Kind::{self, FixedHead, NoFlow};
use mirrorwell::site::{
    Aquifer, Edge, EdgeKind, EdgeShape, Flux, Length, Level, MapRequest, Rate, Site, Stage, Time,
    Transmissivity, Well, WellLoss,
};
use num_complex::Complex64;
use proptest::prelude::*;

use crate::drawings::{DrawnWell, Setting, motion};

/// What stands inside the outline.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Inside {
    Nothing,
    /// A lake at a stage.
    Lake(f64),
    /// Barriers around so many corners.
    Island(u32),
}

/// A straight edge, the aquifer to its left.
#[derive(Clone, Debug)]
pub struct Leg {
    pub kind: Kind,
    pub ends: [Complex64; 2],
    pub stages_m: [f64; 2],
    /// Of a clogged bank, days.
    pub resistance_d: Option<f64>,
}

/// A plan before it is put into a place.
#[derive(Clone, Debug)]
pub struct BentDrawing {
    pub legs: Vec<Leg>,
    pub inside: Inside,
    /// Middle and radius of what stands inside.
    pub middle: Complex64,
    pub middle_radius_m: f64,
    pub wells: Vec<DrawnWell>,
    /// Places inside the aquifer.
    pub places: Vec<Complex64>,
}

pub const TRANSMISSIVITY_M2_D: f64 = 500.0;
const THICKNESS_M: f64 = 20.0;

/// The size of everything drawn, metres.
pub const SIZE_M: f64 = 800.0;

impl BentDrawing {
    /// Places on the legs, with the leg's number; a hair inside.
    pub fn beside_legs(&self, along: f64, hair_m: f64) -> Vec<(usize, Complex64)> {
        let beside = |leg: &Leg| {
            let step = leg.ends[1] - leg.ends[0];
            leg.ends[0] + step * along + step / step.norm() * Complex64::i() * hair_m
        };
        self.legs.iter().map(beside).enumerate().collect()
    }

    pub fn is_closed(&self) -> bool {
        let ends = [self.legs.first(), self.legs.last()];
        matches!(ends, [Some(first), Some(last)] if first.ends[0] == last.ends[1])
    }

    pub fn with_wells(&self, wells: Vec<DrawnWell>) -> Self {
        Self {
            wells,
            ..self.clone()
        }
    }

    /// Lowest and highest stage.
    pub fn stages_m(&self) -> [f64; 2] {
        let legs = self.legs.iter().filter(|leg| leg.kind == FixedHead);
        let lake = match self.inside {
            Inside::Lake(stage_m) => Some(stage_m),
            Inside::Nothing | Inside::Island(_) => None,
        };
        let stages_m = legs.flat_map(|leg| leg.stages_m).chain(lake);
        stages_m.fold(
            [f64::INFINITY, f64::NEG_INFINITY],
            |[low, high], stage_m| [low.min(stage_m), high.max(stage_m)],
        )
    }

    /// The site, as if a plan had been read.
    pub fn site(&self, setting: &Setting, asked_m: f64) -> Site {
        let length = |metres: f64| Length::from_si(metres * setting.scale);
        let line = |places: &[Complex64]| {
            EdgeShape::Line(places.iter().map(|z| setting.place(*z)).collect())
        };
        let river = |leg: &Leg| EdgeKind::River {
            stage: Stage::AtVertices(leg.stages_m.map(Level::from_si).to_vec()),
            // The skin is a length: it grows with the plan.
            bank_resistance: leg
                .resistance_d
                .map(|days| Time::from_si(days * setting.scale)),
        };
        let mut edges: Vec<Edge> = Vec::new();
        for (number, leg) in self.legs.iter().enumerate() {
            edges.push(Edge {
                name: format!("E{number}"),
                kind: match leg.kind {
                    FixedHead => river(leg),
                    NoFlow => EdgeKind::Barrier,
                },
                shape: line(&leg.ends),
            });
        }
        match self.inside {
            Inside::Nothing => {}
            Inside::Lake(stage_m) => edges.push(Edge {
                name: "lake".to_owned(),
                kind: EdgeKind::River {
                    stage: Stage::Constant(Level::from_si(stage_m)),
                    bank_resistance: None,
                },
                shape: EdgeShape::Circle {
                    centre: setting.place(self.middle),
                    radius: length(self.middle_radius_m),
                },
            }),
            Inside::Island(corners) => {
                let corner = |number: u32| {
                    let turn = TAU * f64::from(number % corners) / f64::from(corners);
                    self.middle + Complex64::from_polar(self.middle_radius_m, turn)
                };
                edges.push(Edge {
                    name: "island".to_owned(),
                    kind: EdgeKind::Barrier,
                    shape: line(&(0..=corners).map(corner).collect::<Vec<_>>()),
                });
            }
        }
        // Rivers first: so the order of edges is one that plans have.
        edges.sort_by_key(|edge| matches!(edge.kind, EdgeKind::Barrier));
        let wells = self.wells.iter().enumerate().map(|(index, well)| Well {
            name: format!("PW-{}", index + 1),
            at: setting.place(well.at),
            pumping: Rate::from_si(well.strength_m * TRANSMISSIVITY_M2_D),
            radius: length(well.radius_m),
            well_loss: WellLoss::from_si(0.0),
            lowest_level: None,
            ground: None,
        });
        Site {
            aquifer: Aquifer {
                transmissivity: Transmissivity::from_si(TRANSMISSIVITY_M2_D),
                thickness: Some(Length::from_si(THICKNESS_M)),
                roof: None,
                recharge: Flux::from_si(0.0),
                anisotropy: setting.anisotropy(),
                influence_radius: None,
            },
            ambient: None,
            edges,
            wells: wells.collect(),
            neighbours: Vec::new(),
            interference_share: 0.2,
            head_tolerance: Length::from_si(asked_m),
            map: MapRequest::default(),
        }
    }
}

/// Kind, resistance of the bank, stage, and jump of the stage at its beginning.
type DrawnLeg = (Kind, Option<f64>, f64, f64);

fn leg() -> impl Strategy<Value = DrawnLeg> {
    let kind = prop_oneof![3 => Just(FixedHead), 2 => Just(NoFlow)];
    // Skins of 10 m to 2 km.
    let resistance = prop_oneof![4 => Just(None), 1 => (0.4..80.0_f64).prop_map(Some)];
    // One corner in four has a jump of the stage.
    let jump = prop_oneof![3 => Just(0.0), 1 => -0.5..0.5_f64];
    (kind, resistance, 58.0..62.0_f64, jump)
}

fn inside() -> impl Strategy<Value = Inside> {
    prop_oneof![
        2 => Just(Inside::Nothing),
        1 => (58.0..62.0_f64).prop_map(Inside::Lake),
        1 => (3..6_u32).prop_map(Inside::Island),
    ]
}

/// Legs from place to place, each with its kind and stages; one of them a river.
fn legs(corners: &[Complex64], is_closed: bool, drawn: &[DrawnLeg], river: usize) -> Vec<Leg> {
    let count = if is_closed {
        corners.len()
    } else {
        corners.len() - 1
    };
    let next = |number: usize| (number + 1) % corners.len();
    let leg = |number: usize| {
        let (kind, resistance_d, stage_m, jump_m) = drawn[number];
        Leg {
            kind: if number == river % count {
                FixedHead
            } else {
                kind
            },
            ends: [corners[number], corners[next(number)]],
            stages_m: [stage_m + jump_m, drawn[next(number)].2],
            resistance_d,
        }
    };
    (0..count).map(leg).collect()
}

/// A star around the origin: corners in order of their angle.
fn closed() -> impl Strategy<Value = BentDrawing> {
    let corner = (0.45..1.0_f64, 0.1..0.9_f64, leg());
    let corners = prop::collection::vec(corner, 3..=12);
    let wells = prop::collection::vec((0.0..1.0_f64, 0.0..1.0_f64, 0.5..6.0_f64), 1..4);
    let places = prop::collection::vec((0.0..TAU, 0.0..0.98_f64), 12);
    (corners, inside(), wells, places, 0..12_usize)
        .prop_map(|(corners, inside, wells, places, river)| {
            let count = corners.len() as f64;
            let vertex = |(number, (radius, turn, _)): (usize, &(f64, f64, _))| {
                // Between few corners the origin must not fall out of the star.
                let turn = 0.5 + (turn - 0.5) * f64::min(1.0, count / 8.0);
                let angle = TAU * (number as f64 + turn) / count;
                Complex64::from_polar(radius * SIZE_M, angle)
            };
            let vertices: Vec<_> = corners.iter().enumerate().map(vertex).collect();
            let drawn: Vec<_> = corners.iter().map(|corner| corner.2).collect();
            let legs = legs(&vertices, true, &drawn, river);
            let reach = |angle: f64| reach_m(&legs, angle);
            let angles = (0..720).map(|step| TAU * f64::from(step) / 720.0);
            let middle_radius_m = 0.3 * angles.map(reach).fold(f64::INFINITY, f64::min);
            let at = |angle: f64, share: f64, most: f64| {
                let low = if inside == Inside::Nothing {
                    0.0
                } else {
                    1.05 * middle_radius_m
                };
                Complex64::from_polar(low + share * (most * reach(angle) - low), angle)
            };
            let number = wells.len() as f64;
            let wells = wells
                .iter()
                .enumerate()
                .map(|(index, (turn, share, strength_m))| DrawnWell {
                    // Each in its own sector.
                    at: at(
                        TAU * (index as f64 + 0.2 + 0.6 * turn) / number,
                        0.2 + 0.7 * share,
                        0.9,
                    ),
                    strength_m: *strength_m,
                    radius_m: 0.2,
                });
            BentDrawing {
                wells: wells.collect(),
                places: places
                    .iter()
                    .map(|(angle, share)| at(*angle, *share, 0.999))
                    .collect(),
                legs,
                inside,
                middle: Complex64::ZERO,
                middle_radius_m,
            }
        })
        .prop_filter("a star around its middle", |drawing| {
            (0.03 * SIZE_M..SIZE_M).contains(&drawing.middle_radius_m)
        })
}

/// Distance from the origin to the star's edge.
fn reach_m(legs: &[Leg], angle: f64) -> f64 {
    let sight = Complex64::cis(-angle);
    let distances = legs.iter().filter_map(|leg| {
        let [a, b] = leg.ends.map(|end| end * sight);
        let crosses = a.im <= 0.0 && b.im >= 0.0;
        (crosses && b.im > a.im).then(|| a.re - a.im * (b.re - a.re) / (b.im - a.im))
    });
    distances
        .filter(|distance| *distance > 0.0)
        .fold(f64::INFINITY, f64::min)
}

/// A coast from west to east, the aquifer north of it.
fn open() -> impl Strategy<Value = BentDrawing> {
    let corner = (0.15..0.85_f64, -0.3..0.3_f64, leg());
    let corners = prop::collection::vec(corner, 3..=8);
    let wells = prop::collection::vec((0.0..1.0_f64, 0.01..0.3_f64, 0.5..6.0_f64), 1..4);
    let places = prop::collection::vec((-0.2..1.2_f64, 0.001..1.0_f64), 12);
    (corners, inside(), wells, places, 0..12_usize).prop_map(
        |(corners, inside, wells, places, river)| {
            let count = corners.len() as f64;
            let vertex = |(number, (along, up, _)): (usize, &(f64, f64, _))| {
                Complex64::new((number as f64 + along) / count * 2.0 - 1.0, *up) * SIZE_M
            };
            let vertices: Vec<_> = corners.iter().enumerate().map(vertex).collect();
            let drawn: Vec<_> = corners.iter().map(|corner| corner.2).collect();
            let coast_m = |x_m: f64| {
                let pairs: Vec<_> = vertices.windows(2).collect();
                let pair = pairs.iter().find(|pair| x_m <= pair[1].re);
                let pair = pair.unwrap_or(&pairs[pairs.len() - 1]);
                pair[0].im + (x_m - pair[0].re) * (pair[1] - pair[0]).im / (pair[1] - pair[0]).re
            };
            let (west, east) = (vertices[0].re, vertices[vertices.len() - 1].re);
            let at = |along: f64, up: f64| {
                let x_m = west + along * (east - west);
                Complex64::new(x_m, coast_m(x_m) + up * SIZE_M)
            };
            let number = wells.len() as f64;
            let drawn_wells = wells
                .iter()
                .enumerate()
                .map(|(index, (along, up, strength_m))| DrawnWell {
                    at: at((index as f64 + 0.2 + 0.6 * along) / number, *up),
                    strength_m: *strength_m,
                    radius_m: 0.2,
                });
            let middle = Complex64::new(0.0, 1.2 * SIZE_M);
            let middle_radius_m = 0.2 * SIZE_M;
            let is_clear = |z: &Complex64| {
                inside == Inside::Nothing || (z - middle).norm() > 1.05 * middle_radius_m
            };
            BentDrawing {
                wells: drawn_wells.collect(),
                places: places
                    .iter()
                    .map(|(along, up)| at(*along, *up))
                    .filter(is_clear)
                    .collect(),
                legs: legs(&vertices, false, &drawn, river),
                inside,
                middle,
                middle_radius_m,
            }
        },
    )
}

/// Any drawing without a closed form, in any setting; circles stay isotropic, as
/// the program asks.
pub fn bent_case() -> impl Strategy<Value = (BentDrawing, Setting)> {
    let drawing = prop_oneof![3 => closed().boxed(), 2 => open().boxed()];
    let stretch = prop_oneof![2 => Just((1.0, 0.0)), 1 => (1.01..6.0_f64, 0.0..TAU)];
    (drawing, motion(), stretch).prop_map(|(drawing, motion, (ratio, axis))| {
        let is_round = matches!(drawing.inside, Inside::Lake(_));
        let ratio = if is_round { 1.0 } else { ratio };
        let setting = Setting {
            ratio,
            axis,
            ..motion
        };
        (drawing, setting)
    })
}
