//! The answer in plain words: is any neighbour over its limit, by how much and
//! through which well; what comes out of which river; what would clear it.

use serde::Serialize;

use crate::findings::{Flag, FlagCode, NeighbourFinding};
use crate::layers::Planned;
use crate::layers::words::{Words, listed as in_words, percent};

/// Names that a sentence lists, at most.
const MOST_NAMES: usize = 3;

/// The answer, and the figures beside it.
#[derive(Serialize)]
pub struct Answer {
    /// The gist in one line.
    headline: String,
    /// The whole in one paragraph.
    text: String,
    facts: Vec<Fact>,
}

#[derive(Serialize)]
struct Fact {
    name: &'static str,
    value: String,
}

/// The answer to a plan.
pub fn answer(planned: &Planned<'_>) -> Answer {
    let words = Words::of(planned);
    let sentences = [
        neighbours(planned, &words),
        unjudged(planned, &words),
        water(planned, &words),
        others(planned, &words),
        vec![exactness(planned, &words)],
    ];
    Answer {
        headline: headline(planned),
        text: unbroken(&sentences.concat().join(" "), planned),
        facts: facts(planned, &words),
    }
}

/// The neighbours over their limit, the worst first.
fn over<'p>(planned: &'p Planned<'_>) -> Vec<&'p Flag> {
    with_code(planned, FlagCode::NeighbourOverLimit)
}

fn with_code<'p>(planned: &'p Planned<'_>, code: FlagCode) -> Vec<&'p Flag> {
    let flags = planned.findings.flags.iter();
    flags.filter(|flag| flag.code == code).collect()
}

/// The neighbours that can be judged, with drawdown and limit, metres.
fn judged<'p>(planned: &'p Planned<'_>) -> impl Iterator<Item = (&'p NeighbourFinding, f64, f64)> {
    let findings = planned.findings.neighbours.iter();
    findings.filter_map(|n| Some((n, n.worst.as_ref()?.drawdown_m, n.allowed_m?)))
}

fn headline(planned: &Planned<'_>) -> String {
    let (over, judged) = (over(planned).len(), judged(planned).count());
    let all = planned.findings.neighbours.len();
    match (over, judged, all) {
        (0, _, 0) => "The plan names no neighbour.".into(),
        (0, 0, _) => "No neighbour can be judged.".into(),
        (0, 1, _) => "The one neighbour with a limit stays within it.".into(),
        (0, _, _) => format!("All {judged} neighbours with a limit stay within it."),
        (1, 1, _) => "The one neighbour with a limit is drawn down too far.".into(),
        (1, _, _) => format!("One of {judged} neighbours with a limit is drawn down too far."),
        _ => format!("{over} of {judged} neighbours with a limit are drawn down too far."),
    }
}

/// The worst neighbour, what would clear it, and the others over their limit;
/// or the one that comes closest.
fn neighbours(planned: &Planned<'_>, words: &Words<'_>) -> Vec<String> {
    let over = over(planned);
    let Some((worst, others)) = over.split_first() else {
        return closest(planned, words).into_iter().collect();
    };
    let mut told = vec![format!(
        "{} is {}",
        words.who(worst.who),
        words.reason(worst)
    )];
    if let Some(clearing) = words.clearing(worst) {
        told.push(match clearing.strip_prefix("Cleared by") {
            Some(means) => format!("It would be brought within its limit by{means}"),
            None => clearing,
        });
    }
    if !others.is_empty() {
        let excess = |flag: &&Flag| {
            format!(
                "{} by {}",
                words.who(flag.who),
                words.length(flag.measure.excess())
            )
        };
        let names: Vec<String> = others.iter().take(MOST_NAMES).map(excess).collect();
        told.push(format!(
            "Also over {} limit: {}.",
            if others.len() == 1 { "its" } else { "their" },
            listed(names, others.len())
        ));
    }
    told
}

/// The neighbour that comes closest to its limit.
fn closest(planned: &Planned<'_>, words: &Words<'_>) -> Option<String> {
    let (finding, drawdown_m, allowed_m) =
        judged(planned).reduce(|a, b| if b.1 / b.2 > a.1 / a.2 { b } else { a })?;
    Some(format!(
        "{} comes closest to its limit: it is drawn down {} of the {} allowed.",
        words.neighbour(finding.neighbour),
        words.length(drawdown_m),
        words.length(allowed_m)
    ))
}

/// The neighbours of which nothing can be said.
fn unjudged(planned: &Planned<'_>, words: &Words<'_>) -> Vec<String> {
    let findings = &planned.findings.neighbours;
    let outside = findings.iter().filter(|n| n.worst.is_none());
    let limitless = findings
        .iter()
        .filter(|n| n.worst.is_some() && n.allowed_m.is_none());
    let told = |who: Vec<&NeighbourFinding>, one: &str, many: &str| {
        let names: Vec<String> = who
            .iter()
            .take(MOST_NAMES)
            .map(|n| words.neighbour(n.neighbour))
            .collect();
        let verb = if who.len() == 1 { one } else { many };
        (!who.is_empty()).then(|| format!("{} {verb}.", listed(names, who.len())))
    };
    [
        told(
            limitless.collect(),
            "has no limit to be judged by",
            "have no limit to be judged by",
        ),
        told(
            outside.collect(),
            "lies outside every aquifer that holds a well, where nothing can be said",
            "lie outside every aquifer that holds a well, where nothing can be said",
        ),
    ]
    .into_iter()
    .flatten()
    .collect()
}

/// What is pumped, and where it comes from.
fn water(planned: &Planned<'_>, words: &Words<'_>) -> Vec<String> {
    let [pumped, injected] = totals(planned);
    let mut pumping = format!("The wells pump {}", words.rate(pumped));
    if injected > 0.0 {
        pumping.push_str(&format!(" and put back {}", words.rate(injected)));
    }
    let given = planned
        .findings
        .boundaries
        .iter()
        .filter(|boundary| boundary.inflow_m3_d() != 0.0);
    let whole_m3_d: f64 = given.clone().map(|boundary| boundary.inflow_m3_d()).sum();
    let mut rivers: Vec<(usize, f64)> = given.map(|b| (b.edge, b.inflow_m3_d())).collect();
    rivers.sort_by(|a, b| b.1.total_cmp(&a.1));
    let names = rivers.iter().take(MOST_NAMES).map(|&(edge, m3_d)| {
        let verb = if m3_d < 0.0 { "takes" } else { "gives" };
        format!(
            "{} {verb} {} ({})",
            words.edge(edge),
            words.rate(m3_d.abs()),
            percent(m3_d / whole_m3_d)
        )
    });
    let source = match rivers.len() {
        0 if planned.solution.site().aquifer.influence_radius.is_some() => {
            "; no river bounds the aquifer, and the plan assumes how far the cones reach".into()
        }
        0 => "; no river gives any of it".into(),
        count => format!("; of the balance {}", listed(names.collect(), count)),
    };
    vec![format!("{pumping}{source}.")]
}

/// All pumping and all injection, m³/d.
fn totals(planned: &Planned<'_>) -> [f64; 2] {
    let rates = planned.findings.wells.iter().map(|well| well.pumping_m3_d);
    [
        rates.clone().filter(|rate| *rate > 0.0).sum(),
        -rates.filter(|rate| *rate < 0.0).sum::<f64>(),
    ]
}

/// What else breaks a limit.
fn others(planned: &Planned<'_>, words: &Words<'_>) -> Vec<String> {
    let codes = [
        (
            FlagCode::AboveGround,
            "Injection lifts the water above the ground in",
        ),
        (FlagCode::LevelTooLow, "Drawn below its lowest level:"),
        (
            FlagCode::BelowRoof,
            "The head falls below the aquifer’s roof, so that the results do not hold there:",
        ),
        (
            FlagCode::Interference,
            "Other wells take more than their accepted share in",
        ),
        (
            FlagCode::AccuracyNotReached,
            "The heads are less exact than the plan asks:",
        ),
    ];
    codes
        .into_iter()
        .filter_map(|(code, sentence)| {
            let flags = with_code(planned, code);
            let names = flags.iter().take(MOST_NAMES).map(|flag| match flag.who {
                crate::findings::Who::Map => "the map".into(),
                crate::findings::Who::AquiferOf(_) => format!("the {}", words.who(flag.who)),
                who => words.who(who),
            });
            (!flags.is_empty())
                .then(|| format!("{sentence} {}.", listed(names.collect(), flags.len())))
        })
        .collect()
}

/// How far to trust it.
fn exactness(planned: &Planned<'_>, words: &Words<'_>) -> String {
    let bound_m = planned.solution.error_bound_m();
    let proven = if bound_m < 1e-3 {
        let fine = match planned.units().length_ending() {
            "m" => "a millimetre",
            _ => "a hundredth of a foot",
        };
        format!("heads are computed to better than {fine}")
    } else {
        words.proven(bound_m)
    };
    format!(
        "For the plan as it is drawn, {proven}; how well the plan describes the ground is another matter, and for a licensed hydrogeologist to judge."
    )
}

fn facts(planned: &Planned<'_>, words: &Words<'_>) -> Vec<Fact> {
    let [pumped, injected] = totals(planned);
    let flags = &planned.findings.flags;
    let broken = flags.iter().filter(|f| f.code.breaks_a_limit()).count();
    let largest_m = planned
        .findings
        .neighbours
        .iter()
        .filter_map(|n| Some(n.worst.as_ref()?.drawdown_m))
        .reduce(f64::max);
    let mut facts = vec![Fact {
        name: "Pumping",
        value: words.rate(pumped),
    }];
    if injected > 0.0 {
        facts.push(Fact {
            name: "Injection",
            value: words.rate(injected),
        });
    }
    facts.push(Fact {
        name: "Neighbours over their limit",
        value: format!("{} of {}", over(planned).len(), judged(planned).count()),
    });
    if let Some(largest_m) = largest_m {
        facts.push(Fact {
            name: "Most drawdown at a neighbour",
            value: words.length(largest_m),
        });
    }
    facts.push(Fact {
        name: "Flags that break a limit",
        value: broken.to_string(),
    });
    facts
}

/// A text whose numbers keep their units on their line.
fn unbroken(text: &str, planned: &Planned<'_>) -> String {
    let units = planned.units();
    [units.length_ending(), units.rate_words()]
        .into_iter()
        .fold(text.to_owned(), |text, unit| {
            [" ", ",", ";", "."].into_iter().fold(text, |text, end| {
                text.replace(&format!(" {unit}{end}"), &format!("\u{a0}{unit}{end}"))
            })
        })
}

/// "a, b and c", or "a, b, c and 4 more".
fn listed(mut names: Vec<String>, count: usize) -> String {
    let more = count.saturating_sub(names.len());
    if more > 0 {
        names.push(format!("{more} more"));
    }
    in_words(&names)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_list_ends_with_and() {
        let names = |n: usize| (0..n).map(|i| i.to_string()).collect::<Vec<_>>();
        assert_eq!(listed(names(1), 1), "0");
        assert_eq!(listed(names(3), 3), "0, 1 and 2");
        assert_eq!(listed(names(3), 9), "0, 1, 2 and 6 more");
    }
}
