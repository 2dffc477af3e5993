//! `neighbours.geojson`: every neighbour with the drawdown at its worst point.

use super::layer::Layer;
use super::units::Properties;
use super::{Planned, flag_codes};
use crate::findings::Who;
use crate::site::Place;

/// The layer.
pub fn layer(planned: &Planned<'_>) -> Layer {
    let mut layer = Layer::default();
    let site = planned.solution.site();
    for (finding, neighbour) in planned.findings.neighbours.iter().zip(&site.neighbours) {
        let worst = finding.worst.as_ref();
        let cause = worst
            .and_then(|worst| site.wells.get(worst.largest_cause?))
            .map(|well| well.name.as_str());
        let properties = Properties::new(planned.units())
            .with("name", neighbour.name.as_str())
            .length("drawdown", worst.map(|worst| worst.drawdown_m))
            .length("allowed_drawdown", finding.allowed_m)
            .with("largest_cause", cause)
            .with(
                "flags",
                flag_codes(planned, Who::Neighbour(finding.neighbour)).join(", "),
            );
        match &neighbour.place {
            Place::At(at) => layer.add_point(*at, properties),
            Place::Area(ring) => layer.add_polygons(vec![vec![ring.clone()]], properties),
        }
    }
    layer
}
