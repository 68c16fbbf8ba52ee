//! Every crosscheck catches what it is there for, and nothing that is right.

use proofspan::analysis::Analysis;
use proofspan::calculation::{Calculation, Fault, crosscheck};

const DECKS: [&str; 5] = [
    include_str!("../../examples/intake-beam.toml"),
    include_str!("../../examples/gallery-girder.toml"),
    include_str!("../../examples/jetty-bracket.toml"),
    include_str!("../../examples/service-walkway.toml"),
    include_str!("../../examples/us-roof-beam.toml"),
];

/// What the crosschecks say of an analysis that was tampered with.
fn caught(deck: &str, tamper: impl Fn(&mut Analysis)) -> String {
    let mut calculation = Calculation::new(deck).unwrap();
    assert!(crosscheck(&calculation.member, &calculation.analysis).is_ok());
    tamper(&mut calculation.analysis);
    match crosscheck(&calculation.member, &calculation.analysis) {
        Err(Fault::Disagreement(rows)) => rows.join("\n"),
        other => panic!("nothing was caught: {other:?}"),
    }
}

#[test]
fn a_wrong_reaction_is_caught_by_the_second_method_and_by_equilibrium() {
    for deck in DECKS {
        let said = caught(deck, |analysis| analysis.cases[0].total.reactions[0].force *= 1.0 + 1e-4);
        assert!(said.contains("force of support") && said.contains("by the stiffness method"), "{said}");
        assert!(said.contains("out of balance"), "{said}");
    }
}

#[test]
fn a_wrong_moment_is_caught() {
    let said = caught(DECKS[0], |analysis| analysis.cases[1].total.reactions[0].moment *= 1.0 + 1e-5);
    assert!(said.contains("moment of support A in case Q"), "{said}");
}

#[test]
fn a_wrong_combination_is_caught() {
    let said = caught(DECKS[0], |analysis| analysis.combinations[1].reactions[1].force += 10.0);
    assert!(said.contains("out of balance"), "{said}");
}

#[test]
fn a_wrong_deflection_is_caught() {
    let said = caught(DECKS[1], |analysis| {
        let last = analysis.cases[0].total.pieces.len() - 1;
        analysis.cases[0].total.pieces[last].end.v += 1e-6;
    });
    assert!(said.contains("deflection at x ="), "{said}");
}

#[test]
fn a_flexibility_that_is_not_mirrored_is_caught() {
    let mut calculation = Calculation::new(DECKS[1]).unwrap();
    let value = calculation.analysis.flexibility.upper.get(0, 1);
    assert!(value != 0.0);
    let honest = calculation.analysis.flexibility.upper.clone();
    let mut forged = proofspan::analysis::band::Skyline::default();
    for row in 0..honest.len() {
        let entry = |column| if (row, column) == (1, 0) { value * (1.0 + 1e-4) } else { honest.get(row, column) };
        forged.push((0..=row).map(entry).collect());
    }
    calculation.analysis.flexibility.upper = forged;
    match crosscheck(&calculation.member, &calculation.analysis) {
        Err(Fault::Disagreement(rows)) => assert!(rows.iter().any(|row| row.contains("not symmetric")), "{rows:?}"),
        other => panic!("nothing was caught: {other:?}"),
    }
}

fn solved(deck: &str) -> Calculation {
    let calculation = Calculation::new(deck).unwrap_or_else(|fault| panic!("{fault:?}\n{deck}"));
    calculation.working().unwrap_or_else(|fault| panic!("{fault:?}\n{deck}"));
    calculation
}

const HEAD: &str =
    "format = 1\n[title]\nproject = \"p\"\nnumber = \"n\"\nsubject = \"s\"\nrevision = \"A\"\ndate = 2026-11-30\n";

#[test]
fn a_determinate_member_that_only_settles_is_no_disagreement() {
    let deck = format!(
        "{HEAD}[section.a]\nE = \"210 GPa\"\nI = \"8356 cm^4\"\n[section.b]\nE = \"210 GPa\"\nI = \"3892 cm^4\"\n\
         [[segment]]\nlength = \"3.2 m\"\nsection = \"a\"\n[[segment]]\nlength = \"4 m\"\nsection = \"b\"\n\
         [support.A]\nat = \"0 m\"\nkind = \"pinned\"\n[support.B]\nat = \"end\"\nkind = \"roller\"\n\
         [case.T]\nnature = \"movement\"\nloads = [{{ kind = \"settlement\", support = \"B\", by = \"6 mm\" }}]\n\
         [combination.C]\npurpose = \"serviceability\"\nfactors = {{ T = 1.0 }}\n"
    );
    solved(&deck);
}

#[test]
fn residuals_of_unit_states_are_measured_by_the_figures_of_their_kind() {
    solved(&DECKS[1].replacen("I = \"8356 cm^4\"", "I = \"14210 cm^4\"", 1));
    solved(&DECKS[1].replacen("14 kN/mm", "14000 kN/mm", 1));
}

#[test]
fn strong_tapers_agree_by_both_methods() {
    for (ratio, wanted) in [(70, 1e-10), (200, 1e-9), (1000, 1e-7)] {
        let deck = format!(
            "{HEAD}[section.a]\nE = \"10 GPa\"\nI = \"{ratio}e-5 m^4\"\n[section.b]\nE = \"10 GPa\"\nI = \"1e-5 m^4\"\n\
             [[segment]]\nlength = \"4 m\"\nsection = \"a\"\ntaper = {{ to = \"b\", law = \"linear\" }}\n\
             [support.A]\nat = \"0 m\"\nkind = \"fixed\"\n[support.B]\nat = \"end\"\nkind = \"elastic\"\nvertical = \"2 kN/mm\"\nrotation = \"free\"\n\
             [case.Q]\nnature = \"imposed\"\nloads = [{{ kind = \"uniform\", w = \"3 kN/m\" }}]\n\
             [combination.C]\npurpose = \"serviceability\"\nfactors = {{ Q = 1.0 }}\n"
        );
        let agreement = Calculation::new(&deck).unwrap().agreement.second_method;
        assert!(agreement < wanted, "ratio {ratio}: {agreement:e}");
    }
}
