//! A sheet proved from itself.

use serde_json::Value;

use super::attached::{Attachment, Contents, Fault, contents};
use super::compare::differences;
use crate::calculation::Calculation;
use crate::issue::{self, Wishes};
use crate::sheet::Templates;

/// Figures of another version may differ in their last bits.
const RELATIVE: f64 = 1e-9;
/// So many differences are named; the rest is counted.
const NAMED: usize = 12;

/// What was found.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Report {
    /// What holds, a sentence each.
    pub holds: Vec<String>,
    /// What does not hold, a sentence each.
    pub broken: Vec<String>,
}

impl Report {
    fn hold(&mut self, said: impl Into<String>) {
        self.holds.push(said.into());
    }

    fn breaks(&mut self, said: impl Into<String>) {
        self.broken.push(said.into());
    }
}

/// Proves a sheet: its deck is solved anew and compared with its results, and the sheet is made again.
///
/// `templates` are the office's own where the sheet was made with such.
///
/// # Errors
/// A file that is no sheet of this program.
pub fn verify(bytes: &[u8], templates: &Templates) -> Result<Report, Fault> {
    let whole = contents(bytes)?;
    let first = first_revision(bytes);
    // What was written first is what is proved; what others appended is looked at afterwards.
    let original = if first < bytes.len() { contents(bytes.get(..first).unwrap_or(bytes)).ok() } else { None };
    let original = original.filter(|found| !found.attachments.is_empty()).unwrap_or_else(|| whole.clone());
    if original.attachments.is_empty() {
        return Err(Fault::NoAttachments);
    }
    let deck = text_of(&original, "deck.toml")?;
    let results = text_of(&original, "results.json")?;
    let mut report = Report::default();
    let Ok(results) = serde_json::from_str::<Value>(&results) else {
        report.breaks("the attached results are no JSON any more");
        return Ok(report);
    };
    let Some(wishes) = results.get("sheet").and_then(Wishes::read) else {
        return Err(Fault::NoSheet("its results do not say how it was issued".to_owned()));
    };
    let Some(remade) = recompute(&deck, &results, wishes, templates, &mut report) else { return Ok(report) };
    against(bytes, &whole, &original, remade.as_deref(), &mut report);
    Ok(report)
}

fn text_of(contents: &Contents, name: &str) -> Result<String, Fault> {
    let found = contents.attachments.iter().find(|file| file.name == name);
    let file = found.ok_or_else(|| Fault::NoSheet(format!("it carries no {name}")))?;
    String::from_utf8(file.bytes.clone()).map_err(|_| Fault::NoSheet(format!("its {name} is not UTF-8 text")))
}

/// Solves the deck anew and compares; the sheet made again where that can be done. `None` where nothing more can be said.
fn recompute(
    deck: &str,
    results: &Value,
    wishes: Wishes,
    templates: &Templates,
    report: &mut Report,
) -> Option<Option<Vec<u8>>> {
    let calculation = match Calculation::new(deck) {
        Ok(calculation) => calculation,
        Err(fault) => {
            report.breaks(format!("the attached deck cannot be solved any more: {}", said(&fault)));
            return None;
        }
    };
    if results.get("deck_sha256").and_then(Value::as_str) != Some(calculation.deck_sha256.as_str()) {
        report
            .breaks("the attached results belong to another deck: the hash they carry is not that of the attached one");
    }
    let working = match calculation.working() {
        Ok(working) => working,
        Err(fault) => {
            report.breaks(format!("the working cannot be made again: {}", said(&fault)));
            return None;
        }
    };
    let version = results.pointer("/sheet/version").and_then(Value::as_str).unwrap_or_default();
    let same = version == env!("CARGO_PKG_VERSION");
    let anew = serde_json::from_str::<Value>(&issue::results(&calculation, &working, &wishes)).unwrap_or_default();
    compared(results, &anew, same, report);
    if !same {
        report.hold(format!(
            "made by version {version}, verified by {}: the attachments alone were compared, the pages were not",
            env!("CARGO_PKG_VERSION")
        ));
        return Some(None);
    }
    let own = results.pointer("/sheet/templates").and_then(Value::as_str);
    if own.map(str::to_owned) != templates.own_hash() {
        let what = if own.is_some() {
            "made with an office's own templates, which --templates must name"
        } else {
            "made with the templates of the program, not with those that were named"
        };
        report.hold(format!("{what}: the attachments alone were compared, the pages were not"));
        return Some(None);
    }
    let wishes = Wishes { templates: templates.clone(), ..wishes };
    match issue::print(&calculation, &working, deck, &wishes) {
        Ok(printed) => Some(Some(printed.pdf)),
        Err(fault) => {
            report.breaks(format!("the sheet cannot be made again: {fault}"));
            Some(None)
        }
    }
}

fn said(fault: &crate::calculation::Fault) -> String {
    use crate::calculation::Fault as F;
    match fault {
        F::Input(findings) => findings.first().map(|finding| finding.message.clone()).unwrap_or_default(),
        F::Disagreement(rows) => format!("the crosschecks disagree ({} rows)", rows.len()),
        F::Program(what) => what.clone(),
    }
}

fn compared(attached: &Value, anew: &Value, same: bool, report: &mut Report) {
    let without_sheet = |value: &Value| {
        let mut value = value.clone();
        if let Some(object) = value.as_object_mut() {
            object.shift_remove("sheet");
            // Another version may narrate in other steps.
            if !same {
                object.shift_remove("working");
                object.shift_remove("agreement");
            }
        }
        value
    };
    let relative = if same { 0.0 } else { RELATIVE };
    let found = differences(&without_sheet(attached), &without_sheet(anew), relative);
    if found.is_empty() {
        report.hold("the attached deck, solved anew, gives the attached results");
        return;
    }
    for difference in found.iter().take(NAMED) {
        report.breaks(format!("results differ at {difference}"));
    }
    if found.len() > NAMED {
        report.breaks(format!("results differ at {} more places", found.len() - NAMED));
    }
}

/// The file against the sheet made again, then what others appended.
fn against(bytes: &[u8], whole: &Contents, original: &Contents, remade: Option<&[u8]>, report: &mut Report) {
    let Some(remade) = remade else {
        changed(original, whole, "the additions change", report);
        return;
    };
    if bytes == remade {
        report.hold("the sheet made again is the same, byte for byte");
        return;
    }
    let Ok(wanted) = contents(remade) else {
        report.breaks("the sheet made again cannot be read");
        return;
    };
    if bytes.starts_with(remade) {
        let rest = bytes.get(remade.len()..).unwrap_or_default();
        let additions = ends(rest).len();
        let before = report.broken.len();
        if additions == 0 || !rest.trim_ascii_end().ends_with(b"%%EOF") {
            report.breaks("something was appended that is no addition a PDF program would write");
        }
        changed(&wanted, whole, "an addition changes", report);
        if report.broken.len() == before {
            let word = if additions == 1 { "addition" } else { "additions" };
            report.hold(format!("original intact, {additions} {word}"));
        }
        return;
    }
    let before = report.broken.len();
    changed(&wanted, whole, "the file differs from the sheet made again in", report);
    if report.broken.len() == before {
        report.breaks("the file differs from the sheet made again outside its pages and attachments");
    }
}

/// Names pages and attachments that differ.
fn changed(wanted: &Contents, found: &Contents, what: &str, report: &mut Report) {
    if wanted.pages.len() != found.pages.len() {
        report.breaks(format!("{what} the number of pages: {} instead of {}", found.pages.len(), wanted.pages.len()));
    }
    let differing: Vec<String> = wanted
        .pages
        .iter()
        .zip(&found.pages)
        .enumerate()
        .filter(|(_, (left, right))| left != right)
        .map(|(index, _)| (index + 1).to_string())
        .collect();
    if !differing.is_empty() {
        let word = if differing.len() == 1 { "page" } else { "pages" };
        report.breaks(format!("{what} {word} {}", differing.join(", ")));
    }
    for file in &wanted.attachments {
        match found.attachments.iter().find(|other| other.name == file.name) {
            None => report.breaks(format!("{what} the attachment {}, which is gone", file.name)),
            Some(other) if other.bytes != file.bytes => report.breaks(format!("{what} the attachment {}", file.name)),
            Some(_) => {}
        }
    }
    let known = |other: &&Attachment| wanted.attachments.iter().any(|file| file.name == other.name);
    for other in found.attachments.iter().filter(|other| !known(other)) {
        report.breaks(format!("{what} the attachments: {} is not of the sheet", other.safe_name()));
    }
}

/// Where each revision of a file ends: behind `%%EOF` and the end of its line.
fn ends(bytes: &[u8]) -> Vec<usize> {
    let mark = b"%%EOF";
    let starts = bytes.windows(mark.len()).enumerate().filter(|(_, window)| window == mark).map(|(index, _)| index);
    starts
        .map(|start| {
            let after = start + mark.len();
            let rest = bytes.get(after..).unwrap_or_default();
            after + rest.iter().take(2).take_while(|byte| matches!(byte, b'\r' | b'\n')).count()
        })
        .collect()
}

/// The length of what was written first.
fn first_revision(bytes: &[u8]) -> usize {
    ends(bytes).first().copied().unwrap_or(bytes.len())
}
