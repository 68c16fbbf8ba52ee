//! Faults of files of claims, each with its place.

use proofspan::calculation::Calculation;
use proofspan::review::read;

use super::{DECK, HEAD};

/// The faults of a file, as `line: message`.
fn faults(text: &str) -> Vec<String> {
    let calculation = Calculation::new(DECK).unwrap();
    match read(text, &calculation.member) {
        Ok(_) => Vec::new(),
        Err(faults) => faults
            .iter()
            .map(|fault| {
                let line = fault.line_column(text).map_or(0, |(line, _)| line);
                format!(
                    "{line}: {}{}",
                    fault.message,
                    if fault.hint.is_empty() { String::new() } else { format!(" ({})", fault.hint) }
                )
            })
            .collect(),
    }
}

fn claim(lines: &str) -> Vec<String> {
    faults(&format!("{HEAD}[[claim]]\n{lines}\n"))
}

#[test]
fn every_fault_has_its_place_and_its_mend() {
    let good = "quantity = \"reaction\"\nat = \"B\"\ncombination = \"S1\"\nvalue = \"1 kN\"";
    assert_eq!(claim(good), Vec::<String>::new());
    let cases: &[(&str, &str, &str)] = &[
        (
            "quantity = \"reaction\"",
            "quantity = \"reacton\"",
            "9: quantity cannot be \"reacton\" (did you mean reaction?)",
        ),
        ("at = \"B\"", "at = \"Bb\"", "10: there is no support \"Bb\" (did you mean B?)"),
        ("combination = \"S1\"", "combination = \"S9\"", "11: there is no combination \"S9\" (did you mean S1?)"),
        ("combination = \"S1\"", "case = \"H\"", "11: there is no case \"H\""),
        ("value = \"1 kN\"", "value = \"1 kNm\"", "12: value: unknown unit \"kNm\""),
        ("value = \"1 kN\"", "value = \"1 kN m\"", "12: value: \"kN m\" is not a unit of force"),
        ("value = \"1 kN\"", "value = 1", "12: value is a bare number where a unit belongs"),
        ("value = \"1 kN\"", "value = \"1,5 kN\"", "12: value: a decimal comma"),
        ("value = \"1 kN\"", "value = \"nan kN\"", "12: value: a plain decimal number was expected"),
        ("value = \"1 kN\"", "valeu = \"1 kN\"", "12: "),
        ("value = \"1 kN\"", "value = \"1 kN\"\ntolerance = \"1 m\"", "13: tolerance: \"m\" is not a unit of force"),
        ("value = \"1 kN\"", "value = \"1 kN\"\ntolerance = \"-3 %\"", "13: a tolerance in % lies between 0 and 100"),
        ("value = \"1 kN\"", "value = \"1 kN\"\nside = \"up\"", "13: side cannot be \"up\""),
        (
            "value = \"1 kN\"",
            "value = \"1 kN\"\nmeasured = \"cord\"",
            "13: measured cannot be \"cord\" (did you mean chord?)",
        ),
        (
            "value = \"1 kN\"",
            "value = \"1 kN\"\nlimit = \"totl\"",
            "13: there is no limit \"totl\" (did you mean total?)",
        ),
        ("value = \"1 kN\"", "value = \"1 kN\"\nreference = 4", "13: reference must be text"),
    ];
    for (old, new, wanted) in cases {
        let found = claim(&good.replace(old, new));
        assert!(found.iter().any(|said| said.starts_with(wanted)), "{new}: wanted {wanted}, found {found:?}");
    }
    let along: &[(&str, &str)] = &[
        (
            "quantity = \"moment\"\nat = \"A-B\"\ncombination = \"S1\"\nvalue = \"1 kN m\"",
            "names a span without saying which extreme",
        ),
        (
            "quantity = \"moment\"\nat = \"A-B\"\nextreme = \"most\"\ncombination = \"S1\"\nvalue = \"1 kN m\"",
            "extreme cannot be \"most\"",
        ),
        (
            "quantity = \"moment\"\nat = \"A-C\"\nextreme = \"max\"\ncombination = \"S1\"\nvalue = \"1 kN m\"",
            "there is no span \"A-C\"",
        ),
        ("quantity = \"moment\"\nat = \"9 m\"\ncombination = \"S1\"\nvalue = \"1 kN m\"", "at lies off the member"),
        (
            "quantity = \"moment\"\nat = \"nowhere\"\ncombination = \"S1\"\nvalue = \"1 kN m\"",
            "is no place on the member",
        ),
        ("quantity = \"redundant\"\nat = \"B\"\ncombination = \"S1\"\nvalue = \"1 kN\"", "names no redundant"),
        (
            "quantity = \"utilisation\"\nat = \"A-B\"\ncombination = \"S1\"\nvalue = \"high\"",
            "a utilisation is a plain number",
        ),
        ("quantity = \"verdict\"\ncombination = \"S1\"\nvalue = \"ok\"", "value cannot be \"ok\""),
        ("quantity = \"reaction\"\nat = \"B\"\nvalue = \"1 kN\"", "names neither case nor combination"),
        (
            "quantity = \"reaction\"\nat = \"B\"\ncase = \"G\"\ncombination = \"S1\"\nvalue = \"1 kN\"",
            "names both a case and a combination",
        ),
        ("quantity = \"reaction\"\ncombination = \"S1\"\nvalue = \"1 kN\"", "at"),
    ];
    for (lines, wanted) in along {
        let found = claim(lines);
        assert!(found.iter().any(|said| said.contains(wanted)), "{lines}: wanted {wanted}, found {found:?}");
    }
}

#[test]
fn faults_of_the_head_are_reported_together() {
    let text = "format = 2\ndeck = 3\nblind = \"yes\"\nbilnd = true\n[reviewed]\nrevision = \"A\"\n[reviewer]\nname = \"\"\ndate = 2026-11-30T10:00:00\n[[claim]]\nquantity = \"reaction\"\n";
    let found = faults(text).join("\n");
    for wanted in [
        "this format of claims",
        "deck",
        "blind",
        "bilnd",
        "number",
        "date must be a TOML date without a time",
        "at",
        "value",
        "neither case nor combination",
    ] {
        assert!(found.contains(wanted), "{wanted} is not in\n{found}");
    }
    assert_eq!(faults("format = 1\nformat = ").len(), 2, "broken TOML is reported alone");
    assert!(faults(HEAD).iter().any(|said| said.contains("claim")));
}
