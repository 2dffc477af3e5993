//! A flow from afar in open outlines with bends: taken where the edges let it go on,
//! refused with both numbers otherwise.

use mirrorwell::findings::Solution;
use mirrorwell::site::Refusal;

use crate::plans::site;

/// A river of three legs whose ends run east and west, or as `east` says.
fn bent(east: &str, gradient: f64, toward: f64) -> Result<Solution, Vec<Refusal>> {
    Solution::of(site(&format!(
        "[aquifer]\ntransmissivity = 500.0\n\
         [ambient]\ngradient = {gradient:?}\ntoward = {toward:?}\n\
         [[river]]\nname = \"Ostra\"\n\
         line = [[-900.0, 0.0], [-300.0, 0.0], [100.0, 150.0], [400.0, -50.0], {east}]\n\
         stage = 50.0\n\
         [[well]]\nname = \"P\"\nat = [0.0, 300.0]\npumping = 700.0\nradius = 0.2\n"
    )))
}

fn refused(solution: Result<Solution, Vec<Refusal>>) -> String {
    let refusals = solution.err().expect("a refusal");
    let texts: Vec<String> = refusals.iter().map(ToString::to_string).collect();
    texts.join("\n")
}

/// Far from the bends the head rises by the gradient from the half-lines, which
/// lie at y = 0 and −50: 20 km north of the bends the rest is some thirtieth of
/// the 0.1 m by which they differ.
#[test]
fn a_flow_square_to_both_ends_of_a_bent_river_goes_on_far_away() {
    let solution = bent("[900.0, -50.0]", 0.002, 180.0).unwrap();
    let well = solution.site().wells[0].at;
    let far = well + mirrorwell::site::Vector::new(0.0, 20_000.0 - 300.0);
    let head_m = solution.ambient_head_m(far);
    let expected_m = 50.0 + 0.002 * 20_025.0;
    assert!((head_m - expected_m).abs() <= 0.01, "{head_m} {expected_m}");
}

#[test]
fn a_flow_a_degree_off_is_taken_square_to_the_river_and_noted() {
    let solution = bent("[900.0, -50.0]", 0.002, 180.9).unwrap();
    let notes = solution.fields()[0].notes().join("\n");
    assert!(
        notes.contains("toward azimuth 180.00° with gradient 0.002000"),
        "{notes}"
    );
}

#[test]
fn a_flow_along_or_aslant_to_a_bent_river_is_refused_with_both_numbers() {
    let along = refused(bent("[900.0, -50.0]", 0.002, 90.0));
    assert!(
        along.contains("the plan says 0.002000 toward 90.0°"),
        "{along}"
    );
    assert!(
        along.contains("the edges allow no uniform flow there"),
        "{along}"
    );
    let aslant = refused(bent("[900.0, -50.0]", 0.002, 150.0));
    // cos 30° of it is square to the ends.
    assert!(
        aslant.contains("the edges allow 0.001732 toward 180.0°"),
        "{aslant}"
    );
}

#[test]
fn no_flow_goes_on_between_half_lines_that_are_not_parallel() {
    let text = refused(bent("[900.0, 100.0]", 0.002, 180.0));
    assert!(
        text.contains("the edges allow no uniform flow there"),
        "{text}"
    );
}
