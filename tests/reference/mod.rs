//! Members solved by general-purpose solvers of differential equations and finite elements, outside this program: see the
//! text at the head of `solve.py`, which made `reference.json` and says how to make it again.

use serde_json::Value;

use crate::support::solve;

const REFERENCE: &str = include_str!("reference.json");

const DECKS: [(&str, &str); 5] = [
    ("stepped_propped", include_str!("stepped_propped.toml")),
    ("tapered_bracket", include_str!("tapered_bracket.toml")),
    ("springs", include_str!("springs.toml")),
    ("movements", include_str!("movements.toml")),
    ("hinged_guided", include_str!("hinged_guided.toml")),
];

/// Relative to the greatest figure of the quantity; both solvers are good for a few parts in a thousand million.
const RELATIVE: f64 = 1e-8;

fn reference() -> Value {
    serde_json::from_str(REFERENCE).unwrap()
}

/// One quantity: what it is, ours, theirs, in SI units.
type Pair = (String, f64, f64);

/// Every figure of one method beside ours, by quantity: forces, moments, deflections, turns.
fn pairs(ours: &Value, theirs: &Value) -> [Vec<Pair>; 4] {
    let combination = &ours["combinations"]["C"];
    let [mut forces, mut moments, mut deflections, mut turns] = [Vec::new(), Vec::new(), Vec::new(), Vec::new()];
    for (support, reaction) in theirs["reactions"].as_object().unwrap() {
        for (kind, value) in reaction.as_object().unwrap() {
            let found = combination["reactions"][support][kind].as_f64().unwrap();
            let list = if kind == "force" { &mut forces } else { &mut moments };
            list.push((format!("{kind} of {support}"), found, value.as_f64().unwrap() * 1e3));
        }
    }
    let stations = combination["stations"].as_array().unwrap();
    assert_eq!(stations.len(), theirs["stations"].as_array().unwrap().len());
    for (station, wanted) in stations.iter().zip(theirs["stations"].as_array().unwrap()) {
        let at = station["at"].as_f64().unwrap();
        assert!((at - wanted["at"].as_f64().unwrap()).abs() < 1e-12);
        let value = |key: &str| wanted[key].as_f64();
        let left = |key: &str| station[key][0].as_f64().unwrap();
        let v = station["deflection"].as_f64().unwrap();
        deflections.push((format!("v at {at}"), v, value("v_mm").unwrap() * 1e-3));
        if let Some(moment) = value("moment") {
            moments.push((format!("M at {at}"), left("moment"), moment * 1e3));
            forces.push((format!("V at {at}"), left("shear"), value("shear").unwrap() * 1e3));
        }
        // With shear deformation the slope is the turn and the shear strain together: left to the deflections.
        if !(theirs["slides"].as_bool().unwrap()) {
            turns.push((format!("turn at {at}"), left("slope"), value("turn_mrad").unwrap() * 1e-3));
        }
    }
    [forces, moments, deflections, turns]
}

/// What differs by more than the tolerance.
fn differences(ours: &Value, theirs: &Value) -> Vec<String> {
    let mut wrong = Vec::new();
    for list in pairs(ours, theirs) {
        let greatest = list.iter().map(|(_, _, theirs)| theirs.abs()).fold(0.0, f64::max);
        for (what, ours, theirs) in list {
            let close = (ours - theirs).abs() <= RELATIVE * greatest;
            if !close {
                wrong.push(format!("{what}: {ours:e} here, {theirs:e} there"));
            }
        }
    }
    wrong
}

#[test]
fn members_agree_with_solvers_of_another_kind() {
    let reference = reference();
    let members = reference["members"].as_object().unwrap();
    assert_eq!(members.len(), DECKS.len());
    let mut methods = 0;
    for (name, deck) in DECKS {
        let ours = solve(deck);
        for (method, theirs) in members[name].as_object().unwrap() {
            let wrong = differences(&ours, theirs);
            assert!(wrong.is_empty(), "{name} by {method}:\n{}", wrong.join("\n"));
            methods += 1;
        }
    }
    assert!(methods >= 9, "both methods, but one where an element does not serve: {methods}");
}

#[test]
fn a_reference_figure_that_is_off_by_a_ten_millionth_is_caught() {
    let reference = reference();
    let ours = solve(DECKS[0].1);
    let honest = &reference["members"]["stepped_propped"]["bvp"];
    assert!(differences(&ours, honest).is_empty());
    let paths = [
        "/reactions/A/force",
        "/reactions/A/moment",
        "/stations/3/v_mm",
        "/stations/4/turn_mrad",
        "/stations/3/moment",
    ];
    for path in paths {
        let mut forged = honest.clone();
        let place = forged.pointer_mut(path).unwrap();
        *place = (place.as_f64().unwrap() * (1.0 + 1e-7)).into();
        assert_eq!(differences(&ours, &forged).len(), 1, "{path}");
    }
}

#[test]
fn the_reference_says_what_made_it() {
    let reference = reference();
    let script = include_str!("solve.py");
    for package in ["numpy", "scipy", "scikit-fem"] {
        let version = reference["versions"][package].as_str().unwrap();
        assert!(script.contains(&format!("{package}=={version}")), "the script names {package} {version}");
    }
}
