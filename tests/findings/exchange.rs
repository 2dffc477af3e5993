//! What rivers and aquifer exchange before pumping, against Darcy's law by
//! hand: T · slope · length.

use crate::plans::{example, found, site, solved};
use mirrorwell::findings::Solution;
use mirrorwell::site::Point;

/// One well at a place, in an aquifer of 500 m²/d.
fn with_well(edges: &str, at: [f64; 2]) -> Solution {
    solved(site(&format!(
        "[aquifer]\ntransmissivity = 500.0\n{edges}[[well]]\nname = \"P\"\nat = {at:?}\n\
         pumping = 700.0\nradius = 0.2\n"
    )))
}

/// A river or barrier.
fn edge(kind: &str, name: &str, line: &str, more: &str) -> String {
    format!("[[{kind}]]\nname = \"{name}\"\nline = {line}\n{more}\n")
}

/// Water that the edges give before pumping, m³/d, in the site's order.
fn before(solution: &Solution) -> Vec<Option<f64>> {
    let boundaries = found(solution).boundaries;
    boundaries.iter().map(|b| b.exchange_before_m3_d).collect()
}

fn close(got: Option<f64>, expected: f64) -> bool {
    got.is_some_and(|got| (got - expected).abs() <= 1e-12 * expected.abs())
}

/// 25 m/d · 18 m · 1.5 m / 1800 m · 1200 m = 450 m³/d.
#[test]
fn a_river_feeds_a_lower_canal_across_a_box() {
    let given = before(&solved(example("box.toml")));
    assert!(close(given[0], 450.0), "{given:?}");
    assert!(close(given[1], -450.0), "{given:?}");
    assert_eq!(given[2..], [Some(0.0), Some(0.0)]);
}

/// −T ∫ ∂h/∂n dl by the midpoint rule, which on the even periodic gradient
/// between two barriers converges geometrically.
#[test]
fn the_exchange_after_pumping_is_the_flux_of_the_pumped_head() {
    let solution = solved(example("box.toml"));
    let (count, length_m) = (2000, 1200.0);
    let step_m = length_m / f64::from(count);
    let through = |x: f64, inward: f64| -> f64 {
        let slopes = (0..count).map(|index| {
            let y = -600.0 + (f64::from(index) + 0.5) * step_m;
            let at = on_edge(&solution, x, y);
            inward * solution.fields()[0].head_gradient(at).x
        });
        -450.0 * step_m * slopes.sum::<f64>()
    };
    let boundaries = found(&solution).boundaries;
    for (boundary, (x, inward)) in boundaries.iter().zip([(-900.0, 1.0), (900.0, -1.0)]) {
        let after = boundary.exchange_after_m3_d().unwrap();
        // 1e-9 m inside the edge a slope of 1e-2 changes by 1e-9 of itself.
        let got = through(x, inward);
        assert!((after - got).abs() < 1e-6, "{after} {got}");
    }
}

/// A place of the box's own grid a hair inside its edges, in the site's frame.
fn on_edge(solution: &Solution, x: f64, y: f64) -> Point {
    // The first well of the example stands at (150, 120).
    let well = solution.site().wells[0].at;
    let hair = 1e-9 * x.signum();
    Point::new(well.x + x - 150.0 - hair, well.y + y - 120.0)
}

#[test]
fn rivers_of_one_stage_exchange_nothing_before_pumping() {
    for name in ["demo.toml", "two_banks.toml"] {
        for given in before(&solved(example(name))) {
            assert_eq!(given, Some(0.0), "{name}");
        }
    }
}

/// The principal transmissivities of ratio 4 are 1000 and 250 m²/d; the
/// larger lies east to west: 1000 · 2 m / 400 m · 300 m = 1500 m³/d.
#[test]
fn an_anisotropic_box_passes_water_by_its_principal_transmissivity() {
    let edges = "anisotropy = { ratio = 4.0, azimuth = 90.0 }\n".to_owned()
        + &edge("river", "W", "[[0.0, 0.0], [0.0, 300.0]]", "stage = 12.0")
        + &edge(
            "river",
            "E",
            "[[400.0, 0.0], [400.0, 300.0]]",
            "stage = 10.0",
        )
        + &edge("barrier", "S", "[[0.0, 0.0], [400.0, 0.0]]", "")
        + &edge("barrier", "N", "[[0.0, 300.0], [400.0, 300.0]]", "");
    let given = before(&with_well(&edges, [150.0, 100.0]));
    assert!(close(given[0], 1500.0), "{given:?}");
    assert!(close(given[1], -1500.0), "{given:?}");
}

/// 500 m²/d · 2 m / 400 m = 2.5 m²/d along both parts of the side.
#[test]
fn two_rivers_that_make_one_side_share_its_exchange_by_their_lengths() {
    let edges = edge("river", "W1", "[[0.0, 0.0], [0.0, 100.0]]", "stage = 12.0")
        + &edge(
            "river",
            "W2",
            "[[0.0, 100.0], [0.0, 300.0]]",
            "stage = 12.0",
        )
        + &edge(
            "river",
            "E",
            "[[400.0, 0.0], [400.0, 300.0]]",
            "stage = 10.0",
        )
        + &edge("barrier", "S", "[[0.0, 0.0], [400.0, 0.0]]", "")
        + &edge("barrier", "N", "[[0.0, 300.0], [400.0, 300.0]]", "");
    let given = before(&with_well(&edges, [150.0, 100.0]));
    assert!(close(given[0], 250.0), "{given:?}");
    assert!(close(given[1], 500.0), "{given:?}");
    assert!(close(given[2], -750.0), "{given:?}");
}

/// 500 m²/d · 0.002 · 300 m = 300 m³/d reach the river.
#[test]
fn a_river_across_a_valley_takes_the_valley_s_flow() {
    let edges = "[ambient]\ngradient = 0.002\ntoward = 180.0\n".to_owned()
        + &edge("river", "R", "[[0.0, 0.0], [300.0, 0.0]]", "stage = 10.0")
        + &edge("barrier", "W", "[[0.0, 0.0], [0.0, 900.0]]", "")
        + &edge("barrier", "E", "[[300.0, 0.0], [300.0, 900.0]]", "");
    let solution = with_well(&edges, [100.0, 200.0]);
    assert!(close(before(&solution)[0], -300.0));
    let after = found(&solution).boundaries[0].exchange_after_m3_d();
    assert!((after.unwrap() - 400.0).abs() < 1e-9, "{after:?}");
}

#[test]
fn a_flow_across_an_endless_river_is_not_a_number() {
    let river = edge("river", "R", "[[0.0, 0.0], [0.0, 300.0]]", "stage = 10.0");
    let edges = format!("[ambient]\ngradient = 0.002\ntoward = 270.0\n{river}");
    assert_eq!(before(&with_well(&edges, [100.0, 0.0])), [None]);
}

/// The flow runs along the river, not across it.
#[test]
fn a_river_that_falls_along_its_line_exchanges_nothing() {
    let stages = "stage = [10.0, 9.7]";
    let edges = edge("river", "R", "[[0.0, 0.0], [0.0, 300.0]]", stages);
    assert_eq!(before(&with_well(&edges, [100.0, 0.0])), [Some(0.0)]);
}

#[test]
fn a_lake_gives_on_one_side_what_it_takes_on_the_other() {
    let lake = "[ambient]\ngradient = 0.002\ntoward = 270.0\n[[river]]\nname = \"L\"\n\
                stage = 10.0\ncircle = { centre = [0.0, 0.0], radius = 50.0 }\n";
    assert_eq!(before(&with_well(lake, [100.0, 0.0])), [Some(0.0)]);
}

/// Where two stages meet the head jumps, and the flow is infinite.
#[test]
fn rivers_of_unlike_stage_that_meet_have_no_exchange_that_can_be_stated() {
    let wedge = edge("river", "A", "[[0.0, 0.0], [900.0, 0.0]]", "stage = 10.0")
        + &edge("river", "B", "[[0.0, 0.0], [600.0, 900.0]]", "stage = 11.0");
    assert_eq!(before(&with_well(&wedge, [300.0, 100.0])), [None, None]);
    let corner = edge("river", "A", "[[0.0, 0.0], [900.0, 0.0]]", "stage = 10.0")
        + &edge("river", "B", "[[0.0, 0.0], [0.0, 900.0]]", "stage = 11.0");
    assert_eq!(before(&with_well(&corner, [300.0, 100.0])), [None, None]);
}
