//! The two maps of the page: head and drawdown.

use serde::Serialize;

use super::grid::{Grid, Nodes};
use crate::layers::{LayerError, MapPicture, Planned, Theme, map_picture};
use crate::site::Point;

/// One map with all that its script needs.
#[derive(Serialize)]
pub struct MapView {
    id: &'static str,
    title: &'static str,
    note: String,
    /// What the value under the pointer is.
    quantity: &'static str,
    unit: &'static str,
    map: String,
    legend: String,
    frame: [f64; 4],
    plan_grid: [f64; 3],
    grid: Grid,
    layers: Vec<LayerSwitch>,
}

/// A part of the map that can be shown and hidden.
#[derive(Serialize)]
struct LayerSwitch {
    layer: &'static str,
    title: &'static str,
}

/// The parts of the maps that can be shown and hidden.
const LAYERS: [(&str, &str); 7] = [
    ("bands", "bands"),
    ("contours", "contours"),
    ("edges", "rivers and barriers"),
    ("wells", "wells"),
    ("neighbours", "neighbours"),
    ("names", "names"),
    ("section", "line of the section"),
];

/// The maps, drawdown first: it answers what is asked first.
pub fn maps(planned: &Planned<'_>, section: &[Point]) -> Result<Vec<MapView>, LayerError> {
    let nodes = Nodes::of(planned.survey.window.extent);
    let units = planned.units();
    // Superposing the wells is what takes long: once is enough.
    let drawdowns_m = planned.solution.drawdowns_m(&nodes.points);
    let ambient_m = planned.solution.ambient_heads_m(&nodes.points);
    let both_m = ambient_m.iter().zip(&drawdowns_m);
    let heads_m = both_m
        .map(|(ambient_m, drawdown_m)| ambient_m - drawdown_m)
        .collect();
    let grid = |values_m: Vec<f64>| {
        let values: Vec<f64> = values_m.iter().map(|&m| units.length(m)).collect();
        Grid::packed(&nodes, &values)
    };
    let drawdown = map_picture(planned, Theme::Drawdown, "d-", "Map of drawdown", section)?;
    let head = map_picture(planned, Theme::Head, "h-", "Map of head", section)?;
    let spacing = spacing_note(planned, &nodes);
    Ok(vec![
        MapView {
            id: "drawdown",
            title: "Drawdown",
            note: format!(
                "How far the wells lower the head in the aquifer below its state before pumping. {spacing}"
            ),
            quantity: "drawdown",
            ..view(planned, drawdown, grid(drawdowns_m), true)
        },
        MapView {
            id: "head",
            title: "Head",
            note: format!(
                "The level to which water rises in a narrow pipe let into the aquifer while the wells run; water flows across the contours toward lower heads. {spacing}"
            ),
            quantity: "head",
            ..view(planned, head, grid(heads_m), false)
        },
    ])
}

fn view(planned: &Planned<'_>, picture: MapPicture, grid: Grid, has_bands: bool) -> MapView {
    let layers = LAYERS
        .iter()
        .filter(|(layer, _)| has_bands || *layer != "bands");
    MapView {
        id: "",
        title: "",
        note: String::new(),
        quantity: "",
        unit: planned.units().length_ending(),
        map: picture.map,
        legend: picture.legend,
        frame: picture.frame,
        plan_grid: picture.grid,
        grid,
        layers: layers
            .map(|&(layer, title)| LayerSwitch { layer, title })
            .collect(),
    }
}

/// How contours were made, and how coarse the values under the pointer are.
fn spacing_note(planned: &Planned<'_>, nodes: &Nodes) -> String {
    let extent = planned.survey.window.extent;
    let step_m = (extent.max.x - extent.min.x) / (nodes.columns.max(2) - 1) as f64;
    let step = crate::layers::words::Words::of(planned).length(step_m);
    format!(
        "Contours are exact to what a print can show; values under the pointer are interpolated between points {step} apart and say little right beside a well."
    )
}
