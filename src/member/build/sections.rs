//! Sections.

use super::Build;
use crate::deck::{Amount, Named, Row, Value};
use crate::member::{Part, Section, Weight};
use crate::quantity::{Area, Decimal, Expansion, Given, Length, Physical, SecondMoment, Stress, Term, Typed, Unit};

const KEYS: [&str; 11] = ["E", "I", "A", "density", "weight", "depth", "alpha", "G", "shear_area", "source", "confirm"];

impl Build<'_> {
    pub(super) fn sections(&mut self, root: &Row<'_>) {
        let list = self.reader.named(root, "section");
        let empty = list.as_ref().is_none_or(Vec::is_empty);
        self.sections.complete = !empty && !self.reader.misspelt(root, "section");
        if empty && (list.is_some() || !self.reader.has(root, "section")) {
            let span = root.table.get("section").map_or(root.span.clone(), toml::Spanned::span);
            self.reader.fault(span, "the deck has no section", "add a table [section.NAME] with E and I");
        }
        for (index, Named { name, span, row }) in list.unwrap_or_default().into_iter().enumerate() {
            self.reader.known(&row, &KEYS);
            self.declare(&row, Part::Section(index), format!("section {name}"));
            self.sections.add(&name, span, Some(index));
            let section = self.section(index, name, &row);
            self.member.sections.push(section);
        }
    }

    fn section(&mut self, index: usize, name: String, row: &Row<'_>) -> Section {
        let modulus = self.tried(index, "E", row, &["E"], |build| {
            let value = build.reader.required(row, "E")?;
            build.reader.positive::<Stress>(value, "E")
        });
        let second_moment = self.tried(index, "I", row, &["I"], |build| {
            let value = build.reader.required(row, "I")?;
            build.reader.positive::<SecondMoment>(value, "I")
        });
        let keys = ["A", "density", "weight"];
        let (area, weight) = self.tried(index, "weight", row, &keys, |build| {
            let area = build.maybe::<Area>(row, "A");
            let weight = build.weight(row, area.as_ref());
            (area, weight)
        });
        let depth = self.tried(index, "depth", row, &["depth"], |build| build.maybe::<Length>(row, "depth"));
        let expansion = self.tried(index, "alpha", row, &["alpha"], |build| {
            let value = row.table.get("alpha")?;
            build.reader.quantity::<Expansion>(value, "alpha")
        });
        let shear = self.tried(index, "G", row, &["G", "shear_area"], |build| build.shear(row));
        self.odd_section(row, modulus.as_ref(), second_moment.as_ref(), area.as_ref(), depth.as_ref());
        // Stand-ins are never seen: a deck with a fault gives no member.
        Section {
            name,
            modulus: modulus.unwrap_or(Given { value: Stress::default(), typed: one() }),
            second_moment: second_moment.unwrap_or(Given { value: SecondMoment::default(), typed: one() }),
            weight,
            depth,
            expansion,
            shear,
        }
    }

    /// Reads something of a section by these keys; where that fails, what needs it is not reported as well.
    fn tried<T>(
        &mut self,
        index: usize,
        what: &'static str,
        row: &Row<'_>,
        keys: &[&str],
        read: impl FnOnce(&mut Self) -> T,
    ) -> T {
        let before = self.reader.errors();
        let found = read(self);
        if self.reader.errors() > before || keys.iter().any(|key| self.reader.misspelt(row, key)) {
            self.unsure.insert((index, what));
        }
        found
    }

    fn maybe<T: Physical>(&mut self, row: &Row<'_>, key: &str) -> Option<Given<T>> {
        let value = row.table.get(key)?;
        self.reader.positive(value, key)
    }

    fn shear(&mut self, row: &Row<'_>) -> Option<(Given<Stress>, Given<Area>)> {
        let g = self.maybe::<Stress>(row, "G");
        let area = self.maybe::<Area>(row, "shear_area");
        if self.reader.has(row, "G") != self.reader.has(row, "shear_area") {
            let message = format!("{} gives only one of G and shear_area", row.path);
            let given = row.table.get("G").or_else(|| row.table.get("shear_area"));
            let span = given.map_or(row.span.clone(), toml::Spanned::span);
            self.reader.fault(span, message, "shear deformation needs both; without it give neither");
        }
        g.zip(area)
    }

    fn weight(&mut self, row: &Row<'_>, area: Option<&Given<Area>>) -> Option<Weight> {
        if let Some(value) = row.table.get("weight") {
            if let Some(density) = row.table.get("density") {
                let hint = "give weight, or A and density";
                self.reader.fault(density.span(), format!("{} gives both weight and density", row.path), hint);
                return None;
            }
            let amount = self.reader.typed(value, "weight", "0.42 kN/m")?;
            return if amount.has_mass() {
                self.heavy(value, "weight", amount).map(Weight::MassPerLength)
            } else {
                self.heavy(value, "weight", amount).map(Weight::PerLength)
            };
        }
        let value = row.table.get("density")?;
        let amount = self.reader.typed(value, "density", "7850 kg/m^3")?;
        if !self.reader.has(row, "A") {
            self.reader.fault(value.span(), "density without A gives no weight", "add the area A");
        }
        if amount.has_mass() {
            let density = self.heavy(value, "density", amount);
            area.cloned().zip(density).map(|(area, density)| Weight::Mass(area, density))
        } else {
            let weight = self.heavy(value, "density", amount);
            area.cloned().zip(weight).map(|(area, weight)| Weight::Specific(area, weight))
        }
    }

    /// A weight or density: not below zero.
    fn heavy<T: Physical>(&mut self, value: Value<'_>, key: &str, amount: Amount) -> Option<Given<T>> {
        let given = self.reader.measured::<T>(value, key, amount)?;
        if given.value.to_si() < 0.0 {
            self.reader.fault(value.span(), format!("{key} must not be less than zero"), "");
            return None;
        }
        Some(given)
    }
}

fn one() -> Typed {
    Typed { terms: vec![Term { figure: Decimal::ONE, unit: Unit::none() }] }
}
