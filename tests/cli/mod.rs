//! The command line as a newcomer meets it.

use std::path::{Path, PathBuf};
use std::process::{Command, Output};

fn run(folder: &Path, arguments: &[&str]) -> Output {
    Command::new(env!("CARGO_BIN_EXE_proofspan")).current_dir(folder).args(arguments).output().unwrap()
}

fn folder() -> tempfile::TempDir {
    tempfile::tempdir().unwrap()
}

fn example(name: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("examples").join(name)
}

fn said(output: &Output) -> String {
    String::from_utf8_lossy(&output.stdout).into_owned() + &String::from_utf8_lossy(&output.stderr)
}

#[test]
fn a_sheet_is_written_and_the_verdict_said() {
    let folder = folder();
    let output = run(folder.path(), &["sheet", example("intake-beam.toml").to_str().unwrap(), "-o", "a.pdf"]);
    assert_eq!(output.status.code(), Some(0), "{}", said(&output));
    assert!(said(&output).contains("Deflection: within limits, 0.55 of the allowable (S1, span A–B)."));
    assert!(said(&output).contains("Strength: not checked."));
    let first = std::fs::read(folder.path().join("a.pdf")).unwrap();
    run(folder.path(), &["sheet", example("intake-beam.toml").to_str().unwrap(), "-o", "b.pdf"]);
    assert!(first == std::fs::read(folder.path().join("b.pdf")).unwrap(), "the same deck gives the same bytes");
}

#[test]
fn an_exceeded_limit_ends_with_three() {
    let folder = folder();
    let output = run(folder.path(), &["sheet", example("jetty-bracket.toml").to_str().unwrap(), "-o", "a.pdf"]);
    assert_eq!(output.status.code(), Some(3), "{}", said(&output));
    assert!(said(&output).contains("EXCEEDS the limit"));
    assert!(folder.path().join("a.pdf").exists());
}

#[test]
fn every_example_prints() {
    let folder = folder();
    for name in ["gallery-girder.toml", "service-walkway.toml", "us-roof-beam.toml"] {
        let output = run(folder.path(), &["sheet", example(name).to_str().unwrap(), "-o", "a.pdf"]);
        assert_eq!(output.status.code(), Some(0), "{name}: {}", said(&output));
    }
}

#[test]
fn faults_end_with_two_and_write_nothing() {
    let folder = folder();
    std::fs::write(folder.path().join("d.toml"), "format = 1\n[title]\nproject = 3\n").unwrap();
    let output = run(folder.path(), &["sheet", "d.toml"]);
    assert_eq!(output.status.code(), Some(2));
    assert!(said(&output).contains("d.toml:3:11"), "{}", said(&output));
    assert!(!folder.path().join("d.pdf").exists());
    assert_eq!(run(folder.path(), &["sheet", "missing.toml"]).status.code(), Some(1));
}

#[test]
fn a_new_deck_runs_as_it_stands_and_is_never_overwritten() {
    let folder = folder();
    assert_eq!(run(folder.path(), &["new", "beam.toml"]).status.code(), Some(0));
    assert_eq!(run(folder.path(), &["solve", "beam.toml", "--at", "2.5 m"]).status.code(), Some(0));
    std::fs::write(folder.path().join("beam.toml"), "mine").unwrap();
    assert_eq!(run(folder.path(), &["new", "beam.toml"]).status.code(), Some(1));
    assert_eq!(std::fs::read_to_string(folder.path().join("beam.toml")).unwrap(), "mine");
}

#[test]
fn help_has_an_example_for_every_command() {
    for command in ["sheet", "solve", "new"] {
        let output = run(Path::new("."), &[command, "--help"]);
        assert_eq!(output.status.code(), Some(0));
        assert!(said(&output).contains("Example: proofspan"), "{command}");
    }
}
