//! `proofspan review`: somebody's figures against one's own model.

use std::path::{Path, PathBuf};

use super::output::{calculate, complain, failed, say};
use super::{Outcome, write};
use crate::archive::attachments;
use crate::calculation::Calculation;
use crate::diagnostic::render;
use crate::issue::review::{self as issued, Reviewed};
use crate::review::search::{Findings, explain};
use crate::review::{Claims, Compared, Status, compare, deck_of, evidence, from_results, json, read};

/// What the command line says.
pub struct Said {
    pub claims: Option<PathBuf>,
    pub sheet: Option<PathBuf>,
    pub deck: Option<PathBuf>,
    pub output: Option<PathBuf>,
    pub json: bool,
}

/// Everything that is reviewed.
struct Case {
    /// The file of claims or the sheet.
    file: PathBuf,
    text: String,
    deck: String,
    calculation: Calculation,
    claims: Claims,
}

pub fn run(said: &Said) -> Outcome {
    let case = match (&said.claims, &said.sheet, &said.deck) {
        (Some(claims), _, _) => from_claims(claims),
        (None, Some(sheet), Some(deck)) => from_sheet(sheet, deck),
        _ => {
            complain("error: name a file of claims, or --sheet and --deck");
            return Outcome::BadInput;
        }
    };
    match case {
        Ok(case) => conclude(&case, said),
        Err(outcome) => outcome,
    }
}

fn file_text(path: &Path) -> Result<String, Outcome> {
    let bytes = std::fs::read(path).map_err(|error| {
        complain(&format!("error: {} could not be read: {error}", path.display()));
        Outcome::Failed
    })?;
    String::from_utf8(bytes).map_err(|_| {
        complain(&format!("error: {} is not UTF-8 text", path.display()));
        Outcome::BadInput
    })
}

fn from_claims(path: &Path) -> Result<Case, Outcome> {
    let text = file_text(path)?;
    let Some(deck) = deck_of(&text) else {
        // Without a deck nothing in the file can be looked up.
        complain(&format!("error: {}: deck = \"FILE\" is missing, the checker's own model", path.display()));
        return Err(Outcome::BadInput);
    };
    let place = path.parent().map_or_else(|| PathBuf::from(&deck), |folder| folder.join(&deck));
    let (deck, calculation) = calculate(&place, &[])?;
    let (claims, warnings) = read(&text, &calculation.member).map_err(|faults| {
        complain(render(&faults, &path.display().to_string(), &text).trim_end());
        Outcome::BadInput
    })?;
    if !warnings.is_empty() {
        complain(render(&warnings, &path.display().to_string(), &text).trim_end());
    }
    Ok(Case { file: path.to_owned(), text, deck, calculation, claims })
}

fn from_sheet(sheet: &Path, deck: &Path) -> Result<Case, Outcome> {
    let bytes = std::fs::read(sheet).map_err(|error| {
        complain(&format!("error: {} could not be read: {error}", sheet.display()));
        Outcome::Failed
    })?;
    let refuse = |why: &str| {
        complain(&format!("error: {}: {why}", sheet.display()));
        Outcome::BadInput
    };
    let files = attachments(&bytes).map_err(|fault| refuse(&fault.to_string()))?;
    let results = files.iter().find(|file| file.name == "results.json");
    let text = results.and_then(|file| String::from_utf8(file.bytes.clone()).ok());
    let text = text.ok_or_else(|| refuse("it carries no results"))?;
    let (deck_text, calculation) = calculate(deck, &[])?;
    let value = serde_json::from_str(&text).map_err(|_| refuse("its results are no JSON"))?;
    let mut claims =
        from_results(&value, &calculation.member).ok_or_else(|| refuse("its results are none of this program"))?;
    claims.deck = deck.file_name().map_or_else(String::new, |name| name.to_string_lossy().into_owned());
    claims.reviewer.date = calculation.member.title.date;
    claims.reviewer.name = calculation.member.title.prepared.clone().unwrap_or_default();
    Ok(Case { file: sheet.to_owned(), text, deck: deck_text, calculation, claims })
}

fn conclude(case: &Case, said: &Said) -> Outcome {
    let (member, analysis) = (&case.calculation.member, &case.calculation.analysis);
    let compared: Vec<Compared> = case.claims.claims.iter().map(|claim| compare(claim, member, analysis)).collect();
    let findings = explain(member, analysis, &evidence(&case.claims.claims, &compared));
    if said.json {
        say(&json(&case.claims.claims, &compared, &findings).to_string());
    } else {
        table(case, &compared);
        explanations(&findings);
    }
    let target = said.output.clone().or_else(|| (!said.json).then(|| beside(&case.file)));
    if let Some(target) = target
        && let Err(outcome) = print(case, &compared, &findings, &target, said.json)
    {
        return outcome;
    }
    let differs = compared.iter().any(|found| found.status == Status::Differs);
    if differs { Outcome::Fails } else { Outcome::Holds }
}

/// The review beside what is reviewed; never over a sheet.
fn beside(file: &Path) -> PathBuf {
    let stem = file.file_stem().map_or_else(String::new, |stem| stem.to_string_lossy().into_owned());
    file.with_file_name(format!("{stem}-review.pdf"))
}

fn print(case: &Case, compared: &[Compared], findings: &Findings, target: &Path, quiet: bool) -> Result<(), Outcome> {
    let working = case.calculation.working().map_err(|fault| failed(&fault))?;
    let file = case.file.file_name().map_or_else(String::new, |name| name.to_string_lossy().into_owned());
    let reviewed = Reviewed {
        calculation: &case.calculation,
        deck: &case.deck,
        file: &file,
        text: &case.text,
        claims: &case.claims,
        compared,
        findings,
    };
    let printed = issued::print(&reviewed, &working).map_err(|fault| {
        complain(&format!("error: {fault}"));
        Outcome::Failed
    })?;
    write::whole(target, &printed.pdf).map_err(|error| {
        complain(&format!("error: {} could not be written: {error}", target.display()));
        Outcome::Failed
    })?;
    if !quiet {
        say(&format!("{}: {} sheets", target.display(), printed.pages));
    }
    Ok(())
}

fn table(case: &Case, compared: &[Compared]) {
    let system = case.calculation.member.title.system;
    say(&format!("{:>3} {:<34} {:>14} {:>14} {:>9}  ", "no.", "claim", "claimed", "recomputed", "%"));
    for (claim, found) in case.claims.claims.iter().zip(compared) {
        let plain = |text: String| text.replace('\u{A0}', " ");
        let recomputed = found.recomputed.map_or_else(|| "-".to_owned(), |si| plain(issued::shown(claim, si, system)));
        let percent = found.relative.map_or_else(String::new, |share| format!("{:+.2}", share * 100.0));
        let status = match found.status {
            Status::Agrees => "agrees",
            Status::Differs => "DIFFERS",
            Status::NotComparable => "not comparable",
        };
        let claimed = plain(issued::shown(claim, claim.claimed, system));
        say(&format!(
            "{:>3} {:<34} {claimed:>14} {recomputed:>14} {percent:>9}  {status}",
            claim.index + 1,
            claim.words
        ));
        if !found.remark.is_empty() {
            say(&format!("    {}", found.remark));
        }
    }
}

fn explanations(findings: &Findings) {
    for (index, one) in findings.explanations.iter().take(5).enumerate() {
        let places = one.mistakes.iter().zip(&one.wheres).map(|(mistake, place)| format!("{mistake} ({place})"));
        let tie = if one.tie { ", as would another" } else { "" };
        say(&format!(
            "{}. {} would reproduce {} differing and keep {} agreeing claims{tie}",
            index + 1,
            places.collect::<Vec<_>>().join(" and "),
            one.explains,
            one.keeps
        ));
    }
    if let Some(remark) = &findings.remark {
        say(remark);
    }
}
