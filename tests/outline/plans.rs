//! Sites made of a few lines, for the tests.

use mirrorwell::outline::{Outline, find};
use mirrorwell::site::{
    Aquifer, Edge, EdgeKind, EdgeShape, Flux, Length, Level, MapRequest, Neighbour, Place, Point,
    Rate, Refusal, Site, Stage, Time, Transmissivity, Well, WellLoss,
};

/// A site with wells of radius 0.2 m at some places and no edge.
pub fn site(wells: &[(f64, f64)]) -> Site {
    let wells = wells.iter().enumerate().map(|(index, at)| Well {
        name: format!("PW-{}", index + 1),
        at: Point::new(at.0, at.1),
        pumping: Rate::from_si(1000.0),
        radius: Length::from_si(0.2),
        well_loss: WellLoss::from_si(0.0),
        lowest_level: None,
        ground: None,
    });
    Site {
        aquifer: Aquifer {
            transmissivity: Transmissivity::from_si(500.0),
            thickness: None,
            roof: None,
            recharge: Flux::from_si(0.0),
            anisotropy: None,
            influence_radius: None,
        },
        ambient: None,
        edges: Vec::new(),
        wells: wells.collect(),
        neighbours: Vec::new(),
        interference_share: 0.2,
        head_tolerance: Length::from_si(1e-4),
        map: MapRequest::default(),
    }
}

pub fn points(places: &[(f64, f64)]) -> Vec<Point> {
    places.iter().map(|at| Point::new(at.0, at.1)).collect()
}

fn edge(name: &str, kind: EdgeKind, shape: EdgeShape) -> Edge {
    Edge {
        name: name.to_owned(),
        kind,
        shape,
    }
}

fn water(stage: Stage) -> EdgeKind {
    EdgeKind::River {
        stage,
        bank_resistance: None,
    }
}

pub trait With: Sized {
    fn river(self, name: &str, line: &[(f64, f64)]) -> Self;
    fn falling_river(self, name: &str, line: &[(f64, f64)], stages: &[f64]) -> Self;
    fn barrier(self, name: &str, line: &[(f64, f64)]) -> Self;
    fn lake(self, name: &str, centre: (f64, f64), radius: f64) -> Self;
    fn round_barrier(self, name: &str, centre: (f64, f64), radius: f64) -> Self;
    /// Gives the rivers of a name a bank resistance, days.
    fn clogged(self, name: &str, days: f64) -> Self;
    fn neighbour(self, name: &str, at: (f64, f64)) -> Self;
    fn property(self, name: &str, corners: &[(f64, f64)]) -> Self;
}

impl With for Site {
    fn river(mut self, name: &str, line: &[(f64, f64)]) -> Self {
        let kind = water(Stage::Constant(Level::from_si(61.0)));
        self.edges
            .push(edge(name, kind, EdgeShape::Line(points(line))));
        self
    }

    fn falling_river(mut self, name: &str, line: &[(f64, f64)], stages: &[f64]) -> Self {
        let stages = stages.iter().map(|stage| Level::from_si(*stage)).collect();
        let kind = water(Stage::AtVertices(stages));
        self.edges
            .push(edge(name, kind, EdgeShape::Line(points(line))));
        self
    }

    fn barrier(mut self, name: &str, line: &[(f64, f64)]) -> Self {
        let shape = EdgeShape::Line(points(line));
        self.edges.push(edge(name, EdgeKind::Barrier, shape));
        self
    }

    fn lake(mut self, name: &str, centre: (f64, f64), radius: f64) -> Self {
        let shape = EdgeShape::Circle {
            centre: Point::new(centre.0, centre.1),
            radius: Length::from_si(radius),
        };
        let kind = water(Stage::Constant(Level::from_si(61.0)));
        self.edges.push(edge(name, kind, shape));
        self
    }

    fn round_barrier(mut self, name: &str, centre: (f64, f64), radius: f64) -> Self {
        self = self.lake(name, centre, radius);
        if let Some(edge) = self.edges.last_mut() {
            edge.kind = EdgeKind::Barrier;
        }
        self
    }

    fn clogged(mut self, name: &str, days: f64) -> Self {
        for edge in self.edges.iter_mut().filter(|edge| edge.name == name) {
            if let EdgeKind::River {
                bank_resistance, ..
            } = &mut edge.kind
            {
                *bank_resistance = Some(Time::from_si(days));
            }
        }
        self
    }

    fn neighbour(mut self, name: &str, at: (f64, f64)) -> Self {
        self.neighbours.push(Neighbour {
            name: name.to_owned(),
            place: Place::At(Point::new(at.0, at.1)),
            allowed_drawdown: None,
        });
        self
    }

    fn property(mut self, name: &str, corners: &[(f64, f64)]) -> Self {
        self.neighbours.push(Neighbour {
            name: name.to_owned(),
            place: Place::Area(points(corners)),
            allowed_drawdown: None,
        });
        self
    }
}

/// The only outline of a site.
pub fn only(site: &Site) -> Outline {
    let mut outlines = find(site).unwrap_or_else(|refusals| panic!("refused: {refusals:?}"));
    assert_eq!(outlines.len(), 1, "one aquifer expected");
    outlines.remove(0)
}

/// The refusals of a site, each as one text.
pub fn refusals(site: &Site) -> Vec<String> {
    refused(site).iter().map(ToString::to_string).collect()
}

/// The refusals of a site.
pub fn refused(site: &Site) -> Vec<Refusal> {
    match find(site) {
        Ok(outlines) => panic!("not refused: {outlines:?}"),
        Err(refusals) => refusals,
    }
}

/// The text of the only refusal.
pub fn only_refusal(site: &Site) -> String {
    let refusals = refusals(site);
    assert_eq!(refusals.len(), 1, "one refusal expected: {refusals:#?}");
    refusals.concat()
}
