//! A view model put together from a member, its working and what was found.

use super::given::given;
use super::{
    Annex, Answer, Checks, Document, Figure, Method, Model, Picture, Running, Signature, Sums, Table, Trust, chapters,
};
use crate::figure::{self, Drawing, Plot, Words};
use crate::member::{Member, Redundant};
use crate::sheet::template::Labels;
use crate::sheet::{Fault, typeset};
use crate::working::Working;

/// What a sheet says besides the member and its working; all of it printed text.
#[derive(Clone, Debug, Default)]
pub struct Findings {
    /// Always two sentences: deflection, strength.
    pub verdict: [String; 2],
    /// Whether something exceeds its limit.
    pub fails: bool,
    /// Net uplift, a sentence for each support.
    pub uplift: Vec<String>,
    /// What waits for confirmation.
    pub unconfirmed: Vec<String>,
    /// What was compared with what; sentences, failures first.
    pub findings: Vec<String>,
    /// Every check, failures first.
    pub checks: Option<Table>,
    /// Sums over cases and combinations.
    pub sums: Vec<Table>,
    /// Reactions for whoever designs the supports.
    pub reactions: Vec<Table>,
    /// Diagrams, each with its heading.
    pub plots: Vec<(String, Plot)>,
    /// How well the independent checks agree, a sentence or two.
    pub agreement: String,
    /// Two columns of figures and their difference.
    pub crosschecks: Vec<Table>,
    /// The tabulated cases used, with their sources.
    pub cases: Option<Table>,
    /// Sources of formulas.
    pub sources: Vec<String>,
    /// Assumptions beyond those that hold for every sheet.
    pub assumptions: Vec<String>,
    /// Sources of the input, and what waits for confirmation.
    pub declared: Option<Table>,
    /// Revisions.
    pub revisions: Option<Table>,
    /// Events in the life of the calculation.
    pub events: Option<Table>,
    /// The program, its version, the figures carried.
    pub program: Vec<String>,
    /// Name and hash of every file that belongs to the sheet.
    pub hashes: Vec<(String, String)>,
    /// Total load of each case, a sentence each; as many as there are cases, or none.
    pub totals: Vec<String>,
}

/// All a sheet is made of.
#[derive(Clone, Copy, Debug)]
pub struct Parts<'a> {
    /// The member.
    pub member: &'a Member,
    /// The redundants, in the order of the working.
    pub redundants: &'a [Redundant],
    /// Its working.
    pub working: &'a Working,
    /// Texts of the drawings that come from steps.
    pub words: &'a Words,
    /// What was found.
    pub findings: &'a Findings,
    /// Name of the deck's file, without folders.
    pub file: &'a str,
    /// The deck's text.
    pub deck: &'a str,
    /// The labels.
    pub labels: &'a Labels,
    /// Whether the short form is wanted.
    pub brief: bool,
}

impl Model {
    /// Puts a sheet together.
    ///
    /// # Errors
    /// A label that is missing; an equation that is not plain mathematics, a fault of the program.
    pub fn compose(parts: &Parts<'_>) -> Result<Self, Fault> {
        let mut gallery = Gallery::default();
        let (member, labels, found) = (parts.member, parts.labels, parts.findings);
        let mut model = Self {
            brief: parts.brief,
            review: None,
            document: document(member),
            running: running(member, labels)?,
            answer: answer(parts, &mut gallery)?,
            given: given(parts, &mut gallery)?,
            method: method(parts, &mut gallery)?,
            chapters: chapters(parts.working, labels)?,
            sums: Sums { tables: found.sums.clone(), reactions: found.reactions.clone() },
            diagrams: Vec::new(),
            checks: Checks { findings: found.findings.clone(), table: found.checks.clone() },
            trust: trust(parts)?,
            annex: Annex { file: parts.file.to_owned(), lines: parts.deck.lines().map(str::to_owned).collect() },
            drawings: Vec::new(),
        };
        for (title, plot) in &found.plots {
            model.diagrams.push(gallery.hang(title.clone(), figure::diagrams(plot, figure::WIDE)));
        }
        for chapter in model.chapters.iter_mut().filter(|chapter| chapter.about == "case") {
            let words = case_words(parts, chapter.index);
            chapter
                .figures
                .push(gallery.hang(String::new(), figure::loads(member, chapter.index, &words, figure::COLUMN)));
        }
        model.drawings = gallery.drawings;
        model.tables().for_each(Table::fit);
        Ok(model)
    }

    /// Every table of the sheet.
    fn tables(&mut self) -> impl Iterator<Item = &mut Table> {
        let given = self.given.limits.iter_mut().chain(&mut self.given.inputs).chain([&mut self.given.combinations]);
        let steps = self.chapters.iter_mut().flat_map(|chapter| &mut chapter.steps).flat_map(|step| &mut step.tables);
        let sums = self.sums.tables.iter_mut().chain(&mut self.sums.reactions);
        let trust = self
            .trust
            .crosschecks
            .iter_mut()
            .chain(&mut self.trust.revisions)
            .chain(&mut self.trust.events)
            .chain(&mut self.trust.hashes);
        given.chain(&mut self.method.cases).chain(steps).chain(sums).chain(&mut self.checks.table).chain(trust)
    }
}

/// Words of a case's load sketch.
pub(super) fn case_words(parts: &Parts<'_>, case: usize) -> Words {
    let total = parts.findings.totals.get(case).cloned().unwrap_or_default();
    Words { total, ..parts.words.clone() }
}

/// Drawings as they are hung.
#[derive(Debug, Default)]
pub(super) struct Gallery {
    drawings: Vec<Drawing>,
}

impl Gallery {
    /// Hangs a drawing under a title that may be empty.
    pub fn hang(&mut self, title: impl Into<String>, drawing: Drawing) -> Figure {
        self.drawings.push(drawing);
        Figure { title: title.into(), note: String::new(), picture: Picture(self.drawings.len() - 1) }
    }
}

fn document(member: &Member) -> Document {
    let title = &member.title;
    Document {
        title: format!("{} {}", title.number, title.subject),
        author: title.prepared.clone().unwrap_or_default(),
        keywords: vec![title.project.clone(), title.number.clone()],
        date: title.date,
    }
}

fn running(member: &Member, labels: &Labels) -> Result<Running, Fault> {
    let title = &member.title;
    let text = |field: &Option<String>| field.clone().unwrap_or_default();
    Ok(Running {
        project: title.project.clone(),
        number: title.number.clone(),
        revision: title.revision.clone(),
        subject: title.subject.clone(),
        client: text(&title.client),
        office: text(&title.office),
        prepared: text(&title.prepared),
        checked: text(&title.checked),
        approved: text(&title.approved),
        date: typeset::date(title.date, &labels.list("months")?),
    })
}

fn answer(parts: &Parts<'_>, gallery: &mut Gallery) -> Result<Answer, Fault> {
    let (title, labels) = (&parts.member.title, parts.labels);
    let mut signatures = Vec::new();
    for (role, name) in [("prepared", &title.prepared), ("checked", &title.checked), ("approved", &title.approved)] {
        let role = labels.get(&format!("signatures.{role}"))?.to_owned();
        signatures.push(Signature { role, name: name.clone().unwrap_or_default() });
    }
    signatures.push(Signature { role: labels.get("signatures.seal")?.to_owned(), name: String::new() });
    let found = parts.findings;
    Ok(Answer {
        verdict: found.verdict.clone(),
        fails: found.fails,
        uplift: found.uplift.clone(),
        unconfirmed: found.unconfirmed.clone(),
        purpose: labels.get("answer.purpose_text")?.to_owned(),
        not_covered: labels.list("not_covered")?,
        member: Some(gallery.hang("", figure::elevation(parts.member, parts.words, figure::COLUMN))),
        signatures,
    })
}

fn method(parts: &Parts<'_>, gallery: &mut Gallery) -> Result<Method, Fault> {
    let (member, labels, words) = (parts.member, parts.labels, parts.words);
    let released = figure::released(member, parts.redundants, words, figure::COLUMN);
    let mut drawings = vec![gallery.hang(labels.get("method.released")?, released)];
    let bodies = figure::free_bodies(member, words, figure::COLUMN);
    drawings.push(gallery.hang(labels.get("method.bodies")?, bodies));
    drawings.push(gallery.hang(labels.get("method.chained")?, figure::chained(figure::COLUMN)));
    let sentences = labels.list(if parts.redundants.is_empty() { "method_determinate" } else { "method_sentences" })?;
    Ok(Method { sentences, drawings, cases: parts.findings.cases.clone() })
}

fn trust(parts: &Parts<'_>) -> Result<Trust, Fault> {
    let (labels, found) = (parts.labels, parts.findings);
    let mut assumptions = labels.list("assumptions")?;
    assumptions.extend(found.assumptions.iter().cloned());
    let mut program = found.program.clone();
    if !parts.working.settled {
        program.push(labels.get("trust.unsettled")?.to_owned());
    }
    Ok(Trust {
        agreement: found.agreement.clone(),
        crosschecks: found.crosschecks.clone(),
        assumptions,
        cautions: labels.list("cautions")?,
        deference: labels.list("deference")?,
        sources: found.sources.clone(),
        revisions: found.revisions.clone(),
        events: found.events.clone(),
        program,
        hashes: hashes(parts)?,
    })
}

fn hashes(parts: &Parts<'_>) -> Result<Option<Table>, Fault> {
    use super::{Cell, Column, Row};
    let labels = parts.labels;
    let columns =
        vec![Column::text(labels.get("trust.file")?).wide(36.0), Column::text(labels.get("trust.sha256")?).wide(84.0)];
    let mut table = Table::new("", labels.get("trust.hashes")?, columns);
    for (name, hash) in &parts.findings.hashes {
        // Groups of eight: a hash is compared by eye.
        let digits: Vec<char> = hash.chars().collect();
        let groups: Vec<String> = digits.chunks(8).map(|group| group.iter().collect()).collect();
        table.rows.push(Row::of(vec![Cell::text(name), Cell::text(groups.join(" "))]));
    }
    Ok((!table.rows.is_empty()).then_some(table))
}
