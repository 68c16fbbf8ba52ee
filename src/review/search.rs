//! Which mistakes would reproduce a colleague's figures.
//!
//! The member is linear, so that a hypothesis about loads or factors is a sum of figures found once; only a change of
//! stiffness, geometry or supports asks for a new solution, and under each of them the same sums hold again. What leads the
//! list is solved once more in full before it is named.

mod board;
mod curve;
pub mod engine;
pub mod fit;
mod gauge;
mod items;
mod rank;
mod ratio;

use crate::analysis::Analysis;
use crate::member::Member;
use crate::review::ask::Question;

pub use engine::{Engine, Hypothesis, Vector};

/// One claimed figure, for the search.
#[derive(Clone, Debug, PartialEq)]
pub struct Evidence {
    /// What the figure answers.
    pub question: Question,
    /// The figure, in SI.
    pub claimed: f64,
    /// How far a figure may be from it and still be the same, in SI.
    pub tolerance: f64,
    /// Whether the checker's own figure is another.
    pub differs: bool,
}

/// A hypothesis that would reproduce the claims that differ, or nearly all of them.
#[derive(Clone, Debug, PartialEq)]
pub struct Explanation {
    /// Names of one or two mistakes.
    pub mistakes: Vec<String>,
    /// Where each would have been made.
    pub wheres: Vec<String>,
    /// In a sentence.
    pub text: String,
    /// How many of the differing claims it reproduces.
    pub explains: usize,
    /// How many of the agreeing claims it keeps.
    pub keeps: usize,
    /// The largest difference from a claim it reproduces, relative to the claim.
    pub largest_relative_difference: f64,
    /// The member under the mistakes, for its working; `None` where the member is solved rightly and read wrongly.
    pub member: Option<Member>,
    /// Whether another explanation gives the same figures within the tolerances.
    pub tie: bool,
}

/// What the search found.
#[derive(Clone, Debug, PartialEq, Default)]
pub struct Findings {
    /// Best first, at most ten.
    pub explanations: Vec<Explanation>,
    /// Why they should not be trusted too far, or why there is none.
    pub remark: Option<String>,
    /// How many hypotheses were tried.
    pub tried: usize,
}

/// Searches the mistakes that would reproduce the claims that differ and keep those that agree.
///
/// Claims that the member has no figure for are left aside. Nothing is searched where no claim differs.
pub fn explain(member: &Member, analysis: &Analysis, evidence: &[Evidence]) -> Findings {
    if !evidence.iter().any(|claim| claim.differs) {
        return Findings::default();
    }
    let questions = evidence.iter().map(|claim| claim.question.clone()).collect();
    let Some(engine) = Engine::new(member, analysis, questions) else {
        let remark = "The member could not be solved load by load: no mistake was tried.".to_owned();
        return Findings { remark: Some(remark), ..Findings::default() };
    };
    engine.findings(evidence)
}
