//! Findings for a terminal: place, offending text underlined, what to do.

use std::ops::Range;

use annotate_snippets::{AnnotationKind, Group, Level, Renderer, Snippet};

use super::{Diagnostic, Severity};

/// Every finding with its file, line and column, the offending text underlined; plain text.
pub fn render(findings: &[Diagnostic], file: &str, text: &str) -> String {
    let renderer = Renderer::plain();
    let file = printable(file);
    let lines = Lines::of(text);
    let mut shown = Vec::new();
    for finding in findings {
        let level = if finding.severity == Severity::Error { Level::ERROR } else { Level::WARNING };
        let message = printable(&finding.message);
        let hint = printable(&finding.hint);
        let mut group = Group::with_title(level.primary_title(message.as_str()));
        let window = finding.span.clone().and_then(|span| lines.around(text, span));
        if let Some(window) = &window {
            let annotation = AnnotationKind::Primary.span(window.span.clone());
            let snippet = Snippet::source(window.text.as_str()).line_start(window.line).path(file.as_str());
            group = group.element(snippet.annotation(annotation));
        }
        if !hint.is_empty() {
            group = group.element(Level::HELP.message(hint.as_str()));
        }
        shown.push(renderer.render(&[group]).to_string());
    }
    shown.join("\n\n") + "\n"
}

/// Where the lines of a text begin.
struct Lines {
    starts: Vec<usize>,
}

/// The lines that a finding stands on: showing them alone keeps a long deck with many faults quick.
struct Window {
    text: String,
    line: usize,
    span: Range<usize>,
}

impl Lines {
    fn of(text: &str) -> Self {
        let behind = text.match_indices('\n').map(|(index, _)| index + 1);
        Self { starts: std::iter::once(0).chain(behind).collect() }
    }

    fn around(&self, text: &str, span: Range<usize>) -> Option<Window> {
        let marked = text.get(span.clone())?;
        let line = self.starts.partition_point(|start| *start <= span.start).max(1);
        let from = *self.starts.get(line - 1)?;
        let rest = text.get(span.end..)?;
        let to = span.end + rest.find('\n').unwrap_or(rest.len());
        let before = printable(text.get(from..span.start)?);
        let shown = marked.split('\n').map(printable).collect::<Vec<_>>().join("\n");
        let behind = printable(text.get(span.end..to)?);
        let span = before.len()..before.len() + shown.len();
        Some(Window { text: before + &shown + &behind, line, span })
    }
}

/// Control characters would let a deck write to the terminal.
fn printable(text: &str) -> String {
    let shown = |letter: char| if letter.is_control() && letter != '\t' { '\u{fffd}' } else { letter };
    text.trim_end_matches('\r').chars().map(shown).collect()
}

#[cfg(test)]
mod tests {
    use super::render;
    use crate::diagnostic::Diagnostic;

    #[test]
    fn a_finding_shows_its_line_and_underlines_its_text() {
        let text = "a = 1\nbé = \"xx\"\r\nc = 2\n";
        let place = text.find("xx").unwrap_or(0);
        let shown = render(&[Diagnostic::error(place..place + 2, "wrong").hint("mend")], "d.toml", text);
        assert!(shown.contains("d.toml:2:7"), "{shown}");
        assert!(shown.contains("bé = \"xx\"\n") && shown.contains("       ^^"), "{shown}");
        assert!(!shown.contains("a = 1"), "{shown}");
    }

    #[test]
    fn a_deck_cannot_write_to_the_terminal() {
        let text = "a = \"\u{1b}[31m\u{9b}2J\"";
        let shown = render(&[Diagnostic::error(4..8, "no \u{7}").hint("\u{1b}c")], "\u{1b}d", text);
        assert!(shown.chars().all(|letter| letter == '\n' || !letter.is_control()), "{shown:?}");
    }
}
