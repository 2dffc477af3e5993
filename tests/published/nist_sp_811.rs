//! Source: NIST Special Publication 811 (2008), *Guide for the Use of the
//! International System of Units*, appendix B.8, conversion factors as
//! printed, from memory; and the conversion table of Freeze & Cherry (1979),
//! *Groundwater*, from memory, where marked.

use mirrorwell::plan::units::{Dimension, parse};

const SECONDS_A_DAY: f64 = 86_400.0;

/// Half a unit in the last of seven printed digits, relative to a leading 1.
const SEVEN_DIGITS: f64 = 5e-7;
/// The same for three printed digits.
const THREE_DIGITS: f64 = 5e-3;

fn assert_factor(unit: &str, dimension: Dimension, per_second_or_metre: f64, tolerance: f64) {
    let ours = parse(&format!("1 {unit}"), dimension).expect("the unit is known");
    let relative = ours / per_second_or_metre - 1.0;
    assert!(
        relative.abs() <= tolerance,
        "1 {unit} = {ours}: off by {relative:e}"
    );
}

#[test]
fn lengths_are_those_of_sp_811() {
    for (unit, metres) in [
        ("ft", 0.3048),
        ("in", 0.0254),
        ("mi", 1609.344),
        ("ftUS", 0.304_800_6),
    ] {
        assert_factor(unit, Dimension::Length, metres, SEVEN_DIGITS);
    }
}

#[test]
fn rates_are_those_of_sp_811() {
    for (unit, cubic_metres_a_second) in [
        ("gpm", 6.309_020e-5),
        ("gpd", 4.381_264e-8),
        ("ft3/s", 2.831_685e-2),
        ("L/s", 1e-3),
    ] {
        let expected = cubic_metres_a_second * SECONDS_A_DAY;
        assert_factor(unit, Dimension::Rate, expected, SEVEN_DIGITS);
    }
}

/// Acre-foot based on the foot of 0.3048 m: 1233.482 m³, a year of 365.25 d.
#[test]
fn an_acre_foot_a_year_is_the_international_one() {
    let expected = 1233.482 / 365.25;
    assert_factor("acre-ft/yr", Dimension::Rate, expected, SEVEN_DIGITS);
}

/// Freeze & Cherry (1979): 1 US gal/d/ft² = 4.72e-7 m/s, 1 ft/s = 0.305 m/s,
/// 1 US gal/d/ft = 1.44e-7 m²/s, 1 ft²/s = 9.29e-2 m²/s.
#[test]
fn conductivities_and_transmissivities_are_those_of_freeze_and_cherry_1979() {
    for (unit, metres_a_second) in [("gpd/ft2", 4.72e-7), ("ft/s", 0.305)] {
        let expected = metres_a_second * SECONDS_A_DAY;
        assert_factor(unit, Dimension::Conductivity, expected, THREE_DIGITS);
    }
    for (unit, square_metres_a_second) in [("gpd/ft", 1.44e-7), ("ft2/s", 9.29e-2)] {
        let expected = square_metres_a_second * SECONDS_A_DAY;
        assert_factor(unit, Dimension::Transmissivity, expected, THREE_DIGITS);
    }
}
