//! `proofspan sheet`: the calculation sheet of a deck.

use std::path::{Path, PathBuf};

use super::args::PaperSize;
use super::output::{calculate, complain, failed, outcome, say, verdict};
use super::{Outcome, write};
use crate::issue;
use crate::sheet::{Fault, Options, Paper};

pub fn run(deck: &Path, output: Option<PathBuf>, paper: PaperSize) -> Outcome {
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
    let paper = match paper {
        PaperSize::A4 => Paper::A4,
        PaperSize::Letter => Paper::Letter,
    };
    let options = Options { paper, ..Options::default() };
    let printed = match issue::print(&calculation, &working, &text, &file, options) {
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
