//! `mirrorwell heads`.

use crate::support::{FAR, SMALL, folder, mirrorwell, outcome, printed, with_plan};

#[test]
fn heads_of_the_demo_s_wells_and_neighbours_are_listed() {
    let folder = folder();
    let output = outcome(folder.path(), &["heads"]);
    assert_eq!(output.status.code(), Some(0));
    let table = String::from_utf8(output.stdout).unwrap();
    assert_eq!(table.lines().next(), Some("name,x,y,head,drawdown,note"));
    assert_eq!(table.lines().count(), 1 + 5 + 5);
}

/// s = Q/(2πT) ln(r'/r) beside one river (Ferris et al. 1962): the well
/// stands 100 m from the river, so at 200 m from it s = Q/(2πT) ln 3.
#[test]
fn the_head_beside_a_river_is_the_image_well_s() {
    let folder = folder();
    std::fs::write(folder.path().join("plan.toml"), SMALL).unwrap();
    let output = mirrorwell(folder.path())
        .args(["heads", "plan.toml", "--points", "-"])
        .write_stdin("x,y,name\n200,0,A\n")
        .output()
        .unwrap();
    let table = String::from_utf8(output.stdout).unwrap();
    let row: Vec<&str> = table.lines().nth(1).unwrap().split(',').collect();
    let expected_m = 1000.0 / (std::f64::consts::TAU * 500.0) * 3.0_f64.ln();
    let drawdown_m: f64 = row[4].parse().unwrap();
    let head_m: f64 = row[3].parse().unwrap();
    assert_eq!(row[0], "A");
    assert!((drawdown_m - expected_m).abs() < 1e-12);
    assert!((head_m - (60.0 - expected_m)).abs() < 1e-12);
}

#[test]
fn points_outside_have_no_head_and_a_note_that_says_why() {
    let folder = folder();
    std::fs::write(folder.path().join("plan.toml"), SMALL).unwrap();
    let output = mirrorwell(folder.path())
        .args(["heads", "plan.toml", "--points", "-"])
        .write_stdin("-50,0,over there\n100.05,0,in the well\n")
        .output()
        .unwrap();
    insta::assert_snapshot!(printed(&output));
}

#[test]
fn every_fault_of_a_points_file_is_shown_with_its_line() {
    let folder = folder();
    std::fs::write(
        folder.path().join("points.csv"),
        b"name,x,y\nA,1,2\nB,one,2\nC,3\nD,inf,0\nE,\xff,1\n",
    )
    .unwrap();
    let output = outcome(folder.path(), &["heads", "--points", "points.csv"]);
    assert_eq!(output.status.code(), Some(2));
    insta::assert_snapshot!(printed(&output));
}

#[test]
fn a_file_that_is_no_csv_of_points_is_refused() {
    let folder = folder();
    std::fs::write(folder.path().join("points.csv"), "east;north\n1,5;2,5\n").unwrap();
    let output = outcome(folder.path(), &["heads", "--points", "points.csv"]);
    insta::assert_snapshot!(printed(&output));
}

#[test]
fn heads_less_exact_than_the_plan_asks_come_with_a_note() {
    let output = with_plan(FAR, "heads");
    assert_eq!(output.status.code(), Some(0));
    let notes = String::from_utf8(output.stderr).unwrap();
    assert!(notes.starts_with("note: Heads are computed only to 6e-9 m"));
}
