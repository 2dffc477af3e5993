//! Sources: least squares with analytic functions and poles clustered at the
//! corners (Gopal & Trefethen 2019), images in bipolar coordinates,
//! eigenfunction series, and published harmonic measures, each with the script
//! that made it in `tests/references/general/`.

use std::path::Path;

use mirrorwell::field::WellField;
use mirrorwell::outline;
use mirrorwell::plan::Plan;

use crate::table::{Row, rows};

/// A plan of `tests/references/general/`, solved.
struct Case {
    name: &'static str,
    plan: Plan,
    field: WellField,
}

impl Case {
    fn of(name: &'static str) -> Self {
        let path = Path::new(env!("CARGO_MANIFEST_DIR"))
            .join(format!("tests/references/general/{name}.toml"));
        let plan = Plan::read(&path).unwrap_or_else(|faults| panic!("{faults}"));
        let solved = outline::find(&plan.site).and_then(|outlines| {
            let [outline] = <[_; 1]>::try_from(outlines).expect("one aquifer");
            WellField::solve(&plan.site, outline)
        });
        let field = solved.unwrap_or_else(|refusals| panic!("{name}: {refusals:?}"));
        Self { name, plan, field }
    }

    fn edge(&self, name: &str) -> usize {
        let mut edges = self.plan.site.edges.iter();
        let found = edges.position(|edge| edge.name == name);
        found.unwrap_or_else(|| panic!("{}: no edge {name}", self.name))
    }

    fn well(&self, name: &str) -> usize {
        let mut wells = self.plan.site.wells.iter();
        let found = wells.position(|well| well.name == name);
        found.unwrap_or_else(|| panic!("{}: no well {name}", self.name))
    }

    /// What the program says to a row of the table.
    fn answer(&self, row: &Row) -> f64 {
        let (name, field) = (row.text("name"), &self.field);
        let at = || self.plan.to_site(row.number("x"), row.number("y"));
        let parts = || name.split_once(" > ").expect("two names");
        match row.text("kind") {
            "ambient" => field.ambient_head_m(at()),
            "head" => field.heads_m(&[at()])[0],
            "drawdown" => field.drawdowns_m(&[at()])[0],
            "drawdown_by_well" => field.drawdown_by_m(self.well(parts().1), at()),
            "own_drawdown" => field.own_drawdown_m(self.well(name)),
            "inflow" => {
                let edge = self.edge(name);
                let wells = 0..self.plan.site.wells.len();
                wells.map(|well| field.inflow_m3_d(edge, well)).sum()
            }
            "inflow_by_well" => {
                let (river, well) = parts();
                field.inflow_m3_d(self.edge(river), self.well(well))
            }
            "exchange" => {
                let inflow = field.ambient_inflow_m3_d(self.edge(name));
                inflow.unwrap_or_else(|| panic!("{}: no exchange of {name}", self.name))
            }
            kind => panic!("no kind {kind}"),
        }
    }

    /// What a value may differ by: what the table and the program say of
    /// themselves. A head wrong by δ makes the stream function wrong by about
    /// as much, so an inflow by T δ; ten times that near corners.
    fn tolerance(&self, row: &Row) -> f64 {
        let bound_m = self.field.error_bound_m();
        let ours = match row.text("kind") {
            "inflow" | "inflow_by_well" | "exchange" => {
                10.0 * self.plan.site.aquifer.transmissivity.si() * bound_m
            }
            _ => bound_m,
        };
        row.number("accuracy") + ours
    }
}

/// Every value of a table, and a bound on the program's own error that makes
/// the comparison worth something.
fn agrees_with_its_table(name: &'static str) {
    let case = Case::of(name);
    let bound_m = case.field.error_bound_m();
    assert!(bound_m <= 1e-4, "{name}: error bound {bound_m} m");
    let differences: Vec<String> = rows(&format!("general/{name}"))
        .iter()
        .filter_map(|row| {
            let (ours, theirs) = (case.answer(row), row.number("value"));
            let tolerance = case.tolerance(row);
            let apart = (ours - theirs).abs();
            (apart.is_nan() || apart > tolerance).then(|| {
                format!(
                    "{name}: {} {}: {ours}, table {theirs}, apart {apart:e}, allowed {tolerance:e}",
                    row.text("kind"),
                    row.text("name")
                )
            })
        })
        .collect();
    assert!(differences.is_empty(), "{}", differences.join("\n"));
}

#[test]
fn eight_corners_with_rivers_and_barriers_agree_with_least_squares() {
    agrees_with_its_table("sallow_fold");
}

#[test]
fn a_clogged_bank_among_eight_corners_agrees_with_least_squares() {
    agrees_with_its_table("sallow_fold_clogged");
}

#[test]
fn recharge_within_eight_corners_agrees_with_least_squares() {
    agrees_with_its_table("sallow_fold_recharge");
}

#[test]
fn a_valley_with_a_lake_and_a_barrier_island_agrees_with_least_squares() {
    agrees_with_its_table("ostrey_vale");
}

#[test]
fn a_river_of_bends_from_infinity_to_infinity_agrees_with_least_squares() {
    agrees_with_its_table("fen_bends");
}

#[test]
fn a_river_and_a_barrier_that_both_reach_infinity_agree_with_least_squares() {
    agrees_with_its_table("quarry_bend");
}

#[test]
fn a_flow_from_afar_square_to_a_bent_river_agrees_with_least_squares() {
    agrees_with_its_table("withy_reach");
}

#[test]
fn a_flow_from_afar_along_a_bent_barrier_to_a_bent_river_agrees_with_least_squares() {
    agrees_with_its_table("crag_side");
}

#[test]
fn a_lake_beside_a_straight_river_agrees_with_images_in_bipolar_coordinates() {
    agrees_with_its_table("heron_bank");
}

#[test]
fn a_lake_beside_a_straight_barrier_agrees_with_images_in_bipolar_coordinates() {
    agrees_with_its_table("heron_dyke");
}

#[test]
fn a_box_with_recharge_and_a_clogged_side_agrees_with_eigenfunctions() {
    agrees_with_its_table("clogged_box");
}

#[test]
fn a_strip_with_recharge_and_a_clogged_side_agrees_with_its_fourier_integral() {
    agrees_with_its_table("clogged_strip");
}

#[test]
fn one_straight_clogged_bank_agrees_with_the_exponential_integral() {
    agrees_with_its_table("clogged_bank");
}

#[test]
fn an_l_of_rivers_gives_the_harmonic_measures_of_its_schwarz_christoffel_map() {
    agrees_with_its_table("ell_all_rivers");
}

#[test]
fn an_l_between_barriers_gives_the_harmonic_measures_of_its_two_ends() {
    agrees_with_its_table("ell_two_ends");
    agrees_with_its_table("ell_one_end");
}

#[test]
fn squares_and_pentagons_of_rivers_give_their_harmonic_measures() {
    agrees_with_its_table("square_rivers");
    agrees_with_its_table("pentagon_rivers");
}

/// SIAM 100-digit challenge, problem 10.
#[test]
fn the_ends_of_a_ten_by_one_rectangle_give_the_published_harmonic_measure() {
    agrees_with_its_table("ten_by_one");
}
