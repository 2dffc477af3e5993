//! A large plan's page stays small, and says what it leaves out.

use std::fmt::Write as _;

use scraper::Html;

use crate::support::{page, texts};

/// 200 wells and 500 neighbours on a lattice of 10 km.
fn large() -> String {
    let mut plan = String::from(
        "title = \"Large\"\ncrs = \"EPSG:32633\"\nunits = \"metric\"\n\
         [aquifer]\ntransmissivity = 900.0\nroof = 40.0\n\
         [map]\nextent = [410000.0, 5360000.0, 420000.0, 5370000.0]\nspacing = 50.0\n\
         [[river]]\nname = \"Ostra\"\nline = [[409000.0, 5360000.0], [421000.0, 5359000.0]]\nstage = 61.4\n",
    );
    let place = |index: u32, every: u32| {
        let (column, row) = (index % every, index / every);
        let step = 9400.0 / f64::from(every);
        (
            410_300.0 + step * f64::from(column) + f64::from(index * 37 % 101),
            5_360_300.0 + step * f64::from(row) + f64::from(index * 53 % 97),
        )
    };
    for index in 0..200 {
        let (x, y) = place(index, 15);
        let rate = 100 + index * 29 % 400;
        let _ = write!(
            plan,
            "[[well]]\nname = \"PW-{index}\"\nat = [{x:.1}, {y:.1}]\npumping = {rate}.0\nradius = 0.2\n"
        );
    }
    for index in 0..500 {
        let (x, y) = place(index, 23);
        let _ = write!(
            plan,
            "[[neighbour]]\nname = \"Lot {index}\"\nat = [{:.1}, {:.1}]\nallowed_drawdown = 4.0\n",
            x + 150.0,
            y + 120.0
        );
    }
    plan
}

/// The aim is 5 MB.
#[test]
fn the_page_of_200_wells_and_500_neighbours_is_small_and_says_what_it_leaves_out() {
    let page = page(&large());
    assert!(page.len() < 5_000_000, "{} bytes", page.len());
    let html = Html::parse_document(&page);
    assert!(html.errors.is_empty());
    let left_out = texts(&html, "section[aria-labelledby=interference] p").join("");
    assert!(
        left_out
            .contains("the 12 wells that cause most have a column each, the other 188 share one")
    );
    assert!(left_out.contains("of 500 neighbours the 30 most drawn down have a row"));
    assert_eq!(texts(&html, ".matrix thead th").len(), 14);
}
