//! What the page says of outlines that the general solver computes, of clogged
//! banks, of recharge, and where the proven error is larger than accepted.

use scraper::Html;

use crate::support::{DEMO, page, texts, with};

/// A bent river with a clogged bank, a lake, a ridge, and recharge.
const BENT: &str = include_str!("../../examples/bent_river.toml");

/// Titles and texts of the assumptions.
fn assumptions(html: &Html) -> String {
    texts(html, ".assumptions div").join("\n")
}

#[test]
fn a_general_outline_has_its_edges_its_method_and_its_proven_bound_on_the_page() {
    let html = Html::parse_document(&page(BENT));
    let method = texts(&html, ".pairs div").join("\n");
    assert!(method.contains("Outline General outline between barrier clay ridge (no flow), river Sedge (clogged bank), lake Reed Mere (fixed head)."));
    assert!(method.contains("Method General solver on the edges, its error proven."));
    assert!(method.contains("Exactness Heads are computed to"));
    assert!(method.contains("Exists: Sedge and Reed Mere hold the head."));
    let answer = texts(&html, ".answer").join("\n");
    assert!(answer.contains("computed to better than a millimetre"));
}

/// Each river's share of the wells' water, read back from the page: they add up
/// to the whole, and lie within half a per cent of the findings.
#[test]
fn the_rivers_of_a_general_outline_have_their_shares() {
    let html = Html::parse_document(&page(BENT));
    let answer = texts(&html, ".answer").join("\n");
    with(BENT, |planned| {
        let given = |river: usize| planned.findings.boundaries[river].inflow_m3_d();
        let whole = given(0) + given(1);
        for (river, name) in [(0, "Sedge"), (1, "Reed Mere")] {
            let percent = (100.0 * given(river) / whole).round();
            assert!(answer.contains(&format!("{name} gives")), "{answer}");
            assert!(answer.contains(&format!("({percent}%)")), "{answer}");
        }
        let wells: f64 = planned.findings.wells.iter().map(|w| w.pumping_m3_d).sum();
        approx::assert_relative_eq!(whole, wells, max_relative = 1e-3);
    });
}

#[test]
fn clogged_banks_and_recharge_are_assumptions_where_the_plan_has_them() {
    let html = Html::parse_document(&page(BENT));
    let told = assumptions(&html);
    assert!(told.contains("Clogged banks"));
    assert!(told.contains("Stated for Sedge (1.5 days)"));
    assert!(told.contains("The plan gives 0.0004 m/d all the year round."));
    // The lake's bank is clear; the river's is not.
    assert!(told.contains("No bank resistance is given for Reed Mere:"));
    assert!(!told.contains("Carried on so"));
    let demo = assumptions(&Html::parse_document(&page(DEMO)));
    assert!(!demo.contains("Clogged banks") && !demo.contains("Even recharge"));
    assert!(demo.contains("Carried on so: Ostra and Kamen granite."));
}

#[test]
fn only_edges_that_there_are_are_assumed_to_penetrate_fully() {
    let told = |edges: &str| {
        let plan = format!(
            "title = \"Open\"\ncrs = \"EPSG:32633\"\nunits = \"metric\"\n\
             [aquifer]\ntransmissivity = 500.0\ninfluence_radius = 800.0\n\
             [ambient]\nhead = 50.0\nat = [412000.0, 5361000.0]\n\
             [[well]]\nname = \"PW-1\"\nat = [412000.0, 5361000.0]\npumping = 500.0\nradius = 0.2\n{edges}"
        );
        assumptions(&Html::parse_document(&page(&plan)))
    };
    let open = told("");
    assert!(!open.contains("penetrate fully") && !open.contains("Edges go on straight"));
    let barrier = told(
        "[[barrier]]\nname = \"ridge\"\nline = [[411800.0, 5360000.0], [411800.0, 5362000.0]]\n",
    );
    assert!(barrier.contains("Barriers penetrate fully Barriers let nothing through"));
    assert!(!barrier.contains("stage"));
    let box_of_rivers = assumptions(&Html::parse_document(&page(include_str!(
        "../../examples/box.toml"
    ))));
    assert!(!box_of_rivers.contains("Carried on so"));
}

/// Ninety kilometres from the river rounding leaves more than 1e-9 m.
const FAR: &str = r#"
title = "Far from the river"
crs = { origin = [15.0, 48.0] }
units = "metric"
[aquifer]
transmissivity = 500.0
[accuracy]
head = 1e-9
[[river]]
name = "Ostra"
line = [[0.0, -1000.0], [0.0, 1000.0]]
stage = 60.0
[[well]]
name = "PW-1"
at = [90000.0, 0.0]
pumping = 1000.0
radius = 0.01
"#;

#[test]
fn heads_less_exact_than_the_plan_accepts_are_told_in_the_answer_the_flags_and_the_method() {
    let html = Html::parse_document(&page(FAR));
    let answer = texts(&html, ".answer").join("\n");
    assert!(
        answer.contains("The heads are less exact than the plan asks: the aquifer"),
        "{answer}"
    );
    let codes = texts(&html, ".rule code").join("\n");
    assert!(codes.contains("accuracy-not-reached"));
    let flags = texts(&html, ".flags tbody tr").join("\n");
    assert!(
        flags.contains("more than the 1e-9 m that [accuracy] accepts"),
        "{flags}"
    );
    assert!(flags.contains("Cleared by [accuracy] head ="), "{flags}");
    let method = texts(&html, ".pairs div").join("\n");
    assert!(method.contains("Exactness Heads are computed only to"));
}
