//! Shows faults as a person reads them: the line with the offending text
//! underlined, what is wrong, why, and what to write instead.
//!
//! Only the lines that matter reach the renderer, and of a very long line
//! only the part around the fault, so that a layer of one 10 MB line costs
//! no more than a short plan.

use std::ops::Range;

use annotate_snippets::{
    Annotation, AnnotationKind, Element, Group, Level, Origin, Renderer, Snippet,
};

use super::fault::{Fault, PlanFaults};
use super::reader::MOST_FAULTS;
use super::source::{Place, Source};

/// More faults than this are counted, not shown.
const MOST_SHOWN: usize = 100;

/// Bytes of a long line that are shown on each side of a fault.
const MARGIN: usize = 100;

/// A line longer than this, in bytes, is shown in part.
const LONG_LINE: usize = 300;

/// Places up to this many lines apart share one excerpt.
const NEAR_LINES: usize = 20;

impl PlanFaults {
    /// All faults as text for a terminal, with colours if asked.
    pub fn render(&self, colours: bool) -> String {
        let renderer = if colours {
            Renderer::styled()
        } else {
            Renderer::plain()
        };
        let shown = self.faults.iter().take(MOST_SHOWN);
        let mut pages: Vec<String> = shown
            .map(|fault| renderer.render(&[self.report(fault)]))
            .collect();
        let hidden = self.faults.len().saturating_sub(MOST_SHOWN);
        // The reader stops collecting at some number.
        let at_least = if self.faults.len() == MOST_FAULTS {
            "at least "
        } else {
            ""
        };
        if hidden > 0 {
            pages.push(format!("and {at_least}{hidden} more faults"));
        }
        pages.join("\n\n")
    }

    fn report<'a>(&'a self, fault: &'a Fault) -> Group<'a> {
        let mut group = Level::ERROR
            .primary_title(fault.what.as_str())
            .elements(self.excerpts(fault));
        if let Some(why) = &fault.why {
            let level = Level::NOTE.with_name("why");
            group = group.element(level.message(why.as_str()));
        }
        group.element(Level::HELP.message(fault.help.as_str()))
    }

    /// The offending lines: near ones together, far ones one by one.
    fn excerpts<'a>(&'a self, fault: &'a Fault) -> Vec<Element<'a>> {
        let primary = Mark::new(fault.place, &fault.label, AnnotationKind::Primary);
        let related = fault.related.iter();
        let related =
            related.map(|(place, label)| Mark::new(*place, label, AnnotationKind::Context));
        let Some(source) = self.sources.of(fault.place) else {
            return Vec::new();
        };
        let (near, far): (Vec<_>, Vec<_>) =
            related.partition(|mark| are_near(source, fault.place, mark.place));
        let mut together = vec![primary];
        together.extend(near);
        let mut elements = excerpt(source, &together);
        for mark in far {
            if let Some(source) = self.sources.of(mark.place) {
                elements.extend(excerpt(source, &[mark]));
            }
        }
        elements
    }
}

/// A place to underline.
struct Mark<'a> {
    place: Place,
    label: &'a str,
    kind: AnnotationKind,
}

impl<'a> Mark<'a> {
    fn new(place: Place, label: &'a str, kind: AnnotationKind) -> Self {
        Self { place, label, kind }
    }

    fn annotation(&self, underlined: Range<usize>) -> Annotation<'a> {
        let label = (!self.label.is_empty()).then_some(self.label);
        self.kind.span(underlined).label(label)
    }
}

/// Whether two places fit one excerpt without cutting a line.
fn are_near(source: &Source, a: Place, b: Place) -> bool {
    if a.source != b.source {
        return false;
    }
    let lines = [a, b].map(|place| source.line_and_column(place.start as usize).0);
    let [first, last] = [lines[0].min(lines[1]), lines[0].max(lines[1])];
    let short = |line: usize| source.line_range(line).len() <= LONG_LINE;
    last - first <= NEAR_LINES && (first..=last).all(short)
}

/// The lines of some places that are near each other, underlined; the file,
/// line and column of the first stands above.
fn excerpt<'a>(source: &'a Source, marks: &[Mark<'a>]) -> Vec<Element<'a>> {
    let lines = marks
        .iter()
        .map(|mark| source.line_and_column(mark.place.start as usize).0);
    let (Some(first), Some(last)) = (lines.clone().min(), lines.max()) else {
        return Vec::new();
    };
    let window = source.line_range(first).start..source.line_range(last).end;
    match marks {
        [mark] if window.len() > LONG_LINE => part_of_line(source, first, window, mark),
        _ => whole_lines(source, first, window, marks),
    }
}

fn whole_lines<'a>(
    source: &'a Source,
    first_line: usize,
    window: Range<usize>,
    marks: &[Mark<'a>],
) -> Vec<Element<'a>> {
    let text = source.text().get(window.clone()).unwrap_or("");
    if text.trim().is_empty() {
        let origin = Origin::path(source.name()).line(first_line).char_column(1);
        return vec![origin.into()];
    }
    let annotations = marks.iter().map(|mark| {
        let line = source.line_and_column(mark.place.start as usize).0;
        let range = source.whole_characters(mark.place.range());
        // A place of many lines is underlined on its first.
        let start = range.start.clamp(window.start, window.end);
        let end = range
            .end
            .clamp(start, source.line_range(line).end.max(start));
        mark.annotation(start - window.start..end - window.start)
    });
    let snippet = Snippet::source(text)
        .path(source.name())
        .line_start(first_line)
        .annotations(annotations);
    vec![snippet.into()]
}

/// The part of a long line around a place.
fn part_of_line<'a>(
    source: &'a Source,
    line: usize,
    window: Range<usize>,
    mark: &Mark<'a>,
) -> Vec<Element<'a>> {
    let text = source.text();
    let range = source.whole_characters(mark.place.range());
    let start = range.start.clamp(window.start, window.end);
    let end = range.end.clamp(start, window.end);
    let from = text.floor_char_boundary(window.start.max(start.saturating_sub(MARGIN)));
    let to = text.ceil_char_boundary(window.end.min(end.min(start + MARGIN) + MARGIN));
    let end = text.floor_char_boundary(end.min(to));
    let before = if from > window.start { "…" } else { "" };
    let after = if to < window.end { "…" } else { "" };
    let body = text.get(from..to).unwrap_or("");
    let shift = before.len();
    let underlined = start - from + shift..end - from + shift;
    let column = source.line_and_column(start).1;
    let origin = Origin::path(source.name()).line(line).char_column(column);
    let snippet = Snippet::source(format!("{before}{body}{after}"))
        .line_start(line)
        .annotation(mark.annotation(underlined));
    vec![origin.into(), snippet.into()]
}
