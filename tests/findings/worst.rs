//! The worst point of an area, against a search of every place of a lattice.

use mirrorwell::findings::{Peak, Solution, worst_point};
use mirrorwell::site::{Place, Point};

use crate::plans::{site, solved};

/// Two wells beside a river.
const BESIDE_A_RIVER: &str = r#"
[aquifer]
transmissivity = 500.0
[[river]]
name = "Ostra"
line = [[0.0, -1000.0], [0.0, 1000.0]]
stage = 60.0
[[well]]
name = "A"
at = [300.0, 0.0]
pumping = 1000.0
radius = 0.2
[[well]]
name = "B"
at = [420.0, 150.0]
pumping = 700.0
radius = 0.2
"#;

/// A place of the plan's grid in the site's frame, whose origin the plan
/// chooses; well A stands at (300, 0) of the plan's grid.
fn place(solution: &Solution, x: f64, y: f64) -> Point {
    let well = &solution.site().wells[0];
    well.at + nalgebra::Vector2::new(x - 300.0, y)
}

/// The largest drawdown on a lattice within a rectangle.
fn searched(solution: &Solution, min: Point, max: Point) -> f64 {
    let points: Vec<Point> = (0..=300)
        .flat_map(|i| (0..=300).map(move |j| (f64::from(i) / 300.0, f64::from(j) / 300.0)))
        .map(|(s, t)| Point::new(min.x + s * (max.x - min.x), min.y + t * (max.y - min.y)))
        .collect();
    solution
        .drawdowns_m(&points)
        .into_iter()
        .filter(|drawdown_m| !drawdown_m.is_nan())
        .fold(f64::NEG_INFINITY, f64::max)
}

fn rectangle(min: Point, max: Point) -> Place {
    Place::Area(vec![
        min,
        Point::new(max.x, min.y),
        max,
        Point::new(min.x, max.y),
    ])
}

fn worst(solution: &Solution, min: Point, max: Point) -> Peak {
    worst_point(solution, &rectangle(min, max), None).expect("a worst point")
}

/// The maximum principle for harmonic functions: no place inside is worse,
/// and the worst lies on the boundary.
#[test]
fn no_place_inside_an_area_is_worse_than_its_worst_point() {
    let solution = solved(site(BESIDE_A_RIVER));
    for (x, y, w, h) in [
        (310.0, -60.0, 200.0, 55.0),
        (100.0, 20.0, 60.0, 200.0),
        (301.0, -400.0, 3.0, 900.0),
        (250.0, 3.0, 400.0, 90.0),
    ] {
        let min = place(&solution, x, y);
        let max = place(&solution, x + w, y + h);
        let peak = worst(&solution, min, max);
        let by_search_m = searched(&solution, min, max);
        assert!(
            peak.drawdown_m >= by_search_m - 1e-12,
            "{peak:?} {by_search_m}"
        );
        assert!(
            peak.drawdown_m - by_search_m < 0.2,
            "{peak:?} {by_search_m}"
        );
        let to_edge = [
            peak.at.x - min.x,
            max.x - peak.at.x,
            peak.at.y - min.y,
            max.y - peak.at.y,
        ];
        assert!(to_edge.into_iter().fold(f64::INFINITY, f64::min).abs() < 1e-9);
    }
}

/// With a well inside the worst point is its rim.
#[test]
fn a_well_inside_an_area_is_its_worst_point() {
    let solution = solved(site(BESIDE_A_RIVER));
    let min = place(&solution, 290.0, -10.0);
    let max = place(&solution, 315.0, 12.0);
    let peak = worst(&solution, min, max);
    assert!((peak.at - solution.site().wells[0].at).norm() < 0.2 + 1e-9);
    let own_m = solution.fields()[0].own_drawdown_m(0);
    assert!(peak.drawdown_m >= own_m);
}

/// Of an area that reaches across the river only the aquifer's part counts.
#[test]
fn the_part_of_an_area_beyond_the_river_does_not_count() {
    let solution = solved(site(BESIDE_A_RIVER));
    let min = place(&solution, -200.0, -50.0);
    let max = place(&solution, 120.0, 50.0);
    let peak = worst(&solution, min, max);
    assert!((peak.drawdown_m - searched(&solution, min, max)).abs() < 0.01);
    let beyond = rectangle(
        place(&solution, -200.0, -50.0),
        place(&solution, -100.0, 50.0),
    );
    assert!(worst_point(&solution, &beyond, None).is_none());
}

/// Six injecting wells around an area whose rises end before its middle
/// (Thiem with an influence radius): there the middle is worst.
#[test]
fn with_an_influence_radius_and_injection_the_inside_is_searched_too() {
    let mut text = String::from(
        "[aquifer]\ntransmissivity = 500.0\ninfluence_radius = 400.0\n[ambient]\nhead = 50.0\nat = [0.0, 0.0]\n",
    );
    for step in 0..6 {
        let (sin, cos) = (f64::from(step) * std::f64::consts::FRAC_PI_3).sin_cos();
        text.push_str(&format!(
            "[[well]]\nname = \"I{step}\"\nat = [{}, {}]\ninjection = 300.0\nradius = 0.2\n",
            500.0 * cos,
            500.0 * sin
        ));
    }
    text.push_str("[[well]]\nname = \"P\"\nat = [0.0, 900.0]\npumping = 50.0\nradius = 0.2\n");
    let solution = solved(site(&text));
    let pump = solution.site().wells[6].at;
    let middle = pump - nalgebra::Vector2::new(0.0, 900.0);
    let half = nalgebra::Vector2::new(350.0, 350.0);
    let (min, max) = (middle - half, middle + half);
    let peak = worst(&solution, min, max);
    let by_search_m = searched(&solution, min, max);
    assert!(
        peak.drawdown_m >= by_search_m - 1e-6,
        "{peak:?} {by_search_m}"
    );
}
