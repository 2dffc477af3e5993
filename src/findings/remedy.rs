//! By how much rates would have to fall to clear a flag.
//!
//! Heads answer linearly to rates, and well loss quadratically, so the rate
//! that just clears a flag follows in closed form. Where no rate of the
//! causing well, down to standstill, clears it, none is invented.

/// What would clear a flag.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Remedy {
    /// The causing well's rate that just clears it, all others unchanged;
    /// none where stopping that well would not clear it.
    pub alone: Option<NewRate>,
    /// The common factor on rates that just clears it; none where stopping
    /// them all would not clear it.
    pub together: Option<CommonFactor>,
    /// Whether barriers close the aquifer, so that pumping and injection must
    /// balance and no rate may change alone.
    pub must_balance: bool,
}

impl Remedy {
    /// A remedy in an aquifer that a river feeds.
    pub fn new(alone: Option<NewRate>, together: Option<CommonFactor>) -> Self {
        Self {
            alone,
            together,
            must_balance: false,
        }
    }

    /// What is left of it where pumping and injection must balance: all rates
    /// in one proportion.
    pub fn in_balance(self) -> Self {
        let together = self.together.filter(|common| common.rates == Rates::All);
        Self {
            alone: None,
            together,
            must_balance: true,
        }
    }
}

/// A well's rate, reduced.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct NewRate {
    /// The well, by its index in `Site::wells`.
    pub well: usize,
    /// Its rate in the plan, m³/d; negative injects.
    pub from_m3_d: f64,
    /// Its rate that just clears the flag, m³/d.
    pub to_m3_d: f64,
}

/// Several rates, reduced in proportion.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct CommonFactor {
    /// Which rates.
    pub rates: Rates,
    /// What they are multiplied by, 0 to 1.
    pub factor: f64,
}

/// The rates that a common factor reduces.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Rates {
    /// Every well's.
    All,
    /// Every well's but the flagged one's.
    AllOthers,
}

impl NewRate {
    /// A rate multiplied by a factor.
    pub fn scaled(well: usize, from_m3_d: f64, factor: f64) -> Self {
        Self {
            well,
            from_m3_d,
            to_m3_d: from_m3_d * factor,
        }
    }
}

/// The largest factor f from 0 to 1 with linear·f + quadratic·f² ≤ room, where
/// f = 1 exceeds the room; none where even f = 0 does.
///
/// The root is written so that it does not cancel: f = 2 room/(linear +
/// √(linear² + 4 quadratic·room)). Where linear + quadratic > room ≥ 0 the
/// discriminant is never negative.
pub fn largest_factor(linear: f64, quadratic: f64, room: f64) -> Option<f64> {
    if room.is_nan() || room < 0.0 {
        return None;
    }
    let root = (linear * linear + 4.0 * quadratic * room).max(0.0).sqrt();
    let factor = 2.0 * room / (linear + root);
    factor.is_finite().then(|| factor.clamp(0.0, 1.0))
}

#[cfg(test)]
mod tests {
    use super::*;

    /// 3f + 4f² = 1 has the root f = 1/4, by hand.
    #[test]
    fn the_factor_solves_the_quadratic() {
        assert_eq!(largest_factor(3.0, 4.0, 1.0), Some(0.25));
    }

    /// 10f − 4f² = 4 has the roots 1/2 and 2, by hand: the smaller counts.
    #[test]
    fn where_well_loss_works_against_the_drawdown_the_smaller_root_counts() {
        assert_eq!(largest_factor(10.0, -4.0, 4.0), Some(0.5));
    }

    #[test]
    fn where_nothing_is_left_after_standstill_no_factor_is_invented() {
        assert_eq!(largest_factor(3.0, 4.0, -0.1), None);
    }
}
