//! From a deck's text to a valid member: everything it names is checked before anything is solved.

mod actions;
mod asked;
mod geometry;
mod record;

use std::collections::BTreeMap;
use std::ops::Range;

use toml::de::{DeTable, DeValue};

use super::{Member, Place, System, Title};
use crate::deck::{LONGEST, Reader, Row};
use crate::diagnostic::{Diagnostic, Severity};
use crate::quantity::Typed;

/// A member and where in the file its names stand, for findings that need more than one of them.
#[derive(Clone, Debug)]
pub struct Reading {
    /// The member.
    pub member: Member,
    /// Places of the supports' names, in the member's order.
    pub supports: Vec<Range<usize>>,
    /// Places of the chosen redundants' names, in the order typed.
    pub redundants: Vec<Range<usize>>,
    /// The place of the table of redundants, or of the whole deck.
    pub whole: Range<usize>,
}

/// What is being put together.
struct Build<'t> {
    reader: Reader<'t>,
    member: Member,
    support_spans: Vec<Range<usize>>,
    redundant_spans: Vec<Range<usize>>,
    /// Whether the spans are what the deck means: a fault among the supports would make others of them.
    spans_known: bool,
    /// Whether the member's length is what the deck means: a fault among the segments would make another of it.
    length_known: bool,
}

/// Reads a deck.
///
/// # Errors
/// Every fault of the deck, each with its place; where the TOML itself is broken, that alone.
pub fn read(text: &str) -> Result<Reading, Vec<Diagnostic>> {
    let whole = 0..text.len().min(1);
    if text.len() > LONGEST {
        return Err(vec![Diagnostic::error(whole, "the deck is longer than 2,000,000 bytes").hint("split it")]);
    }
    let (tree, errors) = DeTable::parse_recoverable(text);
    if !errors.is_empty() {
        return Err(errors.iter().map(|error| broken(error, text)).collect());
    }
    let root = Row { table: tree.get_ref(), span: whole.clone(), path: "the deck".to_owned() };
    let mut build = Build {
        reader: Reader::new(text),
        member: empty(),
        support_spans: Vec::new(),
        redundant_spans: Vec::new(),
        spans_known: true,
        length_known: true,
    };
    build.root(&root);
    let Build { reader, mut member, support_spans, redundant_spans, .. } = build;
    let (faults, warnings): (Vec<Diagnostic>, Vec<Diagnostic>) =
        reader.findings.into_iter().partition(|finding| finding.severity == Severity::Error);
    if !faults.is_empty() {
        let mut faults = faults;
        faults.sort_by_key(|fault| fault.span.as_ref().map(|span| span.start));
        return Err(faults);
    }
    member.warnings = warnings;
    Ok(Reading { member, supports: support_spans, redundants: redundant_spans, whole })
}

fn broken(error: &toml::de::Error, text: &str) -> Diagnostic {
    let span = error.span().unwrap_or(0..0);
    let end = span.end.clamp(span.start.min(text.len()), text.len());
    Diagnostic::error(span.start.min(text.len())..end, format!("not TOML: {}", error.message().trim()))
        .hint("a deck is a TOML file; mend this first")
}

fn empty() -> Member {
    Member {
        title: Title::default(),
        sections: Vec::new(),
        segments: Vec::new(),
        supports: Vec::new(),
        hinges: Vec::new(),
        stations: Vec::new(),
        redundants: None,
        cases: Vec::new(),
        combinations: Vec::new(),
        spans: Vec::new(),
        limits: Vec::new(),
        typed_places: BTreeMap::new(),
        record: super::Record::default(),
        warnings: Vec::new(),
    }
}

impl Build<'_> {
    fn root(&mut self, root: &Row<'_>) {
        let keys = [
            "format",
            "title",
            "section",
            "segment",
            "support",
            "hinge",
            "member",
            "case",
            "combination",
            "limit",
            "revision",
            "assumption",
            "sheet",
        ];
        self.reader.known(root, &keys);
        self.format(root);
        self.title(root);
        self.sections(root);
        let before = self.reader.findings.len();
        self.segments(root);
        self.length_known = self.reader.findings.len() == before;
        self.supports(root);
        self.hinges(root);
        self.spans();
        self.member_table(root);
        self.cases(root);
        self.combinations(root);
        self.limits(root);
        self.revisions(root);
        self.assumptions(root);
        self.sheet_table(root);
        self.oddities(root);
    }

    fn format(&mut self, root: &Row<'_>) {
        if let Some(value) = self.reader.required(root, "format")
            && let Some(format) = self.reader.number(value, "format")
            && format.value != 1.0
        {
            self.reader.fault(value.span(), "this format of deck is not known", "format = 1 is the one that is read");
        }
    }

    fn title(&mut self, root: &Row<'_>) {
        let Some(value) = self.reader.required(root, "title") else { return };
        let Some(row) = self.reader.row(value, "title") else { return };
        let keys = [
            "project", "number", "subject", "revision", "date", "prepared", "checked", "approved", "client", "office",
            "units",
        ];
        self.reader.known(&row, &keys);
        let mut text = |key: &str| self.reader.required_text(&row, key).unwrap_or_default();
        let title = Title {
            project: text("project"),
            number: text("number"),
            subject: text("subject"),
            revision: text("revision"),
            ..Title::default()
        };
        let mut optional = |key: &str| self.reader.optional_text(&row, key).filter(|text| !text.trim().is_empty());
        self.member.title = Title {
            prepared: optional("prepared"),
            checked: optional("checked"),
            approved: optional("approved"),
            client: optional("client"),
            office: optional("office"),
            ..title
        };
        if let Some(value) = self.reader.required(&row, "date") {
            self.member.title.date = self.date(value).unwrap_or_default();
        }
        if let Some(value) = row.table.get("units") {
            let words = [("SI", System::Si), ("US", System::Us)];
            self.member.title.system = self.reader.word(value, "units", &words).unwrap_or_default();
        }
    }

    /// A place on the member; remembered as typed.
    fn place(&mut self, value: crate::deck::Value<'_>, key: &str) -> Option<Place> {
        let end = self.member.end();
        if let DeValue::String(word) = value.get_ref()
            && word == "end"
        {
            return Some(end);
        }
        let (place, typed) = self.reader.metres(value, key)?;
        if place < Place::ZERO || (place > end && self.length_known) {
            let message = format!("{key} lies off the member, which runs from 0 to {} m", end.exact());
            self.reader.fault(value.span(), message, "places are measured from the member's left end");
            return None;
        }
        self.remember(place, typed);
        Some(place)
    }

    fn remember(&mut self, place: Place, typed: Typed) {
        self.member.typed_places.entry(place).or_insert(typed);
    }
}
