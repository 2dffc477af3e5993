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
use super::source::{Place, Source, Sources};

/// More faults than this are counted, not shown.
const MOST_SHOWN: usize = 100;

/// Characters of a long line that are shown on each side of a fault, bytes.
const MARGIN: usize = 120;

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
        if hidden > 0 {
            pages.push(format!("and {hidden} more faults like these"));
        }
        pages.join("\n\n")
    }

    fn report<'a>(&'a self, fault: &'a Fault) -> Group<'a> {
        let mut elements = window(&self.sources, fault.place, &fault.label, true);
        for (place, label) in &fault.related {
            elements.extend(window(&self.sources, *place, label, false));
        }
        let mut group = Level::ERROR
            .primary_title(fault.what.as_str())
            .elements(elements);
        if let Some(why) = &fault.why {
            let level = Level::NOTE.with_name("why");
            group = group.element(level.message(why.as_str()));
        }
        group.element(Level::HELP.message(fault.help.as_str()))
    }
}

/// The line of a place with the place underlined, below its file, line and
/// column.
fn window<'a>(
    sources: &'a Sources,
    place: Place,
    label: &'a str,
    primary: bool,
) -> Vec<Element<'a>> {
    let Some(source) = sources.of(place) else {
        return Vec::new();
    };
    let range = source.whole_characters(place.range());
    let (line, column) = source.line_and_column(range.start);
    let origin = Origin::path(source.name()).line(line).char_column(column);
    let (text, underlined) = excerpt(source, line, range);
    if text.trim().is_empty() {
        return vec![origin.into()];
    }
    let kind = if primary {
        AnnotationKind::Primary
    } else {
        AnnotationKind::Context
    };
    let label = (!label.is_empty()).then_some(label);
    let annotation: Annotation<'a> = kind.span(underlined).label(label);
    let snippet = Snippet::source(text)
        .line_start(line)
        .annotation(annotation);
    vec![origin.into(), snippet.into()]
}

/// The part of a line that is shown, and the range in it to underline. A
/// place of many lines is underlined on its first.
fn excerpt(source: &Source, line: usize, range: Range<usize>) -> (String, Range<usize>) {
    let text = source.text();
    let line_start = source.line_start(line);
    let rest = text.get(line_start..).unwrap_or("");
    let line_end = line_start + rest.find('\n').unwrap_or(rest.len());
    let start = range.start.min(line_end);
    let end = range.end.min(line_end).max(start);
    let from = text.floor_char_boundary(line_start.max(start.saturating_sub(MARGIN)));
    let to = text.ceil_char_boundary(line_end.min(end.min(start + MARGIN) + MARGIN));
    let end = text.floor_char_boundary(end.min(to));
    let before = if from > line_start { "…" } else { "" };
    let after = if to < line_end { "…" } else { "" };
    let body = text.get(from..to).unwrap_or("").trim_end_matches('\r');
    let shift = before.len();
    let underlined = (start - from + shift)..(end - from + shift).min(shift + body.len());
    (format!("{before}{body}{after}"), underlined)
}
