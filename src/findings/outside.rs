//! Why a place has no head: which edge lies between it and the wells.

use super::Solution;
use crate::site::{Extent, Point};

/// The first edge, by its index in `Site::edges`, that one meets on the
/// straight way from the nearest well to a place outside every aquifer; none
/// for a place inside, or where no edge lies between.
pub fn edge_between(solution: &Solution, place: Point) -> Option<usize> {
    if solution.field_at(place).is_some() {
        return None;
    }
    let wells = &solution.site().wells;
    let (well, from) = wells
        .iter()
        .enumerate()
        .map(|(index, well)| (index, well.at))
        .min_by(|a, b| (a.1 - place).norm().total_cmp(&(b.1 - place).norm()))?;
    let outline = solution.field_of_well(well)?.outline();
    let around = Extent {
        min: from.inf(&place),
        max: from.sup(&place),
    };
    let size = (around.max - around.min).max().max(1.0);
    let grow = nalgebra::Vector2::new(size, size);
    let around = Extent {
        min: around.min - grow,
        max: around.max + grow,
    };
    let crossings = outline.sides.iter().enumerate().flat_map(|(side, pieces)| {
        pieces.iter().enumerate().filter_map(move |(index, piece)| {
            let lines = outline.piece_lines(side, index, around);
            let along = lines
                .iter()
                .flat_map(|line| line.iter().zip(line.iter().skip(1)))
                .filter_map(|(&a, &b)| crossing(from, place, a, b))
                .min_by(f64::total_cmp)?;
            Some((along, piece.edge))
        })
    });
    crossings
        .min_by(|a, b| a.0.total_cmp(&b.0))
        .map(|(_, edge)| edge)
}

/// Where along `from`–`to` (0 to 1) the segment a–b crosses it.
fn crossing(from: Point, to: Point, a: Point, b: Point) -> Option<f64> {
    let (way, edge) = (to - from, b - a);
    let turn = way.perp(&edge);
    let along = (a - from).perp(&edge) / turn;
    let across = (a - from).perp(&way) / turn;
    // A hair beyond the ends, so that nothing slips through a corner.
    let within = |t: f64| (-1e-9..=1.0 + 1e-9).contains(&t);
    (within(along) && within(across)).then_some(along)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_segment_across_the_way_is_met_where_it_stands() {
        let p = Point::new;
        let met = crossing(p(0.0, 0.0), p(10.0, 0.0), p(4.0, -1.0), p(4.0, 1.0));
        assert_eq!(met, Some(0.4));
        assert_eq!(
            crossing(p(0.0, 0.0), p(10.0, 0.0), p(4.0, 1.0), p(4.0, 2.0)),
            None
        );
    }
}
