//! How exactly heads are computed, in words. A bound is rounded up to one digit, so
//! that what a person reads is a bound too.

use super::Words;

impl Words<'_> {
    /// "heads are computed to 2e-11 m (proven bound)". Of the computation, not
    /// of the ground: hence not "right to".
    pub fn proven(&self, bound_m: f64) -> String {
        if !bound_m.is_finite() {
            return "no bound on the error of the heads could be proven".into();
        }
        format!(
            "heads are computed to {} (proven bound)",
            self.bound(bound_m)
        )
    }

    /// A proven bound against what the plan accepts.
    pub fn inexact(&self, bound_m: f64, accepted_m: f64) -> String {
        let accepted = self.tolerance(accepted_m);
        if !bound_m.is_finite() {
            return format!("{}; [accuracy] accepts {accepted}", self.proven(bound_m));
        }
        format!(
            "heads are computed only to {} (proven bound), more than the {accepted} that [accuracy] accepts",
            self.bound(bound_m)
        )
    }

    /// What would make a proven bound suffice.
    pub(super) fn exactness_remedy(&self, bound_m: f64, hardest_edge: Option<usize>) -> String {
        let simpler =
            hardest_edge.map(|edge| format!("a simpler outline near {}", self.edge(edge)));
        let larger = bound_m
            .is_finite()
            .then(|| rounded_up(self.units.length(bound_m)));
        match (larger, simpler) {
            (Some(larger), Some(simpler)) => {
                format!("Cleared by [accuracy] head = {larger}, or by {simpler}.")
            }
            (Some(larger), None) => {
                format!("Cleared by [accuracy] head = {larger}: rounding leaves no less.")
            }
            (None, Some(simpler)) => format!("No [accuracy] clears it; {simpler} may."),
            (None, None) => "No [accuracy] clears it.".into(),
        }
    }

    /// A bound with its unit, rounded up.
    fn bound(&self, metres: f64) -> String {
        let value = rounded_up(self.units.length(metres));
        format!("{value} {}", self.units.length_ending())
    }

    /// An accepted error with its unit, to three digits.
    pub(super) fn tolerance(&self, metres: f64) -> String {
        let value = legible(&format!("{:.2e}", self.units.length(metres)));
        format!("{value} {}", self.units.length_ending())
    }
}

/// The least number of one digit that is no smaller than a value.
fn rounded_up(value: f64) -> String {
    let nearest = format!("{value:.0e}");
    let suffices = |text: &str| text.parse().is_ok_and(|rounded: f64| rounded >= value);
    let next = || {
        let (digit, exponent) = nearest.split_once('e')?;
        let (digit, exponent): (u8, i32) = (digit.parse().ok()?, exponent.parse().ok()?);
        Some(format!("{}e{exponent}", digit + 1))
    };
    let text = if suffices(&nearest) { None } else { next() };
    legible(&text.unwrap_or(nearest))
}

/// A number in decimals, or with an exponent where it is below 1e-4.
fn legible(text: &str) -> String {
    match text.parse::<f64>() {
        Ok(value) if value == 0.0 || value.abs() >= 1e-4 => value.to_string(),
        Ok(value) => format!("{value:e}"),
        Err(_) => text.to_owned(),
    }
}

#[cfg(test)]
mod tests {
    use std::path::Path;

    use super::*;
    use crate::layers::Units;
    use crate::plan::Plan;

    const DEMO: &str = include_str!("../../../examples/demo.toml");

    /// Edge 0 of the demo is the river Ostra.
    #[test]
    fn the_remedy_names_what_makes_the_error() {
        let plan = Plan::from_text("demo.toml", DEMO, Path::new(".")).unwrap();
        let words = Words::new(&plan.site, Units(plan.units));
        let cases = [
            (
                3.2e-3,
                Some(0),
                "Cleared by [accuracy] head = 0.004, or by a simpler outline near Ostra.",
            ),
            (
                3.2e-9,
                None,
                "Cleared by [accuracy] head = 4e-9: rounding leaves no less.",
            ),
            (
                f64::INFINITY,
                Some(0),
                "No [accuracy] clears it; a simpler outline near Ostra may.",
            ),
            (f64::NAN, None, "No [accuracy] clears it."),
        ];
        for (bound_m, edge, text) in cases {
            assert_eq!(words.exactness_remedy(bound_m, edge), text);
        }
    }

    /// By hand.
    #[test]
    fn a_bound_is_rounded_up_to_one_digit() {
        let cases = [
            (2.04e-11, "3e-11"),
            (9.1e-8, "1e-7"),
            (9.6e-8, "1e-7"),
            (2e-6, "2e-6"),
            (0.000_31, "0.0004"),
            (1.2, "2"),
            (0.0, "0"),
        ];
        for (value, text) in cases {
            assert_eq!(rounded_up(value), text);
        }
    }

    #[test]
    fn a_tolerance_reads_as_it_was_written() {
        assert_eq!(legible(&format!("{:.2e}", 1.5e-9)), "1.5e-9");
        assert_eq!(legible(&format!("{:.2e}", 1e-4)), "0.0001");
    }
}
