//! Source: Walton (1962), Illinois State Water Survey Bulletin 49, limits of
//! the well loss coefficient C in s²/ft⁵, from memory, with the SI values that
//! later texts give: 5, 10 and 40 s²/ft⁵ are some 1900, 3800 and 15 200 s²/m⁵.

use mirrorwell::plan::units::{Dimension, parse};

const SECONDS_A_DAY: f64 = 86_400.0;

#[test]
fn well_loss_coefficients_convert_as_the_texts_round_them() {
    for (feet, metres) in [(5.0, 1900.0), (10.0, 3800.0), (40.0, 15_200.0)] {
        let ours = parse(&format!("{feet} s2/ft5"), Dimension::WellLoss).unwrap();
        let expected = metres / (SECONDS_A_DAY * SECONDS_A_DAY);
        // Two digits are printed.
        assert!((ours / expected - 1.0).abs() < 0.005, "{feet}: {ours}");
        let ours = parse(&format!("{metres} s2/m5"), Dimension::WellLoss).unwrap();
        assert!((ours / expected - 1.0).abs() < 1e-14);
    }
}
