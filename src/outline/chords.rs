//! The chords of all circles of a site, cut where other edges meet them.

use super::circle::{Circle, Course};
use super::frame::Stretch;
use super::scene::{edge_places, neighbour_places};
use super::stroke::{Role, Stroke, TOUCH_M};
use crate::site::{EdgeShape, Place, Point, Site};

/// Adds the chords of every circle to its edge's strokes; none if its radius
/// is nothing. `joined` says which ends of lines are not carried on.
pub(super) fn add(
    site: &Site,
    stretch: &Stretch,
    joined: &[[bool; 2]],
    of_edges: &mut [Vec<Stroke>],
) {
    let circles: Vec<(usize, Circle)> = site
        .edges
        .iter()
        .enumerate()
        .filter_map(|(index, edge)| Some((index, circle(&edge.shape)?)))
        .collect();
    if circles.is_empty() {
        return;
    }
    let courses = courses(stretch, joined, of_edges);
    let places = places(site);
    for (index, circle) in &circles {
        let of_courses = courses
            .iter()
            .flat_map(|course| circle.met_by_course(course));
        let of_circles = circles
            .iter()
            .filter(|other| other.0 != *index)
            .flat_map(|other| circle.met_by_circle(&other.1));
        let of_places = places
            .iter()
            .filter_map(|place| circle.met_by_place(*place));
        let met: Vec<f64> = of_courses.chain(of_circles).chain(of_places).collect();
        let corners = circle.corners(&met);
        let corners: Vec<Point> = corners.into_iter().map(|at| stretch.apply(at)).collect();
        let following = corners.iter().cycle().skip(1);
        let chords = corners.iter().zip(following);
        let chords = chords.map(|(a, b)| Stroke::between(*index, Role::Chord, (0, 0), [*a, *b]));
        if let Some(strokes) = of_edges.get_mut(*index) {
            strokes.extend(chords);
        }
    }
}

fn circle(shape: &EdgeShape) -> Option<Circle> {
    match shape {
        EdgeShape::Circle { centre, radius } if radius.si() > TOUCH_M => Some(Circle {
            centre: *centre,
            radius_m: radius.si(),
        }),
        _ => None,
    }
}

/// All drawn strokes, those with a free end carried on without end, in site
/// coordinates.
fn courses(stretch: &Stretch, joined: &[[bool; 2]], of_edges: &[Vec<Stroke>]) -> Vec<Course> {
    let mut courses = Vec::new();
    for (strokes, joined) in of_edges.iter().zip(joined) {
        let in_site = |stroke: &Stroke| {
            let from = stretch.undo(stroke.from);
            let step = stretch.undo(stroke.at(1.0)) - from;
            Course {
                from,
                direction: step.normalize(),
                length_m: stroke.length_m * step.norm(),
            }
        };
        courses.extend(strokes.iter().map(in_site));
        let [first_joined, last_joined] = *joined;
        if let Some(first) = strokes.first().filter(|_| !first_joined) {
            let course = in_site(first);
            courses.push(Course {
                direction: -course.direction,
                length_m: f64::INFINITY,
                ..course
            });
        }
        if let Some(last) = strokes.last().filter(|_| !last_joined) {
            courses.push(Course {
                length_m: f64::INFINITY,
                ..in_site(last)
            });
        }
    }
    courses
}

/// Every vertex of a line, well and neighbour.
fn places(site: &Site) -> Vec<Point> {
    let lines = site
        .edges
        .iter()
        .filter(|edge| matches!(edge.shape, EdgeShape::Line(_)));
    let mut places: Vec<Point> = lines.flat_map(|edge| edge_places(&edge.shape)).collect();
    places.extend(site.wells.iter().map(|well| well.at));
    for neighbour in &site.neighbours {
        if let Place::At(_) = neighbour.place {
            places.extend(neighbour_places(&neighbour.place));
        }
    }
    places
}
