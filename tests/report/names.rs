//! Names from outside leave the page sound.

use std::collections::BTreeSet;

use scraper::Html;

use crate::support::{DEMO, all, page, texts};

/// Names that try to leave their places, as TOML strings.
fn hostile() -> Vec<String> {
    [
        r"<script>window.hit = 1</script>".to_owned(),
        r#"\"><img src=x onerror=window.hit=1>"#.to_owned(),
        r"' onmouseover='window.hit=1".to_owned(),
        r"</title></style></svg></table>-->]]>".to_owned(),
        r"{{ 7 * 7 }}{% raw %}&lt;&#60;".to_owned(),
        r"first\nsecond\r\n\tthird\u0000\u001b[31m".to_owned(),
        r"\u202Eesrever\u2066 \u2028".to_owned(),
        "באר מספר 12".to_owned(),
        "long ".repeat(2000),
        "𝕎𝕖𝕝𝕝 👩‍🔬 ¼ é".to_owned(),
    ]
    .into()
}

/// The demo with such names for a well, a neighbour, the river and the title.
fn with_names(name: &str) -> String {
    DEMO.replace("PW-2", &format!("W {name}"))
        .replace("Lot 14 supply well", &format!("N {name}"))
        .replace("\"Ostra\"", &format!("\"R {name}\""))
        .replace("Harrow Bend well field", &format!("T {name}"))
}

/// The elements of a page and the names of their attributes.
fn parts(html: &Html) -> BTreeSet<String> {
    let elements = all(html, "*");
    let names = elements.iter().flat_map(|element| {
        let element = element.value();
        let attributes = element.attrs().map(|(name, _)| format!("@{name}"));
        attributes.chain([element.name().to_owned()])
    });
    names.collect()
}

/// The same elements and attributes, no parse error, one script, and the names
/// as texts.
#[test]
fn hostile_names_are_nothing_but_text() {
    let harmless = Html::parse_document(&page(DEMO));
    for name in hostile() {
        let html = Html::parse_document(&page(&with_names(&name)));
        assert!(html.errors.is_empty(), "{name}: {:?}", html.errors);
        assert_eq!(parts(&html), parts(&harmless), "{name}");
        assert_eq!(all(&html, "script").len(), 1);
        let rows = texts(&html, "th bdi");
        let is_shown = |row: &String| row.trim_start_matches('\u{2068}').starts_with("N ");
        assert!(rows.iter().any(is_shown), "{name}");
    }
}

#[test]
fn a_long_name_is_cut_where_it_is_shown() {
    let html = Html::parse_document(&page(&with_names(&"long ".repeat(2000))));
    let longest = texts(&html, "th, td, p, h1, text, dd");
    let longest = longest.iter().map(|text| text.chars().count()).max();
    assert!(longest.unwrap() < 2000);
}

/// A name that turns the writing around cannot turn what follows it.
#[test]
fn controls_of_direction_do_not_reach_the_page() {
    let page = page(&with_names(r"\u202Eesrever\u2066"));
    assert!(!page.contains('\u{202e}'));
    assert!(!page.contains('\u{2066}'));
}
