//! A well's drawdown is the sum of its parts.

use crate::plans::{EXAMPLES, example, found, site, solved};

/// Superposition: own part and interference make the drawdown of the field.
#[test]
fn own_part_and_interference_make_the_whole_drawdown() {
    for name in EXAMPLES {
        let solution = solved(example(name));
        let found = found(&solution);
        for (finding, well) in found.wells.iter().zip(&solution.site().wells) {
            let whole_m = solution.drawdowns_m(&[well.at])[0];
            let parts_m = finding.own_m + finding.interference_m;
            assert!((whole_m - parts_m).abs() < 1e-9, "{name}: {}", well.name);
        }
    }
}

/// Every neighbour's drawdown is the sum of the wells' parts.
#[test]
fn the_wells_parts_make_a_neighbour_s_drawdown() {
    for name in EXAMPLES {
        for finding in found(&solved(example(name))).neighbours {
            let worst = finding.worst.unwrap();
            let sum_m: f64 = worst.by_well_m.iter().sum();
            assert!((worst.drawdown_m - sum_m).abs() < 1e-9, "{name}");
        }
    }
}

/// G(a, b) = G(b, a): what each m³/d of a does to b, one of b does to a.
#[test]
fn wells_do_the_same_to_each_other_for_each_unit_of_rate() {
    let solution = solved(example("demo.toml"));
    let matrix = found(&solution).interference;
    let rates: Vec<f64> = solution
        .site()
        .wells
        .iter()
        .map(|w| w.pumping.si())
        .collect();
    for (i, row) in matrix.well_rows().iter().enumerate() {
        for (j, drawdown_m) in row.iter().enumerate() {
            let there = drawdown_m / rates[j];
            let back = matrix.at_well(j)[i] / rates[i];
            assert!((there - back).abs() < 1e-12);
        }
    }
}

/// s_w = Q/(2πT) ln(2d/r_w) + C Q² beside a river at distance d (image well,
/// Ferris et al. 1962; well loss, Jacob 1947); a rise for an injecting well.
#[test]
fn a_lone_well_beside_a_river_has_its_closed_form_and_well_loss_keeps_the_sign() {
    for (key, sign) in [("pumping", 1.0), ("injection", -1.0)] {
        let text = format!(
            "[aquifer]\ntransmissivity = 500.0\n\
             [[river]]\nname = \"R\"\nline = [[0.0, -500.0], [0.0, 500.0]]\nstage = 60.0\n\
             [[well]]\nname = \"A\"\nat = [100.0, 0.0]\n{key} = 1000.0\nradius = 0.15\nwell_loss = 2e-7\n"
        );
        let solution = solved(site(&text));
        let finding = &found(&solution).wells[0];
        // 2.29037884438 m to 12 digits: reference value of the same case.
        let own_m = 1000.0 / (std::f64::consts::TAU * 500.0) * (200.0_f64 / 0.15).ln();
        assert!((own_m - 2.290_378_844_38).abs() < 1e-11);
        assert!((finding.own_m - sign * own_m).abs() < 1e-11);
        assert!((finding.well_loss_m - sign * 0.2).abs() < 1e-15);
        assert!((finding.level_m() - (60.0 - sign * (own_m + 0.2))).abs() < 1e-11);
    }
}
