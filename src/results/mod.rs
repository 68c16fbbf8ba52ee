//! Results, format 1: one JSON object in SI base units, unrounded, signs as in the deck.

mod steps;

use serde_json::{Map, Value, json};

use crate::analysis::{Analysis, Extreme, Field, Reaction, Solution};
use crate::member::Member;
use crate::verdict::Verdict;
use crate::working::Working;

/// Largest relative differences of the independent checks.
#[derive(Clone, Copy, Debug, PartialEq, Default)]
pub struct Agreement {
    /// Loads against reactions.
    pub equilibrium: f64,
    /// The second method against the first.
    pub second_method: f64,
    /// Each flexibility against its mirror image.
    pub reciprocity: f64,
}

/// The results as JSON.
pub fn json(
    member: &Member,
    analysis: &Analysis,
    verdict: &Verdict,
    agreement: Agreement,
    deck_sha256: &str,
    working: Option<&Working>,
) -> Value {
    let redundants: Vec<String> = analysis.model.redundants.iter().map(|redundant| redundant.name(member)).collect();
    let mut root = json!({
        "format": 1,
        "deck_sha256": deck_sha256,
        "member": {
            "length": member.end().x(),
            "indeterminacy": member.indeterminacy(),
            "redundants": redundants,
            "spans": member.spans.iter().map(|span| span.name.clone()).collect::<Vec<_>>(),
        },
        "cases": cases(member, analysis),
        "combinations": combinations(member, analysis),
        "checks": checks(member, verdict),
        "agreement": {
            "equilibrium": agreement.equilibrium,
            "second_method": agreement.second_method,
            "reciprocity": agreement.reciprocity,
        },
    });
    if let (Some(working), Some(root)) = (working, root.as_object_mut()) {
        root.insert("working".to_owned(), steps::json(working));
    }
    root
}

fn cases(member: &Member, analysis: &Analysis) -> Value {
    let each = member.cases.iter().zip(&analysis.cases).map(|(case, solution)| {
        let value = json!({
            "reactions": reactions(member, &solution.total.reactions),
            "redundants": redundants(member, analysis, &solution.redundants),
        });
        (case.name.clone(), value)
    });
    Value::Object(each.collect())
}

fn reactions(member: &Member, reactions: &[Reaction]) -> Value {
    let each = member.supports.iter().zip(reactions).map(|(support, reaction)| {
        let mut held = Map::new();
        if support.holds_deflection() {
            held.insert("force".to_owned(), json!(reaction.force));
        }
        if support.holds_rotation() {
            held.insert("moment".to_owned(), json!(reaction.moment));
        }
        (support.name.clone(), Value::Object(held))
    });
    Value::Object(each.collect())
}

fn redundants(member: &Member, analysis: &Analysis, values: &[f64]) -> Value {
    let each = analysis.model.redundants.iter().zip(values);
    Value::Object(each.map(|(redundant, value)| (redundant.name(member), json!(value))).collect())
}

fn combinations(member: &Member, analysis: &Analysis) -> Value {
    let each = member.combinations.iter().zip(&analysis.combinations).enumerate();
    let each = each.filter_map(|(index, (combination, solution))| {
        let field = Field::of_combination(analysis, member, index)?;
        Some((combination.name.clone(), combination_json(member, analysis, solution, &field)))
    });
    Value::Object(each.collect())
}

fn combination_json(member: &Member, analysis: &Analysis, solution: &Solution, field: &Field<'_>) -> Value {
    let stations: Vec<Value> = member
        .stations
        .iter()
        .map(|place| {
            let here = field.at(*place);
            json!({
                "at": place.x(),
                "shear": [here.left.shear, here.right.shear],
                "moment": [here.left.moment, here.right.moment],
                "slope": [here.slope_left, here.slope_right],
                "deflection": here.v,
            })
        })
        .collect();
    let extremes = field.extremes();
    let range =
        |range: crate::analysis::extreme::Range| json!({ "max": extreme(range.max), "min": extreme(range.min) });
    json!({
        "reactions": reactions(member, &solution.reactions),
        "redundants": redundants(member, analysis, &solution.redundants),
        "stations": stations,
        "extremes": {
            "moment": range(extremes.moment),
            "shear": range(extremes.shear),
            "deflection": range(extremes.deflection),
        },
    })
}

fn extreme(extreme: Extreme) -> Value {
    json!({ "value": extreme.value, "at": extreme.at })
}

fn checks(member: &Member, verdict: &Verdict) -> Value {
    let name = |found: Option<&String>| found.cloned().unwrap_or_default();
    let each = verdict.checks.iter().map(|check| {
        json!({
            "limit": name(member.limits.get(check.limit).map(|limit| &limit.name)),
            "combination": name(member.combinations.get(check.combination).map(|combination| &combination.name)),
            "span": name(member.spans.get(check.span).map(|span| &span.name)),
            "deflection": check.deflection,
            "at": check.at,
            "allowable": check.allowable,
            "utilisation": check.utilisation,
            "pass": check.pass,
        })
    });
    Value::Array(each.collect())
}
