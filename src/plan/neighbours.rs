//! Reads `[[neighbour]]` and `[[neighbour_layer]]`.

use crate::site::{Neighbour, Place as Where};

use super::features::{Geometry, Wanted};
use super::keys::{
    ALLOWED_DRAWDOWN, AREA, AT, FEATURE, FILE, LAYER, NEIGHBOUR, NEIGHBOUR_FEATURE_TABLE,
    NEIGHBOUR_LAYER, NEIGHBOUR_LAYER_TABLE, NEIGHBOUR_TABLE,
};
use super::layers::{Feature, note_unused_columns};
use super::names::Names;
use super::points::Vertex;
use super::reader::{Reading, Section, tables};
use super::source::Place;
use super::source_map::SourceMap;

/// The neighbours, in metres of the plan's grid: those of the plan, then
/// those of its layers.
pub(super) fn read_neighbours(
    plan: &Section<'_>,
    names: &mut Names,
    map: &mut SourceMap,
    reading: &mut Reading<'_>,
) -> Vec<Neighbour> {
    let mut neighbours = Vec::new();
    for section in tables(plan, &NEIGHBOUR, &NEIGHBOUR_TABLE, reading) {
        map.neighbours.push(section.places());
        let place = read_place(&section, reading);
        neighbours.extend(read_neighbour(&section, place, names, reading));
    }
    for section in tables(plan, &NEIGHBOUR_LAYER, &NEIGHBOUR_LAYER_TABLE, reading) {
        neighbours.extend(read_layer(&section, names, map, reading).unwrap_or_default());
    }
    neighbours
}

fn read_neighbour(
    section: &Section<'_>,
    place: Option<Where>,
    names: &mut Names,
    reading: &mut Reading<'_>,
) -> Option<Neighbour> {
    let name = names.claim(section, reading);
    let allowed_drawdown = section.length(&ALLOWED_DRAWDOWN, reading);
    Some(Neighbour {
        name: name?,
        place: place?,
        allowed_drawdown,
    })
}

fn read_place(section: &Section<'_>, reading: &mut Reading<'_>) -> Option<Where> {
    if section.value(&AT).is_some() {
        return Some(Where::At(section.point(&AT, reading)?.at));
    }
    if let Some(value) = section.value(&AREA) {
        let corners = section.points(&AREA, reading)?;
        let sound = section.sound_area(&AREA, value.place, corners, reading)?;
        return Some(Where::Area(points(&sound)));
    }
    section.text(&LAYER, reading)?;
    section.text(&FEATURE, reading)?;
    let layer = reading.layer(section.value(&LAYER)?)?;
    let wanted = section.value(&FEATURE)?;
    let feature = layer.feature(wanted, reading)?;
    feature_place(section, feature, wanted.place, reading)
}

fn feature_place(
    section: &Section<'_>,
    feature: &Feature,
    used_at: Place,
    reading: &mut Reading<'_>,
) -> Option<Where> {
    match feature.geometry(Wanted::PointOrPolygon, used_at, reading)? {
        Geometry::Point(vertex) => Some(Where::At(vertex.at)),
        Geometry::Polygon(ring) => {
            let sound = section.sound_area(&AREA, feature.place, ring, reading)?;
            Some(Where::Area(points(&sound)))
        }
        Geometry::Line(_) => None,
    }
}

fn read_layer(
    section: &Section<'_>,
    names: &mut Names,
    map: &mut SourceMap,
    reading: &mut Reading<'_>,
) -> Option<Vec<Neighbour>> {
    section.text(&FILE, reading)?;
    let file = section.value(&FILE)?;
    let layer = reading.layer(file)?;
    layer.refuse_too_many(file.place, reading)?;
    let mut neighbours = Vec::new();
    let mut columns = Vec::new();
    for feature in &layer.features {
        let opened = Section::of_feature(&NEIGHBOUR_FEATURE_TABLE, feature, reading);
        let Some((properties, unused)) = opened else {
            continue;
        };
        columns.extend(unused);
        map.neighbours.push(properties.places());
        let place = feature_place(&properties, feature, file.place, reading);
        neighbours.extend(read_neighbour(&properties, place, names, reading));
    }
    note_unused_columns(&layer.name, columns, reading);
    Some(neighbours)
}

fn points(vertices: &[Vertex]) -> Vec<crate::site::Point> {
    vertices.iter().map(|vertex| vertex.at).collect()
}
