//! Reads a plan's text as a whole: syntax, then every table, then the move
//! to the local frame.

use std::io;
use std::path::Path;

use sha2::Digest;
use toml::de::DeTable;

use crate::site::{EdgeShape, Place as Where, Point, Site, Vector};

use super::crs::{Crs, CrsError};
use super::fault::{Fault, PlanFaults, shown};
use super::files::{self, LayerStore};
use super::keys::{CRS, CRS_TABLE, ORIGIN, PLAN_TABLE, TITLE, UNITS};
use super::layers::Layers;
use super::names::Names;
use super::reader::{Reading, Section};
use super::source::{Place, Source, Sources};
use super::source_map::SourceMap;
use super::syntax::{self, Syntax};
use super::units::UnitSystem;
use super::value::{self, Node, Value};
use super::{Plan, aquifer, edges, map, neighbours, wells};

/// The faults of a plan that cannot be read at all.
pub(super) fn unreadable(name: &str, error: &io::Error) -> PlanFaults {
    let mut sources = Sources::default();
    let source = sources.add(Source::new(name.to_owned(), String::new()));
    let what = format!("the plan {} cannot be read: {error}", shown(name));
    let help = "check the name and the file's permissions";
    let fault = Fault::new(Place::new(source, 0..0), what, help);
    PlanFaults::new(sources, vec![fault])
}

/// Reads a plan from its bytes.
pub(super) fn read(name: &str, bytes: Vec<u8>, store: LayerStore<'_>) -> Result<Plan, PlanFaults> {
    if bytes.len() as u64 > files::LARGEST_FILE {
        let error = io::Error::other("it is larger than 64 MB");
        return Err(unreadable(name, &error));
    }
    let layers = Layers::new(store, &bytes);
    let (text, bad) = files::text_of(bytes);
    let mut sources = Sources::default();
    let source = sources.add(Source::new(name.to_owned(), text.clone()));
    if let Some(bad) = bad {
        let fault = files::not_utf8(Place::new(source, bad), shown(name));
        return Err(PlanFaults::new(sources, vec![fault]));
    }
    let (document, errors) = DeTable::parse_recoverable(&text);
    let document = value::of_toml(document, source);
    let syntax = syntax::check(&errors, &document, source, &text);
    let reading = Reading {
        sources,
        faults: Vec::new(),
        notes: Vec::new(),
        inputs: Vec::new(),
        units: UnitSystem::Metric,
        crs: None,
        layers,
    };
    read_document(name, &document, syntax, reading)
}

fn read_document(
    name: &str,
    document: &Value,
    syntax: Syntax,
    mut reading: Reading<'_>,
) -> Result<Plan, PlanFaults> {
    let plan = read_sections(name, document, &mut reading);
    let Reading {
        sources,
        faults,
        notes,
        inputs,
        layers,
        ..
    } = reading;
    let faults = syntax.with_others(faults, &sources);
    match plan {
        Some(plan) if faults.is_empty() => Ok(Plan {
            sha256: format!("{:x}", layers.hash.finalize()),
            notes,
            inputs,
            sources,
            ..plan
        }),
        _ => Err(PlanFaults::new(sources, faults)),
    }
}

/// Reads every table, whether or not one before it was at fault.
fn read_sections(name: &str, document: &Value, reading: &mut Reading<'_>) -> Option<Plan> {
    let plan = Section::open(&PLAN_TABLE, document, reading)?;
    reading.units = read_units(&plan, reading).unwrap_or(UnitSystem::Metric);
    reading.crs = read_crs(&plan, reading);
    let title = plan.text(&TITLE, reading);
    let title = title.map_or_else(|| stem(name), str::to_owned);

    let mut source_map = SourceMap::new(plan.place);
    let mut names = Names::default();
    let aquifer = aquifer::read_aquifer(&plan, &mut source_map, reading);
    let ambient = aquifer::read_ambient(&plan, &mut source_map, reading);
    let edges = edges::read_edges(&plan, &mut source_map, reading);
    let wells = wells::read_wells(&plan, &mut names, &mut source_map, reading);
    let neighbours = neighbours::read_neighbours(&plan, &mut names, &mut source_map, reading);
    let map = map::read_map(&plan, &wells, &neighbours, &mut source_map, reading);
    let interference_share = map::read_interference_share(&plan, reading);
    let head_tolerance = map::read_accuracy(&plan, reading);

    let (aquifer, material) = aquifer?;
    wells::refuse_beyond_influence(&aquifer, &wells, &source_map, reading);
    let mut site = Site {
        aquifer,
        ambient,
        edges,
        wells,
        neighbours,
        interference_share,
        head_tolerance,
        map: map.unwrap_or_default(),
    };
    let origin = origin_near_wells(&site);
    check_place(&plan, &site, origin, reading);
    move_site(&mut site, -origin.coords);
    Some(Plan {
        title,
        site,
        crs: reading.crs.clone()?,
        units: reading.units,
        origin,
        material,
        map: source_map,
        sha256: String::new(),
        notes: Vec::new(),
        inputs: Vec::new(),
        sources: Sources::default(),
    })
}

fn read_units(plan: &Section<'_>, reading: &mut Reading<'_>) -> Option<UnitSystem> {
    let text = plan.text(&UNITS, reading)?;
    let systems = [UnitSystem::Metric, UnitSystem::Us];
    let known = systems.into_iter().find(|system| system.name() == text);
    if known.is_none() {
        let what = format!("`units` is `{}`, which is no system of units", shown(text));
        let help = "write \"metric\" (m, m3/d, m2/d, m/d, d) or \"us\" (ft, gpm, ft2/d, ft/d, d)";
        let place = plan.value(&UNITS)?.place;
        reading.refuse(Fault::new(place, what, help).label("unknown"));
    }
    known
}

fn read_crs(plan: &Section<'_>, reading: &mut Reading<'_>) -> Option<Crs> {
    let value = plan.value(&CRS)?;
    let crs = match &value.node {
        Node::Text(text) => match epsg_code(text) {
            Some(code) => Crs::from_epsg(code),
            None => {
                let what = format!("`crs` is `{}`, which is no EPSG code", shown(text));
                let help = "write \"EPSG:32633\" with the code of your CRS, or { origin = [longitude, latitude] }";
                reading.refuse(Fault::new(value.place, what, help).label("no EPSG code"));
                return None;
            }
        },
        Node::Table(_) => {
            let section = Section::open(&CRS_TABLE, value, reading)?;
            let (longitude, latitude) = section.longitude_latitude(&ORIGIN, reading)?;
            Crs::local(longitude, latitude)
        }
        _ => {
            let wanted = "\"EPSG:…\" or { origin = [longitude, latitude] }";
            reading.refuse(plan.wrong_kind(&CRS, value, wanted));
            return None;
        }
    };
    match crs {
        Ok(crs) => {
            reading.notes.extend(crs.note());
            Some(crs)
        }
        Err(error) => {
            reading.refuse(crs_fault(value.place, &error));
            None
        }
    }
}

fn crs_fault(place: Place, error: &CrsError) -> Fault {
    Fault::new(place, error.to_string(), error.help()).label("cannot be used")
}

/// The code of "EPSG:32633"; the authority's name in any case.
fn epsg_code(text: &str) -> Option<u32> {
    let (authority, code) = text.trim().split_once(':')?;
    let is_epsg = authority.trim().eq_ignore_ascii_case("epsg");
    code.trim().parse().ok().filter(|_| is_epsg)
}

fn stem(name: &str) -> String {
    let stem = Path::new(name).file_stem();
    stem.map_or_else(
        || name.to_owned(),
        |stem| stem.to_string_lossy().into_owned(),
    )
}

/// Refuses a site where the plan's grid is no grid of metres or feet.
fn check_place(plan: &Section<'_>, site: &Site, origin: Point, reading: &mut Reading<'_>) {
    let Some(crs) = reading.crs.as_ref().filter(|_| !site.wells.is_empty()) else {
        return;
    };
    let per_unit = crs.metres_per_unit();
    let checked = crs.check_lengths(origin.x / per_unit, origin.y / per_unit);
    if let (Err(error), Some(value)) = (checked, plan.value(&CRS)) {
        reading.refuse(crs_fault(value.place, &error));
    }
}

/// Whole metres near the middle of the wells.
fn origin_near_wells(site: &Site) -> Point {
    let count = site.wells.len().max(1) as f64;
    let sum: Vector = site.wells.iter().map(|well| well.at.coords / count).sum();
    Point::new(sum.x.round(), sum.y.round())
}

fn move_site(site: &mut Site, by: Vector) {
    let ambient = site
        .ambient
        .iter_mut()
        .filter_map(|ambient| ambient.at.as_mut());
    let edges = site
        .edges
        .iter_mut()
        .flat_map(|edge| match &mut edge.shape {
            EdgeShape::Line(points) => points.as_mut_slice(),
            EdgeShape::Circle { centre, .. } => std::slice::from_mut(centre),
        });
    let wells = site.wells.iter_mut().map(|well| &mut well.at);
    let neighbours = site
        .neighbours
        .iter_mut()
        .flat_map(|neighbour| match &mut neighbour.place {
            Where::At(point) => std::slice::from_mut(point),
            Where::Area(corners) => corners.as_mut_slice(),
        });
    let extent = site
        .map
        .extent
        .iter_mut()
        .flat_map(|extent| [&mut extent.min, &mut extent.max]);
    for point in ambient
        .chain(edges)
        .chain(wells)
        .chain(neighbours)
        .chain(extent)
    {
        *point += by;
    }
}
