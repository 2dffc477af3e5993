//! The faces of the arrangement: which loops bound one face together, and
//! which face a place lies in.
//!
//! A loop that runs clockwise and never to infinity is the outside of an
//! island. The face around an island is found by a ray from the island's
//! outermost node in a direction that no drawn line is likely to have; the
//! face of a place by its nearest piece.

use super::arrangement::{Arrangement, HalfEdge, angle};
use super::scene::Scene;
use super::stroke::{Role, Stroke, cross, tolerance_at};
use crate::site::{EdgeShape, Point, Site, Vector};

/// The number of the face that reaches to infinity on all sides.
const EVERYWHERE: usize = usize::MAX;

/// The faces of a site's arrangement.
pub(super) struct Faces<'a> {
    site: &'a Site,
    scene: &'a Scene,
    /// The arrangement that they belong to.
    pub arrangement: Arrangement,
    /// For each loop its face, named by one of its loops.
    face_of: Vec<usize>,
}

impl<'a> Faces<'a> {
    /// Groups the loops of an arrangement.
    pub fn of(site: &'a Site, scene: &'a Scene, arrangement: Arrangement) -> Self {
        let islands: Vec<bool> = (0..arrangement.cycles.len())
            .map(|cycle| is_island(&arrangement, cycle))
            .collect();
        let around: Vec<usize> = islands
            .iter()
            .enumerate()
            .map(|(cycle, island)| {
                if *island {
                    loop_around(&arrangement, cycle)
                } else {
                    cycle
                }
            })
            .collect();
        let face_of = (0..around.len())
            .map(|cycle| root(&around, cycle))
            .collect();
        Self {
            site,
            scene,
            arrangement,
            face_of,
        }
    }

    /// The loops of a face: the one around it, if there is one, and islands.
    pub fn loops(&self, face: usize) -> (Option<usize>, Vec<usize>) {
        let of_face = self.face_of.iter().enumerate();
        let loops = of_face
            .filter(|(_, of)| **of == face)
            .map(|(cycle, _)| cycle);
        let islands = loops.filter(|cycle| *cycle != face).collect();
        ((face != EVERYWHERE).then_some(face), islands)
    }

    /// The face in which a place of the site lies.
    pub fn holding(&self, place: Point) -> usize {
        let stretched = self.scene.stretch.apply(place);
        let halves = self.arrangement.halves.iter().step_by(2).enumerate();
        let nearest = halves
            .map(|(pair, half)| {
                let (along, foot) = self.foot(half, stretched);
                ((stretched - foot).norm(), pair, half, along)
            })
            .min_by(|a, b| a.0.total_cmp(&b.0));
        let Some((_, pair, half, tip)) = nearest else {
            return EVERYWHERE;
        };
        let number = match tip {
            _ if half.stroke.role == Role::Chord && self.is_plain(tip) => {
                2 * pair + usize::from(!self.inside_circle(half.stroke.edge, place))
            }
            Some(node) => self.sector(node, stretched).unwrap_or(2 * pair),
            None => 2 * pair + usize::from(half.stroke.offset(stretched) < 0.0),
        };
        let cycle = self.arrangement.halves.get(number).map(|half| half.cycle);
        cycle
            .and_then(|cycle| self.face_of.get(cycle))
            .map_or(EVERYWHERE, |face| *face)
    }

    /// The place of a piece that is nearest to a place, and its node if it is
    /// the tip of the piece.
    fn foot(&self, half: &HalfEdge, place: Point) -> (Option<usize>, Point) {
        let from = self
            .arrangement
            .place(half.from)
            .unwrap_or(half.stroke.from);
        let line = Stroke {
            from,
            length_m: f64::INFINITY,
            ..half.stroke
        };
        let along = line.along(place);
        if along <= 0.0 {
            return (half.from, from);
        }
        match self.arrangement.place(half.to) {
            Some(to) if along >= line.along(to) => (half.to, to),
            _ => (None, line.at(along)),
        }
    }

    /// Whether no third piece ends at a node.
    fn is_plain(&self, node: Option<usize>) -> bool {
        let star = node.and_then(|node| self.arrangement.stars.get(node));
        star.is_none_or(|star| star.len() <= 2)
    }

    /// The half-edge that leaves a node with a place in the sector to its left.
    fn sector(&self, node: usize, place: Point) -> Option<usize> {
        let at = self.arrangement.place(Some(node))?;
        let star = self.arrangement.stars.get(node)?;
        let toward = angle(place - at);
        let angle_of = |number: &&usize| {
            let half = self.arrangement.halves.get(**number);
            half.is_some_and(|half| angle(half.direction) <= toward)
        };
        star.iter().rev().find(angle_of).or(star.last()).copied()
    }

    /// Whether a place lies inside a circle of the site.
    fn inside_circle(&self, edge: usize, place: Point) -> bool {
        match self.site.edges.get(edge).map(|edge| &edge.shape) {
            Some(EdgeShape::Circle { centre, radius }) => (place - centre).norm() < radius.si(),
            _ => false,
        }
    }
}

/// The loop at the end of a chain of islands.
fn root(around: &[usize], cycle: usize) -> usize {
    let mut here = cycle;
    for _ in 0..around.len() {
        match around.get(here) {
            Some(&outer) if outer != here => here = outer,
            _ => break,
        }
    }
    here
}

/// Whether a loop runs clockwise around something finite.
fn is_island(arrangement: &Arrangement, cycle: usize) -> bool {
    let mut doubled_area = 0.0;
    let mut origin = None;
    for half in arrangement.cycle(cycle) {
        let (Some(from), Some(to)) = (arrangement.place(half.from), arrangement.place(half.to))
        else {
            return false;
        };
        let origin = *origin.get_or_insert(from);
        doubled_area += cross(from - origin, to - origin);
    }
    doubled_area <= 0.0
}

/// The loop that a ray from an island's outermost node meets first.
fn loop_around(arrangement: &Arrangement, island: usize) -> usize {
    // An angle that is no simple fraction of a turn.
    let (sin, cos) = 0.739_085_133_215_160_6_f64.sin_cos();
    let direction = Vector::new(cos, sin);
    let outermost = arrangement
        .cycle(island)
        .filter_map(|half| arrangement.place(half.from))
        .max_by(|a, b| {
            direction
                .dot(&a.coords)
                .total_cmp(&direction.dot(&b.coords))
        });
    let Some(start) = outermost else {
        return EVERYWHERE;
    };
    let met = arrangement
        .halves
        .iter()
        .filter_map(|half| {
            Some((
                distance_to_crossing(arrangement, half, start, direction)?,
                half,
            ))
        })
        .min_by(|a, b| a.0.total_cmp(&b.0));
    match met {
        Some((_, half)) => half.cycle,
        None => loop_at_infinity(arrangement, direction),
    }
}

/// How far along a ray it crosses a half-edge from its left to its right.
fn distance_to_crossing(
    arrangement: &Arrangement,
    half: &HalfEdge,
    start: Point,
    direction: Vector,
) -> Option<f64> {
    let turn = cross(half.direction, direction);
    // The ray comes from the face to the left of the half-edge.
    if turn >= 0.0 {
        return None;
    }
    let side = |place: Option<Point>, sign: f64| {
        let offset = match place {
            Some(place) => cross(direction, place - start),
            None => sign * cross(direction, half.direction),
        };
        offset > 0.0
    };
    let from = arrangement.place(half.from);
    let to = arrangement.place(half.to);
    if side(from, -1.0) == side(to, 1.0) {
        return None;
    }
    let anchor = from.or(to)?;
    let distance = cross(half.direction, anchor - start) / turn;
    (distance > tolerance_at(start)).then_some(distance)
}

/// The loop whose face holds the far end of a ray.
fn loop_at_infinity(arrangement: &Arrangement, direction: Vector) -> usize {
    let toward = angle(direction);
    let rays = &arrangement.to_infinity;
    let before = rays.iter().rev().find(|(angle, _)| *angle <= toward);
    let half = before
        .or(rays.last())
        .and_then(|(_, number)| arrangement.halves.get(*number));
    half.map_or(EVERYWHERE, |half| half.cycle)
}
