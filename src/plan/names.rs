//! Names tell results apart, so none may be given twice.

use std::collections::HashMap;

use super::fault::{Fault, shown};
use super::keys::NAME;
use super::reader::{Reading, Section};
use super::source::Place;

/// The names given so far, and where.
#[derive(Default)]
pub(super) struct Names(HashMap<String, Place>);

impl Names {
    /// The name of a section, verbatim; one that is taken is refused.
    pub(super) fn claim(
        &mut self,
        section: &Section<'_>,
        reading: &mut Reading<'_>,
    ) -> Option<String> {
        let name = section.text(&NAME, reading)?.to_owned();
        let place = section.value(&NAME)?.place;
        let Some(first) = self.0.get(&name) else {
            self.0.insert(name.clone(), place);
            return Some(name);
        };
        let what = format!("the name `{}` is given twice", shown(&name));
        let help = "give each a name of its own";
        let fault = Fault::new(place, what, help)
            .label("the same name again")
            .why("results are listed by name")
            .related(*first, "first here");
        reading.refuse(fault);
        None
    }
}
