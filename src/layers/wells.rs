//! `wells.geojson`: every well with its level and how its drawdown comes about.

use super::layer::Layer;
use super::units::Properties;
use super::{Planned, flag_codes};
use crate::findings::Who;

/// The layer.
pub fn layer(planned: &Planned<'_>) -> Layer {
    let mut layer = Layer::default();
    let site = planned.solution.site();
    for (finding, well) in planned.findings.wells.iter().zip(&site.wells) {
        let properties = Properties::new(planned.units())
            .with("name", well.name.as_str())
            .rate("pumping", finding.pumping_m3_d)
            .length("head", finding.level_m())
            .length("drawdown", finding.drawdown_m())
            .length("own_drawdown", finding.own_m)
            .length("interference", finding.interference_m)
            .length("well_loss", finding.well_loss_m)
            .with(
                "flags",
                flag_codes(planned, Who::Well(finding.well)).join(", "),
            );
        layer.add_point(well.at, properties);
    }
    layer
}
