//! Faults of decks: all at once, each with its place.

use proofspan::calculation::member;
use proofspan::deck::starter;

/// Messages with their lines for a starter deck changed by replacing text.
fn faults(changes: &[(&str, &str)]) -> Vec<(usize, String)> {
    let mut text = starter().to_owned();
    for (from, to) in changes {
        assert!(text.contains(from), "{from}");
        text = text.replacen(from, to, 1);
    }
    let found = member(&text).err().unwrap_or_default();
    found
        .iter()
        .map(|fault| (fault.line_column(&text).map_or(0, |place| place.0), fault.message.clone() + " | " + &fault.hint))
        .collect()
}

fn one(changes: &[(&str, &str)], words: &str) {
    let found = faults(changes);
    assert!(found.len() == 1 && found[0].1.contains(words), "{words}: {found:?}");
}

#[test]
fn single_faults_say_what_is_wrong_and_how_to_mend_it() {
    one(&[("at = \"end\"", "at = \"9 m\"")], "off the member");
    one(&[("kind = \"roller\"", "kind = \"rolled\"")], "did you mean roller?");
    one(&[("ratio = 250", "ratio = 0")], "greater than zero");
    one(&[("basis = ", "base = "), ("clause 4.2\"", "clause 4.2\"\nbasis = \"x\"")], "did you mean basis?");
    one(&[("I = \"8356 cm^4\"", "I = \"8356 cm\"")], "not a unit of second moment of area");
    one(&[("I = \"8356 cm^4\"", "I = 8356")], "bare number where a unit belongs");
    one(&[("w = \"3.5 kN/m\"", "w = \"3,5 kN/m\"")], "decimal comma");
    one(&[("w = \"3.5 kN/m\"", "w = \"3.5 kM/m\"")], "unknown unit");
    one(&[("factors = { G = 1.35, Q = 1.5 }", "factors = { G = 1.35, R = 1.5 }")], "there is no case \"R\"");
    one(&[("section = \"light\"", "section = \"ligth\"")], "did you mean light?");
    one(&[("length = \"4 m\"", "length = \"0 m\"")], "greater than zero");
}

#[test]
fn a_mechanism_names_the_movement_that_nothing_holds() {
    let limit =
        "[limit.total]\nratio = 250\npurpose = \"serviceability\"\nbasis = \"Project specification, clause 4.2\"\n";
    let guided = [("kind = \"fixed\" ", "kind = \"guided\" "), ("kind = \"roller\"", "kind = \"guided\""), (limit, "")];
    one(&guided, "nothing holds the vertical shift");
    let hinges = "[hinge.H]\nat = \"2 m\"\n[hinge.J]\nat = \"4 m\"\n[support.B]";
    one(&[("[support.B]", hinges)], "nothing holds");
}

#[test]
fn all_faults_of_a_deck_are_reported_in_one_run() {
    let found = faults(&[
        ("format = 1", "format = 2"),
        ("subject = \"Starter beam\"\n", ""),
        ("E = \"210 GPa\"", "E = \"-210 GPa\""),
        ("kind = \"roller\"", "kind = \"rolling\""),
        ("q = \"4 kN/m^2\"", "q = \"4 kN\""),
        ("purpose = \"strength\"", "purpose = \"strenght\""),
        ("ratio = 250", "ratio = \"250\""),
    ]);
    assert!(found.len() >= 7, "{found:?}");
    assert!(found.iter().skip(1).all(|(line, _)| *line > 0));
}

#[test]
fn redundants_are_checked() {
    let choose = |list: &str| format!("[member]\nredundants = [{list}]\n\n[support.A]");
    one(&[("[support.A]", &choose("\"R.A\", \"R.B\""))], "R.B cannot be released as well");
    one(&[("[support.A]", &choose(""))], "the member has 1 redundant, but 0 are chosen");
    assert!(faults(&[("[support.A]", &choose("\"M.A\""))]).is_empty());
}
