//! The page as a document: sound, self-contained, the same every time.

use base64::Engine;
use base64::engine::general_purpose::STANDARD;
use scraper::Html;
use sha2::{Digest, Sha256};

use crate::support::{DEMO, all, page, texts};

/// The HTML standard's parser (html5ever) finds no fault.
#[test]
fn the_page_is_sound_html() {
    for plan in [
        DEMO,
        include_str!("../../examples/box.toml"),
        include_str!("../../examples/us_units.toml"),
        include_str!("../../examples/two_banks.toml"),
    ] {
        let html = Html::parse_document(&page(plan));
        assert!(html.errors.is_empty(), "{:?}", html.errors);
    }
}

#[test]
fn every_name_of_an_element_is_given_once() {
    let html = Html::parse_document(&page(DEMO));
    let mut ids: Vec<&str> = all(&html, "[id]")
        .iter()
        .filter_map(|element| element.attr("id"))
        .collect();
    let count = ids.len();
    ids.sort_unstable();
    ids.dedup();
    assert_eq!(ids.len(), count);
}

#[test]
fn the_sections_stand_in_their_order() {
    let html = Html::parse_document(&page(DEMO));
    assert_eq!(texts(&html, "h1"), ["Harrow Bend well field"]);
    assert_eq!(
        texts(&html, "h2"),
        [
            "2 of 4 neighbours with a limit are drawn down too far.",
            "Drawdown m",
            "Head m",
            "Section along the wells",
            "Flags",
            "Neighbours",
            "Wells",
            "Rivers",
            "Who draws down whom",
            "How it was computed",
            "Before anyone drills",
            "Review",
        ]
    );
}

/// No attribute that fetches, no address in the styles.
#[test]
fn the_page_asks_for_nothing_outside_itself() {
    let page = page(DEMO);
    let html = Html::parse_document(&page);
    let fetching = "[src], [href], [srcset], [action], [poster], [data], link, iframe, object, embed, img, form";
    assert!(all(&html, fetching).is_empty());
    assert!(!page.contains("://"));
    assert!(!page.contains("@import"));
    let addresses = page.matches("url(").count();
    assert_eq!(addresses, page.matches("url(#").count());
}

/// The policy names exactly the styles and the script that stand on the page.
#[test]
fn the_policy_lets_the_page_s_own_styles_and_script_through_and_nothing_else() {
    let html = Html::parse_document(&page(DEMO));
    let hash = |selector: &str| {
        let elements = all(&html, selector);
        assert_eq!(elements.len(), 1, "{selector}");
        let text: String = elements[0].text().collect();
        STANDARD.encode(Sha256::digest(text))
    };
    let policy = all(&html, "meta[http-equiv=Content-Security-Policy]")[0];
    assert_eq!(
        policy.attr("content").unwrap(),
        format!(
            "default-src 'none'; style-src 'sha256-{}'; script-src 'sha256-{}'; img-src data:; \
             base-uri 'none'; form-action 'none'",
            hash("style"),
            hash("script")
        )
    );
    // Such a policy forbids styles and handlers in attributes.
    assert!(all(&html, "[style]").is_empty());
}

#[test]
fn the_same_plan_gives_the_same_page_at_any_thread_count() {
    let on_threads = |count: usize| {
        rayon::ThreadPoolBuilder::new()
            .num_threads(count)
            .build()
            .unwrap()
            .install(|| page(DEMO))
    };
    let first = on_threads(1);
    assert!(first == on_threads(1));
    assert!(first == on_threads(3));
}
