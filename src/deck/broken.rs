//! Text that is not TOML.

use std::ops::Range;

use super::words::clip;
use crate::diagnostic::Diagnostic;

/// The faults of a text that is not TOML, with the mend for the slips that decks are prone to.
pub fn broken(text: &str, errors: &[toml::de::Error]) -> Vec<Diagnostic> {
    let mut faults = Vec::new();
    // Inside a table that stands twice every key does; that is one mistake.
    let mut twice: Option<Range<usize>> = None;
    for error in errors.iter().take(50) {
        let span = placed(text, error.span().unwrap_or(0..0));
        let duplicate = error.message().contains("duplicate key");
        if duplicate && twice.as_ref().is_some_and(|table| table.contains(&span.start)) {
            continue;
        }
        if !duplicate {
            let hint = mend(text, &span);
            faults.push(Diagnostic::error(span, format!("not TOML: {}", error.message().trim())).hint(hint));
            continue;
        }
        let begin = line_start(text, span.start);
        let line = text.get(begin..).and_then(|rest| rest.lines().next()).unwrap_or_default();
        let name = if line.starts_with('[') {
            let rest = text.get(begin + 1..).unwrap_or_default();
            twice = Some(begin..begin + 1 + rest.find("\n[").unwrap_or(rest.len()));
            begin..begin + line.find(']').map_or(line.len(), |end| end + 1)
        } else {
            span
        };
        let message = format!("\"{}\" stands twice", clip(text.get(name.clone()).unwrap_or_default()));
        faults.push(Diagnostic::error(name, message).hint("give one of them another name, or take it out"));
    }
    faults
}

fn line_start(text: &str, at: usize) -> usize {
    text.get(..at).and_then(|before| before.rfind('\n')).map_or(0, |at| at + 1)
}

/// A span within the text that begins and ends at characters and is not empty, if the text is not.
fn placed(text: &str, span: Range<usize>) -> Range<usize> {
    let down = |mut at: usize| {
        at = at.min(text.len());
        while !text.is_char_boundary(at) {
            at -= 1;
        }
        at
    };
    let start = down(span.start);
    let end = down(span.end).max(start);
    let width = |letter: Option<char>| letter.map_or(0, char::len_utf8);
    if start < end {
        return start..end;
    }
    match text.get(start..).and_then(|rest| rest.chars().next()).filter(|letter| *letter != '\n') {
        Some(letter) => start..start + letter.len_utf8(),
        None => start - width(text.get(..start).and_then(|before| before.chars().next_back()))..start,
    }
}

/// What to do about it.
fn mend(text: &str, span: &Range<usize>) -> String {
    let begin = line_start(text, span.start);
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
