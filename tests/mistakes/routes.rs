//! A sum of figures found once, and the rewritten member solved in full: the same.

use super::decks::samples;
use super::{combination, question, solved};
use proofspan::calculation::both_routes;
use proofspan::member::Member;
use proofspan::review::ask::{Along, Ask, Of, Question};
use proofspan::review::mistake::{Catalogue, NAMES};
use proofspan::review::search::{Engine, Hypothesis};
use proofspan::working;

fn questions(member: &Member, of: &str, asked: &[&str]) -> Vec<Question> {
    let of = combination(of);
    let mut list: Vec<Question> = asked.iter().map(|what| question(&of, what)).collect();
    let span = member.spans.iter().find(|span| !span.is_cantilever()).unwrap();
    for what in ["vmax", "cmax", "cmin", "Mmax", "Mmin", "Vmax", "tmax"] {
        list.push(question(&of, &format!("{what} {}", span.name)));
    }
    list.push(question(&Of::Case(member.cases[0].name.clone()), &format!("V {}", span.to.exact())));
    list.push(question(&Of::Case(member.cases[0].name.clone()), "t 1"));
    for combination in &member.combinations {
        if member.limits.iter().any(|limit| limit.combinations.contains(&0)) {
            list.push(question(&super::combination(&combination.name), &format!("u {}", span.name)));
            list.push(question(&super::combination(&combination.name), "ok"));
        }
    }
    list
}

/// The greatest difference of both routes, relative to the greatest figure that the same question has anywhere.
fn difference(
    engine: &Engine<'_>,
    hypothesis: &Hypothesis,
    value: &dyn Fn(usize) -> Option<f64>,
    scales: &[f64],
) -> f64 {
    let Some((_, exact)) = engine.exact(hypothesis) else { return 0.0 };
    let mut greatest = 0.0_f64;
    for (claim, exact) in exact.iter().enumerate() {
        match (value(claim), exact) {
            (Some(sum), Some(exact)) => {
                let scale = exact.abs().max(scales[claim]);
                greatest = greatest.max((sum - exact).abs() / scale);
            }
            (None, None) => {}
            (sum, exact) => panic!("claim {claim}: {sum:?} {exact:?} {:?}", engine.questions[claim]),
        }
    }
    greatest
}

/// By question, the greatest figure of its kind: a least value may be nought but for rounding.
fn scales(engine: &Engine<'_>) -> Vec<f64> {
    let kind = |claim: usize| match &engine.questions[claim].ask {
        Ask::Station { along, .. } | Ask::Extreme { along, .. } => *along as u8,
        Ask::Reaction { .. } | Ask::Redundant { .. } => Along::Shear as u8,
        Ask::ReactionMoment { .. } => Along::Moment as u8,
        _ => u8::MAX,
    };
    let count = engine.questions.len();
    let figure = |claim: usize| engine.figure(claim).unwrap_or(0.0).abs();
    let of = |claim: usize| (0..count).filter(move |other| kind(*other) == kind(claim)).map(figure);
    (0..count).map(|claim| of(claim).fold(1e-9, f64::max)).collect()
}

#[test]
fn both_routes_to_a_hypothesis_give_the_same_figures() {
    let (mut singles, mut pairs, mut worst) = (0, 0, 0.0_f64);
    for sample in samples() {
        let (member, analysis) = solved(&sample.deck);
        let engine = Engine::new(&member, &analysis, questions(&member, sample.of, &sample.asked)).unwrap();
        let scales = scales(&engine);
        let mut check = |hypothesis: Hypothesis, value: &dyn Fn(usize) -> Option<f64>| {
            let found = difference(&engine, &hypothesis, value, &scales);
            worst = worst.max(found);
            let names: Vec<&str> = engine.mistakes(&hypothesis).iter().map(|mistake| mistake.name.as_str()).collect();
            assert!(found <= 1e-9, "{}: {names:?} {hypothesis:?} {found:e}", sample.name);
        };
        engine.singles(|hypothesis, value| {
            singles += 1;
            check(hypothesis, value);
        });
        let mut count = 0;
        engine.pairs(|hypothesis, value| {
            count += 1;
            if count % 97 == 0 {
                pairs += 1;
                check(hypothesis, value);
            }
        });
    }
    println!("{singles} singles and {pairs} pairs by both routes: greatest relative difference {worst:e}");
}

/// Whether a taper changes I more than twentyfold.
fn strong(member: &Member) -> bool {
    member.segments.iter().any(|segment| {
        segment.taper.is_some_and(|taper| {
            let inertia = |section: usize| member.sections[section].second_moment.value.si();
            let ratio = inertia(segment.section) / inertia(taper.to);
            ratio.max(1.0 / ratio) > 20.0
        })
    })
}

/// A rewritten member is one like any other: the second method agrees on it, and its derivation closes.
#[test]
fn a_rewritten_member_can_be_narrated_and_checked() {
    let (mut count, mut noise) = (0, 0);
    for sample in samples() {
        let (member, analysis) = solved(&sample.deck);
        let engine = Engine::new(&member, &analysis, Vec::new()).unwrap();
        let mut seen: Vec<String> = Vec::new();
        engine.singles(|hypothesis, _| {
            let name = engine.mistakes(&hypothesis)[0].name.clone();
            if seen.contains(&name) {
                return;
            }
            seen.push(name.clone());
            let Some((changed, _)) = engine.rewritten(&hypothesis) else { return };
            let solved = proofspan::analysis::solve(&changed).unwrap();
            // On very strong tapers the second method's quadrature loses digits: nothing can be said there.
            let rows = if strong(&changed) { Vec::new() } else { both_routes(&changed, &solved) };
            for row in rows {
                // A case without any force is measured by nothing: what is left there is rounding.
                let rounding = row.first.abs().max(row.second.abs()) < 1e-6;
                assert!(row.difference < 1e-6 || rounding, "{} {name}: {row:?}", sample.name);
            }
            let told = working::narrate(&changed, &solved, &[]);
            let real = |mismatch: &working::Mismatch| (mismatch.expected - mismatch.found).abs() > 1e-15;
            match told {
                Ok(_) => count += 1,
                // What differs by less than any figure can show is rounding where nothing is left.
                Err(list) => {
                    assert!(!list.iter().any(real), "{} {name}: {list:?}", sample.name);
                    noise += 1;
                }
            }
        });
    }
    println!("{count} rewritten members narrated, {noise} refused for a residual below 1e-15");
}

/// Sabotage: the sums of one hypothesis against the full solution of another are told apart.
#[test]
fn a_wrong_sum_would_be_noticed() {
    let sample = &samples()[5];
    let (member, analysis) = solved(&sample.deck);
    let engine = Engine::new(&member, &analysis, questions(&member, sample.of, &sample.asked)).unwrap();
    let scales = scales(&engine);
    let mut before: Option<Hypothesis> = None;
    let (mut noticed, mut all) = (0, 0);
    engine.singles(|hypothesis, value| {
        if let Some(other) = before.replace(hypothesis) {
            all += 1;
            noticed += usize::from(difference(&engine, &other, value, &scales) > 1e-9);
        }
    });
    assert!(all > 50 && noticed * 10 > all * 9, "{noticed} of {all}");
}

/// Every name that a generator gives stands in the list, and every name of the list is generated somewhere.
#[test]
fn the_list_of_names_is_whole() {
    let mut met: Vec<String> = Vec::new();
    for sample in samples() {
        let (member, _) = solved(&sample.deck);
        let catalogue = Catalogue::new(&member);
        let lists = [&catalogue.structures, &catalogue.loads, &catalogue.weights, &catalogue.readings];
        for mistake in lists.into_iter().flatten() {
            let name = match mistake.name.strip_prefix("one-stiffness-of-") {
                Some(section) => {
                    assert!(member.sections.iter().any(|known| known.name == section));
                    "one-stiffness-of-SECTION".to_owned()
                }
                None => mistake.name.clone(),
            };
            assert!(NAMES.iter().any(|(known, _)| *known == name), "{name}");
            met.push(name);
        }
    }
    for (name, example) in NAMES {
        assert!(met.iter().any(|known| known == name), "{name} is generated for no member");
        assert!(!example.is_empty());
    }
    let fixed = [
        "one-stiffness-of-SECTION",
        "stiffness-averaged",
        "stiffnesses-swapped",
        "couple-reversed",
        "load-omitted",
        "load-doubled",
        "settlement-omitted",
        "settlement-reversed",
        "self-weight-omitted",
        "point-read-as-uniform",
        "fixed-end-as-pin",
        "support-ignored",
        "factors-omitted",
        "factors-applied-twice",
        "section-weak-axis",
        "continuity-ignored",
        "slope-carry-dropped",
        "step-misplaced",
        "elastic-support-as-rigid",
        "hinge-ignored",
    ];
    assert!(fixed.iter().all(|name| NAMES.iter().any(|(known, _)| known == name)));
}

/// On a very long member changes of the structure are solved with the loads as they are: the same singles, fewer pairs.
#[test]
fn a_long_member_is_searched_by_singles() {
    let sample = &samples()[5];
    let (member, analysis) = solved(&sample.deck);
    let asked = || questions(&member, sample.of, &sample.asked);
    let whole = Engine::new(&member, &analysis, asked()).unwrap();
    let short = Engine::within(&member, &analysis, asked(), 0).unwrap();
    let scales = scales(&whole);
    let all = |engine: &Engine<'_>| {
        let mut list: Vec<(Hypothesis, Vec<Option<f64>>)> = Vec::new();
        engine.singles(|hypothesis, value| list.push((hypothesis, (0..scales.len()).map(value).collect())));
        list
    };
    let (whole_list, short_list) = (all(&whole), all(&short));
    assert_eq!(whole_list.len(), short_list.len());
    for ((hypothesis, one), (other, two)) in whole_list.iter().zip(&short_list) {
        assert_eq!(hypothesis, other);
        for ((one, two), scale) in one.iter().zip(two).zip(&scales) {
            assert_eq!(one.is_some(), two.is_some());
            assert!((one.unwrap_or(0.0) - two.unwrap_or(0.0)).abs() <= 1e-9 * scale.max(one.unwrap_or(0.0).abs()));
        }
    }
    let pairs = |engine: &Engine<'_>| {
        let mut count = 0;
        engine.pairs(|hypothesis, _| count += usize::from(hypothesis.structures[0].is_some()));
        count
    };
    assert!(pairs(&whole) > 100 && pairs(&short) == 0);
}
