//! Superposition: the member under a case, and under every combination.

use std::collections::BTreeMap;

use super::state::{Pair, Told};
use super::{Narrator, Scale, finding};
use crate::analysis::equilibrium as sums;
use crate::analysis::{Cut, Solution, Sway};
use crate::member::Redundant;
use crate::working::draft::{Builder, Set, Symbol};
use crate::working::step::Chapters;
use crate::working::trace::{Source, Traced};

/// The member itself under a case or a combination, as steps.
#[derive(Clone, Debug, Default)]
pub struct Totals {
    /// By support: force and moment.
    pub reactions: Vec<Pair>,
    /// By redundant.
    pub redundants: Vec<Traced>,
    /// By piece.
    pub left: Vec<Pair>,
    /// By piece.
    pub right: Vec<Pair>,
    /// By piece.
    pub start: Vec<Pair>,
    /// By piece.
    pub end: Vec<Pair>,
}

/// Sums already written, by what they add up: neighbouring cuts share theirs.
type Written = BTreeMap<(u8, Vec<Source>), Traced>;

/// How one figure is put together: factors and terms.
type Terms = Vec<(Traced, Traced)>;

impl Narrator<'_> {
    /// The member under a case: the released member plus redundants times their unit states.
    pub fn superpose(&mut self, case: usize, released: &Told, units: &[Told], redundants: &[Traced]) -> Totals {
        let Some(solution) = self.analysis.cases.get(case).map(|case| case.total.clone()) else {
            return Totals::default();
        };
        let one: Traced = crate::number::Number::whole(1);
        let terms = |of: &dyn Fn(&Told) -> Traced| -> Terms {
            let units = units.iter().zip(redundants).map(|(unit, x)| (x.clone(), of(unit)));
            std::iter::once((one.clone(), of(released))).chain(units).collect()
        };
        // In its own unit state a redundant is 1: the sum folds to the redundant itself.
        let own = |support: usize, moment: bool| -> Option<Traced> {
            let place = self.analysis.model.redundants.iter().position(|redundant| match redundant {
                Redundant::Force(index) => !moment && *index == support,
                Redundant::Moment(index) => {
                    moment && *index == support && !crate::analysis::stability::splits(self.member, *redundant)
                }
            })?;
            let x = redundants.get(place)?.clone();
            let at_start = self.analysis.model.supports.get(support).is_some_and(|held| held.cut == 0);
            Some(if moment && at_start { -x } else { x })
        };
        let owned: Vec<(Option<Traced>, Option<Traced>)> =
            (0..self.member.supports.len()).map(|support| (own(support, false), own(support, true))).collect();
        let reactions = |told: &Told, support: usize| told.reactions.get(support).cloned();
        self.write_totals(
            &solution,
            redundants.to_vec(),
            Vec::new(),
            &|support, moment| match owned.get(support) {
                Some((Some(x), _)) if !moment => vec![(one.clone(), x.clone())],
                Some((_, Some(x))) if moment => vec![(one.clone(), x.clone())],
                _ => terms(&|told| {
                    let pair = reactions(told, support).unwrap_or_else(|| (Traced::zero(), Traced::zero()));
                    if moment { pair.1 } else { pair.0 }
                }),
            },
            &|row, piece, second| {
                terms(&|told| {
                    let list = match row {
                        Row::Left => &told.left,
                        Row::Right => &told.right,
                        Row::Start => &told.start,
                        Row::End => &told.end,
                    };
                    let pair = list.get(piece).cloned().unwrap_or_else(|| (Traced::zero(), Traced::zero()));
                    if second { pair.1 } else { pair.0 }
                })
            },
        )
    }

    /// Every combination: factors times cases.
    pub fn sums(&mut self, cases: &[Totals]) -> Vec<Totals> {
        self.builder.chapter(Chapters::Sums, "Combinations: factors times load cases");
        self.builder.block("Every figure of a combination is the sum of the load cases' figures times their factors.");
        let heads = self.member.combinations.iter().map(|c| (c.name.clone(), String::new())).collect();
        let mut grid = Cells::default();
        self.book.combining = true;
        let mut list = Vec::new();
        for (index, combination) in self.member.combinations.iter().enumerate() {
            let Some(solution) = self.analysis.combinations.get(index).cloned() else { continue };
            let factors = self.book.factors.get(index).cloned().unwrap_or_default();
            self.builder.tag(combination.name.clone());
            let weigh = |of: &dyn Fn(&Totals) -> Traced| -> Terms {
                factors.iter().cloned().zip(cases).map(|(factor, case)| (factor, of(case))).collect()
            };
            let (mut redundants, mut keys) = (Vec::new(), Vec::new());
            for (place, redundant) in self.analysis.model.redundants.clone().into_iter().enumerate() {
                let value = solution.redundants.get(place).copied().unwrap_or_default();
                let scale = self.plain();
                let units = if matches!(redundant, Redundant::Force(_)) { scale.shear } else { scale.moment };
                let what = finding(
                    format!("redundant of {}", combination.name),
                    self.redundant_symbol(redundant),
                    units,
                    value,
                )
                .last();
                let terms = weigh(&|case| case.redundants.get(place).cloned().unwrap_or_else(Traced::zero));
                // A redundant that is a support's own force or moment is its reaction: summed once.
                keys.push((0, terms.iter().flat_map(|(_, term)| term.sources()).collect()));
                redundants.push(self.builder.state(what, Some(sums::weighted(terms))));
            }
            let totals = self.write_totals(
                &solution,
                redundants,
                keys,
                &|support, moment| {
                    weigh(&|case| {
                        let pair =
                            case.reactions.get(support).cloned().unwrap_or_else(|| (Traced::zero(), Traced::zero()));
                        if moment { pair.1 } else { pair.0 }
                    })
                },
                &|row, piece, second| {
                    weigh(&|case| {
                        let list = match row {
                            Row::Left => &case.left,
                            Row::Right => &case.right,
                            Row::Start => &case.start,
                            Row::End => &case.end,
                        };
                        let pair = list.get(piece).cloned().unwrap_or_else(|| (Traced::zero(), Traced::zero()));
                        if second { pair.1 } else { pair.0 }
                    })
                },
            );
            list.push(totals);
            grid.fill(&self.builder, index);
        }
        self.book.combining = false;
        if let Some(block) = self.builder.open_block() {
            block.set = Set::Matrix(heads, grid.cells);
        }
        self.builder.tag("");
        list
    }

    fn write_totals(
        &mut self,
        solution: &Solution,
        redundants: Vec<Traced>,
        keys: Vec<(u8, Vec<Source>)>,
        reaction: &dyn Fn(usize, bool) -> Terms,
        cut: &dyn Fn(Row, usize, bool) -> Terms,
    ) -> Totals {
        let scale = self.plain();
        let mut written = Written::new();
        for (redundant, (kind, key)) in redundants.iter().zip(keys) {
            written.insert((kind, key), redundant.clone());
        }
        let mut totals = Totals { redundants, ..Totals::default() };
        for (index, support) in self.member.supports.iter().enumerate() {
            let value = solution.reactions.get(index).copied().unwrap_or_default();
            let name = support.name.clone();
            let force = finding(
                format!("reaction of {name}, upward"),
                Symbol::new("R", name.clone()),
                scale.shear.clone(),
                value.force,
            )
            .last();
            let moment = finding(
                format!("reaction moment of {name}, counter-clockwise"),
                Symbol::new("m", name),
                scale.moment.clone(),
                value.moment,
            )
            .last();
            let mut get = |narrator: &mut Self, holds: bool, what: super::Finding, moment: bool| {
                if holds {
                    narrator.sum_once(0, what, reaction(index, moment), &mut written, true)
                } else {
                    Traced::zero()
                }
            };
            let force = get(self, support.holds_deflection(), force.bold(), false);
            let moment = get(self, support.holds_rotation(), moment.bold(), true);
            totals.reactions.push((force, moment));
        }
        for (piece, geometry) in self.analysis.model.pieces.iter().enumerate() {
            let ends = solution.pieces.get(piece).copied().unwrap_or_default();
            let (from, to) = (self.place_name(geometry.from), self.place_name(geometry.to));
            let start =
                self.movements(&scale, ends.start, &format!("{from}r"), &from, Row::Start, piece, cut, &mut written);
            let left = self.forces(
                &scale,
                ends.left,
                &format!("{from}r"),
                &format!("right of {from}"),
                Row::Left,
                piece,
                cut,
                &mut written,
            );
            let right = self.forces(
                &scale,
                ends.right,
                &format!("{to}l"),
                &format!("left of {to}"),
                Row::Right,
                piece,
                cut,
                &mut written,
            );
            let end = self.movements(&scale, ends.end, &format!("{to}l"), &to, Row::End, piece, cut, &mut written);
            totals.start.push(start);
            totals.left.push(left);
            totals.right.push(right);
            totals.end.push(end);
        }
        totals
    }

    #[expect(clippy::too_many_arguments, reason = "names, values and terms of one pair")]
    fn forces(
        &mut self,
        scale: &Scale,
        value: Cut,
        sub: &str,
        where_: &str,
        row: Row,
        piece: usize,
        terms: &dyn Fn(Row, usize, bool) -> Terms,
        written: &mut Written,
    ) -> Pair {
        let shear = finding(format!("shear {where_}"), Symbol::new("V", sub), scale.shear.clone(), value.shear).last();
        let moment =
            finding(format!("bending moment {where_}"), Symbol::new("M", sub), scale.moment.clone(), value.moment)
                .last();
        (
            self.sum_once(1, shear, terms(row, piece, false), written, false),
            self.sum_once(2, moment, terms(row, piece, true), written, false),
        )
    }

    #[expect(clippy::too_many_arguments, reason = "names, values and terms of one pair")]
    fn movements(
        &mut self,
        scale: &Scale,
        value: Sway,
        sub: &str,
        name: &str,
        row: Row,
        piece: usize,
        terms: &dyn Fn(Row, usize, bool) -> Terms,
        written: &mut Written,
    ) -> Pair {
        let v = finding(format!("deflection of {name}"), Symbol::new("v", name), scale.v.clone(), value.v).last();
        let psi = finding(format!("turn at {name}"), Symbol::new("psi", sub), scale.psi.clone(), value.psi);
        (
            self.sum_once(3, v, terms(row, piece, false), written, false),
            self.sum_once(4, psi, terms(row, piece, true), written, false),
        )
    }

    /// A weighted sum as a step, unless the same sum has been written.
    fn sum_once(
        &mut self,
        kind: u8,
        what: super::Finding,
        terms: Terms,
        written: &mut Written,
        always: bool,
    ) -> Traced {
        // Two figures are the same sum where their terms are the same, whatever the factors.
        let key: Vec<Source> = terms.iter().flat_map(|(_, term)| term.sources()).collect();
        let products: Vec<Traced> =
            terms.into_iter().map(|(factor, term)| factor * term).filter(|term| !term.is_zero()).collect();
        if let Some(known) = written.get(&(kind, key.clone())) {
            return known.clone();
        }
        let bare = products.len() == 1 && products.first().is_some_and(|only| only.source().is_some());
        let stated = always && !bare;
        // The terms of a combination stand in the columns of its matrix, however many they are.
        let sum = match (self.book.combining, stated) {
            (true, true) => self.builder.state(what, Some(sums::sum(products))),
            (true, false) => self.builder.find(what, sums::sum(products)),
            (false, _) => self.total(what, products, stated),
        };
        if !key.is_empty() {
            written.insert((kind, key), sum.clone());
        }
        sum
    }
}

/// Where the steps of a matrix stand: rows by symbol, a column for each combination.
#[derive(Debug, Default)]
struct Cells {
    rows: Vec<(Symbol, usize)>,
    cells: Vec<(usize, usize)>,
}

impl Cells {
    /// Gives the steps written since the last call the rows of their symbols.
    fn fill(&mut self, builder: &Builder, column: usize) {
        let steps = builder.open_steps();
        let mut seen: Vec<Symbol> = Vec::new();
        for step in steps.iter().skip(self.cells.len()) {
            let Some(draft) = builder.drafts.get(*step) else { continue };
            let count = seen.iter().filter(|known| **known == draft.symbol).count();
            seen.push(draft.symbol.clone());
            let key = (draft.symbol.clone(), count);
            let row = self.rows.iter().position(|known| *known == key).unwrap_or_else(|| {
                self.rows.push(key);
                self.rows.len() - 1
            });
            self.cells.push((row, column));
        }
    }
}

/// Which figures of a piece.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Row {
    /// Just right of its left end.
    Left,
    /// At its right end.
    Right,
    /// Movement of its left end.
    Start,
    /// Movement of its right end.
    End,
}
