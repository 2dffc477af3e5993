//! Why an outline cannot drain recharge.

use crate::outline::{Kind, Shape};
use crate::site::{Refusal, Subject};

/// The refusal of recharge in an outline that cannot drain it.
pub(super) fn refusal(flux_m_d: f64, shape: &Shape) -> Box<Refusal> {
    let kinds = shape.side_kinds();
    let is_closed = kinds.len() == 4 && !kinds.contains(&Kind::FixedHead);
    let why = if is_closed {
        "barriers close it on all sides, so that the head would rise or fall without end"
    } else {
        "recharge over an unbounded area would need a head that rises or falls without end \
         toward its far parts"
    };
    Box::new(Refusal {
        subject: Subject::Aquifer(Some("recharge")),
        what: format!(
            "the aquifer has a recharge of {flux_m_d} m/d, and its outline, a {}, cannot drain it",
            shape.name()
        ),
        why: Some(why.to_owned()),
        remedy: "set `recharge` to 0, which leaves its water out, or bound the aquifer by edges \
                 of which at least one is a river: a strip, a half-strip, a box or a disk"
            .to_owned(),
        related: Vec::new(),
    })
}
