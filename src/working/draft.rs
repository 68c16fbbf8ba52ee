//! Steps while they are being written: expressions over other steps, unrounded values, no printed figure yet.

use std::collections::BTreeMap;

use super::exact::Exact;
use super::replay::Replay;
use super::trace::{Source, Traced};
use super::units::{Base, What, conversion};
use crate::quantity::{Decimal, Typed, Unit};

/// A symbol with its subscript: `v` and `C`.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct Symbol {
    /// The letter, or a short word.
    pub base: &'static str,
    /// What it belongs to; ASCII letters, digits and underscores; may be empty.
    pub sub: String,
}

impl Symbol {
    /// A symbol.
    pub fn new(base: &'static str, sub: impl Into<String>) -> Self {
        Self { base, sub: sub.into() }
    }
}

/// A step in the making.
#[derive(Clone, Debug)]
pub struct Draft {
    /// What it finds, in a few words.
    pub title: String,
    /// Its symbol.
    pub symbol: Symbol,
    /// State, case or combination that tells like symbols apart; empty for what holds for all.
    pub tag: String,
    /// What it is, for rounding.
    pub what: What,
    /// Its unit.
    pub unit: Unit,
    /// How it is made; `None` for a chosen figure.
    pub expression: Option<Traced>,
    /// The figure, where it is exact and chosen (a conversion, a unit load).
    pub chosen: Option<Decimal>,
    /// The analysis's value in SI.
    pub value: f64,
    /// The tabulated case or principle it rests on.
    pub basis: &'static str,
    /// Whether it stands in bold.
    pub bold: bool,
    /// Where it is a final figure: the case or combination it is final for.
    pub last_of: Option<String>,
}

/// A figure typed in the deck.
#[derive(Clone, Debug)]
pub struct DeckFigure {
    /// Name in the expression.
    pub symbol: Symbol,
    /// As typed.
    pub figure: Decimal,
    /// As typed.
    pub unit: Unit,
    /// In SI.
    pub value: f64,
}

/// A block in the making.
#[derive(Clone, Debug)]
pub struct DraftBlock {
    /// One sentence in words.
    pub sentence: String,
    /// Indices of its steps.
    pub steps: Vec<usize>,
    /// Other blocks that it may stand beside.
    pub likes: Option<Likes>,
    /// How its steps are set, once blocks have been gathered.
    pub set: Set,
}

/// Which blocks may stand side by side as columns of one grid, if their steps have the same shapes.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Likes {
    /// The same for all that may stand together.
    pub key: String,
    /// What the column is about.
    pub head: (String, String),
    /// From how many on they do.
    pub fewest: usize,
    /// The sentence above the grid.
    pub sentence: String,
}

/// How the steps of a block are set.
#[derive(Clone, Debug, PartialEq, Eq, Default)]
pub enum Set {
    /// Lines, or a table where all have one shape.
    #[default]
    Apart,
    /// Rows of numbers put in, where one sentence says how all of them are made.
    Rows,
    /// A grid: column by column, each of as many steps as there are rows.
    Grid(Vec<(String, String)>),
    /// Weighted sums: row by row, each step's column.
    Matrix(Vec<(String, String)>, Vec<(usize, usize)>),
}

/// A chapter in the making.
#[derive(Clone, Debug)]
pub struct DraftChapter {
    /// What it is about.
    pub about: super::Chapters,
    /// Its heading.
    pub title: String,
    /// Its blocks.
    pub blocks: Vec<DraftBlock>,
}

/// Where new steps go: a chapter and a block.
pub type Slot = (usize, usize);

/// Quantity and unit: figures of one class are rounded alike.
pub type Class = (What, String);

/// Writes steps.
#[derive(Debug)]
pub struct Builder {
    /// Base units.
    pub base: Base,
    /// Steps in the order written.
    pub drafts: Vec<Draft>,
    /// Figures typed in the deck.
    pub figures: Vec<DeckFigure>,
    /// Chapters in the order shown.
    pub chapters: Vec<DraftChapter>,
    pub(super) replays: Vec<Replay>,
    slot: Slot,
    tag: String,
    factors: BTreeMap<String, Traced>,
    conversions: Slot,
}

/// A step to be written; `find` and `state` take it.
#[derive(Clone, Debug)]
pub struct Finding {
    /// What it finds, in a few words.
    pub title: String,
    /// Its symbol.
    pub symbol: Symbol,
    /// What it is, for rounding.
    pub what: What,
    /// Its unit.
    pub unit: Unit,
    /// The analysis's value in SI.
    pub value: f64,
    /// The tabulated case or principle.
    pub basis: &'static str,
    /// Whether it stands in bold.
    pub bold: bool,
    /// Whether it is a final figure of the current tag.
    pub last: bool,
}

impl Builder {
    /// A builder whose first chapter holds conversions.
    pub fn new(base: Base) -> Self {
        Self {
            base,
            drafts: Vec::new(),
            figures: Vec::new(),
            chapters: Vec::new(),
            replays: Vec::new(),
            slot: (0, 0),
            tag: String::new(),
            factors: BTreeMap::new(),
            conversions: (0, 0),
        }
    }

    /// Opens a chapter; the next block opened belongs to it.
    pub fn chapter(&mut self, about: super::Chapters, title: impl Into<String>) {
        self.chapters.push(DraftChapter { about, title: title.into(), blocks: Vec::new() });
    }

    /// Opens a block in the last chapter and goes on there.
    pub fn block(&mut self, sentence: impl Into<String>) -> Slot {
        let chapter = self.chapters.len().saturating_sub(1);
        if let Some(open) = self.chapters.last_mut() {
            open.blocks.push(DraftBlock { sentence: sentence.into(), steps: Vec::new(), likes: None, set: Set::Apart });
            self.slot = (chapter, open.blocks.len() - 1);
        }
        self.slot
    }

    /// Opens a block that may stand beside others like it.
    pub fn block_like(&mut self, sentence: impl Into<String>, likes: Likes) -> Slot {
        let slot = self.block(sentence);
        if let Some(block) = self.open_block() {
            block.likes = Some(likes);
        }
        slot
    }

    /// The block that is written to.
    pub fn open_block(&mut self) -> Option<&mut DraftBlock> {
        let (chapter, block) = self.slot;
        self.chapters.get_mut(chapter)?.blocks.get_mut(block)
    }

    /// The steps of the block that is written to.
    pub fn open_steps(&self) -> &[usize] {
        let (chapter, block) = self.slot;
        let block = self.chapters.get(chapter).and_then(|chapter| chapter.blocks.get(block));
        block.map_or(&[], |block| block.steps.as_slice())
    }

    /// Says where conversions are written.
    pub fn conversions_here(&mut self) {
        self.conversions = self.slot;
    }

    /// What tells like symbols apart from here on.
    pub fn tag(&mut self, tag: impl Into<String>) {
        self.tag = tag.into();
    }

    /// The current tag.
    pub fn current_tag(&self) -> String {
        self.tag.clone()
    }

    /// Writes steps elsewhere, without a tag, then comes back.
    pub fn aside<T>(&mut self, slot: Slot, write: impl FnOnce(&mut Self) -> T) -> T {
        let back = (std::mem::replace(&mut self.slot, slot), std::mem::take(&mut self.tag));
        let result = write(self);
        (self.slot, self.tag) = back;
        result
    }

    /// A step, unless the expression has folded to zero or to another step: then that is its result.
    pub fn find(&mut self, finding: Finding, expression: Traced) -> Traced {
        if expression.is_zero() || expression.source().is_some_and(|source| matches!(source, Source::Step(_))) {
            self.replay(&finding, &expression);
            return expression;
        }
        self.state(finding, Some(expression))
    }

    /// A step in any case.
    pub fn state(&mut self, finding: Finding, expression: Option<Traced>) -> Traced {
        if let Some(expression) = &expression {
            self.replay(&finding, expression);
        }
        let Finding { title, symbol, what, unit, value, basis, bold, last } = finding;
        let last_of = last.then(|| self.tag.clone());
        let tag = self.tag.clone();
        self.push(Draft { title, symbol, tag, what, unit, expression, chosen: None, value, basis, bold, last_of })
    }

    fn push(&mut self, draft: Draft) -> Traced {
        let index = self.drafts.len();
        self.drafts.push(draft);
        let (chapter, block) = self.slot;
        if let Some(block) = self.chapters.get_mut(chapter).and_then(|chapter| chapter.blocks.get_mut(block)) {
            block.steps.push(index);
        }
        Traced::var(Source::Step(index))
    }

    /// A chosen exact figure: a unit load, a factor, a tabulated constant.
    pub fn choose(
        &mut self,
        title: impl Into<String>,
        symbol: Symbol,
        figure: Decimal,
        unit: Unit,
        value: f64,
    ) -> Traced {
        self.push(Draft {
            title: title.into(),
            symbol,
            tag: self.tag.clone(),
            what: What::Other,
            unit,
            expression: None,
            chosen: Some(figure),
            value,
            basis: "",
            bold: false,
            last_of: None,
        })
    }

    /// The latest step with this symbol and tag.
    pub fn written(&self, symbol: &Symbol, tag: &str) -> Option<Traced> {
        let place = self.drafts.iter().rposition(|draft| draft.symbol == *symbol && draft.tag == tag)?;
        Some(Traced::var(Source::Step(place)))
    }

    /// The value of a source in SI.
    pub fn value_of(&self, source: Source) -> f64 {
        match source {
            Source::Deck(index) => self.figures.get(index).map_or(0.0, |figure| figure.value),
            Source::Step(index) => self.drafts.get(index).map_or(0.0, |draft| draft.value),
        }
    }

    /// The value of an expression in SI.
    pub fn value(&self, expression: &Traced) -> f64 {
        expression.value(&|source| self.value_of(source))
    }

    fn replay(&mut self, finding: &Finding, expression: &Traced) {
        let of = |source| self.value_of(source);
        let (found, scale) = (expression.value(&of), expression.scale(&of));
        self.replays.push(Replay {
            title: finding.title.clone(),
            tagged: !self.tag.is_empty(),
            class: (finding.what, finding.unit.to_string()),
            expected: finding.value,
            found,
            scale,
        });
    }

    /// A figure typed in the deck, put into the working's unit: one step, with its conversion where one is needed.
    pub fn given(&mut self, title: impl Into<String>, symbol: Symbol, typed: &Typed, to: &Unit, si: f64) -> Traced {
        let several = typed.terms.len() > 1;
        let mut sum = Traced::zero();
        for (index, term) in typed.terms.iter().enumerate() {
            let letter = ["a", "b", "c", "d"].get(index).copied().unwrap_or("e");
            let name = if several { Symbol::new(letter, "") } else { symbol.clone() };
            let value = term.figure.to_f64() * term.unit.si().unwrap_or(1.0);
            self.figures.push(DeckFigure { symbol: name, figure: term.figure, unit: term.unit.clone(), value });
            let figure = Traced::var(Source::Deck(self.figures.len() - 1));
            sum = sum + if term.unit == *to { figure } else { figure * self.factor(&term.unit, to) };
        }
        let title = title.into();
        let finding = Finding {
            title,
            symbol,
            what: What::Other,
            unit: to.clone(),
            value: si,
            basis: "",
            bold: false,
            last: false,
        };
        self.state(finding, Some(sum))
    }

    /// A pure number typed in the deck.
    pub fn given_number(&mut self, title: impl Into<String>, symbol: Symbol, figure: Decimal) -> Traced {
        let value = figure.to_f64();
        self.figures.push(DeckFigure { symbol: symbol.clone(), figure, unit: Unit::none(), value });
        let source = Traced::var(Source::Deck(self.figures.len() - 1));
        let unit = Unit::none();
        let title = title.into();
        self.state(
            Finding { title, symbol, what: What::Other, unit, value, basis: "", bold: false, last: false },
            Some(source),
        )
    }

    /// The factor that turns a figure in one unit into one in another, written once.
    pub fn factor(&mut self, from: &Unit, to: &Unit) -> Traced {
        let unit = conversion(from, to);
        let key = unit.to_string();
        if let Some(known) = self.factors.get(&key) {
            return known.clone();
        }
        let figure = quotient(from, to).unwrap_or(Decimal::ONE);
        let symbol = Symbol::new("k", (self.factors.len() + 1).to_string());
        let title = format!("1 {from} in {to}");
        let slot = self.conversions;
        let factor = self.aside(slot, |builder| builder.choose(title, symbol, figure, unit, 1.0));
        self.factors.insert(key, factor.clone());
        factor
    }
}

/// How many `to` make one `from`: exact where 16 digits suffice, else rounded to 16.
fn quotient(from: &Unit, to: &Unit) -> Option<Decimal> {
    let (from_top, from_bottom) = from.size()?;
    let (to_top, to_bottom) = to.size()?;
    let exact = |decimal| Exact::decimal(decimal);
    let size = exact(from_top).times(&exact(to_bottom)).over(&exact(from_bottom).times(&exact(to_top)))?;
    size.shortest(size.leading()? - 15)
}
