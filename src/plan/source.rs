//! The texts a plan was read from, and places in them.

use std::ops::Range;

/// One file as it was read.
#[derive(Clone, Debug)]
pub struct Source {
    name: String,
    text: String,
    /// Byte at which each line begins.
    line_starts: Vec<usize>,
}

impl Source {
    pub(super) fn new(name: String, text: String) -> Self {
        let after_breaks = text.match_indices('\n').map(|(at, _)| at + 1);
        let line_starts = std::iter::once(0).chain(after_breaks).collect();
        Self {
            name,
            text,
            line_starts,
        }
    }

    /// The file, as the user named it.
    pub fn name(&self) -> &str {
        &self.name
    }

    /// Its whole text.
    pub fn text(&self) -> &str {
        &self.text
    }

    /// Line and column of a byte, both from 1; columns count characters.
    pub fn line_and_column(&self, byte: usize) -> (usize, usize) {
        let line = self.line_starts.partition_point(|start| *start <= byte);
        let start = self.line_start(line);
        let before = self.text.get(start..byte).unwrap_or("");
        (line, before.chars().count() + 1)
    }

    fn line_start(&self, line: usize) -> usize {
        let known = self.line_starts.get(line.saturating_sub(1));
        known.copied().unwrap_or(self.text.len())
    }

    /// The bytes of a line without its break, lines from 1.
    pub(super) fn line_range(&self, line: usize) -> Range<usize> {
        let start = self.line_start(line);
        let with_break = self.text.get(start..self.line_start(line + 1));
        let line = with_break.unwrap_or("").trim_end_matches(['\r', '\n']);
        start..start + line.len()
    }

    /// The nearest range that lies in the text, cuts no character and, except
    /// at the end of the text, holds one.
    pub(super) fn whole_characters(&self, range: Range<usize>) -> Range<usize> {
        let start = self.text.floor_char_boundary(range.start);
        let end = self.text.ceil_char_boundary(range.end.max(start + 1));
        start..end
    }
}

/// A piece of one of the sources.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Hash)]
pub struct Place {
    /// Index among the sources.
    pub(super) source: u32,
    /// First byte.
    pub(super) start: u32,
    /// Byte after the last.
    pub(super) end: u32,
}

impl Place {
    /// A place in source number `source`. Files are far smaller than 4 GB.
    pub(super) fn new(source: usize, range: Range<usize>) -> Self {
        let short = |number: usize| u32::try_from(number).unwrap_or(u32::MAX);
        Self {
            source: short(source),
            start: short(range.start),
            end: short(range.end),
        }
    }

    pub(super) fn range(self) -> Range<usize> {
        self.start as usize..self.end as usize
    }
}

/// All the sources of one plan: the plan itself first, then its layers.
#[derive(Clone, Debug, Default)]
pub struct Sources(Vec<Source>);

impl Sources {
    pub(super) fn add(&mut self, source: Source) -> usize {
        self.0.push(source);
        self.0.len() - 1
    }

    /// The plan itself.
    pub fn first(&self) -> Option<&Source> {
        self.0.first()
    }

    /// The source that a place lies in.
    pub fn of(&self, place: Place) -> Option<&Source> {
        self.0.get(place.source as usize)
    }

    /// The text at a place.
    pub fn text(&self, place: Place) -> &str {
        let text = self.of(place).and_then(|source| {
            let range = source.whole_characters(place.range());
            source.text.get(range)
        });
        text.unwrap_or("")
    }

    /// File, line and column of a place.
    pub fn locate(&self, place: Place) -> Location {
        let (file, (line, column)) = match self.of(place) {
            Some(source) => (
                source.name.clone(),
                source.line_and_column(place.start as usize),
            ),
            None => (String::new(), (1, 1)),
        };
        Location { file, line, column }
    }
}

/// A place as a person or an editor names it.
#[derive(Clone, Debug, PartialEq, Eq, serde::Serialize)]
pub struct Location {
    /// The file, as the user named it.
    pub file: String,
    /// From 1.
    pub line: usize,
    /// From 1, in characters.
    pub column: usize,
}

impl std::fmt::Display for Location {
    fn fmt(&self, formatter: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        write!(formatter, "{}:{}:{}", self.file, self.line, self.column)
    }
}
