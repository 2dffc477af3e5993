//! `flow.geojson`: which way the water flows, and how much, on a sparse grid.
//!
//! The Darcy flux q = −K ∇h is what flows through a unit of the aquifer's
//! area, pores and grains alike; K is the tensor where the aquifer is
//! anisotropic, so that the arrows then do not cross the contours at right
//! angles. K is transmissivity over thickness: without a thickness the
//! directions are given and the flux is null, which a note says.
//! Left out: places outside the aquifers, within a well, and without flow.

use super::Planned;
use super::layer::Layer;
use super::property::Quantity;
use super::units::Properties;
use crate::field::WellField;
use crate::plan::Plan;
use crate::site::{Point, Vector};

/// Arrows on the map's longer side.
const ARROWS: f64 = 20.0;

/// Said where a plan gives no thickness.
const NO_THICKNESS: &str = "flow.geojson gives the direction of flow but no flux: a flux needs \
the aquifer's `thickness`, and the plan gives its transmissivity alone";

/// What the reader of the layer must know.
pub fn note(plan: &Plan) -> Option<&'static str> {
    let thickness = plan.site.aquifer.thickness;
    thickness.is_none().then_some(NO_THICKNESS)
}

/// The layer.
pub fn layer(planned: &Planned<'_>) -> Layer {
    let units = planned.units();
    let thickness_m = planned
        .plan
        .site
        .aquifer
        .thickness
        .map(|length| length.si());
    let mut layer = Layer {
        note: note(planned.plan),
        ..Layer::default()
    };
    for at in places(planned) {
        let Some(flow_m2_d) = planned
            .solution
            .field_at(at)
            .and_then(|field| flow_m2_d(planned, field, at))
        else {
            continue;
        };
        let azimuth_deg = azimuth_deg(flow_m2_d);
        let flux_m_d = thickness_m.map(|thickness_m| flow_m2_d.norm() / thickness_m);
        let properties = Properties::new(units)
            .number("azimuth", Quantity::Azimuth, Some(azimuth_deg))
            .flux("flux", flux_m_d);
        layer.add_point(at, properties);
    }
    layer
}

/// The flow at a place; none within a well and where nothing flows.
fn flow_m2_d(planned: &Planned<'_>, field: &WellField, at: Point) -> Option<Vector> {
    let wells = &planned.solution.site().wells;
    let in_a_well = |well: &usize| {
        wells
            .get(*well)
            .is_some_and(|well| (well.at - at).norm() <= well.radius.si())
    };
    if field.outline().wells.iter().any(in_a_well) {
        return None;
    }
    let flow_m2_d = field.flow_m2_d(at);
    let norm_m2_d = flow_m2_d.norm();
    (norm_m2_d.is_finite() && norm_m2_d > 0.0).then_some(flow_m2_d)
}

/// The azimuth of a direction, 0 ≤ azimuth < 360.
fn azimuth_deg(direction: Vector) -> f64 {
    let turned = direction
        .x
        .atan2(direction.y)
        .to_degrees()
        .rem_euclid(360.0);
    // A hair west of north is rounded up to a whole turn.
    if turned < 360.0 { turned } else { 0.0 }
}

/// Middles of equal squares that tile the map, row by row from the south-west.
fn places(planned: &Planned<'_>) -> Vec<Point> {
    let extent = planned.survey.window.extent;
    let size = extent.max - extent.min;
    let step_m = size.max() / ARROWS;
    // Small and positive, so that truncation is meant.
    let count = |length_m: f64| (length_m / step_m).round().max(1.0) as u32;
    let (columns, rows) = (count(size.x), count(size.y));
    let spare = size - Vector::new(f64::from(columns), f64::from(rows)) * step_m;
    let first = extent.min + (spare + Vector::repeat(step_m)) * 0.5;
    (0..rows)
        .flat_map(|row| {
            (0..columns)
                .map(move |column| first + Vector::new(f64::from(column), f64::from(row)) * step_m)
        })
        .collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn azimuths_run_clockwise_from_north() {
        let of = |x, y| azimuth_deg(Vector::new(x, y));
        assert_eq!(of(0.0, 1.0), 0.0);
        assert_eq!(of(1.0, 0.0), 90.0);
        assert_eq!(of(0.0, -1.0), 180.0);
        assert_eq!(of(-1.0, 0.0), 270.0);
        assert_eq!(of(-1e-300, 1.0), 0.0);
    }
}
