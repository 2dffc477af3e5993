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

/// The error asked for, metres.
const ASKED_M: f64 = 1e-6;

/// What slopes may be wrong by: as exact as a metre from all edges, where
/// Cauchy's estimate gives 2 ε/R for a harmonic error of at most ε within R.
const SLOPE_ERROR: f64 = 2.0 * ASKED_M;

/// Along each edge, not near its ends: as the head minus the stage (the stream
/// function of a barrier) goes on beyond the edge as its mirror image, the slope
/// changes by at most 8 M d/R² over d, where M bounds the drawdowns within R:
/// Cauchy's estimate of a second derivative.
#[test]
fn the_slope_at_a_millimetre_from_an_edge_is_that_at_a_centimetre() {
    let solved = solved(ASKED_M);
    let bound_m = solved.1.fields()[0].error_bound_m();
    assert!(bound_m <= ASKED_M);
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
            let reach_m = 0.5 * clear_m;
            let allowed = 8.0 * drawdown_m * 0.01 / (reach_m * reach_m) + SLOPE_ERROR;
            let across = |gradient: Complex64| (gradient * inward.conj()).re;
            let along = |gradient: Complex64| (gradient * inward.conj()).im;
            let place = format!("edge {number} at {step}/20");
            let of = |away_m: f64| at(&solved, foot + away_m * inward);
            let (near, far) = (of(0.001), of(0.01));
            assert!(
                (near.1 - far.1).norm() <= allowed,
                "{place}: {near:?} {far:?}"
            );
            for (away_m, (head_m, slope)) in [(0.001, near), (0.01, far)] {
                if is_river(number) {
                    let miss_m = head_m - STAGE_M - away_m * across(slope);
                    let allowed_m = bound_m + away_m * allowed;
                    assert!(
                        miss_m.abs() <= allowed_m,
                        "{place}: {miss_m} m of {allowed_m}"
                    );
                    assert!(along(slope).abs() <= allowed, "{place}: {slope}");
                } else {
                    assert!(
                        (head_m - far.0).abs() <= 0.01 * allowed,
                        "{place}: {head_m}"
                    );
                    assert!(across(slope).abs() <= allowed, "{place}: {slope}");
                }
            }
        }
    }
}

/// In a corner of angle α the slope is ν c r^(ν−1) with ν = π/α between edges
/// of one kind, π/(2α) between a river and a barrier; the next power is 2ν (3ν):
/// (r/R)^ν or (r/R)^2ν of the first, R a tenth of the shorter edge.
#[test]
fn slopes_in_corners_follow_their_power_down_to_a_millimetre() {
    let solved = solved(ASKED_M);
    let bound_m = solved.1.fields()[0].error_bound_m();
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
            let of = |radius_m: f64| at(&solved, place + radius_m * bisector);
            let (outer, inner) = (of(10.0 * radius_m), of(radius_m));
            let rest = (10.0 * radius_m / clear_m).powf(next);
            let expected = 0.1_f64.powf(power - 1.0) * outer.1.norm();
            let allowed = rest * expected + 2.0 * SLOPE_ERROR * 0.1_f64.powf(power - 1.0).max(1.0);
            let got = inner.1.norm();
            assert!(
                (got - expected).abs() <= allowed,
                "corner {number} at {radius_m} m: {got} for {expected}, within {allowed}"
            );
            if is_alike && is_river(number) {
                let expected_m = 0.1_f64.powf(power) * (outer.0 - STAGE_M);
                let (got_m, allowed_m) =
                    (inner.0 - STAGE_M, rest * expected_m.abs() + 2.0 * bound_m);
                assert!(
                    (got_m - expected_m).abs() <= allowed_m,
                    "corner {number} at {radius_m} m: head {got_m} for {expected_m}"
                );
            }
        }
    }
}

/// The head at a place is the same asked for alone, with one nearby, and among
/// others spread wide.
#[test]
fn a_head_beside_an_edge_does_not_depend_on_what_else_is_asked_for() {
    let (plan, solution) = solved(1e-4);
    let mut points: Vec<Point> = Vec::new();
    for number in 0..CORNERS.len() {
        let (from, to) = (corner(number), corner(number + 1));
        let inward = (to - from) / (to - from).norm() * Complex64::I;
        for step in 1..40 {
            let z = from + (to - from) * (f64::from(step) / 40.0) + 0.001 * inward;
            points.push(plan.to_site(z.re, z.im));
        }
    }
    let together_m = solution.heads_m(&points);
    for (at, together_m) in points.iter().zip(together_m) {
        let alone_m = solution.heads_m(&[*at])[0];
        let apart_m = (alone_m - together_m).abs();
        // Heads of 50 m sum some hundred parts of up to 100 m: 1e-16 of each.
        assert!(apart_m <= 1e-11, "{apart_m} m apart at {at}");
        let inside = *at + (solution.site().wells[0].at - at) * 1e-5;
        let apart_m = (solution.heads_m(&[*at, inside])[0] - together_m).abs();
        assert!(apart_m <= 1e-11, "{apart_m} m apart at {at} beside another");
    }
}
