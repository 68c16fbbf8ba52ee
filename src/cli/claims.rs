//! `proofspan claims`: a file of claims to fill in.

use std::path::Path;

use super::output::{calculate, complain, say};
use super::{Outcome, write};
use crate::review::starter;

pub fn run(deck: &Path, output: Option<&Path>) -> Outcome {
    let (_, calculation) = match calculate(deck, &[]) {
        Ok(solved) => solved,
        Err(outcome) => return outcome,
    };
    let name = deck.file_name().map_or_else(String::new, |name| name.to_string_lossy().into_owned());
    let text = starter(&calculation.member, &calculation.analysis, &name);
    let Some(output) = output else {
        say(text.trim_end());
        return Outcome::Holds;
    };
    if let Err(error) = write::fresh(output, text.as_bytes()) {
        let exists = error.kind() == std::io::ErrorKind::AlreadyExists;
        let why = if exists { "it exists already and is left as it is".to_owned() } else { error.to_string() };
        complain(&format!("error: {} was not written: {why}", output.display()));
        return Outcome::Failed;
    }
    say(&format!("{} is written; fill in values, then: proofspan review {}", output.display(), output.display()));
    Outcome::Holds
}
