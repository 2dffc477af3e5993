//! Finds edges with the aquifer on both their banks.
//!
//! Such an edge joins two others, or one and infinity, without parting the
//! aquifer: a dyke drawn as a line from a lake to a river. Its two banks lie in
//! one place, so their densities act alike and no equation tells them apart.

use std::collections::BTreeSet;

use super::boundary::Bit;
use super::error::OutlineError;
use super::names;
use super::recognise::Context;

/// That the loops of a face pass along no edge both ways.
///
/// # Errors
/// `BothBanks` for each edge that they do.
pub(super) fn check(context: Context<'_>, loops: &[Vec<Bit>]) -> Result<(), Vec<OutlineError>> {
    let bits: Vec<&Bit> = loops.iter().flatten().collect();
    let runs_back = |bit: &&&Bit| bits.iter().any(|other| is_other_bank(bit, other));
    let slits: BTreeSet<usize> = bits.iter().filter(runs_back).map(|bit| bit.edge).collect();
    if slits.is_empty() {
        return Ok(());
    }
    let well = context.wells.first().copied().unwrap_or(0);
    let fault = |edge| OutlineError::BothBanks {
        edge: names::edge(context.site, edge),
        well: names::well(context.site, well),
    };
    Err(slits.into_iter().map(fault).collect())
}

/// Whether two pieces are one piece of an edge, passed both ways. Both then
/// end in the very same places of the arrangement.
fn is_other_bank(bit: &Bit, other: &Bit) -> bool {
    bit.edge == other.edge
        && bit.from == other.to
        && bit.to == other.from
        && bit.direction.dot(&other.direction) < 0.0
}
