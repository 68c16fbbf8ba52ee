//! Revisions, assumptions, sources, and how the sheet is to be printed.

use toml::de::DeValue;

use super::Build;
use crate::deck::{Row, Value};
use crate::member::{Assumption, Declared, Part, Revision};

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
        for (index, item) in self.reader.items(value, "revision").into_iter().enumerate() {
            let Some(row) = self.reader.row(item, format!("revision {}", index + 1)) else { continue };
            self.reader.known(&row, &["letter", "date", "what", "why", "moved"]);
            let letter = self.reader.required_text(&row, "letter").unwrap_or_default();
            let date = self.reader.required(&row, "date").and_then(|value| self.date(value)).unwrap_or_default();
            let what = self.reader.required_text(&row, "what").unwrap_or_default();
            let why = self.reader.required_text(&row, "why").unwrap_or_default();
            let moved = self.reader.optional_text(&row, "moved").unwrap_or_default();
            self.member.record.revisions.push(Revision { letter, date, what, why, moved });
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
        for (index, item) in self.reader.items(value, "assumption").into_iter().enumerate() {
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
        self.reader.known(&row, &["paper", "first_sheet", "detail", "retention"]);
        let wishes = &mut self.member.record.sheet;
        wishes.letter = row
            .table
            .get("paper")
            .and_then(|value| self.reader.word(value, "paper", &[("a4", false), ("letter", true)]));
        wishes.brief = row
            .table
            .get("detail")
            .and_then(|value| self.reader.word(value, "detail", &[("full", false), ("brief", true)]));
        if let Some(value) = row.table.get("first_sheet")
            && let Some(number) = self.reader.positive_number(value, "first_sheet")
        {
            if number.value <= 9999.0 && number.value.fract() == 0.0 {
                self.member.record.sheet.first_sheet = Some(number.value as usize);
            } else {
                self.reader.fault(value.span(), "first_sheet must be a whole number up to 9999", "");
            }
        }
        self.member.record.retention = self.reader.optional_text(&row, "retention");
    }

    /// A date without a time.
    pub(super) fn date(&mut self, value: Value<'_>) -> Option<(u16, u8, u8)> {
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
}
