//! Names that come from outside, made fit to stand in a sentence: on one line,
//! of bounded length, and unable to turn the text around them.

/// A text without line breaks, control characters and controls of direction.
pub fn one_line(text: &str) -> String {
    text.chars()
        .map(|c| {
            if c.is_control() || turns_text(c) {
                ' '
            } else {
                c
            }
        })
        .collect()
}

/// A name on one line of so many letters at most. One that runs from right to
/// left is set apart, so that the numbers beside it keep their places.
pub fn short(name: &str, most: usize) -> String {
    let line = one_line(name);
    let line = line.trim();
    let short = match line.char_indices().nth(most) {
        Some((end, _)) => format!("{}…", line.get(..end).unwrap_or("")),
        None => line.to_owned(),
    };
    if short.chars().any(runs_left) {
        format!("\u{2068}{short}\u{2069}")
    } else {
        short
    }
}

/// Marks, embeddings, overrides and isolates of direction, and separators of
/// lines and paragraphs (Unicode Standard Annex 9).
fn turns_text(c: char) -> bool {
    matches!(c, '\u{61c}' | '\u{200e}' | '\u{200f}' | '\u{2028}'..='\u{202e}' | '\u{2066}'..='\u{2069}')
}

/// Letters of scripts that run from right to left: the blocks that Unicode
/// sets aside for them.
fn runs_left(c: char) -> bool {
    matches!(c, '\u{590}'..='\u{8ff}' | '\u{fb1d}'..='\u{fdff}' | '\u{fe70}'..='\u{feff}' | '\u{10800}'..='\u{10fff}' | '\u{1e800}'..='\u{1efff}')
}

/// "Ostra", "Ostra and Marl Drain", "Ostra, Marl Drain and Mill leat".
pub fn listed(names: &[String]) -> String {
    match names {
        [] => String::new(),
        [only] => only.clone(),
        [firsts @ .., last] => format!("{} and {last}", firsts.join(", ")),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_name_cannot_break_or_turn_the_line() {
        assert_eq!(one_line("a\nb\u{202e}c"), "a b c");
    }

    #[test]
    fn a_long_name_is_cut_between_letters() {
        assert_eq!(short("déjà vu", 4), "déjà…");
        assert_eq!(short("four", 4), "four");
    }

    #[test]
    fn a_name_that_runs_left_is_set_apart() {
        assert_eq!(short("באר 1", 80), "\u{2068}באר 1\u{2069}");
    }
}
