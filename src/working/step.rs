//! Steps, and how they are grouped for a reader.

use crate::quantity::{Decimal, Unit};

/// The whole derivation of one member.
#[derive(Clone, Debug)]
pub struct Working {
    /// Significant figures carried.
    pub figures: u32,
    /// Whether that many figures keep every final figure within half a unit of its fourth digit; `false` where the release
    /// was badly chosen, which the sheet says.
    pub settled: bool,
    /// Every step, in the order shown.
    pub steps: Vec<Step>,
    /// The steps grouped into chapters and blocks, in the order shown.
    pub chapters: Vec<Chapter>,
}

/// What a chapter of the working is about; the sheet puts drawings and repeated figures where they belong.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Chapters {
    /// Figures typed in the deck, converted to the working's units.
    Given,
    /// The unit state of the redundant with this index, or of several.
    UnitState(usize),
    /// The flexibilities and their elimination.
    Flexibility,
    /// The load case with this index.
    Case(usize),
    /// Sums over cases, for all combinations.
    Sums,
    /// Values at places inside the spans, of every combination.
    Places,
    /// Allowable against found.
    Checks,
}

/// One chapter.
#[derive(Clone, Debug)]
pub struct Chapter {
    /// What it is about.
    pub about: Chapters,
    /// Number on the sheet, from 1.
    pub number: usize,
    /// Its heading.
    pub title: String,
    /// Blocks in the order shown.
    pub blocks: Vec<Block>,
}

/// A numbered paragraph of the sheet: one sentence in words, then lines or a table.
#[derive(Clone, Debug)]
pub struct Block {
    /// `6.1`; the checker's tick stands beside it.
    pub number: String,
    /// One sentence in words.
    pub sentence: String,
    /// Side notes: where the inputs come from, which tabulated case.
    pub notes: Vec<String>,
    /// The steps.
    pub body: Body,
}

/// How the steps of a block are set.
#[derive(Clone, Debug)]
pub enum Body {
    /// One line each: symbols, numbers put in, result. Indices into [`Working::steps`].
    Lines(Vec<usize>),
    /// Steps that share one expression: the formula once, then a row each. Indices into [`Working::steps`].
    Table(Vec<usize>),
    /// Steps of one making that the sentence tells: symbol, numbers put in, result. Indices into [`Working::steps`].
    Rows(Vec<usize>),
    /// The same derivation for several places, spans or combinations: a row for each line, a column for each of them.
    Grid(Grid),
    /// Weighted sums: a row for each quantity, a column for each combination.
    Matrix(Grid),
}

/// Steps by row and column.
#[derive(Clone, Debug)]
pub struct Grid {
    /// What each column is about: a main line and a second one that may be empty.
    pub heads: Vec<(String, String)>,
    /// Indices into [`Working::steps`], row by row; a cell may be empty.
    pub rows: Vec<Vec<Option<usize>>>,
}

impl Body {
    /// Every step, in the order of the working.
    pub fn steps(&self) -> Vec<usize> {
        match self {
            Self::Lines(steps) | Self::Table(steps) | Self::Rows(steps) => steps.clone(),
            Self::Grid(grid) | Self::Matrix(grid) => {
                let mut steps: Vec<usize> = grid.rows.iter().flatten().filter_map(|step| *step).collect();
                steps.sort_unstable();
                steps
            }
        }
    }
}

/// One step of the derivation.
#[derive(Clone, Debug)]
pub struct Step {
    /// `6.1.2`: chapter, block, line.
    pub id: String,
    /// What it finds, in a few words.
    pub title: String,
    /// The load case or combination it belongs to.
    pub case: Option<String>,
    /// ASCII name of the result: `v_C`.
    pub symbol: String,
    /// `P * L^3 / (3 * EI)`; `None` for a chosen figure.
    pub expression: Option<String>,
    /// The same in Typst math, symbols.
    pub math: String,
    /// The same in Typst math, numbers put in; empty for a chosen figure.
    pub numbers: String,
    /// The result's symbol in Typst math.
    pub math_symbol: String,
    /// The step read out: alternative text of its equation.
    pub spoken: String,
    /// What it uses.
    pub inputs: Vec<Input>,
    /// What it gives.
    pub result: Figure,
    /// The tabulated case or principle it rests on.
    pub basis: String,
    /// Whether it is used later and stands in bold.
    pub bold: bool,
}

/// One input of a step.
#[derive(Clone, Debug)]
pub struct Input {
    /// ASCII name in the expression.
    pub name: String,
    /// The same in Typst math.
    pub math: String,
    /// The figure as printed.
    pub printed: Decimal,
    /// Its unit.
    pub unit: Unit,
    /// Where it comes from.
    pub from: Origin,
}

/// Where an input comes from.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Origin {
    /// A figure typed in the deck.
    Deck,
    /// An earlier step: an index into [`Working::steps`].
    Step(usize),
}

/// A result: what is printed and what it stands for.
#[derive(Clone, Debug)]
pub struct Figure {
    /// The rounded chain's figure.
    pub printed: Decimal,
    /// Its unit.
    pub unit: Unit,
    /// The unrounded solution's figure in SI, at the unrounded place.
    pub value: f64,
}
