//! `proofspan new`: a starter deck.

use std::path::Path;

use super::output::{complain, say};
use super::{Outcome, write};
use crate::deck::starter;

pub fn run(file: &Path) -> Outcome {
    if let Err(error) = write::fresh(file, starter().as_bytes()) {
        let exists = error.kind() == std::io::ErrorKind::AlreadyExists;
        let why = if exists { "it exists already and is left as it is".to_owned() } else { error.to_string() };
        complain(&format!("error: {} was not written: {why}", file.display()));
        return Outcome::Failed;
    }
    say(&format!("{} is written; now: proofspan sheet {}", file.display(), file.display()));
    Outcome::Holds
}
