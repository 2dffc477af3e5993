//! Every output of a run: its name, its files, what they hold, and who makes
//! them. One entry an output.

use super::layer::Layer;
use super::property::{Property, Quantity as Q};
use super::styles::{self, Style};
use super::{
    LayerError, OutputFile, Planned, boundaries, contours, findings_json, flow, geojson,
    geopackage, image_wells, interference_csv, neighbours, raster, river_reaches, wells,
};
use crate::plan::nearest;
use crate::report;

/// Something that a run writes.
pub struct Output {
    /// Its name, as `--only` takes it.
    pub name: &'static str,
    /// Its files: first that with the content, then its style if it has one.
    pub files: &'static [&'static str],
    /// What it holds, in a sentence.
    pub about: &'static str,
    /// The properties of its features; of a raster, its values.
    pub properties: &'static [Property],
    pub(super) content: Content,
    style: Option<Style>,
}

/// How an output's content is made.
#[derive(Clone, Copy)]
pub(super) enum Content {
    /// Features: a file of GeoJSON, and a table of the GeoPackage.
    Features(Kind, fn(&Planned<'_>) -> Result<Layer, LayerError>),
    /// A file as it is.
    File(fn(&Planned<'_>) -> Result<Vec<u8>, LayerError>),
}

/// The geometries of a layer.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) enum Kind {
    Points,
    Lines,
    Polygons,
    PointsAndPolygons,
}

/// Every output, in the order in which they are listed.
pub const OUTPUTS: &[Output] = &[
    Output {
        name: "head_contours",
        files: &["head_contours.geojson", "head_contours.sld"],
        about: "Lines of equal head while the wells run; every vertex lies on its level to within a millimetre of head",
        properties: &[Property::new("head", Q::Length, "head on the line")],
        content: Content::Features(Kind::Lines, contours::head_lines),
        style: Some(Style::Fixed(include_str!("../../maps/head_contours.sld"))),
    },
    Output {
        name: "drawdown_contours",
        files: &["drawdown_contours.geojson", "drawdown_contours.sld"],
        about: "Lines of equal drawdown; every vertex lies on its level to within a millimetre",
        properties: &[Property::new(
            "drawdown",
            Q::Length,
            "drawdown on the line; negative: rise",
        )],
        content: Content::Features(Kind::Lines, contours::drawdown_lines),
        style: Some(Style::Fixed(include_str!(
            "../../maps/drawdown_contours.sld"
        ))),
    },
    Output {
        name: "drawdown_bands",
        files: &["drawdown_bands.geojson", "drawdown_bands.sld"],
        about: "Areas between two drawdowns",
        properties: &[
            Property::new(
                "from",
                Q::Length,
                "least drawdown in the area; negative: rise",
            ),
            Property::new("to", Q::Length, "largest drawdown in the area"),
        ],
        content: Content::Features(Kind::Polygons, contours::drawdown_bands),
        style: Some(Style::Bands(include_str!("../../maps/drawdown_bands.sld"))),
    },
    Output {
        name: "wells",
        files: &["wells.geojson", "wells.sld"],
        about: "The wells, each with its level and how its drawdown comes about",
        properties: &[
            Property::new("name", Q::Text, "as the plan gives it"),
            Property::new("pumping", Q::Rate, "what the well pumps; negative: injects"),
            Property::new("head", Q::Length, "level in the well"),
            Property::new("drawdown", Q::Length, "fall of the level in the well"),
            Property::new(
                "own_drawdown",
                Q::Length,
                "part of it by the well itself, without well loss",
            ),
            Property::new("interference", Q::Length, "part of it by the other wells"),
            Property::new("well_loss", Q::Length, "part of it by the well loss"),
            Property::new(
                "flags",
                Q::Text,
                "codes of the flags raised, most severe first, with commas between",
            ),
        ],
        content: Content::Features(Kind::Points, |p| Ok(wells::layer(p))),
        style: Some(Style::Fixed(include_str!("../../maps/wells.sld"))),
    },
    Output {
        name: "neighbours",
        files: &["neighbours.geojson", "neighbours.sld"],
        about: "The neighbours, each with the drawdown at its worst point",
        properties: &[
            Property::new("name", Q::Text, "as the plan gives it"),
            Property::new(
                "drawdown",
                Q::Length,
                "drawdown at the worst point; empty outside the aquifer",
            ),
            Property::new(
                "allowed_drawdown",
                Q::Length,
                "drawdown it may suffer; empty without a limit",
            ),
            Property::new("largest_cause", Q::Text, "the well that causes most of it"),
            Property::new(
                "flags",
                Q::Text,
                "codes of the flags raised, most severe first, with commas between",
            ),
        ],
        content: Content::Features(Kind::PointsAndPolygons, |p| Ok(neighbours::layer(p))),
        style: Some(Style::Fixed(include_str!("../../maps/neighbours.sld"))),
    },
    Output {
        name: "boundaries",
        files: &["boundaries.geojson", "boundaries.sld"],
        about: "Rivers and barriers, as far as they bound an aquifer on the map and as far as the plan draws them",
        properties: &[
            Property::new("name", Q::Text, "as the plan gives it"),
            Property::new("kind", Q::Text, "river or barrier"),
            Property::new(
                "inflow",
                Q::Rate,
                "what it gives to the wells, as far as this line goes; negative: takes",
            ),
        ],
        content: Content::Features(Kind::Lines, |p| Ok(boundaries::layer(p))),
        style: Some(Style::Fixed(include_str!("../../maps/boundaries.sld"))),
    },
    Output {
        name: "river_reaches",
        files: &["river_reaches.geojson", "river_reaches.sld"],
        about: "Straight reaches of rivers, each with what it gives to the wells",
        properties: &[
            Property::new("name", Q::Text, "of the river, as the plan gives it"),
            Property::new(
                "inflow",
                Q::Rate,
                "what the reach gives to the wells; negative: takes",
            ),
            Property::new(
                "inflow",
                Q::RateALength,
                "the same for each unit of its length; empty where it has no end",
            ),
        ],
        content: Content::Features(Kind::Lines, |p| Ok(river_reaches::layer(p))),
        style: Some(Style::Fixed(include_str!("../../maps/river_reaches.sld"))),
    },
    Output {
        name: "image_wells",
        files: &["image_wells.geojson", "image_wells.sld"],
        about: "The nearest image wells, for audit; none where the method has no images",
        properties: &[
            Property::new("of", Q::Text, "the well it is an image of"),
            Property::new("sign", Q::Whole, "1: acts as the well does, -1: against it"),
            Property::new("order", Q::Whole, "number of reflections"),
        ],
        content: Content::Features(Kind::Points, |p| Ok(image_wells::layer(p))),
        style: Some(Style::Fixed(include_str!("../../maps/image_wells.sld"))),
    },
    Output {
        name: "flow",
        files: &["flow.geojson", "flow.sld"],
        about: "The way the water flows and how much, on a sparse grid",
        properties: &[
            Property::new(
                "azimuth",
                Q::Azimuth,
                "where the water flows to, clockwise from grid north",
            ),
            Property::new(
                "flux",
                Q::Flux,
                "Darcy flux, the flow through a unit of area; empty where the plan gives no thickness",
            ),
        ],
        content: Content::Features(Kind::Points, |p| Ok(flow::layer(p))),
        style: Some(Style::Fixed(include_str!("../../maps/flow.sld"))),
    },
    Output {
        name: "results",
        files: &["results.gpkg"],
        about: "All of these layers as tables of one GeoPackage, in the plan's own coordinates",
        properties: &[],
        content: Content::File(geopackage::file),
        style: None,
    },
    Output {
        name: "head",
        files: &["head.tif", "head.sld"],
        about: "Head while the wells run at the map's nodes, the middles of the cells; no data outside the aquifer",
        properties: &[Property::new("head", Q::Length, "value of a cell")],
        content: Content::File(raster::heads),
        style: Some(Style::Heads(include_str!("../../maps/head.sld"))),
    },
    Output {
        name: "drawdown",
        files: &["drawdown.tif", "drawdown.sld"],
        about: "Drawdown at the map's nodes, the middles of the cells; no data outside the aquifer",
        properties: &[Property::new("drawdown", Q::Length, "value of a cell")],
        content: Content::File(raster::drawdowns),
        style: Some(Style::Drawdowns(include_str!("../../maps/drawdown.sld"))),
    },
    Output {
        name: "interference",
        files: &["interference.csv"],
        about: "Drawdown of each well and neighbour, a row each, by each well, a column each",
        properties: &[],
        content: Content::File(interference_csv::table),
        style: None,
    },
    Output {
        name: "findings",
        files: &["findings.json"],
        about: "All that was found as one document, with flags, method, error bound and the plan's SHA-256",
        properties: &[],
        content: Content::File(findings_json::file),
        style: None,
    },
    Output {
        name: "report",
        files: &["report.html"],
        about: "All that was found as one page to read, print and sign, with maps, a section, cautions and the plan as it was read",
        properties: &[],
        content: Content::File(report::page),
        style: None,
    },
];

/// A name that no output has.
#[derive(Clone, Debug, PartialEq, Eq, thiserror::Error)]
#[error("no output is called `{name}`{}; the outputs are {all}", write_instead(*hint))]
pub struct UnknownOutput {
    /// What was asked for.
    pub name: String,
    /// The output that it resembles.
    pub hint: Option<&'static str>,
    /// All outputs, with commas between.
    pub all: String,
}

/// The remedy where a name resembles one.
fn write_instead(hint: Option<&str>) -> String {
    hint.map_or_else(String::new, |near| format!("; write `{near}`"))
}

/// The outputs of these names, in the order of the list, once each.
///
/// # Errors
/// The first name that no output has.
pub fn outputs_named(names: &[String]) -> Result<Vec<&'static Output>, UnknownOutput> {
    let known = || OUTPUTS.iter().map(|output| output.name);
    let unknown = names
        .iter()
        .find(|name| known().all(|known| known != name.as_str()));
    if let Some(name) = unknown {
        return Err(UnknownOutput {
            name: name.clone(),
            hint: nearest(name, known()),
            all: known().collect::<Vec<_>>().join(", "),
        });
    }
    let wanted = OUTPUTS
        .iter()
        .filter(|output| names.iter().any(|name| name == output.name));
    Ok(wanted.collect())
}

/// Makes outputs.
///
/// # Errors
/// The first output that cannot be made.
pub fn make<'o>(
    planned: &Planned<'_>,
    outputs: impl IntoIterator<Item = &'o Output>,
) -> Result<Vec<OutputFile>, LayerError> {
    let mut files = Vec::new();
    for output in outputs {
        let content = match output.content {
            Content::Features(_, layer) => geojson::file(planned.plan, &layer(planned)?)?,
            Content::File(file) => file(planned)?,
        };
        let style = output
            .style
            .map(|style| styles::written(style, output.properties, planned));
        let made = std::iter::once(content).chain(style);
        files.extend(
            output
                .files
                .iter()
                .zip(made)
                .map(|(&name, bytes)| OutputFile { name, bytes }),
        );
    }
    Ok(files)
}
