//! Reading a file of claims: every fault with its place, all at once.

mod asked;
mod figure;

use std::ops::Range;

use toml::de::{DeTable, DeValue};

use super::ask::{Of, Question, Side};
use super::claim::{Claim, Claims, Reviewed, Reviewer};
use crate::deck::{Reader, Row, Value};
use crate::diagnostic::{Diagnostic, Severity};
use crate::member::{Measured, Member};

/// The longest file of claims that is read, in bytes.
const LONGEST: usize = 8_000_000;

/// The most claims that a file holds: every figure of a member of hundreds of spans.
pub const MOST: usize = 20_000;

/// What a claim may be of.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Kind {
    Reaction,
    ReactionMoment,
    Moment,
    Shear,
    Deflection,
    Slope,
    Redundant,
    Allowable,
    Utilisation,
    Verdict,
}

const KINDS: [(&str, Kind); 10] = [
    ("reaction", Kind::Reaction),
    ("reaction_moment", Kind::ReactionMoment),
    ("moment", Kind::Moment),
    ("shear", Kind::Shear),
    ("deflection", Kind::Deflection),
    ("slope", Kind::Slope),
    ("redundant", Kind::Redundant),
    ("allowable", Kind::Allowable),
    ("utilisation", Kind::Utilisation),
    ("verdict", Kind::Verdict),
];

/// The deck that a file of claims names, and the place of its name; `None` where it names none.
pub fn deck_of(text: &str) -> Option<(String, Range<usize>)> {
    if text.len() > LONGEST {
        return None;
    }
    let (tree, errors) = DeTable::parse_recoverable(text);
    let value = tree.get_ref().get("deck").filter(|_| errors.is_empty())?;
    match value.get_ref() {
        DeValue::String(name) if !name.trim().is_empty() => Some((name.to_string(), value.span())),
        _ => None,
    }
}

/// Reads claims about a member.
///
/// # Errors
/// Every fault of the file, each with its place; where the TOML itself is broken, that alone.
pub fn read(text: &str, member: &Member) -> Result<(Claims, Vec<Diagnostic>), Vec<Diagnostic>> {
    walk(text, Some(member))
}

/// The faults that can be told without the member, for a file whose deck cannot be used.
pub fn faults(text: &str) -> Vec<Diagnostic> {
    walk(text, None).err().unwrap_or_default()
}

fn walk(text: &str, member: Option<&Member>) -> Result<(Claims, Vec<Diagnostic>), Vec<Diagnostic>> {
    let whole = 0..text.len().min(1);
    if text.len() > LONGEST {
        return Err(vec![Diagnostic::error(0..0, "the file is longer than 8,000,000 bytes").hint("split it")]);
    }
    let (tree, errors) = DeTable::parse_recoverable(text);
    if !errors.is_empty() {
        let broken = |error: &toml::de::Error| {
            let span = error.span().unwrap_or(0..0);
            Diagnostic::error(span, format!("not TOML: {}", error.message().trim())).hint("mend this first")
        };
        return Err(errors.iter().map(broken).collect());
    }
    let root = Row { table: tree.get_ref(), span: whole, path: "the file".to_owned() };
    let mut build = Build { reader: Reader::new(text), member, claims: Claims::default() };
    build.root(&root);
    let (mut faults, warnings): (Vec<Diagnostic>, Vec<Diagnostic>) =
        build.reader.findings.into_iter().partition(|finding| finding.severity == Severity::Error);
    faults.sort_by_key(|fault| fault.span.as_ref().map(|span| span.start));
    if faults.is_empty() { Ok((build.claims, warnings)) } else { Err(faults) }
}

/// A file of claims being read.
struct Build<'t, 'm> {
    reader: Reader<'t>,
    /// What names are looked up in; without it they are taken as they are.
    member: Option<&'m Member>,
    claims: Claims,
}

impl Build<'_, '_> {
    fn root(&mut self, root: &Row<'_>) {
        self.reader.known(root, &["format", "deck", "blind", "reviewed", "reviewer", "claim"]);
        if let Some(value) = self.reader.required(root, "format")
            && let Some(format) = self.reader.number(value, "format")
            && format.value != 1.0
        {
            self.reader.fault(value.span(), "this format of claims is not known", "format = 1 is the one that is read");
        }
        self.claims.deck = self.reader.required_text(root, "deck").unwrap_or_default();
        self.claims.blind = self.reader.flag(root, "blind");
        self.people(root);
        let Some(value) = self.reader.required(root, "claim") else { return };
        let items = self.reader.items(value, "claim");
        if items.is_empty() {
            self.reader.fault(value.span(), "nothing is claimed", "add [[claim]] with quantity, at and value");
        }
        if items.len() > MOST {
            self.reader.fault(value.span(), "more than 20,000 claims", "split the file");
        }
        for (index, item) in items.into_iter().enumerate().take(MOST) {
            let Some(row) = self.reader.row(item, format!("claim {}", index + 1)) else { continue };
            if let Some(claim) = self.claim(index, &row) {
                self.claims.claims.push(claim);
            }
        }
        if self.claims.empty > 0 {
            let message = match self.claims.empty {
                1 => "1 claim has no value yet and is left out".to_owned(),
                many => format!("{many} claims have no value yet and are left out"),
            };
            self.reader.warn(value.span(), message, "");
        }
    }

    fn people(&mut self, root: &Row<'_>) {
        if let Some(value) = self.reader.required(root, "reviewed")
            && let Some(row) = self.reader.row(value, "reviewed")
        {
            self.reader.known(&row, &["number", "revision", "date", "subject"]);
            let number = self.reader.required_text(&row, "number").unwrap_or_default();
            let revision = self.reader.optional_text(&row, "revision").unwrap_or_default();
            let subject = self.reader.optional_text(&row, "subject").unwrap_or_default();
            let date = row.table.get("date").and_then(|value| self.date(value));
            self.claims.reviewed = Reviewed { number, revision, date, subject };
        }
        if let Some(value) = self.reader.required(root, "reviewer")
            && let Some(row) = self.reader.row(value, "reviewer")
        {
            self.reader.known(&row, &["name", "date"]);
            let name = self.reader.required_text(&row, "name").unwrap_or_default();
            let date = self.reader.required(&row, "date").and_then(|value| self.date(value)).unwrap_or_default();
            self.claims.reviewer = Reviewer { name, date };
        }
    }

    fn date(&mut self, value: Value<'_>) -> Option<(u16, u8, u8)> {
        if let DeValue::Datetime(stamp) = value.get_ref()
            && let (Some(date), None) = (stamp.date, stamp.time)
        {
            return Some((date.year, date.month, date.day));
        }
        self.reader.fault(
            value.span(),
            "date must be a TOML date without a time",
            "write it without quotes: 2026-11-30",
        );
        None
    }

    fn claim(&mut self, index: usize, row: &Row<'_>) -> Option<Claim> {
        let keys = [
            "quantity",
            "at",
            "extreme",
            "combination",
            "case",
            "side",
            "measured",
            "value",
            "reference",
            "tolerance",
            "limit",
        ];
        self.reader.known(row, &keys);
        let kind = self.reader.required(row, "quantity").and_then(|value| self.reader.word(value, "quantity", &KINDS));
        let of = self.of(row);
        let sides = [("left", Side::Left), ("right", Side::Right)];
        let side = row.table.get("side").and_then(|value| self.reader.word(value, "side", &sides));
        let words = [("absolute", Measured::Absolute), ("chord", Measured::Chord)];
        let measured = row.table.get("measured").and_then(|value| self.reader.word(value, "measured", &words));
        let reference = self.reader.optional_text(row, "reference").unwrap_or_default();
        let limit = self.limit(row);
        let Some(kind) = kind else {
            // Of what nobody knows is claimed, only that a figure is there can be asked.
            self.reader.required(row, "value");
            return None;
        };
        self.idle(kind, row);
        let ask = self.ask(kind, row, side.unwrap_or(Side::Left), measured.unwrap_or(Measured::Absolute), limit);
        let figure = self.figure(kind, row);
        let tolerance = self.tolerance(kind, row);
        let (of, ask, figure, tolerance) = (of?, ask?, figure?, tolerance?);
        if figure.written.is_empty() {
            self.claims.empty += 1;
            return None;
        }
        let tolerance = tolerance.of(&figure);
        let figure::Figure { si, unit, half, written } = figure;
        Some(Claim {
            index,
            words: self.words(kind, row, &of),
            question: Question { of, ask },
            sided: side.is_some(),
            claimed: si,
            written,
            unit,
            half,
            tolerance,
            verdict: kind == Kind::Verdict,
            reference,
        })
    }

    /// Keys that say nothing about this kind of claim.
    fn idle(&mut self, kind: Kind, row: &Row<'_>) {
        let within = row.table.contains_key("extreme");
        let along = matches!(kind, Kind::Moment | Kind::Shear | Kind::Deflection | Kind::Slope);
        let limited = matches!(kind, Kind::Allowable | Kind::Utilisation | Kind::Verdict);
        let useful = [
            ("extreme", along),
            ("side", along && !within && kind != Kind::Deflection),
            ("measured", kind == Kind::Deflection),
            ("limit", limited),
        ];
        for (key, of_use) in useful {
            if let (Some(value), false) = (row.table.get(key), of_use) {
                let message = format!("{key} says nothing about this claim and is left aside");
                self.reader.warn(value.span(), message, "take it out, or mend what it was meant for");
            }
        }
    }

    /// The claim in words: `max moment at A-B, C1`.
    fn words(&self, kind: Kind, row: &Row<'_>, of: &Of) -> String {
        let (Of::Case(name) | Of::Combination(name)) = of;
        let quantity = KINDS.iter().find(|(_, known)| *known == kind).map_or("", |(word, _)| word).replace('_', " ");
        let along = matches!(kind, Kind::Moment | Kind::Shear | Kind::Deflection | Kind::Slope);
        let text = |key: &str| self.text_of(row, key).split_whitespace().collect::<Vec<_>>().join(" ");
        let extreme = if along { text("extreme") } else { String::new() };
        let (at, side) = (text("at"), text("side"));
        let place = match (at.as_str(), side.as_str()) {
            ("", _) => String::new(),
            (at, "left" | "right") if along && extreme.is_empty() && kind != Kind::Deflection => {
                format!("{side} of {at}")
            }
            (at, _) => format!("at {at}"),
        };
        let chord = if kind == Kind::Deflection && text("measured") == "chord" { "from the chord" } else { "" };
        let limit = text("limit");
        let words = [extreme.as_str(), &quantity, &place, chord];
        let words: Vec<&str> = words.into_iter().filter(|word| !word.is_empty()).collect();
        let limited = !limit.is_empty() && matches!(kind, Kind::Allowable | Kind::Utilisation | Kind::Verdict);
        let limit = if limited { format!(", limit {limit}") } else { String::new() };
        format!("{}, {name}{limit}", words.join(" "))
    }

    fn text_of(&self, row: &Row<'_>, key: &str) -> String {
        match row.table.get(key).map(toml::Spanned::get_ref) {
            Some(DeValue::String(text)) => text.to_string(),
            _ => String::new(),
        }
    }
}
