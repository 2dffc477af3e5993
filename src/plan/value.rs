//! What was written, as a tree of values that know their place. TOML plans
//! and GeoJSON layers become the same tree, so that one reader serves both.

use toml::Spanned;
use toml::de::{DeFloat, DeInteger, DeTable, DeValue};

use super::source::Place;

/// A value and where it was written.
#[derive(Clone, Debug)]
pub(super) struct Value {
    pub(super) node: Node,
    pub(super) place: Place,
}

/// What was written.
#[derive(Clone, Debug)]
pub(super) enum Node {
    /// JSON's null, which layers write for an absent property.
    Null,
    Boolean,
    Number(f64),
    Text(String),
    /// A TOML date or time.
    Date,
    List(Vec<Value>),
    Table(Vec<Entry>),
}

/// One key of a table with its value.
#[derive(Clone, Debug)]
pub(super) struct Entry {
    pub(super) key: String,
    pub(super) key_place: Place,
    pub(super) value: Value,
}

impl Node {
    /// What it is called in a sentence.
    pub(super) fn kind(&self) -> &'static str {
        match self {
            Self::Null => "null",
            Self::Boolean => "a yes-or-no value",
            Self::Number(_) => "a number",
            Self::Text(_) => "a text",
            Self::Date => "a date",
            Self::List(_) => "a list",
            Self::Table(_) => "a table",
        }
    }
}

impl Value {
    pub(super) fn text(&self) -> Option<&str> {
        match &self.node {
            Node::Text(text) => Some(text),
            _ => None,
        }
    }

    pub(super) fn list(&self) -> Option<&[Value]> {
        match &self.node {
            Node::List(items) => Some(items),
            _ => None,
        }
    }

    pub(super) fn table(&self) -> Option<&[Entry]> {
        match &self.node {
            Node::Table(entries) => Some(entries),
            _ => None,
        }
    }

    /// The value of a key, where this is a table that has it and it is not
    /// null.
    pub(super) fn get(&self, key: &str) -> Option<&Value> {
        let entry = self.table()?.iter().find(|entry| entry.key == key)?;
        (!matches!(entry.value.node, Node::Null)).then_some(&entry.value)
    }
}

/// The tree of a parsed TOML document that is source number `source`.
pub(super) fn of_toml(document: Spanned<DeTable<'_>>, source: usize) -> Value {
    let place = Place::new(source, document.span());
    Value {
        node: of_table(document.into_inner(), source),
        place,
    }
}

fn of_table(table: DeTable<'_>, source: usize) -> Node {
    let entries = table.into_iter().map(|(key, value)| Entry {
        key_place: Place::new(source, key.span()),
        key: key.into_inner().into_owned(),
        value: of_value(value, source),
    });
    Node::Table(entries.collect())
}

fn of_value(value: Spanned<DeValue<'_>>, source: usize) -> Value {
    let place = Place::new(source, value.span());
    let node = match value.into_inner() {
        DeValue::String(text) => Node::Text(text.into_owned()),
        DeValue::Integer(integer) => Node::Number(of_integer(&integer)),
        DeValue::Float(float) => Node::Number(of_float(&float)),
        DeValue::Boolean(_) => Node::Boolean,
        DeValue::Datetime(_) => Node::Date,
        DeValue::Array(items) => {
            let items = items.into_iter().map(|item| of_value(item, source));
            Node::List(items.collect())
        }
        DeValue::Table(table) => of_table(table, source),
    };
    Value { node, place }
}

/// Integers too long for 64 bits become the nearest float.
fn of_integer(integer: &DeInteger<'_>) -> f64 {
    let digits = integer.as_str();
    match i64::from_str_radix(digits, integer.radix()) {
        Ok(number) => number as f64,
        // Whatever is too large even for a float is refused as not finite.
        Err(_) if integer.radix() == 10 => digits.parse().unwrap_or(f64::INFINITY),
        Err(_) => f64::INFINITY,
    }
}

fn of_float(float: &DeFloat<'_>) -> f64 {
    float.as_str().parse().unwrap_or(f64::NAN)
}
