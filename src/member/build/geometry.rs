//! Sections, segments, supports, hinges, spans.

use toml::de::DeValue;

use super::Build;
use crate::deck::{Row, Value};
use crate::member::{Hinge, Hold, Part, Place, Section, Segment, Span, Support, SupportKind, Taper, TaperLaw, Weight};
use crate::quantity::{Decimal, Given, Physical};

impl Build<'_> {
    /// A quantity above zero.
    pub(super) fn positive<T: Physical + Copy>(
        &mut self,
        value: Value<'_>,
        key: &str,
        si: impl Fn(T) -> f64,
    ) -> Option<Given<T>> {
        let given = self.reader.quantity::<T>(value, key)?;
        if si(given.value) > 0.0 {
            return Some(given);
        }
        self.reader.fault(value.span(), format!("{key} must be greater than zero"), "");
        None
    }

    fn maybe<T: Physical + Copy>(&mut self, row: &Row<'_>, key: &str, si: impl Fn(T) -> f64) -> Option<Given<T>> {
        let value = row.table.get(key)?;
        self.positive(value, key, si)
    }

    pub(super) fn sections(&mut self, root: &Row<'_>) {
        for (name, _, row) in self.reader.named(root, "section") {
            let keys = ["E", "I", "A", "density", "weight", "depth", "alpha", "G", "shear_area", "source", "confirm"];
            self.declare(&row, Part::Section(self.member.sections.len()), format!("section {name}"));
            self.reader.known(&row, &keys);
            let e = self
                .reader
                .required(&row, "E")
                .and_then(|value| self.positive(value, "E", crate::quantity::Stress::si));
            let i = self
                .reader
                .required(&row, "I")
                .and_then(|value| self.positive(value, "I", crate::quantity::SecondMoment::si));
            let weight = self.weight(&row);
            let depth = self.maybe(&row, "depth", crate::quantity::Length::si);
            let expansion = row.table.get("alpha").and_then(|value| self.reader.quantity(value, "alpha"));
            let g = self.maybe(&row, "G", crate::quantity::Stress::si);
            let area = self.maybe(&row, "shear_area", crate::quantity::Area::si);
            let half = row.table.contains_key("G") != row.table.contains_key("shear_area");
            if half {
                let message = format!("{} gives only one of G and shear_area", row.path);
                self.reader.fault(row.span.clone(), message, "shear deformation needs both; without it give neither");
            }
            let (Some(modulus), Some(second_moment)) = (e, i) else {
                // Kept by name so that segments that use it do not report it as unknown.
                self.member.sections.push(placeholder(name));
                continue;
            };
            let shear = g.zip(area);
            self.member.sections.push(Section { name, modulus, second_moment, weight, depth, expansion, shear });
        }
        if self.member.sections.is_empty() && !root.table.contains_key("section") {
            self.reader.fault(root.span.clone(), "the deck has no section", "add a table [section.NAME] with E and I");
        }
    }

    fn weight(&mut self, row: &Row<'_>) -> Option<Weight> {
        let area = self.maybe(row, "A", crate::quantity::Area::si);
        if let Some(value) = row.table.get("weight") {
            if row.table.contains_key("density") {
                self.reader.fault(value.span(), "weight and density are both given", "give weight, or A and density");
                return None;
            }
            let typed = self.reader.typed(value, "weight")?;
            let mass = typed.terms.iter().any(|term| term.unit.dimension().mass != 0);
            return if mass {
                self.reader.measured(value, "weight", typed).map(Weight::MassPerLength)
            } else {
                self.reader.measured(value, "weight", typed).map(Weight::PerLength)
            };
        }
        let value = row.table.get("density")?;
        let typed = self.reader.typed(value, "density")?;
        let Some(area) = area else {
            if !row.table.contains_key("A") {
                self.reader.fault(value.span(), "density without A gives no weight", "add the area A");
            }
            // One mistake, one fault: the self-weight that needs it is not reported as well.
            return Some(Weight::PerLength(Given { value: Default::default(), typed: pure_one() }));
        };
        let mass = typed.terms.iter().any(|term| term.unit.dimension().mass != 0);
        if mass {
            self.reader.measured(value, "density", typed).map(|density| Weight::Mass(area, density))
        } else {
            self.reader.measured(value, "density", typed).map(|weight| Weight::Specific(area, weight))
        }
    }

    pub(super) fn segments(&mut self, root: &Row<'_>) {
        let Some(value) = self.reader.required(root, "segment") else { return };
        let mut from = Place::ZERO;
        let items = self.reader.items(value, "segment");
        if items.is_empty() {
            self.reader.fault(value.span(), "the member has no segment", "add [[segment]] with length and section");
        }
        for (index, item) in items.into_iter().enumerate() {
            let path = format!("segment {}", index + 1);
            let Some(row) = self.reader.row(item, path) else { continue };
            self.reader.known(&row, &["length", "section", "taper", "source", "confirm"]);
            self.declare(&row, Part::Segment(self.member.segments.len()), format!("segment {}", index + 1));
            let section = self.reader.required(&row, "section").and_then(|value| self.section_named(value, "section"));
            let taper = row.table.get("taper").and_then(|value| self.taper(value, section));
            let Some(value) = self.reader.required(&row, "length") else { continue };
            let Some(length) = self.reader.quantity::<crate::quantity::Length>(value, "length") else { continue };
            let Some((size, _)) = self.reader.metres(value, "length") else { continue };
            if self.member.segments.len() >= 20_000 {
                self.reader.fault(value.span(), "more than 20,000 segments", "split the member");
                return;
            }
            if size > Place::ZERO && !(1e-9..=1e6).contains(&size.x()) {
                let hint = "a segment is between 1e-9 m and 1e6 m long";
                self.reader.fault(value.span(), "the segment's length is beyond what can be computed", hint);
            }
            if size <= Place::ZERO {
                self.reader.fault(value.span(), "a segment must have a length greater than zero", "");
                continue;
            }
            let Some(end) = from.exact().plus(size.exact()) else {
                self.reader.fault(value.span(), "the length has too many digits", "");
                continue;
            };
            let to = Place::metres(end.trimmed());
            let section = section.unwrap_or_default();
            self.member.segments.push(Segment { length, from, to, section, taper });
            from = to;
        }
    }

    fn section_named(&mut self, value: Value<'_>, key: &str) -> Option<usize> {
        let name = self.reader.text(value, key)?;
        let names: Vec<String> = self.member.sections.iter().map(|section| section.name.clone()).collect();
        self.find(value, "section", &name, &names)
    }

    /// The index of a name, or a fault with the nearest known one.
    pub(super) fn find(&mut self, value: Value<'_>, what: &str, name: &str, names: &[String]) -> Option<usize> {
        let found = names.iter().position(|known| known == name);
        if found.is_none() {
            let hint = match crate::deck::nearest(name, names.iter().map(String::as_str)) {
                Some(near) => format!("did you mean {near}?"),
                None if names.is_empty() => format!("the deck names no {what}"),
                None => format!("known: {}", names.join(", ")),
            };
            self.reader.fault(value.span(), format!("there is no {what} \"{}\"", crate::deck::clip(name)), hint);
        }
        found
    }

    fn taper(&mut self, value: Value<'_>, section: Option<usize>) -> Option<Taper> {
        let row = self.reader.row(value, "taper")?;
        self.reader.known(&row, &["to", "law"]);
        let to = self.reader.required(&row, "to").and_then(|value| self.section_named(value, "to"));
        let words = [("cubic", TaperLaw::Cubic), ("linear", TaperLaw::Linear)];
        let law = self.reader.required(&row, "law").and_then(|value| self.reader.word(value, "law", &words));
        let (to, law, from) = (to?, law?, section?);
        let (left, right) = (self.member.sections.get(from)?.clone(), self.member.sections.get(to)?.clone());
        if left.modulus.value != right.modulus.value {
            let message = format!("the sections {} and {} of a taper differ in E", left.name, right.name);
            self.reader.fault(
                value.span(),
                message,
                "a taper changes I, weight, depth and shear area, not the material",
            );
        }
        if left.expansion.as_ref().map(|given| given.value) != right.expansion.as_ref().map(|given| given.value) {
            let message = format!("the sections {} and {} of a taper differ in alpha", left.name, right.name);
            self.reader.fault(value.span(), message, "give both the same alpha, or none");
        }
        if left.shear.is_some() != right.shear.is_some() {
            let message = format!("only one of the sections {} and {} gives G and shear_area", left.name, right.name);
            self.reader.fault(value.span(), message, "give both or neither");
        }
        if left.weight.is_some() != right.weight.is_some() {
            let message = format!("only one of the sections {} and {} gives a weight", left.name, right.name);
            self.reader.fault(value.span(), message, "give both or neither");
        }
        Some(Taper { to, law })
    }

    pub(super) fn supports(&mut self, root: &Row<'_>) {
        let mut list = Vec::new();
        for (name, span, row) in self.reader.named(root, "support") {
            self.reader.known(&row, &["at", "kind", "vertical", "rotation", "source", "confirm"]);
            let at = self.reader.required(&row, "at").and_then(|value| self.place(value, "at"));
            let words = [
                ("fixed", SupportKind::Fixed),
                ("pinned", SupportKind::Pinned),
                ("roller", SupportKind::Roller),
                ("guided", SupportKind::Guided),
                ("elastic", SupportKind::Elastic),
            ];
            let kind = self.reader.required(&row, "kind").and_then(|value| self.reader.word(value, "kind", &words));
            let (Some(at), Some(kind)) = (at, kind) else { continue };
            if kind != SupportKind::Elastic {
                for key in ["vertical", "rotation"] {
                    if let Some(value) = row.table.get(key) {
                        self.reader.fault(
                            value.span(),
                            format!("{key} belongs to elastic supports only"),
                            "write kind = \"elastic\", or leave it out",
                        );
                    }
                }
            }
            let (vertical, rotation) = match kind {
                SupportKind::Fixed => (Hold::Rigid, Hold::Rigid),
                SupportKind::Pinned | SupportKind::Roller => (Hold::Rigid, Hold::Free),
                SupportKind::Guided => (Hold::Free, Hold::Rigid),
                SupportKind::Elastic => (
                    self.hold(&row, "vertical", crate::quantity::Intensity::si),
                    self.hold(&row, "rotation", crate::quantity::RotationalStiffness::si),
                ),
            };
            if matches!((&vertical, &rotation), (Hold::Free, Hold::Free)) {
                self.reader.fault(
                    span.clone(),
                    format!("support {name} holds nothing"),
                    "give it vertical or rotation, as in vertical = \"12 kN/mm\", or take it out",
                );
            } else if kind == SupportKind::Elastic {
                for key in ["vertical", "rotation"] {
                    if !row.table.contains_key(key) {
                        let message = format!("support {name} says nothing of {key}, which is taken as free");
                        self.reader.warn(span.clone(), message, format!("write {key} = \"free\""));
                    }
                }
            }
            let declared = self.member.record.declared.len();
            self.declare(&row, Part::Support(0), format!("support {name}"));
            let declared = self.member.record.declared.split_off(declared);
            list.push((span, Support { name, at, kind, vertical, rotation }, declared));
        }
        if list.is_empty() && !root.table.contains_key("support") {
            self.reader.fault(
                root.span.clone(),
                "the member has no support",
                "add a table [support.NAME] with at and kind",
            );
        }
        list.sort_by_key(|(_, support, _)| support.at);
        for (left, right) in list.iter().zip(list.iter().skip(1)) {
            if left.1.at == right.1.at {
                let message = format!("supports {} and {} stand at the same place", left.1.name, right.1.name);
                self.reader.findings.push(
                    crate::diagnostic::Diagnostic::error(right.0.clone(), message)
                        .hint("one support may hold both movements"),
                );
            }
        }
        for (index, (span, support, declared)) in list.into_iter().enumerate() {
            self.support_spans.push(span);
            self.member.supports.push(support);
            let declared =
                declared.into_iter().map(|one| crate::member::Declared { part: Part::Support(index), ..one });
            self.member.record.declared.extend(declared);
        }
    }

    fn hold<K: Physical + Copy>(&mut self, row: &Row<'_>, key: &str, si: impl Fn(K) -> f64) -> Hold<K> {
        // What an elastic support does not name it does not hold.
        let Some(value) = row.table.get(key) else { return Hold::Free };
        match value.get_ref() {
            DeValue::String(word) if word == "rigid" => Hold::Rigid,
            DeValue::String(word) if word == "free" => Hold::Free,
            _ => self.positive(value, key, si).map_or(Hold::Rigid, Hold::Spring),
        }
    }

    pub(super) fn hinges(&mut self, root: &Row<'_>) {
        let mut list = Vec::new();
        for (name, span, row) in self.reader.named(root, "hinge") {
            self.reader.known(&row, &["at"]);
            let Some(value) = self.reader.required(&row, "at") else { continue };
            let Some(at) = self.place(value, "at") else { continue };
            if at == Place::ZERO || at == self.member.end() {
                self.reader.fault(
                    value.span(),
                    format!("hinge {name} stands at an end of the member"),
                    "an end is free to turn already; take the hinge out",
                );
            }
            let held = self.member.supports.iter().find(|support| support.at == at && support.holds_rotation());
            if let Some(support) = held {
                let message = format!("hinge {name} stands at support {}, which holds rotation", support.name);
                self.reader.fault(value.span(), message, "move one of them, or let the support turn");
            }
            if self.member.supports.iter().any(|support| support.name == name) {
                self.reader.fault(span.clone(), format!("\"{name}\" is the name of a support already"), "");
            }
            list.push((span, Hinge { name, at }));
        }
        list.sort_by_key(|(_, hinge)| hinge.at);
        for (left, right) in list.iter().zip(list.iter().skip(1)) {
            if left.1.at == right.1.at {
                let message = format!("hinges {} and {} stand at the same place", left.1.name, right.1.name);
                self.reader.fault(right.0.clone(), message, "");
            }
        }
        self.member.hinges = list.into_iter().map(|(_, hinge)| hinge).collect();
    }

    pub(super) fn spans(&mut self) {
        let fault = |finding: &crate::diagnostic::Diagnostic| finding.severity == crate::diagnostic::Severity::Error;
        self.spans_known = !self.reader.findings.iter().any(fault);
        let holding: Vec<(usize, String, Place)> = self
            .member
            .supports
            .iter()
            .enumerate()
            .filter(|(_, support)| support.holds_deflection())
            .map(|(index, support)| (index, support.name.clone(), support.at))
            .collect();
        let end = self.member.end();
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
        self.member.spans = spans;
    }
}

fn placeholder(name: String) -> Section {
    let typed = pure_one();
    Section {
        name,
        modulus: Given { value: crate::quantity::Stress::default(), typed: typed.clone() },
        second_moment: Given { value: crate::quantity::SecondMoment::default(), typed },
        weight: None,
        depth: None,
        expansion: None,
        shear: None,
    }
}

fn pure_one() -> crate::quantity::Typed {
    crate::quantity::Typed {
        terms: vec![crate::quantity::Term { figure: Decimal::ONE, unit: crate::quantity::Unit::none() }],
    }
}
