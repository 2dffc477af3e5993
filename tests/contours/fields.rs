//! Fields in closed form on plain rectangles.

use std::f64::consts::PI;

use geo::{Area, Contains};
use mirrorwell::contours::{
    ContourError, Cuts, Region, ScalarField, area_below, mesh, round_levels, sample,
};
use mirrorwell::site::Point;

use crate::support::{Formula, beside_river, bump, check, check_shape, draw, rectangle, thiem};

#[test]
fn cones_in_a_box_give_rings_and_lines_that_end_on_the_box() {
    let wells = [(bump(3.0, 4.0, 0.2), 5.0), (bump(-120.0, 60.0, 0.15), 3.0)];
    let formula = thiem(&wells);
    let region = rectangle(-300.0, -200.0, 300.0, 200.0, 10.0);
    let drawn = draw(
        &region,
        &wells.map(|w| w.0),
        &Formula(formula.clone()),
        None,
    );
    let mut levels: Vec<f64> = drawn.lines.iter().map(|l| l.level).collect();
    levels.dedup();
    assert!((10..=20).contains(&levels.len()));
    assert!(drawn.lines.iter().any(|line| line.closed));
    assert!(drawn.lines.iter().any(|line| !line.closed));
    check(&region, &drawn, formula);
}

/// The ring of radius r around a lone well has the level Q/(2πT) ln(R/r).
#[test]
fn a_ring_of_a_fiftieth_of_a_cell_is_there_and_round() {
    let well = bump(5.0, 5.0, 0.05);
    let formula = thiem(&[(well, 8.0)]);
    let region = rectangle(-500.0, -500.0, 500.0, 500.0, 50.0);
    for radius in [1.0, 0.3, 0.06] {
        let level = 8.0 / (2.0 * PI) * (1000.0f64 / radius).ln();
        let drawn = draw(&region, &[well], &Formula(formula.clone()), Some(&[level]));
        assert_eq!(drawn.lines.len(), 1);
        let line = &drawn.lines[0];
        assert!(line.closed && line.points.len() > 40);
        for point in &line.points {
            let r = nalgebra::distance(point, &well.at);
            approx::assert_relative_eq!(r, radius, max_relative = 1e-3);
        }
        check(&region, &drawn, &formula);
    }
}

/// π r² by geometry; a 48-gon's area is 0.3 % below its circle's.
#[test]
fn the_area_above_a_level_of_a_lone_cone_is_that_of_its_circle() {
    let well = bump(0.0, 0.0, 0.1);
    let region = rectangle(-100.0, -100.0, 100.0, 100.0, 5.0);
    let field = Formula(thiem(&[(well, 3.0)]));
    let mesh = mesh(&region, &[well]).unwrap();
    let values = sample(&mesh, &field).unwrap();
    for radius in [2.0, 50.0] {
        let level = 3.0 / (2.0 * PI) * (1000.0f64 / radius).ln();
        let below = area_below(&mesh, &values, &field, level).unwrap();
        let circle = PI * radius * radius;
        approx::assert_relative_eq!(40_000.0 - below, circle, max_relative = 5e-3);
    }
    let all = area_below(&mesh, &values, &field, 1e3).unwrap();
    approx::assert_relative_eq!(all, 40_000.0, max_relative = 1e-12);
    assert_eq!(area_below(&mesh, &values, &field, -1e3).unwrap(), 0.0);
}

#[test]
fn a_river_whose_stage_is_a_level_is_not_traced_by_a_contour() {
    // Rounding noise of the size that a solver leaves on a river.
    let noise = |p: Point| 1e-9 * (1e3 * p.y + 7.0 * p.x).sin();
    let pump = beside_river(bump(80.0, 0.0, 0.2), 6.0);
    let inject = beside_river(bump(60.0, 150.0, 0.2), -6.0);
    let formula = move |p: Point| pump(p) + inject(p) + noise(p);
    let region = rectangle(0.0, -200.0, 300.0, 300.0, 10.0);
    let bumps = [bump(80.0, 0.0, 0.2), bump(60.0, 150.0, 0.2)];
    let levels = [-1.0, -0.5, 0.0, 0.5, 1.0];
    let drawn = draw(&region, &bumps, &Formula(&formula), Some(&levels));
    check(&region, &drawn, &formula);
    // The line of no drawdown leaves the river between the wells, and runs
    // nowhere along it.
    let zero: Vec<_> = drawn.lines.iter().filter(|l| l.level == 0.0).collect();
    assert_eq!(zero.len(), 1);
    let on_river = zero[0].points.iter().filter(|p| p.x < 1e-3).count();
    // Its end, and where it cuts the first edge that leads inland.
    assert!(on_river <= 2);
    let thin = |p: &geo::Polygon<f64>| p.unsigned_area() < 1e-3;
    assert!(
        !drawn
            .bands
            .iter()
            .any(|band| band.polygons.iter().any(thin))
    );
}

/// Beside a river drawdowns are small far and wide: here below 0.1 mm up to
/// some metres inland, where the line must still be found. Its true place
/// follows from the formula by one step of Newton's along the river.
#[test]
fn the_line_between_fall_and_rise_keeps_its_place_up_to_the_river() {
    let (falls, rises) = (bump(250.0, 0.0, 0.2), bump(260.0, 330.0, 0.2));
    let (pump, inject) = (beside_river(falls, 0.13), beside_river(rises, -0.075));
    let formula = move |p: Point| pump(p) + inject(p);
    let region = rectangle(0.0, -200.0, 600.0, 800.0, 6.0);
    let levels = [-0.5, -0.25, 0.0, 0.25, 0.5];
    let drawn = draw(&region, &[falls, rises], &Formula(&formula), Some(&levels));
    check(&region, &drawn, &formula);
    let zero = drawn.lines.iter().filter(|line| line.level == 0.0);
    let inland = zero.flat_map(|line| &line.points).filter(|p| p.x > 1e-3);
    let near: Vec<f64> = inland
        .filter(|p| p.x < 60.0)
        .map(|&p| {
            let step_m = nalgebra::Vector2::new(0.0, 0.5);
            let slope = formula(p + step_m) - formula(p - step_m);
            (formula(p) / slope).abs()
        })
        .collect();
    assert!(near.len() > 10, "{}", near.len());
    // Along an edge of the mesh the formula is nearly a parabola that is zero
    // at the river too: the chord misses its other root by a part of the edge.
    let farthest_m = near.iter().copied().fold(0.0, f64::max);
    assert!(farthest_m < 0.25 * 6.0, "{farthest_m} m");
}

#[test]
fn levels_that_hit_nodes_exactly_leave_lines_and_bands_sound() {
    let region = rectangle(-50.0, -50.0, 50.0, 50.0, 10.0);
    let levels: Vec<f64> = (-40..=40).map(|i| f64::from(i) * 10.0).collect();
    let plane = |p: Point| p.x;
    let drawn = draw(&region, &[], &Formula(plane), Some(&levels));
    check(&region, &drawn, plane);
    assert_eq!(drawn.lines.len(), 9);
    let saddle = |p: Point| 0.1 * p.x * p.y;
    check(
        &region,
        &draw(&region, &[], &Formula(saddle), Some(&levels)),
        saddle,
    );
    // A cone with its top on a node and on a level.
    let cone = |p: Point| 10.0 - p.coords.norm();
    check(
        &region,
        &draw(&region, &[], &Formula(cone), Some(&levels)),
        cone,
    );
}

#[test]
fn a_field_that_swings_within_a_cell_has_no_crossing_lines() {
    let region = rectangle(0.0, 0.0, 100.0, 100.0, 10.0);
    let swings = |p: Point| p.x * 0.05 + (p.x * 0.9).sin() * (p.y * 0.7).cos();
    let levels: Vec<f64> = (-20..=70).map(|i| f64::from(i) * 0.1).collect();
    let drawn = draw(&region, &[], &Formula(swings), Some(&levels));
    check_shape(&region, &drawn);
    for line in &drawn.lines {
        let misses = line.points.iter().map(|&p| (swings(p) - line.level).abs());
        assert!(misses.fold(0.0, f64::max) <= 1e-3);
    }
}

#[test]
fn a_field_with_a_jump_has_sound_bands() {
    let region = rectangle(0.0, 0.0, 100.0, 100.0, 10.0);
    let jump = |p: Point| p.y * 0.01 + if p.x + 0.3 * p.y < 61.3 { 0.0 } else { 5.0 };
    let levels: Vec<f64> = (1..60).map(|i| f64::from(i) * 0.1).collect();
    check_shape(&region, &draw(&region, &[], &Formula(jump), Some(&levels)));
}

#[test]
fn a_flat_field_has_no_line_and_one_band() {
    let region = rectangle(0.0, 0.0, 100.0, 70.0, 10.0);
    for levels in [None, Some(&[60.0][..]), Some(&[1.0, 99.0][..])] {
        let drawn = draw(&region, &[], &Formula(|_| 60.0), levels);
        assert!(drawn.lines.is_empty());
        assert_eq!(drawn.bands.len(), 1);
        check_shape(&region, &drawn);
    }
}

/// Points at quasi-random places: their value lies in their band, to within
/// what a chord of the contour strays from it.
#[test]
fn values_inside_a_band_belong_to_it() {
    let wells = [
        (bump(13.0, 24.0, 0.2), 5.0),
        (bump(-120.0, 60.0, 0.15), -3.0),
    ];
    let formula = thiem(&wells);
    let region = rectangle(-300.0, -200.0, 300.0, 200.0, 10.0);
    let drawn = draw(
        &region,
        &wells.map(|w| w.0),
        &Formula(formula.clone()),
        None,
    );
    let slack = 0.05 * (drawn.bands[1].to - drawn.bands[1].from);
    for i in 1..400 {
        let (u, v) = (f64::from(i) * 0.618_034, f64::from(i) * 0.414_213);
        let at = Point::new(-300.0 + 600.0 * u.fract(), -200.0 + 400.0 * v.fract());
        let value = formula(at);
        let place = geo::Point::new(at.x, at.y);
        let holds = drawn.bands.iter().filter(|b| b.polygons.contains(&place));
        let held: Vec<_> = holds.collect();
        assert_eq!(held.len(), 1, "{at}");
        assert!(held[0].from - slack <= value && value <= held[0].to + slack);
    }
}

#[test]
fn one_thread_and_two_draw_the_same() {
    let wells = [(bump(3.0, 4.0, 0.2), 5.0), (bump(-120.0, 60.0, 0.15), 3.0)];
    let region = rectangle(-300.0, -200.0, 300.0, 200.0, 10.0);
    let run = |threads: usize| {
        let pool = rayon::ThreadPoolBuilder::new().num_threads(threads);
        let pool = pool.build().unwrap();
        pool.install(|| draw(&region, &wells.map(|w| w.0), &Formula(thiem(&wells)), None))
    };
    let (one, two) = (run(1), run(2));
    assert_eq!(one.lines, two.lines);
    assert_eq!(one.bands, two.bands);
}

#[test]
fn a_field_without_a_value_and_levels_out_of_order_are_refused() {
    let region: Region = rectangle(0.0, 0.0, 100.0, 100.0, 10.0);
    let mesh = mesh(&region, &[]).unwrap();
    let hole = Formula(|p: Point| if p.x > 50.0 { f64::NAN } else { 1.0 });
    assert!(matches!(
        sample(&mesh, &hole),
        Err(ContourError::NotFinite { .. })
    ));
    struct Short;
    impl ScalarField for Short {
        fn values(&self, _: &[Point]) -> Vec<f64> {
            vec![1.0]
        }
    }
    assert!(matches!(
        sample(&mesh, &Short),
        Err(ContourError::Count { .. })
    ));
    let plane = Formula(|p: Point| p.x);
    let values = sample(&mesh, &plane).unwrap();
    for levels in [&[1.0, 1.0][..], &[2.0, 1.0], &[f64::NAN], &[f64::INFINITY]] {
        let refused = Cuts::refine(&mesh, &values, &plane, levels);
        assert!(matches!(refused, Err(ContourError::Levels { .. })));
    }
    let few = Cuts::refine(&mesh, &[1.0], &plane, &[1.0]);
    assert!(matches!(few, Err(ContourError::Count { .. })));
    assert!(round_levels(0.0, 100.0, 1.0, Some(1e-9)).is_err());
}
