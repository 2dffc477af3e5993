//! Source: Hantush (1965), *Journal of Geophysical Research* 70, 2829–2838,
//! from memory: beside a river with a clogged bank of retardation length
//! a = K·c the drawdown s obeys ∂s/∂x = s/a on the bank. The steady values are
//! those of the Fourier integral that solves this, by mpmath to 40 digits:
//! `tests/references/clogged_bank.py`; E(w) = e^w E₁(w) by
//! `tests/references/exponential_integral.py`.

use std::f64::consts::PI;

use mirrorwell::green::Green;
use mirrorwell::outline::Shape;
use num_complex::Complex64;

use crate::plans::Solved;
use crate::shapes::green;
use crate::table::rows;

/// E is good to 3e-15 of itself, the logarithm to 4ε of its share; both add.
const TOLERANCE: f64 = 1e-14;

fn bank(skin_m: f64) -> Box<dyn Green> {
    green(&Shape::CloggedHalfPlane { skin_m })
}

#[test]
fn drawdown_and_inflow_behind_a_clogged_bank_are_those_of_the_fourier_integral() {
    let rows = rows("clogged_bank");
    assert!(rows.len() >= 36, "{}", rows.len());
    for row in rows {
        let bank = bank(row.number("skin"));
        let z = Complex64::new(row.number("x"), row.number("y"));
        let pole = Complex64::new(row.number("pole_x"), row.number("pole_y"));
        let share = bank.share(0, row.number("from")..row.number("to"), pole);
        for (ours, theirs) in [
            (bank.value(z, pole), row.number("value")),
            (bank.regular_part(pole), row.number("regular_part")),
            (share, row.number("share")),
        ] {
            let off = (ours - theirs).abs();
            assert!(
                off <= TOLERANCE * (1.0 + theirs.abs()),
                "{z} {pole}: {ours}, {theirs}"
            );
        }
    }
}

/// On the bank π G = Re E(w), and what a reach from abreast of the well to y
/// gives is (arg w + Im E(w))/π, w = (x₀ + iy)/b.
#[test]
fn the_scaled_exponential_integral_keeps_fourteen_digits_everywhere() {
    let rows = rows("exponential_integral");
    assert!(rows.len() >= 112, "{}", rows.len());
    let bank = bank(1.0);
    for row in rows {
        let w = Complex64::new(row.number("w_re"), row.number("w_im"));
        let pole = Complex64::new(w.re, 0.0);
        let real = PI * bank.value(Complex64::new(0.0, w.im), pole);
        let expected = row.number("re");
        assert!(
            (real - expected).abs() <= TOLERANCE * expected.abs(),
            "{w}: {real}, {expected}"
        );
        let share = PI * bank.share(0, 0.0..w.im, pole);
        let expected = w.arg() + row.number("im");
        assert!(
            (share - expected).abs() <= TOLERANCE,
            "{w}: {share}, {expected}"
        );
    }
}

/// W(u) = E₁(u) = e^(−u) E(u) as in Theis (1935), table by Wenzel (1942), USGS
/// Water-Supply Paper 887; the digits as quoted by Huisman (1972), table 4.1.
/// The bank of skin b shows W where x₀ = u b. Each value is good to half its last digit.
#[test]
fn the_table_of_the_well_function_is_met() {
    for (u, published, half_digit) in [
        (1e-10, 22.4486, 5e-5),
        (1e-5, 10.9357, 5e-5),
        (1.0, 0.2194, 5e-5),
        (2.0, 0.048_90, 5e-6),
        (3.0, 0.013_05, 5e-6),
        (4.0, 0.003_779, 5e-7),
        (5.0, 0.001_148, 5e-7),
        (7.0, 0.000_115_5, 5e-8),
        (8.0, 0.000_037_67, 5e-9),
        (9.0, 0.000_012_45, 5e-9),
        (9.9, 0.000_004_637, 5e-10),
    ] {
        let at_bank = bank(1.0).value(Complex64::ZERO, Complex64::new(u, 0.0));
        let ours = PI * at_bank * (-u).exp();
        assert!(
            (ours - published).abs() <= half_digit,
            "{u}: {ours}, {published}"
        );
    }
}

#[test]
fn the_gradient_obeys_the_banks_condition_and_differences() {
    let pole = Complex64::new(1.5, -0.5);
    for skin_m in [1e-6, 0.3, 5.0, 1e5] {
        let bank = bank(skin_m);
        for y in [-40.0, -0.5, 0.0, 3.0] {
            let shore = Complex64::new(0.0, y);
            let (value, slope) = (bank.value(shore, pole), bank.gradient(shore, pole).re);
            // Three terms of 1/r cancel down to G/b: 4ε each.
            let off = (slope - value / skin_m).abs();
            assert!(
                off <= 1e-14 * (1.0 + slope.abs()),
                "{skin_m} {y}: {slope} {value}"
            );
            let at = Complex64::new(0.8, y);
            const STEP: f64 = 1e-5;
            let along =
                |step| (bank.value(at + step, pole) - bank.value(at - step, pole)) / (2.0 * STEP);
            let expected = Complex64::new(along(STEP.into()), along(Complex64::new(0.0, STEP)));
            // The third derivative times the step's square over 6, and ε/step.
            assert!(
                (bank.gradient(at, pole) - expected).norm() < 1e-8,
                "{skin_m} {y}"
            );
        }
    }
}

#[test]
fn the_river_gives_all_the_water_and_a_thin_skin_is_none() {
    let pole = Complex64::new(2.0, 1.0);
    for skin_m in [1e-9, 1.0, 1e9] {
        let total = bank(skin_m).share(0, f64::NEG_INFINITY..f64::INFINITY, pole);
        assert!((total - 1.0).abs() < 1e-15, "{skin_m}: {total}");
    }
    let clean = green(&crate::shapes::axes(
        crate::shapes::axis("D", 0.0),
        crate::shapes::axis("", 0.0),
    ));
    let at = Complex64::new(0.5, 0.25);
    // Re E(ζ/b)/π ≤ b/(π Re ζ).
    let off = bank(1e-12).value(at, pole) - clean.value(at, pole);
    assert!((0.0..1e-12).contains(&off), "{off}");
    assert!(bank(1e-300).value(at, pole).is_finite());
}

/// A river along x = 600000 with the aquifer to its east; d = 100 m, K = 25 m/d,
/// c = 2.8 days: a = 70 m, which is b = 0.7 and lengths in hundreds of metres in
/// the recipe's example. Q/T = 1 m.
fn plan(aquifer: &str, river: &str, rest: &str) -> String {
    format!(
        r#"
title = "Clogged bank"
crs = "EPSG:32631"
units = "metric"
[aquifer]
{aquifer}
[[river]]
name = "Silt"
line = [[600000.0, 5739000.0], [600000.0, 5741000.0]]
{river}
bank_resistance = 2.8
[[well]]
name = "P"
at = [600100.0, 5740000.0]
pumping = 500.0
radius = 0.15
{rest}
"#
    )
}

const ISOTROPIC: &str = "conductivity = 25.0\nthickness = 20.0";

#[test]
fn a_plan_with_bank_resistance_has_the_drawdown_of_its_skin() {
    let solved = Solved::of(&plan(ISOTROPIC, "stage = 10.0", ""));
    for (x, y, expected) in [
        (50.0, 30.0, 0.259_888_691_167),
        (0.0, 0.0, 0.147_841_315_878),
        (0.0, 200.0, 0.051_456_142_971_6),
        (200.0, -150.0, 0.151_152_441_756),
    ] {
        let ours = solved.drawdown_m(600_000.0 + x, 5_740_000.0 + y);
        // Twelve digits are printed.
        assert!(
            (ours - expected).abs() < 1e-12,
            "{x} {y}: {ours}, {expected}"
        );
    }
    assert!((solved.field.inflow_m3_d(0, 0) - 500.0).abs() < 1e-9);
    let middle = solved.field.inflow_through_m3_d(0, &(-100.0..100.0));
    assert!(
        (middle - 500.0 * 0.364_874_353_454).abs() < 1e-9,
        "{middle}"
    );
}

/// The stage is a linear function of place, and so is the head before pumping:
/// 1 m in 2 km along the river; 0.002 · (distance + 70 m) across it.
#[test]
fn the_head_before_pumping_takes_a_step_through_the_bank() {
    let rest = "[ambient]\ngradient = 0.002\ntoward = 270.0";
    let solved = Solved::of(&plan(ISOTROPIC, "stage = 10.0", rest));
    for x in [0.0, 100.0, 450.0] {
        let ours = solved
            .field
            .ambient_head_m(solved.at(600_000.0 + x, 5_740_321.0));
        assert!(
            (ours - (10.0 + 0.002 * (x + 70.0))).abs() < 1e-12,
            "{x}: {ours}"
        );
    }
    let solved = Solved::of(&plan(ISOTROPIC, "stage = [10.0, 11.0]", ""));
    let ours = solved
        .field
        .ambient_head_m(solved.at(600_300.0, 5_740_500.0));
    assert!((ours - 10.75).abs() < 1e-12, "{ours}");
    // A second river goes on along the same line with the same fall.
    let on = r#"
[[river]]
name = "Upper Silt"
line = [[600000.0, 5741000.0], [600000.0, 5742000.0]]
stage = [11.0, 11.5]
bank_resistance = 2.8
"#;
    let solved = Solved::of(&plan(ISOTROPIC, "stage = [10.0, 11.0]", on));
    for y in [5_739_400.0, 5_741_600.0] {
        let ours = solved.field.ambient_head_m(solved.at(600_300.0, y));
        let expected = 10.0 + (y - 5_739_000.0) / 2000.0;
        assert!((ours - expected).abs() < 1e-9, "{y}: {ours}");
    }
}

/// With K 4 times as large along azimuth 0 as across, lengths along y shrink by
/// √2 and those across grow by √2: the site's plan with bank resistance c and
/// conductivity K behaves as an isotropic one whose skin is K c/√2. By
/// hand: flow through a metre of the bank is D (h_r − h)/c, the stretched metre
/// is 1/√2 long.
#[test]
fn anisotropy_stretches_the_skin_with_the_bank() {
    let aquifer = format!("{ISOTROPIC}\nanisotropy = {{ ratio = 4.0, azimuth = 0.0 }}");
    let solved = Solved::of(&plan(&aquifer, "stage = 10.0", ""));
    let root = 2.0_f64.sqrt();
    let expected = bank(70.0 / root);
    let stretched = |x: f64, y: f64| Complex64::new(x * root, y / root);
    for (x, y) in [(0.0, 40.0), (30.0, -25.0), (300.0, 500.0)] {
        let ours = solved.drawdown_m(600_000.0 + x, 5_740_000.0 + y);
        let theirs = expected.value(stretched(x, y), stretched(100.0, 0.0));
        assert!((ours - theirs).abs() < 1e-12, "{x} {y}: {ours}, {theirs}");
    }
    // The bank's own condition in the site: K_x ∂h/∂x = (h − stage)/c.
    let shore = solved.at(600_000.0, 5_740_040.0);
    let head = 10.0 - solved.field.drawdowns_m(&[shore])[0];
    let slope = solved
        .field
        .head_gradient(solved.at(600_000.0 + 1e-7, 5_740_040.0))
        .x;
    assert!((25.0 / 2.0 * slope - (head - 10.0) / 2.8).abs() < 1e-8);
}
