//! What several tests need: decks in units of one, results by the contract.

use serde_json::Value;

use proofspan::calculation::Calculation;

/// Results of a deck, with the working.
pub fn solve(deck: &str) -> Value {
    let calculation = Calculation::new(deck).unwrap_or_else(|fault| panic!("{fault:?}\n{deck}"));
    let working = calculation.working().unwrap_or_else(|fault| panic!("{fault:?}\n{deck}"));
    calculation.json(Some(&working))
}

/// A deck of segments `(length, EI)`, supports, loads and stations, all in SI units; one case G, one combination C.
pub fn deck(segments: &[(f64, f64)], supports: &str, loads: &str, stations: &[f64]) -> String {
    let mut text = String::from(
        "format = 1\n[title]\nproject = \"p\"\nnumber = \"n\"\nsubject = \"s\"\nrevision = \"A\"\ndate = 2026-11-30\n",
    );
    for (index, (length, ei)) in segments.iter().enumerate() {
        text += &format!(
            "[section.s{index}]\nE = \"1 kPa\"\nI = \"{} m^4\"\ndepth = \"1 m\"\nalpha = \"1 1/K\"\n",
            ei / 1000.0
        );
        text += &format!("[[segment]]\nlength = \"{length} m\"\nsection = \"s{index}\"\n");
    }
    for line in supports.split(';') {
        let (name, rest) = line.trim().split_once(' ').unwrap();
        let (at, rest) = rest.split_once(' ').unwrap();
        text += &format!("[support.{name}]\nat = \"{at} m\"\n");
        match rest.split_once(' ') {
            None => text += &format!("kind = \"{rest}\"\n"),
            Some((kind, more)) => {
                let (vertical, rotation) = more.split_once(' ').unwrap();
                let spring = |text: &str, unit: &str| {
                    if text.parse::<f64>().is_ok() { format!("{text} {unit}") } else { text.to_owned() }
                };
                text += &format!(
                    "kind = \"{kind}\"\nvertical = \"{}\"\nrotation = \"{}\"\n",
                    spring(vertical, "N/m"),
                    spring(rotation, "N m/rad")
                );
            }
        }
    }
    let places: Vec<String> = stations.iter().map(|x| format!("\"{x} m\"")).collect();
    text += &format!("[member]\nstations = [{}]\n", places.join(", "));
    text += &format!("[case.G]\nnature = \"other\"\nloads = [{loads}]\n");
    text + "[combination.C]\npurpose = \"serviceability\"\nfactors = { G = 1.0 }\n"
}

/// Adds hinges to a deck.
pub fn with_hinges(mut deck: String, hinges: &[(&str, f64)]) -> String {
    for (name, at) in hinges {
        deck += &format!("[hinge.{name}]\nat = \"{at} m\"\n");
    }
    deck
}

/// A figure of the combination: `R A`, `m A`, `v 2`, `M 2`, `V 2`, `slope 2`, `vmax`, `Mmax`, `Mmin`, `atv`.
pub fn look(results: &Value, what: &str) -> f64 {
    let combination = &results["combinations"]["C"];
    let (kind, place) = what.split_once(' ').unwrap_or((what, ""));
    let station = |key: &str| {
        let at: f64 = place.parse().unwrap();
        let list = combination["stations"].as_array().unwrap();
        let found = list.iter().find(|station| (station["at"].as_f64().unwrap() - at).abs() < 1e-12).unwrap();
        found[key].clone()
    };
    let number = |value: &Value| value.as_f64().unwrap_or_else(|| panic!("{what}: {value}"));
    match kind {
        "R" => number(&combination["reactions"][place]["force"]),
        "m" => number(&combination["reactions"][place]["moment"]),
        "v" => number(&station("deflection")),
        "slope" => number(&station("slope")[1]),
        "M" => number(&station("moment")[0]),
        "V" => number(&station("shear")[0]),
        "vmax" => number(&combination["extremes"]["deflection"]["max"]["value"]),
        "vmin" => number(&combination["extremes"]["deflection"]["min"]["value"]),
        "atv" => number(&combination["extremes"]["deflection"]["max"]["at"]),
        "Mmax" => number(&combination["extremes"]["moment"]["max"]["value"]),
        "Mmin" => number(&combination["extremes"]["moment"]["min"]["value"]),
        _ => panic!("{what}"),
    }
}
