//! Random changes to decks: never a panic, always a member or a fault with its place.

use proptest::prelude::*;
use proptest::sample::Index;

use proofspan::calculation::{Calculation, Fault, member};
use proofspan::deck::starter;
use proofspan::diagnostic::render;

const DECKS: [&str; 5] = [
    include_str!("../../examples/intake-beam.toml"),
    include_str!("../../examples/gallery-girder.toml"),
    include_str!("../../examples/jetty-bracket.toml"),
    include_str!("../../examples/service-walkway.toml"),
    include_str!("../../examples/us-roof-beam.toml"),
];

const SCRAPS: [&str; 40] = [
    "",
    " ",
    "\"",
    "'",
    "\n",
    "=",
    "[",
    "]",
    "{",
    "}",
    "#",
    ",",
    ".",
    "-",
    "/",
    "^",
    "*",
    "0",
    "9",
    "1e60",
    "-1",
    "nan",
    "inf",
    "true",
    "2026-11-30",
    "m",
    "kN",
    "end",
    "start",
    "é",
    "⁴",
    "\u{202e}",
    "\u{0}",
    "\u{9b}",
    "\\u0000",
    "12 ft -6 in",
    "[[segment]]\n",
    "[support.B]\n",
    "pcf^9",
    "1e-29",
];

/// One change to a text.
#[derive(Clone, Debug)]
enum Change {
    Insert(Index, Index),
    Replace(Index, Index),
    Remove(Index, u8),
    Digit(Index, u8),
    LineOut(Index),
    LineTwice(Index, Index),
    Word(Index, Index),
}

fn change() -> impl Strategy<Value = Change> {
    let at = any::<Index>;
    prop_oneof![
        (at(), at()).prop_map(|(a, b)| Change::Insert(a, b)),
        (at(), at()).prop_map(|(a, b)| Change::Replace(a, b)),
        (at(), 1_u8..6).prop_map(|(a, n)| Change::Remove(a, n)),
        (at(), 0_u8..10).prop_map(|(a, n)| Change::Digit(a, n)),
        at().prop_map(Change::LineOut),
        (at(), at()).prop_map(|(a, b)| Change::LineTwice(a, b)),
        (at(), at()).prop_map(|(a, b)| Change::Word(a, b)),
    ]
}

fn changed(text: &str, change: &Change) -> String {
    let mut letters: Vec<char> = text.chars().collect();
    if letters.is_empty() {
        letters.push(' ');
    }
    let mut lines: Vec<&str> = text.lines().collect();
    match change {
        Change::Insert(at, scrap) => {
            let at = at.index(letters.len());
            letters.splice(at..at, scrap.get(&SCRAPS).chars());
        }
        Change::Replace(at, scrap) => {
            let at = at.index(letters.len());
            letters.splice(at..=at, scrap.get(&SCRAPS).chars());
        }
        Change::Remove(at, count) => {
            let at = at.index(letters.len());
            let to = (at + usize::from(*count)).min(letters.len());
            letters.drain(at..to);
        }
        Change::Digit(at, digit) => {
            let digits: Vec<usize> = (0..letters.len()).filter(|index| letters[*index].is_ascii_digit()).collect();
            if !digits.is_empty() {
                letters[*at.get(&digits)] = char::from(b'0' + digit);
            }
        }
        Change::LineOut(at) if !lines.is_empty() => {
            lines.remove(at.index(lines.len()));
            return lines.join("\n");
        }
        Change::LineTwice(from, to) if !lines.is_empty() => {
            let line = lines[from.index(lines.len())];
            lines.insert(to.index(lines.len()), line);
            return lines.join("\n");
        }
        Change::Word(from, to) => {
            let words: Vec<&str> = text.split_inclusive(' ').collect();
            if !words.is_empty() {
                let mut words = words.clone();
                let word = words[from.index(words.len())];
                let to = to.index(words.len());
                words[to] = word;
                return words.concat();
            }
        }
        Change::LineOut(_) | Change::LineTwice(..) => {}
    }
    letters.into_iter().collect()
}

/// Reads a text and holds what is said of it against what must always hold.
fn check(text: &str) -> Result<(), String> {
    let findings = match member(text) {
        Ok(member) => {
            if member.segments.is_empty() || member.combinations.is_empty() {
                return Err("a member without segments or combinations".to_owned());
            }
            member.warnings
        }
        Err(faults) if faults.is_empty() => return Err("refused without a fault".to_owned()),
        Err(faults) => faults,
    };
    for finding in &findings {
        let place = finding.span.clone().filter(|span| text.get(span.clone()).is_some());
        if place.is_none() || finding.line_column(text).is_none() || finding.message.is_empty() {
            return Err(format!("a finding without a place: {finding:?}"));
        }
    }
    let shown = render(&findings, "deck.toml", text);
    match shown.chars().find(|letter| letter.is_control() && *letter != '\n') {
        Some(letter) => Err(format!("{letter:?} reaches the terminal")),
        None => Ok(()),
    }
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 400, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn a_changed_deck_is_a_member_or_has_a_fault(
        deck in 0_usize..DECKS.len(),
        changes in proptest::collection::vec(change(), 1..6),
    ) {
        let text = changes.iter().fold(DECKS[deck].to_owned(), |text, change| changed(&text, change));
        prop_assert!(check(&text).is_ok(), "{}\n{text}", check(&text).unwrap_err());
    }

    #[test]
    fn a_changed_deck_that_is_lawful_is_solved_or_refused(
        deck in 0_usize..DECKS.len(),
        changes in proptest::collection::vec(change(), 1..4),
    ) {
        let text = changes.iter().fold(DECKS[deck].to_owned(), |text, change| changed(&text, change));
        if let Err(fault) = Calculation::new(&text) {
            let program = matches!(fault, Fault::Program(_));
            prop_assert!(!program, "{fault:?}\n{text}");
        }
    }

    #[test]
    fn any_text_is_answered(text in "\\PC{0,200}") {
        prop_assert!(check(&text).is_ok(), "{}\n{text}", check(&text).unwrap_err());
    }

    #[test]
    fn any_quantity_is_answered(figure in "[-+0-9., e]{1,6}", unit in "[a-zA-Z0-9^/* ·⁴²'\"()-]{0,8}") {
        let text = starter().replacen("8356 cm^4", &format!("{figure}{unit}"), 1);
        prop_assert!(check(&text).is_ok(), "{}\n{text}", check(&text).unwrap_err());
    }
}

#[test]
fn every_deck_cut_short_anywhere_is_answered() {
    let text = DECKS[0];
    for end in (0..text.len()).filter(|end| text.is_char_boundary(*end)) {
        let said = check(&text[..end]);
        assert!(said.is_ok(), "{said:?} at {end}");
    }
}
