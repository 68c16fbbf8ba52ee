//! The heading of the calculation.

use super::Build;
use crate::deck::Row;
use crate::member::{System, Title};

impl Build<'_> {
    pub(super) fn title(&mut self, root: &Row<'_>) {
        let Some(value) = root.table.get("title") else {
            if !self.reader.has(root, "title") {
                let hint = "add a table [title] with project, number, subject, revision and date";
                self.reader.fault(root.span.clone(), "the deck has no title", hint);
            }
            return;
        };
        let Some(row) = self.reader.row(value, "title") else { return };
        let keys = [
            "project",
            "number",
            "subject",
            "revision",
            "date",
            "prepared",
            "checked",
            "approved",
            "client",
            "office",
            "units",
            "retention",
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
        self.member.record.retention = optional("retention");
        self.member.title = Title {
            prepared: optional("prepared"),
            checked: optional("checked"),
            approved: optional("approved"),
            client: optional("client"),
            office: optional("office"),
            ..title
        };
        if let Some(value) = self.reader.required(&row, "date") {
            self.member.title.date = self.reader.date(value, "date").unwrap_or_default();
        }
        if let Some(value) = row.table.get("units") {
            let words = [("SI", System::Si), ("US", System::Us)];
            self.member.title.system = self.reader.word(value, "units", &words).unwrap_or_default();
        }
        let title = &self.member.title;
        if let (Some(prepared), Some(checked)) = (&title.prepared, &title.checked)
            && prepared.trim().eq_ignore_ascii_case(checked.trim())
            && let Some(value) = row.table.get("checked")
        {
            let hint = "a check is another person's work";
            self.reader.warn(value.span(), "the same person has prepared and checked the calculation", hint);
        }
    }
}
