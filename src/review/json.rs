//! A review as JSON, in SI units.

use serde_json::{Value, json};

use super::claim::Claim;
use super::compare::Compared;
use super::search::Findings;

/// The claims and the explanations.
pub fn json(claims: &[Claim], compared: &[Compared], findings: &Findings) -> Value {
    let claims: Vec<Value> = claims
        .iter()
        .zip(compared)
        .map(|(claim, found)| {
            json!({
                "index": claim.index,
                "text": claim.words,
                "claimed": claim.claimed,
                "recomputed": found.recomputed,
                "difference": found.difference,
                "relative": found.relative,
                "status": found.status.word(),
                "remark": found.remark,
                "reference": claim.reference,
            })
        })
        .collect();
    let explanations: Vec<Value> = findings
        .explanations
        .iter()
        .map(|one| {
            json!({
                "mistakes": one.mistakes,
                "where": one.wheres,
                "text": one.text,
                "explains": one.explains,
                "keeps": one.keeps,
                "largest_relative_difference": one.largest_relative_difference,
                "tie": one.tie,
            })
        })
        .collect();
    json!({ "claims": claims, "explanations": explanations, "remark": findings.remark, "tried": findings.tried })
}
