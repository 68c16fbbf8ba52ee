//! What is asked of the member: stations, redundants, combinations, limits; and what is odd about it.

use toml::de::DeValue;

use super::Build;
use crate::deck::{Row, Value};
use crate::member::{Combination, Factor, Limit, LoadKind, Measured, Part, Purpose, Redundant, Weight};
use crate::quantity::Decimal;

const PURPOSES: [(&str, Purpose); 3] =
    [("serviceability", Purpose::Serviceability), ("strength", Purpose::Strength), ("stability", Purpose::Stability)];

impl Build<'_> {
    pub(super) fn member_table(&mut self, root: &Row<'_>) {
        let Some(value) = root.table.get("member") else { return };
        let Some(row) = self.reader.row(value, "member") else { return };
        self.reader.known(&row, &["stations", "redundants"]);
        if let Some(value) = row.table.get("stations") {
            for item in self.reader.items(value, "stations") {
                if let Some(place) = self.place(item, "station") {
                    if self.member.stations.contains(&place) {
                        self.reader.warn(item.span(), "this station is named twice", "");
                    } else {
                        self.member.stations.push(place);
                    }
                }
            }
            self.member.stations.sort_unstable();
        }
        if let Some(value) = row.table.get("redundants") {
            let mut chosen = Vec::new();
            for item in self.reader.items(value, "redundants") {
                if let Some(redundant) = self.redundant(item) {
                    if chosen.contains(&redundant) {
                        self.reader.fault(item.span(), "this redundant is named twice", "");
                    }
                    chosen.push(redundant);
                    self.redundant_spans.push(item.span());
                }
            }
            self.member.redundants = Some(chosen);
        }
    }

    fn redundant(&mut self, value: Value<'_>) -> Option<Redundant> {
        let text = self.reader.text(value, "redundant")?;
        let Some((letter, name)) = text.split_once('.').filter(|(letter, _)| ["R", "M"].contains(letter)) else {
            self.reader.fault(
                value.span(),
                format!("\"{}\" names no redundant", crate::deck::clip(&text)),
                "write R.B for a support's force, M.B for a moment",
            );
            return None;
        };
        let names: Vec<String> = self.member.supports.iter().map(|support| support.name.clone()).collect();
        let index = self.find(value, "support", name, &names)?;
        let support = self.member.supports.get(index)?;
        let at = support.at;
        let hinged = self.member.hinges.iter().any(|hinge| hinge.at == at);
        let inner = at > crate::member::Place::ZERO && at < self.member.end();
        let (redundant, held, why) = if letter == "R" {
            (Redundant::Force(index), support.holds_deflection(), "holds no deflection")
        } else {
            let held = support.holds_rotation() || (inner && !hinged);
            (Redundant::Moment(index), held, "has no moment to release")
        };
        if !held {
            self.reader.fault(value.span(), format!("{text} cannot be released: support {name} {why}"), "");
            return None;
        }
        Some(redundant)
    }

    pub(super) fn combinations(&mut self, root: &Row<'_>) {
        let cases: Vec<String> = self.member.cases.iter().map(|case| case.name.clone()).collect();
        for (name, _, row) in self.reader.named(root, "combination") {
            self.reader.known(&row, &["title", "purpose", "factors"]);
            let title = self.reader.optional_text(&row, "title").unwrap_or_default();
            let purpose =
                self.reader.required(&row, "purpose").and_then(|value| self.reader.word(value, "purpose", &PURPOSES));
            let zero = Factor { value: 0.0, figure: Decimal::ZERO };
            let mut factors = vec![zero; cases.len()];
            if let Some(value) = self.reader.required(&row, "factors")
                && let Some(table) = self.reader.row(value, "factors")
            {
                for (key, value) in table.table.iter() {
                    let case = key.get_ref().to_string();
                    let Some(index) = cases.iter().position(|known| *known == case) else {
                        let hint = match crate::deck::nearest(&case, cases.iter().map(String::as_str)) {
                            Some(near) => format!("did you mean {near}?"),
                            None => format!("known: {}", cases.join(", ")),
                        };
                        self.reader.fault(
                            key.span(),
                            format!("there is no case \"{}\"", crate::deck::clip(&case)),
                            hint,
                        );
                        continue;
                    };
                    let Some(factor) = self.reader.number(value, "factor") else { continue };
                    if factor.value == 0.0 {
                        self.reader.warn(
                            value.span(),
                            format!("the factor of case {case} in {name} is zero"),
                            "leave it out, or give a factor",
                        );
                    }
                    if let Some(slot) = factors.get_mut(index) {
                        *slot = factor;
                    }
                }
                if factors.iter().all(|factor| factor.value == 0.0) {
                    self.reader.warn(table.span, format!("combination {name} holds no load"), "");
                }
            }
            let purpose = purpose.unwrap_or(Purpose::Serviceability);
            self.member.combinations.push(Combination { name, title, purpose, factors });
        }
        if self.member.combinations.is_empty() {
            self.reader.fault(
                root.span.clone(),
                "the deck has no combination",
                "add a table [combination.NAME] with purpose and factors",
            );
        }
    }

    pub(super) fn limits(&mut self, root: &Row<'_>) {
        for (name, span, row) in self.reader.named(root, "limit") {
            let keys = [
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
            self.declare(&row, Part::Limit(self.member.limits.len()), format!("limit {name}"));
            self.reader.known(&row, &keys);
            let ratio = row.table.get("ratio").and_then(|value| self.reader.positive_number(value, "ratio"));
            let absolute = row
                .table
                .get("absolute")
                .and_then(|value| self.positive(value, "absolute", crate::quantity::Length::si));
            if !row.table.contains_key("ratio") && !row.table.contains_key("absolute") {
                self.reader.fault(
                    span.clone(),
                    format!("limit {name} allows nothing"),
                    "give ratio, absolute, or both",
                );
            }
            let combinations = self.limited_combinations(&row);
            let spans = self.limited_spans(&row);
            let words = [("chord", Measured::Chord), ("absolute", Measured::Absolute)];
            let measured = row
                .table
                .get("measured")
                .map_or(Some(Measured::Chord), |value| self.reader.word(value, "measured", &words));
            let factor = row
                .table
                .get("cantilever_length_factor")
                .and_then(|value| self.reader.positive_number(value, "cantilever_length_factor"));
            let basis = self.reader.required_text(&row, "basis").unwrap_or_default();
            let cantilever = spans
                .iter()
                .filter_map(|span| self.member.spans.get(*span))
                .find(|span| span.is_cantilever())
                .map(|span| span.name.clone());
            if let Some(span_name) = cantilever.filter(|_| self.spans_known)
                && !row.table.contains_key("cantilever_length_factor")
                && row.table.contains_key("ratio")
            {
                let message =
                    format!("limit {name} covers the cantilever {span_name} without cantilever_length_factor");
                self.reader.fault(span.clone(), message, "2 where the code doubles a cantilever's length, 1 where it gives cantilevers their own ratio; or name the spans");
            }
            let none = combinations.is_empty() && !self.member.combinations.is_empty();
            if none || (spans.is_empty() && self.spans_known) {
                self.reader.fault(
                    span,
                    format!("limit {name} applies to nothing"),
                    "no combination of that purpose, or no span",
                );
            }
            self.member.limits.push(Limit {
                name,
                ratio,
                absolute,
                combinations,
                spans,
                measured: measured.unwrap_or(Measured::Chord),
                cantilever_length_factor: factor,
                basis,
            });
        }
    }

    fn limited_combinations(&mut self, row: &Row<'_>) -> Vec<usize> {
        let all: Vec<usize> = (0..self.member.combinations.len()).collect();
        let purpose = row.table.get("purpose");
        if let Some(value) = row.table.get("combinations") {
            if purpose.is_some() {
                self.reader.fault(
                    value.span(),
                    format!("{} names both purpose and combinations", row.path),
                    "one of them",
                );
            }
            let names: Vec<String> = self.member.combinations.iter().map(|c| c.name.clone()).collect();
            return self.indices(value, "combination", &names).unwrap_or(all);
        }
        let Some(value) = purpose else { return all };
        let Some(purpose) = self.reader.word(value, "purpose", &PURPOSES) else { return all };
        let of = |index: &usize| self.member.combinations.get(*index).is_some_and(|c| c.purpose == purpose);
        all.into_iter().filter(of).collect()
    }

    fn limited_spans(&mut self, row: &Row<'_>) -> Vec<usize> {
        let all: Vec<usize> = (0..self.member.spans.len()).collect();
        let Some(value) = row.table.get("spans") else { return all };
        let names: Vec<String> = self.member.spans.iter().map(|span| span.name.clone()).collect();
        if !self.spans_known {
            return all;
        }
        self.indices(value, "span", &names).unwrap_or(all)
    }

    /// Indices of named things; `None` where a name is not known, which has been reported.
    fn indices(&mut self, value: Value<'_>, what: &str, names: &[String]) -> Option<Vec<usize>> {
        if !matches!(value.get_ref(), DeValue::Array(_)) {
            self.reader.items(value, what);
            return None;
        }
        let mut found = Vec::new();
        let mut complete = true;
        for item in self.reader.items(value, what) {
            let Some(name) = self.reader.text(item, what) else { continue };
            match self.find(item, what, &name, names) {
                Some(index) if !found.contains(&index) => found.push(index),
                Some(_) => {}
                None => complete = false,
            }
        }
        complete.then_some(found)
    }

    /// What is lawful but odd.
    pub(super) fn oddities(&mut self, root: &Row<'_>) {
        let span = |group: &str, name: &str| {
            let table = root.table.get(group)?.get_ref().as_table()?;
            table.keys().find(|key| key.get_ref() == name).map(toml::Spanned::span)
        };
        let mut odd: Vec<(std::ops::Range<usize>, String)> = Vec::new();
        for (index, case) in self.member.cases.iter().enumerate() {
            let named = self.member.combinations.iter().any(|c| c.factors.get(index).is_some_and(|f| f.value != 0.0));
            if !named && !self.member.combinations.is_empty() {
                odd.extend(
                    span("case", &case.name).map(|span| (span, format!("no combination uses case {}", case.name))),
                );
            }
        }
        for (index, section) in self.member.sections.iter().enumerate() {
            let used =
                self.member.segments.iter().any(|s| s.section == index || s.taper.is_some_and(|t| t.to == index));
            if !used {
                odd.extend(
                    span("section", &section.name)
                        .map(|span| (span, format!("no segment uses section {}", section.name))),
                );
            }
        }
        let weighed =
            self.member.cases.iter().flat_map(|case| &case.loads).any(|load| load.kind == LoadKind::SelfWeight);
        if !weighed && !self.member.cases.is_empty() {
            odd.push((root.span.clone(), "the member carries no self-weight".to_owned()));
        }
        if self.member.limits.is_empty() && !self.member.combinations.is_empty() {
            odd.push((root.span.clone(), "the deck sets no limit, so that nothing is checked".to_owned()));
        }
        for limit in &self.member.limits {
            if limit.ratio.is_some_and(|ratio| ratio.value < 10.0) {
                let message = format!("limit {} allows more than a tenth of the length", limit.name);
                odd.extend(span("limit", &limit.name).map(|span| (span, message)));
            }
        }
        for section in &self.member.sections {
            let e = section.modulus.value.si();
            if e > 0.0 && !(1e9..=1e12).contains(&e) {
                let message = format!("E of section {} lies outside 1 to 1000 GPa: mind the unit", section.name);
                odd.extend(span("section", &section.name).map(|span| (span, message)));
            }
            let (i, depth) = (section.second_moment.value.si(), section.depth.as_ref().map(|d| d.value.si()));
            let area = match &section.weight {
                Some(Weight::Mass(area, _) | Weight::Specific(area, _)) => Some(area.value.si()),
                _ => None,
            };
            // No part of a section is farther than its depth from its axis: I is at most A times depth squared over 4.
            if let (Some(area), Some(depth)) = (area, depth)
                && i > area * depth * depth / 4.0
            {
                let message = format!("I of section {} is greater than A and depth allow: mind the unit", section.name);
                odd.extend(span("section", &section.name).map(|span| (span, message)));
            }
        }
        for combination in &self.member.combinations {
            let counts =
                |case: &crate::member::Case| case.loads.iter().filter(|load| load.kind == LoadKind::SelfWeight).count();
            let cases = self.member.cases.iter().zip(&combination.factors).filter(|(_, factor)| factor.value != 0.0);
            if cases.map(|(case, _)| counts(case)).sum::<usize>() > 1 {
                let message = format!("combination {} counts the self-weight more than once", combination.name);
                odd.extend(span("combination", &combination.name).map(|span| (span, message)));
            }
        }
        for (span, message) in odd {
            self.reader.warn(span, message, "");
        }
    }
}
