//! How fast hypotheses are tried: printed, never asserted.
#![allow(clippy::unwrap_used, clippy::disallowed_types, clippy::indexing_slicing)]

use std::time::Instant;

use proofspan::analysis::solve;
use proofspan::calculation;
use proofspan::member::Measured;
use proofspan::review::ask::{Along, Ask, Of, Question, evaluate};
use proofspan::review::search::{Engine, Evidence, explain};

/// A member of many spans, stepped in each.
fn long(spans: usize) -> String {
    let mut text = String::from(
        "format = 1\n[title]\nproject = \"p\"\nnumber = \"n\"\nsubject = \"s\"\nrevision = \"A\"\ndate = 2026-11-30\n\
         [section.a]\nE = \"210 GPa\"\nI = \"8356 cm^4\"\nweight = \"0.42 kN/m\"\n\
         [section.b]\nE = \"210 GPa\"\nI = \"16000 cm^4\"\nweight = \"0.6 kN/m\"\n[support.S0]\nat = \"0 m\"\nkind = \"pinned\"\n",
    );
    let mut loads = Vec::new();
    for span in 0..spans {
        text += "[[segment]]\nlength = \"3.5 m\"\nsection = \"a\"\n[[segment]]\nlength = \"1.5 m\"\nsection = \"b\"\n";
        text += &format!("[support.S{}]\nat = \"{} m\"\nkind = \"roller\"\n", span + 1, 5 * (span + 1));
        loads.push(format!("{{ kind = \"point\", p = \"{} kN\", at = \"{} m\" }}", 10 + span % 7, 5 * span + 2));
    }
    text += "[case.G]\nnature = \"permanent\"\nloads = [{ kind = \"self_weight\" }]\n";
    text += &format!("[case.Q]\nnature = \"imposed\"\nloads = [{}]\n", loads.join(", "));
    text + "[combination.U1]\npurpose = \"strength\"\nfactors = { G = 1.35, Q = 1.5 }\n"
}

fn main() {
    for spans in [10, 40] {
        let member = calculation::member(&long(spans)).unwrap();
        let analysis = solve(&member).unwrap();
        let of = Of::Combination("U1".to_owned());
        let start = Instant::now();
        let evidence: Vec<Evidence> = ["S1", "S2", "S3", "S4"]
            .into_iter()
            .map(|support| {
                let question = Question { of: of.clone(), ask: Ask::Reaction { support: support.to_owned() } };
                let claimed = 1.171 * evaluate(&question, &member, &analysis).unwrap();
                Evidence { question, claimed, tolerance: 0.005 * claimed, differs: true }
            })
            .collect();
        let findings = explain(&member, &analysis, &evidence);
        println!("{spans} spans: a whole search, {} hypotheses, in {:.0?}", findings.tried, start.elapsed());
    }
    let member = calculation::member(include_str!("../examples/gallery-girder.toml")).unwrap();
    let analysis = solve(&member).unwrap();
    let of = Of::Combination("U1".to_owned());
    let question = |ask: Ask| Question { of: of.clone(), ask };
    let reaction = |support: &str| question(Ask::Reaction { support: support.to_owned() });
    let peak = |along: Along| {
        question(Ask::Extreme { along, span: "A-B".to_owned(), max: true, measured: Measured::Absolute })
    };
    let sums = vec![reaction("A"), reaction("B"), reaction("C"), reaction("D")];
    let mixed = vec![reaction("B"), reaction("D"), peak(Along::Moment), peak(Along::Deflection)];
    println!("gallery girder: three spans and an overhang, one core");
    for (what, questions) in [("four reactions", sums), ("two reactions, two greatest values", mixed)] {
        let start = Instant::now();
        let engine = Engine::new(&member, &analysis, questions.clone()).unwrap();
        let built = start.elapsed();
        let sizes = (engine.catalogue.len(), engine.catalogue.structures.len());
        // Claims that nothing gives: nothing leaves the search early by success.
        let evidence: Vec<Evidence> = questions
            .iter()
            .enumerate()
            .map(|(claim, question)| {
                let claimed = engine.figure(claim).unwrap() * 1.171;
                Evidence { question: question.clone(), claimed, tolerance: 0.005 * claimed.abs(), differs: true }
            })
            .collect();
        let mut every = 0_u64;
        let mut sum = 0.0;
        let start = Instant::now();
        for _ in 0..20 {
            engine.pairs(|_, value| {
                every += 1;
                sum += (0..4).filter_map(value).sum::<f64>();
            });
        }
        let rate = every as f64 / start.elapsed().as_secs_f64();
        let target = engine.target(&evidence);
        let (mut tried, mut fits) = (0_u64, 0_u64);
        let start = Instant::now();
        for _ in 0..200 {
            engine.pairs(|_, value| {
                tried += 1;
                fits += u64::from(target.fit(value).is_some());
            });
        }
        let searched = tried as f64 / start.elapsed().as_secs_f64();
        let start = Instant::now();
        let doubles = engine.doubles().len();
        let solved = start.elapsed();
        let start = Instant::now();
        let findings = explain(&member, &analysis, &evidence);
        let whole = start.elapsed();
        println!("{what}: {} mistakes, {} of them solved anew with all loads in {built:.0?}", sizes.0, sizes.1);
        println!("  all four figures of every pair: {rate:.0} hypotheses a second ({:.0} pairs)", every as f64 / 20.0);
        println!("  tried against four claims:      {searched:.0} hypotheses a second ({fits} fit)");
        println!("  pairs of two changes of the structure, each solved in full: {doubles} in {solved:.0?}");
        println!(
            "  a whole search, everything included: {} hypotheses in {whole:.0?} (checksum {sum:e})",
            findings.tried
        );
    }
}
