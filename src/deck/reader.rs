//! A walk over a spanned TOML tree that collects every fault.

use std::collections::{BTreeMap, BTreeSet};
use std::ops::Range;

use toml::Spanned;
use toml::de::{DeTable, DeValue};

use super::words::{clip, kind_of, nearest, suggest};
use crate::diagnostic::{Diagnostic, Severity};

/// A value with its place.
pub type Value<'a> = &'a Spanned<DeValue<'a>>;

/// A table with its place and its name for messages.
#[derive(Clone, Debug)]
pub struct Row<'a> {
    /// The table.
    pub table: &'a DeTable<'a>,
    /// Where it stands.
    pub span: Range<usize>,
    /// What it is called: `section.deep`. No two tables are called the same.
    pub path: String,
}

/// The most faults that are reported, and the most warnings: nobody reads more.
const MOST: usize = 500;

/// Collects faults and warnings.
#[derive(Debug)]
pub struct Reader<'t> {
    /// The text that is read.
    pub text: &'t str,
    /// Faults and warnings so far, in the order found.
    pub findings: Vec<Diagnostic>,
    /// How many faults there were, listed or not.
    errors: usize,
    /// How many warnings there were, listed or not.
    warnings: usize,
    /// Keys that a misspelt key was taken for, by the path of their table: they are not missed as well.
    meant: BTreeSet<(String, String)>,
    /// Findings about keys that nothing is near to, by the path of their table: one that is missed there may be meant.
    strange: BTreeMap<String, usize>,
}

impl<'t> Reader<'t> {
    /// A reader of this text.
    pub fn new(text: &'t str) -> Self {
        Self { text, findings: Vec::new(), errors: 0, warnings: 0, meant: BTreeSet::new(), strange: BTreeMap::new() }
    }

    /// Reports an error.
    pub fn fault(&mut self, span: Range<usize>, message: impl Into<String>, hint: impl Into<String>) {
        self.errors += 1;
        if self.errors <= MOST {
            self.findings.push(Diagnostic::error(span, message).hint(hint));
        }
    }

    /// Reports what is lawful but odd.
    pub fn warn(&mut self, span: Range<usize>, message: impl Into<String>, hint: impl Into<String>) {
        self.warnings += 1;
        if self.warnings <= MOST {
            self.findings.push(Diagnostic::warning(span, message).hint(hint));
        }
    }

    /// How many errors there have been: by it a caller sees whether a step has failed.
    pub const fn errors(&self) -> usize {
        self.errors
    }

    /// Errors and warnings, each in the order of the file; where there are too many, a last one says how many more.
    pub fn sorted(self) -> (Vec<Diagnostic>, Vec<Diagnostic>) {
        let Self { mut findings, errors, warnings, .. } = self;
        findings.sort_by_key(|finding| finding.span.as_ref().map(|span| span.start));
        let (mut faults, mut odd): (Vec<Diagnostic>, Vec<Diagnostic>) =
            findings.into_iter().partition(|finding| finding.severity == Severity::Error);
        for (list, count, what) in [(&mut faults, errors, "faults"), (&mut odd, warnings, "warnings")] {
            if let Some(last) = list.last().filter(|_| count > list.len()) {
                let message = format!("{} further {what} are not listed", count - list.len());
                list.push(Diagnostic { message, hint: "mend those that are listed first".to_owned(), ..last.clone() });
            }
        }
        (faults, odd)
    }

    /// Reports every key that is not known.
    pub fn known(&mut self, row: &Row<'_>, keys: &[&str]) {
        for key in row.table.keys() {
            let name = key.get_ref().as_ref();
            if !keys.contains(&name) {
                // A longer name for what has a short one here: Emod, Iy, length_m.
                let longer = keys.iter().copied().filter(|key| name.starts_with(key)).max_by_key(|key| key.len());
                let near = nearest(name, keys.iter().copied()).or(longer);
                let hint = match near {
                    Some(near) => format!("did you mean {near}?"),
                    None => suggest(name, keys.iter().copied(), "known keys"),
                };
                self.meant.extend(near.map(|near| (row.path.clone(), near.to_owned())));
                self.fault(key.span(), format!("unknown key \"{}\" in {}", clip(name), row.path), hint);
                if near.is_none() && self.errors <= MOST {
                    self.strange.insert(row.path.clone(), self.findings.len() - 1);
                }
            }
        }
    }

    /// Whether a misspelling of this key has been reported.
    pub fn misspelt(&self, row: &Row<'_>, key: &str) -> bool {
        self.meant.contains(&(row.path.clone(), key.to_owned()))
    }

    /// Whether a key is there, or a misspelling of it that has been reported.
    pub fn has(&self, row: &Row<'_>, key: &str) -> bool {
        row.table.contains_key(key) || self.misspelt(row, key)
    }

    /// A value that must be there; where it is missing and a key is not known, the one is taken for the other.
    pub fn required<'a>(&mut self, row: &Row<'a>, key: &str) -> Option<Value<'a>> {
        let value = row.table.get(key);
        if value.is_none() && !self.has(row, key) {
            let strange = self.strange.remove(&row.path);
            if let Some(finding) = strange.and_then(|index| self.findings.get_mut(index)) {
                finding.hint = format!("did you mean {key}, which is missing?");
                self.meant.insert((row.path.clone(), key.to_owned()));
                return None;
            }
            self.fault(row.span.clone(), format!("{} lacks the key \"{key}\"", row.path), format!("add {key} = …"));
        }
        value
    }

    /// Text that is there.
    pub fn text(&mut self, value: Value<'_>, key: &str) -> Option<String> {
        match value.get_ref() {
            DeValue::String(text) if text.len() <= 10_000 => Some(text.to_string()),
            DeValue::String(_) => {
                self.fault(value.span(), format!("{key} is longer than 10,000 bytes"), "shorten it");
                None
            }
            _ => self.wrong_type(value, key, "text", "write it in quotes"),
        }
    }

    /// Reports a value of the wrong kind.
    pub fn wrong_type<T>(&mut self, value: Value<'_>, key: &str, wanted: &str, hint: &str) -> Option<T> {
        let found = kind_of(value.get_ref().type_str());
        self.fault(value.span(), format!("{key} must be {wanted}, not {found}"), hint);
        None
    }

    /// Text that may be there.
    pub fn optional_text(&mut self, row: &Row<'_>, key: &str) -> Option<String> {
        let value = row.table.get(key)?;
        self.text(value, key)
    }

    /// Text that must be there and not be empty.
    pub fn required_text(&mut self, row: &Row<'_>, key: &str) -> Option<String> {
        let value = self.required(row, key)?;
        let text = self.text(value, key)?;
        if text.trim().is_empty() {
            self.fault(value.span(), format!("{key} is empty"), "");
            return None;
        }
        Some(text)
    }

    /// A date without a time, as year, month, day.
    pub fn date(&mut self, value: Value<'_>, key: &str) -> Option<(u16, u8, u8)> {
        let hint = "write it without quotes: 2026-11-30";
        match value.get_ref() {
            DeValue::Datetime(stamp) => match (stamp.date, stamp.time, stamp.offset) {
                (Some(date), None, None) => Some((date.year, date.month, date.day)),
                _ => {
                    self.fault(value.span(), format!("{key} must be a date without a time"), hint);
                    None
                }
            },
            _ => self.wrong_type(value, key, "a date", hint),
        }
    }

    /// A flag.
    pub fn flag(&mut self, row: &Row<'_>, key: &str) -> bool {
        match row.table.get(key).map(|value| (value, value.get_ref())) {
            None => false,
            Some((_, DeValue::Boolean(flag))) => *flag,
            Some((value, _)) => self.wrong_type(value, key, "true or false", "without quotes").unwrap_or(false),
        }
    }

    /// A word out of a list.
    pub fn word<T: Copy>(&mut self, value: Value<'_>, key: &str, words: &[(&str, T)]) -> Option<T> {
        let text = self.text(value, key)?;
        if let Some((_, found)) = words.iter().find(|(word, _)| *word == text) {
            return Some(*found);
        }
        let hint = suggest(&text, words.iter().map(|(word, _)| *word), "one of");
        self.fault(value.span(), format!("{key} cannot be \"{}\"", clip(&text)), hint);
        None
    }

    /// A table that is there.
    pub fn row<'a>(&mut self, value: Value<'a>, path: impl Into<String>) -> Option<Row<'a>> {
        let path = path.into();
        match value.get_ref() {
            DeValue::Table(table) => Some(Row { table, span: value.span(), path }),
            _ => self.wrong_type(value, &path, "a table", ""),
        }
    }

    /// The items of a list; at most 20,000, which is some loads on each of a thousand spans.
    pub fn items<'a>(&mut self, value: Value<'a>, key: &str) -> Vec<Value<'a>> {
        self.list(value, key, 20_000, "write it in square brackets")
    }

    /// The tables under `[[key]]`, at most `most`.
    pub fn tables<'a>(&mut self, value: Value<'a>, key: &str, most: usize) -> Vec<Value<'a>> {
        self.list(value, key, most, &format!("write [[{key}]] with two brackets"))
    }

    fn list<'a>(&mut self, value: Value<'a>, key: &str, most: usize, hint: &str) -> Vec<Value<'a>> {
        let DeValue::Array(list) = value.get_ref() else {
            return self.wrong_type(value, key, "a list", hint).unwrap_or_default();
        };
        if let Some(first) = list.get(most) {
            self.fault(first.span(), format!("more than {most} items in {key}"), "split the deck");
        }
        list.iter().take(most).collect()
    }
}
