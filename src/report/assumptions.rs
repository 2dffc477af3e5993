//! What the results rest on, and where each assumption is doubtful in this
//! very plan.

use serde::Serialize;

use crate::findings::{FlagCode, Oddity, oddities};
use crate::layers::Planned;
use crate::layers::words::Words;
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
        rivers(planned, &words),
    ];
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

fn rivers(planned: &Planned<'_>, words: &Words<'_>) -> Assumption {
    let site = planned.solution.site();
    let found = planned.findings.boundaries.iter().zip(&site.edges);
    let clear: Vec<String> = found
        .filter(|(finding, edge)| {
            let is_clear = matches!(
                edge.kind,
                EdgeKind::River {
                    bank_resistance: None,
                    ..
                }
            );
            is_clear && finding.inflow_m3_d() > 0.0
        })
        .take(MOST_NAMES)
        .map(|(finding, _)| words.edge(finding.edge))
        .collect();
    let mut doubts = Vec::new();
    if !clear.is_empty() {
        doubts.push(format!(
            "No bank resistance is given for {}: a silted bed, or one that cuts into the aquifer only partly, gives less water, and drawdowns are then larger.",
            clear.join(", ")
        ));
    }
    Assumption {
        title: "Rivers and barriers penetrate fully",
        text: "Rivers hold their stage whatever the wells take, down to the aquifer’s base; barriers let nothing through.".into(),
        doubts,
    }
}

/// Edges that go on beyond what the plan draws.
fn edges(planned: &Planned<'_>, words: &Words<'_>) -> Option<Assumption> {
    let endless: Vec<String> = planned
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
        .take(MOST_NAMES)
        .map(|boundary| words.edge(boundary.edge))
        .collect();
    (!endless.is_empty()).then(|| Assumption {
        title: "Edges go on straight",
        text: "Free ends of rivers and barriers go on straight beyond what the plan draws.".into(),
        doubts: vec![format!(
            "So do {}: look at a map whether the ground agrees for some kilometres.",
            endless.join(", ")
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
    let near: Vec<String> = site
        .wells
        .iter()
        .enumerate()
        .filter(|(_, well)| depth_m(well.at) < rim_m)
        .map(|(index, _)| words.well(index))
        .collect();
    let mut doubts = Vec::new();
    if !near.is_empty() {
        let more = near.len().saturating_sub(MOST_NAMES);
        let named: Vec<String> = near.into_iter().take(MOST_NAMES).collect();
        let more = if more > 0 {
            format!(" and {more} more")
        } else {
            String::new()
        };
        doubts.push(format!(
            "At or beyond the map’s rim: {}{more}. The map cuts their cones off; ask for a larger extent.",
            named.join(", ")
        ));
    }
    Assumption {
        title: "What the map shows",
        text: "Flags about the roof look at the map alone; distances are those of the plan’s grid."
            .into(),
        doubts,
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
