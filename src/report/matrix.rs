//! Who draws down whom, as a shaded table.
//!
//! A page holds the wells that act most and the places that suffer most; the
//! rest is summed or left to `interference.csv`, and the page says so.

use serde::Serialize;

use crate::layers::Planned;
use crate::layers::words::Words;

/// Causing wells with a column of their own, at most.
const MOST_COLUMNS: usize = 12;
/// Wells and neighbours with a row, at most, each.
const MOST_ROWS: usize = 30;
/// Shades, the lightest 0.
const SHADES: f64 = 8.0;

/// The table.
#[derive(Serialize)]
pub struct Matrix {
    unit: &'static str,
    causes: Vec<String>,
    /// How many wells the column of others sums.
    others: usize,
    groups: Vec<Group>,
    /// What was left out, where something was.
    left_out: Option<String>,
}

#[derive(Serialize)]
struct Group {
    title: &'static str,
    rows: Vec<MatrixRow>,
}

#[derive(Serialize)]
struct MatrixRow {
    name: String,
    cells: Vec<Cell>,
    sum: String,
}

#[derive(Serialize)]
struct Cell {
    text: String,
    shade: u8,
    is_own: bool,
}

/// An affected well or neighbour.
struct Affected<'m> {
    name: String,
    itself: Option<usize>,
    parts_m: &'m [f64],
}

/// Makes the table.
pub fn matrix(planned: &Planned<'_>) -> Matrix {
    let words = Words::of(planned);
    let matrix = &planned.findings.interference;
    let wells: Vec<Affected<'_>> = matrix
        .well_rows()
        .iter()
        .enumerate()
        .map(|(well, parts_m)| Affected {
            name: words.well(well),
            itself: Some(well),
            parts_m,
        })
        .collect();
    let neighbours: Vec<Affected<'_>> = matrix
        .neighbour_rows()
        .iter()
        .enumerate()
        .filter_map(|(neighbour, parts_m)| {
            Some(Affected {
                name: words.neighbour(neighbour),
                itself: None,
                parts_m: parts_m.as_deref()?,
            })
        })
        .collect();
    let causes = leading(&effects(&wells, &neighbours), MOST_COLUMNS);
    let most_m = largest(wells.iter().chain(&neighbours));
    let counts = [wells.len(), neighbours.len()];
    let group = |title, rows| Group {
        title,
        rows: most_affected(rows)
            .iter()
            .map(|row| row_of(&words, row, &causes, most_m))
            .collect(),
    };
    Matrix {
        unit: planned.units().length_ending(),
        causes: causes.iter().map(|&well| words.well(well)).collect(),
        others: counts[0] - causes.len(),
        left_out: left_out(counts, causes.len()),
        groups: [group("Wells", wells), group("Neighbours", neighbours)]
            .into_iter()
            .filter(|group| !group.rows.is_empty())
            .collect(),
    }
}

/// What each well causes to others and to itself, all together, metres.
fn effects(wells: &[Affected<'_>], neighbours: &[Affected<'_>]) -> Vec<f64> {
    let mut effects = vec![0.0; wells.len()];
    for row in wells.iter().chain(neighbours) {
        for (effect, part_m) in effects.iter_mut().zip(row.parts_m) {
            *effect += part_m.abs();
        }
    }
    effects
}

/// The places of the largest values, in their order.
fn leading(values: &[f64], most: usize) -> Vec<usize> {
    let mut places: Vec<(usize, f64)> = values.iter().copied().enumerate().collect();
    // Stable: equals keep the plan's order.
    places.sort_by(|a, b| b.1.total_cmp(&a.1));
    places.truncate(most);
    let mut places: Vec<usize> = places.into_iter().map(|(place, _)| place).collect();
    places.sort_unstable();
    places
}

/// The rows that suffer most, in the plan's order.
fn most_affected(rows: Vec<Affected<'_>>) -> Vec<Affected<'_>> {
    let sums: Vec<f64> = rows
        .iter()
        .map(|row| row.parts_m.iter().sum::<f64>().abs())
        .collect();
    let kept = leading(&sums, MOST_ROWS);
    rows.into_iter()
        .enumerate()
        .filter(|(place, _)| kept.binary_search(place).is_ok())
        .map(|(_, row)| row)
        .collect()
}

/// The largest entry, metres.
fn largest<'a>(rows: impl Iterator<Item = &'a Affected<'a>>) -> f64 {
    rows.flat_map(|row| row.parts_m)
        .fold(0.0, |most, part_m| most.max(part_m.abs()))
}

fn row_of(words: &Words<'_>, row: &Affected<'_>, causes: &[usize], most_m: f64) -> MatrixRow {
    let part_m = |well: usize| row.parts_m.get(well).copied().unwrap_or(0.0);
    let cell = |value_m: f64, is_own: bool| Cell {
        text: words.bare_length(value_m),
        shade: shade(value_m, most_m),
        is_own,
    };
    let mut cells: Vec<Cell> = causes
        .iter()
        .map(|&well| cell(part_m(well), row.itself == Some(well)))
        .collect();
    let sum_m: f64 = row.parts_m.iter().sum();
    if causes.len() < row.parts_m.len() {
        let named_m: f64 = causes.iter().map(|&well| part_m(well)).sum();
        cells.push(cell(sum_m - named_m, false));
    }
    MatrixRow {
        name: row.name.clone(),
        cells,
        sum: words.bare_length(sum_m),
    }
}

/// How dark an entry is: most entries are far below the largest.
fn shade(value_m: f64, most_m: f64) -> u8 {
    if most_m <= 0.0 {
        return 0;
    }
    // Truncation is meant: at most 8.
    ((value_m.abs() / most_m).sqrt() * SHADES).round() as u8
}

/// What the table does not show.
fn left_out([wells, neighbours]: [usize; 2], columns: usize) -> Option<String> {
    let mut parts = Vec::new();
    if wells > columns {
        parts.push(format!(
            "the {columns} wells that cause most have a column each, the other {} share one",
            wells - columns
        ));
    }
    for (count, what) in [(wells, "wells"), (neighbours, "neighbours")] {
        if count > MOST_ROWS {
            parts.push(format!(
                "of {count} {what} the {MOST_ROWS} most drawn down have a row"
            ));
        }
    }
    (!parts.is_empty()).then(|| {
        format!(
            "Too large for a page: {}. The file interference.csv has every entry.",
            parts.join("; ")
        )
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_largest_keep_their_order() {
        assert_eq!(leading(&[1.0, 5.0, 2.0, 4.0], 2), [1, 3]);
    }

    /// √(1/4) · 8 = 4, by hand.
    #[test]
    fn a_quarter_of_the_largest_has_the_middle_shade() {
        assert_eq!(shade(-0.25, 1.0), 4);
        assert_eq!(shade(1.0, 1.0), 8);
    }
}
