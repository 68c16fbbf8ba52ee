//! Revisions, assumptions, sources, and how the sheet is to be printed.

use super::Build;
use crate::deck::Row;
use crate::member::{Assumption, Decimals, Declared, Part, Revision};

/// The most revisions and the most assumptions.
const MOST: usize = 1_000;

impl Build<'_> {
    /// The source of a part of the deck, and whether it waits for confirmation.
    pub(super) fn declare(&mut self, row: &Row<'_>, part: Part, words: impl Into<String>) {
        let source = self.reader.optional_text(row, "source").unwrap_or_default();
        let confirm = self.reader.flag(row, "confirm");
        if confirm || !source.trim().is_empty() {
            self.member.record.declared.push(Declared { part, words: words.into(), source, confirm });
        }
    }

    pub(super) fn revisions(&mut self, root: &Row<'_>) {
        let Some(value) = root.table.get("revision") else { return };
        let mut last: Option<Revision> = None;
        for (index, item) in self.reader.tables(value, "revision", MOST).into_iter().enumerate() {
            let Some(row) = self.reader.row(item, format!("revision {}", index + 1)) else { continue };
            self.reader.known(&row, &["letter", "date", "what", "why", "moved"]);
            let letter = self.reader.required_text(&row, "letter").unwrap_or_default();
            let date = self.reader.required(&row, "date").and_then(|value| self.reader.date(value, "date"));
            let what = self.reader.required_text(&row, "what").unwrap_or_default();
            let why = self.reader.required_text(&row, "why").unwrap_or_default();
            let moved = self.reader.optional_text(&row, "moved").unwrap_or_default();
            let revision = Revision { letter, date: date.unwrap_or_default(), what, why, moved };
            if self.member.record.revisions.iter().any(|other| other.letter == revision.letter)
                && let Some(value) = row.table.get("letter")
            {
                let message = format!("revision \"{}\" is told of twice", crate::deck::clip(&revision.letter));
                self.reader.warn(value.span(), message, "each revision has its own letter");
            }
            if let (Some(last), Some(date), Some(value)) = (&last, date, row.table.get("date"))
                && date < last.date
            {
                let message = format!("revision {} is dated before the one above it", index + 1);
                self.reader.warn(value.span(), message, "revisions stand in the order of their dates");
            }
            last = Some(revision.clone());
            self.member.record.revisions.push(revision);
        }
        let current = &self.member.title.revision;
        let revisions = &self.member.record.revisions;
        if !revisions.is_empty() && !revisions.iter().any(|revision| revision.letter == *current) {
            let message =
                format!("no [[revision]] tells of revision \"{}\", which the title names", crate::deck::clip(current));
            self.reader.warn(value.span(), message, "say what changed, and why");
        }
    }

    pub(super) fn assumptions(&mut self, root: &Row<'_>) {
        let Some(value) = root.table.get("assumption") else { return };
        for (index, item) in self.reader.tables(value, "assumption", MOST).into_iter().enumerate() {
            let Some(row) = self.reader.row(item, format!("assumption {}", index + 1)) else { continue };
            self.reader.known(&row, &["text", "confirm", "source"]);
            let text = self.reader.required_text(&row, "text").unwrap_or_default();
            let confirm = self.reader.flag(&row, "confirm");
            let source = self.reader.optional_text(&row, "source").unwrap_or_default();
            self.member.record.assumptions.push(Assumption { text, confirm, source });
        }
    }

    pub(super) fn sheet_table(&mut self, root: &Row<'_>) {
        let Some(value) = root.table.get("sheet") else { return };
        let Some(row) = self.reader.row(value, "sheet") else { return };
        let keys = ["paper", "decimals", "decimal_comma", "first_sheet", "detail", "retention"];
        self.reader.known(&row, &keys);
        let papers = [("a4", false), ("letter", true)];
        let letter = row.table.get("paper").and_then(|value| self.reader.word(value, "paper", &papers));
        let details = [("full", false), ("brief", true)];
        let brief = row.table.get("detail").and_then(|value| self.reader.word(value, "detail", &details));
        let first = row.table.get("first_sheet");
        let first = first.and_then(|value| self.reader.whole_number(value, "first_sheet", 1..=9999));
        let decimals = self.decimals(&row);
        let decimal_comma = self.reader.flag(&row, "decimal_comma");
        let first_sheet = first.and_then(|number| usize::try_from(number).ok());
        self.member.record.sheet = crate::member::SheetWishes { letter, first_sheet, brief, decimals, decimal_comma };
        if let Some(value) = row.table.get("retention") {
            if self.member.record.retention.is_some() {
                let hint = "give it once, in the title";
                self.reader.fault(value.span(), "retention is given in the title already", hint);
            } else {
                self.member.record.retention = self.reader.optional_text(&row, "retention");
            }
        }
    }

    /// Decimals by quantity.
    fn decimals(&mut self, row: &Row<'_>) -> Decimals {
        let mut decimals = Decimals::default();
        let Some(value) = row.table.get("decimals") else { return decimals };
        let Some(row) = self.reader.row(value, "sheet.decimals") else { return decimals };
        self.reader.known(&row, &Decimals::KEYS);
        for key in Decimals::KEYS {
            let places = row.table.get(key).and_then(|value| self.reader.whole_number(value, key, 0..=9));
            if let (Some(places), Some(slot)) = (places, decimals.slot(key)) {
                *slot = u8::try_from(places).ok();
            }
        }
        decimals
    }
}
