//! The working replayed from what is printed, by an evaluator of its own on exact fractions.

mod replay;

use serde_json::Value;

use crate::support::solve;

const EXAMPLES: [&str; 5] = ["intake-beam", "gallery-girder", "jetty-bracket", "service-walkway", "us-roof-beam"];

fn example(name: &str) -> Value {
    let path = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join("examples").join(format!("{name}.toml"));
    solve(&std::fs::read_to_string(path).unwrap())
}

#[test]
fn every_line_of_every_example_closes_to_its_last_digit() {
    for name in EXAMPLES {
        let results = example(name);
        assert_eq!(replay::faults(&results), Vec::<String>::new(), "{name}");
        assert_eq!(replay::missing(&results), Vec::<String>::new(), "{name}");
        assert!(results["working"].as_array().unwrap().len() > 100, "{name}");
    }
}

#[test]
fn the_starter_deck_closes() {
    let results = solve(proofspan::deck::starter());
    assert_eq!(replay::faults(&results), Vec::<String>::new());
}

/// The first step that has an expression with an input from an earlier step.
fn linked(results: &Value) -> usize {
    let steps = results["working"].as_array().unwrap();
    let chained = |step: &Value| step["inputs"].as_object().unwrap().values().any(|input| input["from"] != "deck");
    steps.iter().position(|step| step["expression"].is_string() && chained(step)).unwrap()
}

#[test]
fn one_wrong_digit_is_caught() {
    let mut results = example("intake-beam");
    let step = linked(&results);
    let printed = results["working"][step]["result"]["printed"].as_str().unwrap().to_owned();
    let last = printed.chars().last().unwrap();
    let wrong = format!("{}{}", &printed[..printed.len() - 1], if last == '1' { '2' } else { '1' });
    results["working"][step]["result"]["printed"] = Value::from(wrong);
    assert!(!replay::faults(&results).is_empty());
}

#[test]
fn one_wrong_origin_is_caught() {
    let mut results = example("intake-beam");
    let step = linked(&results);
    let inputs = results["working"][step]["inputs"].as_object_mut().unwrap();
    let input = inputs.values_mut().find(|input| input["from"] != "deck").unwrap();
    input["from"] = Value::from("1.1.2");
    assert!(!replay::faults(&results).is_empty());
}

#[test]
fn a_step_narrated_from_a_wrong_value_is_caught() {
    let mut results = example("intake-beam");
    let force = results["combinations"]["S1"]["reactions"]["B"]["force"].as_f64().unwrap();
    for step in results["working"].as_array_mut().unwrap() {
        if step["result"]["value"].as_f64().is_some_and(|value| (value - force).abs() < 1e-6 * force) {
            step["result"]["value"] = Value::from(force * 1.001);
        }
    }
    assert!(!replay::missing(&results).is_empty());
}

#[test]
fn the_evaluator_follows_the_grammar() {
    let value =
        |text: &str| replay::evaluate(text, &|name| replay::decimal(if name == "L" { "2" } else { "3" })).unwrap();
    assert_eq!(value("-L^2"), replay::decimal("-4").unwrap());
    assert_eq!(value("2^3^2"), replay::decimal("512").unwrap());
    assert_eq!(value("P * L^3 / (3 * 4)"), replay::decimal("2").unwrap());
    assert_eq!(value("min(P, L) + abs(-1.5)"), replay::decimal("3.5").unwrap());
    assert!(replay::evaluate("L +", &|_| replay::decimal("1")).is_none());
}
