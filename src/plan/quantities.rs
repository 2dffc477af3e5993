//! Reads numbers: bare in the plan's units, or as a text with a unit of its
//! own; each within the bounds of its key.

use super::Input;
use super::fault::{Fault, escaped, shown};
use super::keys::{Form, Key, Measure};
use super::reader::{Reading, Section};
use super::units::{self, Dimension, UnitError};
use super::value::{Node, Value};

/// A quantity that is asked for, and what a message calls it.
pub(super) struct Asked<'k> {
    pub(super) key: &'k Key,
    /// "`radius`", "a coordinate of `line`".
    pub(super) subject: String,
    pub(super) measure: Measure,
}

impl Section<'_> {
    /// The quantity at a key, in metres, days and degrees; none where it is
    /// absent or refused.
    pub(super) fn quantity(&self, key: &Key, reading: &mut Reading<'_>) -> Option<f64> {
        let value = self.value(key)?;
        let subject = format!("`{}`", key.name);
        match key.form {
            Form::Quantity(measure) | Form::Stage(measure) => {
                let asked = Asked {
                    key,
                    subject,
                    measure,
                };
                let si = self.measured(&asked, value, reading)?;
                self.record(&asked, value, si, reading);
                Some(si)
            }
            _ => None,
        }
    }

    /// One value as a quantity within its bounds.
    pub(super) fn measured(
        &self,
        asked: &Asked<'_>,
        value: &Value,
        reading: &mut Reading<'_>,
    ) -> Option<f64> {
        let si = self.in_si(asked, value, reading)?;
        let fault = if si.is_finite() {
            self.bounds_fault(asked, si, value, reading)
        } else {
            Some(self.not_finite(asked, value, reading))
        };
        match fault {
            Some(fault) => {
                reading.refuse(fault);
                None
            }
            None => Some(si),
        }
    }

    /// Keeps a quantity as it was written, for whoever checks the plan.
    pub(super) fn record(
        &self,
        asked: &Asked<'_>,
        value: &Value,
        si: f64,
        reading: &mut Reading<'_>,
    ) {
        let written = match (&value.node, unit_name(asked.measure, reading)) {
            (Node::Text(text), _) => text.clone(),
            (_, unit) => format!("{} {unit}", reading.written(value)),
        };
        reading.inputs.push(Input {
            of: self.title.clone(),
            key: asked.key.name,
            written: written.trim_end().to_owned(),
            si,
            dimension: asked.measure.dimension,
        });
    }

    fn in_si(&self, asked: &Asked<'_>, value: &Value, reading: &mut Reading<'_>) -> Option<f64> {
        let measure = asked.measure;
        let fault = match &value.node {
            Node::Number(number) => return Some(number * bare_unit(measure, reading)),
            Node::Text(text) => match units::parse(text, measure.dimension) {
                Ok(si) => return Some(si),
                Err(error) => self.unit_fault(asked, value, &error, reading),
            },
            other => {
                let wanted = format!("a number or a text such as {}", example(measure.dimension));
                let what = format!(
                    "{}: {} must be {wanted}, not {}",
                    self.title,
                    asked.subject,
                    other.kind()
                );
                let help = format!("write {wanted}: {}", asked.key.meaning());
                Fault::new(value.place, what, help).label(format!("this is {}", other.kind()))
            }
        };
        reading.refuse(fault);
        None
    }

    fn not_finite(&self, asked: &Asked<'_>, value: &Value, reading: &Reading<'_>) -> Fault {
        let written = reading.written(value);
        let what = format!(
            "{}: {} is {written}, which is no finite number",
            self.title, asked.subject
        );
        let help = format!("write a finite number: {}", asked.key.meaning());
        Fault::new(value.place, what, help).label("not finite")
    }

    fn unit_fault(
        &self,
        asked: &Asked<'_>,
        value: &Value,
        error: &UnitError,
        reading: &Reading<'_>,
    ) -> Fault {
        let text = shown(value.text().unwrap_or(""));
        let error_text = escaped(&error.to_string());
        let what = format!(
            "{}: {} is \"{text}\", but {error_text}",
            self.title, asked.subject
        );
        let bare = match unit_name(asked.measure, reading) {
            "" => "a bare number".to_owned(),
            unit => format!("a bare number, which is in {unit},"),
        };
        let accepted = asked.measure.dimension.accepted();
        let help = format!("write {bare} or a number with one of {accepted}");
        Fault::new(value.place, what, help).label(match error {
            UnitError::NoNumber => "no number",
            UnitError::Comma => "a comma",
            UnitError::NoUnit => "no unit",
            UnitError::WrongDimension { .. } => "wrong kind of unit",
            UnitError::Unknown { .. } => "unknown unit",
        })
    }

    fn bounds_fault(
        &self,
        asked: &Asked<'_>,
        si: f64,
        value: &Value,
        reading: &Reading<'_>,
    ) -> Option<Fault> {
        let measure = asked.measure;
        let (bound, words, label) = if measure.above && si <= measure.least {
            (measure.least, "above", "too low")
        } else if si < measure.least {
            (measure.least, "at least", "too low")
        } else if si > measure.most {
            (measure.most, "at most", "too high")
        } else {
            return None;
        };
        let limit = in_bare_unit(bound / bare_unit(measure, reading), measure, reading);
        let written = match value.node {
            Node::Number(bare) => in_bare_unit(bare, measure, reading),
            _ => reading.written(value),
        };
        let what = format!(
            "{}: {} must be {words} {limit}, but is {written}",
            self.title, asked.subject
        );
        let help = remedy(asked.key.name, si).map_or_else(
            || format!("write a value {words} {limit}: {}", asked.key.meaning()),
            str::to_owned,
        );
        Some(Fault::new(value.place, what, help).label(label))
    }
}

/// A bare number with the unit it is in.
fn in_bare_unit(value: f64, measure: Measure, reading: &Reading<'_>) -> String {
    let text = format!("{} {}", number(value), unit_name(measure, reading));
    text.trim_end().to_owned()
}

/// What to write instead where the slip has a usual reason.
fn remedy(key: &str, si: f64) -> Option<&'static str> {
    match key {
        "pumping" if si < 0.0 => {
            Some("an injecting well has `injection` with a positive rate instead")
        }
        "injection" if si < 0.0 => {
            Some("a pumping well has `pumping` with a positive rate instead")
        }
        "ratio" if si > 0.0 && si < 1.0 => {
            Some("the ratio is largest over smallest: write its inverse, and turn `azimuth` by 90°")
        }
        "interference_share" if si > 1.0 => Some("a share is between 0 and 1: write 0.20 for 20 %"),
        "gradient" if si < 0.0 => Some("a slope is not negative: turn `toward` by 180° instead"),
        _ => None,
    }
}

/// Metres, days and degrees in the unit of a bare number.
fn bare_unit(measure: Measure, reading: &Reading<'_>) -> f64 {
    if measure.in_grid_units {
        reading.metres_per_unit()
    } else {
        reading.units.si_per_unit(measure.dimension)
    }
}

fn unit_name(measure: Measure, reading: &Reading<'_>) -> &'static str {
    if !measure.in_grid_units {
        reading.units.unit_name(measure.dimension)
    } else if reading.metres_per_unit() == 1.0 {
        "m"
    } else {
        "units of the plan's CRS"
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
    // Fifteen significant digits hide the noise of unit conversions.
    rounded(value, 15)
}

/// A number rounded to some significant digits, for a sentence.
pub(super) fn rounded(value: f64, digits: usize) -> String {
    let scientific = format!("{value:.*e}", digits.saturating_sub(1));
    let value: f64 = scientific.parse().unwrap_or(value);
    if value == 0.0 || (1e-5..1e8).contains(&value.abs()) {
        value.to_string()
    } else {
        format!("{value:e}")
    }
}
