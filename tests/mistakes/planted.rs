//! Planted mistakes are found, invented ones are not.

use super::decks::samples;
use super::{combination, evidence, question, solved, three, tolerance};
use proofspan::review::ask::Question;
use proofspan::review::search::{Engine, Evidence, Explanation, Hypothesis, Vector, explain};

/// A small generator of numbers in [0, 1): the same ones in every run (Numerical Recipes' quick generator, from memory).
struct Dice(u32);

impl Dice {
    fn roll(&mut self) -> f64 {
        self.0 = self.0.wrapping_mul(1_664_525).wrapping_add(1_013_904_223);
        f64::from(self.0 >> 8) / f64::from(1_u32 << 24)
    }
}

struct Bench {
    name: &'static str,
    deck: String,
    questions: Vec<Question>,
}

fn benches() -> Vec<Bench> {
    let each = samples().into_iter();
    each.map(|sample| Bench {
        name: sample.name,
        questions: sample.asked.iter().map(|what| question(&combination(sample.of), what)).collect(),
        deck: sample.deck,
    })
    .collect()
}

/// Figures of an explanation: by solving its member anew, or, for a wrong reading, from the search's own sums.
fn figures(engine: &Engine<'_>, explanation: &Explanation) -> Vec<Vector> {
    let list = std::cell::RefCell::new(Vec::new());
    let look = |hypothesis: Hypothesis, value: &dyn Fn(usize) -> Option<f64>| {
        let mistakes = engine.mistakes(&hypothesis);
        let same = mistakes.len() == explanation.mistakes.len()
            && mistakes.iter().zip(&explanation.mistakes).all(|(mistake, name)| mistake.name == *name)
            && mistakes.iter().zip(&explanation.wheres).all(|(mistake, place)| mistake.place == *place);
        if same {
            list.borrow_mut().push((0..engine.questions.len()).map(value).collect::<Vector>());
        }
    };
    engine.singles(look);
    if explanation.mistakes.len() > 1 {
        engine.pairs(look);
    }
    list.into_inner()
}

/// Whether an explanation names the planted mistakes, or gives the very same claims to their three digits.
fn hits(engine: &Engine<'_>, explanation: &Explanation, planted: &[(String, String)], claimed: &Vector) -> bool {
    let mut said: Vec<(String, String)> =
        explanation.mistakes.iter().cloned().zip(explanation.wheres.iter().cloned()).collect();
    let mut planted = planted.to_vec();
    said.sort();
    planted.sort();
    said == planted
        || figures(engine, explanation).iter().any(|vector| {
            vector.iter().zip(claimed).all(|(found, claimed)| match (found, claimed) {
                (Some(found), Some(claimed)) => {
                    let (found, claimed) = (three(*found), three(*claimed));
                    // A figure on the edge of rounding may fall to either side.
                    (found - claimed).abs() <= 1e-9 * claimed.abs()
                        || (found - claimed).abs() < 0.2 * tolerance(claimed)
                }
                (None, None) => true,
                _ => false,
            })
        })
}

fn planted(engine: &Engine<'_>, hypothesis: &Hypothesis) -> Vec<(String, String)> {
    engine.mistakes(hypothesis).iter().map(|mistake| (mistake.name.clone(), mistake.place.clone())).collect()
}

fn own(engine: &Engine<'_>) -> Vector {
    (0..engine.questions.len()).map(|claim| engine.figure(claim)).collect()
}

/// The claims that somebody who made these mistakes would write, from a full solution wherever there is one.
fn written(engine: &Engine<'_>, hypothesis: &Hypothesis, value: &dyn Fn(usize) -> Option<f64>) -> Vector {
    match engine.exact(hypothesis) {
        Some((_, vector)) => vector,
        None => (0..engine.questions.len()).map(value).collect(),
    }
}

#[test]
fn a_single_mistake_is_found() {
    let (mut tried, mut found, mut open) = (0, 0_u32, 0);
    let benches = benches();
    assert!(benches.len() >= 12);
    for bench in &benches {
        let (member, analysis) = solved(&bench.deck);
        let engine = Engine::new(&member, &analysis, bench.questions.clone()).unwrap();
        let own = own(&engine);
        let mut all: Vec<(Hypothesis, Vector)> = Vec::new();
        engine.singles(|hypothesis, value| all.push((hypothesis, written(&engine, &hypothesis, value))));
        for (hypothesis, claimed) in all {
            let evidence = evidence(&engine.questions, &own, &claimed);
            let differing = evidence.iter().filter(|claim| claim.differs).count();
            if evidence.len() < 4 || differing == 0 {
                continue;
            }
            tried += 1;
            open += usize::from(differing < 3);
            let planted = planted(&engine, &hypothesis);
            let findings = engine.findings(&evidence);
            let hit = findings.explanations.first().is_some_and(|first| hits(&engine, first, &planted, &claimed));
            found += u32::from(hit);
            if !hit {
                let first = findings.explanations.first().map(|first| (&first.mistakes, &first.wheres));
                println!("{}: {planted:?} not first but {first:?}; {differing} differ", bench.name);
            }
            if differing < 3 {
                assert!(findings.remark.is_some(), "{planted:?}");
            }
        }
    }
    let rate = 100.0 * f64::from(found) / f64::from(tried);
    println!(
        "singles: {found} of {tried} first ({rate:.1} %) on {} members; {open} with fewer than 3 differing",
        benches.len()
    );
    assert!(rate >= 95.0);
}

#[test]
fn a_pair_of_mistakes_is_found() {
    let (mut tried, mut found) = (0, 0_u32);
    let mut dice = Dice(7);
    for bench in &benches() {
        let (member, analysis) = solved(&bench.deck);
        let engine = Engine::new(&member, &analysis, bench.questions.clone()).unwrap();
        let own = own(&engine);
        let mut all: Vec<(Hypothesis, Vector)> = Vec::new();
        let mut count = 0;
        engine.pairs(|_, _| count += 1);
        let share = 24.0 / f64::from(count);
        engine.pairs(|hypothesis, value| {
            if dice.roll() < share {
                all.push((hypothesis, written(&engine, &hypothesis, value)));
            }
        });
        let doubles = engine.doubles();
        for (first, second, vector) in doubles {
            if dice.roll() < 8.0 / doubles.len() as f64 {
                let structures = [Some(*first), Some(*second)];
                all.push((Hypothesis { structures, ..Hypothesis::default() }, vector.clone()));
            }
        }
        for (hypothesis, claimed) in all {
            let evidence = evidence(&engine.questions, &own, &claimed);
            // One mistake of the two may leave no trace in four figures; two traces are the least a pair needs.
            if evidence.len() < 4 || evidence.iter().filter(|claim| claim.differs).count() < 2 {
                continue;
            }
            tried += 1;
            let planted = planted(&engine, &hypothesis);
            let findings = engine.findings(&evidence);
            let hit = findings.explanations.iter().take(3).any(|one| hits(&engine, one, &planted, &claimed));
            found += u32::from(hit);
        }
    }
    let rate = 100.0 * f64::from(found) / f64::from(tried);
    println!("pairs: {found} of {tried} among the first three ({rate:.1} %)");
    assert!(tried > 200 && rate >= 80.0);
}

#[test]
fn random_wrong_claims_are_not_explained() {
    let mut dice = Dice(11);
    let counts = [2, 3, 4, 5];
    let rounds = 25;
    let (mut tried, mut named, mut bare) = ([0_u32; 4], [0_u32; 4], [0_u32; 4]);
    for bench in &benches() {
        let (member, analysis) = solved(&bench.deck);
        let mut questions = bench.questions.clone();
        let span = member.spans.iter().find(|span| !span.is_cantilever()).unwrap();
        let middle = (span.from.x() + span.to.x()) / 2.0;
        questions.push(question(&questions[0].of, &format!("V {middle}")));
        let engine = Engine::new(&member, &analysis, questions).unwrap();
        let own = own(&engine);
        for (kind, count) in counts.into_iter().enumerate() {
            for _ in 0..rounds {
                let mut wrong = |index: usize, own: f64| {
                    let off = (0.02 + 0.5 * dice.roll()) * if dice.roll() < 0.5 { -1.0 } else { 1.0 };
                    // A claim that is left out is given as a figure that is none.
                    if index < count { three(own * (1.0 + off)) } else { f64::NAN }
                };
                let each = engine.questions.iter().zip(&own).enumerate();
                let evidence: Vec<Evidence> = each
                    .filter_map(|(index, (question, own))| {
                        let claimed = wrong(index, (*own)?);
                        let tolerance = tolerance(claimed);
                        Some(Evidence { question: question.clone(), claimed, tolerance, differs: true })
                    })
                    .collect();
                assert_eq!(evidence.len(), 5);
                let findings = engine.findings(&evidence);
                let empty = findings.explanations.is_empty();
                tried[kind] += 1;
                named[kind] += u32::from(!empty);
                bare[kind] += u32::from(!empty && findings.remark.is_none());
                assert!(!empty || findings.remark.is_some());
            }
        }
    }
    for (kind, count) in counts.into_iter().enumerate() {
        let rate = 100.0 * f64::from(named[kind]) / f64::from(tried[kind]);
        println!(
            "{count} random wrong claims: {} of {} explained ({rate:.2} %), {} of them without a remark",
            named[kind], tried[kind], bare[kind]
        );
        assert!(count < 5 || rate < 2.0);
    }
}

#[test]
fn claims_that_agree_are_never_explained() {
    for bench in &benches() {
        let (member, analysis) = solved(&bench.deck);
        let engine = Engine::new(&member, &analysis, bench.questions.clone()).unwrap();
        let own = own(&engine);
        let evidence = evidence(&engine.questions, &own, &own);
        assert_eq!(evidence.len(), 4, "{}", bench.name);
        assert!(evidence.iter().all(|claim| !claim.differs));
        let findings = explain(&member, &analysis, &evidence);
        assert!(findings.explanations.is_empty() && findings.remark.is_none() && findings.tried == 0);
    }
}

/// Sabotage: one planted claim spoilt, and the mistake is not named any more.
#[test]
fn a_claim_that_no_mistake_gives_is_not_explained_away() {
    let bench = &benches()[5];
    let (member, analysis) = solved(&bench.deck);
    let engine = Engine::new(&member, &analysis, bench.questions.clone()).unwrap();
    let own = own(&engine);
    let mut claimed = None;
    engine.singles(|hypothesis, value| {
        if engine.mistakes(&hypothesis)[0].name == "settlement-omitted" {
            claimed = Some(written(&engine, &hypothesis, value));
        }
    });
    let claimed = claimed.unwrap();
    let whole = evidence(&engine.questions, &own, &claimed);
    let findings = explain(&member, &analysis, &whole);
    let first = &findings.explanations[0];
    assert_eq!(first.mistakes, ["settlement-omitted"]);
    assert_eq!((first.explains + first.keeps, first.tie), (4, false));
    assert!(first.text.ends_with("would reproduce these figures."), "{}", first.text);
    assert!(first.member.is_some());
    let mut spoilt = whole;
    spoilt[2].claimed *= 1.013;
    let findings = explain(&member, &analysis, &spoilt);
    assert!(!findings.explanations.iter().any(|one| one.mistakes == ["settlement-omitted"]));
}

/// A section about its weak axis with a ratio nobody knows: it is fitted, and said to be.
#[test]
fn an_unknown_ratio_of_both_axes_is_fitted() {
    let bench = &benches()[5];
    let (member, analysis) = solved(&bench.deck);
    let engine = Engine::new(&member, &analysis, bench.questions.clone()).unwrap();
    let own = own(&engine);
    let weak = proofspan::review::mistake::weak_axis(&member, Some(1), 21.7).unwrap();
    let solved = proofspan::analysis::solve(&weak).unwrap();
    let claimed: Vector = engine
        .questions
        .iter()
        .map(|question| proofspan::review::ask::evaluate(question, &weak, &solved).ok())
        .collect();
    let findings = engine.findings(&evidence(&engine.questions, &own, &claimed));
    assert!(!findings.explanations.is_empty(), "{findings:?} {own:?} {claimed:?}");
    let first = &findings.explanations[0];
    assert_eq!(first.mistakes, ["section-weak-axis"]);
    assert_eq!(first.wheres, ["section light"]);
    assert!(first.text.contains("fitted"), "{}", first.text);
}
