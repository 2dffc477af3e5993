//! Source: Ferris, Knowles, Brown & Stallman (1962), *Theory of Aquifer
//! Tests*, USGS Water-Supply Paper 1536-E, "Theory of images and hydrologic
//! boundary analysis". The image wells of each case are laid out here one by
//! one, from memory of the paper's figures; the library must find their sum.

use std::f64::consts::{FRAC_1_PI, PI};

use num_complex::Complex64;

use crate::shapes::{axes, axis, green, green_within, wedge};

/// A handful of logarithms of order 10, each good to 1 ε: 1e-14; the large
/// image sums lose up to two digits by cancellation.
const TOLERANCE: f64 = 1e-12;

/// Place and sign (+1 pumps) of a well or image.
type Signed = (Complex64, f64);

fn place(x: f64, y: f64) -> Complex64 {
    Complex64::new(x, y)
}

/// s T/Q of wells and images whose signs cancel: −Σ ± ln r / 2π.
fn sum(wells: &[Signed], at: Complex64) -> f64 {
    wells
        .iter()
        .map(|(well, sign)| -sign * (at - well).norm().ln())
        .sum::<f64>()
        * 0.5
        * FRAC_1_PI
}

/// s T/Q with an influence radius: Σ ± ln(R/r) / 2π inside R, 0 beyond.
fn sum_within(wells: &[Signed], radius: f64, at: Complex64) -> f64 {
    wells
        .iter()
        .map(|(well, sign)| sign * (radius / (at - well).norm()).ln().max(0.0))
        .sum::<f64>()
        * 0.5
        * FRAC_1_PI
}

fn assert_same(ours: f64, theirs: f64, what: &str) {
    assert!(
        (ours - theirs).abs() <= TOLERANCE,
        "{what}: {ours}, images {theirs}"
    );
}

#[test]
fn a_perennial_stream_is_one_recharging_image() {
    let river = green(&axes(axis("D", 0.0), axis("", 0.0)));
    let well = place(100.0, 20.0);
    let images = [(well, 1.0), (place(-100.0, 20.0), -1.0)];
    for at in [place(0.0, 7.0), place(35.0, -60.0), place(2500.0, 900.0)] {
        assert_same(river.value(at, well), sum(&images, at), "stream");
    }
}

#[test]
fn an_impermeable_barrier_is_one_discharging_image() {
    let barrier = green_within(&axes(axis("N", 0.0), axis("", 0.0)), 1500.0);
    let well = place(100.0, 20.0);
    let images = [(well, 1.0), (place(-100.0, 20.0), 1.0)];
    // The last two lie beyond the radius of the image, and of both.
    for at in [
        place(0.0, 7.0),
        place(35.0, -60.0),
        place(1480.0, 20.0),
        place(2500.0, 900.0),
    ] {
        let theirs = sum_within(&images, 1500.0, at);
        assert_same(barrier.value(at, well), theirs, "barrier");
    }
}

/// Two boundaries at right angles: three images, the diagonal one of the sign
/// of the product of the two others.
#[test]
fn boundaries_at_right_angles_are_three_images() {
    let well = place(300.0, 120.0);
    for (x, y) in [("D", "D"), ("D", "N"), ("N", "D"), ("N", "N")] {
        let sign = |letter: &str| if letter == "D" { -1.0 } else { 1.0 };
        let images = [
            (well, 1.0),
            (place(-300.0, 120.0), sign(x)),
            (place(300.0, -120.0), sign(y)),
            (place(-300.0, -120.0), sign(x) * sign(y)),
        ];
        let shape = axes(axis(x, 0.0), axis(y, 0.0));
        for at in [place(10.0, 400.0), place(310.0, 118.0), place(4000.0, 1.0)] {
            if (x, y) == ("N", "N") {
                let ours = green_within(&shape, 9000.0).value(at, well);
                assert_same(ours, sum_within(&images, 9000.0, at), "two barriers");
            } else {
                let what = format!("right angle {x}{y}");
                assert_same(green(&shape).value(at, well), sum(&images, at), &what);
            }
        }
    }
}

/// 2n wells on a circle about the apex for a wedge of 180°/n: the well's own
/// set at θ + 2jα, the mirrored set at −θ − 2jα.
fn wedge_images(well: Complex64, n: u32, turn_sign: f64, mirror_sign: f64) -> Vec<Signed> {
    (0..n)
        .flat_map(|j| {
            let turn = Complex64::cis(2.0 * PI / f64::from(n) * f64::from(j));
            let sign = turn_sign.powi(j as i32);
            [
                (well * turn, sign),
                (well.conj() * turn.conj(), sign * mirror_sign),
            ]
        })
        .collect()
}

fn places_in(angle: f64) -> impl Iterator<Item = Complex64> {
    [(0.5, 0.02), (1.0, 0.5), (1.3, 0.97), (40.0, 0.3)]
        .into_iter()
        .map(move |(radius, part)| Complex64::from_polar(250.0 * radius, part * angle))
}

/// 30°, 45° and 60° between two rivers: 11, 7 and 5 images.
#[test]
fn wedges_between_two_rivers_close_after_360_over_angle_minus_1_images() {
    for n in [3, 4, 6] {
        let angle = PI / f64::from(n);
        let well = Complex64::from_polar(250.0, 0.4 * angle);
        let images = wedge_images(well, n, 1.0, -1.0);
        assert_eq!(images.len(), 2 * n as usize);
        let green = green(&wedge(angle, "DD"));
        for at in places_in(angle) {
            assert_same(green.value(at, well), sum(&images, at), "rivers");
        }
        assert_eq!(green.nearest_images(well, 100).len() + 1, images.len());
    }
}

/// A river and a barrier close only where 90° is a whole multiple of the
/// angle: 45° and 30°. The 60° wedge has no images; see the reference tables.
#[test]
fn wedges_between_a_river_and_a_barrier_alternate_in_sign() {
    for n in [4, 6] {
        let angle = PI / f64::from(n);
        let well = Complex64::from_polar(250.0, 0.4 * angle);
        let river_first = wedge_images(well, n, -1.0, -1.0);
        let barrier_first = wedge_images(well, n, -1.0, 1.0);
        for at in places_in(angle) {
            let ours = green(&wedge(angle, "DN")).value(at, well);
            assert_same(ours, sum(&river_first, at), "river, barrier");
            let ours = green(&wedge(angle, "ND")).value(at, well);
            assert_same(ours, sum(&barrier_first, at), "barrier, river");
        }
    }
}

#[test]
fn wedges_between_two_barriers_pump_from_every_image() {
    for n in [3, 4, 6] {
        let angle = PI / f64::from(n);
        let well = Complex64::from_polar(250.0, 0.4 * angle);
        let images = wedge_images(well, n, 1.0, 1.0);
        let green = green_within(&wedge(angle, "NN"), 20_000.0);
        for at in places_in(angle) {
            let theirs = sum_within(&images, 20_000.0, at);
            assert_same(green.value(at, well), theirs, "barriers");
        }
    }
}

/// A row of images on each side of two parallel boundaries, its cut-off ends
/// extrapolated: what lies beyond 2M + 1 cells is a far dipole row on each
/// side and leaves an error c/(2M + 1) + O(1/M³). Three times as many cells
/// cancel the first term.
fn row_of_images(cell: &[Signed], period: f64, cells: i32, at: Complex64) -> f64 {
    let sum_to = |last: i32| {
        (-last..=last)
            .map(|m| {
                let moved: Vec<Signed> = cell
                    .iter()
                    .map(|&(well, sign)| (well + f64::from(m) * period, sign))
                    .collect();
                sum(&moved, at)
            })
            .sum::<f64>()
    };
    let (coarse, fine) = (sum_to(cells), sum_to(3 * cells + 1));
    1.5 * fine - 0.5 * coarse
}

/// Parallel boundaries: images repeat without end. The extrapolated sum over
/// some 10⁴ cells is good to 1e-10; the closed form is held to that here, to
/// 1e-12 by the reference tables.
#[test]
fn parallel_boundaries_are_endless_rows_of_images() {
    let (width, well) = (900.0, place(320.0, 40.0));
    let mirrored = place(-320.0, 40.0);
    let over = |x: f64| place(2.0 * width + x, 40.0);
    let rivers = [(well, 1.0), (mirrored, -1.0)];
    let river_barrier = [
        (well, 1.0),
        (mirrored, -1.0),
        (over(-320.0), 1.0),
        (over(320.0), -1.0),
    ];
    for (kinds, cell, period) in [
        ("DD", &rivers[..], 2.0 * width),
        ("DN", &river_barrier[..], 4.0 * width),
    ] {
        let green = green(&axes(axis(kinds, width), axis("", 0.0)));
        for at in [place(1.0, 0.0), place(500.0, 300.0), place(899.0, -80.0)] {
            let theirs = row_of_images(cell, period, 2000, at);
            let ours = green.value(at, well);
            assert!(
                (ours - theirs).abs() < 1e-10,
                "{kinds} at {at}: {ours}, images {theirs}"
            );
        }
    }
}

/// Two parallel boundaries cut by a third at right angles: the row and its
/// mirror image in the third.
#[test]
fn a_third_boundary_across_mirrors_the_whole_row() {
    let (width, well) = (900.0, place(320.0, 140.0));
    let strip = green(&axes(axis("DN", width), axis("", 0.0)));
    for (base, sign) in [("D", -1.0), ("N", 1.0)] {
        let cut = green(&axes(axis("DN", width), axis(base, 0.0)));
        for at in [place(1.0, 3.0), place(500.0, 300.0), place(880.0, 0.0)] {
            let theirs = strip.value(at, well) + sign * strip.value(at, well.conj());
            assert_same(cut.value(at, well), theirs, base);
        }
    }
}
