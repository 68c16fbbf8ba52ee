//! Claims taken from the results that travel inside a sheet.

use serde_json::Value;

use super::ask::{Along, Ask, Of, Question, Side};
use super::claim::{Claim, Claims, Reviewed};
use crate::member::{Measured, Member, Place};
use crate::quantity::Decimal;

/// Two programs of one method agree to far more than this.
const RELATIVE: f64 = 1e-6;

/// Every figure of attached results that a member can be asked for; `None` where the results are none of ours.
pub fn from_results(results: &Value, member: &Member) -> Option<Claims> {
    let mut list = List { claims: Vec::new() };
    for (name, combination) in results.get("combinations")?.as_object()? {
        let of = Of::Combination(name.clone());
        list.state(&of, name, combination, member);
        for station in combination.get("stations").and_then(Value::as_array).into_iter().flatten() {
            list.station(&of, name, station);
        }
    }
    for (name, case) in results.get("cases")?.as_object()? {
        list.state(&Of::Case(name.clone()), name, case, member);
    }
    for check in results.get("checks").and_then(Value::as_array).into_iter().flatten() {
        list.check(check);
    }
    let mut claims = Claims { claims: list.claims, ..Claims::default() };
    claims.reviewed = Reviewed { number: "results of the attached sheet".to_owned(), ..Reviewed::default() };
    Some(claims)
}

struct List {
    claims: Vec<Claim>,
}

impl List {
    fn push(&mut self, of: &Of, ask: Ask, words: String, claimed: f64, verdict: bool) {
        let tolerance = if verdict { 0.0 } else { (RELATIVE * claimed.abs()).max(1e-9) };
        let question = Question { of: of.clone(), ask };
        self.claims.push(Claim {
            index: self.claims.len(),
            question,
            sided: true,
            words,
            claimed,
            written: String::new(),
            half: tolerance,
            tolerance,
            verdict,
            reference: "attached results".to_owned(),
        });
    }

    fn state(&mut self, of: &Of, name: &str, state: &Value, member: &Member) {
        for (support, reaction) in state.get("reactions").and_then(Value::as_object).into_iter().flatten() {
            if let Some(force) = reaction.get("force").and_then(Value::as_f64) {
                let ask = Ask::Reaction { support: support.clone() };
                self.push(of, ask, format!("reaction at {support}, {name}"), force, false);
            }
            if let Some(moment) = reaction.get("moment").and_then(Value::as_f64) {
                let ask = Ask::ReactionMoment { support: support.clone() };
                self.push(of, ask, format!("reaction moment at {support}, {name}"), moment, false);
            }
        }
        let chosen = member.supports.iter().flat_map(|s| [format!("R.{}", s.name), format!("M.{}", s.name)]);
        let chosen: Vec<String> = chosen.collect();
        for (redundant, value) in state.get("redundants").and_then(Value::as_object).into_iter().flatten() {
            if let Some(value) = value.as_f64().filter(|_| chosen.contains(redundant)) {
                let ask = Ask::Redundant { name: redundant.clone() };
                self.push(of, ask, format!("redundant {redundant}, {name}"), value, false);
            }
        }
    }

    fn station(&mut self, of: &Of, name: &str, station: &Value) {
        let Some(x) = station.get("at").and_then(Value::as_f64) else { return };
        let at = Place::metres(Decimal::nearest(x, 15).trimmed());
        for (key, along) in [("shear", Along::Shear), ("moment", Along::Moment), ("slope", Along::Slope)] {
            for (index, (side, word)) in [(Side::Left, "left"), (Side::Right, "right")].into_iter().enumerate() {
                let value = station.get(key).and_then(|pair| pair.get(index)).and_then(Value::as_f64);
                if let Some(value) = value {
                    let ask = Ask::Station { along, at, side, measured: Measured::Absolute };
                    self.push(of, ask, format!("{key} {word} of {x} m, {name}"), value, false);
                }
            }
        }
        if let Some(value) = station.get("deflection").and_then(Value::as_f64) {
            let ask = Ask::Station { along: Along::Deflection, at, side: Side::Left, measured: Measured::Absolute };
            self.push(of, ask, format!("deflection at {x} m, {name}"), value, false);
        }
    }

    fn check(&mut self, check: &Value) {
        let text = |key: &str| check.get(key).and_then(Value::as_str).map(str::to_owned);
        let (Some(limit), Some(combination), Some(span)) = (text("limit"), text("combination"), text("span")) else {
            return;
        };
        let of = Of::Combination(combination.clone());
        let words = format!("at {span}, {combination}, limit {limit}");
        if let Some(value) = check.get("allowable").and_then(Value::as_f64) {
            let ask = Ask::Allowable { span: span.clone(), limit: Some(limit.clone()) };
            self.push(&of, ask, format!("allowable {words}"), value, false);
        }
        if let Some(value) = check.get("utilisation").and_then(Value::as_f64) {
            let ask = Ask::Utilisation { span: span.clone(), limit: Some(limit.clone()) };
            self.push(&of, ask, format!("utilisation {words}"), value, false);
        }
        if let Some(pass) = check.get("pass").and_then(Value::as_bool) {
            let ask = Ask::Verdict { span: Some(span), limit: Some(limit) };
            self.push(&of, ask, format!("verdict {words}"), if pass { 1.0 } else { 0.0 }, true);
        }
    }
}
