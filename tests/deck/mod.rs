//! Reading decks: what is said of faulty and of odd ones, and that no text whatever breaks the reader.
//!
//! `faults/` and `warnings/` hold small decks, and beside each what is said of it, whole. The first line of a deck says how
//! many mistakes it holds: one mistake is one fault. `PROOFSPAN_BLESS=1` writes the expected texts anew, to be read before they
//! are committed.

mod asked;
mod large;
mod mutated;
mod record;

use std::path::{Path, PathBuf};

use proofspan::calculation::member;
use proofspan::diagnostic::{Diagnostic, Severity, render};

/// Decks of a folder beside this file, by name.
fn decks(folder: &str) -> Vec<PathBuf> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/deck").join(folder);
    let files = std::fs::read_dir(folder).unwrap().map(|entry| entry.unwrap().path());
    let mut decks: Vec<PathBuf> = files.filter(|path| path.extension().is_some_and(|end| end == "toml")).collect();
    decks.sort();
    decks
}

/// What is found in a deck, whether it is lawful, and whether the texts agree.
fn compare(path: &Path, severity: Severity, bless: bool) -> Result<(), String> {
    let name = path.file_name().unwrap().to_str().unwrap();
    let text = std::fs::read_to_string(path).unwrap();
    let found: Vec<Diagnostic> = match (member(&text), severity) {
        (Ok(member), Severity::Warning) => member.warnings,
        (Err(faults), Severity::Error) => faults,
        (Ok(_), Severity::Error) => return Err(format!("{name}: no fault is found")),
        (Err(faults), Severity::Warning) => return Err(render(&faults, name, &text)),
    };
    for one in &found {
        assert_eq!(one.severity, severity, "{name}: {one:?}");
        assert!(one.line_column(&text).is_some(), "{name}: a finding without a place: {one:?}");
        assert!(text.get(one.span.clone().unwrap()).is_some_and(|marked| !marked.is_empty()), "{name}: {one:?}");
    }
    let count: usize = text.trim_start_matches(['#', ' ']).split(' ').next().unwrap().parse().unwrap();
    let shown = render(&found, name, &text);
    let beside = path.with_extension("expected.txt");
    if bless {
        std::fs::write(&beside, &shown).unwrap();
    }
    if found.len() != count {
        return Err(format!("{name}: {count} mistakes, {} findings\n{shown}", found.len()));
    }
    let expected = std::fs::read_to_string(&beside).unwrap_or_default();
    if shown == expected { Ok(()) } else { Err(format!("{name}:\n{shown}instead of\n{expected}")) }
}

fn all(folder: &str, severity: Severity, least: usize) {
    let decks = decks(folder);
    assert!(decks.len() >= least, "{} decks", decks.len());
    let bless = std::env::var_os("PROOFSPAN_BLESS").is_some();
    let wrong: Vec<String> = decks.iter().filter_map(|path| compare(path, severity, bless).err()).collect();
    assert!(wrong.is_empty(), "{} decks:\n{}", wrong.len(), wrong.join("\n"));
}

#[test]
fn every_faulty_deck_is_answered_in_full() {
    all("faults", Severity::Error, 60);
}

#[test]
fn every_odd_deck_is_read_with_a_warning() {
    all("warnings", Severity::Warning, 15);
}

#[test]
fn the_comparison_notices_a_missing_fault_and_another_text() {
    let folder = tempfile::tempdir().unwrap();
    let path = folder.path().join("a.toml");
    let first = std::fs::read_to_string(decks("faults").first().unwrap()).unwrap();
    std::fs::write(&path, &first).unwrap();
    assert!(compare(&path, Severity::Error, false).unwrap_err().contains("instead of"));
    std::fs::write(&path, first.replacen("# 1 ", "# 2 ", 1)).unwrap();
    assert!(compare(&path, Severity::Error, false).unwrap_err().contains("2 mistakes, 1 findings"));
    std::fs::write(&path, proofspan::deck::starter()).unwrap();
    assert!(compare(&path, Severity::Error, false).unwrap_err().contains("no fault"));
}
