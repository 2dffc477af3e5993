//! What the results rest on, and where each assumption is doubtful in this
//! very plan.

use serde::Serialize;

use super::flags::capitalised;
use crate::findings::{FlagCode, Oddity, oddities};
use crate::layers::Planned;
use crate::layers::words::{Words, listed};
use crate::site::{EdgeKind, Point};

/// Wells that a sentence names, at most.
const MOST_NAMES: usize = 5;
/// A well closer to the map's rim than this share of the map is near it.
const NEAR_RIM: f64 = 0.08;

/// One assumption.
#[derive(Serialize)]
pub struct Assumption {
    title: &'static str,
    text: String,
    /// Where it is doubtful in this plan; empty where nothing speaks against
    /// it.
    doubts: Vec<String>,
}

/// All assumptions of a plan's results.
pub fn assumptions(planned: &Planned<'_>) -> Vec<Assumption> {
    let words = Words::of(planned);
    let mut all = vec![
        confined(planned, &words),
        homogeneous(planned),
        steady(planned, &words),
    ];
    all.extend(penetration(planned, &words));
    all.extend(clogged_banks(planned, &words));
    all.extend(recharge(planned));
    all.extend(edges(planned, &words));
    all.push(map(planned, &words));
    all.extend(slips(planned, &words));
    all
}

fn confined(planned: &Planned<'_>, words: &Words<'_>) -> Assumption {
    let mut doubts: Vec<String> = planned
        .findings
        .flags
        .iter()
        .filter(|flag| flag.code == FlagCode::BelowRoof)
        .take(MOST_NAMES)
        .map(|flag| format!("{}: {}", words.who(flag.who), words.reason(flag)))
        .collect();
    if planned.solution.site().aquifer.roof.is_none() {
        doubts.push("The plan gives no roof, so that this is not checked.".into());
    }
    Assumption {
        title: "Confined aquifer",
        text: "The aquifer is full everywhere: the head stands above its roof.".into(),
        doubts,
    }
}

fn homogeneous(planned: &Planned<'_>) -> Assumption {
    let aquifer = &planned.solution.site().aquifer;
    let mut doubts = Vec::new();
    let from_material = planned.plan.material.is_some()
        && !planned.plan.inputs.iter().any(|input| {
            input.of == "[aquifer]" && matches!(input.key, "conductivity" | "transmissivity")
        });
    if from_material {
        doubts.push(
            "The conductivity is a material’s typical value, not a measurement: the true one may be several times larger or smaller, and drawdowns with it.".into(),
        );
    }
    let text = match aquifer.anisotropy {
        Some(anisotropy) => format!(
            "One transmissivity everywhere, {} times as large along azimuth {}° as across it; layers and lenses are not seen.",
            anisotropy.ratio, anisotropy.azimuth_deg
        ),
        None => {
            "One transmissivity everywhere and in all directions; layers and lenses are not seen."
                .into()
        }
    };
    Assumption {
        title: "Homogeneous aquifer",
        text,
        doubts,
    }
}

fn steady(planned: &Planned<'_>, words: &Words<'_>) -> Assumption {
    let site = planned.solution.site();
    let mut doubts = Vec::new();
    let has_river = planned.solution.fields().iter().all(|field| {
        field
            .outline()
            .side_kinds()
            .contains(&crate::outline::Kind::FixedHead)
    });
    match (has_river, site.aquifer.influence_radius) {
        (false, Some(radius)) => doubts.push(format!(
            "No river holds the head: the reach of the cones, {}, is assumed by the plan. Drawdowns, above all far from the wells, are no better than it.",
            words.length(radius.si())
        )),
        (false, None) => doubts.push(
            "Barriers alone bound an aquifer: a steady state lasts only while pumping and injection balance.".into(),
        ),
        (true, _) => {}
    }
    Assumption {
        title: "Steady state",
        text: "The cones have come to rest. That may take months or years; until then drawdowns are smaller.".into(),
        doubts,
    }
}

/// Rivers and barriers that bound an aquifer with a well, as far as there are
/// any.
fn penetration(planned: &Planned<'_>, words: &Words<'_>) -> Option<Assumption> {
    let edges = &planned.solution.site().edges;
    let bounding = || {
        let found = planned.findings.boundaries.iter();
        found.filter(|finding| finding.bounds_an_aquifer)
    };
    let is_river = |edge: usize| {
        let kind = edges.get(edge).map(|edge| &edge.kind);
        matches!(kind, Some(EdgeKind::River { .. }))
    };
    let rivers = bounding().any(|finding| is_river(finding.edge));
    let barriers = bounding().any(|finding| !is_river(finding.edge));
    let of_rivers = "Rivers hold their stage whatever the wells take, down to the aquifer’s base";
    let of_barriers = "barriers let nothing through, from the aquifer’s roof to its base";
    let (title, text) = match (rivers, barriers) {
        (true, true) => (
            "Rivers and barriers penetrate fully",
            format!("{of_rivers}; {of_barriers}."),
        ),
        (true, false) => ("Rivers penetrate fully", format!("{of_rivers}.")),
        (false, true) => (
            "Barriers penetrate fully",
            format!("{}.", capitalised(of_barriers)),
        ),
        (false, false) => return None,
    };
    let clear = bounding().filter(|finding| {
        let resistance = bank_resistance(planned, finding.edge);
        is_river(finding.edge) && resistance.is_none() && finding.inflow_m3_d() > 0.0
    });
    let clear = named(clear.map(|finding| words.edge(finding.edge)));
    let doubts = clear.map(|clear| {
        format!(
            "No bank resistance is given for {clear}: a silted bed, or one that cuts into the aquifer only partly, gives less water, and drawdowns are then larger."
        )
    });
    Some(Assumption {
        title,
        text,
        doubts: doubts.into_iter().collect(),
    })
}

/// The resistance of a river's clogged bank, days.
fn bank_resistance(planned: &Planned<'_>, edge: usize) -> Option<f64> {
    match planned.solution.site().edges.get(edge)?.kind {
        EdgeKind::River {
            bank_resistance: Some(days),
            ..
        } => Some(days.si()).filter(|days| *days > 0.0),
        _ => None,
    }
}

/// Banks that the plan calls clogged.
fn clogged_banks(planned: &Planned<'_>, words: &Words<'_>) -> Option<Assumption> {
    let found = planned.findings.boundaries.iter();
    let clogged = found.filter(|finding| finding.bounds_an_aquifer);
    let clogged = clogged.filter_map(|finding| {
        let days = bank_resistance(planned, finding.edge)?;
        Some(format!("{} ({days} days)", words.edge(finding.edge)))
    });
    let clogged = named(clogged)?;
    Some(Assumption {
        title: "Clogged banks",
        text: "A clogged bank is a skin of one resistance all along its river; water passes it in proportion to the fall of head across it.".into(),
        doubts: vec![format!(
            "Stated for {clogged}: floods scour a bank and low water silts it up, so that its resistance changes with the seasons; a pumping test beside the river tells it."
        )],
    })
}

/// Recharge that the plan states.
fn recharge(planned: &Planned<'_>) -> Option<Assumption> {
    let recharge = planned.solution.site().aquifer.recharge;
    (recharge.si() != 0.0).then(|| Assumption {
        title: "Even recharge",
        text: "Recharge is the same everywhere and all the time, whether the wells run or not.".into(),
        doubts: vec![format!(
            "The plan gives {} all the year round. Where it falls short in a dry year, every head is lower.",
            planned.plan.units.beside(&recharge.to_string())
        )],
    })
}

/// "a, b and 3 more"; none where there is nothing to name.
fn named(names: impl Iterator<Item = String>) -> Option<String> {
    let all: Vec<String> = names.collect();
    let more = all.len().saturating_sub(MOST_NAMES);
    let mut told: Vec<String> = all.into_iter().take(MOST_NAMES).collect();
    if more > 0 {
        told.push(format!("{more} more"));
    }
    (!told.is_empty()).then(|| listed(&told))
}

/// Edges that go on beyond what the plan draws.
fn edges(planned: &Planned<'_>, words: &Words<'_>) -> Option<Assumption> {
    let endless = planned
        .findings
        .boundaries
        .iter()
        .filter(|boundary| {
            boundary.bounds_an_aquifer
                && planned.solution.fields().iter().any(|field| {
                    let pieces = field.outline().sides.iter().flatten();
                    pieces
                        .filter(|piece| piece.edge == boundary.edge)
                        .any(|piece| {
                            piece.along.start.is_infinite() || piece.along.end.is_infinite()
                        })
                })
        })
        .map(|boundary| words.edge(boundary.edge));
    let endless = named(endless)?;
    Some(Assumption {
        title: "Edges go on straight",
        text: "Free ends of rivers and barriers go on straight beyond what the plan draws.".into(),
        doubts: vec![format!(
            "Carried on so: {endless}. Look at a map whether the ground agrees for some kilometres."
        )],
    })
}

fn map(planned: &Planned<'_>, words: &Words<'_>) -> Assumption {
    let window = planned.survey.window;
    let size = window.extent.max - window.extent.min;
    let rim_m = NEAR_RIM * size.x.min(size.y);
    let depth_m = |at: Point| {
        let (low, high) = (at - window.extent.min, window.extent.max - at);
        low.x.min(low.y).min(high.x).min(high.y)
    };
    let site = planned.solution.site();
    let near = site
        .wells
        .iter()
        .enumerate()
        .filter(|(_, well)| depth_m(well.at) < rim_m)
        .map(|(index, _)| words.well(index));
    let doubts = named(near).map(|near| {
        format!(
            "At or beyond the map’s rim: {near}. The map cuts their cones off; ask for a larger extent."
        )
    });
    Assumption {
        title: "What the map shows",
        text: "Flags about the roof look at the map alone; distances are those of the plan’s grid."
            .into(),
        doubts: doubts.into_iter().collect(),
    }
}

/// What looks like a slip of the pen.
fn slips(planned: &Planned<'_>, words: &Words<'_>) -> Option<Assumption> {
    let findings = planned.findings;
    let found = oddities(planned.solution, &findings.wells, &findings.neighbours);
    let told = |oddity: &&Oddity| {
        !matches!(
            oddity,
            Oddity::NoRoof | Oddity::NeighbourOutside(_) | Oddity::NeighbourWithoutLimit(_)
        )
    };
    let odd: Vec<String> = found
        .iter()
        .filter(told)
        .take(20)
        .map(|oddity| words.oddity(oddity) + ".")
        .collect();
    (!odd.is_empty()).then(|| Assumption {
        title: "The plan is as meant",
        text: "Numbers and places are taken as the plan writes them.".into(),
        doubts: odd,
    })
}
