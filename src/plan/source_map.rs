//! Remembers where each part of the site was written, so that later rooms,
//! which know no file, can have their refusals shown at the exact place.

use crate::site::Subject;

use super::source::Place;

/// Where a table and its keys stand.
#[derive(Clone, Debug)]
pub(super) struct Places {
    pub(super) whole: Place,
    pub(super) keys: Vec<(String, Place)>,
}

/// The places of everything a [`Subject`] can name.
#[derive(Clone, Debug)]
pub(super) struct SourceMap {
    pub(super) plan: Place,
    pub(super) aquifer: Option<Places>,
    pub(super) ambient: Option<Places>,
    pub(super) map: Option<Places>,
    pub(super) edges: Vec<Places>,
    pub(super) wells: Vec<Places>,
    pub(super) neighbours: Vec<Places>,
}

/// Keys that say the same thing in another way, when the first is absent.
const STAND_INS: [(&str, &[&str]); 7] = [
    ("pumping", &["injection"]),
    ("injection", &["pumping"]),
    ("at", &["area", "layer"]),
    ("area", &["at", "layer"]),
    ("line", &["circle", "layer"]),
    ("circle", &["line", "layer"]),
    ("transmissivity", &["conductivity", "material"]),
];

impl Places {
    fn find(&self, key: Option<&str>) -> Place {
        let Some(key) = key else { return self.whole };
        let place = |wanted: &str| {
            let found = self.keys.iter().find(|(name, _)| name == wanted);
            found.map(|(_, place)| *place)
        };
        let stand_ins = STAND_INS.iter().find(|(name, _)| *name == key);
        let others = stand_ins.map_or(&[] as &[&str], |(_, others)| others);
        place(key)
            .or_else(|| others.iter().find_map(|other| place(other)))
            .unwrap_or(self.whole)
    }
}

impl SourceMap {
    pub(super) fn new(plan: Place) -> Self {
        Self {
            plan,
            aquifer: None,
            ambient: None,
            map: None,
            edges: Vec::new(),
            wells: Vec::new(),
            neighbours: Vec::new(),
        }
    }

    /// Where a part of the site was written; the plan's head where it was not.
    pub(super) fn find(&self, subject: &Subject) -> Place {
        let (places, key) = match subject {
            Subject::Plan => return self.plan,
            Subject::Aquifer(key) => (self.aquifer.as_ref(), *key),
            Subject::Ambient(key) => (self.ambient.as_ref(), *key),
            Subject::Map(key) => (self.map.as_ref(), *key),
            Subject::Edge(index, key) => (self.edges.get(*index), *key),
            Subject::Well(index, key) => (self.wells.get(*index), *key),
            Subject::Neighbour(index, key) => (self.neighbours.get(*index), *key),
        };
        places.map_or(self.plan, |places| places.find(key))
    }
}
