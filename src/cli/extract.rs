//! `proofspan extract`: the files inside a sheet.

use std::path::Path;

use super::output::{complain, say};
use super::{Outcome, write};
use crate::archive::attachments;

pub fn run(sheet: &Path, folder: &Path) -> Outcome {
    let bytes = match std::fs::read(sheet) {
        Ok(bytes) => bytes,
        Err(error) => {
            complain(&format!("error: {} could not be read: {error}", sheet.display()));
            return Outcome::Failed;
        }
    };
    let files = match attachments(&bytes) {
        Ok(files) => files,
        Err(fault) => {
            complain(&format!("error: {}: {fault}", sheet.display()));
            return Outcome::BadInput;
        }
    };
    if let Err(error) = std::fs::create_dir_all(folder) {
        complain(&format!("error: {} could not be made: {error}", folder.display()));
        return Outcome::Failed;
    }
    // Nothing is written where something would be overwritten.
    let targets: Vec<_> = files.iter().map(|file| folder.join(file.safe_name())).collect();
    if let Some(there) = targets.iter().find(|target| target.exists()) {
        complain(&format!("error: {} exists already and is left as it is; name another folder", there.display()));
        return Outcome::Failed;
    }
    for (file, target) in files.iter().zip(&targets) {
        if let Err(error) = write::fresh(target, &file.bytes) {
            complain(&format!("error: {} could not be written: {error}", target.display()));
            return Outcome::Failed;
        }
        say(&format!("{}: {} bytes, {}", target.display(), file.bytes.len(), file.relationship));
    }
    Outcome::Holds
}
