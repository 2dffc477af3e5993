//! Contours of real fields never cross, lie on their level and in the aquifer.
//!
//! 1 mm is what the program promises of every vertex.

use mirrorwell::contours::{ContourLine, Cuts, Mesh, ScalarField, extremes, round_levels};
use mirrorwell::findings::{Drawdowns, Heads, MapWindow, Survey};
use mirrorwell::site::{Length, Point};
use proptest::prelude::*;

use crate::drawings::{case_of, drawing};

const VERTEX_TOLERANCE_M: f64 = 1e-3;

fn lines(mesh: &Mesh, values: &[f64], field: &dyn ScalarField) -> Vec<ContourLine> {
    let [low, high] = extremes(values);
    let Ok(levels) = round_levels(low, high, 1.0, None) else {
        return Vec::new();
    };
    let cuts = Cuts::refine(mesh, values, field, &levels).expect("finite fields can be drawn");
    cuts.lines()
}

fn side(a: Point, b: Point, c: Point) -> f64 {
    (b - a).perp(&(c - a))
}

/// Whether two segments of different levels have a point in common.
fn cross(one: [Point; 2], other: [Point; 2]) -> bool {
    let apart = |axis: usize| {
        let low = |pair: [Point; 2]| pair[0][axis].min(pair[1][axis]);
        let high = |pair: [Point; 2]| pair[0][axis].max(pair[1][axis]);
        low(one) > high(other) || low(other) > high(one)
    };
    !apart(0)
        && !apart(1)
        && side(one[0], one[1], other[0]) * side(one[0], one[1], other[1]) < 0.0
        && side(other[0], other[1], one[0]) * side(other[0], other[1], one[1]) < 0.0
}

/// Segments in the order of their western ends.
fn segments(lines: &[ContourLine]) -> Vec<[Point; 2]> {
    let pairs = lines.iter().flat_map(|line| line.points.windows(2));
    let mut segments: Vec<[Point; 2]> = pairs.map(|pair| [pair[0], pair[1]]).collect();
    let west = |pair: &[Point; 2]| pair[0].x.min(pair[1].x);
    segments.sort_by(|one, other| west(one).total_cmp(&west(other)));
    segments
}

fn crossings(lines: &[ContourLine]) -> usize {
    let segments = segments(lines);
    let mut found = 0;
    for (number, one) in segments.iter().enumerate() {
        let east = one[0].x.max(one[1].x);
        let later = segments.iter().skip(number + 1);
        found += later
            .take_while(|other| other[0].x.min(other[1].x) <= east)
            .filter(|other| cross(*one, **other))
            .count();
    }
    found
}

proptest! {
    #![proptest_config(crate::cases(24))]

    #[test]
    fn contours_lie_on_their_level_within_the_aquifer_and_never_cross(
        (drawing, setting) in case_of(drawing()),
    ) {
        let solution = drawing.solve(&setting);
        let mut window = MapWindow::of(&solution).expect("a map of the wells");
        window.spacing_m *= 5.0;
        let survey = Survey::of(&solution, window).expect("a survey");
        for aquifer in &survey.aquifers {
            let (heads, drawdowns) = (Heads(aquifer.field), Drawdowns(aquifer.field));
            let fields: [(&[f64], &dyn ScalarField); 2] =
                [(&aquifer.heads_m, &heads), (&aquifer.drawdowns_m, &drawdowns)];
            for (values, field) in fields {
                let lines = lines(&aquifer.mesh, values, field);
                for line in &lines {
                    for (value_m, point) in field.values(&line.points).iter().zip(&line.points) {
                        let miss_m = (value_m - line.level).abs();
                        // All levels between two stages meet in the corner
                        // of their rivers, to within 0.1 µm.
                        let corner_m = drawing.distance_to_corners_m(&setting, *point);
                        if corner_m < 1e-3 {
                            continue;
                        }
                        prop_assert!(miss_m <= VERTEX_TOLERANCE_M, "{miss_m} m off at {point}");
                    }
                }
                prop_assert_eq!(crossings(&lines), 0);
            }
        }
    }

    /// The finer the grid, the longer the list of vertices; the levels stay.
    #[test]
    fn a_level_asked_for_is_found_on_any_grid(
        (drawing, setting) in case_of(drawing().prop_filter("a river", |drawing| {
            drawing.has_river() && drawing.wells[0].strength_m > 0.5
        })),
    ) {
        let well = &drawing.wells[0];
        // Nearer to an edge the ring may end on it.
        prop_assume!(drawing.distance_to_edges_m(well.at) > 6.0 * well.radius_m);
        let mut site = drawing.site(&setting);
        site.wells.truncate(1);
        site.map.spacing = Some(Length::from_si(drawing.size_m * setting.scale / 4.0));
        let solution = mirrorwell::findings::Solution::of(site).expect("one well of the same plan");
        let field = &solution.fields()[0];
        // Thiem's ring of three radii, far smaller than a cell.
        let fall_m = drawing.wells[0].strength_m / std::f64::consts::TAU * 3.0_f64.ln();
        let level_m = field.own_drawdown_m(0) - fall_m;
        let window = MapWindow::of(&solution).expect("a map of the well");
        let survey = Survey::of(&solution, window).expect("a survey");
        let aquifer = &survey.aquifers[0];
        let cuts = Cuts::refine(&aquifer.mesh, &aquifer.drawdowns_m, &Drawdowns(field), &[level_m]);
        let lines = cuts.expect("finite").lines();
        prop_assert!(lines.iter().any(|line| line.closed), "no ring at {level_m} m");
    }
}
