//! What a load needs, by its kind.

use super::Build;
use crate::deck::{Row, Value};
use crate::member::{LoadKind, Place, Section, Stretch};
use crate::quantity::{Given, Intensity, Physical};

impl Build<'_> {
    /// Reads what belongs to a kind of load, by its number in the list of kinds.
    pub(super) fn kind(&mut self, index: usize, row: &Row<'_>) -> Option<LoadKind> {
        Some(match index {
            0 => self.self_weight(row),
            1 => {
                let (w, over) = (self.size(row, "w"), self.stretch(row));
                LoadKind::Uniform { w: w?, over: over? }
            }
            2 => {
                let ends = self.reader.required(row, "w").and_then(|value| self.ends(value));
                let over = self.stretch(row);
                let (left, right) = ends?;
                LoadKind::Linear { left, right, over: over? }
            }
            3 => {
                let q = self.size(row, "q");
                let width = self.reader.required(row, "width");
                let width = width.and_then(|value| self.reader.positive(value, "width"));
                let over = self.stretch(row);
                LoadKind::Area { q: q?, width: width?, over: over? }
            }
            4 => {
                let (p, at) = (self.size(row, "p"), self.spot(row));
                LoadKind::Point { p: p?, at: at? }
            }
            5 => self.couple(row)?,
            6 => {
                let (support, by) = (self.held(row, true), self.size(row, "by"));
                LoadKind::Settlement { support: support?, by: by? }
            }
            7 => {
                let (support, by) = (self.held(row, false), self.size(row, "by"));
                LoadKind::Rotation { support: support?, by: by? }
            }
            _ => self.gradient(row)?,
        })
    }

    fn size<T: Physical>(&mut self, row: &Row<'_>, key: &str) -> Option<Given<T>> {
        let value = self.reader.required(row, key)?;
        self.reader.quantity(value, key)
    }

    fn spot(&mut self, row: &Row<'_>) -> Option<Place> {
        let value = self.reader.required(row, "at")?;
        self.place(value, "at")
    }

    /// Self-weight; each section that gives no weight is reported once.
    fn self_weight(&mut self, row: &Row<'_>) -> LoadKind {
        let used = self.member.segments.iter().flat_map(|s| [Some(s.section), s.taper.map(|taper| taper.to)]).flatten();
        self.lack(used.collect(), row, "weight", |section| section.weight.is_none());
        LoadKind::SelfWeight
    }

    /// Reports the sections that lack what a load needs: once each, and not where it could not be read.
    fn lack(&mut self, used: Vec<usize>, row: &Row<'_>, what: &'static str, lacks: impl Fn(&Section) -> bool) {
        for index in used {
            let Some(section) = self.member.sections.get(index).filter(|section| lacks(section)) else { continue };
            if self.unsure.contains(&(index, what)) || !self.lacking.insert((index, what)) {
                continue;
            }
            let name = &section.name;
            let (message, hint) = match what {
                "weight" => {
                    (format!("self_weight, but section {name} gives no weight"), "give it weight, or A and density")
                }
                _ => (
                    format!("a temperature gradient acts on section {name}, which lacks {what}"),
                    "a gradient needs the depth and alpha of every section it acts on",
                ),
            };
            let place = row.table.get("kind").map_or(row.span.clone(), toml::Spanned::span);
            self.reader.fault(place, message, hint);
        }
    }

    fn ends(&mut self, value: Value<'_>) -> Option<(Given<Intensity>, Given<Intensity>)> {
        let before = self.reader.errors();
        let items = self.reader.items(value, "w");
        if let [left, right] = items.as_slice() {
            let (left, right) = (self.reader.quantity(left, "w"), self.reader.quantity(right, "w"));
            return Some((left?, right?));
        }
        if self.reader.errors() == before {
            let hint = "as in w = [\"2 kN/m\", \"6 kN/m\"]";
            self.reader.fault(value.span(), "w of a linear load has two intensities", hint);
        }
        None
    }

    fn couple(&mut self, row: &Row<'_>) -> Option<LoadKind> {
        let m = self.size(row, "m");
        let at = self.spot(row)?;
        if let Some(hinge) = self.member.hinges.iter().find(|hinge| hinge.at == at)
            && let Some(value) = row.table.get("at")
        {
            let message = format!("a couple acts at hinge {}, where no moment can act", hinge.name);
            self.reader.fault(value.span(), message, "say on which side of the hinge by a place beside it");
        }
        Some(LoadKind::Couple { m: m?, at })
    }

    fn held(&mut self, row: &Row<'_>, deflection: bool) -> Option<usize> {
        let value = self.reader.required(row, "support")?;
        let index = self.reader.called(value, "support", &self.supports)?;
        let support = self.member.supports.get(index)?;
        let holds = if deflection { support.holds_deflection() } else { support.holds_rotation() };
        if !holds {
            let movement = if deflection { "deflection" } else { "rotation" };
            let message = format!("support {} does not hold {movement}, so none can be imposed there", support.name);
            // Where the support itself is in doubt, that has been reported.
            if self.supports_known {
                self.reader.fault(value.span(), message, "impose it at a support that holds it");
            }
            return None;
        }
        Some(index)
    }

    fn gradient(&mut self, row: &Row<'_>) -> Option<LoadKind> {
        let difference = self.size(row, "difference");
        let over = self.stretch(row)?;
        let segments = &self.member.segments;
        let first = segments.partition_point(|segment| segment.to <= over.from);
        let under = segments.iter().skip(first).take_while(|segment| segment.from < over.to);
        let used: Vec<usize> = under.flat_map(|s| [Some(s.section), s.taper.map(|taper| taper.to)]).flatten().collect();
        self.lack(used.clone(), row, "depth", |section| section.depth.is_none());
        self.lack(used, row, "alpha", |section| section.expansion.is_none());
        Some(LoadKind::Gradient { difference: difference?, over })
    }

    /// The part a load acts on; the whole member where nothing is said.
    fn stretch(&mut self, row: &Row<'_>) -> Option<Stretch> {
        let from = row.table.get("from").map_or(Some(Place::ZERO), |value| self.place(value, "from"));
        let to = row.table.get("to").map_or(Some(self.end), |value| self.place(value, "to"));
        let (from, to) = (from?, to?);
        if from >= to {
            let value = row.table.get("to").or_else(|| row.table.get("from"));
            let place = value.map_or(row.span.clone(), toml::Spanned::span);
            self.reader.fault(place, format!("{} ends where it begins or before", row.path), "to must lie beyond from");
            return None;
        }
        Some(Stretch { from, to })
    }
}
