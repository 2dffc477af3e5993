//! Heads and gradients a millimetre from edges and corners continue those a
//! centimetre away as the local expansion says: nothing is lost right up to
//! an edge.

use std::path::Path;

use mirrorwell::findings::Solution;
use mirrorwell::plan::Plan;
use mirrorwell::site::Point;
use num_complex::Complex64;

/// Corners, counterclockwise, and whether the edge that begins there is a river.
const CORNERS: [([f64; 2], bool); 8] = [
    ([-300.0, -250.0], true),
    ([120.0, 60.0], true),
    ([520.0, -180.0], true),
    ([900.0, 150.0], false),
    ([640.0, 330.0], false),
    ([700.0, 620.0], true),
    ([150.0, 480.0], true),
    ([-400.0, 500.0], false),
];
const STAGE_M: f64 = 50.0;
const WELLS: [[f64; 2]; 2] = [[-120.0, 200.0], [560.0, 100.0]];

fn corner(number: usize) -> Complex64 {
    let [x, y] = CORNERS[number % CORNERS.len()].0;
    Complex64::new(x, y)
}

fn is_river(number: usize) -> bool {
    CORNERS[number % CORNERS.len()].1
}

fn solved(asked_m: f64) -> (Plan, Solution) {
    let mut text = format!(
        "title = \"Edges\"\ncrs = {{ origin = [14.0, 52.0] }}\nunits = \"metric\"\n\
         [accuracy]\nhead = {asked_m:?}\n[aquifer]\ntransmissivity = 500.0\nroof = 10.0\n"
    );
    for number in 0..CORNERS.len() {
        let ends = [CORNERS[number].0, CORNERS[(number + 1) % CORNERS.len()].0];
        text += &if is_river(number) {
            format!("[[river]]\nname = \"E{number}\"\nline = {ends:?}\nstage = {STAGE_M:?}\n")
        } else {
            format!("[[barrier]]\nname = \"E{number}\"\nline = {ends:?}\n")
        };
    }
    for (number, at) in WELLS.iter().enumerate() {
        text += &format!(
            "[[well]]\nname = \"W{number}\"\nat = {at:?}\npumping = 800.0\nradius = 0.2\n"
        );
    }
    let plan = Plan::from_text("plan.toml", &text, Path::new(".")).unwrap();
    let solution = Solution::of(plan.site.clone()).unwrap();
    (plan, solution)
}

/// Head and gradient at a place of the plan.
fn at((plan, solution): &(Plan, Solution), z: Complex64) -> (f64, Complex64) {
    let point: Point = plan.to_site(z.re, z.im);
    let field = &solution.fields()[0];
    assert!(field.holds(point), "{z} is outside");
    let gradient = field.head_gradient(point);
    (
        solution.heads_m(&[point])[0],
        Complex64::new(gradient.x, gradient.y),
    )
}

/// Along each edge, not near its ends: as the head minus the stage (the stream
/// function of a barrier) goes on beyond the edge as its mirror image, the slope
/// changes by at most 8 M d/R² over d, where M bounds the drawdowns within R:
/// Cauchy's estimate of a second derivative.
#[test]
fn the_slope_at_a_millimetre_from_an_edge_is_that_at_a_centimetre() {
    let solved = solved(1e-6);
    let drawdown_m = 10.0;
    for number in 0..CORNERS.len() {
        let (from, to) = (corner(number), corner(number + 1));
        let inward = (to - from) / (to - from).norm() * Complex64::I;
        for step in 1..20 {
            let foot = from + (to - from) * (f64::from(step) / 20.0);
            let clear_m = (0..CORNERS.len())
                .map(corner)
                .chain(WELLS.map(|[x, y]| Complex64::new(x, y)))
                .map(|place| (place - foot).norm())
                .fold(f64::INFINITY, f64::min);
            let ((near_m, near), (far_m, far)) = (
                at(&solved, foot + 0.001 * inward),
                at(&solved, foot + 0.01 * inward),
            );
            let reach_m = 0.5 * clear_m;
            let allowed = 8.0 * drawdown_m * 0.01 / (reach_m * reach_m);
            let across = |gradient: Complex64| (gradient * inward.conj()).re;
            let along = |gradient: Complex64| (gradient * inward.conj()).im;
            let place = format!("edge {number} at {step}/20");
            if is_river(number) {
                let slope = (near_m - STAGE_M) / 0.001;
                assert!(
                    (slope - across(near)).abs() <= allowed,
                    "{place}: {slope} {near}"
                );
                let slope = (far_m - STAGE_M) / 0.01;
                assert!(
                    (slope - across(far)).abs() <= allowed,
                    "{place}: {slope} {far}"
                );
                assert!(along(near).abs() <= allowed, "{place}: {near}");
            } else {
                assert!(
                    (near_m - far_m).abs() <= 0.01 * allowed,
                    "{place}: {near_m} {far_m}"
                );
                assert!(across(near).abs() <= allowed, "{place}: {near}");
            }
            assert!((near - far).norm() <= allowed, "{place}: {near} {far}");
        }
    }
}

/// In a corner of angle α the slope is ν c r^(ν−1) with ν = π/α between edges
/// of one kind, π/(2α) between a river and a barrier; the next power is 2ν (3ν):
/// (r/R)^ν or (r/R)^2ν of the first, R a tenth of the nearest edge or well.
#[test]
fn slopes_in_corners_follow_their_power_down_to_a_millimetre() {
    let solved = solved(1e-6);
    for number in 0..CORNERS.len() {
        let place = corner(number);
        let after = corner(number + 1) - place;
        let before = corner(number + CORNERS.len() - 1) - place;
        let angle = (before / after).arg().rem_euclid(std::f64::consts::TAU);
        let is_alike = is_river(number) == is_river(number + CORNERS.len() - 1);
        let power = if is_alike { 1.0 } else { 0.5 } * std::f64::consts::PI / angle;
        let next = if is_alike { power } else { 2.0 * power };
        let bisector = after / after.norm() * Complex64::cis(0.5 * angle);
        let clear_m = 0.1 * f64::min(after.norm(), before.norm());
        for radius_m in [0.1, 0.01, 0.001] {
            let (outer, inner) = (
                at(&solved, place + radius_m * bisector),
                at(&solved, place + 0.1 * radius_m * bisector),
            );
            let ratio = inner.1.norm() / outer.1.norm();
            let expected = 0.1_f64.powf(power - 1.0);
            let allowed = (radius_m / clear_m).powf(next);
            assert!(
                (ratio / expected - 1.0).abs() <= allowed,
                "corner {number}, {radius_m} m: {ratio} for {expected}, within {allowed}"
            );
            if is_alike && is_river(number) {
                let ratio = (inner.0 - STAGE_M) / (outer.0 - STAGE_M);
                let expected = 0.1_f64.powf(power);
                assert!(
                    (ratio / expected - 1.0).abs() <= allowed,
                    "corner {number}, {radius_m} m: head {ratio} for {expected}, within {allowed}"
                );
            }
        }
    }
}
