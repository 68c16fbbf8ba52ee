//! Text that is not TOML.

use std::ops::Range;

use crate::diagnostic::Diagnostic;

/// The faults of a text that is not TOML, with the mend for the slips that decks are prone to.
pub fn broken(text: &str, errors: &[toml::de::Error]) -> Vec<Diagnostic> {
    errors
        .iter()
        .take(20)
        .map(|error| {
            let span = placed(text, error.span().unwrap_or(0..0));
            let hint = mend(text, &span, error.message());
            Diagnostic::error(span, format!("not TOML: {}", error.message().trim())).hint(hint)
        })
        .collect()
}

/// A span within the text that begins and ends at characters.
fn placed(text: &str, span: Range<usize>) -> Range<usize> {
    let down = |mut at: usize| {
        at = at.min(text.len());
        while !text.is_char_boundary(at) {
            at -= 1;
        }
        at
    };
    let start = down(span.start);
    start..down(span.end).max(start)
}

/// What to do about it.
fn mend(text: &str, span: &Range<usize>, message: &str) -> String {
    if message.contains("duplicate key") {
        return "this name stands twice in its table: give one of them another name, or take it out".to_owned();
    }
    let begin = text.get(..span.start).and_then(|before| before.rfind('\n')).map_or(0, |at| at + 1);
    let line = text.get(begin..).and_then(|rest| rest.lines().next()).unwrap_or_default();
    if let Some((_, value)) = line.split_once('=') {
        let value = value.split('#').next().unwrap_or_default().trim();
        let figure = value.find(|c: char| !c.is_ascii_digit() && !matches!(c, '.' | '-' | '+' | 'e' | ' '));
        if value.starts_with(|c: char| c.is_ascii_digit() || c == '-') && !value.contains(['"', '[', '{']) {
            return match figure.and_then(|at| value.get(at..)) {
                Some(rest) if rest.starts_with(',') => {
                    "a number has a point for its decimals and nothing between thousands: 1.5, 1500".to_owned()
                }
                Some(_) => format!("a quantity stands in quotes: \"{value}\""),
                None => "mend this first: a deck is a TOML file".to_owned(),
            };
        }
        if value.starts_with(|c: char| c.is_alphabetic()) && !["true", "false"].contains(&value) {
            return format!("text stands in quotes: \"{value}\"");
        }
    }
    "mend this first: a deck is a TOML file".to_owned()
}
