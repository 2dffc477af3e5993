//! Every value is found again at its exact line and column, wherever it
//! stands and whatever stands around it.

use mirrorwell::plan::Plan;
use mirrorwell::site::{Refusal, Subject};

use crate::support::{SOUND, read, spoilt};

fn place(plan: &Plan, subject: Subject) -> (usize, usize) {
    let location = plan.locate(&subject);
    (location.line, location.column)
}

#[test]
fn dotted_and_inline_tables_keep_their_places() {
    let text = "crs = \"EPSG:32633\"\nunits = \"metric\"\naquifer.transmissivity = 800\n\
                aquifer.anisotropy.ratio = 3\naquifer.anisotropy.azimuth = 4\n\
                well = [{ name = \"é\", at = [412450, 5361020], pumping = 1, radius = 0.2 }]\n\
                map = { spacing = 10 }\n";
    let plan = read(text).unwrap_or_else(|faults| panic!("{faults}"));
    assert_eq!(
        place(&plan, Subject::Aquifer(Some("transmissivity"))),
        (3, 26)
    );
    // Columns count characters, not bytes.
    assert_eq!(place(&plan, Subject::Well(0, Some("pumping"))), (6, 57));
    assert_eq!(place(&plan, Subject::Map(Some("spacing"))), (7, 19));
}

#[test]
fn windows_line_ends_and_a_byte_order_mark_move_nothing() {
    let text = format!("\u{feff}{}", SOUND.replace('\n', "\r\n"));
    let plan = read(&text).unwrap_or_else(|faults| panic!("{faults}"));
    assert_eq!(place(&plan, Subject::Well(0, Some("radius"))), (16, 10));
    assert_eq!(place(&plan, Subject::Edge(0, None)), (7, 1));
}

#[test]
fn a_key_that_is_absent_is_found_at_what_says_it_instead() {
    let plan = read(&spoilt("pumping = 2160.0", "injection = 1")).unwrap();
    assert_eq!(place(&plan, Subject::Well(0, Some("pumping"))), (15, 13));
    // Nothing says it: the table's head.
    assert_eq!(place(&plan, Subject::Well(0, Some("ground"))), (12, 1));
    // Not in the plan at all: the plan's head.
    assert_eq!(place(&plan, Subject::Ambient(None)), (1, 1));
    assert_eq!(place(&plan, Subject::Well(7, None)), (1, 1));
}

#[test]
fn a_refusal_of_a_later_room_is_shown_in_the_plan() {
    let plan = read(SOUND).unwrap();
    let faults = plan.diagnose(&[Refusal {
        subject: Subject::Well(0, Some("at")),
        what: "well `PW-1` lies on the river `Ostra`".to_owned(),
        why: Some("a well on an edge draws from the edge alone".to_owned()),
        remedy: "move it into the aquifer".to_owned(),
        related: vec![(Subject::Edge(0, Some("line")), "the river".to_owned())],
    }]);
    insta::assert_snapshot!(faults.to_string());
}

proptest::proptest! {
    /// The offending text of a fault is the text that was spoilt.
    #[test]
    fn the_place_of_a_fault_is_the_place_of_its_text(
        lines in 0_usize..5,
        spaces in 1_usize..9,
        comment in "[a-z ø漢]{0,12}",
    ) {
        let before = format!("{}# {comment}\n", "\n".repeat(lines));
        let text = format!("{before}{}", SOUND.replace("radius = 0.2", &format!("radius ={}-7", " ".repeat(spaces))));
        let faults = read(&text).unwrap_err().list();
        proptest::prop_assert_eq!(faults.len(), 1);
        proptest::prop_assert_eq!(faults[0].location.line, 16 + lines + 1);
        proptest::prop_assert_eq!(faults[0].location.column, 9 + spaces);
    }

    /// No text makes the reader panic, and whatever is refused has a place.
    #[test]
    fn no_plan_makes_the_reader_panic(cut in 0_usize..280, insert in "[\\[\\]{}=\",\n a-z0-9.-]{0,6}") {
        let at = SOUND.char_indices().nth(cut).map_or(SOUND.len(), |(at, _)| at);
        let text = format!("{}{insert}{}", &SOUND[..at], &SOUND[at..]);
        if let Err(faults) = read(&text) {
            proptest::prop_assert!(faults.count() > 0);
            proptest::prop_assert!(faults.render(true).contains("plan.toml"));
        }
    }
}
