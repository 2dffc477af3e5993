//! `findings.json`: all findings as one document, in full precision.

use serde_json::{Map, Value, json};

use super::caution::CAUTION;
use super::units::{Properties, number};
use super::words::Words;
use super::{LayerError, Planned, flag_codes};
use crate::field::WellField;
use crate::findings::{Flag, Measure, Rates, Who};
use crate::site::{EdgeKind, Point, Site};

/// The document as a file for people too.
pub fn file(planned: &Planned<'_>) -> Result<Vec<u8>, LayerError> {
    let mut bytes = serde_json::to_vec_pretty(&document(planned))?;
    bytes.push(b'\n');
    Ok(bytes)
}

/// The document.
fn document(planned: &Planned<'_>) -> Value {
    let mut document = Map::new();
    document.insert("title".into(), planned.plan.title.clone().into());
    document.insert("crs".into(), planned.plan.crs.name().into());
    document.insert("units".into(), planned.plan.units.name().into());
    document.insert("plan_sha256".into(), planned.plan.sha256.clone().into());
    document.insert("program".into(), program());
    let outlines: Vec<Value> = planned
        .solution
        .fields()
        .iter()
        .map(|field| outline(planned, field))
        .collect();
    if let Some(first) = outlines.first() {
        document.insert("outline".into(), first.clone());
    }
    if outlines.len() > 1 {
        document.insert("outlines".into(), Value::Array(outlines));
    }
    document.insert("wells".into(), wells(planned));
    document.insert("interference".into(), interference(planned));
    document.insert("neighbours".into(), neighbours(planned));
    document.insert("boundaries".into(), boundaries(planned));
    document.insert("balances".into(), balances(planned));
    document.insert("below_roof".into(), roof(planned));
    let words = Words::of(planned);
    let flags = &planned.findings.flags;
    document.insert(
        "flags".into(),
        flags.iter().map(|f| flag(planned, &words, f)).collect(),
    );
    document.insert("notes".into(), planned.notes().into());
    document.insert("caution".into(), CAUTION.into());
    Value::Object(document)
}

fn program() -> Value {
    json!({"name": env!("CARGO_PKG_NAME"), "version": env!("CARGO_PKG_VERSION")})
}

fn outline(planned: &Planned<'_>, field: &WellField) -> Value {
    let names: Vec<&str> = field
        .outline()
        .wells
        .iter()
        .filter_map(|&well| planned.solution.site().wells.get(well))
        .map(|well| well.name.as_str())
        .collect();
    let told = |text: &str| planned.plan.units.beside(text);
    Properties::new(planned.units())
        .with("shape", field.outline().shape.name())
        .with("method", told(&field.method()))
        .length("error_bound", field.error_bound_m())
        .with(
            "words",
            told(&field.outline().words(planned.solution.site())),
        )
        .with("wells", names)
        .into()
}

fn wells(planned: &Planned<'_>) -> Value {
    let site = planned.solution.site();
    let wells = planned.findings.wells.iter().zip(&site.wells);
    wells
        .map(|(finding, well)| {
            let [x, y] = plan_xy(planned, well.at);
            let properties = Properties::new(planned.units())
                .with("name", well.name.as_str())
                .with("x", x)
                .with("y", y)
                .rate("pumping", finding.pumping_m3_d)
                .length("ambient_head", finding.ambient_m)
                .length("head", finding.level_m())
                .length("aquifer_head", finding.rim_head_m())
                .length("drawdown", finding.drawdown_m())
                .length("own_drawdown", finding.own_m)
                .length("interference", finding.interference_m)
                .length("well_loss", finding.well_loss_m)
                .with("interference_share", number(finding.interference_share))
                .with("flags", flag_codes(planned, Who::Well(finding.well)));
            Value::from(properties)
        })
        .collect()
}

fn interference(planned: &Planned<'_>) -> Value {
    let site = planned.solution.site();
    let matrix = &planned.findings.interference;
    let row = |kind: &str, name: &str, parts: Option<&[f64]>| {
        Value::from(
            Properties::new(planned.units())
                .with("kind", kind)
                .with("affected", name)
                .lengths("drawdown", parts),
        )
    };
    let wells = site
        .wells
        .iter()
        .zip(matrix.well_rows())
        .map(|(well, parts)| row("well", &well.name, Some(parts)));
    let neighbours = site
        .neighbours
        .iter()
        .zip(matrix.neighbour_rows())
        .map(|(neighbour, parts)| row("neighbour", &neighbour.name, parts.as_deref()));
    let causes: Vec<&str> = site.wells.iter().map(|well| well.name.as_str()).collect();
    json!({
        "causes": causes,
        "rows": wells.chain(neighbours).collect::<Vec<Value>>(),
    })
}

fn neighbours(planned: &Planned<'_>) -> Value {
    let site = planned.solution.site();
    let neighbours = planned.findings.neighbours.iter().zip(&site.neighbours);
    neighbours
        .map(|(finding, neighbour)| {
            let worst = finding.worst.as_ref();
            let at = worst.map(|worst| plan_xy(planned, worst.at));
            let cause = worst
                .and_then(|worst| site.wells.get(worst.largest_cause?))
                .map(|well| well.name.as_str());
            let properties = Properties::new(planned.units())
                .with("name", neighbour.name.as_str())
                .with("worst_x", number(at.map(|[x, _]| x)))
                .with("worst_y", number(at.map(|[_, y]| y)))
                .length("head", worst.map(|worst| worst.head_m))
                .length("drawdown", worst.map(|worst| worst.drawdown_m))
                .length("allowed_drawdown", finding.allowed_m)
                .with("largest_cause", cause)
                .lengths(
                    "drawdown_by_well",
                    worst.map(|worst| worst.by_well_m.as_slice()),
                )
                .with(
                    "flags",
                    flag_codes(planned, Who::Neighbour(finding.neighbour)),
                );
            Value::from(properties)
        })
        .collect()
}

fn boundaries(planned: &Planned<'_>) -> Value {
    let site = planned.solution.site();
    let boundaries = planned.findings.boundaries.iter().zip(&site.edges);
    boundaries
        .map(|(finding, edge)| {
            let kind = match edge.kind {
                EdgeKind::River { .. } => "river",
                EdgeKind::Barrier => "barrier",
            };
            let properties = Properties::new(planned.units())
                .with("name", edge.name.as_str())
                .with("kind", kind)
                .with("bounds_an_aquifer", finding.bounds_an_aquifer)
                .rate("inflow", finding.inflow_m3_d())
                .rates("inflow_by_well", &finding.by_well_m3_d)
                .rate("exchange_before", finding.exchange_before_m3_d)
                .rate("exchange_after", finding.exchange_after_m3_d());
            Value::from(properties)
        })
        .collect()
}

fn balances(planned: &Planned<'_>) -> Value {
    let balances = planned.findings.balances.iter();
    balances
        .map(|balance| {
            Value::from(
                Properties::new(planned.units())
                    .rate("pumping", balance.pumping_m3_d)
                    .rate("inflow_from_rivers", balance.inflow_m3_d),
            )
        })
        .collect()
}

fn roof(planned: &Planned<'_>) -> Value {
    let Some(roof) = &planned.findings.roof else {
        return Value::Null;
    };
    Properties::new(planned.units())
        .length("roof", roof.roof_m)
        .area("area", roof.area_m2)
        .length("lowest_head", roof.lowest_m)
        .into()
}

fn flag(planned: &Planned<'_>, words: &Words<'_>, flag: &Flag) -> Value {
    let site = planned.solution.site();
    let kind = match flag.who {
        Who::Well(_) => "well",
        Who::Neighbour(_) => "neighbour",
        Who::AquiferOf(_) => "aquifer",
        Who::Map => "map",
    };
    let name = match flag.who {
        Who::Well(index) | Who::AquiferOf(index) => {
            site.wells.get(index).map(|well| well.name.as_str())
        }
        Who::Neighbour(index) => site.neighbours.get(index).map(|n| n.name.as_str()),
        Who::Map => None,
    };
    let cause = flag
        .cause
        .and_then(|cause| site.wells.get(cause.well))
        .map(|well| well.name.as_str());
    let properties = Properties::new(planned.units())
        .with("code", flag.code.name())
        .with("kind", kind)
        .with("who", name);
    let mut properties = measure(properties, &flag.measure, site)
        .with("caused_by", cause)
        .length("caused_drawdown", flag.cause.map(|cause| cause.drawdown_m));
    if let Some(remedy) = &flag.remedy {
        let rates = match remedy.together.map(|common| common.rates) {
            Some(Rates::AllOthers) => "all_others",
            _ => "all",
        };
        properties = properties
            .rate("cause_pumping", remedy.alone.map(|rate| rate.from_m3_d))
            .rate("clearing_pumping", remedy.alone.map(|rate| rate.to_m3_d))
            .with("clearing_rates", rates)
            .with(
                "clearing_factor",
                number(remedy.together.map(|common| common.factor)),
            );
    }
    properties.with("text", words.flag(flag)).into()
}

/// How much, against what.
fn measure(properties: Properties, measure: &Measure, site: &Site) -> Properties {
    match *measure {
        Measure::Drawdown {
            drawdown_m,
            allowed_m,
        } => properties
            .with("measure", "drawdown")
            .length("value", drawdown_m)
            .length("limit", allowed_m),
        Measure::LowestLevel { level_m, lowest_m } => properties
            .with("measure", "level in the well")
            .length("value", level_m)
            .length("limit", lowest_m),
        Measure::Ground { level_m, ground_m } => properties
            .with("measure", "level in the well")
            .length("value", level_m)
            .length("limit", ground_m),
        Measure::RoofAtWell {
            rim_head_m,
            level_m,
            roof_m,
        } => properties
            .with("measure", "level in the well")
            .length("value", level_m)
            .length("limit", roof_m)
            .length("aquifer_head", rim_head_m),
        Measure::RoofOnMap {
            area_m2,
            lowest_m,
            roof_m,
        } => properties
            .with("measure", "lowest head on the map")
            .length("value", lowest_m)
            .length("limit", roof_m)
            .area("area", area_m2),
        Measure::Share {
            share,
            limit,
            interference_m,
        } => properties
            .with("measure", "interference share")
            .with("value", number(share))
            .with("limit", number(limit))
            .length("interference", interference_m),
        Measure::Accuracy {
            bound_m,
            accepted_m,
            hardest_edge,
        } => {
            let edge = hardest_edge.and_then(|edge| site.edges.get(edge));
            properties
                .with("measure", "proven error of a head")
                .length("value", bound_m)
                .length("limit", accepted_m)
                .with("hardest_edge", edge.map(|edge| edge.name.as_str()))
        }
    }
}

/// A place in the plan's own coordinates.
fn plan_xy(planned: &Planned<'_>, at: Point) -> [f64; 2] {
    planned.plan.to_plan_xy(at).into()
}
