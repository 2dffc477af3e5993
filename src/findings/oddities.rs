//! What can be computed but looks wrong in a plan: slips of the pen that a
//! planner should look at before believing any result.
//!
//! The limits are common practice, no source: boreholes are rarely wider than
//! 2 m across, two wells rarely stand within 2 m of each other, aquifers worth
//! a well field have transmissivities of 1 to 100 000 m²/d.

use super::{NeighbourFinding, Solution, WellFinding};

/// The widest usual borehole radius, metres.
const WIDEST_RADIUS_M: f64 = 1.0;
/// Wells closer than this are probably one well given twice, metres.
const SAME_PLACE_M: f64 = 2.0;
/// The usual range of transmissivities, m²/d.
const USUAL_TRANSMISSIVITY_M2_D: [f64; 2] = [1.0, 1e5];
/// Pairs are looked at up to this many wells.
const MOST_WELLS_FOR_PAIRS: usize = 3000;

/// Something that looks wrong.
#[derive(Clone, Debug, PartialEq)]
pub enum Oddity {
    /// No roof is given, so whether the aquifer stays confined is not checked.
    NoRoof,
    /// A transmissivity outside the usual range, m²/d.
    UnusualTransmissivity(f64),
    /// The aquifer is not confined at a well even before pumping.
    UnconfinedBeforePumping {
        /// The well.
        well: usize,
        /// The head before pumping, metres.
        ambient_m: f64,
        /// Elevation of the roof, metres.
        roof_m: f64,
    },
    /// A well that neither pumps nor injects.
    IdleWell(usize),
    /// A borehole of unusual radius, metres.
    WideWell(usize, f64),
    /// Two wells at nearly the same place; their distance, metres.
    WellsAtOnePlace(usize, usize, f64),
    /// A lowest level above the head before pumping.
    LowestLevelAboveHead {
        /// The well.
        well: usize,
        /// Its lowest level, metres.
        lowest_m: f64,
        /// The head before pumping, metres.
        ambient_m: f64,
    },
    /// A level in a well below the aquifer's base: no such rate is possible.
    BelowBase {
        /// The well.
        well: usize,
        /// The level in it, metres.
        level_m: f64,
        /// Elevation of the base, metres.
        base_m: f64,
    },
    /// A neighbour outside every aquifer that holds a well.
    NeighbourOutside(usize),
    /// A neighbour without an allowed drawdown.
    NeighbourWithoutLimit(usize),
}

/// Everything that looks wrong, the aquifer first, then wells, then
/// neighbours, in the plan's order.
pub fn oddities(
    solution: &Solution,
    wells: &[WellFinding],
    neighbours: &[NeighbourFinding],
) -> Vec<Oddity> {
    let mut found = of_aquifer(solution);
    for finding in wells {
        found.extend(of_well(solution, finding));
    }
    found.extend(pairs(solution));
    for finding in neighbours {
        if finding.worst.is_none() {
            found.push(Oddity::NeighbourOutside(finding.neighbour));
        } else if finding.allowed_m.is_none() {
            found.push(Oddity::NeighbourWithoutLimit(finding.neighbour));
        }
    }
    found
}

/// What looks wrong with the aquifer.
fn of_aquifer(solution: &Solution) -> Vec<Oddity> {
    let aquifer = &solution.site().aquifer;
    let mut found = Vec::new();
    let transmissivity_m2_d = aquifer.transmissivity.si();
    let [least, most] = USUAL_TRANSMISSIVITY_M2_D;
    if !(least..=most).contains(&transmissivity_m2_d) {
        found.push(Oddity::UnusualTransmissivity(transmissivity_m2_d));
    }
    if aquifer.roof.is_none() {
        found.push(Oddity::NoRoof);
    }
    found
}

/// What looks wrong with one well.
fn of_well(solution: &Solution, finding: &WellFinding) -> Vec<Oddity> {
    let site = solution.site();
    let Some(well) = site.wells.get(finding.well) else {
        return vec![];
    };
    let (index, ambient_m) = (finding.well, finding.ambient_m);
    let roof_m = site.aquifer.roof.map(|roof| roof.si());
    let base_m = roof_m
        .zip(site.aquifer.thickness)
        .map(|(roof_m, thickness)| roof_m - thickness.si());
    let level_m = finding.level_m();
    let unconfined = roof_m.filter(|&roof_m| ambient_m < roof_m);
    let lowest = well
        .lowest_level
        .map(|level| level.si())
        .filter(|&lowest_m| lowest_m > ambient_m);
    let below_base = base_m.filter(|&base_m| level_m < base_m);
    [
        (finding.pumping_m3_d == 0.0).then_some(Oddity::IdleWell(index)),
        (well.radius.si() > WIDEST_RADIUS_M).then(|| Oddity::WideWell(index, well.radius.si())),
        unconfined.map(|roof_m| Oddity::UnconfinedBeforePumping {
            well: index,
            ambient_m,
            roof_m,
        }),
        lowest.map(|lowest_m| Oddity::LowestLevelAboveHead {
            well: index,
            lowest_m,
            ambient_m,
        }),
        below_base.map(|base_m| Oddity::BelowBase {
            well: index,
            level_m,
            base_m,
        }),
    ]
    .into_iter()
    .flatten()
    .collect()
}

/// Wells that stand at nearly the same place.
fn pairs(solution: &Solution) -> Vec<Oddity> {
    let wells = &solution.site().wells;
    if wells.len() > MOST_WELLS_FOR_PAIRS {
        return vec![];
    }
    let mut found = Vec::new();
    for (a, first) in wells.iter().enumerate() {
        for (b, second) in wells.iter().enumerate().skip(a + 1) {
            let distance_m = (first.at - second.at).norm();
            if distance_m < SAME_PLACE_M {
                found.push(Oddity::WellsAtOnePlace(a, b, distance_m));
            }
        }
    }
    found
}
