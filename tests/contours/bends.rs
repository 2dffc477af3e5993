//! Contours of an aquifer of bent rivers and barriers, solved in general: they
//! reach the edges that they end on, at the stage that they stand for, and leave
//! no band blank. Held against the plan's own numbers.

use std::f64::consts::PI;
use std::path::Path;

use geo::Area;
use mirrorwell::contours::{Cuts, Region, ScalarField, round_levels};
use mirrorwell::findings::{Drawdowns, Heads, MapWindow, Solution, Survey};
use mirrorwell::plan::Plan;
use mirrorwell::site::{Point, Vector};

use crate::support::{Drawn, VERTEX_TOLERANCE_M, check_shape, turns};

/// The aquifer's corners; from the fourth on barriers.
const CORNERS: [[f64; 2]; 7] = [
    [-400.0, 500.0],
    [-300.0, -250.0],
    [120.0, 60.0],
    [520.0, -180.0],
    [900.0, 150.0],
    [640.0, 330.0],
    [700.0, 620.0],
];
/// Stages at the first four corners.
const STAGES: [f64; 4] = [51.3, 50.8, 50.4, 49.9];
const LAKE: ([f64; 2], f64) = ([330.0, 330.0], 80.0);

fn plan() -> Plan {
    let text = format!(
        "title = \"Bends\"\ncrs = {{ origin = [14.0, 52.0] }}\nunits = \"metric\"\n\
         [aquifer]\ntransmissivity = 500.0\nroof = 10.0\n\
         [[river]]\nname = \"Ostra\"\nline = {:?}\nstage = {STAGES:?}\n\
         [[barrier]]\nname = \"granite\"\nline = {:?}\n\
         [[river]]\nname = \"lake\"\ncircle = {{ centre = {:?}, radius = {:?} }}\nstage = 50.1\n\
         [[well]]\nname = \"PW-1\"\nat = [-120.0, 150.0]\npumping = 900.0\nradius = 0.2\n\
         [[well]]\nname = \"PW-2\"\nat = [560.0, 60.0]\npumping = 700.0\nradius = 0.2\n\
         [map]\nextent = [-450.0, -300.0, 950.0, 670.0]\nspacing = 25.0\n",
        &CORNERS[..4],
        [&CORNERS[3..], &CORNERS[..1]].concat(),
        LAKE.0,
        LAKE.1,
    );
    Plan::from_text("plan.toml", &text, Path::new(".")).unwrap()
}

fn corner(plan: &Plan, number: usize) -> Point {
    let [x, y] = CORNERS[number % CORNERS.len()];
    plan.to_site(x, y)
}

/// Number and position, 0 to 1, of the straight edge within a micrometre.
fn edge_at(plan: &Plan, at: Point) -> Option<(usize, f64)> {
    (0..CORNERS.len()).find_map(|number| {
        let (from, to) = (corner(plan, number), corner(plan, number + 1));
        let along = (at - from).dot(&(to - from)) / (to - from).norm_squared();
        let away_m = nalgebra::distance(&at, &(from + (to - from) * along.clamp(0.0, 1.0)));
        (away_m <= 1e-6).then_some((number, along))
    })
}

/// What is promised of the lines and bands of a field that is `at_river` at an
/// edge of rivers and a position along it, and `at_shore` on the lake.
fn check(
    plan: &Plan,
    survey: &Survey<'_>,
    (values, field): (&[f64], &dyn ScalarField),
    fresh: impl Fn(&[Point]) -> Vec<f64>,
    at_river: impl Fn(usize, f64) -> f64,
    at_shore: f64,
) {
    let aquifer = &survey.aquifers[0];
    let [low, high] = mirrorwell::contours::extremes(values);
    let levels = round_levels(low, high, 1.0, Some(0.05)).unwrap();
    let cuts = Cuts::refine(&aquifer.mesh, values, field, &levels).unwrap();
    let drawn = Drawn {
        lines: cuts.lines(),
        bands: cuts.bands(),
    };
    let region = Region {
        polygons: aquifer.field.outline().clip(survey.window.extent),
        extent: survey.window.extent,
        spacing_m: survey.window.spacing_m,
    };
    check_shape(&region, &drawn);
    assert!(drawn.lines.len() > 10);
    let lake = plan.to_site(LAKE.0[0], LAKE.0[1]);
    for line in &drawn.lines {
        for (value_m, at) in fresh(&line.points).into_iter().zip(&line.points) {
            // On the edge itself rounding decides whether there is a value.
            let is_on_edge = edge_at(plan, *at).is_some()
                || (nalgebra::distance(at, &lake) - LAKE.1).abs() < 1e-3;
            let miss_m = (value_m - line.level).abs();
            assert!(
                miss_m <= VERTEX_TOLERANCE_M || is_on_edge && value_m.is_nan(),
                "{miss_m} m off {} at {at}",
                line.level
            );
        }
        if line.closed {
            continue;
        }
        for end in [line.points[0], *line.points.last().unwrap()] {
            let level_there = match edge_at(plan, end) {
                Some((number, along)) if number < 3 => at_river(number, along),
                Some(_) => line.level,
                None => {
                    let away_m = nalgebra::distance(&end, &lake) - LAKE.1;
                    // The chord of a shore lies up to half a millimetre within.
                    assert!((-1e-3..1e-6).contains(&away_m), "{end} ends on no edge");
                    at_shore
                }
            };
            let miss_m = (level_there - line.level).abs();
            assert!(
                miss_m <= VERTEX_TOLERANCE_M,
                "{miss_m} m off {} at {end}",
                line.level
            );
        }
        for pair in line.points.windows(2) {
            for number in 0..CORNERS.len() {
                let (from, to) = (corner(plan, number), corner(plan, number + 1));
                // A micrometre of either side counts as on the edge.
                let hair = 1e-6 * (to - from).norm();
                let sides = [turns(from, to, pair[0]), turns(from, to, pair[1])];
                let is_across = sides[0].min(sides[1]) < -hair && sides[0].max(sides[1]) > hair;
                let ends = turns(pair[0], pair[1], from) * turns(pair[0], pair[1], to);
                assert!(!is_across || ends >= 0.0, "{pair:?} crosses edge {number}");
            }
        }
    }
}

#[test]
fn contours_reach_the_bent_rivers_at_their_stages_and_cross_no_edge() {
    let plan = plan();
    let solution = Solution::of(plan.site.clone()).unwrap();
    let survey = Survey::of(&solution, MapWindow::of(&solution).unwrap()).unwrap();
    let aquifer = &survey.aquifers[0];
    let stage = |edge: usize, along: f64| STAGES[edge] + (STAGES[edge + 1] - STAGES[edge]) * along;
    check(
        &plan,
        &survey,
        (&aquifer.heads_m, &Heads(aquifer.field)),
        |points| solution.heads_m(points),
        stage,
        50.1,
    );
    check(
        &plan,
        &survey,
        (&aquifer.drawdowns_m, &Drawdowns(aquifer.field)),
        |points| solution.drawdowns_m(points),
        |_, _| 0.0,
        0.0,
    );
}

/// Every round stage of a falling river has its head contour, ending on it.
#[test]
fn every_level_between_a_river_s_stages_ends_on_the_river() {
    let plan = plan();
    let solution = Solution::of(plan.site.clone()).unwrap();
    let survey = Survey::of(&solution, MapWindow::of(&solution).unwrap()).unwrap();
    let aquifer = &survey.aquifers[0];
    let levels: Vec<f64> = (1..28).map(|step| 49.9 + 0.05 * f64::from(step)).collect();
    let heads = Heads(aquifer.field);
    let cuts = Cuts::refine(&aquifer.mesh, &aquifer.heads_m, &heads, &levels).unwrap();
    let lines = cuts.lines();
    for level in levels {
        let edge = (0..3).find(|&edge| STAGES[edge] >= level && level > STAGES[edge + 1]);
        let edge = edge.unwrap();
        let along = (STAGES[edge] - level) / (STAGES[edge] - STAGES[edge + 1]);
        let (from, to) = (corner(&plan, edge), corner(&plan, edge + 1));
        let place: Point = from + (to - from) * along;
        let ends = lines
            .iter()
            .filter(|line| line.level == level && !line.closed)
            .flat_map(|line| [line.points[0], *line.points.last().unwrap()]);
        let nearest_m = ends
            .map(|end| nalgebra::distance(&end, &place))
            .fold(f64::INFINITY, f64::min);
        // A millimetre of level is a millimetre over the fall along the river.
        let fall = (STAGES[edge] - STAGES[edge + 1]) / (to - from).norm();
        let allowed_m = VERTEX_TOLERANCE_M / fall;
        assert!(
            nearest_m <= allowed_m,
            "{level}: {nearest_m} of {allowed_m}"
        );
    }
}

/// The bands fill the aquifer: the polygon's area by the shoelace formula, less
/// the lake's, whose shore's chords lie within half a millimetre.
#[test]
fn bands_fill_a_bent_aquifer_up_to_its_edges() {
    let plan = plan();
    let solution = Solution::of(plan.site.clone()).unwrap();
    let survey = Survey::of(&solution, MapWindow::of(&solution).unwrap()).unwrap();
    let aquifer = &survey.aquifers[0];
    let levels: Vec<f64> = (0..40).map(|step| 49.0 + 0.05 * f64::from(step)).collect();
    let drawn = Cuts::refine(
        &aquifer.mesh,
        &aquifer.heads_m,
        &Heads(aquifer.field),
        &levels,
    );
    let bands = drawn.unwrap().bands();
    let areas = bands.iter().map(|band| band.polygons.unsigned_area());
    let area_m2: f64 = areas.sum();
    let doubled = |number: usize| -> f64 {
        let origin = corner(&plan, 0);
        let (a, b): (Vector, Vector) = (
            corner(&plan, number) - origin,
            corner(&plan, number + 1) - origin,
        );
        a.perp(&b)
    };
    let polygon_m2 = 0.5 * (0..CORNERS.len()).map(doubled).sum::<f64>().abs();
    let expected_m2 = polygon_m2 - PI * LAKE.1 * LAKE.1;
    let shore_m2 = 2.0 * PI * LAKE.1 * 1e-3;
    let differ_m2 = (area_m2 - expected_m2).abs();
    assert!(differ_m2 <= shore_m2, "{differ_m2} m² of {expected_m2}");
}
