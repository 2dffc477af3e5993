//! Random plans of every shape: drawn where their aquifer is isotropic and
//! its sides lie along the axes, then stretched, mirrored, turned, enlarged
//! and moved into a site.
//!
//! The drawing knows what the laws ask for (places inside, places on edges with
//! their stage or their normal) without asking the program.

use std::f64::consts::TAU;

use mirrorwell::findings::Solution;
use mirrorwell::outline::Kind::{self, FixedHead, NoFlow};
use mirrorwell::site::{
    Ambient, Anisotropy, Aquifer, Edge, EdgeKind, EdgeShape, Flux, Length, Level, MapRequest,
    Point, Rate, Site, Stage, Transmissivity, Vector, Well, WellLoss,
};
use num_complex::Complex64;
use proptest::prelude::*;

/// The shapes with a closed form.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Form {
    OpenPlane,
    HalfPlane(Kind),
    Strip([Kind; 2]),
    QuarterPlane([Kind; 2]),
    HalfStrip([Kind; 3]),
    /// Kinds of left, right, bottom and top; height over width.
    Box([Kind; 4], f64),
    Wedge([Kind; 2], f64),
    Disk,
    Lake,
}

/// Where an edge of a drawing lies.
#[derive(Clone, Debug)]
pub enum Course {
    /// What is drawn of it, and the reach in which places are looked at; free
    /// ends of the one go on straight to the other.
    Straight {
        drawn: [Complex64; 2],
        reach: [Complex64; 2],
    },
    /// A circle around zero.
    Round(f64),
}

/// An edge of a drawing.
#[derive(Clone, Debug)]
pub struct DrawnEdge {
    pub kind: Kind,
    pub course: Course,
    /// Stages at the two drawn vertices; equal where the stage is constant.
    pub stages_m: [f64; 2],
}

/// A well of a drawing.
#[derive(Clone, Copy, Debug)]
pub struct DrawnWell {
    pub at: Complex64,
    /// Q/T, metres.
    pub strength_m: f64,
    pub radius_m: f64,
}

/// A plan before it is put into a place.
#[derive(Clone, Debug)]
pub struct Drawing {
    pub form: Form,
    /// Length that everything is drawn by, metres.
    pub size_m: f64,
    pub edges: Vec<DrawnEdge>,
    pub wells: Vec<DrawnWell>,
    /// Places inside the aquifer.
    pub places: Vec<Complex64>,
    /// Positions along edges, 0 to 1.
    pub along: Vec<f64>,
    pub transmissivity_m2_d: f64,
    /// Uniform flow before pumping, where the edges leave any: ∇h.
    pub slope: Complex64,
    /// R in metres, where no river bounds the aquifer.
    pub influence_radius_m: Option<f64>,
}

/// How a drawing is put into a site.
#[derive(Clone, Copy, Debug)]
pub struct Setting {
    pub mirrored: bool,
    pub turn: f64,
    pub scale: f64,
    pub shift_m: [f64; 2],
    /// Largest over smallest conductivity.
    pub ratio: f64,
    /// Direction of the largest, radians from the drawing's x axis.
    pub axis: f64,
}

impl Setting {
    /// The drawing as it is.
    pub fn plain() -> Self {
        Self {
            mirrored: false,
            turn: 0.0,
            scale: 1.0,
            shift_m: [0.0; 2],
            ratio: 1.0,
            axis: 0.0,
        }
    }

    /// A displacement of the drawing, in the site.
    ///
    /// Lengths along the axis of the largest conductivity are longer by
    /// ratio^(1/4) than they act, across it shorter: the transformed section
    /// of Bear (1972), section 7.4, from memory.
    fn direction(&self, z: Complex64) -> Complex64 {
        let turned = z * Complex64::cis(-self.axis);
        let root = self.ratio.powf(0.25);
        let z = Complex64::new(turned.re * root, turned.im / root) * Complex64::cis(self.axis);
        let z = if self.mirrored { z.conj() } else { z };
        z * Complex64::cis(self.turn) * self.scale
    }

    /// A place of the drawing, in the site.
    pub fn place(&self, z: Complex64) -> Point {
        let z = self.direction(z);
        Point::new(z.re + self.shift_m[0], z.im + self.shift_m[1])
    }

    fn vector(&self, z: Complex64) -> Vector {
        let z = self.direction(z);
        Vector::new(z.re, z.im)
    }

    /// A gradient of the drawing, in the site: J⁻ᵀ ∇h.
    fn gradient(&self, slope: Complex64) -> Vector {
        let (x, y) = (self.vector(Complex64::ONE), self.vector(Complex64::i()));
        let jacobian = nalgebra::Matrix2::from_columns(&[x, y]);
        let inverse = jacobian.try_inverse().expect("a stretch can be undone");
        inverse.transpose() * Vector::new(slope.re, slope.im)
    }

    /// A gradient of the site, in the drawing: Jᵀ ∇h.
    pub fn gradient_of_drawing(&self, gradient: Vector) -> Complex64 {
        let (x, y) = (self.vector(Complex64::ONE), self.vector(Complex64::i()));
        Complex64::new(x.dot(&gradient), y.dot(&gradient))
    }

    pub fn anisotropy(&self) -> Option<Anisotropy> {
        if self.ratio == 1.0 {
            return None;
        }
        // The largest conductivity stays the largest under all that is done
        // to it, so its axis is an axis of the stretch.
        let axis = self.vector(Complex64::cis(self.axis));
        Some(Anisotropy {
            ratio: self.ratio,
            azimuth_deg: azimuth_deg(axis),
        })
    }

    /// The radius of a borehole's largest circle that lies within its rim:
    /// the stretch makes it an ellipse, the program a circle of the mean of
    /// the half-axes.
    pub fn surely_in_rim(&self, radius_m: f64) -> f64 {
        0.5 * (1.0 + self.ratio.powf(-0.5)) * radius_m * self.scale
    }
}

/// Degrees clockwise from grid north.
pub fn azimuth_deg(direction: Vector) -> f64 {
    direction.x.atan2(direction.y).to_degrees()
}

impl Drawing {
    pub fn has_river(&self) -> bool {
        self.edges.iter().any(|edge| edge.kind == FixedHead)
    }

    /// Barriers all round.
    pub fn is_closed(&self) -> bool {
        matches!(self.form, Form::Box(..)) && !self.has_river()
    }

    /// Σ abs(Q/T)/(2π), the scale of drawdowns, metres.
    pub fn strength_m(&self) -> f64 {
        let sum: f64 = self.wells.iter().map(|well| well.strength_m.abs()).sum();
        sum / TAU
    }

    /// The same with other wells.
    pub fn with_wells(&self, wells: Vec<DrawnWell>) -> Self {
        Self {
            wells,
            ..self.clone()
        }
    }

    /// The site, as if a plan had been read.
    pub fn site(&self, setting: &Setting) -> Site {
        let length = |metres: f64| Length::from_si(metres * setting.scale);
        let wells = self.wells.iter().enumerate().map(|(index, well)| Well {
            name: format!("PW-{}", index + 1),
            at: setting.place(well.at),
            pumping: Rate::from_si(well.strength_m * self.transmissivity_m2_d),
            radius: length(well.radius_m),
            well_loss: WellLoss::from_si(0.0),
            lowest_level: None,
            ground: None,
        });
        let mut edges: Vec<&DrawnEdge> = self.edges.iter().collect();
        edges.sort_by_key(|edge| edge.kind == NoFlow);
        Site {
            aquifer: Aquifer {
                transmissivity: Transmissivity::from_si(self.transmissivity_m2_d),
                thickness: None,
                roof: None,
                recharge: Flux::from_si(0.0),
                anisotropy: setting.anisotropy(),
                influence_radius: self.influence_radius_m.map(length),
            },
            ambient: self.ambient(setting),
            edges: edges
                .iter()
                .enumerate()
                .map(|(index, edge)| edge.site_edge(index, setting))
                .collect(),
            wells: wells.collect(),
            neighbours: Vec::new(),
            interference_share: 0.2,
            head_tolerance: Length::from_si(1e-4),
            map: MapRequest::default(),
        }
    }

    /// What must be said of the head where rivers leave it open.
    fn ambient(&self, setting: &Setting) -> Option<Ambient> {
        let slope = setting.gradient(self.slope);
        let sloping = slope.norm() > 0.0;
        (sloping || !self.has_river()).then(|| Ambient {
            head: (!self.has_river()).then(|| Level::from_si(62.0)),
            at: (!self.has_river()).then(|| setting.place(self.places[0])),
            gradient: slope.norm(),
            toward_deg: sloping.then(|| azimuth_deg(-slope)),
        })
    }

    pub fn solve(&self, setting: &Setting) -> Solution {
        Solution::of(self.site(setting)).unwrap_or_else(|refusals| {
            let texts: Vec<String> = refusals.iter().map(ToString::to_string).collect();
            panic!("refused: {}", texts.join("\n"))
        })
    }

    /// Places inside, in the site.
    pub fn places_in(&self, setting: &Setting) -> Vec<Point> {
        self.places.iter().map(|z| setting.place(*z)).collect()
    }

    /// Distance from a place to the nearest well, as the drawing measures it.
    pub fn distance_to_wells_m(&self, z: Complex64) -> f64 {
        let distances = self.wells.iter().map(|well| (well.at - z).norm());
        distances.fold(f64::INFINITY, f64::min)
    }

    /// Distance from a place inside to the nearest edge, as the drawing
    /// measures it.
    pub fn distance_to_edges_m(&self, z: Complex64) -> f64 {
        let distances = self.edges.iter().map(|edge| match edge.course {
            Course::Round(radius) => (z.norm() - radius).abs(),
            Course::Straight {
                reach: [from, to], ..
            } => {
                let axis = (to - from) / (to - from).norm();
                ((z - from) * axis.conj()).im.abs()
            }
        });
        distances.fold(f64::INFINITY, f64::min)
    }
}

impl Drawing {
    /// Distance of a place of the site from the nearest drawn vertex, metres.
    pub fn distance_to_corners_m(&self, setting: &Setting, point: Point) -> f64 {
        let vertices = self.edges.iter().flat_map(|edge| match edge.course {
            Course::Straight { drawn, .. } => drawn.to_vec(),
            Course::Round(_) => vec![],
        });
        let distances = vertices.map(|vertex| (setting.place(vertex) - point).norm());
        distances.fold(f64::INFINITY, f64::min)
    }

    /// The same with one stage on all rivers.
    pub fn level(&self) -> Self {
        let mut level = self.clone();
        let stages_m = level.edges.first().map(|edge| edge.stages_m);
        for edge in level.edges.iter_mut().skip(1) {
            edge.stages_m = stages_m.unwrap_or(edge.stages_m);
        }
        level
    }
}

impl DrawnEdge {
    fn site_edge(&self, index: usize, setting: &Setting) -> Edge {
        let [first, last] = self.stages_m;
        let stage = if first == last {
            Stage::Constant(Level::from_si(first))
        } else {
            Stage::AtVertices(vec![Level::from_si(first), Level::from_si(last)])
        };
        Edge {
            name: format!("E{}", index + 1),
            kind: match self.kind {
                FixedHead => EdgeKind::River {
                    stage,
                    bank_resistance: None,
                },
                NoFlow => EdgeKind::Barrier,
            },
            shape: match self.course {
                Course::Straight { drawn, .. } => {
                    EdgeShape::Line(drawn.iter().map(|z| setting.place(*z)).collect())
                }
                Course::Round(radius) => EdgeShape::Circle {
                    centre: setting.place(Complex64::ZERO),
                    radius: Length::from_si(radius * setting.scale),
                },
            },
        }
    }

    /// A place on it, as a share of its reach or of its circle.
    pub fn place(&self, along: f64) -> Complex64 {
        match self.course {
            Course::Straight {
                reach: [from, to], ..
            } => from + (to - from) * along,
            Course::Round(radius) => radius * Complex64::cis(TAU * along),
        }
    }

    /// A unit number square to it.
    pub fn normal(&self) -> Complex64 {
        match self.course {
            Course::Straight {
                reach: [from, to], ..
            } => Complex64::i() * (to - from) / (to - from).norm(),
            Course::Round(_) => Complex64::ONE,
        }
    }

    /// Its stage there, metres.
    pub fn stage_m(&self, place: Complex64) -> f64 {
        let [first, last] = self.stages_m;
        match self.course {
            Course::Straight {
                drawn: [from, to], ..
            } if first != last => {
                let axis = to - from;
                first + (last - first) * ((place - from) * axis.conj()).re / axis.norm_sqr()
            }
            _ => first,
        }
    }
}

/// The random numbers that a drawing is made of.
#[derive(Clone, Debug)]
struct Dice {
    form: Form,
    size_m: f64,
    wells: Vec<[f64; 4]>,
    places: Vec<[f64; 2]>,
    along: Vec<f64>,
    stages_m: [f64; 4],
    fall_m: f64,
    transmissivity_m2_d: f64,
    slope: [f64; 2],
    reach: f64,
}

fn kind() -> impl Strategy<Value = Kind> {
    prop_oneof![Just(FixedHead), Just(NoFlow)]
}

/// Every form, every kind of edge.
pub fn form() -> impl Strategy<Value = Form> {
    prop_oneof![
        1 => Just(Form::OpenPlane),
        2 => kind().prop_map(Form::HalfPlane),
        3 => [kind(), kind()].prop_map(Form::Strip),
        3 => [kind(), kind()].prop_map(Form::QuarterPlane),
        4 => [kind(), kind(), kind()].prop_map(Form::HalfStrip),
        6 => ([kind(), kind(), kind(), kind()], 0.15..6.0_f64).prop_map(|(k, a)| Form::Box(k, a)),
        4 => ([kind(), kind()], 0.3..(TAU - 0.1))
            .prop_map(|(kinds, angle)| Form::Wedge(kinds, angle)),
        1 => Just(Form::Disk),
        1 => Just(Form::Lake),
    ]
}

/// Every drawing: 1 to 8 wells, 12 places.
pub fn drawing() -> impl Strategy<Value = Drawing> {
    drawing_of(form())
}

/// Drawings with a river.
pub fn drawing_with_river() -> impl Strategy<Value = Drawing> {
    drawing().prop_filter("a river", Drawing::has_river)
}

pub fn drawing_of(form: impl Strategy<Value = Form>) -> impl Strategy<Value = Drawing> {
    let pair = || [0.0..1.0_f64, 0.0..1.0_f64];
    let rate = prop_oneof![0.02..4.0_f64, -4.0..-0.02_f64];
    let well =
        (0.0..1.0_f64, 0.0..1.0_f64, rate, 0.05..0.3_f64).prop_map(|(u, v, q, r)| [u, v, q, r]);
    let numbers = (
        50.0_f64.ln()..3000.0_f64.ln(),
        10.0_f64.ln()..3000.0_f64.ln(),
        1.5..5.0_f64,
        prop_oneof![Just(0.0), -3.0..3.0_f64],
    );
    let levels = (
        proptest::array::uniform4(40.0..80.0_f64),
        prop_oneof![Just([0.0, 0.0]), [-4e-3..4e-3_f64, -4e-3..4e-3_f64]],
    );
    (
        form,
        numbers,
        levels,
        proptest::collection::vec(well, 1..=8),
        proptest::collection::vec(pair(), 12),
        proptest::collection::vec(0.02..0.98_f64, 3),
    )
        .prop_map(
            |(
                form,
                (size, transmissivity, reach, fall_m),
                (stages_m, slope),
                wells,
                places,
                along,
            )| {
                Dice {
                    form,
                    size_m: size.exp(),
                    wells,
                    places,
                    along,
                    stages_m,
                    fall_m,
                    transmissivity_m2_d: transmissivity.exp(),
                    slope,
                    reach,
                }
                .drawing()
            },
        )
}

/// Any setting without anisotropy.
pub fn motion() -> impl Strategy<Value = Setting> {
    (
        any::<bool>(),
        0.0..TAU,
        prop_oneof![Just(1.0), 0.3..4.0_f64],
        [-5e3..5e3_f64, -5e3..5e3_f64],
    )
        .prop_map(|(mirrored, turn, scale, shift_m)| Setting {
            mirrored,
            turn,
            scale,
            shift_m,
            ..Setting::plain()
        })
}

/// Any drawing of a form in any setting; circles stay isotropic, as the closed
/// form of a circle needs.
pub fn case_of(
    drawing: impl Strategy<Value = Drawing>,
) -> impl Strategy<Value = (Drawing, Setting)> {
    let stretch = prop_oneof![Just((1.0, 0.0)), (1.01..12.0_f64, 0.0..TAU)];
    (drawing, motion(), stretch).prop_map(|(drawing, motion, (ratio, axis))| {
        let round = matches!(drawing.form, Form::Disk | Form::Lake);
        let ratio = if round { 1.0 } else { ratio };
        let setting = Setting {
            ratio,
            axis,
            ..motion
        };
        (drawing, setting)
    })
}

impl Dice {
    fn drawing(self) -> Drawing {
        let count = self.wells.len();
        let mut wells: Vec<DrawnWell> = self
            .wells
            .iter()
            .enumerate()
            .map(|(index, &[u, v, strength_m, radius_m])| DrawnWell {
                // Each in its own column, a twentieth of the size apart.
                at: self.inside((index as f64 + 0.2 + 0.6 * u) / count as f64, v),
                strength_m,
                radius_m,
            })
            .collect();
        let edges = self.edges();
        let river = edges.iter().any(|edge| edge.kind == FixedHead);
        let closed = matches!(self.form, Form::Box(..)) && !river;
        if closed {
            // Barriers all round need a balance; a well alone stands still.
            let others: f64 = wells.iter().skip(1).map(|well| well.strength_m).sum();
            wells[0].strength_m = -others;
        }
        Drawing {
            form: self.form,
            size_m: self.size_m,
            edges,
            wells,
            places: self
                .places
                .iter()
                .map(|&[u, v]| self.inside(u, v))
                .collect(),
            along: self.along.clone(),
            transmissivity_m2_d: self.transmissivity_m2_d,
            slope: self.free_slope(),
            influence_radius_m: (!river && !closed).then_some(self.reach * self.size_m),
        }
    }

    /// A place inside, from two numbers between 0 and 1.
    fn inside(&self, u: f64, v: f64) -> Complex64 {
        let (u, v) = (0.08 + 0.84 * u, 0.08 + 0.84 * v);
        let unit = match self.form {
            Form::Box(_, aspect) => Complex64::new(u, aspect * v),
            Form::Wedge(_, angle) => Complex64::from_polar(0.25 + u, angle * v),
            Form::Disk => Complex64::from_polar(u, TAU * v),
            Form::Lake => Complex64::from_polar(1.0 + 2.0 * u, TAU * v),
            _ => Complex64::new(u, v),
        };
        self.size_m * unit
    }

    /// An edge along one of the axes or of a wedge's sides.
    fn edge(
        &self,
        kind: Kind,
        number: usize,
        drawn: [Complex64; 2],
        reach: [Complex64; 2],
    ) -> DrawnEdge {
        DrawnEdge {
            kind,
            course: Course::Straight {
                drawn: drawn.map(|z| self.size_m * z),
                reach: reach.map(|z| self.size_m * z),
            },
            stages_m: [self.stages_m[number]; 2],
        }
    }

    fn edges(&self) -> Vec<DrawnEdge> {
        let z = Complex64::new;
        let free = |kind, number, at: Complex64, axis: Complex64| {
            self.edge(
                kind,
                number,
                [at + 0.2 * axis, at + 0.9 * axis],
                [at - 1.5 * axis, at + 2.5 * axis],
            )
        };
        // From a corner on.
        let from = |kind, number, at: Complex64, axis: Complex64| {
            self.edge(kind, number, [at, at + 0.7 * axis], [at, at + 2.5 * axis])
        };
        let between = |kind, number, a, b| self.edge(kind, number, [a, b], [a, b]);
        let (x, y) = (z(1.0, 0.0), z(0.0, 1.0));
        match self.form {
            Form::OpenPlane => vec![],
            Form::HalfPlane(kind) => {
                let mut edge = free(kind, 0, z(0.0, 0.0), y);
                if kind == FixedHead && self.slope == [0.0, 0.0] {
                    edge.stages_m[1] += self.fall_m;
                }
                vec![edge]
            }
            Form::Strip([low, high]) => {
                vec![free(low, 0, z(0.0, 0.0), y), free(high, 1, x, y)]
            }
            Form::QuarterPlane([left, bottom]) => vec![
                from(left, 0, z(0.0, 0.0), y),
                from(bottom, 1, z(0.0, 0.0), x),
            ],
            Form::HalfStrip([left, right, bottom]) => vec![
                from(left, 0, z(0.0, 0.0), y),
                from(right, 1, x, y),
                between(bottom, 2, z(0.0, 0.0), x),
            ],
            Form::Box([left, right, bottom, top], aspect) => {
                let corner = z(1.0, aspect);
                let (right_foot, left_top) = (z(1.0, 0.0), z(0.0, aspect));
                vec![
                    between(left, 0, z(0.0, 0.0), left_top),
                    between(right, 1, right_foot, corner),
                    between(bottom, 2, z(0.0, 0.0), right_foot),
                    between(top, 3, left_top, corner),
                ]
            }
            Form::Wedge([first, second], angle) => vec![
                from(first, 0, z(0.0, 0.0), x),
                from(second, 1, z(0.0, 0.0), Complex64::cis(angle)),
            ],
            Form::Disk | Form::Lake => vec![DrawnEdge {
                kind: FixedHead,
                course: Course::Round(self.size_m),
                stages_m: [self.stages_m[0]; 2],
            }],
        }
    }

    /// The part of the random slope that the edges leave free.
    fn free_slope(&self) -> Complex64 {
        let [a, b] = self.slope;
        match self.form {
            Form::OpenPlane | Form::Lake => Complex64::new(a, b),
            Form::HalfPlane(FixedHead) | Form::QuarterPlane([FixedHead, NoFlow]) => {
                Complex64::new(a, 0.0)
            }
            Form::HalfPlane(NoFlow)
            | Form::Strip([NoFlow, NoFlow])
            | Form::QuarterPlane([NoFlow, FixedHead])
            | Form::HalfStrip([NoFlow, NoFlow, FixedHead]) => Complex64::new(0.0, b),
            _ => Complex64::ZERO,
        }
    }
}
