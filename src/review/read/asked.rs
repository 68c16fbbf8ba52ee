//! What a claim speaks of: a load state, a support, a place, a span, a limit.

use super::{Build, Kind};
use crate::deck::{Row, Value, clip, nearest};
use crate::member::{Measured, Member, Place};
use crate::quantity::parse_quantity;
use crate::review::ask::{Along, Ask, Of, Side};

/// The kinds of things that have names.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Things {
    Cases,
    Combinations,
    Supports,
    Spans,
    Limits,
}

impl Things {
    const fn word(self) -> &'static str {
        match self {
            Self::Cases => "case",
            Self::Combinations => "combination",
            Self::Supports => "support",
            Self::Spans => "span",
            Self::Limits => "limit",
        }
    }

    fn names(self, member: &Member) -> Vec<&str> {
        match self {
            Self::Cases => member.cases.iter().map(|case| case.name.as_str()).collect(),
            Self::Combinations => member.combinations.iter().map(|combination| combination.name.as_str()).collect(),
            Self::Supports => member.supports.iter().map(|support| support.name.as_str()).collect(),
            Self::Spans => member.spans.iter().map(|span| span.name.as_str()).collect(),
            Self::Limits => member.limits.iter().map(|limit| limit.name.as_str()).collect(),
        }
    }
}

impl Build<'_, '_> {
    pub(super) fn of(&mut self, row: &Row<'_>) -> Option<Of> {
        match (row.table.get("case"), row.table.get("combination")) {
            (Some(value), None) => self.named(value, Things::Cases).map(Of::Case),
            (None, Some(value)) => self.named(value, Things::Combinations).map(Of::Combination),
            (Some(value), Some(_)) => {
                let message = format!("{} names both a case and a combination", row.path);
                self.reader.fault(value.span(), message, "take one of them out");
                None
            }
            (None, None) => {
                let hint = "add combination = \"NAME\" or case = \"NAME\"";
                self.reader.fault(row.span.clone(), format!("{} names neither case nor combination", row.path), hint);
                None
            }
        }
    }

    pub(super) fn limit(&mut self, row: &Row<'_>) -> Option<String> {
        self.named(row.table.get("limit")?, Things::Limits)
    }

    /// A name of something that the deck has.
    fn named(&mut self, value: Value<'_>, things: Things) -> Option<String> {
        let what = things.word();
        let name = self.reader.text(value, what)?;
        let Some(member) = self.member else { return Some(name) };
        let names = things.names(member);
        if names.contains(&name.as_str()) {
            return Some(name);
        }
        let hint = match nearest(&name, names.iter().copied()) {
            Some(near) => format!("did you mean {near}?"),
            None if names.is_empty() => format!("the deck has no {what}"),
            None => format!("the deck has: {}", clip(&names.join(", "))),
        };
        self.reader.fault(value.span(), format!("there is no {what} \"{}\"", clip(&name)), hint);
        None
    }

    pub(super) fn ask(
        &mut self,
        kind: Kind,
        row: &Row<'_>,
        side: Side,
        measured: Measured,
        limit: Option<String>,
    ) -> Option<Ask> {
        let along = match kind {
            Kind::Shear => Along::Shear,
            Kind::Moment => Along::Moment,
            Kind::Slope => Along::Slope,
            _ => Along::Deflection,
        };
        match kind {
            Kind::Reaction | Kind::ReactionMoment => {
                let value = self.reader.required(row, "at")?;
                let support = self.named(value, Things::Supports)?;
                Some(if kind == Kind::Reaction { Ask::Reaction { support } } else { Ask::ReactionMoment { support } })
            }
            Kind::Redundant => {
                let value = self.reader.required(row, "at")?;
                self.redundant(value)
            }
            Kind::Moment | Kind::Shear | Kind::Deflection | Kind::Slope => self.along(along, row, side, measured),
            Kind::Allowable | Kind::Utilisation => {
                let value = self.reader.required(row, "at")?;
                let span = self.named(value, Things::Spans)?;
                Some(if kind == Kind::Allowable {
                    Ask::Allowable { span, limit }
                } else {
                    Ask::Utilisation { span, limit }
                })
            }
            Kind::Verdict => {
                let span = match row.table.get("at") {
                    Some(value) => Some(self.named(value, Things::Spans)?),
                    None => None,
                };
                Some(Ask::Verdict { span, limit })
            }
        }
    }

    fn redundant(&mut self, value: Value<'_>) -> Option<Ask> {
        let name = self.reader.text(value, "at")?;
        let support = ["R.", "M."].iter().find_map(|letter| name.strip_prefix(letter));
        let known =
            |support: &str| self.member.is_none_or(|member| member.supports.iter().any(|known| known.name == support));
        if support.is_some_and(known) {
            return Some(Ask::Redundant { name });
        }
        let hint = "write R.B for a support's force, M.B for a moment";
        self.reader.fault(value.span(), format!("\"{}\" names no redundant", clip(&name)), hint);
        None
    }

    /// A place: a support's name or a station; or an extreme within a span.
    fn along(&mut self, along: Along, row: &Row<'_>, side: Side, measured: Measured) -> Option<Ask> {
        let extreme = row.table.get("extreme").map(|value| {
            let ends = [("max", true), ("min", false)];
            self.reader.word(value, "extreme", &ends)
        });
        let value = self.reader.required(row, "at")?;
        if let Some(max) = extreme {
            let span = self.named(value, Things::Spans)?;
            return Some(Ask::Extreme { along, span, max: max?, measured });
        }
        let text = self.reader.text(value, "at")?;
        let station = |at: Place| Ask::Station { along, at, side, measured };
        let Some(member) = self.member else {
            // Any name will do until the deck can be asked; what looks like a length is read as one.
            if text.starts_with(|letter: char| letter.is_ascii_digit()) {
                self.reader.metres(value, "at")?;
            }
            return Some(station(Place::ZERO));
        };
        if member.spans.iter().any(|span| span.name == text) {
            let message = format!("{} names a span without saying which extreme", row.path);
            self.reader.fault(value.span(), message, "add extreme = \"max\" or extreme = \"min\"");
            return None;
        }
        if let Some(support) = member.supports.iter().find(|support| support.name == text) {
            return Some(station(support.at));
        }
        match text.as_str() {
            "start" => return Some(station(Place::ZERO)),
            "end" => return Some(station(member.end())),
            _ => {}
        }
        let length = text.starts_with(|letter: char| letter.is_ascii_digit() || "+-.".contains(letter));
        if !length && parse_quantity(&text).is_err() {
            let names = [Things::Supports.names(member), Things::Spans.names(member)].concat();
            let hint = match nearest(&text, names) {
                Some(near) => format!("did you mean {near}?"),
                None => "a support, a station as in \"2.5 m\", or a span as in \"A-B\" with extreme".to_owned(),
            };
            self.reader.fault(value.span(), format!("\"{}\" is no place on the member", clip(&text)), hint);
            return None;
        }
        let (at, _) = self.reader.metres(value, "at")?;
        if at < Place::ZERO || at > member.end() {
            let message = format!("at lies off the member, which runs from 0 to {} m", member.end().exact());
            self.reader.fault(value.span(), message, "places are measured from the member's left end");
            return None;
        }
        Some(station(at))
    }
}
