//! What holds for every region and every field of wells.

use mirrorwell::contours::Bump;
use proptest::prelude::*;

use crate::support::{Formula, bump, check, circle, draw, region, thiem};

/// A star-shaped outline: valid, seldom convex.
fn outline() -> impl Strategy<Value = Vec<(f64, f64)>> {
    prop::collection::vec(20.0..200.0f64, 3..40).prop_map(|radii| {
        let count = radii.len() as f64;
        let corner = |(i, radius): (usize, f64)| {
            let angle = std::f64::consts::TAU * i as f64 / count;
            (radius * angle.cos(), radius * angle.sin())
        };
        radii.into_iter().enumerate().map(corner).collect()
    })
}

fn wells() -> impl Strategy<Value = Vec<(Bump, f64)>> {
    let well = (
        -150.0..150.0f64,
        -150.0..150.0f64,
        0.05..0.5f64,
        -5.0..5.0f64,
    );
    prop::collection::vec(well.prop_map(|(x, y, rim, q)| (bump(x, y, rim), q)), 1..6)
}

proptest! {
    #![proptest_config(ProptestConfig {
        cases: 48,
        failure_persistence: None,
        ..ProptestConfig::default()
    })]

    #[test]
    fn contours_of_random_wells_keep_every_promise(
        outer in outline(),
        mut wells in wells(),
        (decades, turn) in (0.0..8.0f64, 0.0..6.3f64),
        hole_m in prop::option::of(0.01..8.0f64),
        on_edge in prop::option::of(0.0..1.0f64),
        spacing_m in 5.0..80.0f64,
    ) {
        // A twin of the first well, at any scale from a micrometre up.
        let (distance, at) = (10f64.powf(decades - 6.0), wells[0].0.at);
        let twin = bump(at.x + distance * turn.cos(), at.y + distance * turn.sin(), 0.1);
        wells.push((twin, 1.0));
        // A well on the outline: on a corner at 0, else along a side.
        if let Some(share) = on_edge {
            let ((ax, ay), (bx, by)) = (outer[0], outer[1]);
            let share = if share < 0.2 { 0.0 } else { share };
            wells.push((bump(ax + share * (bx - ax), ay + share * (by - ay), 0.1), 2.0));
        }
        // Every outline reaches at least 10 m from the origin.
        let holes: Vec<_> = hole_m.map(|m| circle(0.0, 0.0, m, 17)).into_iter().collect();
        let bumps: Vec<Bump> = wells.iter().map(|well| well.0).collect();
        let formula = thiem(&wells);
        let region = region(&outer, &holes, spacing_m);
        let drawn = draw(&region, &bumps, &Formula(formula.clone()), None);
        check(&region, &drawn, formula);
    }
}
