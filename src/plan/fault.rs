//! One thing that is wrong with a plan: where, what, why, and what to write
//! instead.

use super::source::{Location, Place, Sources};

/// A fault of the plan, at its place.
#[derive(Clone, Debug)]
pub struct Fault {
    pub(super) place: Place,
    /// One sentence with the thing, its value and the limit.
    pub(super) what: String,
    /// A few words that stand under the offending text.
    pub(super) label: String,
    pub(super) why: Option<String>,
    pub(super) help: String,
    /// Other places that take part, each with a short label.
    pub(super) related: Vec<(Place, String)>,
    /// Something is not there, which may be no fault of its own where the
    /// text has broken syntax.
    pub(super) is_absence: bool,
}

impl Fault {
    pub(super) fn new(place: Place, what: impl Into<String>, help: impl Into<String>) -> Self {
        Self {
            place,
            what: what.into(),
            label: String::new(),
            why: None,
            help: help.into(),
            related: Vec::new(),
            is_absence: false,
        }
    }

    pub(super) fn label(mut self, label: impl Into<String>) -> Self {
        self.label = label.into();
        self
    }

    pub(super) fn why(mut self, why: impl Into<String>) -> Self {
        self.why = Some(why.into());
        self
    }

    pub(super) fn absence(mut self) -> Self {
        self.is_absence = true;
        if self.place.range().is_empty() {
            self.label = "the plan begins here".to_owned();
        }
        self
    }

    /// For results, which should stay small.
    pub(super) fn boxed(self) -> Box<Self> {
        Box::new(self)
    }

    pub(super) fn related(mut self, place: Place, label: impl Into<String>) -> Self {
        self.related.push((place, label.into()));
        self
    }
}

/// Everything that is wrong with a plan, in the order of its text.
#[derive(Clone, Debug)]
pub struct PlanFaults {
    pub(super) sources: Sources,
    pub(super) faults: Vec<Fault>,
}

/// A fault as other programs read it.
#[derive(Clone, Debug, PartialEq, Eq, serde::Serialize)]
pub struct ListedFault {
    /// Where the offending text begins.
    #[serde(flatten)]
    pub location: Location,
    /// One sentence with the thing, its value and the limit.
    pub what: String,
    /// The reason, where `what` alone does not give it.
    pub why: Option<String>,
    /// What to write instead.
    pub help: String,
}

impl PlanFaults {
    pub(super) fn new(sources: Sources, mut faults: Vec<Fault>) -> Self {
        faults.sort_by_key(|fault| fault.place);
        Self { sources, faults }
    }

    /// How many there are; at least one. A thousand are kept at most.
    pub fn count(&self) -> usize {
        self.faults.len()
    }

    /// The faults as plain data, in the order of the text.
    pub fn list(&self) -> Vec<ListedFault> {
        self.faults
            .iter()
            .map(|fault| ListedFault {
                location: self.sources.locate(fault.place),
                what: fault.what.clone(),
                why: fault.why.clone(),
                help: fault.help.clone(),
            })
            .collect()
    }
}

impl std::fmt::Display for PlanFaults {
    fn fmt(&self, formatter: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        formatter.write_str(&self.render(false))
    }
}

impl std::error::Error for PlanFaults {}

/// A text of the user's, safe to show in a sentence: control characters
/// escaped, and no longer than 60 characters.
pub(super) fn shown(text: &str) -> String {
    const LONGEST: usize = 60;
    match text.char_indices().nth(LONGEST) {
        Some((end, _)) => format!("{}…", escaped(text.get(..end).unwrap_or(""))),
        None => escaped(text),
    }
}

/// A text with its control characters escaped.
pub(super) fn escaped(text: &str) -> String {
    let mut escaped = String::with_capacity(text.len());
    for character in text.chars() {
        if character.is_control() {
            escaped.extend(character.escape_default());
        } else {
            escaped.push(character);
        }
    }
    escaped
}

/// "1 value", "2 values".
pub(super) fn counted(count: usize, thing: &str) -> String {
    match count {
        1 => format!("1 {thing}"),
        _ => format!("{count} {thing}s"),
    }
}

/// The known word that a text most likely means, if any is near.
pub(crate) fn nearest<'a>(text: &str, known: impl IntoIterator<Item = &'a str>) -> Option<&'a str> {
    /// Below this Jaro–Winkler likeness two words have little in common.
    const LEAST_LIKENESS: f64 = 0.8;
    // Long texts mean none of the words, and would cost time to compare.
    if text.len() > 200 {
        return None;
    }
    known
        .into_iter()
        .map(|word| (strsim::jaro_winkler(text, word), word))
        .filter(|(likeness, _)| *likeness > LEAST_LIKENESS)
        .max_by(|a, b| a.0.total_cmp(&b.0))
        .map(|(_, word)| word)
}
