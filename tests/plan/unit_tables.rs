//! Units against published conversion tables.
//!
//! Sources, from memory: NIST Special Publication 811 (2008), appendix B.8,
//! factors as printed there to seven digits; the permeability and well-loss
//! units, which it does not list, follow from its feet, gallons and days.

use approx::assert_relative_eq;
use mirrorwell::plan::units::{Dimension, UnitError, UnitSystem, parse};

const SECONDS_A_DAY: f64 = 86_400.0;

/// SP 811 prints seven significant digits.
const PRINTED: f64 = 5e-7;

fn si(text: &str, dimension: Dimension) -> f64 {
    parse(text, dimension).unwrap_or_else(|error| panic!("{text}: {error}"))
}

#[test]
fn lengths_agree_with_nist_sp_811() {
    let table = [
        ("1 ft", 0.3048),
        ("1 in", 0.0254),
        ("1 mi", 1609.344),
        ("1 ftUS", 0.304_800_6),
    ];
    for (text, metres) in table {
        assert_relative_eq!(si(text, Dimension::Length), metres, max_relative = PRINTED);
    }
}

#[test]
fn rates_agree_with_nist_sp_811() {
    // Cubic metres a second.
    let table = [
        ("1 gpm", 6.309_020e-5),
        ("1 gpd", 4.381_264e-8),
        ("1 ft3/s", 2.831_685e-2),
        ("1 mgd", 4.381_264e-2),
        ("1 m3/h", 1.0 / 3600.0),
        ("1 L/s", 1e-3),
    ];
    for (text, cubic_metres_a_second) in table {
        let expected = cubic_metres_a_second * SECONDS_A_DAY;
        assert_relative_eq!(si(text, Dimension::Rate), expected, max_relative = PRINTED);
    }
    // 25 L/s is the 2160 m³/d of the example plan.
    assert_relative_eq!(si("25 L/s", Dimension::Rate), 2160.0, max_relative = 1e-15);
    assert_eq!(
        si("350 gal/min", Dimension::Rate),
        si("350 gpm", Dimension::Rate)
    );
    // An acre is 4046.873 m² in SP 811.
    let acre_foot_a_year = 4046.873 * 0.3048 / 365.25;
    assert_relative_eq!(
        si("1 acre-ft/yr", Dimension::Rate),
        acre_foot_a_year,
        max_relative = PRINTED * 10.0 // the acre of SP 811 is in survey feet
    );
    assert_relative_eq!(
        si("1 imp gal/min", Dimension::Rate),
        4.546_09e-3 * 1440.0,
        max_relative = 1e-15
    );
}

/// From the gallon of 231 in³, the inch of 0.0254 m and the day, recomputed with
/// exact fractions.
#[test]
fn trade_units_of_flow_agree_with_their_definitions() {
    let close = 1e-10;
    assert_relative_eq!(
        si("1 gpm", Dimension::Rate),
        5.450_992_968_96,
        max_relative = close
    );
    assert_relative_eq!(
        si("1 gpd/ft", Dimension::Transmissivity),
        0.012_419_33,
        max_relative = PRINTED
    );
    let gpd_ft2 = 4.715_952_932_1e-7 * SECONDS_A_DAY;
    assert_relative_eq!(
        si("1 gpd/ft2", Dimension::Conductivity),
        gpd_ft2,
        max_relative = close
    );
    let ft_d = 3.527_777_777_78e-6 * SECONDS_A_DAY;
    assert_relative_eq!(
        si("1 ft/d", Dimension::Conductivity),
        ft_d,
        max_relative = close
    );
    assert_relative_eq!(
        si("1 m/d", Dimension::Conductivity),
        1.157_407_4e-5 * SECONDS_A_DAY,
        max_relative = PRINTED
    );
    assert_relative_eq!(
        si("1 ft2/d", Dimension::Transmissivity),
        0.092_903_04,
        max_relative = 1e-15
    );
    assert_relative_eq!(
        si("1 cm/s", Dimension::Conductivity),
        864.0,
        max_relative = 1e-15
    );
    assert_relative_eq!(
        si("10 in/yr", Dimension::Flux),
        0.254 / 365.25,
        max_relative = 1e-15
    );
}

/// Walton (1962), Illinois State Water Survey Bulletin 49: the grades of well
/// loss at 5 s²/ft⁵ are 1900 s²/m⁵ (from memory); in days by the second's
/// definition.
#[test]
fn well_losses_agree_with_walton_1962() {
    assert_relative_eq!(
        si("5 s2/ft5", Dimension::WellLoss),
        2.546_054_560_15e-7,
        max_relative = 1e-10
    );
    assert_relative_eq!(
        si("1900.61954493 s2/m5", Dimension::WellLoss),
        2.546_054_560_15e-7,
        max_relative = 1e-10
    );
    // 0.5 min²/m⁵ = 1800 s²/m⁵.
    assert_relative_eq!(
        si("0.5 min2/m5", Dimension::WellLoss),
        si("1800 s2/m5", Dimension::WellLoss),
        max_relative = 1e-14
    );
    // s = C Q² for 100 gpm and 1e-4 ft/gpm² is one foot.
    let rate = si("100 gpm", Dimension::Rate);
    let loss = si("1e-4 ft/gpm2", Dimension::WellLoss) * rate * rate;
    assert_relative_eq!(loss, 0.3048, max_relative = 1e-14);
    assert_relative_eq!(
        si("1 d2/ft5", Dimension::WellLoss),
        0.3048_f64.powi(-5),
        max_relative = 1e-14
    );
}

#[test]
fn spellings_that_people_use_mean_the_same() {
    let same = [
        ("25 L/s", "25l/s", Dimension::Rate),
        ("5 m3/d", "5 m³/d", Dimension::Rate),
        ("5 m3/d", "5 m^3/day", Dimension::Rate),
        ("500 gpm", "500 GPM", Dimension::Rate),
        ("1.2 mgd", "1.2 MGD", Dimension::Rate),
        ("900 ft2/d", "9e2 ft²/d", Dimension::Transmissivity),
        ("-3 m", "−3 m", Dimension::Length),
        ("2 s2/m5", "2 s²/m⁵", Dimension::WellLoss),
        ("36 h", "1.5 d", Dimension::Time),
        ("20 %", "20%", Dimension::Share),
        ("1.2 m/km", "0.12 %", Dimension::Slope),
        ("90 deg", "90°", Dimension::Angle),
    ];
    for (one, other, dimension) in same {
        assert_relative_eq!(
            si(one, dimension),
            si(other, dimension),
            max_relative = 1e-15
        );
    }
}

#[test]
fn a_megalitre_is_not_a_millilitre() {
    assert_eq!(si("1 ML/d", Dimension::Rate), 1000.0);
    assert!(matches!(
        parse("1 ml/d", Dimension::Rate),
        Err(UnitError::Unknown { .. })
    ));
}

#[test]
fn a_text_that_is_no_quantity_is_refused_by_its_half() {
    let error = |text| parse(text, Dimension::Rate).expect_err(text);
    for text in ["", " ", "gpm", "nan gpm", "inf m3/d", ".", "e5 gpm", "-"] {
        assert_eq!(error(text), UnitError::NoNumber, "{text}");
    }
    assert_eq!(error("25"), UnitError::NoUnit);
    assert_eq!(error("1,000 gpm"), UnitError::Comma);
    assert!(matches!(
        error("25 m"),
        UnitError::WrongDimension {
            measures: "length",
            ..
        }
    ));
    assert!(matches!(error("25 gpms"), UnitError::Unknown { .. }));
    assert!(matches!(error("25 gpm gpm"), UnitError::Unknown { .. }));
}

#[test]
fn bare_numbers_of_a_us_plan_are_in_its_units() {
    let us = UnitSystem::Us;
    for dimension in [
        Dimension::Length,
        Dimension::Rate,
        Dimension::Conductivity,
        Dimension::Transmissivity,
        Dimension::Flux,
        Dimension::Time,
        Dimension::WellLoss,
    ] {
        for system in [us, UnitSystem::Metric] {
            let written = format!("1 {}", system.unit_name(dimension));
            assert_relative_eq!(
                si(&written, dimension),
                system.si_per_unit(dimension),
                max_relative = 1e-15
            );
            assert_relative_eq!(system.of_si(dimension, si(&written, dimension)), 1.0);
        }
    }
}

proptest::proptest! {
    #[test]
    fn no_text_makes_the_parser_panic(text in "\\PC*") {
        let _ = parse(&text, Dimension::Rate);
    }

    #[test]
    fn a_number_keeps_its_value_to_the_last_digit(value in proptest::num::f64::NORMAL) {
        proptest::prop_assert_eq!(parse(&format!("{value:e} m"), Dimension::Length), Ok(value));
    }
}
