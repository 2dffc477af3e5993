//! Reads the list of EPSG codes that were checked against a second projection
//! library.
//!
//! `checked.txt` is written by `tests/references/crs/sweep_epsg.py` and built
//! into the program; its header says what its columns mean. It is searched
//! line by line: one plan asks for one code.

/// The list as the sweep wrote it.
pub(super) const LIST: &str = include_str!("checked.txt");

/// What the sweep says of one code.
#[derive(Clone, Debug, PartialEq)]
pub(super) enum Verdict<'a> {
    /// Agrees within a metre over `domain`.
    Accepted(Accepted<'a>),
    /// Does not agree, or could not be compared.
    Refused {
        /// The nearest accepted code.
        alternative: Option<u32>,
    },
}

/// A code that agrees with the second library.
#[derive(Clone, Debug, PartialEq)]
pub(super) struct Accepted<'a> {
    /// Where it was compared.
    pub(super) domain: Domain,
    /// Largest difference, millimetres, where above 1 cm.
    pub(super) difference_mm: Option<f64>,
    /// Registered accuracy of a coarse datum shift, metres.
    pub(super) shift_accuracy_m: Option<f64>,
    /// A datum shift that replaces the definition's own.
    pub(super) shift: Option<&'a str>,
}

/// A box of WGS 84 degrees; `east` may pass 180.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct Domain {
    pub(super) west: f64,
    pub(super) south: f64,
    pub(super) east: f64,
    pub(super) north: f64,
}

impl Domain {
    /// Whether a place lies in the box, to within a hundredth of a millimetre.
    pub(super) fn holds(&self, longitude: f64, latitude: f64) -> bool {
        const SLACK_DEG: f64 = 1e-10;
        let within = |longitude: f64| {
            longitude >= self.west - SLACK_DEG && longitude <= self.east + SLACK_DEG
        };
        latitude >= self.south - SLACK_DEG
            && latitude <= self.north + SLACK_DEG
            && [-360.0, 0.0, 360.0]
                .iter()
                .any(|turn| within(longitude + turn))
    }
}

/// What the list says of a code; none where it is not on the list.
pub(super) fn look_up(code: u32) -> Option<Verdict<'static>> {
    LIST.lines()
        .filter(|line| !line.starts_with('#'))
        .filter_map(row)
        .find(|(codes, _)| codes.contains(&code))
        .map(|(_, verdict)| verdict)
}

/// One line of the list; none where it is malformed (a test reads them all).
pub(super) fn row(line: &str) -> Option<(std::ops::RangeInclusive<u32>, Verdict<'_>)> {
    let (codes, rest) = line.split_once(' ')?;
    let (first, last) = codes.split_once('-').unwrap_or((codes, codes));
    let codes = first.parse().ok()?..=last.parse().ok()?;
    if let Some(alternative) = rest.strip_prefix("refused ") {
        let alternative: u32 = alternative.parse().ok()?;
        let alternative = (alternative > 0).then_some(alternative);
        return Some((codes, Verdict::Refused { alternative }));
    }
    accepted(rest).map(|accepted| (codes, Verdict::Accepted(accepted)))
}

fn accepted(rest: &str) -> Option<Accepted<'_>> {
    let mut words = rest.split(' ');
    let mut degrees = || words.next()?.parse::<f64>().ok();
    let domain = Domain {
        west: degrees()?,
        south: degrees()?,
        east: degrees()?,
        north: degrees()?,
    };
    let mut found = Accepted {
        domain,
        difference_mm: None,
        shift_accuracy_m: None,
        shift: None,
    };
    for word in words {
        let (key, value) = word.split_at_checked(1)?;
        match key {
            "d" => found.difference_mm = Some(value.parse().ok()?),
            "s" => found.shift_accuracy_m = Some(value.parse().ok()?),
            "t" => found.shift = Some(value),
            _ => return None,
        }
    }
    Some(found)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_line_of_the_list_is_read() {
        let lines = LIST.lines().filter(|line| !line.starts_with('#'));
        let unread: Vec<&str> = lines.filter(|line| row(line).is_none()).collect();
        assert!(unread.is_empty(), "{unread:?}");
    }

    /// A floor under the sweep: a list that shrinks is a fault of the sweep.
    #[test]
    fn four_thousand_codes_are_accepted() {
        let accepted: u32 = LIST
            .lines()
            .filter_map(row)
            .filter(|(_, verdict)| matches!(verdict, Verdict::Accepted(_)))
            .map(|(codes, _)| codes.end() - codes.start() + 1)
            .sum();
        assert!(accepted >= 4_000, "{accepted}");
    }

    #[test]
    fn every_suggested_code_is_itself_accepted() {
        let rows: Vec<_> = LIST.lines().filter_map(row).collect();
        let accepted: std::collections::HashSet<u32> = rows
            .iter()
            .filter(|(_, verdict)| matches!(verdict, Verdict::Accepted(_)))
            .flat_map(|(codes, _)| codes.clone())
            .collect();
        for (codes, verdict) in &rows {
            if let Verdict::Refused {
                alternative: Some(code),
            } = verdict
            {
                assert!(accepted.contains(code), "{codes:?} suggests {code}");
            }
        }
    }

    #[test]
    fn a_domain_across_the_antimeridian_holds_both_its_sides() {
        let domain = Domain {
            west: 174.0,
            south: 0.0,
            east: 186.0,
            north: 84.0,
        };
        assert!(domain.holds(179.0, 10.0) && domain.holds(-179.0, 10.0));
        assert!(!domain.holds(-173.0, 10.0) && !domain.holds(173.0, 10.0));
    }
}
