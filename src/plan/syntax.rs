//! Turns what is no TOML into faults, without the faults that merely follow.
//!
//! The parser goes on after an error. A bracket left open then makes every
//! later line an error too, so that only the first error inside one value is
//! kept, with the place where the value begins.

use std::collections::HashSet;

use super::fault::{Fault, shown};
use super::source::{Place, Sources};
use super::value::{Node, Value};

/// What is no TOML, and the values it stands in.
pub(super) struct Syntax {
    faults: Vec<Fault>,
    broken_values: Vec<Place>,
}

/// The faults of a TOML text; `document` is what could be made of it.
pub(super) fn check(
    errors: &[toml::de::Error],
    document: &Value,
    source: usize,
    text: &str,
) -> Syntax {
    let mut values = Vec::new();
    if !errors.is_empty() {
        list_values(document, &mut values);
        values.sort_unstable();
    }
    let mut broken = HashSet::new();
    let mut faults = Vec::new();
    for error in errors {
        let span = error.span().unwrap_or(0..0);
        let place = Place::new(source, span);
        let before = values.partition_point(|value: &Place| value.start < place.start);
        let last = before.checked_sub(1).and_then(|index| values.get(index));
        let inside = last.filter(|value| place.start <= value.end);
        // Outside of values the first error of a line counts.
        let line_start = text
            .get(..place.start as usize)
            .and_then(|before| before.rfind('\n'));
        if broken.insert((inside, line_start.filter(|_| inside.is_none()))) {
            faults.push(fault(error, place, inside.copied(), text));
        }
    }
    let broken_values = broken.into_iter().filter_map(|(value, _)| value.copied());
    Syntax {
        faults,
        broken_values: broken_values.collect(),
    }
}

/// The places of all values that are no tables.
fn list_values(value: &Value, places: &mut Vec<Place>) {
    match &value.node {
        Node::Table(entries) => {
            for entry in entries {
                list_values(&entry.value, places);
            }
        }
        Node::List(items) if items.iter().any(|item| item.table().is_some()) => {
            for item in items {
                list_values(item, places);
            }
        }
        _ => places.push(value.place),
    }
}

fn fault(error: &toml::de::Error, place: Place, inside: Option<Place>, text: &str) -> Fault {
    let message = plain_message(error, place, text);
    let written = text.get(place.range()).unwrap_or("");
    let help = match message.as_str() {
        "duplicate key" => {
            let key = shown(written);
            format!("`{key}` is written twice: keep one, or use [[…]] for a list")
        }
        _ => "write `key = value`, texts in double quotes, lists in [ ], tables under [name]; \
              see toml.io"
            .to_owned(),
    };
    let what = format!("this is not TOML: {message}");
    let fault = Fault::new(place, what, help).label("here");
    match inside {
        Some(value) => {
            let start = value.start as usize;
            let first = text.get(start..).and_then(|rest| rest.chars().next());
            let end = start + first.map_or(0, char::len_utf8);
            let begins = Place::new(value.source as usize, start..end);
            fault.related(begins, "in the value that begins here")
        }
        None => fault,
    }
}

/// The parser's message, or a plainer one where it is hard to understand.
fn plain_message(error: &toml::de::Error, place: Place, text: &str) -> String {
    let before = text.get(..place.start as usize).unwrap_or("");
    let is_after_equals = before.trim_end_matches([' ', '\t']).ends_with('=');
    if place.range().is_empty() && is_after_equals {
        return "there is no value after `=`".to_owned();
    }
    error.message().trim().replace('\n', "; ")
}

impl Syntax {
    /// The faults of syntax, and of the others those that do not follow from
    /// them: nothing is missed where something could not be read, and a
    /// broken value or line is not faulted twice.
    pub(super) fn with_others(self, others: Vec<Fault>, sources: &Sources) -> Vec<Fault> {
        if self.faults.is_empty() {
            return others;
        }
        let line = |place: Place| (place.source, sources.locate(place).line);
        let places = self.faults.iter().map(|fault| fault.place);
        let lines: HashSet<_> = places
            .chain(self.broken_values.iter().copied())
            .map(line)
            .collect();
        let values = self.broken_values;
        let in_broken_value = |place: Place| {
            let holds = |value: &Place| value.start <= place.start && place.start <= value.end;
            values
                .iter()
                .any(|value| value.source == place.source && holds(value))
        };
        let follows = |fault: &Fault| {
            fault.is_absence || lines.contains(&line(fault.place)) || in_broken_value(fault.place)
        };
        let others = others.into_iter().filter(|fault| !follows(fault));
        self.faults.iter().cloned().chain(others).collect()
    }
}
