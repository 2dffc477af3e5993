//! `image_wells.geojson`: the nearest images of each well, for audit.

use super::Planned;
use super::layer::Layer;
use super::units::Properties;

/// Images shown of each well.
const IMAGES_A_WELL: usize = 8;

/// The layer. An image so far away that the plan's coordinate system has no
/// place for it is left out.
pub fn layer(planned: &Planned<'_>) -> Layer {
    let mut layer = Layer::default();
    let site = planned.solution.site();
    for (index, well) in site.wells.iter().enumerate() {
        let Some(field) = planned.solution.field_of_well(index) else {
            continue;
        };
        for (at, sign, order) in field.images(index, IMAGES_A_WELL) {
            if super::geojson::longitude_latitude(planned.plan, at).is_err() {
                continue;
            }
            let properties = Properties::new(planned.units())
                .with("of", well.name.as_str())
                .with("sign", if sign < 0.0 { -1 } else { 1 })
                .with("order", order);
            layer.add_point(at, properties);
        }
    }
    layer
}
