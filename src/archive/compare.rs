//! Results against results.

use std::fmt;

use serde_json::Value;

/// Where two results differ.
#[derive(Clone, Debug, PartialEq)]
pub struct Difference {
    /// Path: `combinations.C1.reactions.A.force`.
    pub place: String,
    /// What the first holds there; empty where it holds nothing.
    pub attached: String,
    /// What the second holds there; empty where it holds nothing.
    pub recomputed: String,
}

impl fmt::Display for Difference {
    fn fmt(&self, out: &mut fmt::Formatter<'_>) -> fmt::Result {
        let said = |text: &str| if text.is_empty() { "nothing".to_owned() } else { text.to_owned() };
        write!(out, "{}: {} attached, {} recomputed", self.place, said(&self.attached), said(&self.recomputed))
    }
}

/// Every place where two results differ: numbers by more than `relative` of the greater, anything else at all.
pub fn differences(attached: &Value, recomputed: &Value, relative: f64) -> Vec<Difference> {
    let mut found = Vec::new();
    walk(String::new(), attached, recomputed, relative, &mut found);
    found
}

fn walk(place: String, left: &Value, right: &Value, relative: f64, found: &mut Vec<Difference>) {
    let join = |key: &str| if place.is_empty() { key.to_owned() } else { format!("{place}.{key}") };
    match (left, right) {
        (Value::Object(a), Value::Object(b)) => {
            for (key, value) in a {
                walk(join(key), value, b.get(key).unwrap_or(&Value::Null), relative, found);
            }
            for (key, value) in b.iter().filter(|(key, _)| !a.contains_key(*key)) {
                walk(join(key), &Value::Null, value, relative, found);
            }
        }
        (Value::Array(a), Value::Array(b)) if a.len() == b.len() => {
            for (index, (left, right)) in a.iter().zip(b).enumerate() {
                walk(join(&index.to_string()), left, right, relative, found);
            }
        }
        (Value::Number(a), Value::Number(b)) => {
            let (x, y) = (a.as_f64().unwrap_or(f64::NAN), b.as_f64().unwrap_or(f64::NAN));
            let close = (x - y).abs() <= relative * x.abs().max(y.abs());
            if !close {
                found.push(difference(place, left, right));
            }
        }
        _ if left == right => {}
        _ => found.push(difference(place, left, right)),
    }
}

fn difference(place: String, left: &Value, right: &Value) -> Difference {
    Difference { place, attached: said(left), recomputed: said(right) }
}

fn said(value: &Value) -> String {
    match value {
        Value::Null => String::new(),
        Value::Array(list) => format!("a list of {}", list.len()),
        Value::Object(_) => "a table".to_owned(),
        other => {
            let text = other.to_string();
            if text.chars().count() > 60 { format!("{}…", text.chars().take(60).collect::<String>()) } else { text }
        }
    }
}

#[cfg(test)]
mod tests {
    use super::differences;
    use serde_json::json;

    #[test]
    fn every_kind_of_difference_is_named_and_nothing_else() {
        let one = json!({ "a": 1.0, "b": { "c": [1.0, 2.0], "d": "x" }, "only": true });
        assert!(differences(&one, &one, 0.0).is_empty());
        let other = json!({ "a": 1.000_001, "b": { "c": [1.0, 2.5], "d": "y" }, "more": 1 });
        let places: Vec<String> = differences(&one, &other, 1e-9).into_iter().map(|found| found.place).collect();
        assert_eq!(places, ["a", "b.c.1", "b.d", "only", "more"]);
        let places: Vec<String> = differences(&one, &other, 1e-3).into_iter().map(|found| found.place).collect();
        assert_eq!(places, ["b.c.1", "b.d", "only", "more"]);
    }
}
