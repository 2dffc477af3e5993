//! What a layer's property is called, measures and means.

use serde_json::Value;

use super::Units;

/// What a property's value is; it decides the ending of its name.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Quantity {
    /// A text.
    Text,
    /// A whole number.
    Whole,
    /// A length, level or drawdown.
    Length,
    /// A volume of water a time.
    Rate,
    /// A rate for each unit of length.
    RateALength,
    /// Degrees clockwise from grid north.
    Azimuth,
    /// Darcy flux: a rate for each unit of area.
    Flux,
}

/// A property of a layer's features.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Property {
    /// Its name without the unit.
    pub stem: &'static str,
    /// What its value is.
    pub quantity: Quantity,
    /// What it means.
    pub about: &'static str,
}

impl Property {
    /// A property, its meaning in a few words.
    pub const fn new(stem: &'static str, quantity: Quantity, about: &'static str) -> Self {
        Self {
            stem,
            quantity,
            about,
        }
    }

    /// Its name in the plan's units: "head_m" or "head_ft".
    pub fn name(&self, units: Units) -> String {
        named(self.stem, self.quantity, units)
    }

    /// Its unit as people write it; empty where it has none.
    pub fn unit(&self, units: Units) -> String {
        let (rate, length) = (units.rate_words(), units.length_ending());
        match self.quantity {
            Quantity::Text | Quantity::Whole => String::new(),
            Quantity::Length => length.into(),
            Quantity::Rate => rate.into(),
            Quantity::RateALength => format!("{rate} per {length}"),
            Quantity::Azimuth => "degrees".into(),
            Quantity::Flux => format!("{length}/d"),
        }
    }

    /// The type of its values, as the commands name it.
    pub fn type_name(&self) -> &'static str {
        match self.quantity {
            Quantity::Text => "text",
            Quantity::Whole => "whole number",
            _ => "number",
        }
    }

    /// The property for another program.
    pub fn document(&self, units: Units) -> Value {
        serde_json::json!({
            "name": self.name(units),
            "type": self.type_name(),
            "unit": self.unit(units),
            "about": self.about,
        })
    }
}

/// A stem with the ending of its unit.
pub(super) fn named(stem: &str, quantity: Quantity, units: Units) -> String {
    let (rate, length) = (units.rate_ending(), units.length_ending());
    match quantity {
        Quantity::Text | Quantity::Whole | Quantity::Azimuth => stem.to_owned(),
        Quantity::Length => format!("{stem}_{length}"),
        Quantity::Rate => format!("{stem}_{rate}"),
        Quantity::RateALength => format!("{stem}_{rate}_per_{length}"),
        Quantity::Flux => format!("{stem}_{length}_per_d"),
    }
}
