//! Heads less exact than the plan asks.

use crate::plans::{EXAMPLES, example, found, solved};
use mirrorwell::findings::{FlagCode, Measure, Who};
use mirrorwell::site::Length;

/// Rounding alone is larger than 1e-15 m in every example.
#[test]
fn an_accuracy_below_the_rounding_is_flagged_once_an_aquifer() {
    for name in EXAMPLES {
        let mut site = example(name);
        site.head_tolerance = Length::from_si(1e-15);
        let solution = solved(site);
        let flags = found(&solution).flags;
        let missed: Vec<_> = flags
            .iter()
            .filter(|flag| flag.code == FlagCode::AccuracyNotReached)
            .collect();
        assert_eq!(missed.len(), solution.fields().len(), "{name}");
        for flag in missed {
            let Who::AquiferOf(well) = flag.who else {
                panic!("{:?}", flag.who);
            };
            let field = solution.field_of_well(well).unwrap();
            let expected = Measure::Accuracy {
                bound_m: field.error_bound_m(),
                accepted_m: 1e-15,
                hardest_edge: None,
            };
            assert_eq!(flag.measure, expected, "{name}");
            assert!(flag.cause.is_none() && flag.remedy.is_none());
            assert!(!flag.code.breaks_a_limit());
        }
    }
}

#[test]
fn closed_forms_reach_the_accuracy_that_plans_ask_for_by_default() {
    for name in EXAMPLES {
        let flags = found(&solved(example(name))).flags;
        let codes: Vec<_> = flags.iter().map(|flag| flag.code).collect();
        assert!(!codes.contains(&FlagCode::AccuracyNotReached), "{name}");
    }
}
