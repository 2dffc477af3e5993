//! The water balance: rivers give what wells take.

use crate::plans::{EXAMPLES, example, found, solved};

/// In a steady state the rivers give what the wells take.
#[test]
fn rivers_give_each_aquifer_s_wells_what_they_pump() {
    for name in EXAMPLES {
        for balance in found(&solved(example(name))).balances {
            let inflow_m3_d = balance.inflow_m3_d.expect("a river");
            assert!((inflow_m3_d - balance.pumping_m3_d).abs() < 1e-8, "{name}");
        }
    }
}

/// A harmonic measure lies between 0 and 1.
#[test]
fn no_river_gives_a_well_more_than_it_pumps() {
    for name in EXAMPLES {
        let solution = solved(example(name));
        for boundary in found(&solution).boundaries {
            for (given, well) in boundary.by_well_m3_d.iter().zip(&solution.site().wells) {
                let share = given / well.pumping.si();
                assert!((-1e-12..=1.0 + 1e-12).contains(&share), "{name}: {share}");
            }
        }
    }
}
