//! Claims against recomputed figures.

use super::ask::{Along, Ask, Question, Side, evaluate};
use super::claim::Claim;
use super::search::Evidence;
use super::slip::slip;
use crate::analysis::Analysis;
use crate::member::Member;

/// What a claim came to.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Status {
    /// Within its tolerance.
    Agrees,
    /// Beyond it, or a verdict that is another.
    Differs,
    /// The member has no such figure.
    NotComparable,
}

impl Status {
    /// As the results say it.
    pub const fn word(self) -> &'static str {
        match self {
            Self::Agrees => "agrees",
            Self::Differs => "differs",
            Self::NotComparable => "not_comparable",
        }
    }
}

/// A claim beside the recomputed figure.
#[derive(Clone, Debug, PartialEq)]
pub struct Compared {
    /// What it came to.
    pub status: Status,
    /// The recomputed figure in SI; `None` where the member has none.
    pub recomputed: Option<f64>,
    /// Claimed less recomputed, SI.
    pub difference: Option<f64>,
    /// The same relative to the recomputed figure; `None` where that is zero but for rounding, and for a verdict.
    pub relative: Option<f64>,
    /// What strikes the eye: a truncation, a sign, a unit, a decimal point; or why it cannot be compared. May be empty.
    pub remark: String,
}

/// Compares a claim with the solved member.
pub fn compare(claim: &Claim, member: &Member, analysis: &Analysis) -> Compared {
    let value = match evaluate(&claim.question, member, analysis) {
        Ok(value) => value,
        Err(reason) => return not_comparable(reason.reason),
    };
    if let Some(reason) = jump(claim, member, analysis, value) {
        return not_comparable(reason);
    }
    let difference = claim.claimed - value;
    // What is left of a figure that was only converted from its unit and back.
    let difference = if difference.abs() <= 1e-14 * value.abs() { 0.0 } else { difference };
    let agrees = difference.abs() <= claim.tolerance * (1.0 + 1e-9);
    // What is far below the last digit written is zero but for rounding, and nothing is relative to it.
    let zero = value.abs() <= 1e-6 * claim.half.max(1e-9 * claim.claimed.abs());
    let relative = (!zero && !claim.verdict).then(|| difference / value);
    let remark = match agrees {
        true => own_digits(claim, value),
        false if zero => String::new(),
        false => slip(claim, value),
    };
    let status = if agrees { Status::Agrees } else { Status::Differs };
    Compared { status, recomputed: Some(value), difference: Some(difference), relative, remark }
}

fn not_comparable(remark: String) -> Compared {
    Compared { status: Status::NotComparable, recomputed: None, difference: None, relative: None, remark }
}

/// Why a claim about a place where the figure jumps says too little.
fn jump(claim: &Claim, member: &Member, analysis: &Analysis, left: f64) -> Option<String> {
    let Ask::Station { along, at, measured, .. } = claim.question.ask else { return None };
    if claim.sided || along == Along::Deflection {
        return None;
    }
    let ask = Ask::Station { along, at, side: Side::Right, measured };
    let right = evaluate(&Question { of: claim.question.of.clone(), ask }, member, analysis).ok()?;
    let jumps = (left - right).abs() > 1e-9 * left.abs().max(right.abs()).max(claim.half);
    let near = |value: f64| (claim.claimed - value).abs() <= claim.tolerance;
    // Where both sides or none would do, the side changes nothing.
    (jumps && near(left) != near(right)).then(|| {
        "the figure jumps there and the claim does not say on which side it stands: add side = \"left\" or \"right\""
            .to_owned()
    })
}

/// A claim that agrees, but not to the digits it was written with.
fn own_digits(claim: &Claim, value: f64) -> String {
    let off = (claim.claimed - value).abs();
    if claim.verdict || off <= claim.half * (1.0 + 1e-9) {
        return String::new();
    }
    let towards_zero = claim.claimed.abs() < value.abs() && off < 2.0 * claim.half;
    if towards_zero {
        "agrees within its tolerance, but the last digit was cut off rather than rounded".to_owned()
    } else {
        "agrees within its tolerance, not to its own digits: a rounded coefficient of a handbook, or figures rounded on the way"
            .to_owned()
    }
}

/// The claims that can be compared, as evidence for the search.
pub fn evidence(claims: &[Claim], compared: &[Compared]) -> Vec<Evidence> {
    let pairs = claims.iter().zip(compared).filter(|(_, found)| found.status != Status::NotComparable);
    pairs
        .map(|(claim, found)| Evidence {
            question: claim.question.clone(),
            claimed: claim.claimed,
            tolerance: if claim.verdict { 0.25 } else { claim.tolerance },
            differs: found.status == Status::Differs,
        })
        .collect()
}
