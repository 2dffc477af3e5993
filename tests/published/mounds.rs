//! The mound that recharge builds, against textbook parabolas and tables.
//!
//! Sources: Bear (1979), *Hydraulics of Groundwater*, from memory, for the
//! parabolas; `tests/references/recharge.py` for all others: eigenfunctions
//! summed by mpmath to 40 digits.

use mirrorwell::field::WellField;
use mirrorwell::outline::find;
use mirrorwell::site::{
    Aquifer, Edge, EdgeKind, EdgeShape, Flux, Length, Level, MapRequest, Point, Rate, Site, Stage,
    Transmissivity, Well, WellLoss,
};

use crate::table::rows;

/// Rises are at most W²/8 with W ≤ 14 m; `recharge` promises 1e-14 W², and the
/// frame's rounding moves places by 1e-15 of their size where slopes are below W.
const TOLERANCE: f64 = 4e-12;

/// An outline with T = 500 m²/d and as much recharge, so that N/T = 1/m; its
/// sides are edges of the same number, of stage 0, and one well stands idle.
#[derive(Clone)]
pub struct Drawn {
    kinds: String,
    sizes: [f64; 2],
    /// A side that is drawn in three rivers, and where the middle one lies.
    split: Option<(usize, [f64; 2])>,
}

impl Drawn {
    pub fn new(x_kinds: &str, a: f64, y_kinds: &str, b: f64) -> Self {
        Self {
            kinds: format!("{x_kinds}{y_kinds}"),
            sizes: [a, b],
            split: None,
        }
    }

    /// The ends of a side, drawn away from the origin.
    fn ends(&self, side: usize) -> [Point; 2] {
        let [a, b] = self.sizes;
        match side {
            0 => [Point::new(0.0, 0.0), Point::new(0.0, b)],
            1 => [Point::new(a, 0.0), Point::new(a, b)],
            2 => [Point::new(0.0, 0.0), Point::new(a, 0.0)],
            _ => [Point::new(0.0, b), Point::new(a, b)],
        }
    }

    fn edges(&self) -> Vec<Edge> {
        let mut edges = Vec::new();
        let mut pieces = Vec::new();
        for (side, kind) in self.kinds.chars().enumerate() {
            let ends = self.ends(side);
            match self.split {
                Some((split, [from, to])) if split == side => {
                    let along = (ends[1] - ends[0]).normalize();
                    let [from, to] = [from, to].map(|at| ends[0] + along * at);
                    edges.push(river_or_barrier(kind, [from, to]));
                    pieces.push((kind, [ends[0], from]));
                    pieces.push((kind, [to, ends[1]]));
                }
                _ => edges.push(river_or_barrier(kind, ends)),
            }
        }
        edges.extend(
            pieces
                .into_iter()
                .map(|(kind, ends)| river_or_barrier(kind, ends)),
        );
        edges
    }

    pub fn site(&self) -> Site {
        site(
            self.edges(),
            Point::new(0.4 * self.sizes[0], 0.6 * self.sizes[1]),
        )
    }
}

fn river_or_barrier(kind: char, ends: [Point; 2]) -> Edge {
    Edge {
        name: String::new(),
        kind: if kind == 'D' {
            river()
        } else {
            EdgeKind::Barrier
        },
        shape: EdgeShape::Line(ends.to_vec()),
    }
}

fn river() -> EdgeKind {
    EdgeKind::River {
        stage: Stage::Constant(Level::from_si(0.0)),
        bank_resistance: None,
    }
}

fn site(edges: Vec<Edge>, well: Point) -> Site {
    Site {
        aquifer: Aquifer {
            transmissivity: Transmissivity::from_si(500.0),
            thickness: None,
            roof: None,
            recharge: Flux::from_si(500.0),
            anisotropy: None,
            influence_radius: None,
        },
        ambient: None,
        edges,
        wells: vec![Well {
            name: "idle".to_owned(),
            at: well,
            pumping: Rate::from_si(0.0),
            radius: Length::from_si(1e-6),
            well_loss: WellLoss::from_si(0.0),
            lowest_level: None,
            ground: None,
        }],
        neighbours: Vec::new(),
        interference_share: 0.2,
        head_tolerance: Length::from_si(1e-4),
        map: MapRequest::default(),
    }
}

fn solved(site: &Site) -> WellField {
    let outlines = find(site).expect("the outline is found");
    let [outline] = <[_; 1]>::try_from(outlines).expect("one aquifer");
    WellField::solve(site, outline).expect("the outline drains")
}

pub fn solve(drawn: &Drawn) -> WellField {
    solved(&drawn.site())
}

#[test]
fn the_mound_and_its_drains_are_those_of_the_eigenfunction_series() {
    let rows = rows("recharge");
    assert!(rows.len() >= 189, "{}", rows.len());
    for row in rows {
        let (from, to) = (row.number("from"), row.number("to"));
        let side = row.number("side") as usize;
        let mut drawn = Drawn::new(
            row.text("x_kinds"),
            row.number("x_width"),
            row.text("y_kinds"),
            row.number("y_width"),
        );
        drawn.split = Some((side, [from, to]));
        let field = solve(&drawn);
        let at = Point::new(row.number("x"), row.number("y"));
        let slope = field.head_gradient(at);
        let drained = field.recharge_to_m3_d(side).expect("the reach ends") / 500.0;
        for (what, ours, column) in [
            ("rise", field.ambient_head_m(at), "rise"),
            ("slope x", slope.x, "slope_x"),
            ("slope y", slope.y, "slope_y"),
            ("area", drained, "area"),
        ] {
            let theirs = row.number(column);
            assert!(
                (ours - theirs).abs() <= TOLERANCE,
                "{} {:?}: {what} = {ours}, table {theirs}",
                drawn.kinds,
                drawn.sizes
            );
        }
    }
}

#[test]
fn parabolas_of_the_textbooks_are_met() {
    for (kinds, form) in [
        ("DD", (|x: f64| 0.5 * x * (3.0 - x)) as fn(f64) -> f64),
        ("DN", |x| 0.5 * x * (6.0 - x)),
        ("ND", |x| 0.5 * (3.0 - x) * (3.0 + x)),
    ] {
        for (across, size) in [("", 2.0), ("N", 2.0), ("NN", 2.0), ("NN", 20.0)] {
            let field = solve(&Drawn::new(kinds, 3.0, across, size));
            for x in [0.0, 0.3, 1.5, 2.9, 3.0] {
                let ours = field.ambient_head_m(Point::new(x, 1.25));
                assert!(
                    (ours - form(x)).abs() < 1e-14 * 36.0,
                    "{kinds} {across}: {ours}"
                );
            }
        }
    }
}

#[test]
fn within_a_round_river_the_mound_is_a_quarter_of_the_power_of_the_place() {
    let circle = EdgeShape::Circle {
        centre: Point::new(1.0, 2.0),
        radius: Length::from_si(3.0),
    };
    let edge = Edge {
        name: String::new(),
        kind: river(),
        shape: circle,
    };
    let field = solved(&site(vec![edge], Point::new(1.5, 2.0)));
    let ours = field.ambient_head_m(Point::new(1.0, 4.0));
    assert!((ours - 0.25 * (9.0 - 4.0)).abs() < 1e-14, "{ours}");
    let slope = field.head_gradient(Point::new(1.0, 4.0));
    assert!((slope.y + 1.0).abs() < 1e-14 && slope.x.abs() < 1e-14);
    let drained = field.recharge_to_m3_d(0).expect("a circle ends");
    assert!((drained - 500.0 * 9.0 * std::f64::consts::PI).abs() < 1e-10);
}

/// A strip's rivers take up recharge without end.
#[test]
fn an_endless_reach_takes_up_endless_recharge() {
    let field = solve(&Drawn::new("DN", 3.0, "", 2.0));
    assert_eq!(field.recharge_to_m3_d(0), None);
    assert_eq!(field.recharge_to_m3_d(1), Some(0.0));
}

/// `find` refuses them too; a field may be given an outline found without the
/// recharge.
#[test]
fn outlines_that_cannot_drain_recharge_are_refused_by_a_field_too() {
    for (kinds, across, name) in [
        ("NN", "", "the strip"),
        ("NN", "D", "the half-strip"),
        ("NN", "NN", "barriers close"),
    ] {
        let site = Drawn::new(kinds, 3.0, across, 2.0).site();
        assert!(find(&site).is_err());
        let mut dry = site.clone();
        dry.aquifer.recharge = Flux::from_si(0.0);
        let outline = find(&dry).expect("the outline is found").remove(0);
        let refused = WellField::solve(&site, outline)
            .err()
            .expect("it is refused");
        let text = refused[0].to_string();
        assert!(
            text.contains(name) && text.contains("cannot drain"),
            "{text}"
        );
        assert_eq!(
            refused[0].subject,
            mirrorwell::site::Subject::Aquifer(Some("recharge"))
        );
    }
}
