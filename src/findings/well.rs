//! Each well's drawdown split into its own part, interference and well loss,
//! and the level that stands in the well.
//!
//! Own part and interference come from the matrix. Well loss is C Q abs(Q):
//! it lowers the level in a pumping well and raises it in an injecting one
//! (Jacob 1947, s = BQ + CQ²). Level in the well = ambient head − drawdown.

use super::{InterferenceMatrix, Solution};

/// What happens in one well.
#[derive(Clone, Debug, PartialEq)]
pub struct WellFinding {
    /// The well, by its index in `Site::wells`.
    pub well: usize,
    /// Its rate, m³/d; negative injects.
    pub pumping_m3_d: f64,
    /// The head at the well before any pumping, metres.
    pub ambient_m: f64,
    /// The drawdown it causes at its own rim, metres.
    pub own_m: f64,
    /// The drawdown that all other wells cause there, metres.
    pub interference_m: f64,
    /// The drawdown between the aquifer and the inside of the well, metres.
    pub well_loss_m: f64,
    /// Share of the interference in the drawdown; see [`interference_share`].
    pub interference_share: Option<f64>,
}

impl WellFinding {
    /// The whole drawdown in the well, metres.
    pub fn drawdown_m(&self) -> f64 {
        self.own_m + self.interference_m + self.well_loss_m
    }

    /// The level in the well, metres.
    pub fn level_m(&self) -> f64 {
        self.ambient_m - self.drawdown_m()
    }

    /// The head in the aquifer at the well's rim, metres: without well loss.
    pub fn rim_head_m(&self) -> f64 {
        self.ambient_m - self.own_m - self.interference_m
    }
}

/// Splits the drawdown of every well.
pub fn all(solution: &Solution, matrix: &InterferenceMatrix) -> Vec<WellFinding> {
    solution
        .site()
        .wells
        .iter()
        .enumerate()
        .map(|(index, well)| {
            let row = matrix.at_well(index);
            let own_m = row.get(index).copied().unwrap_or(f64::NAN);
            let interference_m = row
                .iter()
                .enumerate()
                .filter(|&(cause, _)| cause != index)
                .map(|(_, drawdown_m)| drawdown_m)
                .sum();
            let pumping_m3_d = well.pumping.si();
            WellFinding {
                well: index,
                pumping_m3_d,
                ambient_m: solution
                    .field_of_well(index)
                    .map_or(f64::NAN, |field| field.ambient_head_m(well.at)),
                own_m,
                interference_m,
                well_loss_m: well.well_loss.si() * pumping_m3_d * pumping_m3_d.abs(),
                interference_share: interference_share(pumping_m3_d, own_m, interference_m),
            }
        })
        .collect()
}

/// The share (0 to 1) of a well's drawdown that other wells cause:
/// I/(own + I), well loss left out.
///
/// An injecting well has a rise instead, and what counts is the rise that
/// others add. Where the others work against the well (an injecting
/// neighbour beside a pump), they take nothing from it and the share is 0.
/// None for an idle well, whose own part is nothing.
pub fn interference_share(pumping_m3_d: f64, own_m: f64, interference_m: f64) -> Option<f64> {
    let direction = if pumping_m3_d < 0.0 { -1.0 } else { 1.0 };
    let own_m = direction * own_m;
    let by_others_m = (direction * interference_m).max(0.0);
    (own_m > 0.0).then(|| by_others_m / (own_m + by_others_m))
}

#[cfg(test)]
mod tests {
    use super::*;

    /// By the definition I/(own + I): 1 m of 4 m is a quarter.
    #[test]
    fn a_quarter_of_the_drawdown_by_others_is_a_share_of_a_quarter() {
        assert_eq!(interference_share(100.0, 3.0, 1.0), Some(0.25));
        assert_eq!(interference_share(-100.0, -3.0, -1.0), Some(0.25));
    }

    #[test]
    fn wells_that_work_against_each_other_have_no_interference_share() {
        assert_eq!(interference_share(100.0, 3.0, -1.0), Some(0.0));
        assert_eq!(interference_share(-100.0, -3.0, 1.0), Some(0.0));
    }

    #[test]
    fn an_idle_well_has_no_share() {
        assert_eq!(interference_share(0.0, 0.0, 1.0), None);
    }
}
