//! Source: mpmath to 40 digits, image wells held against eigenfunction series
//! and shares by quadrature: `tests/references/axes.py`, `wedges.py` and
//! `shares.py`.

use mirrorwell::green::Green;
use mirrorwell::outline::Shape;
use num_complex::Complex64;

use crate::shapes::{axes, axis, green, wedge};
use crate::table::{Row, rows};

/// G is a sum of at most 16 logarithms of products, each good to a few ε
/// (2.2e-16) of its size, at most some 20 far down a strip: 16 · 20 · 2ε/2π
/// is 1e-15 · 1; the tables' extreme places cost up to two digits more.
const TOLERANCE: f64 = 1e-12;

fn place(row: &Row, x: &str, y: &str) -> Complex64 {
    Complex64::new(row.number(x), row.number(y))
}

fn axes_of(row: &Row) -> Shape {
    axes(
        axis(row.text("x_kinds"), row.number("x_width")),
        axis(row.text("y_kinds"), row.number("y_width")),
    )
}

fn round_shape_of(row: &Row) -> Shape {
    let size = row.number("size");
    match row.text("shape") {
        "wedge" => wedge(size, row.text("kinds")),
        "disk" => Shape::Disk { radius_m: size },
        _ => Shape::DiskExterior { radius_m: size },
    }
}

/// What differs from the table in a row, in words.
fn differences(row: &Row, green: &dyn Green, name: &str) -> Vec<String> {
    let (z, pole) = (place(row, "x", "y"), place(row, "pole_x", "pole_y"));
    let (value, regular_part) = (row.number("value"), row.number("regular_part"));
    let mut differences = Vec::new();
    let mut compare = |what: String, ours: f64, theirs: f64| {
        if (ours - theirs).abs().is_nan() || (ours - theirs).abs() > TOLERANCE {
            differences.push(format!("{name}: {what} = {ours}, table {theirs}"));
        }
    };
    compare(format!("G({z}, {pole})"), green.value(z, pole), value);
    let ours = green.regular_part(pole);
    compare(format!("regular part at {pole}"), ours, regular_part);
    differences
}

fn assert_none(differences: &[String]) {
    assert!(differences.is_empty(), "{}", differences.join("\n"));
}

/// The floor keeps the table from shrinking.
#[test]
fn every_axis_parallel_outline_has_the_value_of_its_eigenfunction_series() {
    let rows = rows("axes");
    assert!(rows.len() >= 218, "{}", rows.len());
    let mut wrong = Vec::new();
    for row in rows {
        let name = format!(
            "{} {}/{}",
            row.text("shape"),
            row.text("x_kinds"),
            row.text("y_kinds")
        );
        wrong.extend(differences(&row, green(&axes_of(&row)).as_ref(), &name));
    }
    assert_none(&wrong);
}

#[test]
fn wedges_of_any_angle_and_disks_have_the_value_of_their_conformal_map() {
    let rows = rows("wedges");
    assert!(rows.len() >= 124, "{}", rows.len());
    let mut wrong = Vec::new();
    for row in rows {
        let name = format!(
            "{} {} {}",
            row.text("shape"),
            row.text("kinds"),
            row.text("size")
        );
        wrong.extend(differences(
            &row,
            green(&round_shape_of(&row)).as_ref(),
            &name,
        ));
    }
    assert_none(&wrong);
}

/// The stream function is a difference of angles, each good to ε·π, and a
/// side's share that of a few of them.
#[test]
fn shares_of_reaches_are_those_of_quadrature_and_series() {
    let rows = rows("shares");
    assert!(rows.len() >= 144, "{}", rows.len());
    for row in rows {
        let shape = match row.text("shape") {
            "wedge" => wedge(row.number("x_width"), row.text("x_kinds")),
            "disk" => Shape::Disk {
                radius_m: row.number("x_width"),
            },
            "disk-exterior" => Shape::DiskExterior {
                radius_m: row.number("x_width"),
            },
            _ => axes_of(&row),
        };
        let pole = place(&row, "pole_x", "pole_y");
        let along = row.number("from")..row.number("to");
        let side = row.number("side") as usize;
        let ours = green(&shape).share(side, along.clone(), pole);
        assert!(
            (ours - row.number("share")).abs() <= TOLERANCE,
            "{} {}/{} side {side}, {along:?}: {ours}, table {}",
            row.text("shape"),
            row.text("x_kinds"),
            row.text("y_kinds"),
            row.text("share")
        );
    }
}
