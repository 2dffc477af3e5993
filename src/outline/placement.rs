//! Puts wells and neighbours into the faces, and refuses those that lie on an
//! edge or where no well can reach.

use std::collections::BTreeSet;

use super::error::OutlineError;
use super::faces::Faces;
use super::names;
use super::recognise::{self, Context};
use super::scene::Scene;
use super::stroke::{Role, Stroke, TOUCH_M, contacts};
use super::{Naming, Outline};
use crate::site::{EdgeShape, Place, Point, Site};

/// The outlines of all faces with wells, with everything in its place.
pub(super) fn outlines(
    site: &Site,
    scene: &Scene,
    strokes: &[Stroke],
    faces: &Faces<'_>,
    naming: Naming,
) -> Result<Vec<Outline>, Vec<OutlineError>> {
    let edges = Edges::of(site, scene, strokes);
    let mut placement = Placement {
        site,
        faces,
        edges,
        groups: Vec::new(),
        errors: Vec::new(),
    };
    placement.place_wells();
    let mut outlines = Vec::new();
    for (face, wells) in &placement.groups {
        let context = Context {
            site,
            scene,
            wells,
            naming,
        };
        match recognise::outline(context, faces, *face) {
            Ok(outline) => outlines.push(outline),
            Err(errors) => placement.errors.extend(errors),
        }
    }
    let neighbours = placement.place_neighbours();
    let errors = placement.errors;
    if !errors.is_empty() {
        return Err(errors);
    }
    for (outline, neighbours) in outlines.iter_mut().zip(neighbours) {
        outline.neighbours = neighbours;
    }
    Ok(outlines)
}

/// The edges with their extensions, in site coordinates.
struct Edges<'a> {
    site: &'a Site,
    strokes: Vec<Stroke>,
}

impl<'a> Edges<'a> {
    fn of(site: &'a Site, scene: &Scene, strokes: &[Stroke]) -> Self {
        let undone = strokes.iter().map(|stroke| {
            let from = scene.stretch.undo(stroke.from);
            let one_on = scene.stretch.undo(stroke.at(1.0));
            let scale = (one_on - from).norm();
            Stroke {
                from,
                direction: (one_on - from) / scale,
                length_m: stroke.length_m * scale,
                ..*stroke
            }
        });
        Self {
            site,
            strokes: undone.collect(),
        }
    }

    /// The nearest edge of a place and its distance, metres.
    fn nearest(&self, place: Point) -> Option<(f64, usize)> {
        let of_strokes = self
            .strokes
            .iter()
            .filter(|stroke| stroke.role != Role::Chord)
            .map(|stroke| (stroke.distance(place), stroke.edge));
        let of_circles = self
            .site
            .edges
            .iter()
            .enumerate()
            .filter_map(|(index, edge)| {
                let EdgeShape::Circle { centre, radius } = &edge.shape else {
                    return None;
                };
                Some((((place - centre).norm() - radius.si()).abs(), index))
            });
        of_strokes
            .chain(of_circles)
            .min_by(|a, b| a.0.total_cmp(&b.0))
    }

    /// Where the way from one place to another meets edges: the share of the
    /// way, and the edge.
    fn met_between(&self, from: Point, to: Point) -> Vec<(f64, usize)> {
        if from == to {
            return Vec::new();
        }
        let way = Stroke {
            heading: usize::MAX,
            ..Stroke::between(0, Role::Given, (0, 0), [from, to])
        };
        let mut met: Vec<(f64, usize)> = self
            .strokes
            .iter()
            .flat_map(|stroke| {
                let touching = contacts(&way, stroke);
                touching
                    .into_iter()
                    .map(|contact| (contact.on_first, stroke.edge))
            })
            .map(|(along, edge)| (along / way.length_m, edge))
            .collect();
        met.sort_by(|a, b| a.0.total_cmp(&b.0));
        met
    }
}

/// The work of placing.
struct Placement<'a> {
    site: &'a Site,
    faces: &'a Faces<'a>,
    edges: Edges<'a>,
    /// Each face that holds wells, with them, in order of the first.
    groups: Vec<(usize, Vec<usize>)>,
    errors: Vec<OutlineError>,
}

impl Placement<'_> {
    fn place_wells(&mut self) {
        for (index, well) in self.site.wells.iter().enumerate() {
            if let Some(error) = self.well_on_edge(index) {
                self.errors.push(error);
                continue;
            }
            let face = self.faces.holding(well.at);
            match self.groups.iter_mut().find(|(known, _)| *known == face) {
                Some((_, wells)) => wells.push(index),
                None => self.groups.push((face, vec![index])),
            }
        }
    }

    /// A well that lies on an edge or whose rim crosses one.
    fn well_on_edge(&self, index: usize) -> Option<OutlineError> {
        let well = self.site.wells.get(index)?;
        let (distance_m, edge) = self.edges.nearest(well.at)?;
        let edge = names::edge(self.site, edge);
        let distance = names::length(distance_m);
        if distance_m <= TOUCH_M {
            return Some(OutlineError::OnEdge {
                part: names::well(self.site, index),
                edge,
                distance,
            });
        }
        (distance_m < well.radius.si()).then(|| OutlineError::RimCrossesEdge {
            well: names::well(self.site, index),
            edge,
            distance,
            radius: names::length(well.radius.si()),
        })
    }

    /// The neighbours of each group.
    fn place_neighbours(&mut self) -> Vec<Vec<usize>> {
        let mut of_groups = vec![Vec::new(); self.groups.len()];
        if self.groups.is_empty() {
            return of_groups;
        }
        for (index, neighbour) in self.site.neighbours.iter().enumerate() {
            let placed = match &neighbour.place {
                Place::At(point) => self.group_of_point(index, *point),
                Place::Area(corners) => self.group_of_area(index, corners),
            };
            match placed {
                Ok(group) => of_groups
                    .get_mut(group)
                    .into_iter()
                    .for_each(|of| of.push(index)),
                Err(error) => self.errors.push(*error),
            }
        }
        of_groups
    }

    fn group(&self, face: usize) -> Option<usize> {
        self.groups.iter().position(|(known, _)| *known == face)
    }

    fn group_of_point(&self, index: usize, point: Point) -> Result<usize, Box<OutlineError>> {
        if let Some((distance_m, edge)) = self.edges.nearest(point)
            && distance_m <= TOUCH_M
        {
            return Err(Box::new(OutlineError::OnEdge {
                part: names::neighbour(self.site, index),
                edge: names::edge(self.site, edge),
                distance: names::length(distance_m),
            }));
        }
        self.group(self.faces.holding(point))
            .ok_or_else(|| Box::new(self.other_bank(index, point)))
    }

    /// The aquifer that an area lies in: that of its corners, of the pieces
    /// of its boundary between edges, or of the wells inside it.
    fn group_of_area(&self, index: usize, corners: &[Point]) -> Result<usize, Box<OutlineError>> {
        let mut places = Vec::new();
        for (from, to) in corners.iter().zip(corners.iter().cycle().skip(1)) {
            let met = self.edges.met_between(*from, *to);
            let shares = || {
                std::iter::once(0.0)
                    .chain(met.iter().map(|at| at.0))
                    .chain([1.0])
            };
            let middles = shares().zip(shares().skip(1)).map(|(a, b)| 0.5 * (a + b));
            places.push(*from);
            places.extend(middles.map(|share| from + (to - from) * share));
        }
        let wells = self.site.wells.iter().map(|well| well.at);
        places.extend(wells.filter(|well| lies_inside(*well, corners)));
        let groups: BTreeSet<usize> = places
            .iter()
            .filter(|place| {
                self.edges
                    .nearest(**place)
                    .is_none_or(|near| near.0 > TOUCH_M)
            })
            .filter_map(|place| self.group(self.faces.holding(*place)))
            .collect();
        let mut groups = groups.into_iter();
        match (groups.next(), groups.next()) {
            (Some(group), None) => Ok(group),
            (Some(first), Some(second)) => Err(Box::new(self.across(index, first, second))),
            (None, _) => {
                let corner = corners.first().copied().unwrap_or(Point::origin());
                Err(Box::new(self.other_bank(index, corner)))
            }
        }
    }

    /// A neighbour beyond an edge; the edge is the first on the way to the
    /// nearest well.
    fn other_bank(&self, index: usize, place: Point) -> OutlineError {
        let wells = self.site.wells.iter().map(|well| well.at);
        let nearest = wells.min_by(|a, b| (a - place).norm().total_cmp(&(b - place).norm()));
        let met = nearest.map_or_else(Vec::new, |well| self.edges.met_between(place, well));
        let first = met.first().map(|at| at.1);
        let edge = first.or_else(|| self.edges.nearest(place).map(|near| near.1));
        OutlineError::OtherBank {
            neighbour: names::neighbour(self.site, index),
            edge: names::edge(self.site, edge.unwrap_or(0)),
        }
    }

    /// An area in two aquifers that both hold wells.
    fn across(&self, index: usize, first: usize, second: usize) -> OutlineError {
        let well = |group: usize| {
            let wells = self.groups.get(group).map(|(_, wells)| wells);
            wells.and_then(|wells| wells.first()).copied().unwrap_or(0)
        };
        let (first, second) = (well(first), well(second));
        let at = |well: usize| self.site.wells.get(well).map(|well| well.at);
        let met = match (at(first), at(second)) {
            (Some(from), Some(to)) => self.edges.met_between(from, to),
            _ => Vec::new(),
        };
        let edge = met.first().map_or(0, |at| at.1);
        OutlineError::AcrossAquifers {
            neighbour: names::neighbour(self.site, index),
            first: names::well(self.site, first),
            second: names::well(self.site, second),
            edge: names::edge(self.site, edge),
        }
    }
}

/// Whether a place lies inside a simple polygon.
fn lies_inside(place: Point, corners: &[Point]) -> bool {
    let sides = corners.iter().zip(corners.iter().cycle().skip(1));
    let crossings = sides.filter(|(a, b)| {
        let spans = (a.y > place.y) != (b.y > place.y);
        spans && place.x < a.x + (place.y - a.y) / (b.y - a.y) * (b.x - a.x)
    });
    crossings.count() % 2 == 1
}
