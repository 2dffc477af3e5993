//! The level in a well against a bound: what the three rules on levels share.

use crate::findings::WellFinding;
use crate::findings::flag::Cause;
use crate::findings::neighbour::largest;
use crate::findings::remedy::{CommonFactor, NewRate, Rates, Remedy, largest_factor};
use crate::site::Site;

/// On which side of its bound a level must stay.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Bound {
    /// Above it: drawdown counts against it.
    Lower(f64),
    /// Below it: rise counts against it.
    Upper(f64),
}

/// The well whose level breaks its bound, and how its drawdown comes about.
pub struct Level<'a> {
    /// The site.
    pub site: &'a Site,
    /// The well.
    pub finding: &'a WellFinding,
    /// The drawdown that each well causes at it, its own on the diagonal.
    pub row: &'a [f64],
    /// Whether the well's own loss counts: not in the aquifer beside it.
    pub with_loss: bool,
}

impl Level<'_> {
    /// Who causes it, and which rates would clear it.
    pub fn cause_and_remedy(&self, bound: Bound) -> (Option<Cause>, Remedy) {
        // Everything is written for a lower bound; a rise is its mirror.
        let (sign, room_m) = match bound {
            Bound::Lower(limit_m) => (1.0, self.finding.ambient_m - limit_m),
            Bound::Upper(limit_m) => (-1.0, limit_m - self.finding.ambient_m),
        };
        let loss_m = if self.with_loss {
            sign * self.finding.well_loss_m
        } else {
            0.0
        };
        let parts: Vec<f64> = self.row.iter().map(|part| sign * part).collect();
        let linear_m: f64 = parts.iter().sum();
        let together = largest_factor(linear_m, loss_m, room_m).map(|factor| CommonFactor {
            rates: Rates::All,
            factor,
        });
        let with_own_loss: Vec<f64> = parts
            .iter()
            .enumerate()
            .map(|(well, part)| {
                part + if well == self.finding.well {
                    loss_m
                } else {
                    0.0
                }
            })
            .collect();
        let Some(cause) = largest(&with_own_loss) else {
            return (None, Remedy::new(None, together));
        };
        let part_m = parts.get(cause).copied().unwrap_or(0.0);
        let own_loss_m = if cause == self.finding.well {
            loss_m
        } else {
            0.0
        };
        let left_m = room_m - (linear_m + loss_m - part_m - own_loss_m);
        let alone = largest_factor(part_m, own_loss_m, left_m).and_then(|factor| {
            let well = self.site.wells.get(cause)?;
            Some(NewRate::scaled(cause, well.pumping.si(), factor))
        });
        let cause = Cause {
            well: cause,
            drawdown_m: sign * (part_m + own_loss_m),
        };
        (Some(cause), Remedy::new(alone, together))
    }
}
