//! What the terminal shows.

use std::io::Write;
use std::path::Path;

use super::Outcome;
use crate::calculation::{Calculation, Fault};
use crate::diagnostic::render;
use crate::member::System;
use crate::verdict::rounded_up;

/// Prints a text; a reader that has gone away is no fault.
pub fn say(text: &str) {
    let _ = writeln!(std::io::stdout(), "{text}");
}

/// Prints a fault or warning.
pub fn complain(text: &str) {
    let _ = writeln!(std::io::stderr(), "{text}");
}

/// Reads a deck and solves it, or says why not.
pub fn calculate(path: &Path, stations: &[String]) -> Result<(String, Calculation), Outcome> {
    let name = path.display().to_string();
    let text = std::fs::read(path).map_err(|error| {
        complain(&format!("error: {name} could not be read: {error}"));
        Outcome::Failed
    })?;
    let text = String::from_utf8(text).map_err(|_| {
        complain(&format!("error: {name} is not UTF-8 text"));
        Outcome::BadInput
    })?;
    match Calculation::with_stations(&text, stations) {
        Ok(calculation) => {
            if !calculation.member.warnings.is_empty() {
                complain(render(&calculation.member.warnings, &name, &text).trim_end());
            }
            Ok((text, calculation))
        }
        Err(Fault::Input(findings)) => {
            complain(render(&findings, &name, &text).trim_end());
            Err(Outcome::BadInput)
        }
        Err(fault) => Err(failed(&fault)),
    }
}

/// Says why something could not be done.
pub fn failed(fault: &Fault) -> Outcome {
    match fault {
        Fault::Disagreement(rows) => {
            complain("error: the crosschecks disagree, so no result is given");
            for row in rows {
                complain(&format!("  {row}"));
            }
        }
        Fault::Program(what) => complain(&format!("error: a fault of the program, please report it: {what}")),
        Fault::Input(findings) => findings.iter().for_each(|finding| complain(&format!("error: {}", finding.message))),
    }
    Outcome::Failed
}

/// Length shown small: mm or in.
pub fn small(calculation: &Calculation) -> (f64, &'static str) {
    match calculation.member.title.system {
        System::Si => (1e-3, "mm"),
        System::Us => (0.0254, "in"),
    }
}

/// The table of checks and the two sentences.
pub fn verdict(calculation: &Calculation) {
    let member = &calculation.member;
    let (size, unit) = small(calculation);
    if !calculation.verdict.checks.is_empty() {
        say(&format!(
            "{:<16} {:<12} {:<16} {:>14} {:>14} {:>11}",
            "combination", "span", "limit", "deflection", "allowable", "utilisation"
        ));
    }
    for check in &calculation.verdict.checks {
        let name = |found: Option<&String>| found.cloned().unwrap_or_default();
        say(&format!(
            "{:<16} {:<12} {:<16} {:>11.2} {unit} {:>11.2} {unit} {:>11} {}",
            name(member.combinations.get(check.combination).map(|c| &c.name)),
            name(member.spans.get(check.span).map(|s| &s.name)),
            name(member.limits.get(check.limit).map(|l| &l.name)),
            check.deflection / size,
            check.allowable / size,
            rounded_up(check.utilisation),
            if check.pass { "within" } else { "EXCEEDS" },
        ));
    }
    for uplift in &calculation.verdict.uplifts {
        let support = member.supports.get(uplift.support).map_or("", |s| s.name.as_str());
        let combination = member.combinations.get(uplift.combination).map_or("", |c| c.name.as_str());
        say(&format!("Net uplift at support {support} in combination {combination}: hold-down required."));
    }
    for sentence in calculation.verdict.sentences(member) {
        say(&sentence);
    }
}

/// The exit of a solved deck.
pub fn outcome(calculation: &Calculation) -> Outcome {
    if calculation.verdict.holds() { Outcome::Holds } else { Outcome::Fails }
}
