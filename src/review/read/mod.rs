//! Reading a file of claims: every fault with its place, all at once.

mod figure;

use toml::de::{DeTable, DeValue};

use super::ask::{Along, Ask, Of, Question, Side};
use super::claim::{Claim, Claims, Reviewed, Reviewer};
use crate::deck::{LONGEST, Reader, Row, Value, clip, nearest};
use crate::diagnostic::{Diagnostic, Severity};
use crate::member::{Measured, Member, Place};
use crate::quantity::parse_quantity;

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

/// The name of the deck that a file of claims speaks of, as far as it can be read.
pub fn deck_of(text: &str) -> Option<String> {
    let (tree, _) = DeTable::parse_recoverable(text);
    match tree.get_ref().get("deck")?.get_ref() {
        DeValue::String(name) => Some(name.to_string()),
        _ => None,
    }
}

/// Reads claims about a member.
///
/// # Errors
/// Every fault of the file, each with its place; where the TOML itself is broken, that alone.
pub fn read(text: &str, member: &Member) -> Result<(Claims, Vec<Diagnostic>), Vec<Diagnostic>> {
    let whole = 0..text.len().min(1);
    if text.len() > LONGEST {
        return Err(vec![Diagnostic::error(whole, "the file is longer than 2,000,000 bytes").hint("split it")]);
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

struct Build<'t, 'm> {
    reader: Reader<'t>,
    member: &'m Member,
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
        if items.len() > 5_000 {
            self.reader.fault(value.span(), "more than 5,000 claims", "split the file");
        }
        for (index, item) in items.into_iter().enumerate().take(5_000) {
            let Some(row) = self.reader.row(item, format!("claim {}", index + 1)) else { continue };
            if let Some(claim) = self.claim(index, &row) {
                self.claims.claims.push(claim);
            }
        }
        if self.claims.empty > 0 {
            let message = format!("{} claims have no value yet and are left out", self.claims.empty);
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
        let kind = kind?;
        let ask = self.ask(kind, row, side.unwrap_or(Side::Left), measured.unwrap_or(Measured::Absolute), limit);
        let figure = self.figure(kind, row);
        let (of, ask, figure) = (of?, ask?, figure?);
        let figure::Figure { si, half, written } = figure;
        if written.is_empty() {
            self.claims.empty += 1;
            return None;
        }
        let tolerance = self.tolerance(kind, row, si, half);
        let name = match &of {
            Of::Case(name) | Of::Combination(name) => name.clone(),
        };
        let at = self.text_of(row, "at");
        let kind_word = KINDS.iter().find(|(_, known)| *known == kind).map_or("", |(word, _)| word).replace('_', " ");
        let extreme = self.text_of(row, "extreme");
        let words = [extreme.as_str(), &kind_word, if at.is_empty() { "" } else { "at" }, &at]
            .into_iter()
            .filter(|word| !word.is_empty())
            .collect::<Vec<_>>()
            .join(" ");
        Some(Claim {
            index,
            question: Question { of, ask },
            sided: side.is_some(),
            words: format!("{words}, {name}"),
            claimed: si,
            written,
            half,
            tolerance: tolerance?,
            verdict: kind == Kind::Verdict,
            reference,
        })
    }

    fn text_of(&self, row: &Row<'_>, key: &str) -> String {
        match row.table.get(key).map(toml::Spanned::get_ref) {
            Some(DeValue::String(text)) => text.to_string(),
            _ => String::new(),
        }
    }

    fn of(&mut self, row: &Row<'_>) -> Option<Of> {
        let (case, combination) = (row.table.get("case"), row.table.get("combination"));
        match (case, combination) {
            (Some(value), None) => {
                let names = self.member.cases.iter().map(|case| case.name.clone()).collect();
                self.named(value, "case", names).map(Of::Case)
            }
            (None, Some(value)) => {
                let names = self.member.combinations.iter().map(|combination| combination.name.clone()).collect();
                self.named(value, "combination", names).map(Of::Combination)
            }
            (Some(value), Some(_)) => {
                self.reader.fault(
                    value.span(),
                    format!("{} names both a case and a combination", row.path),
                    "one of them",
                );
                None
            }
            (None, None) => {
                let hint = "add combination = \"NAME\" or case = \"NAME\"";
                self.reader.fault(row.span.clone(), format!("{} names neither case nor combination", row.path), hint);
                None
            }
        }
    }

    fn limit(&mut self, row: &Row<'_>) -> Option<String> {
        let value = row.table.get("limit")?;
        let names = self.member.limits.iter().map(|limit| limit.name.clone()).collect();
        self.named(value, "limit", names)
    }

    fn named(&mut self, value: Value<'_>, what: &str, names: Vec<String>) -> Option<String> {
        let name = self.reader.text(value, what)?;
        if names.contains(&name) {
            return Some(name);
        }
        let hint = match nearest(&name, names.iter().map(String::as_str)) {
            Some(near) => format!("did you mean {near}?"),
            None if names.is_empty() => format!("the deck names no {what}"),
            None => format!("known: {}", names.join(", ")),
        };
        self.reader.fault(value.span(), format!("there is no {what} \"{}\"", clip(&name)), hint);
        None
    }

    fn ask(&mut self, kind: Kind, row: &Row<'_>, side: Side, measured: Measured, limit: Option<String>) -> Option<Ask> {
        let along = match kind {
            Kind::Shear => Along::Shear,
            Kind::Moment => Along::Moment,
            Kind::Slope => Along::Slope,
            _ => Along::Deflection,
        };
        match kind {
            Kind::Reaction | Kind::ReactionMoment => {
                let value = self.reader.required(row, "at")?;
                let names = self.member.supports.iter().map(|support| support.name.clone()).collect();
                let support = self.named(value, "support", names)?;
                Some(if kind == Kind::Reaction { Ask::Reaction { support } } else { Ask::ReactionMoment { support } })
            }
            Kind::Redundant => {
                let value = self.reader.required(row, "at")?;
                let name = self.reader.text(value, "at")?;
                let known = ["R.", "M."].iter().any(|letter| {
                    name.strip_prefix(letter).is_some_and(|rest| self.member.supports.iter().any(|s| s.name == rest))
                });
                if known {
                    return Some(Ask::Redundant { name });
                }
                let hint = "write R.B for a support's force, M.B for a moment";
                self.reader.fault(value.span(), format!("\"{}\" names no redundant", clip(&name)), hint);
                None
            }
            Kind::Moment | Kind::Shear | Kind::Deflection | Kind::Slope => self.along(along, row, side, measured),
            Kind::Allowable | Kind::Utilisation => {
                let value = self.reader.required(row, "at")?;
                let span = self.span(value)?;
                Some(if kind == Kind::Allowable {
                    Ask::Allowable { span, limit }
                } else {
                    Ask::Utilisation { span, limit }
                })
            }
            Kind::Verdict => {
                let span = match row.table.get("at") {
                    Some(value) => Some(self.span(value)?),
                    None => None,
                };
                Some(Ask::Verdict { span, limit })
            }
        }
    }

    fn span(&mut self, value: Value<'_>) -> Option<String> {
        let names = self.member.spans.iter().map(|span| span.name.clone()).collect();
        self.named(value, "span", names)
    }

    /// A place: a support's name or a station; or an extreme within a span.
    fn along(&mut self, along: Along, row: &Row<'_>, side: Side, measured: Measured) -> Option<Ask> {
        let value = self.reader.required(row, "at")?;
        let text = self.reader.text(value, "at")?;
        let ends = [("max", true), ("min", false)];
        if let Some(extreme) = row.table.get("extreme") {
            let max = self.reader.word(extreme, "extreme", &ends)?;
            return Some(Ask::Extreme { along, span: self.span(value)?, max, measured });
        }
        if self.member.spans.iter().any(|span| span.name == text) {
            let message = format!("{} names a span without saying which extreme", row.path);
            self.reader.fault(value.span(), message, "add extreme = \"max\" or extreme = \"min\"");
            return None;
        }
        if let Some(support) = self.member.supports.iter().find(|support| support.name == text) {
            return Some(Ask::Station { along, at: support.at, side, measured });
        }
        if text == "end" {
            return Some(Ask::Station { along, at: self.member.end(), side, measured });
        }
        if parse_quantity(&text).is_err() {
            let names = self.member.supports.iter().map(|s| s.name.as_str());
            let names = names.chain(self.member.spans.iter().map(|span| span.name.as_str()));
            let hint = match nearest(&text, names) {
                Some(near) => format!("did you mean {near}?"),
                None => "a support, a station as in \"2.5 m\", or a span as in \"A-B\"".to_owned(),
            };
            self.reader.fault(value.span(), format!("\"{}\" is no place on the member", clip(&text)), hint);
            return None;
        }
        let (at, _) = self.reader.metres(value, "at")?;
        if at < Place::ZERO || at > self.member.end() {
            let message = format!("at lies off the member, which runs from 0 to {} m", self.member.end().exact());
            self.reader.fault(value.span(), message, "places are measured from the member's left end");
            return None;
        }
        Some(Ask::Station { along, at, side, measured })
    }
}
