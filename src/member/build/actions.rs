//! Load cases.

use super::Build;
use crate::deck::{Named, Row, Value};
use crate::member::{Case, Declared, Load, LoadKind, Nature, Part};

/// The kinds of load and the keys each takes.
const KINDS: [(&str, &[&str]); 9] = [
    ("self_weight", &[]),
    ("uniform", &["w", "from", "to"]),
    ("linear", &["w", "from", "to"]),
    ("area", &["q", "width", "from", "to"]),
    ("point", &["p", "at"]),
    ("couple", &["m", "at"]),
    ("settlement", &["support", "by"]),
    ("rotation", &["support", "by"]),
    ("gradient", &["difference", "from", "to"]),
];

impl Build<'_> {
    pub(super) fn cases(&mut self, root: &Row<'_>) {
        let list = self.reader.named(root, "case");
        let empty = list.as_ref().is_none_or(Vec::is_empty);
        self.cases.complete = !empty && !self.reader.misspelt(root, "case");
        if empty && (list.is_some() || !self.reader.has(root, "case")) {
            let span = root.table.get("case").map_or(root.span.clone(), toml::Spanned::span);
            self.reader.fault(span, "the deck has no load case", "add a table [case.NAME] with nature and loads");
        }
        for (index, Named { name, span, row }) in list.unwrap_or_default().into_iter().enumerate() {
            self.cases.add(&name, span, Some(index));
            self.reader.known(&row, &["title", "nature", "loads"]);
            let title = self.reader.optional_text(&row, "title").unwrap_or_default();
            let nature = self.reader.required(&row, "nature");
            let nature = nature.and_then(|value| self.reader.word(value, "nature", &Nature::WORDS));
            let value = self.reader.required(&row, "loads");
            let loads = value.map(|value| self.loads(value, &name, index)).unwrap_or_default();
            self.member.cases.push(Case { name, title, nature: nature.unwrap_or(Nature::Other), loads });
        }
    }

    fn loads(&mut self, value: Value<'_>, name: &str, case: usize) -> Vec<Load> {
        let mut loads: Vec<Load> = Vec::new();
        let before = self.reader.errors();
        let items = self.reader.items(value, "loads");
        if items.is_empty() && self.reader.errors() == before {
            self.reader.warn(value.span(), format!("case {name} has no load"), "give it one, or take the case out");
        }
        for (index, item) in items.into_iter().enumerate() {
            let path = format!("load {} of case {name}", index + 1);
            let part = Part::Load(case, loads.len());
            let Some(load) = self.load(item, path, part) else { continue };
            if load.kind == LoadKind::SelfWeight && loads.iter().any(|load| load.kind == LoadKind::SelfWeight) {
                let message = format!("case {name} holds the self-weight twice");
                self.reader.warn(item.span(), message, "take one of them out");
            }
            loads.push(load);
        }
        loads
    }

    fn load(&mut self, item: Value<'_>, path: String, part: Part) -> Option<Load> {
        let row = self.reader.row(item, path)?;
        let words: Vec<(&str, usize)> = KINDS.iter().enumerate().map(|(index, (word, _))| (*word, index)).collect();
        let value = match row.table.get("kind") {
            Some(value) => value,
            None => {
                let own = KINDS.iter().flat_map(|(_, own)| own.iter().copied());
                let keys: Vec<&str> = ["kind", "note", "source", "confirm"].into_iter().chain(own).collect();
                self.reader.known(&row, &keys);
                self.reader.required(&row, "kind")?
            }
        };
        let index = self.reader.word(value, "kind", &words)?;
        let (word, own) = KINDS.get(index)?;
        let keys: Vec<&str> = ["kind", "note", "source", "confirm"].into_iter().chain(own.iter().copied()).collect();
        self.reader.known(&row, &keys);
        let note = self.reader.optional_text(&row, "note");
        let source = self.reader.optional_text(&row, "source");
        if self.reader.flag(&row, "confirm") {
            let words = format!("{} ({})", row.path, word.replace('_', " "));
            let source = source.clone().unwrap_or_default();
            self.member.record.declared.push(Declared { part, words, source, confirm: true });
        }
        let kind = self.kind(index, &row)?;
        if is_nothing(&kind) {
            let hint = "give it a size, or take it out";
            self.reader.warn(item.span(), format!("{} is zero", row.path), hint);
        }
        Some(Load { kind, note, source })
    }
}

/// Whether a load loads nothing.
fn is_nothing(kind: &LoadKind) -> bool {
    match kind {
        LoadKind::SelfWeight => false,
        LoadKind::Uniform { w, .. } => w.value.si() == 0.0,
        LoadKind::Linear { left, right, .. } => left.value.si() == 0.0 && right.value.si() == 0.0,
        LoadKind::Area { q, .. } => q.value.si() == 0.0,
        LoadKind::Point { p, .. } => p.value.si() == 0.0,
        LoadKind::Couple { m, .. } => m.value.si() == 0.0,
        LoadKind::Settlement { by, .. } => by.value.si() == 0.0,
        LoadKind::Rotation { by, .. } => by.value.si() == 0.0,
        LoadKind::Gradient { difference, .. } => difference.value.si() == 0.0,
    }
}
