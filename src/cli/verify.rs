//! `proofspan verify`: a sheet proved from itself.

use std::path::Path;

use super::Outcome;
use super::output::{complain, say};
use super::sheet::templates;
use crate::archive::verify;

pub fn run(sheet: &Path, folder: Option<&Path>) -> Outcome {
    let templates = match templates(folder) {
        Ok(templates) => templates,
        Err(outcome) => return outcome,
    };
    let bytes = match std::fs::read(sheet) {
        Ok(bytes) => bytes,
        Err(error) => {
            complain(&format!("error: {} could not be read: {error}", sheet.display()));
            return Outcome::Failed;
        }
    };
    let report = match verify(&bytes, &templates) {
        Ok(report) => report,
        Err(fault) => {
            complain(&format!("error: {}: {fault}", sheet.display()));
            return Outcome::BadInput;
        }
    };
    for said in &report.holds {
        say(&format!("holds    {said}"));
    }
    for said in &report.broken {
        say(&format!("BROKEN   {said}"));
    }
    if report.broken.is_empty() { Outcome::Holds } else { Outcome::Fails }
}
