//! Puts a us plan's own values beside the metres of a text.
//!
//! The rooms after `plan` know metres and days alone, and so do their texts.
//! Method: wherever a number is followed by a metric unit, its value in the
//! plan's unit follows in brackets, with at least as many significant digits.
//! Limits: a name with a measure in it, "Lot 12 m", gets one too.

use super::{Dimension, UnitSystem};

/// Metric units of texts, what they measure, and metres and days in one.
const METRIC: [(&str, Dimension, f64); 5] = [
    ("m³/d", Dimension::Rate, 1.0),
    ("m²/d", Dimension::Transmissivity, 1.0),
    ("m/d", Dimension::Flux, 1.0),
    ("mm", Dimension::Length, 1e-3),
    ("m", Dimension::Length, 1.0),
];

impl UnitSystem {
    /// A text about metres and m³/d, with the plan's own values beside them:
    /// "62.000 m (203.41 ft)". A metric plan's text stays as it is.
    pub fn beside(self, text: &str) -> String {
        if self == Self::Metric {
            return text.to_owned();
        }
        let mut told = String::with_capacity(text.len());
        let mut number: Option<&str> = None;
        for word in text.split_inclusive(' ') {
            let bare = word.trim_end_matches(' ');
            let unit = bare.trim_end_matches([',', '.', ';', ':', ')']);
            let measure = METRIC.iter().find(|(name, ..)| *name == unit);
            match number.zip(measure) {
                Some((digits, &(_, dimension, si))) => {
                    told.push_str(unit);
                    told.push_str(&self.in_brackets(digits, dimension, si));
                    told.push_str(word.get(unit.len()..).unwrap_or_default());
                }
                None => told.push_str(word),
            }
            number = Some(bare.trim_start_matches('(')).filter(|digits| value(digits).is_some());
        }
        told
    }

    /// " (203.41 ft)" for "62.000" m.
    fn in_brackets(self, digits: &str, dimension: Dimension, si: f64) -> String {
        let own = value(digits).map(|metric| self.of_si(dimension, metric * si));
        own.map_or_else(String::new, |own| {
            // Zeros right after the point tell nothing of how well it is known.
            let after_zeros = digits.strip_prefix("0.0");
            let telling = after_zeros.map_or(digits, |rest| rest.trim_start_matches('0'));
            let figures = telling
                .chars()
                .filter(char::is_ascii_digit)
                .count()
                .clamp(3, 9) as f64;
            let whole = own.abs().max(1e-300).log10().floor() + 1.0;
            // Both are small: at most 9 figures, and numbers of 300 digits.
            let decimals = (figures - whole).clamp(0.0, 9.0) as usize;
            format!(" ({own:.decimals$} {})", self.unit_name(dimension))
        })
    }
}

/// The value of a number with commas between its thousands.
fn value(digits: &str) -> Option<f64> {
    let plain = digits.replace(',', "");
    let starts_well =
        plain.starts_with(|first: char| first.is_ascii_digit() || "+-".contains(first));
    plain
        .parse()
        .ok()
        .filter(|value: &f64| starts_well && value.is_finite())
}

#[cfg(test)]
mod tests {
    use super::*;

    /// 0.3048 m a foot, 231 in³ a gallon: NIST SP 811, appendix B.
    #[test]
    fn a_us_text_has_feet_and_gallons_beside_metres() {
        let us = |text| UnitSystem::Us.beside(text);
        assert_eq!(
            us("it is 62.000 m, there"),
            "it is 62.000 m (203.41 ft), there"
        );
        assert_eq!(us("over 2,000 m"), "over 2,000 m (6562 ft)");
        assert_eq!(us("0.4 mm from it"), "0.4 mm (0.00131 ft) from it");
        assert_eq!(us("(+0.305 m)"), "(+0.305 m (1.001 ft))");
        assert_eq!(
            us("pump 1000.000 m³/d but"),
            "pump 1000.000 m³/d (183.4528 gpm) but"
        );
        assert_eq!(
            us("recharge of 0.0002295 m/d,"),
            "recharge of 0.0002295 m/d (3.300 in/yr),"
        );
        assert_eq!(us("river m and 3 wells"), "river m and 3 wells");
    }

    #[test]
    fn a_metric_text_stays_as_it_is() {
        assert_eq!(UnitSystem::Metric.beside("62.000 m,  é"), "62.000 m,  é");
    }
}
