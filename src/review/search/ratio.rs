//! A section about its weak axis where nobody knows the ratio of both second moments.

use super::Evidence;
use super::engine::{Engine, Hypothesis, Vector};
use super::fit::Target;
use crate::analysis;
use crate::review::ask::evaluate;
use crate::review::mistake;

/// Figures of all claims under a row of ratios of one section, or of every section.
pub(super) struct Row {
    section: Option<usize>,
    /// Logarithm of the ratio, and the figures.
    steps: Vec<(f64, Option<Vector>)>,
}

/// Ratios of rolled sections lie between these.
const LEAST: f64 = 3.0;
const GREATEST: f64 = 60.0;
/// Steps of a row.
const STEPS: u32 = 24;

impl Engine<'_> {
    fn rows(&self) -> &[Row] {
        self.ratios.get_or_init(|| {
            let sections = (0..self.member.sections.len()).map(Some);
            let all = (self.member.sections.len() > 1).then_some(None);
            let (low, high) = (libm::log(LEAST), libm::log(GREATEST));
            let log = |step: u32| low + (high - low) * f64::from(step) / f64::from(STEPS);
            let row = |section| Row {
                section,
                steps: (0..=STEPS).map(|step| (log(step), self.under(section, libm::exp(log(step))))).collect(),
            };
            sections.chain(all).map(row).collect()
        })
    }

    /// Seeks the ratio that reproduces the claims, and hands over what it finds. It takes one claim more than otherwise, since
    /// one of them is spent on the ratio: nothing is sought for fewer than three. Returns how many ratios were tried.
    pub(super) fn fitted(
        &self,
        evidence: &[Evidence],
        target: &Target<'_>,
        mut visit: impl FnMut(Hypothesis, &dyn Fn(usize) -> Option<f64>),
    ) -> usize {
        if target.differing < 3 {
            return 0;
        }
        let mut tried = 0;
        for row in self.rows() {
            tried += row.steps.len();
            // Some claims hardly feel the ratio: each is tried as the one that fixes it.
            for claim in target.differing_claims().take(6) {
                let Some(claimed) = evidence.get(claim).map(|claim| claim.claimed) else { continue };
                for ((from, a), (to, b)) in row.steps.iter().zip(row.steps.iter().skip(1)) {
                    let (Some(a), Some(b)) = (a, b) else { continue };
                    let Some((left, right)) = figure(a, claim).zip(figure(b, claim)) else { continue };
                    if (left - claimed) * (right - claimed) > 0.0 || left == right {
                        continue;
                    }
                    let share = (claimed - left) / (right - left);
                    if !target.about(&|claim| Some(figure(a, claim)? * (1.0 - share) + figure(b, claim)? * share)) {
                        continue;
                    }
                    let ratio = self.bisected(row.section, claim, claimed, (*from, left), *to);
                    if let Some(vector) = self.under(row.section, ratio) {
                        let hypothesis = Hypothesis { ratio: Some((row.section, ratio)), ..Hypothesis::default() };
                        visit(hypothesis, &|claim| figure(&vector, claim));
                    }
                }
            }
        }
        tried
    }

    /// The ratio between two logarithms at which a claim's figure is as claimed, to three decimals.
    fn bisected(&self, section: Option<usize>, claim: usize, claimed: f64, start: (f64, f64), end: f64) -> f64 {
        let ((mut from, mut left), mut to) = (start, end);
        for _ in 0..18 {
            let middle = (from + to) / 2.0;
            let vector = self.under(section, libm::exp(middle));
            let Some(here) = vector.and_then(|vector| figure(&vector, claim)) else { break };
            if (left - claimed) * (here - claimed) > 0.0 { (from, left) = (middle, here) } else { to = middle }
        }
        libm::round(libm::exp((from + to) / 2.0) * 1e3) / 1e3
    }

    fn under(&self, section: Option<usize>, ratio: f64) -> Option<Vector> {
        let member = mistake::weak_axis(self.member, section, ratio)?;
        let analysis = analysis::solve(&member)?;
        Some(self.questions.iter().map(|question| evaluate(question, &member, &analysis).ok()).collect())
    }
}

fn figure(vector: &Vector, claim: usize) -> Option<f64> {
    vector.get(claim).copied().flatten()
}
