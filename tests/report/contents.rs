//! What the page says, against the findings.

use base64::Engine;
use base64::engine::general_purpose::STANDARD;
use mirrorwell::layers::words::Words;
use mirrorwell::site::{Point, Vector};
use scraper::{ElementRef, Html};

use crate::support::{DEMO, all, page, text, texts, with};

#[test]
fn the_demo_s_answer_is_in_plain_words() {
    let html = Html::parse_document(&page(DEMO));
    insta::assert_snapshot!(texts(&html, ".answer").join("\n"));
}

#[test]
fn a_plan_in_feet_is_answered_in_feet() {
    let html = Html::parse_document(&page(include_str!("../../examples/us_units.toml")));
    insta::assert_snapshot!(texts(&html, ".answer").join("\n"));
}

#[test]
fn a_plan_that_keeps_its_limits_says_so() {
    let plan = DEMO
        .replace("allowed_drawdown = 1.5", "allowed_drawdown = 9.0")
        .replace("allowed_drawdown = 1.0", "allowed_drawdown = 9.0");
    let html = Html::parse_document(&page(&plan));
    let answer = texts(&html, ".answer").join("\n");
    assert!(answer.starts_with("All 4 neighbours with a limit stay within it."));
    assert!(answer.contains("Willow spring comes closest to its limit"));
}

/// Every flag stands on the page with its reason and what would clear it.
#[test]
fn every_flag_has_its_reason_its_rule_and_its_remedy() {
    let html = Html::parse_document(&page(DEMO));
    let rows = texts(&html, ".flags tbody tr");
    let rules = texts(&html, ".rule").join("\n");
    with(DEMO, |planned| {
        let words = Words::of(planned);
        assert_eq!(rows.len(), planned.findings.flags.len());
        for (flag, row) in planned.findings.flags.iter().zip(&rows) {
            let lower = row.to_lowercase();
            assert!(lower.contains(&words.reason(flag).to_lowercase()), "{row}");
            assert!(row.starts_with(&words.who(flag.who)));
            if let Some(clearing) = words.clearing(flag) {
                assert!(row.ends_with(&clearing), "{row}");
            }
            assert!(rules.contains(&words.rule(flag.code)));
        }
    });
}

/// A number as the page writes it.
fn number(cell: &str) -> f64 {
    cell.replace('−', "-").replace(',', "").parse().unwrap()
}

/// Two decimals: half a hundredth.
#[test]
fn the_matrix_holds_the_findings_drawdowns_and_its_rows_their_sums() {
    let html = Html::parse_document(&page(DEMO));
    with(DEMO, |planned| {
        let matrix = &planned.findings.interference;
        let wells = matrix.well_rows().iter();
        let neighbours = matrix.neighbour_rows().iter().flatten();
        let rows: Vec<ElementRef<'_>> = all(&html, ".matrix tbody tr")
            .into_iter()
            .filter(|row| text(*row) != "Wells" && text(*row) != "Neighbours")
            .collect();
        assert_eq!(rows.len(), 10);
        for (row, parts_m) in rows.iter().zip(wells.chain(neighbours)) {
            let cells: Vec<f64> = row
                .child_elements()
                .skip(1)
                .map(|cell| number(&text(cell)))
                .collect();
            let sum_m = parts_m.iter().sum();
            for (cell, part_m) in cells.iter().zip(parts_m.iter().chain([&sum_m])) {
                assert!((cell - part_m).abs() <= 0.005 + 1e-9);
            }
        }
    });
}

/// The grid under the pointer, unpacked as the script does it: half a step at
/// every node.
#[test]
fn the_values_under_the_pointer_are_the_field_s() {
    let html = Html::parse_document(&page(DEMO));
    with(DEMO, |planned| {
        let extent = planned.survey.window.extent;
        let size = extent.max - extent.min;
        for figure in all(&html, ".map-figure") {
            let number = |name: &str| -> f64 { figure.attr(name).unwrap().parse().unwrap() };
            let (columns, rows) = (number("data-columns"), number("data-rows"));
            let bytes = STANDARD
                .decode(figure.attr("data-values").unwrap())
                .unwrap();
            assert_eq!(bytes.len() as f64, 2.0 * columns * rows);
            let points: Vec<Point> = (0..bytes.len() / 2)
                .map(|node| {
                    let (column, row) = (node as f64 % columns, (node as f64 / columns).floor());
                    Point::new(extent.min.x, extent.max.y)
                        + Vector::new(
                            size.x * column / (columns - 1.0),
                            -size.y * row / (rows - 1.0),
                        )
                })
                .collect();
            let values = match figure.attr("data-quantity").unwrap() {
                "head" => planned.solution.heads_m(&points),
                _ => planned.solution.drawdowns_m(&points),
            };
            let (low, step) = (number("data-low"), number("data-step"));
            for (pair, value) in bytes.chunks(2).zip(values) {
                let packed = u16::from_le_bytes([pair[0], pair[1]]);
                if packed == u16::MAX {
                    assert!(value.is_nan());
                } else {
                    assert!((low + step * f64::from(packed) - value).abs() <= 0.5 * step + 1e-9);
                }
            }
        }
    });
}

/// 16 L/s is 16 · 86.4 m³/d.
#[test]
fn inputs_stand_as_written_and_in_metres_and_days() {
    let html = Html::parse_document(&page(DEMO));
    let rows = texts(&html, ".inputs tbody tr");
    assert!(rows.contains(&"well PW-4 pumping 16 L/s 1382.4 m3/d".to_owned()));
    assert!(rows.contains(&"[aquifer] conductivity 38.0 m/d 38 m/d".to_owned()));
    let plan = texts(&html, "pre").join("\n");
    assert!(plan.contains("Some limits are broken on purpose."));
}

#[test]
fn what_is_doubtful_in_a_plan_is_said() {
    let doubts = |plan: &str| {
        let html = Html::parse_document(&page(plan));
        texts(&html, ".assumptions li").join("\n")
    };
    let demo = doubts(DEMO);
    assert!(demo.contains("PW-2: the head in the aquifer at the well falls"));
    assert!(demo.contains("No bank resistance is given for Ostra"));
    let open = r#"
title = "Open"
crs = "EPSG:32633"
units = "metric"
[aquifer]
material = "coarse-sand"
thickness = 20.0
influence_radius = 800.0
[ambient]
head = 50.0
at = [412000.0, 5361000.0]
[map]
extent = [411990.0, 5360500.0, 412900.0, 5361500.0]
[[well]]
name = "PW-1"
at = [412000.0, 5361000.0]
pumping = 500.0
radius = 0.2
"#;
    let open = doubts(open);
    assert!(open.contains("gives no roof"));
    assert!(open.contains("material’s typical value"));
    assert!(open.contains("the reach of the cones, 800.00 m, is assumed"));
    assert!(open.contains("At or beyond the map’s rim: PW-1"));
}
