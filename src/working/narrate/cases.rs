//! Unit states, flexibilities, load cases.

use super::state::{Loads, Pair, Told};
use super::sums::Totals;
use super::{Narrator, Scale, finding};
use crate::analysis::equilibrium as sums;
use crate::analysis::stability::splits;
use crate::member::{LoadKind, Redundant};
use crate::quantity::{Decimal, Unit};
use crate::working::draft::{Likes, Set, Symbol};
use crate::working::narrate::given::LoadBook;
use crate::working::step::Chapters;
use crate::working::trace::Traced;
use crate::working::units::{What, product};

/// Flexibilities as steps.
pub struct Flexibilities {
    /// f_ij, row by row, both triangles.
    pub entries: Vec<Vec<Traced>>,
    /// Determinant of two equations.
    pub determinant: Option<Traced>,
    /// u_ij after elimination, j >= i, for three and more.
    pub upper: Vec<Vec<Traced>>,
}

impl Narrator<'_> {
    /// Short name of a redundant in subscripts: the support, with the letter where both are released there.
    pub fn release(&self, redundant: Redundant) -> String {
        let name = self.support_name(redundant.support());
        let both =
            self.analysis.model.redundants.iter().filter(|other| other.support() == redundant.support()).count() > 1;
        match (both, redundant) {
            (false, _) => name,
            (true, Redundant::Force(_)) => format!("R{name}"),
            (true, Redundant::Moment(_)) => format!("M{name}"),
        }
    }

    /// The symbol of a redundant.
    pub fn redundant_symbol(&self, redundant: Redundant) -> Symbol {
        let letter = if matches!(redundant, Redundant::Force(_)) { "R" } else { "M" };
        Symbol::new(letter, self.support_name(redundant.support()))
    }

    /// Words for a redundant.
    pub fn redundant_words(&self, redundant: Redundant) -> String {
        let name = self.support_name(redundant.support());
        match redundant {
            Redundant::Force(_) => format!("upward force of support {name}"),
            Redundant::Moment(_) if splits(self.member, redundant) => format!("bending moment over support {name}"),
            Redundant::Moment(_) => format!("moment at support {name}"),
        }
    }

    /// Every unit state, a chapter each.
    pub fn unit_states(&mut self) -> Vec<Told> {
        let redundants = self.analysis.model.redundants.clone();
        let count = self.analysis.model.pieces.len();
        let mut told = Vec::new();
        // Many are told side by side in one chapter, a column each.
        let together = redundants.len() > 2;
        for (index, redundant) in redundants.iter().enumerate() {
            let words = self.redundant_words(*redundant);
            let symbol = self.redundant_symbol(*redundant);
            if !together {
                self.builder.chapter(Chapters::UnitState(index), format!("Unit state: {words} is 1"));
            } else if index == 0 {
                self.builder.chapter(Chapters::UnitState(0), "Unit states: each redundant in turn is 1");
            }
            self.builder.tag(format!("{}", index + 1));
            self.book.column = together.then(|| format!("{}_{} = 1", symbol.base, symbol.sub));
            let sentence = format!("The released member carries nothing but the {words}, taken as 1.");
            match self.book.column.clone() {
                Some(head) => {
                    let likes = Likes {
                        key: "unit".to_owned(),
                        head: (head, String::new()),
                        fewest: 2,
                        sentence: "The released member carries nothing but one redundant, taken as 1.".to_owned(),
                    };
                    self.builder.block_like(sentence, likes);
                }
                None => {
                    self.builder.block(sentence);
                }
            }
            let one = self.builder.choose(format!("unit value, {words}"), symbol, Decimal::ONE, Unit::none(), 1.0);
            let acts = vec![Vec::new(); count];
            let scale = Scale::per(&self.builder.base, *redundant);
            self.book.scale = Some(scale.clone());
            let Some(state) = self.analysis.units.get(index) else { continue };
            let loads = Loads { acts: &acts, unit: Some((*redundant, one)), imposed: &[] };
            told.push(self.tell(state, &loads, &scale));
        }
        self.book.scale = None;
        self.book.column = None;
        self.builder.tag("");
        told
    }

    /// Movement of a state at a release, along the redundant.
    fn movement(&self, told: &Told, redundant: Redundant) -> Traced {
        let Some(held) = self.analysis.model.supports.get(redundant.support()) else { return Traced::zero() };
        let zero = || (Traced::zero(), Traced::zero());
        let after = told.start.get(held.cut).cloned().unwrap_or_else(zero);
        let here = match held.cut.checked_sub(1) {
            Some(piece) => told.end.get(piece).cloned().unwrap_or_else(zero),
            None => after.clone(),
        };
        match redundant {
            Redundant::Force(_) => -here.0,
            Redundant::Moment(_) if splits(self.member, redundant) => after.1 - here.1,
            Redundant::Moment(_) if held.cut == 0 => here.1,
            Redundant::Moment(_) => -here.1,
        }
    }

    /// The flexibilities and, for three and more redundants, their elimination.
    pub fn flexibility(&mut self, units: &[Told]) -> Flexibilities {
        let redundants = self.analysis.model.redundants.clone();
        let mut entries = vec![vec![Traced::zero(); redundants.len()]; redundants.len()];
        if redundants.is_empty() {
            return Flexibilities { entries, determinant: None, upper: Vec::new() };
        }
        self.builder.chapter(Chapters::Flexibility, "Flexibilities");
        self.builder.block("Movement at each release, along the redundant, caused by each redundant of 1; a released spring adds its give.");
        for (i, release) in redundants.iter().enumerate() {
            for (j, unit) in redundants.iter().enumerate() {
                let entry = self.entry(units, (i, *release), (j, *unit));
                if let Some(slot) = entries.get_mut(i).and_then(|row| row.get_mut(j)) {
                    *slot = entry;
                }
            }
        }
        let at = |i: usize, j: usize| entries.get(i).and_then(|row| row.get(j)).cloned().unwrap_or_else(Traced::zero);
        let determinant = (redundants.len() == 2).then(|| {
            let value = self.builder.value(&sums::determinant(at(0, 0), at(0, 1), at(1, 0), at(1, 1)));
            let unit = product(&self.entry_unit(&redundants, 0, 0), &self.entry_unit(&redundants, 1, 1));
            self.builder.block("Two equations: Cramer's rule, whose determinant is");
            let what =
                finding("determinant of the flexibilities", Symbol::new("D", ""), (What::Other, unit), value).bold();
            self.builder.state(what, Some(sums::determinant(at(0, 0), at(0, 1), at(1, 0), at(1, 1))))
        });
        let upper = if redundants.len() > 2 { self.eliminate(&entries) } else { Vec::new() };
        Flexibilities { entries, determinant, upper }
    }

    fn entry_unit(&self, redundants: &[Redundant], i: usize, j: usize) -> Unit {
        let (Some(release), Some(unit)) = (redundants.get(i), redundants.get(j)) else { return Unit::none() };
        let scale = Scale::per(&self.builder.base, *unit);
        if matches!(release, Redundant::Force(_)) { scale.v.1 } else { scale.psi.1 }
    }

    fn entry(&mut self, units: &[Told], (i, release): (usize, Redundant), (j, unit): (usize, Redundant)) -> Traced {
        let Some(told) = units.get(j) else { return Traced::zero() };
        let flexibility = &self.analysis.flexibility;
        // Each triangle carries the value that its own unit state gives.
        let value = if i >= j { flexibility.lower.get(i, j) } else { flexibility.upper.get(i, j) };
        let movement = self.movement(told, release);
        let give = if i == j { self.give(release) } else { Traced::zero() };
        let redundants = self.analysis.model.redundants.clone();
        let (name, other) = (self.release(release), self.release(unit));
        let what = finding(
            format!("flexibility: movement at the release of {name} by {other} = 1"),
            Symbol::new("f", if redundants.len() > 1 { format!("{name}{other}") } else { format!("{name}{name}") }),
            (What::Other, self.entry_unit(&redundants, i, j)),
            value,
        );
        if movement.is_zero() && give.is_zero() {
            return Traced::zero();
        }
        self.builder.state(what.bold().basis("movement along the redundant"), Some(movement + give))
    }

    /// Give of the spring whose own force or moment is released.
    fn give(&self, redundant: Redundant) -> Traced {
        let springs = self.book.springs.get(redundant.support()).cloned().unwrap_or((None, None));
        let stiffness = match redundant {
            Redundant::Force(_) => springs.0,
            Redundant::Moment(_) if splits(self.member, redundant) => None,
            Redundant::Moment(_) => springs.1,
        };
        stiffness.map_or_else(Traced::zero, |k| sums::single(crate::number::Number::whole(1), k))
    }

    fn eliminate(&mut self, entries: &[Vec<Traced>]) -> Vec<Vec<Traced>> {
        let redundants = self.analysis.model.redundants.clone();
        let count = redundants.len();
        let mut upper = vec![vec![Traced::zero(); count]; count];
        let Some(eliminated) = self.analysis.flexibility.eliminated.as_ref() else { return upper };
        self.builder.block("Elimination, row by row: from each entry the product of the entries above it and to its left, over their pivot.");
        for j in 0..count {
            for i in 0..=j {
                let get = |table: &[Vec<Traced>], i: usize, j: usize| {
                    table.get(i).and_then(|row| row.get(j)).cloned().unwrap_or_else(Traced::zero)
                };
                let rows: Vec<(Traced, Traced, Traced)> = (0..i)
                    .map(|k| (get(&upper, k, i), get(&upper, k, j), get(&upper, k, k)))
                    .filter(|(left, right, _)| !left.is_zero() && !right.is_zero())
                    .collect();
                // The lower triangle is what the analysis eliminates.
                let expression = sums::eliminated(get(entries, j, i), rows);
                if expression.is_zero() {
                    continue;
                }
                let (row, column) = (self.named(&redundants, i), self.named(&redundants, j));
                let unit = self.entry_unit(&redundants, i, j);
                let what = finding(
                    format!("entry {row}{column} after elimination"),
                    Symbol::new("u", format!("{row}{column}")),
                    (What::Other, unit),
                    eliminated.get(i, j),
                );
                let step = self.builder.find(what, expression);
                if let Some(slot) = upper.get_mut(i).and_then(|row| row.get_mut(j)) {
                    *slot = step;
                }
            }
        }
        upper
    }

    pub fn named(&self, redundants: &[Redundant], index: usize) -> String {
        redundants.get(index).map_or_else(String::new, |redundant| self.release(*redundant))
    }

    /// One load case: the released member, compatibility, the member itself.
    pub fn case(&mut self, case: usize, units: &[Told], flexibility: &Flexibilities) -> Totals {
        let member = self.member;
        let analysis = self.analysis;
        let (Some(load_case), Some(solution)) = (member.cases.get(case), analysis.cases.get(case)) else {
            return Totals::default();
        };
        self.builder.chapter(Chapters::Case(case), format!("Load case {}", load_case.name));
        self.builder.tag(load_case.name.clone());
        let acts: Vec<Vec<super::acts::Act>> =
            analysis.model.pieces.iter().zip(&solution.actions).map(|(piece, list)| self.acts(list, piece)).collect();
        let imposed = self.imposed(case);
        let scale = self.plain();
        let loads = Loads { acts: &acts, unit: None, imposed: &imposed };
        // The released member's figures carry a nought, so that its reactions are not taken for the member's own.
        self.builder.tag(format!("{}0", load_case.name));
        let released = self.tell(&solution.released, &loads, &scale);
        self.builder.tag(load_case.name.clone());
        let redundants = self.compatibility(case, &released, &imposed, flexibility);
        self.book.combining = !redundants.is_empty();
        let totals = self.superpose(case, &released, units, &redundants);
        self.book.combining = false;
        if let Some(block) = self.builder.open_block().filter(|_| !redundants.is_empty()) {
            block.set = Set::Rows;
        }
        self.builder.tag("");
        totals
    }

    /// Settlement and imposed turn of each support in a case.
    fn imposed(&mut self, case: usize) -> Vec<Pair> {
        let mut list = vec![(Traced::zero(), Traced::zero()); self.member.supports.len()];
        let loads = self.member.cases.get(case).map_or(&[][..], |case| &case.loads);
        let books = self.book.loads.get(case).cloned().unwrap_or_default();
        for (load, book) in loads.iter().zip(books) {
            let LoadBook::Single(figure) = book else { continue };
            match load.kind {
                LoadKind::Settlement { support, .. } => {
                    if let Some(pair) = list.get_mut(support) {
                        pair.0 = pair.0.clone() + figure;
                    }
                }
                LoadKind::Rotation { support, .. } => {
                    if let Some(pair) = list.get_mut(support) {
                        pair.1 = pair.1.clone() + figure;
                    }
                }
                _ => {}
            }
        }
        list
    }

    fn compatibility(
        &mut self,
        case: usize,
        released: &Told,
        imposed: &[Pair],
        flexibility: &Flexibilities,
    ) -> Vec<Traced> {
        let redundants = self.analysis.model.redundants.clone();
        let Some(solution) = self.analysis.cases.get(case) else { return Vec::new() };
        if redundants.is_empty() {
            return Vec::new();
        }
        self.builder.block("Compatibility: the redundants close what the released member leaves open at each release.");
        let scale = self.plain();
        let mut gaps = Vec::new();
        for (redundant, value) in redundants.iter().zip(&solution.gaps) {
            let name = self.release(*redundant);
            let at = imposed.get(redundant.support()).cloned().unwrap_or_else(|| (Traced::zero(), Traced::zero()));
            let held = self.analysis.model.supports.get(redundant.support()).is_some_and(|held| held.cut == 0);
            let wanted = match redundant {
                Redundant::Force(_) => -at.0,
                Redundant::Moment(_) if splits(self.member, *redundant) => Traced::zero(),
                Redundant::Moment(_) if held => at.1,
                Redundant::Moment(_) => -at.1,
            };
            let units = if matches!(redundant, Redundant::Force(_)) { scale.v.clone() } else { scale.psi.clone() };
            let what = finding(
                format!("movement to be closed at the release of {name}"),
                Symbol::new("g", name),
                units,
                *value,
            )
            .basis("movement imposed less movement of the released member");
            let expression = wanted - self.movement(released, *redundant);
            gaps.push(self.builder.find(what, expression));
        }
        let solved = self.solve(&redundants, &gaps, flexibility, &solution.redundants, &solution.reduced);
        self.builder.block(
            "The member itself: each figure is that of the released member plus each redundant times its unit state.",
        );
        solved
    }
}
