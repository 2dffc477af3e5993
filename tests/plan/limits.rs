//! Plans that are too large are refused at once, and names are kept as they are.

use std::fmt::Write as _;
use std::time::{Duration, Instant};

use mirrorwell::plan::Plan;

use crate::support::{SOUND, read, spoilt};

fn many_wells(count: usize) -> String {
    let mut text = SOUND.to_owned();
    for number in 0..count {
        let x = 412_000 + 2 * (number % 300);
        let y = 5_360_000 + 2 * (number / 300);
        write!(
            text,
            "[[well]]\nname = \"W{number}\"\nat = [{x}, {y}]\npumping = 1\nradius = 0.1\n"
        )
        .unwrap();
    }
    text
}

#[test]
fn a_hundred_thousand_wells_are_refused_clearly_and_fast() {
    let text = many_wells(100_000);
    let start = Instant::now();
    let faults = read(&text).unwrap_err().list();
    assert!(start.elapsed() < Duration::from_secs(10));
    assert_eq!(faults.len(), 1, "{faults:?}");
    assert_eq!(
        faults[0].what,
        "the plan has 100001 [[well]] tables; 20000 is the most"
    );
}

#[test]
fn many_wells_that_are_sound_are_read() {
    let plan = read(&many_wells(5_000)).unwrap_or_else(|faults| panic!("{faults}"));
    assert_eq!(plan.site.wells.len(), 5_001);
}

#[test]
fn thousands_of_faults_are_counted_not_shown() {
    let text = many_wells(5_000).replace("radius = 0.1", "radius = 0");
    let faults = read(&text).unwrap_err();
    assert_eq!(faults.count(), 1_000);
    assert!(
        faults
            .render(false)
            .ends_with("and at least 900 more faults")
    );
}

#[test]
fn a_line_of_too_many_vertices_is_refused() {
    let vertices: String = (0..20_001)
        .map(|x| format!("[{}, 5360000],", 400_000 + x))
        .collect();
    let text = spoilt(
        "[[412000.0, 5360000.0], [413500.0, 5362600.0]]",
        &format!("[{vertices}]"),
    );
    let faults = read(&text).unwrap_err();
    assert_eq!(
        faults.list()[0].what,
        "river `Ostra`: `line` has 20001 vertices; 20000 is the most"
    );
    // The line of 400 kB is shown in part.
    assert!(faults.render(false).len() < 2_000);
}

#[test]
fn a_plan_of_more_than_64_megabytes_is_refused() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("large.toml");
    let file = std::fs::File::create(&path).unwrap();
    file.set_len(64 * 1024 * 1024 + 1).unwrap();
    let faults = Plan::read(&path).unwrap_err();
    assert!(
        faults.list()[0]
            .what
            .ends_with("cannot be read: it is larger than 64 MB")
    );
}

#[test]
fn a_plan_that_is_not_there_or_is_a_folder_is_refused_by_name() {
    let folder = tempfile::tempdir().unwrap();
    let missing = Plan::read(&folder.path().join("none.toml")).unwrap_err();
    assert!(missing.to_string().contains("none.toml"));
    let a_folder = Plan::read(folder.path()).unwrap_err();
    assert!(a_folder.to_string().contains("it is a folder, not a file"));
}

#[test]
fn bytes_that_are_not_utf8_are_shown_where_they_stand() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("latin.toml");
    std::fs::write(&path, b"title = \"Gr\xfcnau\"\n").unwrap();
    let faults = Plan::read(&path).unwrap_err().list();
    assert_eq!(
        (faults[0].location.line, faults[0].location.column),
        (1, 12)
    );
    assert!(faults[0].what.ends_with("latin.toml is not UTF-8 text"));
}

#[test]
fn hostile_names_are_kept_verbatim_and_shown_safely() {
    let names = [
        "=1+1",
        "a,b\"c",
        "two\nlines",
        "Колодец №1 井戸",
        "\u{1b}[31mred",
        "</script>",
        "\u{202e}reversed",
    ];
    for name in names {
        let written = format!("\"{}\"", name.escape_default());
        let written = written.replace("\\u{1b}", "\\u001b").replace("\\'", "'");
        let written = unbraced(&written);
        let plan = read(&spoilt("\"PW-1\"", &written)).unwrap_or_else(|faults| panic!("{faults}"));
        assert_eq!(plan.site.wells[0].name, name);
        let refused = spoilt("\"PW-1\"", &written).replace("radius = 0.2", "radius = 0");
        let shown = read(&refused).unwrap_err().render(false);
        assert!(
            !shown.contains('\u{1b}') && !shown.contains("two\nlines"),
            "{shown}"
        );
    }
}

/// Rust's escapes as TOML's: \u{4e95} becomes \u4e95.
fn unbraced(text: &str) -> String {
    let mut parts = text.split("\\u{");
    let mut unbraced = parts.next().unwrap_or("").to_owned();
    for part in parts {
        let (code, rest) = part.split_once('}').unwrap();
        write!(unbraced, "\\u{code:0>4}{rest}").unwrap();
    }
    unbraced
}
