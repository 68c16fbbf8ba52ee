//! Tells the analysis as a derivation, in the order in which a hand would make it.

mod acts;
mod cases;
mod checks;
mod closing;
mod factored;
mod given;
mod place;
mod places;
mod state;
mod sums;
mod taper;

pub use given::place_names;

use super::draft::{Builder, Finding, Symbol};
use super::replay::Mismatch;
use super::step::Working;
use super::trace::Traced;
use super::units::{Base, What};
use crate::analysis::{Analysis, Spot};
use crate::member::{Member, Redundant};
use crate::quantity::Unit;

/// A demand against a limit, as the verdict found it.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Demand {
    /// Index of the limit.
    pub limit: usize,
    /// Index of the combination.
    pub combination: usize,
    /// Index of the span.
    pub span: usize,
    /// Deflection as the limit measures it, m; signed.
    pub deflection: f64,
    /// Where.
    pub spot: Spot,
    /// Allowable deflection, m.
    pub allowable: f64,
    /// Demand over allowable.
    pub utilisation: f64,
}

/// Narrates a solved member.
///
/// # Errors
/// Steps whose replay in `f64` differs from the analysis by more than 1e-12 of scale: faults of the program.
pub fn narrate(member: &Member, analysis: &Analysis, demands: &[Demand]) -> Result<Working, Vec<Mismatch>> {
    let mut narrator = Narrator::new(member, analysis);
    narrator.given();
    let units = narrator.unit_states();
    let flexibility = narrator.flexibility(&units);
    let cases: Vec<sums::Totals> =
        (0..member.cases.len()).map(|case| narrator.case(case, &units, &flexibility)).collect();
    let combinations = narrator.sums(&cases);
    let places = narrator.places(&combinations, demands);
    narrator.checks(&combinations, &places, demands);
    let mismatches = narrator.builder.mismatches();
    if mismatches.is_empty() { Ok(narrator.builder.finish()) } else { Err(mismatches) }
}

/// Everything that is known while narrating.
pub(super) struct Narrator<'a> {
    pub builder: Builder,
    pub member: &'a Member,
    pub analysis: &'a Analysis,
    pub book: given::Book,
}

/// Units of forces and movements in a state: plain, or per unit of a redundant.
#[derive(Clone, Debug)]
pub(super) struct Scale {
    pub shear: (What, Unit),
    pub moment: (What, Unit),
    pub v: (What, Unit),
    pub psi: (What, Unit),
}

impl Scale {
    /// Of load cases and combinations.
    pub fn plain(base: &Base) -> Self {
        Self {
            shear: (What::Force, base.coherent(1, 0)),
            moment: (What::Moment, base.coherent(1, 1)),
            v: (What::Deflection, base.coherent(0, 1)),
            psi: (What::Turn, base.turning(0, 0)),
        }
    }

    /// Of the unit state of a redundant.
    pub fn per(base: &Base, redundant: Redundant) -> Self {
        let (force, length) = if matches!(redundant, Redundant::Force(_)) { (-1, 0) } else { (-1, -1) };
        let other = |unit| (What::Other, unit);
        Self {
            shear: other(base.coherent(1 + force, length)),
            moment: other(base.coherent(1 + force, 1 + length)),
            v: other(base.coherent(force, 1 + length)),
            psi: other(base.turning(force, length)),
        }
    }
}

/// A step to be written.
pub(super) fn finding(title: impl Into<String>, symbol: Symbol, (what, unit): (What, Unit), value: f64) -> Finding {
    Finding { title: title.into(), symbol, what, unit, value, basis: "", bold: false, last: false }
}

impl Finding {
    /// With what it rests on.
    pub fn basis(self, basis: &'static str) -> Self {
        Self { basis, ..self }
    }

    /// In bold.
    pub fn bold(self) -> Self {
        Self { bold: true, ..self }
    }

    /// A final figure.
    pub fn last(self) -> Self {
        Self { last: true, ..self }
    }
}

impl<'a> Narrator<'a> {
    fn new(member: &'a Member, analysis: &'a Analysis) -> Self {
        let builder = Builder::new(Base::of(member.title.system));
        Self { builder, member, analysis, book: given::Book::default() }
    }

    /// The units of load cases and combinations.
    pub fn plain(&self) -> Scale {
        Scale::plain(&self.builder.base)
    }

    /// A sum of terms as one step; more than five are first added up in fives.
    pub fn total(&mut self, finding: Finding, terms: Vec<Traced>, always: bool) -> Traced {
        let mut terms: Vec<Traced> = terms.into_iter().filter(|term| !term.is_zero()).collect();
        let mut part = 0;
        while terms.len() > 5 {
            let rest = terms.split_off(4);
            part += 1;
            let sum = crate::analysis::equilibrium::sum(std::mem::replace(&mut terms, rest));
            let symbol = Symbol::new(finding.symbol.base, format!("{}{part}s", finding.symbol.sub));
            let value = self.builder.value(&sum);
            let title = format!("{}: subtotal {part}", finding.title);
            let step = Finding { title, symbol, value, last: false, bold: false, ..finding.clone() };
            let sum = self.builder.find(step, sum);
            terms.insert(0, sum);
        }
        let sum = crate::analysis::equilibrium::sum(terms);
        if always { self.builder.state(finding, Some(sum)) } else { self.builder.find(finding, sum) }
    }

    /// The name of a place in symbols: of the support or hinge there, else a letter of its own.
    pub fn place_name(&self, place: crate::member::Place) -> String {
        self.book.names.get(&place).cloned().unwrap_or_default()
    }
}
