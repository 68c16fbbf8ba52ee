//! What is asked of the member: stations, redundants, combinations.

use std::collections::BTreeSet;

use super::Build;
use crate::deck::{Named, Row, Value};
use crate::member::{Combination, Factor, Place, Purpose, Redundant};
use crate::quantity::Decimal;

pub(super) const PURPOSES: [(&str, Purpose); 3] =
    [("serviceability", Purpose::Serviceability), ("strength", Purpose::Strength), ("stability", Purpose::Stability)];

impl Build<'_> {
    pub(super) fn member_table(&mut self, root: &Row<'_>) {
        let Some(value) = root.table.get("member") else { return };
        let Some(row) = self.reader.row(value, "member") else { return };
        self.reader.known(&row, &["stations", "redundants"]);
        if let Some(value) = row.table.get("stations") {
            let mut stations = BTreeSet::new();
            for item in self.reader.items(value, "stations") {
                if let Some(place) = self.place(item, "station")
                    && !stations.insert(place)
                {
                    self.reader.warn(item.span(), "this station is named twice", "take one of them out");
                }
            }
            self.member.stations = stations.into_iter().collect();
        }
        if let Some(value) = row.table.get("redundants") {
            let before = self.reader.errors();
            let mut chosen = Vec::new();
            for item in self.reader.items(value, "redundants") {
                if let Some(redundant) = self.redundant(item) {
                    if chosen.contains(&redundant) {
                        self.reader.fault(item.span(), "this redundant is named twice", "name another one");
                    }
                    chosen.push(redundant);
                    self.redundant_spans.push(item.span());
                }
            }
            self.whole = value.span();
            self.redundants_known = self.reader.errors() == before;
            self.member.redundants = Some(chosen);
        }
    }

    fn redundant(&mut self, value: Value<'_>) -> Option<Redundant> {
        let text = self.reader.text(value, "redundant")?;
        let Some((letter, name)) = text.split_once('.').filter(|(letter, _)| ["R", "M"].contains(letter)) else {
            let message = format!("\"{}\" names no redundant", crate::deck::clip(&text));
            self.reader.fault(value.span(), message, "write R.B for a support's force, M.B for a moment");
            return None;
        };
        let index = self.supports.find(&mut self.reader, value.span(), name)?;
        let support = self.member.supports.get(index)?;
        let at = support.at;
        let hinged = self.member.hinges.iter().any(|hinge| hinge.at == at);
        let inner = at > Place::ZERO && at < self.end;
        let (redundant, held, why) = if letter == "R" {
            (Redundant::Force(index), support.holds_deflection(), "holds no deflection")
        } else {
            let held = support.holds_rotation() || (inner && !hinged);
            (Redundant::Moment(index), held, "has no moment to release")
        };
        if !held {
            if self.supports_known && self.hinges_known {
                let message = format!("{text} cannot be released: support {name} {why}");
                self.reader.fault(value.span(), message, "choose a force or moment that the supports hold");
            }
            return None;
        }
        Some(redundant)
    }

    pub(super) fn combinations(&mut self, root: &Row<'_>) {
        let list = self.reader.named(root, "combination");
        let empty = list.as_ref().is_none_or(Vec::is_empty);
        self.combinations.complete = !empty && !self.reader.misspelt(root, "combination");
        if empty && (list.is_some() || !self.reader.has(root, "combination")) {
            let span = root.table.get("combination").map_or(root.span.clone(), toml::Spanned::span);
            let hint = "add a table [combination.NAME] with purpose and factors";
            self.reader.fault(span, "the deck has no combination", hint);
        }
        for (index, Named { name, span, row }) in list.unwrap_or_default().into_iter().enumerate() {
            self.combinations.add(&name, span, Some(index));
            self.reader.known(&row, &["title", "purpose", "factors"]);
            let title = self.reader.optional_text(&row, "title").unwrap_or_default();
            let purpose = self.reader.required(&row, "purpose");
            let purpose = purpose.and_then(|value| self.reader.word(value, "purpose", &PURPOSES));
            self.purposes_known &= purpose.is_some();
            let factors = self.factors(&name, &row);
            let purpose = purpose.unwrap_or(Purpose::Serviceability);
            self.member.combinations.push(Combination { name, title, purpose, factors });
        }
    }

    /// The factors of a combination, one for each case.
    fn factors(&mut self, name: &str, row: &Row<'_>) -> Vec<Factor> {
        let zero = Factor { value: 0.0, figure: Decimal::ZERO };
        let mut factors = vec![zero; self.member.cases.len()];
        let before = self.reader.errors();
        let Some(value) = self.reader.required(row, "factors") else { return factors };
        let Some(table) = self.reader.row(value, format!("factors of combination {name}")) else { return factors };
        for (key, value) in table.table.iter() {
            let case = key.get_ref().to_string();
            let index = self.cases.find(&mut self.reader, key.span(), &case);
            let Some(factor) = self.reader.number(value, "factor") else { continue };
            if factor.value == 0.0
                && let Some(index) = index
            {
                self.zeroed.insert(index);
                let message = format!("the factor of case {case} in combination {name} is zero");
                self.reader.warn(value.span(), message, "leave it out, or give a factor");
            }
            if let Some(slot) = index.and_then(|index| factors.get_mut(index)) {
                *slot = factor;
            }
        }
        let written = table.table.iter().next().is_some();
        if !written && self.reader.errors() == before {
            let hint = "give it the factors of its cases, as in { G = 1.0 }";
            self.reader.warn(value.span(), format!("combination {name} holds no load"), hint);
        }
        factors
    }
}
