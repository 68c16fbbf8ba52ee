//! Faults and warnings as data: how bad, where, what, and how to mend it.

mod render;

pub use render::render;

use std::ops::Range;

/// How bad a finding about the input is.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Severity {
    /// The input cannot be used.
    Error,
    /// Lawful, but odd.
    Warning,
}

/// One finding about an input file.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Diagnostic {
    /// How bad.
    pub severity: Severity,
    /// Byte range of the offending text in the file; `None` where the file as a whole is meant.
    pub span: Option<Range<usize>>,
    /// What is wrong, and what was expected; a full sentence without the place.
    pub message: String,
    /// How to mend it; a sentence. Empty where nothing helps.
    pub hint: String,
}

impl Diagnostic {
    /// An error at a place.
    pub fn error(span: Range<usize>, message: impl Into<String>) -> Self {
        Self { severity: Severity::Error, span: Some(span), message: message.into(), hint: String::new() }
    }

    /// A warning at a place.
    pub fn warning(span: Range<usize>, message: impl Into<String>) -> Self {
        Self { severity: Severity::Warning, ..Self::error(span, message) }
    }

    /// The same finding with a way to mend it.
    #[must_use]
    pub fn hint(mut self, hint: impl Into<String>) -> Self {
        self.hint = hint.into();
        self
    }

    /// Line and column (both from 1, in characters) of its place in `text`; `None` without a place.
    pub fn line_column(&self, text: &str) -> Option<(usize, usize)> {
        let before = text.get(..self.span.as_ref()?.start)?;
        let line = before.matches('\n').count() + 1;
        let column = before.rsplit('\n').next().unwrap_or_default().chars().count() + 1;
        Some((line, column))
    }
}
