//! SI values in the plan's units, under property names that end in the unit.

use serde_json::{Map, Number, Value};

use super::property::{Quantity, named};
use crate::plan::{Dimension, UnitSystem};

/// Writes quantities as an output's properties.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Units(pub UnitSystem);

impl Units {
    /// A length in the plan's unit.
    pub fn length(self, metres: f64) -> f64 {
        self.0.of_si(Dimension::Length, metres)
    }

    /// A rate in the plan's unit.
    pub fn rate(self, m3_d: f64) -> f64 {
        self.0.of_si(Dimension::Rate, m3_d)
    }

    /// A rate for each unit of area, such as a Darcy flux.
    pub fn flux(self, m_d: f64) -> f64 {
        self.0.of_si(Dimension::Conductivity, m_d)
    }

    /// An area in the square of the plan's unit of length.
    pub fn area(self, m2: f64) -> f64 {
        self.length(self.length(m2))
    }

    /// The ending of a property that is a length: "m" or "ft".
    pub fn length_ending(self) -> &'static str {
        match self.0 {
            UnitSystem::Metric => "m",
            UnitSystem::Us => "ft",
        }
    }

    /// The ending of a property that is a rate.
    pub fn rate_ending(self) -> &'static str {
        match self.0 {
            UnitSystem::Metric => "m3_per_d",
            UnitSystem::Us => "gpm",
        }
    }

    /// The ending of a property that is an area.
    pub fn area_ending(self) -> &'static str {
        match self.0 {
            UnitSystem::Metric => "m2",
            UnitSystem::Us => "ft2",
        }
    }

    /// A rate's unit as people write it.
    pub fn rate_words(self) -> &'static str {
        match self.0 {
            UnitSystem::Metric => "m³/d",
            UnitSystem::Us => "gpm",
        }
    }

    /// An area's unit as people write it.
    pub fn area_words(self) -> &'static str {
        match self.0 {
            UnitSystem::Metric => "m²",
            UnitSystem::Us => "ft²",
        }
    }
}

/// A list of properties in the order in which they were added.
#[derive(Clone, Debug)]
pub struct Properties {
    units: Units,
    map: Map<String, Value>,
}

impl Properties {
    /// No property yet.
    pub fn new(units: Units) -> Self {
        Self {
            units,
            map: Map::new(),
        }
    }

    /// Adds a value as it is.
    pub fn with(mut self, name: &str, value: impl Into<Value>) -> Self {
        self.map.insert(name.to_owned(), value.into());
        self
    }

    /// Adds a length under `stem_m` or `stem_ft`; null where there is none.
    pub fn length(self, stem: &str, metres: impl Into<Option<f64>>) -> Self {
        let value = metres.into().map(|metres| self.units.length(metres));
        self.number(stem, Quantity::Length, value)
    }

    /// Adds a rate under `stem_m3_per_d` or `stem_gpm`.
    pub fn rate(self, stem: &str, m3_d: impl Into<Option<f64>>) -> Self {
        let value = m3_d.into().map(|m3_d| self.units.rate(m3_d));
        self.number(stem, Quantity::Rate, value)
    }

    /// Adds a rate a length, in m²/d, under `stem_m3_per_d_per_m` or
    /// `stem_gpm_per_ft`.
    pub fn rate_a_length(self, stem: &str, m2_d: impl Into<Option<f64>>) -> Self {
        let a_length = |m2_d: f64| self.units.rate(m2_d) / self.units.length(1.0);
        let value = m2_d.into().map(a_length);
        self.number(stem, Quantity::RateALength, value)
    }

    /// Adds a Darcy flux under `stem_m_per_d` or `stem_ft_per_d`.
    pub fn flux(self, stem: &str, m_d: impl Into<Option<f64>>) -> Self {
        let value = m_d.into().map(|m_d| self.units.flux(m_d));
        self.number(stem, Quantity::Flux, value)
    }

    /// Adds a number that is in the plan's unit already.
    pub fn number(self, stem: &str, quantity: Quantity, value: Option<f64>) -> Self {
        let name = named(stem, quantity, self.units);
        self.with(&name, number(value))
    }

    /// Adds an area under `stem_m2` or `stem_ft2`.
    pub fn area(self, stem: &str, m2: impl Into<Option<f64>>) -> Self {
        let name = format!("{stem}_{}", self.units.area_ending());
        let value = m2.into().map(|m2| self.units.area(m2));
        self.with(&name, number(value))
    }

    /// Adds lengths as an array.
    pub fn lengths(self, stem: &str, metres: Option<&[f64]>) -> Self {
        let name = format!("{stem}_{}", self.units.length_ending());
        let units = self.units;
        let value = metres.map_or(Value::Null, |list| {
            list.iter()
                .map(|&metres| number(Some(units.length(metres))))
                .collect()
        });
        self.with(&name, value)
    }

    /// Adds rates as an array.
    pub fn rates(self, stem: &str, m3_d: &[f64]) -> Self {
        let name = format!("{stem}_{}", self.units.rate_ending());
        let units = self.units;
        let value: Value = m3_d
            .iter()
            .map(|&m3_d| number(Some(units.rate(m3_d))))
            .collect();
        self.with(&name, value)
    }

    /// The finished list.
    pub fn finish(self) -> Map<String, Value> {
        self.map
    }
}

impl From<Properties> for Value {
    fn from(properties: Properties) -> Self {
        Self::Object(properties.map)
    }
}

impl From<Properties> for Map<String, Value> {
    fn from(properties: Properties) -> Self {
        properties.map
    }
}

/// A number, or null where there is none or it is not finite. Minus zero
/// reads as zero.
pub fn number(value: impl Into<Option<f64>>) -> Value {
    value
        .into()
        .and_then(|value| Number::from_f64(value + 0.0))
        .map_or(Value::Null, Value::Number)
}
