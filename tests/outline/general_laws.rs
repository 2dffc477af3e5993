//! Laws of general boundaries, on random polygons. The reference is `geo`, a
//! general-purpose geometry library.

use std::f64::consts::TAU;

use geo::{Area, BooleanOps, Contains, Distance, Euclidean, LineString, Polygon, Validation};
use mirrorwell::outline::{Outline, find, find_unnamed};
use mirrorwell::site::{Anisotropy, Extent, Point, Site, Vector};
use proptest::prelude::*;

use crate::plans::{With, only, site};

/// A star-shaped polygon around the origin: spikes and dents of any depth.
fn star(radii: &[f64]) -> Vec<(f64, f64)> {
    let count = radii.len() as f64;
    radii
        .iter()
        .enumerate()
        .map(|(index, radius)| {
            let (sin, cos) = (TAU * index as f64 / count + 0.1).sin_cos();
            (radius * cos, radius * sin)
        })
        .collect()
}

fn ring(corners: &[(f64, f64)]) -> Vec<(f64, f64)> {
    let first = corners[0];
    corners.iter().copied().chain([first]).collect()
}

/// Whether every corner lies well off the line of its neighbours: within 1 mm of
/// it, stretched, an outline may leave it out.
fn bends(corners: &[(f64, f64)]) -> bool {
    let place = |index: usize| {
        let at = corners[index % corners.len()];
        Point::new(at.0, at.1)
    };
    (0..corners.len()).all(|index| {
        let (before, here, after) = (place(index), place(index + 1), place(index + 2));
        (here - before).perp(&(after - before)).abs() > 5e-3 * (after - before).norm()
    })
}

fn polygon(corners: &[(f64, f64)]) -> Polygon<f64> {
    Polygon::new(LineString::from(corners.to_vec()), Vec::new())
}

fn outline(plan: &Site) -> Outline {
    find_unnamed(plan).expect("an outline").remove(0)
}

fn extent(centre: (f64, f64), reach: (f64, f64)) -> Extent {
    let (centre, reach) = (
        Point::new(centre.0, centre.1),
        Vector::new(reach.0, reach.1),
    );
    Extent {
        min: centre - reach,
        max: centre + reach,
    }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(96))]

    #[test]
    fn a_polygon_holds_what_geo_says_it_contains(
        radii in proptest::collection::vec(30.0_f64..1000.0, 3..60),
        at in proptest::collection::vec((-1100.0_f64..1100.0, -1100.0_f64..1100.0), 60),
        ratio in 1.0_f64..20.0, azimuth_deg in 0.0_f64..360.0,
    ) {
        let corners = star(&radii);
        prop_assume!(bends(&corners));
        // A triangle of such angles always holds a disk of a seventh of its
        // least radius around the origin.
        let mut plan = site(&[(1.0, 1.0)]).river("moat", &ring(&corners));
        plan.aquifer.anisotropy = Some(Anisotropy { ratio, azimuth_deg });
        let outline = outline(&plan);
        let reference = polygon(&corners);
        for place in at {
            let point = geo::Point::new(place.0, place.1);
            let distance = Euclidean.distance(&point, reference.exterior());
            let site_point = Point::new(place.0, place.1);
            if distance > 1e-5 {
                prop_assert_eq!(outline.holds(site_point), reference.contains(&point));
            }
            prop_assert!((outline.distance_to_edge_m(site_point) - distance).abs() < 1e-8);
        }
        // Whatever lies on an edge is held, up and down to 1e-9 of 1 km.
        for (from, to) in corners.iter().zip(corners.iter().cycle().skip(1)) {
            let middle = Point::new(0.3 * from.0 + 0.7 * to.0, 0.3 * from.1 + 0.7 * to.1);
            prop_assert!(outline.holds(middle));
        }
    }

    #[test]
    fn the_part_within_a_rectangle_has_the_area_that_geo_gives(
        radii in proptest::collection::vec(30.0_f64..1000.0, 3..40),
        centre in (-500.0_f64..500.0, -500.0_f64..500.0),
        reach in (10.0_f64..900.0, 10.0_f64..900.0),
        hole in any::<bool>(),
    ) {
        let corners = star(&radii);
        prop_assume!(bends(&corners));
        let mut plan = site(&[(11.0, 1.0)]).river("moat", &ring(&corners));
        let mut reference = polygon(&corners);
        if hole {
            let pond = [(-5.0, -5.0), (5.0, -6.0), (1.0, 4.0)];
            plan = plan.river("pond", &ring(&pond));
            reference.interiors_push(LineString::from(ring(&pond)));
        }
        let window = extent(centre, reach);
        let clipped = outline(&plan).clip(window);
        prop_assert!(clipped.is_valid());
        let frame = geo::Rect::new((window.min.x, window.min.y), (window.max.x, window.max.y));
        // geo's overlay works on a grid of some micrometres.
        let expected = reference.intersection(&frame.to_polygon()).unsigned_area();
        prop_assert!((clipped.unsigned_area() - expected).abs() < 0.1, "{} for {expected}", clipped.unsigned_area());
    }

    #[test]
    fn a_coast_with_any_bends_and_its_other_bank_fill_every_square(
        heights in proptest::collection::vec(-300.0_f64..300.0, 2..30),
        centre in (-900.0_f64..900.0, -500.0_f64..500.0),
    ) {
        let count = heights.len();
        let coast: Vec<(f64, f64)> = heights
            .iter()
            .enumerate()
            .map(|(index, y)| (2000.0 * index as f64 / (count - 1) as f64 - 1000.0, *y))
            .collect();
        // Ends that go on east and west.
        let coast: Vec<(f64, f64)> = [(-1500.0, heights[0])]
            .into_iter()
            .chain(coast)
            .chain([(1500.0, heights[count - 1])])
            .collect();
        let plan = site(&[(0.0, 700.0), (0.0, -700.0)]).river("coast", &coast);
        let outlines = find_unnamed(&plan).expect("two outlines");
        prop_assert_eq!(outlines.len(), 2);
        let window = extent(centre, (400.0, 250.0));
        let area: f64 = outlines.iter().map(|outline| outline.clip(window).unsigned_area()).sum();
        prop_assert!((area - 400_000.0).abs() < 1e-5);
        for step in 0..400 {
            let (x, y) = (f64::from(step % 20) * 190.0 - 1900.0, f64::from(step / 20) * 40.1 - 400.0);
            let point = Point::new(x, y);
            let held: Vec<bool> = outlines.iter().map(|outline| outline.holds(point)).collect();
            prop_assert!(held[0] || held[1]);
            if outlines[0].distance_to_edge_m(point) > 1e-5 {
                prop_assert!(held[0] != held[1]);
            }
        }
    }

    #[test]
    fn circles_and_lines_in_any_position_end_in_sound_outlines_or_refusals(
        lakes in proptest::collection::vec((-400.0_f64..400.0, -400.0_f64..400.0, 5.0_f64..300.0, any::<bool>()), 1..5),
        line in proptest::collection::vec((-600.0_f64..600.0, -600.0_f64..600.0), 2..5),
        whole in any::<bool>(),
        wells in proptest::collection::vec((-600.0_f64..600.0, -600.0_f64..600.0), 1..5),
    ) {
        // Whole tens of metres make tangents and common centres likely.
        let round = |x: f64| if whole { (x / 50.0).round() * 50.0 } else { x };
        let wells: Vec<(f64, f64)> = wells.iter().map(|at| (round(at.0) + 3.1, round(at.1) + 1.7)).collect();
        let line: Vec<(f64, f64)> = line.iter().map(|at| (round(at.0), round(at.1))).collect();
        let mut plan = site(&wells).river("Ostra", &line);
        for (index, (x, y, radius, river)) in lakes.iter().enumerate() {
            let (centre, radius) = ((round(*x), round(*y)), round(*radius).max(5.0));
            let name = format!("C{index}");
            plan = if *river { plan.lake(&name, centre, radius) } else { plan.round_barrier(&name, centre, radius) };
        }
        if let Ok(outlines) = find(&plan) {
            for outline in &outlines {
                for (index, well) in plan.wells.iter().enumerate() {
                    prop_assert_eq!(outline.holds(well.at), outline.wells.contains(&index));
                }
            }
            let window = extent((0.0, 0.0), (700.0, 700.0));
            for step in 0..300 {
                let point = Point::new(f64::from(step % 20) * 67.3 - 640.0, f64::from(step / 20) * 91.1 - 640.0);
                let holding = outlines.iter().filter(|outline| outline.holds(point) && outline.distance_to_edge_m(point) > 1e-5);
                prop_assert!(holding.count() <= 1);
            }
            for outline in &outlines {
                let area = outline.clip(window).unsigned_area();
                prop_assert!(area > 0.0 && area <= 1400.0 * 1400.0 * (1.0 + 1e-12), "{area}: {:?}", outline.boundary);
            }
        }
    }
}

#[test]
fn thousands_of_sides_are_searched_quickly() {
    // A coast of 3,000 legs; a linear search over a million places would take
    // minutes.
    let coast: Vec<(f64, f64)> = (0..=3000)
        .map(|step| (f64::from(step) * 10.0, f64::from(step * step * 37 % 101)))
        .collect();
    let plan = site(&[(15_000.0, 900.0)]).river("coast", &coast);
    let outline = only(&plan);
    assert!(outline.sides.len() > 2500);
    let started = std::time::Instant::now();
    let mut held = 0_u32;
    let mut nearest = f64::INFINITY;
    for step in 0..1_000_000_u32 {
        let point = Point::new(
            f64::from(step % 1000) * 30.0,
            f64::from(step / 1000) * 0.3 - 100.0,
        );
        held += u32::from(outline.holds(point));
        if step % 10 == 0 {
            nearest = nearest.min(outline.distance_to_edge_m(point));
        }
    }
    assert!(held > 300_000 && held < 900_000 && nearest < 1.0);
    assert!(
        started.elapsed().as_secs_f64() < 30.0,
        "{:?}",
        started.elapsed()
    );
}
