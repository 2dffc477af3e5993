//! What a refusal is about, so that whoever read the plan can point at the
//! exact place.

use std::fmt;

/// A part of the site, by its position in the plan's lists.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Subject {
    /// The plan as a whole.
    Plan,
    /// The aquifer; the key that matters, if one does.
    Aquifer(Option<&'static str>),
    /// The ambient head; the key that matters, if one does.
    Ambient(Option<&'static str>),
    /// A river or barrier, by its index in `Site::edges`.
    Edge(usize, Option<&'static str>),
    /// A well, by its index in `Site::wells`.
    Well(usize, Option<&'static str>),
    /// A neighbour, by its index in `Site::neighbours`.
    Neighbour(usize, Option<&'static str>),
    /// The map; the key that matters, if one does.
    Map(Option<&'static str>),
}

/// Why something in a plan cannot be computed, in the form a person needs:
/// what is wrong with its values, and what to write instead.
///
/// Every room that can refuse part of a plan turns its typed error into this.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Refusal {
    /// What it is about.
    pub subject: Subject,
    /// One sentence with the thing, its value and the limit.
    pub what: String,
    /// The reason, where `what` alone does not give it.
    pub why: Option<String>,
    /// What to write instead.
    pub remedy: String,
    /// Other parts of the plan that take part, each with a short label.
    pub related: Vec<(Subject, String)>,
}

impl fmt::Display for Refusal {
    fn fmt(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        write!(formatter, "{}", self.what)?;
        if let Some(why) = &self.why {
            write!(formatter, "; {why}")?;
        }
        write!(formatter, "; {}", self.remedy)
    }
}

impl std::error::Error for Refusal {}
