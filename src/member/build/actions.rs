//! Load cases.

use super::Build;
use crate::deck::{Row, Value};
use crate::member::{Case, Declared, Load, LoadKind, Nature, Part, Place, Stretch};

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
        for (name, _, row) in self.reader.named(root, "case") {
            self.reader.known(&row, &["title", "nature", "loads"]);
            let title = self.reader.optional_text(&row, "title").unwrap_or_default();
            let nature = self
                .reader
                .required(&row, "nature")
                .and_then(|value| self.reader.word(value, "nature", &Nature::WORDS));
            let mut loads = Vec::new();
            if let Some(value) = self.reader.required(&row, "loads") {
                let items = self.reader.items(value, "loads");
                if items.len() > 2_000 {
                    self.reader.fault(value.span(), "more than 2,000 loads in a case", "split the case");
                }
                if items.is_empty() {
                    self.reader.warn(value.span(), format!("case {name} has no load"), "");
                }
                for (index, item) in items.into_iter().enumerate().take(2_000) {
                    let path = format!("load {} of case {name}", index + 1);
                    let part = Part::Load(self.member.cases.len(), loads.len());
                    loads.extend(self.load(item, path, part));
                }
            }
            self.member.cases.push(Case { name, title, nature: nature.unwrap_or(Nature::Other), loads });
        }
        if self.member.cases.is_empty() {
            self.reader.fault(
                root.span.clone(),
                "the deck has no load case",
                "add a table [case.NAME] with nature and loads",
            );
        }
    }

    fn load(&mut self, item: Value<'_>, path: String, part: Part) -> Option<Load> {
        let said = path.clone();
        let row = self.reader.row(item, path)?;
        let words: Vec<(&str, usize)> = KINDS.iter().enumerate().map(|(index, (word, _))| (*word, index)).collect();
        let value = self.reader.required(&row, "kind")?;
        let index = self.reader.word(value, "kind", &words)?;
        let (_, own) = KINDS.get(index)?;
        let keys: Vec<&str> = ["kind", "note", "source", "confirm"].into_iter().chain(own.iter().copied()).collect();
        self.reader.known(&row, &keys);
        let note = self.reader.optional_text(&row, "note");
        let source = self.reader.optional_text(&row, "source");
        if self.reader.flag(&row, "confirm") {
            let source = source.clone().unwrap_or_default();
            self.member.record.declared.push(Declared { part, words: said, source, confirm: true });
        }
        let kind = self.kind(index, &row)?;
        Some(Load { kind, note, source })
    }

    fn kind(&mut self, index: usize, row: &Row<'_>) -> Option<LoadKind> {
        Some(match index {
            0 => self.self_weight(row)?,
            1 => {
                let w = self.reader.required(row, "w").and_then(|value| self.reader.quantity(value, "w"));
                let over = self.stretch(row);
                LoadKind::Uniform { w: w?, over: over? }
            }
            2 => {
                let ends = self.reader.required(row, "w").and_then(|value| self.ends(value));
                let over = self.stretch(row);
                let (left, right) = ends?;
                LoadKind::Linear { left, right, over: over? }
            }
            3 => {
                let q = self.reader.required(row, "q").and_then(|value| self.reader.quantity(value, "q"));
                let width = self
                    .reader
                    .required(row, "width")
                    .and_then(|value| self.positive(value, "width", crate::quantity::Length::si));
                let over = self.stretch(row);
                LoadKind::Area { q: q?, width: width?, over: over? }
            }
            4 => {
                let p = self.reader.required(row, "p").and_then(|value| self.reader.quantity(value, "p"));
                let at = self.reader.required(row, "at").and_then(|value| self.place(value, "at"));
                LoadKind::Point { p: p?, at: at? }
            }
            5 => self.couple(row)?,
            6 => {
                let support = self.held(row, true);
                let by = self.reader.required(row, "by").and_then(|value| self.reader.quantity(value, "by"));
                LoadKind::Settlement { support: support?, by: by? }
            }
            7 => {
                let support = self.held(row, false);
                let by = self.reader.required(row, "by").and_then(|value| self.reader.quantity(value, "by"));
                LoadKind::Rotation { support: support?, by: by? }
            }
            _ => self.gradient(row)?,
        })
    }

    fn self_weight(&mut self, row: &Row<'_>) -> Option<LoadKind> {
        let sections =
            self.member.segments.iter().flat_map(|s| [Some(s.section), s.taper.map(|taper| taper.to)]).flatten();
        let bare: Vec<String> = sections
            .filter_map(|index| self.member.sections.get(index))
            .filter(|section| section.weight.is_none() && section.modulus.value.si() > 0.0)
            .map(|section| section.name.clone())
            .collect();
        if let Some(name) = bare.first() {
            let message = format!("self_weight, but section {name} gives no weight");
            self.reader.fault(row.span.clone(), message, "give it weight, or A and density");
            return None;
        }
        Some(LoadKind::SelfWeight)
    }

    fn ends(
        &mut self,
        value: Value<'_>,
    ) -> Option<(crate::quantity::Given<crate::quantity::Intensity>, crate::quantity::Given<crate::quantity::Intensity>)>
    {
        let items = self.reader.items(value, "w");
        if let [left, right] = items.as_slice() {
            let (left, right) = (self.reader.quantity(left, "w"), self.reader.quantity(right, "w"));
            return Some((left?, right?));
        }
        if !items.is_empty() {
            self.reader.fault(
                value.span(),
                "w of a linear load has two intensities",
                "as in w = [\"2 kN/m\", \"6 kN/m\"]",
            );
        }
        None
    }

    fn couple(&mut self, row: &Row<'_>) -> Option<LoadKind> {
        let m = self.reader.required(row, "m").and_then(|value| self.reader.quantity(value, "m"));
        let value = self.reader.required(row, "at")?;
        let at = self.place(value, "at")?;
        if let Some(hinge) = self.member.hinges.iter().find(|hinge| hinge.at == at) {
            let message = format!("a couple acts at hinge {}, where no moment can act", hinge.name);
            self.reader.fault(value.span(), message, "say on which side of the hinge by a place beside it");
        }
        Some(LoadKind::Couple { m: m?, at })
    }

    fn held(&mut self, row: &Row<'_>, deflection: bool) -> Option<usize> {
        let value = self.reader.required(row, "support")?;
        let name = self.reader.text(value, "support")?;
        let names: Vec<String> = self.member.supports.iter().map(|support| support.name.clone()).collect();
        let index = self.find(value, "support", &name, &names)?;
        let support = self.member.supports.get(index)?;
        let holds = if deflection { support.holds_deflection() } else { support.holds_rotation() };
        if !holds {
            let movement = if deflection { "deflection" } else { "rotation" };
            let message = format!("support {name} does not hold {movement}, so none can be imposed there");
            self.reader.fault(value.span(), message, "impose it at a support that holds it");
            return None;
        }
        Some(index)
    }

    fn gradient(&mut self, row: &Row<'_>) -> Option<LoadKind> {
        let difference =
            self.reader.required(row, "difference").and_then(|value| self.reader.quantity(value, "difference"));
        let over = self.stretch(row)?;
        let under = self.member.segments.iter().filter(|segment| segment.to > over.from && segment.from < over.to);
        let sections = under.flat_map(|s| [Some(s.section), s.taper.map(|taper| taper.to)]).flatten();
        let lacking: Vec<String> = sections
            .filter_map(|index| self.member.sections.get(index))
            .filter(|section| section.depth.is_none() || section.expansion.is_none())
            .map(|section| section.name.clone())
            .collect();
        if let Some(name) = lacking.first() {
            let message = format!("a temperature gradient acts on section {name}, which lacks depth or alpha");
            self.reader.fault(row.span.clone(), message, "give the section both");
            return None;
        }
        Some(LoadKind::Gradient { difference: difference?, over })
    }

    /// The part a load acts on; the whole member where nothing is said.
    fn stretch(&mut self, row: &Row<'_>) -> Option<Stretch> {
        let from = match row.table.get("from") {
            Some(value) => self.place(value, "from")?,
            None => Place::ZERO,
        };
        let to = match row.table.get("to") {
            Some(value) => self.place(value, "to")?,
            None => self.member.end(),
        };
        if from >= to && (self.length_known || row.table.contains_key("to")) {
            self.reader.fault(
                row.span.clone(),
                format!("{} ends where it begins or before", row.path),
                "to must lie beyond from",
            );
            return None;
        }
        Some(Stretch { from, to })
    }
}
