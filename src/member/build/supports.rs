//! Supports, hinges, spans.

use toml::de::DeValue;

use super::Build;
use crate::deck::{Named, Row};
use crate::member::{Declared, Hinge, Hold, Part, Place, Span, Support, SupportKind};
use crate::quantity::{Intensity, Physical, RotationalStiffness};

const KINDS: [(&str, SupportKind); 5] = [
    ("fixed", SupportKind::Fixed),
    ("pinned", SupportKind::Pinned),
    ("roller", SupportKind::Roller),
    ("guided", SupportKind::Guided),
    ("elastic", SupportKind::Elastic),
];

/// A support, where its name stands, and what is said of its source.
type Found = (std::ops::Range<usize>, Support, Vec<Declared>);

impl Build<'_> {
    pub(super) fn supports(&mut self, root: &Row<'_>) {
        let list = self.reader.named(root, "support");
        let empty = list.as_ref().is_none_or(Vec::is_empty);
        self.supports.complete = !empty && !self.reader.misspelt(root, "support");
        if empty && (list.is_some() || !self.reader.has(root, "support")) {
            let span = root.table.get("support").map_or(root.span.clone(), toml::Spanned::span);
            let hint = "add a table [support.NAME] with at and kind";
            self.reader.fault(span, "the member has no support", hint);
        }
        let mut found = Vec::new();
        for Named { name, span, row } in list.unwrap_or_default() {
            self.supports.add(&name, span.clone(), None);
            match self.support(&name, &row) {
                Some((support, declared)) => found.push((span, support, declared)),
                None => self.supports_known = false,
            }
        }
        found.sort_by_key(|(_, support, _): &Found| support.at);
        for (left, right) in found.iter().zip(found.iter().skip(1)) {
            if left.1.at == right.1.at {
                let message = format!("supports {} and {} stand at the same place", left.1.name, right.1.name);
                self.reader.fault(right.0.clone(), message, "one support may hold both movements");
                self.supports_known = false;
            }
        }
        for (index, (span, support, declared)) in found.into_iter().enumerate() {
            self.supports.settle(&support.name, index);
            self.support_spans.push(span);
            self.member.supports.push(support);
            let declared = declared.into_iter().map(|one| Declared { part: Part::Support(index), ..one });
            self.member.record.declared.extend(declared);
        }
        self.supports_known &= self.supports.complete;
    }

    fn support(&mut self, name: &str, row: &Row<'_>) -> Option<(Support, Vec<Declared>)> {
        self.reader.known(row, &["at", "kind", "vertical", "rotation", "source", "confirm"]);
        let declared = self.member.record.declared.len();
        self.declare(row, Part::Support(0), format!("support {name}"));
        let declared = self.member.record.declared.split_off(declared);
        let before = self.reader.errors();
        let at = self.reader.required(row, "at").and_then(|value| self.place(value, "at"));
        let kind = self.reader.required(row, "kind").and_then(|value| self.reader.word(value, "kind", &KINDS));
        let kind = kind?;
        if kind != SupportKind::Elastic {
            for key in ["vertical", "rotation"] {
                if let Some(value) = row.table.get(key) {
                    let message = format!("{key} belongs to elastic supports only");
                    self.reader.fault(value.span(), message, "write kind = \"elastic\", or leave it out");
                }
            }
        }
        let (vertical, rotation) = match kind {
            SupportKind::Fixed => (Hold::Rigid, Hold::Rigid),
            SupportKind::Pinned | SupportKind::Roller => (Hold::Rigid, Hold::Free),
            SupportKind::Guided => (Hold::Free, Hold::Rigid),
            SupportKind::Elastic => {
                (self.hold::<Intensity>(row, "vertical"), self.hold::<RotationalStiffness>(row, "rotation"))
            }
        };
        if kind == SupportKind::Elastic {
            self.elastic(name, row, matches!((&vertical, &rotation), (Hold::Free, Hold::Free)));
        }
        let misspelt = |key: &str| self.reader.misspelt(row, key);
        if self.reader.errors() > before || misspelt("vertical") || misspelt("rotation") {
            self.supports_known = false;
        }
        Some((Support { name: name.to_owned(), at: at?, kind, vertical, rotation }, declared))
    }

    /// What an elastic support says of its movements.
    fn elastic(&mut self, name: &str, row: &Row<'_>, nothing: bool) {
        let said = ["vertical", "rotation"].map(|key| self.reader.has(row, key));
        let place = row.table.get("kind").map_or(row.span.clone(), toml::Spanned::span);
        if nothing && (said == [false, false] || said == ["vertical", "rotation"].map(|k| row.table.contains_key(k))) {
            let hint = "give it vertical or rotation, as in vertical = \"12 kN/mm\", or take it out";
            self.reader.fault(place, format!("support {name} holds nothing"), hint);
            return;
        }
        for (key, said) in ["vertical", "rotation"].into_iter().zip(said) {
            if !said {
                let message = format!("support {name} says nothing of {key}, which is taken as free");
                self.reader.warn(place.clone(), message, format!("write {key} = \"free\" if that is meant"));
            }
        }
    }

    /// How an elastic support holds a movement; what it does not name it does not hold.
    fn hold<K: Physical>(&mut self, row: &Row<'_>, key: &str) -> Hold<K> {
        let Some(value) = row.table.get(key) else { return Hold::Free };
        match value.get_ref() {
            DeValue::String(word) if word == "rigid" => Hold::Rigid,
            DeValue::String(word) if word == "free" => Hold::Free,
            DeValue::String(word) if !word.is_empty() && word.chars().all(char::is_alphabetic) => {
                // Reports the word with its nearest; a stiffness may stand there as well.
                let words = [("rigid", ()), ("free", ()), ("a stiffness with its unit", ())];
                let _ = self.reader.word(value, key, &words);
                Hold::Rigid
            }
            // Held in some way: no second fault for a stiffness that could not be read.
            _ => self.reader.positive(value, key).map_or(Hold::Rigid, Hold::Spring),
        }
    }

    pub(super) fn hinges(&mut self, root: &Row<'_>) {
        let before = self.reader.errors();
        let mut list = Vec::new();
        for Named { name, span, row } in self.reader.named(root, "hinge").unwrap_or_default() {
            self.reader.known(&row, &["at"]);
            let Some(value) = self.reader.required(&row, "at") else { continue };
            let Some(at) = self.place(value, "at") else { continue };
            let held = self.member.supports.iter().find(|support| support.at == at && support.holds_rotation());
            if at == Place::ZERO || at == self.end {
                let message = format!("hinge {name} stands at an end of the member");
                self.reader.fault(value.span(), message, "no moment passes an end: take the hinge out");
            } else if let Some(support) = held {
                let message = format!("hinge {name} stands at support {}, which holds rotation", support.name);
                self.reader.fault(value.span(), message, "move one of them, or let the support turn");
            }
            if self.member.supports.iter().any(|support| support.name == name) {
                let hint = "two names are easier to tell apart in the working";
                self.reader.warn(span.clone(), format!("hinge {name} is called like a support"), hint);
            }
            list.push((span, Hinge { name, at }));
        }
        list.sort_by_key(|(_, hinge)| hinge.at);
        for (left, right) in list.iter().zip(list.iter().skip(1)) {
            if left.1.at == right.1.at {
                let message = format!("hinges {} and {} stand at the same place", left.1.name, right.1.name);
                self.reader.fault(right.0.clone(), message, "one hinge releases the moment there: take the other out");
            }
        }
        self.hinges_known = self.reader.errors() == before && !self.reader.misspelt(root, "hinge");
        self.member.hinges = list.into_iter().map(|(_, hinge)| hinge).collect();
    }

    pub(super) fn spans(&mut self) {
        self.spans.complete = self.supports_known && self.length_known;
        let supports = self.member.supports.iter().enumerate();
        let holding: Vec<(usize, String, Place)> = supports
            .filter(|(_, support)| support.holds_deflection())
            .map(|(index, support)| (index, support.name.clone(), support.at))
            .collect();
        let end = self.end;
        let mut spans = Vec::new();
        if let Some((index, name, at)) = holding.first()
            && *at > Place::ZERO
        {
            let name = format!("start-{name}");
            spans.push(Span { name, from: Place::ZERO, to: *at, left: None, right: Some(*index) });
        }
        for (left, right) in holding.iter().zip(holding.iter().skip(1)) {
            let name = format!("{}-{}", left.1, right.1);
            spans.push(Span { name, from: left.2, to: right.2, left: Some(left.0), right: Some(right.0) });
        }
        if let Some((index, name, at)) = holding.last()
            && *at < end
        {
            let name = format!("{name}-end");
            spans.push(Span { name, from: *at, to: end, left: Some(*index), right: None });
        }
        for (index, span) in spans.iter().enumerate() {
            self.spans.add(&span.name, 0..0, Some(index));
        }
        self.member.spans = spans;
    }
}
