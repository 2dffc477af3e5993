//! Reads GeoJSON layers (RFC 7946) and projects their features into the
//! plan's CRS.
//!
//! Vertices are projected; between them a side is straight in the plan's
//! CRS. A third coordinate, the altitude, is not used. Multi-geometries of
//! one part count as that part.

use std::collections::{BTreeSet, HashMap};
use std::rc::Rc;

use sha2::{Digest, Sha256};

use super::fault::{Fault, nearest, shown};
use super::files::{self, LoadLayer};
use super::json;
use super::reader::{MOST_ITEMS, Reading};
use super::source::{Place, Source};
use super::value::{Entry, Node, Value};

/// The layers of a plan, each read once.
pub(super) struct Layers<'l> {
    load: &'l LoadLayer<'l>,
    known: HashMap<String, Option<Rc<Layer>>>,
    /// Of the plan's bytes, then of each layer's in the order of first use.
    pub(super) hash: Sha256,
}

impl<'l> Layers<'l> {
    pub(super) fn new(load: &'l LoadLayer<'l>, plan: &[u8]) -> Self {
        Self {
            load,
            known: HashMap::new(),
            hash: Sha256::new_with_prefix(plan),
        }
    }
}

/// One layer.
pub(super) struct Layer {
    /// The file, as the plan names it.
    pub(super) name: String,
    pub(super) features: Vec<Feature>,
    by_name: HashMap<String, Vec<usize>>,
}

/// One feature of a layer.
pub(super) struct Feature {
    /// What a message calls it: "feature `Ostra` of rivers.geojson".
    pub(super) title: String,
    pub(super) place: Place,
    pub(super) geometry: Option<Value>,
    pub(super) properties: Value,
}

impl Layer {
    /// The one feature of a name.
    pub(super) fn feature(&self, wanted: &Value, reading: &mut Reading<'_>) -> Option<&Feature> {
        let name = wanted.text()?;
        match self.by_name.get(name).map(Vec::as_slice) {
            Some([only]) => return self.features.get(*only),
            Some(several) => {
                let places = several.iter().filter_map(|index| self.features.get(*index));
                let count = several.len();
                let what = format!("{} has {count} features named `{}`", self.name, shown(name));
                let help = "give each feature of the layer a `name` of its own";
                let mut fault = Fault::new(wanted.place, what, help).label("not unique");
                for feature in places.take(3) {
                    fault = fault.related(feature.place, "this one");
                }
                reading.refuse(fault);
            }
            None => {
                let what = format!("{} has no feature named `{}`", self.name, shown(name));
                let help = self.names_help(name);
                reading.refuse(Fault::new(wanted.place, what, help).label("not in the layer"));
            }
        }
        None
    }

    /// Refuses a layer with more features than a plan can hold.
    pub(super) fn refuse_too_many(&self, named_at: Place, reading: &mut Reading<'_>) -> Option<()> {
        let count = self.features.len();
        if count <= MOST_ITEMS {
            return Some(());
        }
        let what = format!(
            "{} has {count} features; {MOST_ITEMS} is the most",
            self.name
        );
        let help = "keep those that matter to the site, or split the plan";
        reading.refuse(Fault::new(named_at, what, help).label("too many"));
        None
    }

    fn names_help(&self, name: &str) -> String {
        let names = || self.by_name.keys().map(String::as_str);
        if let Some(near) = nearest(name, names()) {
            return format!("write `{}`", shown(near));
        }
        let mut all: Vec<_> = names().map(shown).collect();
        all.sort();
        all.truncate(10);
        match all.len() {
            0 => "no feature of the layer has a `name` property: add one".to_owned(),
            _ => format!("the layer has {}", all.join(", ")),
        }
    }
}

impl Reading<'_> {
    /// The layer that a key of the plan names.
    pub(super) fn layer(&mut self, file: &Value) -> Option<Rc<Layer>> {
        let name = file.text()?;
        if let Some(known) = self.layers.known.get(name) {
            // A faulty layer has had its faults shown where it was first named.
            return known.clone();
        }
        let layer = self.read_layer(name, file.place).map(Rc::new);
        self.layers.known.insert(name.to_owned(), layer.clone());
        layer
    }

    fn read_layer(&mut self, name: &str, place: Place) -> Option<Layer> {
        let bytes = match (self.layers.load)(name) {
            Ok(bytes) => bytes,
            Err(error) => {
                let what = format!("the layer {} cannot be read: {error}", shown(name));
                let help = "paths are relative to the plan's folder: check the name and the file";
                self.refuse(Fault::new(place, what, help).label("cannot be read"));
                return None;
            }
        };
        self.layers.hash.update(&bytes);
        let (text, bad) = files::text_of(bytes);
        let source = self.sources.add(Source::new(name.to_owned(), text));
        if let Some(bad) = bad {
            let fault = files::not_utf8(Place::new(source, bad), shown(name));
            self.refuse(fault.related(place, "the layer is named here"));
            return None;
        }
        let at_start = Place::new(source, 0..0);
        let text = self.sources.of(at_start)?.text();
        let fault = match json::parse(text, source) {
            Ok(root) => match features_of(root, name) {
                Ok(features) => return Some(with_names(name, features)),
                Err(fault) => *fault,
            },
            Err(error) => {
                let what = format!("{} is not JSON: {}", shown(name), error.what);
                let help = "export the layer again as GeoJSON (RFC 7946)";
                let end = text.ceil_char_boundary(error.at + 1);
                Fault::new(Place::new(source, error.at..end), what, help).label("here")
            }
        };
        self.refuse(fault.related(place, "the layer is named here"));
        None
    }
}

/// Columns that are no keys are said, not refused: layers carry many.
pub(super) fn note_unused_columns(layer: &str, columns: Vec<&str>, reading: &mut Reading<'_>) {
    let columns: BTreeSet<_> = columns.into_iter().collect();
    if columns.is_empty() {
        return;
    }
    let quoted: Vec<_> = columns
        .iter()
        .map(|column| format!("`{}`", shown(column)))
        .collect();
    let list = quoted.join(", ");
    reading
        .notes
        .push(format!("{layer}: these properties are not used: {list}"));
}

fn with_names(name: &str, features: Vec<Feature>) -> Layer {
    let mut by_name: HashMap<String, Vec<usize>> = HashMap::new();
    for (index, feature) in features.iter().enumerate() {
        if let Some(name) = feature.properties.get("name").and_then(Value::text) {
            by_name.entry(name.to_owned()).or_default().push(index);
        }
    }
    Layer {
        name: shown(name),
        features,
        by_name,
    }
}

/// The features of a GeoJSON document: a collection, or a single feature.
fn features_of(root: Value, layer: &str) -> Result<Vec<Feature>, Box<Fault>> {
    refuse_other_crs(&root, layer)?;
    let kind = root.get("type").and_then(Value::text).unwrap_or("");
    let members = match kind {
        "FeatureCollection" => {
            let Some(members) = take(root.node, "features").and_then(into_list) else {
                return Err(Box::new(no_geojson(
                    root.place,
                    layer,
                    "`features` is no list",
                )));
            };
            members
        }
        "Feature" => vec![root],
        _ => {
            let what = format!("its `type` is `{}`", shown(kind));
            return Err(Box::new(no_geojson(root.place, layer, &what)));
        }
    };
    let number_from_1 = 1..;
    members
        .into_iter()
        .zip(number_from_1)
        .map(|(member, number)| feature_of(member, number, layer))
        .collect()
}

fn feature_of(member: Value, number: usize, layer: &str) -> Result<Feature, Box<Fault>> {
    let place = member.place;
    if member.get("type").and_then(Value::text) != Some("Feature") {
        let what = format!("feature {number} has no `\"type\": \"Feature\"`");
        return Err(Box::new(no_geojson(place, layer, &what)));
    }
    let name = member
        .get("properties")
        .and_then(|properties| properties.get("name"));
    let title = match name.and_then(Value::text) {
        Some(name) => format!("feature `{}` of {}", shown(name), shown(layer)),
        None => format!("feature {number} of {}", shown(layer)),
    };
    let mut geometry = None;
    let mut properties = None;
    if let Node::Table(entries) = member.node {
        for entry in entries {
            match entry.key.as_str() {
                "geometry" => geometry = Some(entry.value),
                "properties" => properties = Some(entry.value),
                _ => {}
            }
        }
    }
    let empty = || Value {
        node: Node::Table(Vec::new()),
        place,
    };
    let present = |value: &Value| !matches!(value.node, Node::Null);
    Ok(Feature {
        title,
        place,
        geometry: geometry.filter(present),
        properties: properties.filter(present).unwrap_or_else(empty),
    })
}

fn take(node: Node, key: &str) -> Option<Value> {
    let Node::Table(entries) = node else {
        return None;
    };
    let mut entries = entries.into_iter();
    let found: Option<Entry> = entries.find(|entry| entry.key == key);
    found.map(|entry| entry.value)
}

fn into_list(value: Value) -> Option<Vec<Value>> {
    match value.node {
        Node::List(items) => Some(items),
        _ => None,
    }
}

fn no_geojson(place: Place, layer: &str, what: &str) -> Fault {
    let what = format!("{} is not a GeoJSON layer: {what}", shown(layer));
    let help = "export the layer as a GeoJSON FeatureCollection (RFC 7946)";
    Fault::new(place, what, help)
}

/// RFC 7946 knows WGS 84 longitude/latitude alone; old files name others.
fn refuse_other_crs(root: &Value, layer: &str) -> Result<(), Box<Fault>> {
    const SAME: [&str; 4] = [
        "urn:ogc:def:crs:OGC:1.3:CRS84",
        "urn:ogc:def:crs:OGC::CRS84",
        "http://www.opengis.net/def/crs/OGC/1.3/CRS84",
        "OGC:CRS84",
    ];
    let Some(crs) = root.get("crs") else {
        return Ok(());
    };
    let name = crs
        .get("properties")
        .and_then(|properties| properties.get("name"));
    let name = name.and_then(Value::text).unwrap_or("");
    if SAME.contains(&name) {
        return Ok(());
    }
    let what = format!("{} is in the CRS `{}`", shown(layer), shown(name));
    let help = "export it as RFC 7946 GeoJSON, in WGS 84 longitude/latitude (CRS84), without `crs`";
    let fault = Fault::new(crs.place, what, help)
        .label("another CRS")
        .why("RFC 7946 layers are in WGS 84 longitude/latitude");
    Err(Box::new(fault))
}
