//! From drafts to printed steps: the chain of steps evaluated from printed figures, exactly.
//!
//! Each result is rounded half-even to p significant digits, forces, moments, deflections and turns never finer than the
//! p-th digit of the greatest figure of their quantity. Anything else that ends within ten digits is kept as it is: typed
//! lengths and products of typed figures carry no rounding of their own. p is the smallest for which every final figure
//! differs from the unrounded solution by at most half a unit in the fourth digit of the greatest figure of its quantity and
//! combination, and every verdict is the same.

use std::collections::BTreeMap;

use super::draft::{Builder, Class, Draft, Set};
use super::exact::Exact;
use super::name;
use super::step::{Block, Body, Chapter, Figure, Grid, Input, Origin, Step, Working};
use super::trace::Source;
use super::units::What;
use crate::quantity::Decimal;

/// Fewest figures carried.
const FEWEST: u32 = 5;
/// Most figures carried; beyond that the release was badly chosen.
const MOST: u32 = 12;

impl Builder {
    /// Prints the drafts.
    pub fn finish(mut self) -> Working {
        self.gather();
        let order: Vec<usize> =
            self.chapters.iter().flat_map(|c| &c.blocks).flat_map(|b| b.steps.iter().copied()).collect();
        let greatest = self.greatest();
        let mut figures = FEWEST;
        let mut printed = self.evaluate(figures, &order, &greatest);
        while figures < MOST && !self.serves(&printed) {
            figures += 1;
            printed = self.evaluate(figures, &order, &greatest);
        }
        let settled = self.serves(&printed);
        self.assemble(figures, settled, &printed)
    }

    fn class(draft: &Draft) -> Class {
        (draft.what, draft.unit.to_string())
    }

    /// Leading power of ten of the greatest figure of each class, in printed units.
    fn greatest(&self) -> BTreeMap<Class, i32> {
        let mut sizes: BTreeMap<Class, f64> = BTreeMap::new();
        for draft in &self.drafts {
            let size = sizes.entry(Self::class(draft)).or_default();
            *size = size.max(in_unit(draft).abs());
        }
        sizes.into_iter().map(|(class, size)| (class, leading(size))).collect()
    }

    /// Every figure printed with `figures` significant digits; `None` where a divisor printed as zero.
    fn evaluate(&self, figures: u32, order: &[usize], greatest: &BTreeMap<Class, i32>) -> Vec<Option<Decimal>> {
        let mut printed: Vec<Option<Decimal>> = vec![None; self.drafts.len()];
        for index in order {
            let Some(draft) = self.drafts.get(*index) else { continue };
            let floor = greatest.get(&Self::class(draft)).copied().unwrap_or_default();
            let of = |source| match source {
                Source::Deck(index) => {
                    self.figures.get(index).map_or_else(|| Exact::whole(0), |figure| Exact::decimal(figure.figure))
                }
                Source::Step(index) => {
                    printed.get(index).copied().flatten().map_or_else(|| Exact::whole(0), Exact::decimal)
                }
            };
            let figure = match (&draft.expression, draft.chosen) {
                (Some(expression), _) => {
                    expression.exact(&of).and_then(|exact| round(&exact, draft.what, figures, floor))
                }
                (None, Some(chosen)) => Some(chosen),
                // A chosen place: the unrounded one, rounded.
                (None, None) => nearest(in_unit(draft), figures).and_then(|exact| {
                    let digits = i32::try_from(figures).unwrap_or(0);
                    exact.shortest(exact.leading().unwrap_or(0).max(floor) - digits + 1)
                }),
            };
            if let Some(slot) = printed.get_mut(*index) {
                *slot = figure;
            }
        }
        printed
    }

    /// Whether every final figure is close enough to the unrounded solution, and every verdict the same.
    fn serves(&self, printed: &[Option<Decimal>]) -> bool {
        let mut sizes: BTreeMap<(&String, Class), f64> = BTreeMap::new();
        let finals = || self.drafts.iter().zip(printed).filter_map(|(d, f)| Some((d, d.last_of.as_ref()?, f)));
        for (draft, of, _) in finals() {
            let size = sizes.entry((of, Self::class(draft))).or_default();
            *size = size.max(in_unit(draft).abs());
        }
        if printed.iter().any(Option::is_none) {
            return false;
        }
        finals().all(|(draft, of, figure)| {
            let Some(figure) = figure.map(Decimal::to_f64) else { return false };
            let size = sizes.get(&(of, Self::class(draft))).copied().unwrap_or_default();
            let half = 0.5 * power_of_ten(leading(size) - 3);
            let same = draft.what != What::Utilisation || (figure > 1.0) == (draft.value > 1.0 + 1e-9);
            same && (figure - in_unit(draft)).abs() <= half
        })
    }

    fn assemble(self, figures: u32, settled: bool, printed: &[Option<Decimal>]) -> Working {
        let mut places = vec![0; self.drafts.len()];
        let mut steps: Vec<Step> = Vec::with_capacity(self.drafts.len());
        let mut chapters = Vec::new();
        for chapter in self.chapters.iter().filter(|chapter| chapter.blocks.iter().any(|block| !block.steps.is_empty()))
        {
            let number = chapters.len() + 1;
            let mut blocks = Vec::new();
            for block in chapter.blocks.iter().filter(|block| !block.steps.is_empty()) {
                let label = format!("{number}.{}", blocks.len() + 1);
                let mut indices = Vec::new();
                for (line, index) in block.steps.iter().enumerate() {
                    let Some(draft) = self.drafts.get(*index) else { continue };
                    if let Some(place) = places.get_mut(*index) {
                        *place = steps.len();
                    }
                    indices.push(steps.len());
                    let id = format!("{label}.{}", block.set.line(line, block.steps.len()));
                    steps.push(self.step(draft, id, printed.get(*index).copied().flatten(), printed, &places));
                }
                let body = match &block.set {
                    Set::Apart => self.body(&block.steps, indices),
                    Set::Rows => Body::Rows(indices),
                    Set::Grid(heads) => Body::Grid(grid(heads, indices.len(), |rows, row, column| {
                        indices.get(column * rows + row).copied()
                    })),
                    Set::Matrix(heads, cells) => Body::Matrix(matrix(heads, cells, &indices)),
                };
                let mut notes: Vec<String> = Vec::new();
                for basis in block.steps.iter().filter_map(|index| self.drafts.get(*index)).map(|draft| draft.basis) {
                    if !basis.is_empty() && !notes.iter().any(|note| note == basis) {
                        notes.push(basis.to_owned());
                    }
                }
                blocks.push(Block { number: label, sentence: block.sentence.clone(), notes, body });
            }
            chapters.push(Chapter { about: chapter.about.clone(), number, title: chapter.title.clone(), blocks });
        }
        Working { figures, settled, steps, chapters }
    }

    /// Three and more steps of one shape stand as a table under one formula.
    fn body(&self, drafts: &[usize], steps: Vec<usize>) -> Body {
        let mut shapes = drafts.iter().map(|index| self.drafts.get(*index).and_then(|draft| draft.expression.as_ref()));
        let units = drafts.iter().filter_map(|index| self.drafts.get(*index)).map(|draft| &draft.unit);
        let one_unit = units.clone().zip(units.skip(1)).all(|(left, right)| left == right);
        let first = shapes.next().flatten();
        let alike = first.is_some_and(|first| shapes.all(|next| next.is_some_and(|next| next.same_shape(first))));
        if alike && one_unit && steps.len() >= 3 { Body::Table(steps) } else { Body::Lines(steps) }
    }

    fn step(
        &self,
        draft: &Draft,
        id: String,
        figure: Option<Decimal>,
        printed: &[Option<Decimal>],
        places: &[usize],
    ) -> Step {
        let names = name::Naming::new(self, draft, printed);
        let sources = names.sources();
        let inputs = sources.iter().map(|source| {
            let (printed, unit, from) = match *source {
                Source::Deck(index) => {
                    let figure = self.figures.get(index);
                    let unit = figure.map(|figure| figure.unit.clone()).unwrap_or_default();
                    (figure.map_or(Decimal::ZERO, |figure| figure.figure), unit, Origin::Deck)
                }
                Source::Step(index) => {
                    let unit = self.drafts.get(index).map(|draft| draft.unit.clone()).unwrap_or_default();
                    let figure = printed.get(index).copied().flatten().unwrap_or(Decimal::ZERO);
                    (figure, unit, Origin::Step(places.get(index).copied().unwrap_or_default()))
                }
            };
            Input { name: names.ascii(*source), math: names.typeset(*source), printed, unit, from }
        });
        Step {
            id,
            title: draft.title.clone(),
            case: (!draft.tag.is_empty()).then(|| draft.tag.clone()),
            symbol: name::ascii(&draft.symbol, ""),
            expression: names.expression(),
            math: names.math(),
            numbers: names.numbers(),
            math_symbol: name::typeset(&draft.symbol, ""),
            spoken: names.spoken(figure.unwrap_or(Decimal::ZERO)),
            inputs: inputs.collect(),
            result: Figure { printed: figure.unwrap_or(Decimal::ZERO), unit: draft.unit.clone(), value: draft.value },
            basis: draft.basis.to_owned(),
            bold: draft.bold,
        }
    }
}

impl Set {
    /// How a step of a block is numbered: `3`, or in a grid by row and column, `3b`.
    fn line(&self, index: usize, steps: usize) -> String {
        match self {
            Self::Apart | Self::Rows => (index + 1).to_string(),
            Self::Grid(heads) => {
                let rows = (steps / heads.len().max(1)).max(1);
                format!("{}{}", index % rows + 1, letter(index / rows))
            }
            Self::Matrix(_, cells) => {
                let (row, column) = cells.get(index).copied().unwrap_or_default();
                format!("{}{}", row + 1, letter(column))
            }
        }
    }
}

/// Columns are told apart by letters: a to z, then aa.
pub fn letter(index: usize) -> String {
    let one = |index: usize| char::from(b'a' + u8::try_from(index % 26).unwrap_or(0));
    match (index / 26).checked_sub(1) {
        Some(before) => format!("{}{}", letter(before), one(index)),
        None => one(index).to_string(),
    }
}

fn grid(heads: &[(String, String)], steps: usize, at: impl Fn(usize, usize, usize) -> Option<usize>) -> Grid {
    let rows = steps / heads.len().max(1);
    let row = |row| (0..heads.len()).map(|column| at(rows, row, column)).collect();
    Grid { heads: heads.to_vec(), rows: (0..rows).map(row).collect() }
}

fn matrix(heads: &[(String, String)], cells: &[(usize, usize)], steps: &[usize]) -> Grid {
    let count = cells.iter().map(|(row, _)| row + 1).max().unwrap_or(0);
    let mut rows = vec![vec![None; heads.len()]; count];
    for ((row, column), step) in cells.iter().zip(steps) {
        if let Some(cell) = rows.get_mut(*row).and_then(|row| row.get_mut(*column)) {
            *cell = Some(*step);
        }
    }
    Grid { heads: heads.to_vec(), rows }
}

/// The analysis's value in the step's unit.
fn in_unit(draft: &Draft) -> f64 {
    // A conversion is 1 in SI whatever it is called; its figure is chosen.
    match draft.chosen {
        Some(chosen) => chosen.to_f64(),
        None => draft.value / draft.unit.si().unwrap_or(1.0),
    }
}

fn round(exact: &Exact, what: What, figures: u32, floor: i32) -> Option<Decimal> {
    let digits = i32::try_from(figures).ok()?;
    let Some(lead) = exact.leading() else {
        return Some(if what == What::Other { Decimal::ZERO } else { Decimal::new(0, (floor - digits + 1).min(0)) });
    };
    if what == What::Other {
        let whole = exact.shortest(lead - 9)?;
        let kept = whole.trimmed().exponent() > lead - 9;
        return if kept { Some(whole) } else { exact.shortest(lead - digits + 1) };
    }
    let rounded = exact.rounded(lead.max(floor) - digits + 1)?;
    if rounded.exponent() > 0 { rounded.with_exponent(0) } else { Some(rounded) }
}

/// The decimal of some digits more than will be printed that lies nearest to an `f64`.
fn nearest(value: f64, figures: u32) -> Option<Exact> {
    let places = i32::try_from(figures).ok()? + 4 - leading(value);
    let scaled = value * power_of_ten(places);
    if !scaled.is_finite() || scaled.abs() > 1e36 {
        return None;
    }
    // Truncation towards zero of a rounded value: exact for anything an i128 holds.
    Some(Exact::decimal(Decimal::new(libm::round(scaled) as i128, -places)))
}

/// Power of ten of the leading digit; 0 for zero.
fn leading(size: f64) -> i32 {
    if size == 0.0 || !size.is_finite() {
        return 0;
    }
    let guess = libm::floor(libm::log10(size.abs())) as i32;
    if size.abs() >= power_of_ten(guess + 1) { guess + 1 } else { guess }
}

fn power_of_ten(power: i32) -> f64 {
    let size = (0..power.abs()).fold(1.0, |product: f64, _| product * 10.0);
    if power >= 0 { size } else { 1.0 / size }
}
