//! The names of a deck and what they stand for.

use std::collections::BTreeMap;
use std::ops::Range;

use super::reader::{Reader, Row, Value};
use super::words::{clip, is_name, suggest};

/// One named table.
#[derive(Clone, Debug)]
pub struct Named<'a> {
    /// Its name.
    pub name: String,
    /// Where the name stands.
    pub span: Range<usize>,
    /// The table.
    pub row: Row<'a>,
}

/// Names of one kind, with what each stands for.
#[derive(Clone, Debug)]
pub struct Names {
    /// What such a name is called: `section`.
    what: &'static str,
    /// In the deck's order.
    list: Vec<(String, Range<usize>)>,
    /// The index of what could be read, `None` for what could not: its fault has been reported.
    index: BTreeMap<String, Option<usize>>,
    /// Whether a name that is not here is a mistake of its own; false once the whole table is missing or in doubt.
    pub complete: bool,
}

impl Names {
    /// No names yet.
    pub fn new(what: &'static str) -> Self {
        Self { what, list: Vec::new(), index: BTreeMap::new(), complete: true }
    }

    /// Adds a name and what it stands for.
    pub fn add(&mut self, name: &str, span: Range<usize>, index: Option<usize>) {
        self.list.push((name.to_owned(), span));
        self.index.insert(name.to_owned(), index);
    }

    /// Gives a name another index.
    pub fn settle(&mut self, name: &str, index: usize) {
        if let Some(slot) = self.index.get_mut(name) {
            *slot = Some(index);
        }
    }

    /// Where a name stands in the file.
    pub fn span(&self, name: &str) -> Option<Range<usize>> {
        self.list.iter().find(|(known, _)| known == name).map(|(_, span)| span.clone())
    }

    /// The index of a name; a fault with the nearest known name where there is none.
    pub fn find(&self, reader: &mut Reader<'_>, span: Range<usize>, name: &str) -> Option<usize> {
        if let Some(index) = self.index.get(name) {
            return *index;
        }
        if self.complete {
            let what = self.what;
            let hint = if self.list.is_empty() {
                format!("the deck names no {what}")
            } else {
                suggest(name, self.list.iter().map(|(known, _)| known.as_str()), "known")
            };
            reader.fault(span, format!("there is no {what} \"{}\"", clip(name)), hint);
        }
        None
    }
}

/// The most tables under one key.
const MOST: usize = 2_000;

impl Reader<'_> {
    /// The named tables under a key, with their names checked. `None` where there is no such table or it is no table.
    pub fn named<'a>(&mut self, root: &Row<'a>, key: &str) -> Option<Vec<Named<'a>>> {
        let value = root.table.get(key)?;
        let group = self.row(value, key)?;
        let mut rows = Vec::new();
        for (name, value) in group.table.iter() {
            let text = name.get_ref().to_string();
            if !is_name(&text) {
                self.fault(
                    name.span(),
                    format!("\"{}\" cannot be a name", clip(&text)),
                    "a name is a letter and up to fifteen letters, digits or underscores; start and end are reserved",
                );
            }
            if rows.len() >= MOST {
                self.fault(name.span(), format!("more than 2,000 tables under {key}"), "split the deck");
                break;
            }
            if let Some(row) = self.row(value, format!("{key}.{}", clip(&text))) {
                rows.push(Named { name: text, span: name.span(), row });
            }
        }
        Some(rows)
    }

    /// The index of a name typed as text.
    pub fn called(&mut self, value: Value<'_>, key: &str, names: &Names) -> Option<usize> {
        let name = self.text(value, key)?;
        names.find(self, value.span(), &name)
    }
}
