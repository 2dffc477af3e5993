//! `river_reaches.geojson`: what each straight reach of a river gives to the
//! wells.
//!
//! A reach lies between two vertices of the plan's line. Where a river is
//! carried on beyond its last vertex without end, that reach is drawn as far
//! as the map is wide, and has no inflow a length.

use super::Planned;
use super::layer::Layer;
use super::units::Properties;
use crate::findings::ReachFinding;
use crate::site::Point;

/// The layer.
pub fn layer(planned: &Planned<'_>) -> Layer {
    let mut layer = Layer::default();
    let site = planned.solution.site();
    for reach in &planned.findings.reaches {
        let Some(edge) = site.edges.get(reach.edge) else {
            continue;
        };
        let a_length_m2_d = reach.length_m.map(|length_m| reach.inflow_m3_d / length_m);
        for line in lines(planned, reach) {
            let properties = Properties::new(planned.units())
                .with("name", edge.name.as_str())
                .rate("inflow", reach.inflow_m3_d)
                .rate_a_length("inflow", a_length_m2_d);
            layer.add_line(line, properties);
        }
    }
    layer
}

/// The course of a reach.
fn lines(planned: &Planned<'_>, reach: &ReachFinding) -> Vec<Vec<Point>> {
    let Some(field) = planned.solution.fields().get(reach.field) else {
        return Vec::new();
    };
    let outline = field.outline();
    let extent = planned.survey.window.extent;
    let beyond_m = (extent.max - extent.min).norm();
    vec![outline.reach_course(reach.side, &reach.along, beyond_m)]
}
