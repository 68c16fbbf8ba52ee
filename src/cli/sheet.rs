//! `proofspan sheet`: the calculation sheet of a deck.

use std::path::{Path, PathBuf};

use super::args::{Detail, PaperSize};
use super::output::{calculate, complain, failed, outcome, say, verdict};
use super::{Outcome, write};
use crate::issue::{self, Wishes};
use crate::sheet::{Fault, Paper, Templates};

/// What the command line says about the sheet; it comes before what the deck says.
pub struct Said {
    pub paper: Option<PaperSize>,
    pub detail: Option<Detail>,
    pub templates: Option<PathBuf>,
    pub without_attachments: bool,
}

/// The office's own templates in the place of the embedded ones of the same names.
pub fn templates(folder: Option<&Path>) -> Result<Templates, Outcome> {
    let mut templates = Templates::default();
    let Some(folder) = folder else { return Ok(templates) };
    let unread = |error: &std::io::Error| {
        complain(&format!("error: {} could not be read: {error}", folder.display()));
        Outcome::Failed
    };
    let entries = std::fs::read_dir(folder).map_err(|error| unread(&error))?;
    let mut files: Vec<PathBuf> = entries.filter_map(Result::ok).map(|entry| entry.path()).collect();
    files.retain(|path| path.is_file());
    files.sort();
    for path in files {
        let name = path.file_name().map_or_else(String::new, |name| name.to_string_lossy().into_owned());
        // An office keeps notes and pictures beside its templates; only these two endings are ours.
        if !name.ends_with(".j2") && name != "labels.toml" && name != "style.typ" {
            continue;
        }
        let text = std::fs::read_to_string(&path).map_err(|error| unread(&error))?;
        if let Err(fault) = templates.replace(&name, text) {
            complain(&format!("error: {}: {fault}", path.display()));
            return Err(Outcome::BadInput);
        }
    }
    Ok(templates)
}

pub fn run(deck: &Path, output: Option<PathBuf>, said: &Said) -> Outcome {
    let templates = match templates(said.templates.as_deref()) {
        Ok(templates) => templates,
        Err(outcome) => return outcome,
    };
    let (text, calculation) = match calculate(deck, &[]) {
        Ok(solved) => solved,
        Err(outcome) => return outcome,
    };
    let working = match calculation.working() {
        Ok(working) => working,
        Err(fault) => return failed(&fault),
    };
    let target = output.unwrap_or_else(|| deck.with_extension("pdf"));
    let file = deck.file_name().map_or_else(String::new, |name| name.to_string_lossy().into_owned());
    let mut wishes = Wishes { templates, attach: !said.without_attachments, ..Wishes::of(&calculation.member, file) };
    match said.paper {
        Some(PaperSize::A4) => wishes.paper = Paper::A4,
        Some(PaperSize::Letter) => wishes.paper = Paper::Letter,
        None => {}
    }
    if let Some(detail) = said.detail {
        wishes.brief = detail == Detail::Brief;
    }
    let printed = match issue::print(&calculation, &working, &text, &wishes) {
        Ok(printed) => printed,
        Err(fault) => {
            complain(&format!("error: {fault}"));
            return if matches!(fault, Fault::Glyph { .. }) { Outcome::BadInput } else { Outcome::Failed };
        }
    };
    if let Err(error) = write::whole(&target, &printed.pdf) {
        complain(&format!("error: {} could not be written: {error}", target.display()));
        return Outcome::Failed;
    }
    verdict(&calculation);
    say(&format!("{}: {} sheets", target.display(), printed.pages));
    outcome(&calculation)
}
