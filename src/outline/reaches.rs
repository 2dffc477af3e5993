//! Rivers cut into their straight reaches: between the vertices that the plan
//! draws, and beyond its ends where they are carried on.

use std::ops::Range;

use super::general::Curve;
use super::{Outline, Piece, window};
use crate::site::{EdgeShape, Point, Site};

/// Vertices nearer than this to the end of a piece do not cut it.
const JOINT_M: f64 = 1e-3;

impl Outline {
    /// The parts of a piece between the vertices that the plan gives its edge,
    /// in order along the side; the first and last may be infinite. A circle
    /// is one part.
    pub fn reaches(&self, site: &Site, side: usize, piece: &Piece) -> Vec<Range<f64>> {
        let mut cuts = self.vertices_along(site, side, piece);
        cuts.sort_by(f64::total_cmp);
        cuts.dedup_by(|next, before| *next - *before < JOINT_M);
        let ends = cuts.iter().copied().chain([piece.along.end]);
        let starts = [piece.along.start].into_iter().chain(cuts.iter().copied());
        starts.zip(ends).map(|(start, end)| start..end).collect()
    }

    /// Positions of an edge's vertices strictly inside one of its pieces.
    fn vertices_along(&self, site: &Site, side: usize, piece: &Piece) -> Vec<f64> {
        let Some(EdgeShape::Line(vertices)) = site.edges.get(piece.edge).map(|edge| &edge.shape)
        else {
            return Vec::new();
        };
        if self.round_side(side).is_some() {
            return Vec::new();
        }
        let line = self.side_line(side);
        vertices
            .iter()
            .filter_map(|vertex| {
                let offset = self.frame.to_canonical(*vertex) - line.origin;
                let along = offset * line.axis.conj();
                let is_inside =
                    along.re > piece.along.start + JOINT_M && along.re < piece.along.end - JOINT_M;
                // A bent river has vertices on other sides too.
                (is_inside && along.im.abs() < 2.0 * JOINT_M).then_some(along.re)
            })
            .collect()
    }

    /// The course of a part of a side, an arc as chords; an infinite end is
    /// drawn `beyond_m` past the other.
    pub fn reach_course(&self, side: usize, along: &Range<f64>, beyond_m: f64) -> Vec<Point> {
        match self.round_side(side) {
            Some(curve) => window::chords(&self.frame, &curve, (along.start, along.end)),
            None => self.reach_line(side, along, beyond_m).to_vec(),
        }
    }

    /// Length of a part of a side in metres of the site; none where it goes on
    /// without end.
    pub fn reach_length_m(&self, side: usize, along: &Range<f64>) -> Option<f64> {
        if along.start.is_infinite() || along.end.is_infinite() {
            return None;
        }
        // Circles are never stretched.
        if let Some(Curve::Arc { radius, .. }) = self.round_side(side) {
            return Some(radius * (along.end - along.start));
        }
        let [from, to] = self.reach_line(side, along, 0.0);
        Some((to - from).norm())
    }

    /// The two ends of a straight part of a side.
    fn reach_line(&self, side: usize, along: &Range<f64>, beyond_m: f64) -> [Point; 2] {
        let (start, end) = match (along.start.is_finite(), along.end.is_finite()) {
            (true, true) => (along.start, along.end),
            (true, false) => (along.start, along.start + beyond_m),
            (false, true) => (along.end - beyond_m, along.end),
            (false, false) => (-beyond_m, beyond_m),
        };
        let line = self.side_line(side);
        [start, end].map(|position| self.frame.to_site(line.at(position)))
    }
}
