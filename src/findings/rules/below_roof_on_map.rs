//! `below-roof` on the map: where, and over which area, the aquifer is no
//! longer confined.

use super::Judged;
use crate::findings::flag::{Flag, FlagCode, Measure, Who};

/// One flag for the whole map.
pub fn flags(judged: &Judged<'_>) -> Vec<Flag> {
    judged
        .roof
        .and_then(|roof| {
            Some(Flag {
                code: FlagCode::BelowRoof,
                who: Who::Map,
                measure: Measure::RoofOnMap {
                    area_m2: roof.area_m2,
                    lowest_m: roof.lowest_m?,
                    roof_m: roof.roof_m,
                },
                cause: roof.cause,
                remedy: Some(roof.remedy),
            })
        })
        .into_iter()
        .collect()
}
