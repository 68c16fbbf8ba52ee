//! What a review shows.

use serde::Serialize;

use super::{Chapter, Table};

/// A review of somebody's figures.
#[derive(Clone, Debug, Serialize)]
pub struct Reviewing {
    /// What is reviewed, and how; a sentence each.
    pub statement: Vec<String>,
    /// How many claims agree and differ.
    pub counts: String,
    /// The claims.
    pub claims: Table,
    /// What strikes the eye about single claims; may be empty.
    pub remarks: Vec<String>,
    /// How the search went; may be empty.
    pub search: Vec<String>,
    /// Explanations, best first.
    pub explanations: Option<Table>,
    /// The leading ones with their working.
    pub explained: Vec<Explained>,
    /// To be filled in.
    pub dispositions: Option<Table>,
    /// Hashes of claims and deck.
    pub hashes: Table,
}

/// An explanation with the working of the member under it.
#[derive(Clone, Debug, Serialize)]
pub struct Explained {
    /// Its rank and names.
    pub title: String,
    /// In a sentence.
    pub text: String,
    /// Its working; none where the member is solved rightly and read wrongly.
    pub chapters: Vec<Chapter>,
}

impl Reviewing {
    /// Widens columns whose longest word does not fit.
    pub fn fit(&mut self) {
        self.claims.fit();
        self.hashes.fit();
        self.explanations.iter_mut().chain(&mut self.dispositions).for_each(Table::fit);
        let steps = self.explained.iter_mut().flat_map(|one| &mut one.chapters).flat_map(|chapter| &mut chapter.steps);
        steps.flat_map(|step| &mut step.tables).for_each(Table::fit);
    }
}
