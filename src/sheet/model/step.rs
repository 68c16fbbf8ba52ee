//! The working as a reader sees it: chapters of numbered steps, each a sentence with its lines or one table.

use serde::Serialize;

use super::line::{Line, line, symbols};
use super::rows::{listed, tabulated};
use super::{Equation, Figure, Table};
use crate::sheet::page;
use crate::sheet::template::Labels;
use crate::sheet::{Fault, typeset};
use crate::working::{self, Body, Chapters, Origin, Working};

/// A chapter and block, and the steps used from there with their symbols.
type Sources = ((usize, usize), Vec<(usize, String)>);

/// A chapter of the working.
#[derive(Clone, Debug, Serialize)]
pub struct Chapter {
    /// `given`, `unit_state`, `flexibility`, `case`, `sums`, `places` or `checks`.
    pub about: &'static str,
    /// Index of the redundant, case or combination it is about; 0 for others.
    pub index: usize,
    /// Its number on the sheet.
    pub number: String,
    /// Its heading, prose.
    pub title: String,
    /// Whether it begins on a new page.
    pub new_sheet: bool,
    /// Drawings under its heading.
    pub figures: Vec<Figure>,
    /// Figures of earlier chapters that it uses, repeated so that no page need be turned; prose, may be empty.
    pub recalled: String,
    /// Its steps.
    pub steps: Vec<Step>,
}

/// A numbered paragraph.
#[derive(Clone, Debug, Serialize)]
pub struct Step {
    /// `6.1`.
    pub number: String,
    /// One sentence, prose.
    pub sentence: String,
    /// Side notes beside the sentence, prose; lines have their own.
    pub notes: Vec<String>,
    /// White below, mm, so that long side notes end before the next step.
    pub room: f64,
    /// Lines of working; empty where a table stands.
    pub lines: Vec<Line>,
    /// The formula that the rows of the table share.
    pub formula: Option<Equation>,
    /// Figures that are the same in every row or column, with the words before them, prose; may be empty.
    pub shared: String,
    /// Its tables.
    pub tables: Vec<Table>,
}

/// The chapters of a working.
///
/// # Errors
/// An equation that is not plain mathematics, a fault of the program; a label that is missing.
pub fn chapters(working: &Working, labels: &Labels) -> Result<Vec<Chapter>, Fault> {
    let reader = Reader { working, labels, homes: homes(working) };
    working.chapters.iter().map(|chapter| reader.chapter(chapter)).collect()
}

/// Chapter and block.
type Home = (usize, usize);

/// Chapter and block of every step, by its index.
fn homes(working: &Working) -> Vec<Option<Home>> {
    let mut homes = vec![None; working.steps.len()];
    for (chapter, of) in working.chapters.iter().enumerate() {
        for (block, of) in of.blocks.iter().enumerate() {
            for index in of.body.steps() {
                if let Some(home) = homes.get_mut(index) {
                    *home = Some((chapter, block));
                }
            }
        }
    }
    homes
}

/// Reads a working into what is shown of it.
pub(super) struct Reader<'a> {
    pub working: &'a Working,
    pub labels: &'a Labels,
    homes: Vec<Option<Home>>,
}

impl Reader<'_> {
    fn chapter(&self, chapter: &working::Chapter) -> Result<Chapter, Fault> {
        let (about, index) = match chapter.about {
            Chapters::Given => ("given", 0),
            Chapters::UnitState(index) => ("unit_state", index),
            Chapters::Flexibility => ("flexibility", 0),
            Chapters::Case(index) => ("case", index),
            Chapters::Sums => ("sums", 0),
            Chapters::Places => ("places", 0),
            Chapters::Checks => ("checks", 0),
        };
        let steps: Result<Vec<Step>, Fault> = chapter.blocks.iter().map(|block| self.step(block)).collect();
        Ok(Chapter {
            about,
            index,
            number: chapter.number.to_string(),
            title: chapter.title.clone(),
            new_sheet: false,
            figures: Vec::new(),
            recalled: self.recalled(chapter)?,
            steps: steps?,
        })
    }

    /// Whether a chapter's figures are repeated wherever they are used: what was given, and the flexibilities.
    fn is_recalled(&self, chapter: usize) -> bool {
        let about = self.working.chapters.get(chapter).map(|chapter| &chapter.about);
        matches!(about, Some(Chapters::Given | Chapters::Flexibility))
    }

    /// `From 1.2: L_1 = 4 m, L_2 = 5 m. From 1.4: EI_1 = 41 200 kN m².`
    fn recalled(&self, chapter: &working::Chapter) -> Result<String, Fault> {
        let mut from: Vec<Sources> = Vec::new();
        let indices = chapter.blocks.iter().flat_map(|block| block.body.steps());
        for input in indices.filter_map(|index| self.working.steps.get(index)).flat_map(|step| &step.inputs) {
            let Origin::Step(index) = input.from else { continue };
            let Some(Some(home)) = self.homes.get(index) else { continue };
            let own = self.working.chapters.get(home.0).is_some_and(|other| other.number == chapter.number);
            if own || !self.is_recalled(home.0) {
                continue;
            }
            let figure = format!("{}\u{A0}=\u{A0}{}", input.name, typeset::quantity(input.printed, &input.unit));
            match from.iter_mut().find(|(known, _)| known == home) {
                Some((_, figures)) if figures.iter().any(|(known, _)| *known == index) => {}
                Some((_, figures)) => figures.push((index, figure)),
                None => from.push((*home, vec![(index, figure)])),
            }
        }
        from.sort_by_key(|(home, _)| *home);
        let word = self.labels.get("working.from")?;
        let sentences = from.iter_mut().map(|(home, figures)| {
            figures.sort_by_key(|(index, _)| *index);
            let list: Vec<&str> = figures.iter().map(|(_, figure)| figure.as_str()).collect();
            format!("{word} {}: {}.", self.block_number(*home), list.join(", "))
        });
        Ok(sentences.collect::<Vec<_>>().join(" "))
    }

    /// The number of the paragraph of a step, where that is another one whose figures are not repeated.
    pub fn foreign(&self, index: usize, block: &working::Block) -> Option<String> {
        let home = self.homes.get(index).copied().flatten()?;
        let number = self.block_number(home);
        let same_chapter = block.number.split('.').next() == number.split('.').next();
        (number != block.number && (same_chapter || !self.is_recalled(home.0))).then(|| number.to_owned())
    }

    fn block_number(&self, (chapter, block): Home) -> &str {
        let chapter = self.working.chapters.get(chapter);
        chapter.and_then(|chapter| chapter.blocks.get(block)).map_or("", |block| block.number.as_str())
    }

    fn step(&self, block: &working::Block) -> Result<Step, Fault> {
        let indices = block.body.steps();
        let steps: Vec<&working::Step> = indices.iter().filter_map(|index| self.working.steps.get(*index)).collect();
        let mut view = Step {
            number: block.number.clone(),
            sentence: block.sentence.clone(),
            notes: Vec::new(),
            room: 0.0,
            lines: Vec::new(),
            formula: None,
            shared: String::new(),
            tables: Vec::new(),
        };
        match (&block.body, steps.first()) {
            (Body::Table(_), Some(first)) => {
                view.notes = block.notes.clone();
                view.notes.extend(self.origins(block, &steps));
                view.formula = if first.math == first.math_symbol { None } else { Some(symbols(first)?) };
                let (shared, table) = tabulated(&steps, self.labels)?;
                view.shared = said(self.labels.get("working.shared")?, &shared);
                view.tables = table.into_iter().collect();
                view.room = table_room(&view);
            }
            (Body::Rows(_), Some(_)) => view.tables.push(listed(&steps, self.labels)?),
            (Body::Grid(grid), Some(_)) => {
                view.notes.extend(self.grid_origins(block));
                let (shared, tables) = self.grid(grid)?;
                view.shared = said(self.labels.get("working.shared_columns")?, &shared);
                view.tables = tables;
            }
            (Body::Matrix(grid), Some(_)) => {
                let widest = steps.iter().copied().max_by_key(|step| step.inputs.len());
                if let Some(step) = widest {
                    view.lines.push(line(step, "", None, true)?);
                }
                view.tables = self.matrix(grid);
            }
            _ => {
                let mut basis = "";
                for step in &steps {
                    let said = if step.basis == basis { "" } else { step.basis.as_str() };
                    basis = step.basis.as_str();
                    let origins = self.origins(block, &[step]);
                    view.lines.push(line(step, said, origins, steps.len() > 1)?);
                }
            }
        }
        Ok(view)
    }

    /// Where the figures come from that neither this block nor the head of its chapter holds: `V_C: 6.1.1, M_C: 6.1.2`.
    fn origins(&self, block: &working::Block, steps: &[&working::Step]) -> Option<String> {
        let mut words: Vec<String> = Vec::new();
        for input in steps.iter().flat_map(|step| &step.inputs) {
            let Origin::Step(index) = input.from else { continue };
            let (Some(Some(home)), Some(step)) = (self.homes.get(index), self.working.steps.get(index)) else {
                continue;
            };
            let here = self.block_number(*home) == block.number;
            let same_chapter = block.number.split('.').next() == step.id.split('.').next();
            let word = format!("{}: {}", input.name, step.id);
            if here || (self.is_recalled(home.0) && !same_chapter) || words.contains(&word) {
                continue;
            }
            words.push(word);
        }
        // A table that draws on many steps names them in its cells; a list of them all helps nobody.
        (!words.is_empty() && (steps.len() == 1 || words.len() <= 8)).then(|| words.join(", "))
    }
}

/// Figures that rows or columns share, with the words before them; nothing where there are none.
fn said(words: &str, figures: &str) -> String {
    if figures.is_empty() { String::new() } else { format!("{words} {figures}") }
}

/// White that the side notes of a table need below it.
fn table_room(step: &Step) -> f64 {
    let notes: f64 = step.notes.iter().map(|note| page::lines(note, page::NOTES, page::NOTE_PT)).sum();
    let sentence = page::lines(&step.sentence, page::COLUMN, page::TEXT_PT) * page::TEXT_LINE;
    let rows = step.tables.iter().map(|table| table.rows.len() + 2).sum::<usize>() as f64 * page::TABLE_LINE;
    page::tenth((notes * page::NOTE_LINE - sentence - rows).max(0.0))
}
