//! Reads one table of the plan against its list of keys, and collects every
//! fault instead of stopping at the first.

use super::Input;
use super::crs::Crs;
use super::fault::{Fault, nearest, shown};
use super::keys::{Key, Table};
use super::layers::{Feature, Layers};
use super::source::{Place, Sources};
use super::units::UnitSystem;
use super::value::{Entry, Node, Value};

/// More wells, neighbours or edges than this are refused.
pub(super) const MOST_ITEMS: usize = 20_000;

/// More faults than this help nobody.
pub(super) const MOST_FAULTS: usize = 1_000;

/// What is known and found while a plan is read.
pub(super) struct Reading<'l> {
    pub(super) sources: Sources,
    pub(super) faults: Vec<Fault>,
    pub(super) notes: Vec<String>,
    pub(super) inputs: Vec<Input>,
    pub(super) units: UnitSystem,
    /// Absent where the plan's CRS is at fault; the rest is read all the same.
    pub(super) crs: Option<Crs>,
    pub(super) layers: Layers<'l>,
}

impl Reading<'_> {
    pub(super) fn refuse(&mut self, fault: Fault) {
        if self.faults.len() < MOST_FAULTS {
            self.faults.push(fault);
        }
    }

    /// Metres in one unit of the plan's coordinates.
    pub(super) fn metres_per_unit(&self) -> f64 {
        self.crs.as_ref().map_or(1.0, Crs::metres_per_unit)
    }

    /// What was written at a place, safe to show.
    pub(super) fn written(&self, value: &Value) -> String {
        shown(self.sources.text(value.place))
    }
}

/// A table of the plan, or the properties of a layer's feature.
pub(super) struct Section<'v> {
    /// What a message calls it: "well `PW-1`".
    pub(super) title: String,
    pub(super) place: Place,
    pub(super) table: &'static Table,
    entries: &'v [Entry],
}

impl<'v> Section<'v> {
    /// A table of the plan; unknown, missing and contradicting keys are
    /// refused here, so that whoever reads a value need not.
    pub(super) fn open(
        table: &'static Table,
        value: &'v Value,
        reading: &mut Reading<'_>,
    ) -> Option<Self> {
        let section = Self::unchecked(table, value, reading)?;
        section.refuse_unknown_keys(reading);
        section.refuse_missing_keys(reading);
        Some(section)
    }

    /// The properties of a feature. A GIS layer carries columns of its own,
    /// so that only those that look like a slip of a key are refused.
    /// Returns the other unused columns too.
    pub(super) fn of_feature(
        table: &'static Table,
        feature: &'v Feature,
        reading: &mut Reading<'_>,
    ) -> Option<(Self, Vec<&'v str>)> {
        let mut section = Self::unchecked(table, &feature.properties, reading)?;
        section.place = feature.place;
        section.title.clone_from(&feature.title);
        let mut unused = Vec::new();
        for entry in section.unknown_entries() {
            let slip = table
                .keys
                .iter()
                .find(|key| section.value(key).is_none() && is_slip(&entry.key, key.name));
            match slip {
                Some(_) => reading.refuse(section.unknown_key(entry)),
                None => unused.push(entry.key.as_str()),
            }
        }
        section.refuse_missing_keys(reading);
        Some((section, unused))
    }

    fn unchecked(
        table: &'static Table,
        value: &'v Value,
        reading: &mut Reading<'_>,
    ) -> Option<Self> {
        let Some(entries) = value.table() else {
            let what = format!("{} must be a table, not {}", table.name, value.node.kind());
            let keys = names(table.keys.iter().copied());
            let help = match value.node {
                Node::List(_) if table.name.starts_with('[') => {
                    format!(
                        "write its header once, as {}, with single brackets",
                        table.name
                    )
                }
                _ => format!("write a table with the keys {keys}"),
            };
            reading.refuse(Fault::new(value.place, what, help).label("not a table"));
            return None;
        };
        let name = value.get("name").and_then(Value::text);
        let title = match name {
            Some(name) if table.name.starts_with(char::is_alphabetic) => {
                format!("{} `{}`", table.name, shown(name))
            }
            _ => table.name.to_owned(),
        };
        Some(Self {
            title,
            place: value.place,
            table,
            entries,
        })
    }

    /// What stands at a key, if anything does.
    pub(super) fn value(&self, key: &Key) -> Option<&'v Value> {
        let entry = self.entries.iter().find(|entry| entry.key == key.name)?;
        (!matches!(entry.value.node, Node::Null)).then_some(&entry.value)
    }

    /// A text; one that is empty or something else is refused.
    pub(super) fn text(&self, key: &Key, reading: &mut Reading<'_>) -> Option<&'v str> {
        let value = self.value(key)?;
        let text = value.text();
        match text {
            Some(text) if !text.trim().is_empty() => return Some(text),
            Some(_) => reading.refuse(
                Fault::new(
                    value.place,
                    format!("{}: `{}` is empty", self.title, key.name),
                    format!("write a text in quotes: {}", key.meaning()),
                )
                .label("empty"),
            ),
            None => reading.refuse(self.wrong_kind(key, value, "a text in quotes")),
        }
        None
    }

    /// The places of its keys, for pointing at them later.
    pub(super) fn places(&self) -> super::source_map::Places {
        let keys = self.entries.iter();
        super::source_map::Places {
            whole: self.place,
            keys: keys
                .map(|entry| (entry.key.clone(), entry.value.place))
                .collect(),
        }
    }

    /// The fault of a value of the wrong kind.
    pub(super) fn wrong_kind(&self, key: &Key, value: &Value, wanted: &str) -> Fault {
        let kind = value.node.kind();
        let what = format!(
            "{}: `{}` must be {wanted}, not {kind}",
            self.title, key.name
        );
        let help = format!("write {wanted}: {}", key.meaning());
        Fault::new(value.place, what, help).label(format!("this is {kind}"))
    }

    fn unknown_entries(&self) -> impl Iterator<Item = &'v Entry> {
        let known = self.table.keys;
        let is_known = move |entry: &&Entry| known.iter().any(|key| key.name == entry.key);
        let unknown = self.entries.iter().filter(move |entry| !is_known(entry));
        unknown.take(MOST_FAULTS)
    }

    fn refuse_unknown_keys(&self, reading: &mut Reading<'_>) {
        for entry in self.unknown_entries() {
            reading.refuse(self.unknown_key(entry));
        }
    }

    fn unknown_key(&self, entry: &Entry) -> Fault {
        let known = self.table.keys.iter().map(|key| key.name);
        let what = format!(
            "`{}` is not a key of {}",
            shown(&entry.key),
            self.table.one()
        );
        let all = names(self.table.keys.iter().copied());
        let help = match nearest(&entry.key, known) {
            Some(near) => format!("write `{near}`, or remove it; the keys are {all}"),
            None => format!("remove it; the keys are {all}"),
        };
        Fault::new(entry.key_place, what, help).label("unknown key")
    }

    fn refuse_missing_keys(&self, reading: &mut Reading<'_>) {
        let missing = |key: &&&Key| {
            key.required && self.value(key).is_none() && !self.is_meant_elsewhere(key)
        };
        for key in self.table.keys.iter().filter(missing) {
            let what = format!("{} has no `{}`", self.title, key.name);
            let help = format!("add `{}`: {}", key.name, key.meaning());
            reading.refuse(Fault::new(self.place, what, help).absence());
        }
        for group in self.table.exactly_one {
            self.refuse_unless_one(group, reading);
        }
        for (key, other) in self.table.needs {
            let Some(value) = self.value(key).filter(|_| self.value(other).is_none()) else {
                continue;
            };
            let what = format!("{} has `{}` but no `{}`", self.title, key.name, other.name);
            let help = format!("add `{}`: {}", other.name, other.meaning());
            reading.refuse(Fault::new(value.place, what, help).absence());
        }
    }

    /// Whether an unknown key is likely a misspelling of this one, which is
    /// then not missed a second time.
    fn is_meant_elsewhere(&self, key: &Key) -> bool {
        let known = || self.table.keys.iter().map(|key| key.name);
        self.unknown_entries()
            .any(|entry| nearest(&entry.key, known()) == Some(key.name))
    }

    fn refuse_unless_one(&self, group: &'static [&'static Key], reading: &mut Reading<'_>) {
        let all = names(group.iter().copied());
        let given: Vec<_> = group
            .iter()
            .filter_map(|key| Some((key.name, self.value(key)?)))
            .collect();
        match given.as_slice() {
            [_] => {}
            [] if group.iter().any(|key| self.is_meant_elsewhere(key)) => {}
            [] => {
                let what = format!("{} has none of {all}", self.title);
                let help = format!("add exactly one of {all}");
                reading.refuse(Fault::new(self.place, what, help).absence());
            }
            [(first, first_value), others @ ..] => {
                for (other, value) in others {
                    let what = format!("{} has both `{first}` and `{other}`", self.title);
                    let help = format!("keep exactly one of {all}");
                    reading.refuse(
                        Fault::new(value.place, what, help)
                            .label("and this")
                            .related(first_value.place, "this"),
                    );
                }
            }
        }
    }
}

/// The tables of `[[key]]`, opened; a single `[key]` is refused, but read.
pub(super) fn tables<'v>(
    plan: &Section<'v>,
    key: &Key,
    table: &'static Table,
    reading: &mut Reading<'_>,
) -> Vec<Section<'v>> {
    let Some(value) = plan.value(key) else {
        return Vec::new();
    };
    let items = match &value.node {
        Node::List(items) => items.as_slice(),
        _ => {
            let what = format!(
                "`{}` must be a list of tables, not {}",
                key.name,
                value.node.kind()
            );
            let help = format!("write its header as [[{}]], with two brackets", key.name);
            reading.refuse(Fault::new(value.place, what, help));
            std::slice::from_ref(value)
        }
    };
    if items.len() > MOST_ITEMS {
        let count = items.len();
        let what = format!(
            "the plan has {count} [[{}]] tables; {MOST_ITEMS} is the most",
            key.name
        );
        let help = "keep those that matter to the site, or split the plan";
        reading.refuse(Fault::new(value.place, what, help).label("too many"));
        return Vec::new();
    }
    let open = |item| Section::open(table, item, reading);
    items.iter().filter_map(open).collect()
}

/// The keys' names as a list for a sentence.
fn names(keys: impl Iterator<Item = &'static Key>) -> String {
    let quoted: Vec<_> = keys.map(|key| format!("`{}`", key.name)).collect();
    quoted.join(", ")
}

/// Whether a layer's column is a key with a slip of one or two letters.
fn is_slip(written: &str, key: &str) -> bool {
    let allowed = if key.len() < 6 { 1 } else { 2 };
    written.len() <= key.len() + 2 && strsim::osa_distance(written, key) <= allowed
}
