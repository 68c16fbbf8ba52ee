//! From a deck's text to a valid member: everything it names is checked before anything is solved.
//!
//! One mistake is one fault: what could not be read is remembered by name, so that nothing that needs it is reported as
//! well, while everything else is still checked.

mod actions;
mod asked;
mod limits;
mod loads;
mod odd;
mod record;
mod sections;
mod segments;
mod supports;
mod title;

use std::collections::{BTreeMap, BTreeSet};
use std::ops::Range;

use toml::de::{DeTable, DeValue};

use super::{Member, Place, Title};
use crate::deck::{LONGEST, Names, Reader, Row, Value};
use crate::diagnostic::Diagnostic;
use crate::quantity::{Decimal, Typed};

/// A member and where in the file its names stand, for findings that need more than one of them.
#[derive(Clone, Debug)]
pub struct Reading {
    /// The member.
    pub member: Member,
    /// Places of the supports' names, in the member's order.
    pub supports: Vec<Range<usize>>,
    /// Places of the chosen redundants' names, in the order typed.
    pub redundants: Vec<Range<usize>>,
    /// The place of the list of redundants; of the beginning of the deck where there is none.
    pub whole: Range<usize>,
}

/// What could be read of a deck.
#[derive(Clone, Debug)]
pub struct Attempt {
    /// The member; of use as a whole only where there are no faults.
    pub reading: Reading,
    /// Every fault, in the order of the file.
    pub faults: Vec<Diagnostic>,
    /// Whether its segments, supports and hinges are what the deck means, whatever else is at fault.
    pub geometry: bool,
    /// Whether its redundants are.
    pub redundants: bool,
}

/// What is being put together.
struct Build<'t> {
    reader: Reader<'t>,
    member: Member,
    sections: Names,
    supports: Names,
    cases: Names,
    combinations: Names,
    spans: Names,
    /// What could not be read of a section: its index and the key.
    unsure: BTreeSet<(usize, &'static str)>,
    /// Sections that have been reported for lacking what a load needs, with what that is.
    lacking: BTreeSet<(usize, &'static str)>,
    /// Cases that a combination counts with a factor of zero, written out.
    zeroed: BTreeSet<usize>,
    support_spans: Vec<Range<usize>>,
    redundant_spans: Vec<Range<usize>>,
    whole: Range<usize>,
    /// The right end; beyond everything where a fault among the segments hides it.
    end: Place,
    length_known: bool,
    supports_known: bool,
    hinges_known: bool,
    redundants_known: bool,
    purposes_known: bool,
}

/// Reads a deck.
///
/// # Errors
/// Every fault of the deck, each with its place; where the TOML itself is broken, that alone.
pub fn read(text: &str) -> Result<Reading, Vec<Diagnostic>> {
    let attempt = attempt(text);
    if attempt.faults.is_empty() { Ok(attempt.reading) } else { Err(attempt.faults) }
}

/// Reads as much of a deck as can be read.
pub fn attempt(text: &str) -> Attempt {
    let whole = 0..text.chars().next().map_or(0, char::len_utf8);
    let nothing = |faults: Vec<Diagnostic>| Attempt {
        reading: Reading { member: empty(), supports: Vec::new(), redundants: Vec::new(), whole: whole.clone() },
        faults,
        geometry: false,
        redundants: false,
    };
    if text.len() > LONGEST {
        let message = format!("the deck is longer than {LONGEST} bytes");
        return nothing(vec![Diagnostic::error(whole.clone(), message).hint("split it")]);
    }
    let (tree, errors) = DeTable::parse_recoverable(text);
    if !errors.is_empty() {
        return nothing(crate::deck::broken(text, &errors));
    }
    let root = Row { table: tree.get_ref(), span: whole.clone(), path: "the deck".to_owned() };
    let mut build = Build {
        reader: Reader::new(text),
        member: empty(),
        sections: Names::new("section"),
        supports: Names::new("support"),
        cases: Names::new("case"),
        combinations: Names::new("combination"),
        spans: Names::new("span"),
        unsure: BTreeSet::new(),
        lacking: BTreeSet::new(),
        zeroed: BTreeSet::new(),
        support_spans: Vec::new(),
        redundant_spans: Vec::new(),
        whole,
        end: Place::ZERO,
        length_known: true,
        supports_known: true,
        hinges_known: true,
        redundants_known: true,
        purposes_known: true,
    };
    build.root(&root);
    let geometry = build.length_known && build.supports_known && build.hinges_known;
    let (faults, warnings) = build.reader.sorted();
    let mut member = build.member;
    member.warnings = warnings;
    let reading =
        Reading { member, supports: build.support_spans, redundants: build.redundant_spans, whole: build.whole };
    Attempt { reading, faults, geometry, redundants: build.redundants_known }
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
        self.segments(root);
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
        self.oddities();
    }

    fn format(&mut self, root: &Row<'_>) {
        if !self.reader.has(root, "format") {
            let hint = "add format = 1 as the first line";
            self.reader.fault(root.span.clone(), "the deck does not say its format", hint);
        }
        if let Some(value) = root.table.get("format")
            && let Some(format) = self.reader.number(value, "format")
            && format.value != 1.0
        {
            self.reader.fault(value.span(), "this format of deck is not known", "format = 1 is the one that is read");
        }
    }

    /// A place on the member; remembered as typed.
    fn place(&mut self, value: Value<'_>, key: &str) -> Option<Place> {
        if let DeValue::String(word) = value.get_ref() {
            if word == "end" {
                return Some(self.end);
            }
            if !word.is_empty() && word.chars().all(char::is_alphabetic) {
                let message = format!("{key} cannot be \"{}\"", crate::deck::clip(word));
                self.reader.fault(value.span(), message, "a length from the left end, as in \"2.5 m\", or \"end\"");
                return None;
            }
        }
        let (place, given) = self.reader.metres(value, key)?;
        if place < Place::ZERO || place > self.end {
            let reach = if self.length_known {
                format!(", which runs from 0 to {} m", self.end.exact())
            } else {
                String::new()
            };
            let message = format!("{key} lies off the member{reach}");
            self.reader.fault(value.span(), message, "places are measured from the member's left end");
            return None;
        }
        self.remember(place, given.typed);
        Some(place)
    }

    fn remember(&mut self, place: Place, typed: Typed) {
        self.member.typed_places.entry(place).or_insert(typed);
    }
}

/// Beyond every place that a deck may type.
const FAR: Place = Place::metres(Decimal::new(1, 40));
