//! Where words go: results to standard output, all else to standard error.

use std::io::{self, IsTerminal, Write};

/// Columns of text, so that lines are easy to read.
pub const COLUMNS: usize = 88;

/// The user's terminal, or whatever stands in its place.
#[derive(Debug)]
pub struct Console {
    quiet: bool,
}

impl Console {
    /// A console that says only results and errors when quiet.
    pub fn new(quiet: bool) -> Self {
        Self { quiet }
    }

    /// Whether only results and errors are wanted.
    pub fn is_quiet(&self) -> bool {
        self.quiet
    }

    /// Prints a result.
    ///
    /// # Errors
    /// When standard output cannot be written, a closed pipe among the reasons.
    pub fn result(&self, text: &str) -> io::Result<()> {
        let mut out = io::stdout().lock();
        out.write_all(text.as_bytes())?;
        out.flush()
    }

    /// Prints a note, unless quiet.
    pub fn note(&self, text: &str) {
        if !self.quiet {
            self.error(text);
        }
    }

    /// Prints an error.
    pub fn error(&self, text: &str) {
        // Where even standard error is closed nobody is left to tell.
        let _ = writeln!(io::stderr().lock(), "{}", text.trim_end());
    }

    /// Whether standard error shows colour: a terminal, and neither NO_COLOR
    /// (no-color.org) nor a terminal without abilities speaks against it.
    pub fn colour_on_stderr(&self) -> bool {
        let unset = |name: &str| std::env::var_os(name).is_none_or(|value| value.is_empty());
        io::stderr().is_terminal()
            && unset("NO_COLOR")
            && std::env::var_os("TERM").is_none_or(|term| term != "dumb")
    }

    /// Whether a progress bar has someone to look at it.
    pub fn shows_progress(&self) -> bool {
        !self.quiet && io::stderr().is_terminal()
    }
}

/// Text broken into lines of at most [`COLUMNS`], each after the first
/// indented.
pub fn wrapped(text: &str, first: &str, indent: &str) -> String {
    let mut lines = String::from(first);
    let mut column = first.chars().count();
    let mut at_start = true;
    for word in text.split_whitespace() {
        let length = word.chars().count();
        if !at_start && column + 1 + length > COLUMNS {
            lines.push('\n');
            lines.push_str(indent);
            column = indent.chars().count();
            at_start = true;
        }
        if !at_start {
            lines.push(' ');
            column += 1;
        }
        lines.push_str(word);
        column += length;
        at_start = false;
    }
    lines.push('\n');
    lines
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn long_text_is_broken_between_words_and_indented() {
        let text = "word ".repeat(30);
        let lines = wrapped(&text, "- ", "  ");
        assert!(lines.lines().all(|line| line.chars().count() <= COLUMNS));
        assert!(lines.lines().skip(1).all(|line| line.starts_with("  word")));
        assert_eq!(
            lines.split_whitespace().filter(|w| *w == "word").count(),
            30
        );
    }
}
