//! The auditor's scorecard of thirty points: what a sheet can meet by itself, held by what stands on it.

use proofspan::calculation::Calculation;
use proofspan::issue::{self, Wishes};

const DECK: &str = include_str!("../../examples/gallery-girder.toml");

fn pages(deck: &str) -> Vec<String> {
    let calculation = Calculation::new(deck).unwrap_or_else(|fault| panic!("{fault:?}"));
    let working = calculation.working().unwrap();
    let wishes = Wishes::of(&calculation.member, "gallery-girder.toml");
    let text = issue::text(&calculation, &working, deck, &wishes).unwrap();
    text.into_iter().map(|page| page.split_whitespace().collect::<Vec<_>>().join(" ")).collect()
}

/// Point, sheet (0: any), what must stand there.
const POINTS: [(u32, usize, &str); 34] = [
    (1, 1, "TPH-021"),
    (1, 1, "Tidewater pump house"),
    (1, 1, "revision B"),
    (2, 0, "sheet 2 of"),
    (3, 1, "Prepared"),
    (3, 1, "Checked"),
    (3, 1, "Approved"),
    (4, 0, "results that moved"),
    (4, 0, "All reactions; deflection of B-C"),
    (5, 2, "Contents"),
    (6, 1, "To justify this member"),
    (6, 2, "Acceptance criteria"),
    (7, 2, "Sources of the input"),
    (7, 2, "Ground report TPH-G2, table 3"),
    (8, 2, "Source"),
    (9, 1, "Waiting for confirmation"),
    (10, 0, "Signs"),
    (11, 0, "one force or moment is released"),
    (13, 0, "kN m"),
    (14, 0, "Condition number of the flexibilities"),
    (14, 0, "determinant"),
    (15, 0, "of loads against reactions"),
    (16, 0, "was computed again by a stiffness method"),
    (17, 0, "own without this sheet"),
    (18, 0, "remarks and replies"),
    (19, 2, "purpose"),
    (20, 2, "chord"),
    (21, 0, "utilisation"),
    (21, 0, "holds"),
    (22, 0, "Its tests hold it against published cases"),
    (23, 0, "Annex: the input"),
    (27, 0, "digital signature"),
    (29, 0, "not timestamped"),
    (30, 0, "Events"),
];

fn missing(pages: &[String]) -> Vec<String> {
    let stands = |sheet: usize, text: &str| {
        let on = |page: &String| page.to_lowercase().contains(&text.to_lowercase());
        if sheet == 0 { pages.iter().any(on) } else { pages.iter().skip(sheet - 1).take(2).any(on) }
    };
    let points = POINTS.iter().filter(|(_, sheet, text)| !stands(*sheet, text));
    points.map(|(point, sheet, text)| format!("point {point}: \"{text}\" on sheet {sheet}")).collect()
}

#[test]
fn a_sheet_meets_the_points_that_a_sheet_can_meet() {
    let pages = pages(DECK);
    assert_eq!(missing(&pages), Vec::<String>::new(), "{}\n{}", pages[0], pages[1]);
    // It sees what it looks for: without the first sheets something is missing.
    assert!(missing(&pages[3..]).len() > 5);
    let count = pages.len();
    for (index, page) in pages.iter().enumerate() {
        assert!(page.contains("TPH-021") && page.contains("revision B"), "{page}");
        assert!(page.contains(&format!("sheet {} of {count}", index + 1)), "{page}");
        assert!(page.contains("PRELIMINARY, NOT CHECKED"), "{page}");
    }
}

#[test]
fn the_example_of_the_readme_keeps_its_length() {
    let deck = include_str!("../../examples/intake-beam.toml");
    assert!(pages(deck).len() <= 22);
    let calculation = Calculation::new(deck).unwrap();
    let working = calculation.working().unwrap();
    let wishes = Wishes { brief: true, ..Wishes::of(&calculation.member, "intake-beam.toml") };
    assert!(issue::text(&calculation, &working, deck, &wishes).unwrap().len() <= 3, "the short form");
}

/// Eight spans, three cases, twelve combinations.
fn long() -> String {
    use std::fmt::Write;
    let mut deck =
        "format = 1\n[title]\nproject = \"p\"\nnumber = \"n\"\nsubject = \"s\"\nrevision = \"A\"\ndate = 2026-11-30\n\
        [section.s]\nE = \"210 GPa\"\nI = \"8356 cm^4\"\nweight = \"0.42 kN/m\"\ndepth = \"300 mm\"\n"
            .to_owned();
    let mut ends = vec![0.0];
    for span in 0..8 {
        let length = 5.0 + f64::from(span % 3) * 0.5;
        let _ = writeln!(deck, "[[segment]]\nlength = \"{length} m\"\nsection = \"s\"");
        ends.push(ends.last().unwrap() + length);
    }
    for (index, at) in ends.iter().enumerate() {
        let _ = writeln!(deck, "[support.S{index}]\nat = \"{at} m\"\nkind = \"roller\"");
    }
    deck += "[case.G]\nnature = \"permanent\"\nloads = [{ kind = \"self_weight\" }, { kind = \"uniform\", w = \"4 kN/m\" }]\n";
    for (case, first) in [("Q1", 0), ("Q2", 1)] {
        let load = |span: usize| {
            format!(
                "{{ kind = \"uniform\", w = \"6 kN/m\", from = \"{} m\", to = \"{} m\" }}",
                ends[span],
                ends[span + 1]
            )
        };
        let loads: Vec<String> = (first..8).step_by(2).map(load).collect();
        let _ = writeln!(deck, "[case.{case}]\nnature = \"imposed\"\nloads = [{}]", loads.join(", "));
    }
    let mut number = 0;
    for (purpose, g, q) in [("serviceability", "1.0", "1.0"), ("strength", "1.35", "1.5"), ("strength", "1.0", "1.5")] {
        for more in ["", ", Q1 = q", ", Q2 = q", ", Q1 = q, Q2 = q"] {
            number += 1;
            let factors = format!("G = {g}{}", more.replace("= q", &format!("= {q}")));
            let _ = writeln!(deck, "[combination.C{number}]\npurpose = \"{purpose}\"\nfactors = {{ {factors} }}");
        }
    }
    deck + "[limit.total]\nratio = 250\npurpose = \"serviceability\"\nbasis = \"Project specification\"\n"
}

#[test]
fn eight_spans_and_twelve_combinations_stay_below_sixty_pages() {
    let count = pages(&long()).len();
    assert!(count < 60, "{count} pages");
}
