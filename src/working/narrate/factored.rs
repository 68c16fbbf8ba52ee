//! Loads of a combination: factors times the loads of its cases, added up where they are of one kind and extent.

use super::acts::Act;
use super::{Narrator, finding};
use crate::analysis::action::Action;
use crate::quantity::Unit;
use crate::working::draft::Symbol;
use crate::working::trace::Traced;
use crate::working::units::What;

impl Narrator<'_> {
    /// The combination's loads by piece, added up like the field's.
    pub fn combined(&mut self, combination: usize) -> Vec<Vec<Act>> {
        let factors = self.book.factors.get(combination).cloned().unwrap_or_default();
        let analysis = self.analysis;
        let mut lists = Vec::new();
        for (index, piece) in analysis.model.pieces.iter().enumerate() {
            let mut kept: Vec<(Act, Vec<Traced>, Vec<Traced>)> = Vec::new();
            for (factor, case) in factors.iter().zip(&analysis.cases).filter(|(factor, _)| !factor.is_zero()) {
                let list = case.actions.get(index).map_or(&[][..], Vec::as_slice);
                for act in self.acts(list, piece) {
                    let value = self.builder.value(factor);
                    let action = act.action.scaled(value);
                    let first = factor.clone() * act.first.clone();
                    let second = factor.clone() * act.second.clone();
                    match kept.iter_mut().find_map(|entry| entry.0.action.absorb(action).then_some(entry)) {
                        Some(entry) => {
                            entry.1.push(first);
                            entry.2.push(second);
                        }
                        None => kept.push((Act { action, ..act }, vec![first], vec![second])),
                    }
                }
            }
            let name = format!("{}{}", self.place_name(piece.from), self.place_name(piece.to));
            let count = kept.len();
            let list = kept
                .into_iter()
                .enumerate()
                .map(|(number, (act, first, second))| {
                    let sub = if count > 1 { format!("{name}{}", number + 1) } else { name.clone() };
                    self.factored(act, &sub, first, second)
                })
                .collect();
            lists.push(list);
        }
        lists
    }

    fn factored(&mut self, act: Act, sub: &str, first: Vec<Traced>, second: Vec<Traced>) -> Act {
        let base = self.builder.base.clone();
        let step =
            |narrator: &mut Self, letter: &'static str, sub: String, unit: Unit, value: f64, terms: Vec<Traced>| {
                let what = finding("factored load", Symbol::new(letter, sub), (What::Other, unit), value);
                narrator.total(what, terms, false)
            };
        match act.action {
            Action::Force { p, .. } => {
                let first = step(self, "P", sub.to_owned(), base.coherent(1, 0), p, first);
                Act { first, ..act }
            }
            Action::Couple { m, .. } => {
                let first = step(self, "M", format!("c{sub}"), base.coherent(1, 1), m, first);
                Act { first, ..act }
            }
            Action::Spread { w0, w1, .. } => {
                let intensity = base.coherent(1, -1);
                let alike = first.iter().zip(&second).all(|(a, b)| a.sources() == b.sources());
                let near = step(self, "w", sub.to_owned(), intensity.clone(), w0, first);
                let far = if alike { near.clone() } else { step(self, "w", format!("{sub}e"), intensity, w1, second) };
                Act { first: near, second: far, ..act }
            }
            Action::Gradient { strain, .. } => {
                // The figure is a curvature on a prismatic piece, a strain on a tapered one.
                let value: f64 = first.iter().map(|term| self.builder.value(term)).sum();
                let unit =
                    if (value - strain).abs() <= 1e-12 * strain.abs() { Unit::none() } else { base.coherent(0, -1) };
                let first = step(self, "kappa", sub.to_owned(), unit, value, first);
                Act { first, ..act }
            }
        }
    }
}
