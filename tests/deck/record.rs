//! The optional keys: revisions, assumptions, sources, confirmations, wishes for the sheet.

use proofspan::calculation::member;
use proofspan::deck::starter;
use proofspan::member::{Decimals, Part};

const EXTRA: &str = r#"
[[revision]]
letter = "0"
date = 2026-10-12
what = "First issue"
why = "For comment"

[[revision]]
letter = "A"
date = 2026-11-30
what = "Walkway load 4 kN/m^2 instead of 3"
why = "Client's letter of 2026-11-20"
moved = "All"

[[assumption]]
text = "The floor restrains the beam sideways."
confirm = true
source = "Drawing TPH-102"

[[assumption]]
text = "Steel of one grade throughout."

[sheet]
paper = "letter"
detail = "brief"
first_sheet = 7
decimal_comma = true
decimals = { force = 1, moment = 2, deflection = 3 }
"#;

/// The starter deck with sources and marks, and the tables above.
fn marked() -> String {
    let marks = [
        ("depth = \"300 mm\"", "depth = \"300 mm\"\nsource = \"Drawing S-12.\"\nconfirm = true"),
        ("length = \"4 m\"", "length = \"4 m\"\nconfirm = true"),
        ("kind = \"roller\"", "kind = \"roller\"\nconfirm = true\nsource = \"Ground report\""),
        ("at = \"5.5 m\"", "at = \"5.5 m\", confirm = true, source = \"Maker's sheet\""),
        ("basis = ", "confirm = true\nbasis = "),
        ("units = \"SI\"", "retention = \"Ten years\"\nunits = \"SI\""),
    ];
    let text = marks.iter().fold(starter().to_owned(), |text, (from, to)| {
        assert!(text.contains(from), "{from}");
        text.replacen(from, to, 1)
    });
    text + EXTRA
}

#[test]
fn the_record_is_read() {
    let member = member(&marked()).unwrap();
    // Only the two keys that are read but not followed are remarked on.
    let said: Vec<&str> = member.warnings.iter().map(|warning| warning.message.as_str()).collect();
    assert!(said.len() == 2 && said.iter().all(|said| said.contains("is not followed")), "{said:?}");
    let record = &member.record;
    assert_eq!(record.revisions.len(), 2);
    assert_eq!(record.revisions[1].date, (2026, 11, 30));
    assert_eq!(record.revisions[1].moved, "All");
    assert_eq!(record.assumptions.iter().map(|one| one.confirm).collect::<Vec<_>>(), [true, false]);
    assert_eq!(record.retention.as_deref(), Some("Ten years"));
    let sheet = record.sheet;
    assert_eq!((sheet.letter, sheet.brief, sheet.first_sheet), (Some(true), Some(true), Some(7)));
    assert!(sheet.decimal_comma);
    let decimals = Decimals { force: Some(1), moment: Some(2), deflection: Some(3), ..Decimals::default() };
    assert_eq!(sheet.decimals, decimals);
    assert_eq!(record.of(Part::Support(1)).unwrap().source, "Ground report");
}

#[test]
fn every_unconfirmed_value_has_its_sentence() {
    let member = member(&marked()).unwrap();
    assert_eq!(
        member.unconfirmed(),
        [
            "Section deep: waits for confirmation (source: Drawing S-12).",
            "Segment 2: waits for confirmation.",
            "Support B: waits for confirmation (source: Ground report).",
            "Load 2 of case Q (point): waits for confirmation (source: Maker's sheet).",
            "Limit total: waits for confirmation.",
            "Assumption 1: waits for confirmation (source: Drawing TPH-102): The floor restrains the beam sideways.",
        ]
    );
    assert!(proofspan::calculation::member(starter()).unwrap().unconfirmed().is_empty());
}

#[test]
fn wishes_beyond_reason_are_refused() {
    let refuse = |from: &str, to: &str, words: &str| {
        // The starter's remarks speak of the same keys: what is meant stands behind them.
        let (before, tables) = marked().rsplit_once("\n\n[[revision]]\nletter = \"0\"").map_or_else(
            || panic!("the tables of the record"),
            |(before, tables)| (before.to_owned(), format!("\n\n[[revision]]\nletter = \"0\"{tables}")),
        );
        assert!(tables.contains(from), "{from}");
        let text = before + &tables.replacen(from, to, 1);
        let faults = member(&text).unwrap_err();
        assert!(faults.len() == 1 && faults[0].message.contains(words), "{words}: {faults:?}");
    };
    refuse("paper = \"letter\"", "paper = \"a5\"", "paper cannot be \"a5\"");
    refuse("first_sheet = 7", "first_sheet = 0", "first_sheet must be a whole number from 1 to 9999");
    refuse("first_sheet = 7", "first_sheet = 7.5", "first_sheet must be a whole number");
    refuse("force = 1", "force = 12", "force must be a whole number from 0 to 9");
    refuse("force = 1", "forces = 1", "unknown key \"forces\" in sheet.decimals");
    refuse("decimal_comma = true", "decimal_comma = 1", "decimal_comma must be true or false");
    refuse("[sheet]", "[sheet]\nretention = \"x\"", "retention is given in the title already");
    refuse("what = \"First issue\"\n", "", "revision 1 lacks the key \"what\"");
    refuse("text = \"Steel of one grade throughout.\"", "text = \"\"", "text is empty");
    refuse("date = 2026-10-12", "date = \"12 October\"", "date must be a date, not text");
}
