//! Contour lines: cuts of one level, chained from triangle to triangle.

use super::cuts::Cuts;
use super::mesh::NONE;
use crate::site::Point;

/// One contour, with the lower side to its left.
#[derive(Clone, Debug, PartialEq)]
pub struct ContourLine {
    /// Its level, metres.
    pub level: f64,
    /// Its vertices, two or more; in a closed line the first is repeated at
    /// the end.
    pub points: Vec<Point>,
    /// Whether it is a ring; else both its ends lie on the region's outline.
    pub closed: bool,
}

impl Cuts<'_> {
    /// The contours, level by level, always in the same order.
    pub fn lines(&self) -> Vec<ContourLine> {
        let mut seen = vec![false; self.points.len()];
        let mut lines: Vec<(u32, ContourLine)> = Vec::new();
        // Open lines first: what is left consists of rings.
        for rings in [false, true] {
            for (start, before) in (0u32..).zip(&self.previous) {
                if !rings && *before != NONE {
                    continue;
                }
                if let Some(line) = self.line_from(start, rings, &mut seen) {
                    lines.push(line);
                }
            }
        }
        lines.sort_by_key(|(level, _)| *level);
        lines.into_iter().map(|(_, line)| line).collect()
    }

    fn line_from(&self, start: u32, closed: bool, seen: &mut [bool]) -> Option<(u32, ContourLine)> {
        let mut points = Vec::new();
        let mut cut = start;
        while let Some(unseen @ false) = seen.get_mut(cut as usize) {
            *unseen = true;
            points.push(*self.points.get(cut as usize)?);
            cut = *self.next.get(cut as usize)?;
        }
        if points.len() < 2 {
            return None;
        }
        if closed {
            points.push(*points.first()?);
        }
        let index = *self.level_of.get(start as usize)?;
        let level = *self.levels.get(index as usize)?;
        let line = ContourLine {
            level,
            points,
            closed,
        };
        Some((index, line))
    }
}
