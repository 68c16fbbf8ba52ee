//! Claims: what somebody's calculation says.

use super::ask::Question;

/// A file of claims.
#[derive(Clone, Debug, PartialEq, Default)]
pub struct Claims {
    /// The checker's own deck, relative to the file.
    pub deck: String,
    /// Whether it was modelled without the originator's sheets.
    pub blind: bool,
    /// The document under review.
    pub reviewed: Reviewed,
    /// Who reviews.
    pub reviewer: Reviewer,
    /// The claims, in the file's order; those without a value are left out.
    pub claims: Vec<Claim>,
    /// How many were left out since their value is empty.
    pub empty: usize,
}

/// The document under review.
#[derive(Clone, Debug, PartialEq, Default)]
pub struct Reviewed {
    /// Its number.
    pub number: String,
    /// Its revision; may be empty.
    pub revision: String,
    /// Its date as year, month, day.
    pub date: Option<(u16, u8, u8)>,
    /// Its subject; may be empty.
    pub subject: String,
}

/// Who reviews, and when.
#[derive(Clone, Debug, PartialEq, Default)]
pub struct Reviewer {
    /// The name.
    pub name: String,
    /// Year, month, day.
    pub date: (u16, u8, u8),
}

/// One claimed figure.
#[derive(Clone, Debug, PartialEq)]
pub struct Claim {
    /// Its place among the file's claims, from 0.
    pub index: usize,
    /// What it answers.
    pub question: Question,
    /// Whether the file says on which side of a jump it stands.
    pub sided: bool,
    /// What it is, in words: `reaction at B, C1`.
    pub words: String,
    /// The figure in SI; a verdict is 1 or 0.
    pub claimed: f64,
    /// As written; empty where it was taken from attached results.
    pub written: String,
    /// Size of the unit it is written in, in SI; `None` for a verdict and for a length written in several units.
    pub unit: Option<f64>,
    /// Half a unit of the last digit written, in SI; 0 for a verdict.
    pub half: f64,
    /// How far the recomputed figure may be from it and still agree, in SI.
    pub tolerance: f64,
    /// Whether it is a verdict.
    pub verdict: bool,
    /// Where in the reviewed document it stands; may be empty.
    pub reference: String,
}
