//! Reads `[[river]]` and `[[barrier]]`.

use crate::site::{Edge, EdgeKind, EdgeShape, Length, Level, Stage, Time};

use super::fault::{Fault, counted};
use super::features::{Geometry, Wanted};
use super::keys::{
    BANK_RESISTANCE, BARRIER, BARRIER_TABLE, CENTRE, CIRCLE, CIRCLE_RADIUS, CIRCLE_TABLE, FEATURE,
    Form, LAYER, LINE, RIVER, RIVER_TABLE, STAGE,
};
use super::names::Names;
use super::points::Vertex;
use super::quantities::Asked;
use super::reader::{Reading, Section, tables};
use super::source_map::SourceMap;
use super::value::Node;

/// Rivers, then barriers, in metres of the plan's grid.
pub(super) fn read_edges(
    plan: &Section<'_>,
    map: &mut SourceMap,
    reading: &mut Reading<'_>,
) -> Vec<Edge> {
    let mut names = Names::default();
    let mut edges = Vec::new();
    for section in tables(plan, &RIVER, &RIVER_TABLE, reading) {
        map.edges.push(section.places());
        edges.extend(read_river(&section, &mut names, reading));
    }
    for section in tables(plan, &BARRIER, &BARRIER_TABLE, reading) {
        map.edges.push(section.places());
        let name = names.claim(&section, reading);
        let shape = read_shape(&section, reading);
        edges.extend(name.zip(shape).map(|(name, shape)| Edge {
            name,
            kind: EdgeKind::Barrier,
            shape,
        }));
    }
    edges
}

fn read_river(section: &Section<'_>, names: &mut Names, reading: &mut Reading<'_>) -> Option<Edge> {
    let name = names.claim(section, reading);
    let shape = read_shape(section, reading);
    let stage = read_stage(section, shape.as_ref(), reading);
    let resistance = section.quantity(&BANK_RESISTANCE, reading);
    Some(Edge {
        name: name?,
        kind: EdgeKind::River {
            stage: stage?,
            // No resistance is no skin.
            bank_resistance: resistance.filter(|days| *days > 0.0).map(Time::from_si),
        },
        shape: shape?,
    })
}

fn read_shape(section: &Section<'_>, reading: &mut Reading<'_>) -> Option<EdgeShape> {
    if section.value(&CIRCLE).is_some() {
        return read_circle(section, reading);
    }
    let (place, vertices) = if let Some(value) = section.value(&LINE) {
        (value.place, section.points(&LINE, reading)?)
    } else {
        let vertices = read_layer_line(section, reading)?;
        (section.value(&FEATURE)?.place, vertices)
    };
    let sound = section.sound_line(&LINE, place, vertices, reading)?;
    Some(EdgeShape::Line(
        sound.iter().map(|vertex| vertex.at).collect(),
    ))
}

fn read_circle(section: &Section<'_>, reading: &mut Reading<'_>) -> Option<EdgeShape> {
    let mut circle = Section::open(&CIRCLE_TABLE, section.value(&CIRCLE)?, reading)?;
    circle.title = format!("{}, circle", section.title);
    let centre = circle.point(&CENTRE, reading);
    let radius = circle.quantity(&CIRCLE_RADIUS, reading);
    Some(EdgeShape::Circle {
        centre: centre?.at,
        radius: Length::from_si(radius?),
    })
}

fn read_layer_line(section: &Section<'_>, reading: &mut Reading<'_>) -> Option<Vec<Vertex>> {
    section.text(&LAYER, reading)?;
    section.text(&FEATURE, reading)?;
    let layer = reading.layer(section.value(&LAYER)?)?;
    let wanted = section.value(&FEATURE)?;
    let feature = layer.feature(wanted, reading)?;
    match feature.geometry(Wanted::Line, wanted.place, reading)? {
        Geometry::Line(vertices) => Some(vertices),
        Geometry::Point(_) | Geometry::Polygon(_) => None,
    }
}

/// The stage, one value or one for each vertex.
fn read_stage(
    section: &Section<'_>,
    shape: Option<&EdgeShape>,
    reading: &mut Reading<'_>,
) -> Option<Stage> {
    let value = section.value(&STAGE)?;
    let (Node::List(items), Form::Stage(measure)) = (&value.node, &STAGE.form) else {
        let level = section.quantity(&STAGE, reading)?;
        return Some(Stage::Constant(Level::from_si(level)));
    };
    let mut levels = Vec::with_capacity(items.len());
    for item in items {
        let asked = Asked {
            key: &STAGE,
            subject: "a value of `stage`".to_owned(),
            measure: *measure,
        };
        let level = section.measured(&asked, item, reading);
        if let Some(level) = level {
            section.record(&asked, item, level, reading);
        }
        levels.extend(level.map(Level::from_si));
    }
    let vertices = match shape? {
        EdgeShape::Line(points) => points.len(),
        EdgeShape::Circle { .. } => {
            let what = format!("{}: a circle has one `stage`, not a list", section.title);
            reading.refuse(Fault::new(value.place, what, "write one number").label("a list"));
            return None;
        }
    };
    if items.len() != vertices {
        let count = counted(items.len(), "value");
        let what = format!(
            "{}: `stage` has {count}, but the line has {vertices} vertices",
            section.title
        );
        let help = "write one value for all, or one for each vertex of the line";
        reading.refuse(Fault::new(value.place, what, help).label(count));
        return None;
    }
    (levels.len() == items.len()).then_some(Stage::AtVertices(levels))
}
