//! Reads the points of `heads`: CSV with columns x, y and perhaps a name.
//!
//! A first line that does not begin with two numbers is a heading; the
//! columns may then come in any order, and others are passed over. Without
//! one they are x, y, name. All faults of a file are reported at once.

use std::path::Path;

use super::failure::Failure;

/// Faults that are listed one by one.
const MOST_FAULTS: usize = 20;

/// A point as the user wrote it.
#[derive(Clone, Debug, PartialEq)]
pub struct NamedPoint {
    /// Its name; empty where it has none.
    pub name: String,
    /// Its coordinates as they were written.
    pub written: [String; 2],
    /// Its coordinates in the plan's CRS.
    pub x: f64,
    /// See `x`.
    pub y: f64,
}

/// Where the columns are.
#[derive(Clone, Copy, Debug, PartialEq)]
struct Columns {
    x: usize,
    y: usize,
    name: Option<usize>,
}

/// Reads points from a file, or from standard input for "-".
///
/// # Errors
/// Every fault of the file with its line.
pub fn read(path: &Path) -> Result<Vec<NamedPoint>, Failure> {
    use std::io::Read;
    let mut bytes = Vec::new();
    let (name, read) = if path.as_os_str() == "-" {
        (
            "standard input".into(),
            std::io::stdin().read_to_end(&mut bytes),
        )
    } else {
        let file = std::fs::File::open(path);
        (
            path.display().to_string(),
            file.and_then(|mut file| file.read_to_end(&mut bytes)),
        )
    };
    read.map_err(|error| Failure::Refused(format!("cannot read {name}: {error}")))?;
    parse(&name, &bytes).map_err(Failure::Refused)
}

/// The points of a CSV text, or its faults.
fn parse(name: &str, bytes: &[u8]) -> Result<Vec<NamedPoint>, String> {
    let text = bytes.strip_prefix(b"\xef\xbb\xbf").unwrap_or(bytes);
    let mut reader = csv::ReaderBuilder::new()
        .has_headers(false)
        .flexible(true)
        .trim(csv::Trim::All)
        .from_reader(text);
    let mut points = Vec::new();
    let mut faults = Vec::new();
    let mut columns = None;
    for record in reader.records() {
        let record = match record {
            Ok(record) => record,
            Err(error) => {
                faults.push(unreadable(name, &error));
                continue;
            }
        };
        let line = record.position().map_or(0, csv::Position::line);
        let parsed = match columns {
            Some(known) => point(&record, known).map(Some),
            None => first_line(&record).and_then(|(found, is_heading)| {
                columns = Some(found);
                if is_heading {
                    Ok(None)
                } else {
                    point(&record, found).map(Some)
                }
            }),
        };
        match parsed {
            Ok(point) => points.extend(point),
            Err(fault) => faults.push(format!("{name}:{line}: {fault}")),
        }
        if columns.is_none() {
            // Without columns no further line can be understood.
            break;
        }
    }
    if faults.is_empty() {
        Ok(points)
    } else {
        Err(listed(faults))
    }
}

/// The columns that the first line shows, and whether it is a heading.
fn first_line(record: &csv::StringRecord) -> Result<(Columns, bool), String> {
    let plain = Columns {
        x: 0,
        y: 1,
        name: Some(2),
    };
    let is_number = |index: usize| {
        record
            .get(index)
            .is_some_and(|cell| cell.parse::<f64>().is_ok())
    };
    if is_number(0) || is_number(1) {
        return Ok((plain, false));
    }
    let find = |wanted: &str| {
        record
            .iter()
            .position(|cell| cell.eq_ignore_ascii_case(wanted))
    };
    match (find("x"), find("y")) {
        (Some(x), Some(y)) => Ok((
            Columns {
                x,
                y,
                name: find("name"),
            },
            true,
        )),
        _ => {
            let shown: Vec<&str> = record.iter().take(5).collect();
            let hint = if shown.iter().any(|cell| cell.contains(';')) {
                "; separate the columns with commas, and write decimals with a point"
            } else {
                ""
            };
            Err(format!(
                "the line {:?} is neither a point nor a heading with columns x and y{hint}",
                shown.join(",")
            ))
        }
    }
}

/// The point that a line holds.
fn point(record: &csv::StringRecord, columns: Columns) -> Result<NamedPoint, String> {
    let cell = |index: usize, what: &str| {
        record
            .get(index)
            .filter(|cell| !cell.is_empty())
            .ok_or_else(|| format!("there is no {what}"))
    };
    let number = |text: &str, what: &str| {
        text.parse::<f64>()
            .ok()
            .filter(|value| value.is_finite())
            .ok_or_else(|| format!("{what} is {text:?}, not a finite number"))
    };
    let (x, y) = (cell(columns.x, "x")?, cell(columns.y, "y")?);
    Ok(NamedPoint {
        name: columns
            .name
            .and_then(|index| record.get(index))
            .unwrap_or("")
            .to_owned(),
        written: [x.to_owned(), y.to_owned()],
        x: number(x, "x")?,
        y: number(y, "y")?,
    })
}

/// A record that is no text.
fn unreadable(name: &str, error: &csv::Error) -> String {
    match (error.position(), error.kind()) {
        (Some(position), csv::ErrorKind::Utf8 { .. }) => format!(
            "{name}:{}: the line is not UTF-8; save the file as UTF-8",
            position.line()
        ),
        (Some(position), _) => format!("{name}:{}: {error}", position.line()),
        (None, _) => format!("{name}: {error}"),
    }
}

/// The faults in one text, the first without a line break before it.
fn listed(faults: Vec<String>) -> String {
    let count = faults.len();
    let mut text = faults
        .into_iter()
        .take(MOST_FAULTS)
        .collect::<Vec<_>>()
        .join("\nerror: ");
    if count > MOST_FAULTS {
        text.push_str(&format!("\nerror: … and {} more", count - MOST_FAULTS));
    }
    text
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_heading_may_put_the_columns_in_any_order() {
        let points = parse("p", b"name,y,x\nA,2,1\n").unwrap();
        assert_eq!((points[0].x, points[0].y), (1.0, 2.0));
        assert_eq!(points[0].name, "A");
    }

    #[test]
    fn without_a_heading_the_columns_are_x_y_and_name() {
        let points = parse("p", b"1,2,A\n3,4\n").unwrap();
        assert_eq!((points[0].x, points[0].y), (1.0, 2.0));
        assert_eq!(points[1].name, "");
    }

    #[test]
    fn every_fault_is_reported_with_its_line() {
        let faults = parse("p.csv", b"x,y\n1,2\nnan,2\n1\n1,b\n").unwrap_err();
        for fault in [
            "p.csv:3: x is \"nan\"",
            "p.csv:4: there is no y",
            "p.csv:5: y is \"b\"",
        ] {
            assert!(faults.contains(fault), "{faults}");
        }
    }
}
