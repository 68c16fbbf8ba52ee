//! Findings for a terminal: place, offending text underlined, what to do.

use annotate_snippets::{AnnotationKind, Group, Level, Renderer, Snippet};

use super::{Diagnostic, Severity};

/// Every finding with its file, line and column, the offending text underlined; plain text.
pub fn render(findings: &[Diagnostic], file: &str, text: &str) -> String {
    let renderer = Renderer::plain();
    let mut shown = Vec::new();
    for finding in findings {
        let level = if finding.severity == Severity::Error { Level::ERROR } else { Level::WARNING };
        let message = printable(&finding.message);
        let hint = printable(&finding.hint);
        let mut group = Group::with_title(level.primary_title(message.as_str()));
        if let Some(span) = finding.span.clone().filter(|span| text.get(span.clone()).is_some()) {
            let annotation = AnnotationKind::Primary.span(span);
            group = group.element(Snippet::source(text).path(file).annotation(annotation));
        }
        if !hint.is_empty() {
            group = group.element(Level::HELP.message(hint.as_str()));
        }
        shown.push(renderer.render(&[group]).to_string());
    }
    shown.join("\n\n") + "\n"
}

/// Control characters would let a deck write to the terminal.
fn printable(text: &str) -> String {
    text.chars().map(|letter| if letter.is_control() { '\u{fffd}' } else { letter }).collect()
}
