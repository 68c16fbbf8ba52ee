//! `proofspan review`: somebody's figures against one's own model.

use std::path::{Path, PathBuf};

use sha2::{Digest, Sha256};

use super::output::{calculate, complain, failed, say};
use super::{Outcome, write};
use crate::archive::attachments;
use crate::calculation::{self, Calculation, hexadecimal};
use crate::diagnostic::{Diagnostic, render};
use crate::issue::review::{self as issued, Reviewed};
use crate::review::search::{Findings, explain};
use crate::review::{Claims, Compared, Status, compare, deck_of, evidence, faults, from_results, json, read, toml};

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
    /// Where the checker's deck lies.
    place: PathBuf,
    /// The text of the claims.
    text: String,
    /// Where the claims come from a sheet, its SHA-256.
    sheet: Option<String>,
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
    let show = |findings: &[Diagnostic]| {
        if !findings.is_empty() {
            complain(render(findings, &path.display().to_string(), &text).trim_end());
        }
    };
    let Some((deck, span)) = deck_of(&text) else {
        // Without a deck nothing in the file can be looked up, but its other faults can be told.
        show(&faults(&text));
        return Err(Outcome::BadInput);
    };
    let place = path.parent().map_or_else(|| PathBuf::from(&deck), |folder| folder.join(&deck));
    if let Err(error) = std::fs::read(&place) {
        let message = format!("the deck {} could not be read: {error}", place.display());
        let mut all = faults(&text);
        all.push(Diagnostic::error(span, message).hint("name the checker's own deck, relative to this file"));
        all.sort_by_key(|fault| fault.span.as_ref().map(|span| span.start));
        show(&all);
        return Err(Outcome::BadInput);
    }
    let (deck, calculation) = calculate(&place, &[]).inspect_err(|_| show(&faults(&text)))?;
    let (claims, warnings) = read(&text, &calculation.member).map_err(|faults| {
        show(&faults);
        Outcome::BadInput
    })?;
    show(&warnings);
    Ok(Case { file: path.to_owned(), place, text, sheet: None, deck, calculation, claims })
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
    let attached = |name: &str| {
        let file = files.iter().find(|file| file.name == name)?;
        String::from_utf8(file.bytes.clone()).ok()
    };
    let results = attached("results.json").ok_or_else(|| refuse("it carries no results"))?;
    let value = serde_json::from_str(&results).map_err(|_| refuse("its results are no JSON"))?;
    let (deck_text, calculation) = calculate(deck, &[])?;
    let found = from_results(&value, &calculation.member, &calculation.analysis);
    let (mut claims, missing) = found.ok_or_else(|| refuse("its results are none of this program"))?;
    if claims.claims.is_empty() {
        return Err(refuse("its results and the deck have no figure in common"));
    }
    if missing > 0 {
        complain(&format!("warning: {} has no counterpart of {missing} figures of the sheet", deck.display()));
    }
    // The sheet's own deck says what is reviewed.
    if let Some(title) = attached("deck.toml").and_then(|text| calculation::member(&text).ok()).map(|m| m.title) {
        let reviewed = &mut claims.reviewed;
        (reviewed.number, reviewed.revision, reviewed.subject) = (title.number, title.revision, title.subject);
        reviewed.date = Some(title.date);
    }
    claims.deck = deck.file_name().map_or_else(String::new, |name| name.to_string_lossy().into_owned());
    claims.reviewer.date = calculation.member.title.date;
    claims.reviewer.name = calculation.member.title.prepared.clone().unwrap_or_default();
    let text = toml(&claims);
    let sha256 = hexadecimal(&Sha256::digest(&bytes));
    let (file, place) = (sheet.to_owned(), deck.to_owned());
    Ok(Case { file, place, text, sheet: Some(sha256), deck: deck_text, calculation, claims })
}

fn conclude(case: &Case, said: &Said) -> Outcome {
    let (member, analysis) = (&case.calculation.member, &case.calculation.analysis);
    let target = said.output.clone().or_else(|| (!said.json).then(|| beside(&case.file)));
    if let Some(target) = &target
        && [&case.file, &case.place].into_iter().any(|input| same(input, target))
    {
        complain(&format!("error: {} is what is reviewed: the review is not written over it", target.display()));
        return Outcome::Failed;
    }
    let compared: Vec<Compared> = case.claims.claims.iter().map(|claim| compare(claim, member, analysis)).collect();
    let findings = explain(member, analysis, &evidence(&case.claims.claims, &compared));
    if said.json {
        say(&json(&case.claims.claims, &compared, &findings).to_string());
    } else {
        table(case, &compared);
        explanations(&findings);
    }
    if let Some(target) = target
        && let Err(outcome) = print(case, &compared, &findings, &target, said.json)
    {
        return outcome;
    }
    let differs = compared.iter().any(|found| found.status == Status::Differs);
    if differs { Outcome::Fails } else { Outcome::Holds }
}

/// Whether two paths lead to one file.
fn same(one: &Path, other: &Path) -> bool {
    matches!((one.canonicalize(), other.canonicalize()), (Ok(one), Ok(other)) if one == other)
}

/// The review beside what is reviewed; never over a sheet.
fn beside(file: &Path) -> PathBuf {
    let stem = file.file_stem().map_or_else(String::new, |stem| stem.to_string_lossy().into_owned());
    file.with_file_name(format!("{stem}-review.pdf"))
}

fn print(case: &Case, compared: &[Compared], findings: &Findings, target: &Path, quiet: bool) -> Result<(), Outcome> {
    let working = case.calculation.working().map_err(|fault| failed(&fault))?;
    let name = case.file.file_name().map_or_else(String::new, |name| name.to_string_lossy().into_owned());
    // Claims taken from a sheet are written out and travel as a file of their own.
    let (file, sheet) = match &case.sheet {
        Some(sha256) => ("claims.toml", Some((name.as_str(), sha256.as_str()))),
        None => (name.as_str(), None),
    };
    let reviewed = Reviewed {
        calculation: &case.calculation,
        deck: &case.deck,
        file,
        text: &case.text,
        sheet,
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
    let plain = |text: String| text.replace('\u{A0}', " ").replace('\u{2212}', "-");
    let head = ["no.", "claim", "claimed", "recomputed", "%", ""].map(str::to_owned);
    let mut rows = vec![(head, String::new())];
    for (claim, found) in case.claims.claims.iter().zip(compared) {
        let recomputed = found.recomputed.map_or_else(|| "-".to_owned(), |si| plain(issued::shown(claim, si, system)));
        let percent = found.relative.map_or_else(String::new, |share| format!("{:+.2}", share * 100.0));
        let status = match found.status {
            Status::Agrees => "agrees",
            Status::Differs => "DIFFERS",
            Status::NotComparable => "not comparable",
        };
        let cells = [
            (claim.index + 1).to_string(),
            claim.words.clone(),
            plain(issued::claimed(claim, system)),
            recomputed,
            percent,
            status.to_owned(),
        ];
        rows.push((cells, found.remark.clone()));
    }
    let width = |column: usize| {
        let cells = rows.iter().filter_map(|(cells, _)| cells.get(column));
        cells.map(|cell| cell.chars().count()).max().unwrap_or_default()
    };
    let [no, words, claimed, recomputed, percent] = [0, 1, 2, 3, 4].map(width);
    for (cells, remark) in &rows {
        let [a, b, c, d, e, f] = cells;
        let line = format!("{a:>no$} {b:<words$}  {c:>claimed$}  {d:>recomputed$}  {e:>percent$}  {f}");
        say(line.trim_end());
        if !remark.is_empty() {
            say(&format!("{:>no$} {remark}", ""));
        }
    }
    say(&issued::counts(compared));
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
