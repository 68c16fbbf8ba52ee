//! An oracle in exact fractions: the direct stiffness method with a node at every support, step, hinge, station and load
//! end, which shares nothing with the program. Fractions lose no digit, so that nodes may stand as near as they like.

mod deck;
mod exact;

use proptest::prelude::*;
use proptest::test_runner::{Config, RngAlgorithm, TestRng, TestRunner};

use deck::Beam;
use proofspan::calculation::{Calculation, Fault};
use serde_json::Value;

/// Relative to the greatest of the quantity in the combination.
const RELATIVE: f64 = 1e-9;
/// Of turns, which between two releases are differences of deflections over their distance.
const TURNS: f64 = 1e-7;

/// Every figure of the program against the oracle; the figures that differ by more than the tolerance.
fn differences(beam: &Beam, results: &Value) -> Option<Vec<String>> {
    let exact = exact::solve(beam)?;
    let mut pairs: Vec<(&str, String, f64, f64)> = Vec::new();
    let combination = &results["combinations"]["C"];
    for (support, reaction) in beam.supports.iter().zip(&exact.reactions) {
        let found = &combination["reactions"][support.name.as_str()];
        for (kind, key, value) in [("force", "force", &reaction.0), ("moment", "moment", &reaction.1)] {
            if let Some(found) = found[key].as_f64() {
                pairs.push((kind, format!("reaction {key} of {}", support.name), found, exact::float(value)));
            }
        }
    }
    for (station, wanted) in combination["stations"].as_array().unwrap().iter().zip(&exact.stations) {
        let at = station["at"].as_f64().unwrap();
        for (side, index) in [("left", 0), ("right", 1)] {
            let found = |key: &str| station[key][index].as_f64().unwrap();
            pairs.push(("force", format!("shear {side} of {at}"), found("shear"), exact::float(&wanted.shear[index])));
            pairs.push((
                "moment",
                format!("moment {side} of {at}"),
                found("moment"),
                exact::float(&wanted.moment[index]),
            ));
            pairs.push(("slope", format!("slope {side} of {at}"), found("slope"), exact::float(&wanted.slope[index])));
        }
        pairs.push((
            "deflection",
            format!("v at {at}"),
            station["deflection"].as_f64().unwrap(),
            exact::float(&wanted.v),
        ));
    }
    let greatest = |kind: &str| pairs.iter().filter(|pair| pair.0 == kind).map(|pair| pair.3.abs()).fold(0.0, f64::max);
    // A figure that is zero by equilibrium is measured by the load.
    let load = beam.load_size();
    // Deflections are measured by the greatest of the whole member, wherever that stands.
    let extremes = &combination["extremes"]["deflection"];
    let deepest = ["max", "min"].map(|end| extremes[end]["value"].as_f64().unwrap().abs());
    let scale = |kind: &str| match kind {
        "deflection" => greatest(kind).max(deepest[0]).max(deepest[1]),
        "force" => greatest(kind).max(load),
        "moment" => greatest(kind).max(load * 1e-3),
        _ => greatest(kind),
    };
    let differing = pairs.iter().filter(|(kind, _, found, wanted)| {
        let close = (found - wanted).abs() <= if *kind == "slope" { TURNS } else { RELATIVE } * scale(kind);
        !close
    });
    Some(differing.map(|(_, what, found, wanted)| format!("{what}: {found:e} found, {wanted:e} exact")).collect())
}

fn runner(cases: u32) -> TestRunner {
    let config = Config { cases, failure_persistence: None, max_global_rejects: 0, ..Config::default() };
    TestRunner::new_with_rng(config, TestRng::from_seed(RngAlgorithm::ChaCha, &[11; 32]))
}

#[test]
fn random_members_agree_with_exact_fractions() {
    let (mut solved, mut mechanisms) = (0, 0);
    let check = |seed: u64, spans: usize, solved: &mut u32, mechanisms: &mut u32| -> Result<(), TestCaseError> {
        let beam = Beam::random(seed, spans);
        let text = beam.text();
        match (Calculation::new(&text), exact::solve(&beam).is_some()) {
            (Ok(calculation), true) => {
                let found = differences(&beam, &calculation.json(None)).unwrap();
                prop_assert!(found.is_empty(), "{}\n{text}", found.join("\n"));
                *solved += 1;
            }
            (Err(Fault::Input(faults)), false) => {
                prop_assert!(faults.iter().any(|fault| fault.message.contains("mechanism")), "{faults:?}\n{text}");
                *mechanisms += 1;
            }
            (Ok(_), false) => prop_assert!(false, "a mechanism was solved\n{text}"),
            (Err(fault), _) => prop_assert!(false, "{fault:?}\n{text}"),
        }
        Ok(())
    };
    let cells = std::cell::RefCell::new((0, 0));
    runner(160)
        .run(&(any::<u64>(), 1_usize..=6), |(seed, spans)| {
            let mut counts = cells.borrow_mut();
            let (solved, mechanisms) = &mut *counts;
            check(seed, spans, solved, mechanisms)
        })
        .unwrap();
    (solved, mechanisms) = (solved + cells.borrow().0, mechanisms + cells.borrow().1);
    // Long members.
    let cells = std::cell::RefCell::new((0, 0));
    runner(6)
        .run(&(any::<u64>(), 20_usize..=50), |(seed, spans)| {
            let mut counts = cells.borrow_mut();
            let (solved, mechanisms) = &mut *counts;
            check(seed, spans, solved, mechanisms)
        })
        .unwrap();
    (solved, mechanisms) = (solved + cells.borrow().0, mechanisms + cells.borrow().1);
    assert!(solved > 100, "{solved} members were compared, {mechanisms} were mechanisms");
}

#[test]
fn a_figure_that_is_off_in_its_eighth_digit_is_caught() {
    let seeds = 1_u64..;
    let stable = |seed: &u64| exact::solve(&Beam::random(*seed, 3)).is_some();
    let beam = Beam::random(seeds.into_iter().find(stable).unwrap(), 3);
    let calculation = Calculation::new(&beam.text()).unwrap();
    let results = calculation.json(None);
    assert!(differences(&beam, &results).unwrap().is_empty());
    let mut changed = 0;
    for name in beam.supports.iter().map(|support| support.name.clone()) {
        let mut forged = results.clone();
        let place = &mut forged["combinations"]["C"]["reactions"][name.as_str()]["force"];
        let Some(force) = place.as_f64().filter(|force| force.abs() > 0.1 * beam.load_size()) else { continue };
        *place = (force * (1.0 + 1e-7)).into();
        assert!(!differences(&beam, &forged).unwrap().is_empty(), "support {name}");
        changed += 1;
    }
    assert!(changed > 0);
}
