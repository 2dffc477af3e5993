//! Reads numbers: bare in the plan's units, or as a text with a unit of its
//! own; each within the bounds of its key.

use super::fault::{Fault, shown};
use super::keys::{Form, Key, Measure};
use super::reader::{Reading, Section};
use super::units::{self, Dimension, UnitError};
use super::value::{Node, Value};

impl Section<'_> {
    /// The quantity at a key, in metres, days and degrees; none where it is
    /// absent or refused.
    pub(super) fn quantity(&self, key: &Key, reading: &mut Reading<'_>) -> Option<f64> {
        let value = self.value(key)?;
        match key.form {
            Form::Quantity(measure) | Form::Stage(measure) => {
                self.measured(key, measure, value, reading)
            }
            _ => None,
        }
    }

    /// One value as a quantity within its bounds.
    pub(super) fn measured(
        &self,
        key: &Key,
        measure: Measure,
        value: &Value,
        reading: &mut Reading<'_>,
    ) -> Option<f64> {
        let si = self.in_si(key, measure, value, reading)?;
        if !si.is_finite() {
            let written = reading.written(value);
            let what = format!(
                "{}: `{}` is {written}, which is no finite number",
                self.title, key.name
            );
            let help = format!("write a finite number: {}", key.doc);
            reading.refuse(Fault::new(value.place, what, help).label("not finite"));
            return None;
        }
        let fault = self.bounds_fault(key, measure, si, value, reading);
        match fault {
            Some(fault) => {
                reading.refuse(fault);
                None
            }
            None => Some(si),
        }
    }

    fn in_si(
        &self,
        key: &Key,
        measure: Measure,
        value: &Value,
        reading: &mut Reading<'_>,
    ) -> Option<f64> {
        match &value.node {
            Node::Number(number) => Some(number * bare_unit(measure, reading)),
            Node::Text(text) => match units::parse(text, measure.dimension) {
                Ok(si) => Some(si),
                Err(error) => {
                    let fault = self.unit_fault(key, measure, value, &error, reading);
                    reading.refuse(fault);
                    None
                }
            },
            _ => {
                let wanted = format!("a number or a text such as {}", example(measure.dimension));
                reading.refuse(self.wrong_kind(key, value, &wanted));
                None
            }
        }
    }

    fn unit_fault(
        &self,
        key: &Key,
        measure: Measure,
        value: &Value,
        error: &UnitError,
        reading: &Reading<'_>,
    ) -> Fault {
        let text = shown(value.text().unwrap_or(""));
        let what = format!(
            "{}: `{}` is \"{text}\", but {}",
            self.title,
            key.name,
            shown(&error.to_string())
        );
        let unit = unit_name(measure, reading);
        let bare = match unit.as_str() {
            "" => "a bare number".to_owned(),
            unit => format!("a bare number, which is in {unit},"),
        };
        let accepted = measure.dimension.accepted();
        let help = format!("write {bare} or a number with one of {accepted}");
        Fault::new(value.place, what, help).label(match error {
            UnitError::NoNumber => "no number",
            UnitError::NoUnit => "no unit",
            UnitError::WrongDimension { .. } => "wrong kind of unit",
            UnitError::Unknown { .. } => "unknown unit",
        })
    }

    fn bounds_fault(
        &self,
        key: &Key,
        measure: Measure,
        si: f64,
        value: &Value,
        reading: &Reading<'_>,
    ) -> Option<Fault> {
        let too_low = if measure.above {
            si <= measure.least
        } else {
            si < measure.least
        };
        let (bound, words, label) = if too_low && measure.above {
            (measure.least, "above", "too low")
        } else if too_low {
            (measure.least, "at least", "too low")
        } else if si > measure.most {
            (measure.most, "at most", "too high")
        } else {
            return None;
        };
        let unit = unit_name(measure, reading);
        let limit = number(bound / bare_unit(measure, reading));
        let limit = format!("{limit} {unit}");
        let limit = limit.trim_end();
        let written = match value.node {
            Node::Number(bare) => format!("{} {unit}", number(bare)).trim_end().to_owned(),
            _ => reading.written(value),
        };
        let name = key.name;
        let what = format!(
            "{}: `{name}` must be {words} {limit}, but is {written}",
            self.title
        );
        let help = remedy(name, si)
            .unwrap_or_else(|| format!("write a value {words} {limit}: {}", key.doc));
        Some(Fault::new(value.place, what, help).label(label))
    }
}

/// What to write instead where the slip has a usual reason.
fn remedy(key: &str, si: f64) -> Option<String> {
    let text = match key {
        "pumping" if si < 0.0 => "an injecting well has `injection` with a positive rate instead",
        "injection" if si < 0.0 => "a pumping well has `pumping` with a positive rate instead",
        "ratio" if si > 0.0 => {
            "the ratio is largest over smallest: write its inverse, and turn `azimuth` by 90°"
        }
        "interference_share" if si > 1.0 => "a share is between 0 and 1: write 0.20 for 20 %",
        "gradient" if si < 0.0 => "a slope is not negative: turn `toward` by 180° instead",
        _ => return None,
    };
    Some(text.to_owned())
}

/// Metres, days and degrees in the unit of a bare number.
fn bare_unit(measure: Measure, reading: &Reading<'_>) -> f64 {
    if measure.in_grid_units {
        reading.metres_per_unit()
    } else {
        reading.units.si_per_unit(measure.dimension)
    }
}

fn unit_name(measure: Measure, reading: &Reading<'_>) -> String {
    match reading.metres_per_unit() {
        per_unit if measure.in_grid_units && per_unit == 1.0 => "m".to_owned(),
        _ if measure.in_grid_units => "units of the plan's CRS".to_owned(),
        _ => reading.units.unit_name(measure.dimension).to_owned(),
    }
}

fn example(dimension: Dimension) -> &'static str {
    match dimension {
        Dimension::Length => "\"0.15 ft\"",
        Dimension::Rate => "\"25 L/s\"",
        Dimension::Conductivity => "\"4e-4 m/s\"",
        Dimension::Transmissivity => "\"9000 ft2/d\"",
        Dimension::Flux => "\"8 in/yr\"",
        Dimension::Time => "\"36 h\"",
        Dimension::WellLoss => "\"1900 s2/m5\"",
        Dimension::Angle => "\"40 deg\"",
        Dimension::Slope => "\"1.2 m/km\"",
        Dimension::Share => "\"20 %\"",
    }
}

/// A number for a sentence: plain where that is short.
pub(super) fn number(value: f64) -> String {
    let magnitude = value.abs();
    if value == 0.0 || (1e-6..1e15).contains(&magnitude) {
        // Fifteen significant digits hide the noise of unit conversions.
        let rounded: f64 = format!("{value:.14e}").parse().unwrap_or(value);
        rounded.to_string()
    } else {
        format!("{value:e}")
    }
}
