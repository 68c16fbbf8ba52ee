//! Claims taken from the results that travel inside a sheet.

use std::collections::BTreeMap;

use serde_json::Value;

use super::ask::{Along, Ask, Of, Question, Side, evaluate};
use super::claim::{Claim, Claims, Reviewed};
use crate::analysis::Analysis;
use crate::member::{Measured, Member, Place, Span};
use crate::quantity::Decimal;

/// Two solutions by one method agree to far more than this share of the greatest figure of a kind.
const RELATIVE: f64 = 1e-6;

/// Every figure of attached results that the member has as well, and how many it has not; `None` where the results are none
/// of ours.
///
/// A figure agrees within a millionth of the greatest of its kind in its load state.
pub fn from_results(results: &Value, member: &Member, analysis: &Analysis) -> Option<(Claims, usize)> {
    results.get("format").filter(|format| format.as_f64() == Some(1.0))?;
    let mut list = List { member, claims: Vec::new() };
    for (name, combination) in results.get("combinations")?.as_object()? {
        let of = Of::Combination(name.clone());
        list.state(&of, name, combination);
        for station in combination.get("stations").and_then(Value::as_array).into_iter().flatten() {
            list.station(&of, name, station);
        }
        list.extremes(&of, name, combination);
    }
    for (name, case) in results.get("cases")?.as_object()? {
        list.state(&Of::Case(name.clone()), name, case);
    }
    for check in results.get("checks").and_then(Value::as_array).into_iter().flatten() {
        list.check(check);
    }
    list.tolerances();
    let all = list.claims.len();
    list.claims.retain(|claim| evaluate(&claim.question, member, analysis).is_ok());
    list.claims.iter_mut().enumerate().for_each(|(index, claim)| claim.index = index);
    let missing = all - list.claims.len();
    let reviewed = Reviewed { number: "results of the attached sheet".to_owned(), ..Reviewed::default() };
    Some((Claims { claims: list.claims, reviewed, ..Claims::default() }, missing))
}

struct List<'m> {
    member: &'m Member,
    claims: Vec<Claim>,
}

impl List<'_> {
    fn push(&mut self, of: &Of, ask: Ask, words: String, claimed: f64) {
        let verdict = matches!(ask, Ask::Verdict { .. });
        self.claims.push(Claim {
            index: self.claims.len(),
            question: Question { of: of.clone(), ask },
            sided: true,
            words,
            claimed,
            written: String::new(),
            unit: None,
            half: 0.0,
            tolerance: 0.0,
            verdict,
            reference: "attached results".to_owned(),
        });
    }

    /// What cannot be told from rounding is measured by the greatest figure of its kind in its state, or by far less than
    /// the greatest of all where a state holds next to nothing.
    fn tolerances(&mut self) {
        let mut all: BTreeMap<Kind, f64> = BTreeMap::new();
        let mut by_state: BTreeMap<(String, Kind), f64> = BTreeMap::new();
        let key = |claim: &Claim| (format!("{:?}", claim.question.of), Kind::of(&claim.question.ask));
        for claim in &self.claims {
            let (state, kind) = key(claim);
            let size = claim.claimed.abs();
            let greatest = all.entry(kind).or_default();
            *greatest = greatest.max(size);
            let greatest = by_state.entry((state, kind)).or_default();
            *greatest = greatest.max(size);
        }
        for claim in self.claims.iter_mut().filter(|claim| !claim.verdict) {
            let (state, kind) = key(claim);
            let here = by_state.get(&(state, kind)).copied().unwrap_or_default();
            let anywhere = all.get(&kind).copied().unwrap_or_default();
            claim.tolerance = RELATIVE * here.max(1e-3 * anywhere).max(1e-9);
            claim.half = claim.tolerance;
        }
    }

    fn state(&mut self, of: &Of, name: &str, state: &Value) {
        for (support, reaction) in state.get("reactions").and_then(Value::as_object).into_iter().flatten() {
            if let Some(force) = reaction.get("force").and_then(Value::as_f64) {
                let ask = Ask::Reaction { support: support.clone() };
                self.push(of, ask, format!("reaction at {support}, {name}"), force);
            }
            if let Some(moment) = reaction.get("moment").and_then(Value::as_f64) {
                let ask = Ask::ReactionMoment { support: support.clone() };
                self.push(of, ask, format!("reaction moment at {support}, {name}"), moment);
            }
        }
        for (redundant, value) in state.get("redundants").and_then(Value::as_object).into_iter().flatten() {
            if let Some(value) = value.as_f64() {
                let ask = Ask::Redundant { name: redundant.clone() };
                self.push(of, ask, format!("redundant {redundant}, {name}"), value);
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
                    self.push(of, ask, format!("{key} {word} of {x} m, {name}"), value);
                }
            }
        }
        if let Some(value) = station.get("deflection").and_then(Value::as_f64) {
            let ask = Ask::Station { along: Along::Deflection, at, side: Side::Left, measured: Measured::Absolute };
            self.push(of, ask, format!("deflection at {x} m, {name}"), value);
        }
    }

    /// The greatest over the whole member is the greatest over the span that it was found in.
    fn extremes(&mut self, of: &Of, name: &str, combination: &Value) {
        let kinds = [("moment", Along::Moment), ("shear", Along::Shear), ("deflection", Along::Deflection)];
        for (key, along) in kinds {
            for (end, max) in [("max", true), ("min", false)] {
                let found = combination.get("extremes").and_then(|extremes| extremes.get(key)?.get(end));
                let figure = |key: &str| found.and_then(|found| found.get(key)).and_then(Value::as_f64);
                let (Some(value), Some(at)) = (figure("value"), figure("at")) else { continue };
                let Some(span) = self.span_of(at, along, max, combination) else { continue };
                let words = format!("{end} {key} at {span}, {name}");
                self.push(of, Ask::Extreme { along, span, max, measured: Measured::Absolute }, words, value);
            }
        }
    }

    /// The span that holds an extreme; over a support where the figure jumps, the side that the jump leads to.
    fn span_of(&self, at: f64, along: Along, max: bool, combination: &Value) -> Option<String> {
        let near = 1e-9 * self.member.end().x();
        let holds = |span: &&Span| span.from.x() - near <= at && at <= span.to.x() + near;
        let mut spans = self.member.spans.iter().filter(holds);
        let first = spans.next()?;
        let Some(second) = spans.next() else { return Some(first.name.clone()) };
        let name = second.left.and_then(|support| self.member.supports.get(support)).map(|support| &support.name)?;
        let reaction = combination.get("reactions").and_then(|reactions| reactions.get(name));
        let part = |key: &str| reaction.and_then(|r| r.get(key)).and_then(Value::as_f64).unwrap_or_default();
        // A reaction adds its force to the shear and takes its counter-clockwise moment from the bending moment.
        let jump = match along {
            Along::Shear => part("force"),
            Along::Moment => -part("moment"),
            Along::Slope | Along::Deflection => 0.0,
        };
        let right = if max { jump > 0.0 } else { jump < 0.0 };
        Some(if right { second.name.clone() } else { first.name.clone() })
    }

    fn check(&mut self, check: &Value) {
        let text = |key: &str| check.get(key).and_then(Value::as_str).map(str::to_owned);
        let figure = |key: &str| check.get(key).and_then(Value::as_f64);
        let (Some(limit), Some(combination), Some(span)) = (text("limit"), text("combination"), text("span")) else {
            return;
        };
        let of = Of::Combination(combination.clone());
        let words = format!("at {span}, {combination}, limit {limit}");
        let known = self.member.limits.iter().find(|known| known.name == limit);
        if let (Some(value), Some(measured)) = (figure("deflection"), known.map(|known| known.measured)) {
            let max = value >= 0.0;
            let ask = Ask::Extreme { along: Along::Deflection, span: span.clone(), max, measured };
            self.push(&of, ask, format!("deflection {words}"), value);
        }
        if let Some(value) = figure("allowable") {
            let ask = Ask::Allowable { span: span.clone(), limit: Some(limit.clone()) };
            self.push(&of, ask, format!("allowable {words}"), value);
        }
        if let Some(value) = figure("utilisation") {
            let ask = Ask::Utilisation { span: span.clone(), limit: Some(limit.clone()) };
            self.push(&of, ask, format!("utilisation {words}"), value);
        }
        if let Some(pass) = check.get("pass").and_then(Value::as_bool) {
            let ask = Ask::Verdict { span: Some(span), limit: Some(limit) };
            self.push(&of, ask, format!("verdict {words}"), if pass { 1.0 } else { 0.0 });
        }
    }
}

/// Figures that are measured by one another.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
enum Kind {
    Force,
    Moment,
    Turn,
    Movement,
    Allowable,
    Share,
}

impl Kind {
    fn of(ask: &Ask) -> Self {
        match ask {
            Ask::Redundant { name } if name.starts_with("M.") => Self::Moment,
            Ask::Reaction { .. } | Ask::Redundant { .. } => Self::Force,
            Ask::ReactionMoment { .. } => Self::Moment,
            Ask::Station { along, .. } | Ask::Extreme { along, .. } => match along {
                Along::Shear => Self::Force,
                Along::Moment => Self::Moment,
                Along::Slope => Self::Turn,
                Along::Deflection => Self::Movement,
            },
            Ask::Allowable { .. } => Self::Allowable,
            Ask::Utilisation { .. } | Ask::Verdict { .. } => Self::Share,
        }
    }
}
