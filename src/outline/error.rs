//! What can be wrong with a plan's edges, wells and neighbours as geometry.

use thiserror::Error;

use crate::site::{Flux, Refusal, Subject};

/// A part of the plan with the words people know it by.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Named {
    /// Which part it is.
    pub subject: Subject,
    /// "river Ostra", "well PW-1".
    pub words: String,
}

impl std::fmt::Display for Named {
    fn fmt(&self, formatter: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        formatter.write_str(&self.words)
    }
}

/// Why no outline could be found or named.
#[derive(Clone, Debug, Error, PartialEq)]
pub enum OutlineError {
    /// There is nothing to find an aquifer by.
    #[error("the plan has no well")]
    NoWell,
    /// A coordinate is not a number or absurdly large.
    #[error("{part} has a coordinate that is not a finite number within 100,000 km of the site")]
    WildCoordinate {
        /// Whose coordinate it is.
        part: Named,
    },
    /// The ratio of principal conductivities makes no sense.
    #[error(
        "the anisotropy ratio is {ratio} and its azimuth {azimuth_deg}; the ratio must be 1 or more and both finite"
    )]
    WildAnisotropy {
        /// The ratio given.
        ratio: f64,
        /// The azimuth given.
        azimuth_deg: f64,
    },
    /// A clogged bank beside an aquifer of unknown conductivity.
    #[error(
        "{river} has a bank resistance of {days} days, but the aquifer's thickness is not given"
    )]
    NoThickness {
        /// The river.
        river: Named,
        /// Its bank resistance.
        days: f64,
    },
    /// Recharge that would have to flow without end.
    #[error(
        "no steady state: the {shape} around {well} has a recharge of {recharge}, and recharge over an unbounded area cannot drain"
    )]
    RechargeWithoutEnd {
        /// The recharge.
        recharge: Flux,
        /// A well that stands in the aquifer.
        well: Named,
        /// The shape's name.
        shape: &'static str,
    },
    /// Recharge within barriers.
    #[error(
        "{well} stands in an aquifer that barriers close on all sides, with a recharge of {recharge} that cannot drain"
    )]
    RechargeWithoutRiver {
        /// The recharge.
        recharge: Flux,
        /// A well that stands in the aquifer.
        well: Named,
    },
    /// Sides that cross where places were joined.
    #[error("{edge} crosses or touches another side of its aquifer {place}")]
    SidesCross {
        /// The edge.
        edge: Named,
        /// Where, in words.
        place: String,
    },
    /// An edge within the aquifer, which lies on both its banks.
    #[error("{edge} has the aquifer of {well} on both its banks")]
    BothBanks {
        /// The edge.
        edge: Named,
        /// A well of the aquifer.
        well: Named,
    },
    /// A line that is a point, or a circle without a radius.
    #[error("{edge} has no length: all of it lies within 1 mm")]
    NoLength {
        /// The edge.
        edge: Named,
    },
    /// More straight pieces than an outline is searched for.
    #[error("the rivers and barriers have {pieces} straight pieces; at most {limit} can be joined")]
    TooManyPieces {
        /// The edge that exceeds the limit.
        edge: Named,
        /// How many there are.
        pieces: usize,
        /// How many there may be.
        limit: usize,
    },
    /// A line meets itself.
    #[error("{edge} crosses or touches itself {from_start} along its line")]
    CrossesItself {
        /// The edge.
        edge: Named,
        /// Distance from its first vertex, in words.
        from_start: String,
    },
    /// Two edges lie on one another.
    #[error("{edge} and {other} lie on one another over {length}")]
    Overlap {
        /// The later edge.
        edge: Named,
        /// The earlier edge.
        other: Named,
        /// Over what length, in words.
        length: String,
    },
    /// A well on an edge.
    #[error("{part} lies on {edge}: {distance} from it")]
    OnEdge {
        /// The well or neighbour.
        part: Named,
        /// The edge.
        edge: Named,
        /// How far away, in words.
        distance: String,
    },
    /// A well whose rim crosses an edge.
    #[error(
        "the rim of {well} crosses {edge}: it lies {distance} away, within its radius of {radius}"
    )]
    RimCrossesEdge {
        /// The well.
        well: Named,
        /// The edge.
        edge: Named,
        /// How far away, in words.
        distance: String,
        /// The well's radius, in words.
        radius: String,
    },
    /// A neighbour no well can reach.
    #[error(
        "{neighbour} lies on the other bank of {edge}, where the plan has no well: the wells cannot lower its head"
    )]
    OtherBank {
        /// The neighbour.
        neighbour: Named,
        /// The edge between it and the nearest well.
        edge: Named,
    },
    /// An area in two aquifers.
    #[error(
        "{neighbour} lies in several aquifers: that of {first} and that of {second}, with {edge} between them"
    )]
    AcrossAquifers {
        /// The neighbour.
        neighbour: Named,
        /// A well of the one.
        first: Named,
        /// A well of the other.
        second: Named,
        /// An edge between them.
        edge: Named,
    },
    /// An outline that has no closed form.
    #[error("{well} stands in {outline}; no closed form covers it")]
    NoClosedForm {
        /// A well that stands in it.
        well: Named,
        /// The edge that breaks it.
        edge: Named,
        /// The outline in words.
        outline: String,
        /// The numbers that matter, where there are some.
        why: Option<String>,
        /// What to draw instead.
        remedy: String,
        /// The other edges.
        others: Vec<Named>,
    },
    /// Not one stage for each vertex.
    #[error("{river} has {stages} stages for {vertices} vertices")]
    StageCount {
        /// The river.
        river: Named,
        /// How many stages.
        stages: usize,
        /// How many vertices.
        vertices: usize,
    },
}

impl OutlineError {
    /// The part of the plan to point at.
    fn subject(&self) -> Subject {
        match self {
            Self::NoWell => Subject::Plan,
            Self::WildAnisotropy { .. } => Subject::Aquifer(Some("anisotropy")),
            Self::RechargeWithoutEnd { .. } | Self::RechargeWithoutRiver { .. } => {
                Subject::Aquifer(Some("recharge"))
            }
            Self::NoThickness { .. } => Subject::Aquifer(None),
            Self::StageCount { river, .. } => with_key(&river.subject, "stage"),
            Self::WildCoordinate { part } | Self::OnEdge { part, .. } => part.subject.clone(),
            Self::RimCrossesEdge { well, .. } => well.subject.clone(),
            Self::NoLength { edge }
            | Self::TooManyPieces { edge, .. }
            | Self::CrossesItself { edge, .. }
            | Self::Overlap { edge, .. }
            | Self::SidesCross { edge, .. }
            | Self::BothBanks { edge, .. }
            | Self::NoClosedForm { edge, .. } => edge.subject.clone(),
            Self::OtherBank { neighbour, .. } | Self::AcrossAquifers { neighbour, .. } => {
                neighbour.subject.clone()
            }
        }
    }

    /// The reason, where the sentence itself does not give it.
    fn why(&self) -> Option<String> {
        match self {
            Self::NoClosedForm { why, .. } => why.clone(),
            Self::NoWell => Some("the aquifer is found from the wells that stand in it".to_owned()),
            Self::NoThickness { .. } => Some(
                "how much a clogged bank holds back depends on the aquifer's conductivity, and \
                 transmissivity alone does not tell it"
                    .to_owned(),
            ),
            Self::RechargeWithoutEnd { .. } => Some(
                "parts of it have no river within reach, and there the head would rise or fall \
                 without end"
                    .to_owned(),
            ),
            Self::RechargeWithoutRiver { .. } => Some(
                "with no river to take it up, the head would rise or fall without end".to_owned(),
            ),
            Self::BothBanks { .. } => Some(
                "its line, with its free ends carried on straight, reaches into the aquifer without \
                 parting it, and the general method takes only edges with the aquifer on one bank"
                    .to_owned(),
            ),
            _ => None,
        }
    }

    /// What to write instead.
    fn remedy(&self) -> String {
        match self {
            Self::NoWell => "add a [[well]] with `at`, `pumping` and `radius`".to_owned(),
            Self::WildCoordinate { .. } => {
                "write finite coordinates in the plan's coordinate system".to_owned()
            }
            Self::WildAnisotropy { .. } => {
                "write the largest over the smallest conductivity and the azimuth of the \
                 largest, such as { ratio = 3.0, azimuth = 40.0 }"
                    .to_owned()
            }
            Self::NoThickness { .. } => {
                "give the aquifer `thickness` and `conductivity`, or remove `bank_resistance`"
                    .to_owned()
            }
            Self::RechargeWithoutEnd { .. } => "close the aquifer with rivers and barriers on all \
                 sides, or make it a strip beside a river; or set `recharge` to 0, which leaves \
                 its water out"
                .to_owned(),
            Self::RechargeWithoutRiver { .. } => {
                "give the aquifer a river, or set `recharge` to 0, which leaves its water out"
                    .to_owned()
            }
            Self::SidesCross { .. } => {
                "redraw the edges there so that they clearly meet, or clearly stay apart".to_owned()
            }
            Self::BothBanks { .. } => {
                "draw both its banks, as one closed line around its width, or remove it".to_owned()
            }
            Self::NoLength { .. } => "give it two vertices that lie apart, or remove it".to_owned(),
            Self::TooManyPieces { .. } => "simplify the lines to fewer vertices".to_owned(),
            Self::CrossesItself { .. } => {
                "split it into several edges where it meets itself, or redraw the line".to_owned()
            }
            Self::Overlap { .. } => {
                "let them share one end point at most, or remove one of them".to_owned()
            }
            Self::OnEdge { .. } => "move it into the aquifer, off the line".to_owned(),
            Self::RimCrossesEdge { radius, .. } => {
                format!("move it at least {radius} away from the line, or correct the radius")
            }
            Self::OtherBank { .. } => {
                "remove it, correct its place, or place a well on its side".to_owned()
            }
            Self::AcrossAquifers { .. } => {
                "split the area into one neighbour for each side".to_owned()
            }
            Self::NoClosedForm { remedy, .. } => remedy.clone(),
            Self::StageCount { .. } => {
                "write one stage for each vertex of `line`, or one number for all".to_owned()
            }
        }
    }

    /// The other parts that take part.
    fn related(&self) -> Vec<(Subject, String)> {
        let label = |part: &Named, text: &str| (part.subject.clone(), text.to_owned());
        match self {
            Self::Overlap { other, .. } => vec![label(other, "the other edge")],
            Self::NoThickness { river, .. } => vec![label(river, "this river")],
            Self::RechargeWithoutEnd { well, .. } | Self::RechargeWithoutRiver { well, .. } => {
                vec![label(well, "stands in it")]
            }
            Self::OnEdge { edge, .. } | Self::RimCrossesEdge { edge, .. } => {
                vec![label(edge, "this edge")]
            }
            Self::OtherBank { edge, .. } => vec![label(edge, "the edge between")],
            Self::AcrossAquifers {
                first,
                second,
                edge,
                ..
            } => vec![
                label(first, "a well of the one aquifer"),
                label(second, "a well of the other"),
                label(edge, "the edge between"),
            ],
            Self::BothBanks { well, .. } => vec![label(well, "stands in the aquifer")],
            Self::NoClosedForm { well, others, .. } => {
                let mut parts: Vec<_> = others
                    .iter()
                    .map(|other| label(other, "also bounds it"))
                    .collect();
                parts.push(label(well, "stands in it"));
                parts
            }
            _ => Vec::new(),
        }
    }
}

/// The same subject with a key.
fn with_key(subject: &Subject, key: &'static str) -> Subject {
    match subject {
        Subject::Edge(index, _) => Subject::Edge(*index, Some(key)),
        other => other.clone(),
    }
}

impl From<OutlineError> for Refusal {
    fn from(error: OutlineError) -> Self {
        Self {
            subject: error.subject(),
            what: error.to_string(),
            why: error.why(),
            remedy: error.remedy(),
            related: error.related(),
        }
    }
}
