//! Allowable deflections.

use std::ops::Range;

use super::Build;
use super::asked::PURPOSES;
use crate::deck::{Named, Names, Row, Value};
use crate::member::{Factor, Limit, Measured, Part};

const KEYS: [&str; 10] = [
    "ratio",
    "absolute",
    "purpose",
    "combinations",
    "spans",
    "measured",
    "cantilever_length_factor",
    "basis",
    "source",
    "confirm",
];

impl Build<'_> {
    pub(super) fn limits(&mut self, root: &Row<'_>) {
        for Named { name, span, row } in self.reader.named(root, "limit").unwrap_or_default() {
            self.reader.known(&row, &KEYS);
            self.declare(&row, Part::Limit(self.member.limits.len()), format!("limit {name}"));
            let limit = self.limit(name, span, &row);
            self.member.limits.push(limit);
        }
    }

    fn limit(&mut self, name: String, span: Range<usize>, row: &Row<'_>) -> Limit {
        let ratio = row.table.get("ratio").and_then(|value| self.ratio(value));
        let absolute = row.table.get("absolute").and_then(|value| self.reader.positive(value, "absolute"));
        if !self.reader.has(row, "ratio") && !self.reader.has(row, "absolute") {
            let message = format!("limit {name} allows nothing");
            self.reader.fault(span.clone(), message, "give ratio, absolute, or both");
        }
        let combinations = self.limited_combinations(&name, row);
        let spans = self.limited_spans(&name, row);
        let words = [("chord", Measured::Chord), ("absolute", Measured::Absolute)];
        let measured = row.table.get("measured").and_then(|value| self.reader.word(value, "measured", &words));
        let factor = self.cantilever(&name, span, row, &spans);
        let basis = self.reader.required_text(row, "basis").unwrap_or_default();
        Limit {
            name,
            ratio,
            absolute,
            combinations,
            spans,
            measured: measured.unwrap_or(Measured::Chord),
            cantilever_length_factor: factor,
            basis,
        }
    }

    fn ratio(&mut self, value: Value<'_>) -> Option<Factor> {
        let ratio = self.reader.positive_number(value, "ratio")?;
        if ratio.value < 10.0 {
            let hint = "ratio is the number below the line: 250 for span/250";
            self.reader.warn(value.span(), "this ratio allows more than a tenth of the span", hint);
        }
        Some(ratio)
    }

    /// The factor for cantilevers; required where a ratio covers one.
    fn cantilever(&mut self, name: &str, span: Range<usize>, row: &Row<'_>, spans: &[usize]) -> Option<Factor> {
        let key = "cantilever_length_factor";
        let value = row.table.get(key);
        let factor = value.and_then(|value| self.reader.positive_number(value, key));
        let covered = spans.iter().filter_map(|span| self.member.spans.get(*span)).find(|span| span.is_cantilever());
        let covered = covered.map(|span| span.name.clone());
        if !self.spans.complete {
            return factor;
        }
        match (covered, value) {
            (Some(covered), None) if self.reader.has(row, "ratio") && !self.reader.has(row, key) => {
                let message = format!("limit {name} covers the cantilever {covered} without {key}");
                let hint = "2 where the code doubles a cantilever's length, 1 where it gives cantilevers their own \
                            ratio; or name the spans";
                self.reader.fault(span, message, hint);
            }
            (None, Some(value)) if !spans.is_empty() => {
                let message = format!("limit {name} covers no cantilever, so that its {key} changes nothing");
                self.reader.warn(value.span(), message, "take it out, or name the cantilever among the spans");
            }
            _ => {}
        }
        factor
    }

    fn limited_combinations(&mut self, name: &str, row: &Row<'_>) -> Vec<usize> {
        let all: Vec<usize> = (0..self.member.combinations.len()).collect();
        let purpose = row.table.get("purpose");
        if let Some(value) = row.table.get("combinations") {
            if purpose.is_some() {
                let message = format!("limit {name} gives both purpose and combinations");
                self.reader.fault(value.span(), message, "give one of them");
            }
            let names = std::mem::replace(&mut self.combinations, Names::new("combination"));
            let found = self.indices(value, name, "combination", &names);
            self.combinations = names;
            return found.unwrap_or(all);
        }
        let Some(value) = purpose else { return all };
        let Some(wanted) = self.reader.word(value, "purpose", &PURPOSES) else { return all };
        let of = |index: &usize| self.member.combinations.get(*index).is_some_and(|c| c.purpose == wanted);
        let found: Vec<usize> = all.into_iter().filter(of).collect();
        if found.is_empty() && self.combinations.complete && self.purposes_known {
            let hint = format!("no combination is for {}", wanted.word());
            self.reader.fault(value.span(), format!("limit {name} applies to nothing"), hint);
        }
        found
    }

    fn limited_spans(&mut self, name: &str, row: &Row<'_>) -> Vec<usize> {
        let all: Vec<usize> = (0..self.member.spans.len()).collect();
        let Some(value) = row.table.get("spans") else { return all };
        let mut names = std::mem::replace(&mut self.spans, Names::new("span"));
        let complete = names.complete;
        // A member none of whose supports holds deflection is a mechanism, which is reported as such.
        names.complete &= !all.is_empty();
        let found = self.indices(value, name, "span", &names);
        names.complete = complete;
        self.spans = names;
        found.unwrap_or(all)
    }

    /// Indices of named things; `None` where one could not be found.
    fn indices(&mut self, value: Value<'_>, limit: &str, what: &str, names: &Names) -> Option<Vec<usize>> {
        let before = self.reader.errors();
        let items = self.reader.items(value, &format!("{what}s"));
        if items.is_empty() && self.reader.errors() == before {
            let hint = format!("name a {what}, or leave {what}s out to cover all of them");
            self.reader.fault(value.span(), format!("limit {limit} applies to nothing"), hint);
        }
        let mut found = Vec::new();
        let mut complete = true;
        for item in items {
            match self.reader.called(item, what, names) {
                Some(index) if !found.contains(&index) => found.push(index),
                Some(_) => self.reader.warn(item.span(), format!("this {what} is named twice"), "take one of them out"),
                None => complete = false,
            }
        }
        complete.then_some(found)
    }
}
