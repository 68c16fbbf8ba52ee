//! The working as JSON: the derivation in the order in which the sheet shows it.

use serde_json::{Value, json};

use crate::working::{Input, Origin, Step, Working};

/// The steps.
pub fn json(working: &Working) -> Value {
    Value::Array(working.steps.iter().map(|step| one(working, step)).collect())
}

fn one(working: &Working, step: &Step) -> Value {
    let inputs = step.inputs.iter().map(|input| (input.name.clone(), input_json(working, input)));
    let mut value = json!({
        "id": step.id,
        "title": step.title,
        "symbol": step.symbol,
        "inputs": Value::Object(inputs.collect()),
        "result": {
            "printed": step.result.printed.to_string(),
            "unit": step.result.unit.to_string(),
            "value": step.result.value,
        },
        "basis": step.basis,
    });
    if let Some(object) = value.as_object_mut() {
        if let Some(case) = &step.case {
            object.insert("case".to_owned(), json!(case));
        }
        if let Some(expression) = &step.expression {
            object.insert("expression".to_owned(), json!(expression));
        }
    }
    value
}

fn input_json(working: &Working, input: &Input) -> Value {
    let from = match input.from {
        Origin::Deck => "deck".to_owned(),
        Origin::Step(index) => working.steps.get(index).map(|step| step.id.clone()).unwrap_or_default(),
    };
    json!({ "printed": input.printed.to_string(), "unit": input.unit.to_string(), "from": from })
}
