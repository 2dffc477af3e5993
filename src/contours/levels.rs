//! Round contour levels.
//!
//! Method: steps of 1, 2, 2.5 or 5 × 10^k in the plan's unit, the coarsest
//! that puts at least ten levels between the extremes; neighbouring steps
//! differ by at most a factor of 2, so there are never more than about twenty.
//! Levels are whole multiples of the step, as a reader of a map expects.
//! Source: common practice, no source.

/// Most levels that a given interval may ask for.
const MOST_LEVELS: f64 = 2000.0;

/// Fewest levels of a default step.
const FEWEST_LEVELS: f64 = 10.0;

/// A level nearer than this share of the step to an extreme is left out: it
/// would only trace rounding errors along an edge of constant head.
const EXTREME_SHARE: f64 = 1e-6;

/// Why no levels can be chosen.
#[derive(Clone, Debug, PartialEq, thiserror::Error)]
pub enum LevelError {
    /// The interval is not above zero, or no number.
    #[error("a contour interval of {interval} is not above zero")]
    Interval {
        /// The interval, plan's unit.
        interval: f64,
    },
    /// The interval is far too small for the field.
    #[error(
        "an interval of {interval:?} gives {count:.0} contour levels between {min:.4} and {max:.4}, \
         more than 2000; an interval of {workable} would give {workable_count:.0}"
    )]
    TooMany {
        /// The interval, plan's unit.
        interval: f64,
        /// Levels it would give.
        count: f64,
        /// Smallest value of the field, plan's unit.
        min: f64,
        /// Largest value of the field, plan's unit.
        max: f64,
        /// A round interval that works, plan's unit.
        workable: f64,
        /// Levels that it gives.
        workable_count: f64,
    },
    /// The field's extremes, or the unit, are no numbers.
    #[error("no contour levels between {min} m and {max} m in units of {unit_in_metres} m")]
    Range {
        /// Smallest value of the field, metres.
        min: f64,
        /// Largest value of the field, metres.
        max: f64,
        /// Metres in one unit of the plan.
        unit_in_metres: f64,
    },
}

/// Levels strictly between two extremes, metres, rising; none where the field
/// is flat.
///
/// | argument | unit | domain |
/// |---|---|---|
/// | `min_m`, `max_m` | m | finite, min ≤ max |
/// | `unit_in_metres` | m | > 0: 1 for metres, 0.3048 for feet |
/// | `interval_m` | m | > 0; absent: 10 to 20 round levels |
///
/// Levels are whole multiples of the interval. Accuracy: 2 units in the last
/// place.
///
/// # Errors
/// `Range` and `Interval` for values outside the domain; `TooMany` where the
/// interval gives more than 2000 levels, with one that works.
pub fn round_levels(
    min_m: f64,
    max_m: f64,
    unit_in_metres: f64,
    interval_m: Option<f64>,
) -> Result<Vec<f64>, LevelError> {
    let range_error = LevelError::Range {
        min: min_m,
        max: max_m,
        unit_in_metres,
    };
    let usable = min_m.is_finite() && max_m.is_finite() && min_m <= max_m;
    if !usable || !unit_in_metres.is_finite() || unit_in_metres <= 0.0 {
        return Err(range_error);
    }
    let (min, max) = (min_m / unit_in_metres, max_m / unit_in_metres);
    // Differences below this are rounding errors of the field, not relief.
    let flat = 1e-12 * min.abs().max(max.abs());
    let Some(interval_m) = interval_m else {
        return Ok(if max - min > flat {
            multiples(min, max, default_step(min, max), unit_in_metres)
        } else {
            Vec::new()
        });
    };
    let interval = interval_m / unit_in_metres;
    if !interval.is_finite() || interval <= 0.0 {
        return Err(LevelError::Interval { interval });
    }
    let (first, last) = bounds(min, max, interval);
    let count = last - first + 1.0;
    // An interval that underflows the division leaves no number.
    if count.is_nan() || count > MOST_LEVELS {
        let workable = default_step(min, max);
        let (low, high) = bounds(min, max, workable);
        return Err(LevelError::TooMany {
            interval,
            count,
            min,
            max,
            workable,
            workable_count: high - low + 1.0,
        });
    }
    Ok(multiples(min, max, interval, unit_in_metres))
}

/// First and last multiple of a step strictly between two extremes.
fn bounds(min: f64, max: f64, step: f64) -> (f64, f64) {
    let first = (min / step + EXTREME_SHARE).floor() + 1.0;
    let last = (max / step - EXTREME_SHARE).ceil() - 1.0;
    (first, last)
}

/// The multiples of a step strictly between two extremes, times the unit.
fn multiples(min: f64, max: f64, step: f64, unit: f64) -> Vec<f64> {
    let (first, last) = bounds(min, max, step);
    // Negative where there are none, which the cast takes to zero.
    let count = (last - first + 1.0) as usize;
    let (digits, scale) = decimal(step);
    let mut levels: Vec<f64> = (0..count)
        .map(|index| (first + index as f64) * digits / scale * unit)
        .collect();
    levels.dedup();
    levels
}

/// A step as a whole number over a power of ten, where it is one: 3 · 1 / 10
/// is the 0.3 that people write, 3 · 0.1 is not.
fn decimal(step: f64) -> (f64, f64) {
    (0..=12)
        .map(|exponent| 10f64.powi(exponent))
        .map(|scale| ((step * scale).round(), scale))
        .find(|&(digits, scale)| digits >= 1.0 && (step * scale - digits).abs() < 1e-9 * digits)
        .unwrap_or((step, 1.0))
}

/// The coarsest round step with at least ten levels between the extremes.
fn default_step(min: f64, max: f64) -> f64 {
    let decade = (max - min).log10().floor();
    for exponent in [decade, decade - 1.0, decade - 2.0] {
        for digit in [5.0, 2.5, 2.0, 1.0] {
            let step = digit * 10f64.powf(exponent);
            let (first, last) = bounds(min, max, step);
            if last - first + 1.0 >= FEWEST_LEVELS {
                return step;
            }
        }
    }
    (max - min) / FEWEST_LEVELS
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn default_levels_are_ten_to_twenty_round_numbers() {
        for (min, max) in [
            (0.0, 1.0),
            (57.31, 61.4),
            (-3.0, 2.0),
            (1e-4, 9e-4),
            (0.0, 99.0),
        ] {
            let levels = round_levels(min, max, 1.0, None).unwrap();
            assert!((10..=21).contains(&levels.len()), "{min} {max}: {levels:?}");
            assert!(levels.iter().all(|&level| min < level && level < max));
        }
        assert_eq!(
            round_levels(0.0, 1.1, 1.0, None).unwrap(),
            [0.1, 0.2, 0.3, 0.4, 0.5, 0.6, 0.7, 0.8, 0.9, 1.0]
        );
    }

    #[test]
    fn levels_in_feet_are_whole_feet() {
        let levels = round_levels(30.0, 36.0, 0.3048, Some(0.3048)).unwrap();
        for level in levels {
            let feet = level / 0.3048;
            approx::assert_abs_diff_eq!(feet, feet.round(), epsilon = 1e-12);
        }
    }

    #[test]
    fn an_interval_with_too_many_levels_is_refused_with_one_that_works() {
        let refused = round_levels(0.0, 10.0, 1.0, Some(0.001)).unwrap_err();
        let LevelError::TooMany {
            count, workable, ..
        } = refused
        else {
            panic!("{refused}")
        };
        assert_eq!(count, 9999.0);
        assert!(round_levels(0.0, 10.0, 1.0, Some(workable)).unwrap().len() <= 20);
    }

    #[test]
    fn a_flat_field_has_no_levels_and_bad_numbers_are_refused() {
        assert!(round_levels(60.0, 60.0, 1.0, None).unwrap().is_empty());
        assert!(
            round_levels(60.0, 60.0 + 1e-14, 1.0, None)
                .unwrap()
                .is_empty()
        );
        assert!(round_levels(f64::NAN, 1.0, 1.0, None).is_err());
        assert!(round_levels(0.0, f64::INFINITY, 1.0, None).is_err());
        assert!(round_levels(0.0, 1.0, 1.0, Some(0.0)).is_err());
        assert!(round_levels(0.0, 1.0, 1.0, Some(f64::NAN)).is_err());
        assert!(round_levels(0.0, 1.0, 0.0, None).is_err());
        assert!(round_levels(1e300, 1e300, 1.0, Some(1e-300)).is_err());
        assert!(round_levels(1e20, 1e20 + 1e5, 1.0, Some(1e3)).is_ok());
    }
}
