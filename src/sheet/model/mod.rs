//! The view model: everything a sheet shows, already text, in the order shown.
//!
//! Templates put the parts together and do no arithmetic. Every `String` here is plain text and is set as it stands,
//! whatever characters it holds; only an [`Equation`] is read as mathematics, and it was checked when it was made.
//! In a field called "prose" below, a letter with a subscript written `v_C` or `psi_B` is set as a symbol.

mod compose;
mod given;
mod grid;
mod line;
mod reviewing;
mod rows;
mod step;
mod table;

pub use compose::{Findings, Parts};
pub use line::{Line, Setting};
pub use reviewing::{Explained, Reviewing};
pub use step::{Chapter, Step, chapters};
pub use table::{Align, Cell, Column, Row, Table, aligned};

use serde::Serialize;

use super::equation::Equation;
use crate::figure::Drawing;

/// A whole sheet.
#[derive(Clone, Debug, Serialize)]
pub struct Model {
    /// Whether the short form is wanted: answer, figures, reactions, checks and crosschecks.
    pub brief: bool,
    /// A review of somebody's figures, where this is one; it then stands in the place of the sheet.
    pub review: Option<Reviewing>,
    /// What the file says about itself.
    pub document: Document,
    /// What stands at the head and foot of every page.
    pub running: Running,
    /// The first sheet.
    pub answer: Answer,
    /// What was given.
    pub given: Given,
    /// The method, once.
    pub method: Method,
    /// The chapters of the working, in order; [`Chapter::about`] says where the sheet puts them.
    pub chapters: Vec<Chapter>,
    /// Tables of sums.
    pub sums: Sums,
    /// One entry for each combination and envelope.
    pub diagrams: Vec<Figure>,
    /// Checks.
    pub checks: Checks,
    /// Why the figures can be trusted, and how far.
    pub trust: Trust,
    /// The input, verbatim.
    pub annex: Annex,
    /// Every drawing; a [`Picture`] is an index into this list.
    #[serde(skip)]
    pub drawings: Vec<Drawing>,
}

/// An index into [`Model::drawings`].
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize)]
#[serde(transparent)]
pub struct Picture(pub usize);

/// A drawing with a line of text above it.
#[derive(Clone, Debug, Serialize)]
pub struct Figure {
    /// Prose; may be empty.
    pub title: String,
    /// Prose below it; may be empty.
    pub note: String,
    /// The drawing.
    pub picture: Picture,
}

/// What the file says about itself.
#[derive(Clone, Debug, Serialize)]
pub struct Document {
    /// Its title.
    pub title: String,
    /// Who prepared it; may be empty.
    pub author: String,
    /// Words to find it by.
    pub keywords: Vec<String>,
    /// Year, month and day of the sheet.
    pub date: (u16, u8, u8),
}

/// What stands at the head and foot of every page.
#[derive(Clone, Debug, Serialize)]
pub struct Running {
    /// The project.
    pub project: String,
    /// The calculation's number.
    pub number: String,
    /// Its revision.
    pub revision: String,
    /// What is calculated.
    pub subject: String,
    /// The client; may be empty.
    pub client: String,
    /// The office; may be empty.
    pub office: String,
    /// Who prepared it; empty where the deck does not say.
    pub prepared: String,
    /// Who checked it; empty prints "not checked" and marks every page as preliminary.
    pub checked: String,
    /// Who approved it; may be empty.
    pub approved: String,
    /// The date in words.
    pub date: String,
}

/// The first sheet.
#[derive(Clone, Debug, Serialize)]
pub struct Answer {
    /// Always two sentences: deflection, strength.
    pub verdict: [String; 2],
    /// Whether something exceeds its limit.
    pub fails: bool,
    /// Net uplift, a sentence for each support; may be empty.
    pub uplift: Vec<String>,
    /// Assumptions and values that wait for confirmation; may be empty.
    pub unconfirmed: Vec<String>,
    /// What the calculation is for, and by what it is judged; a sentence or two.
    pub purpose: String,
    /// What the sheet does not cover.
    pub not_covered: Vec<String>,
    /// The member to scale.
    pub member: Option<Figure>,
    /// Boxes at the foot.
    pub signatures: Vec<Signature>,
}

/// A box for a signature.
#[derive(Clone, Debug, Serialize)]
pub struct Signature {
    /// Prepared, checked, approved, seal.
    pub role: String,
    /// The name, where the deck gives it.
    pub name: String,
}

/// What was given.
#[derive(Clone, Debug, Serialize)]
pub struct Given {
    /// Acceptance criteria; none where the deck sets no limit.
    pub limits: Option<Table>,
    /// Sections, segments, supports and so on, each with its source.
    pub inputs: Vec<Table>,
    /// Factors of every case in every combination, zeros printed.
    pub combinations: Table,
    /// The signs.
    pub signs: Option<Figure>,
    /// A load sketch for each case.
    pub loads: Vec<Figure>,
    /// What is lawful but odd.
    pub warnings: Vec<String>,
}

/// The method, once.
#[derive(Clone, Debug, Serialize)]
pub struct Method {
    /// Prose, a paragraph each.
    pub sentences: Vec<String>,
    /// Released member, free bodies, chained pieces.
    pub drawings: Vec<Figure>,
    /// The tabulated cases used, with their sources.
    pub cases: Option<Table>,
}

/// Tables of sums.
#[derive(Clone, Debug, Serialize)]
pub struct Sums {
    /// Rows: figures; columns: cases, then combinations.
    pub tables: Vec<Table>,
    /// For whoever designs the supports.
    pub reactions: Vec<Table>,
}

/// Checks.
#[derive(Clone, Debug, Serialize)]
pub struct Checks {
    /// What was compared with what; a sentence each, failures first.
    pub findings: Vec<String>,
    /// Every check, failures first.
    pub table: Option<Table>,
}

/// Why the figures can be trusted, and how far.
#[derive(Clone, Debug, Serialize)]
pub struct Trust {
    /// How well the independent checks agree, a sentence or two; may be empty.
    pub agreement: String,
    /// Two columns of figures and their difference.
    pub crosschecks: Vec<Table>,
    /// What was assumed.
    pub assumptions: Vec<String>,
    /// Cautions.
    pub cautions: Vec<String>,
    /// That the local code and a licensed engineer come first.
    pub deference: Vec<String>,
    /// Sources of formulas.
    pub sources: Vec<String>,
    /// Revisions.
    pub revisions: Option<Table>,
    /// Events in the life of the calculation.
    pub events: Option<Table>,
    /// The program, its version, the figures carried.
    pub program: Vec<String>,
    /// Hashes of the attachments.
    pub hashes: Option<Table>,
}

/// The input, verbatim.
#[derive(Clone, Debug, Serialize)]
pub struct Annex {
    /// Name of the file, without folders.
    pub file: String,
    /// Its lines.
    pub lines: Vec<String>,
}
