//! Deflection limits against demands, and net uplift.
//!
//! Verdicts are taken from unrounded values; a tie within 1e-9 of the allowable holds.

use crate::analysis::equilibrium as sums;
use crate::analysis::{Analysis, Field, Spot};
use crate::member::{Limit, Measured, Member, Span};

/// One limit against one combination over one span.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Check {
    /// Index of the limit.
    pub limit: usize,
    /// Index of the combination.
    pub combination: usize,
    /// Index of the span.
    pub span: usize,
    /// Deflection of greatest size as the limit measures it, m; signed, downward positive.
    pub deflection: f64,
    /// Its place from the member's left end, m.
    pub at: f64,
    /// The same as a piece and a distance.
    pub spot: Spot,
    /// Allowable deflection, m.
    pub allowable: f64,
    /// Demand over allowable.
    pub utilisation: f64,
    /// Whether the limit holds.
    pub pass: bool,
}

/// A support that is pulled up in some combination.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Uplift {
    /// Index of the support.
    pub support: usize,
    /// Index of the combination in which it is pulled hardest.
    pub combination: usize,
    /// Its reaction there, N; negative.
    pub force: f64,
}

/// Everything that is found about the member.
#[derive(Clone, Debug, PartialEq, Default)]
pub struct Verdict {
    /// Every limit against every combination and span it covers, in the deck's order.
    pub checks: Vec<Check>,
    /// Supports that need holding down.
    pub uplifts: Vec<Uplift>,
}

impl Verdict {
    /// The check that governs: the greatest utilisation.
    pub fn governing(&self) -> Option<&Check> {
        self.checks.iter().reduce(|best, next| if next.utilisation > best.utilisation { next } else { best })
    }

    /// Whether every limit holds.
    pub fn holds(&self) -> bool {
        self.checks.iter().all(|check| check.pass)
    }

    /// The two sentences: deflection and strength.
    pub fn sentences(&self, member: &Member) -> [String; 2] {
        let strength = "Strength: not checked.".to_owned();
        let Some(check) = self.governing() else { return ["Deflection: no limit set.".to_owned(), strength] };
        let combination = member.combinations.get(check.combination).map_or("", |c| c.name.as_str());
        let span = member.spans.get(check.span).map_or(String::new(), |span| span.name.replace('-', "–"));
        let share = rounded_up(check.utilisation);
        let words = if self.holds() { "within limits" } else { "EXCEEDS the limit" };
        [format!("Deflection: {words}, {share} of the allowable ({combination}, span {span})."), strength]
    }
}

/// A utilisation with two decimals, rounded up so that nothing exceeding reads as 1.00.
pub fn rounded_up(utilisation: f64) -> String {
    // A hair is taken off first, so that 0.81 does not become 0.82 by a rounding of its last bit.
    let hundredths = libm::ceil(utilisation * 100.0 - 1e-9) as i64;
    format!("{}.{:02}", hundredths / 100, hundredths % 100)
}

/// Weighs the member.
pub fn weigh(member: &Member, analysis: &Analysis) -> Verdict {
    let mut verdict = Verdict::default();
    let fields: Vec<Option<Field<'_>>> =
        (0..member.combinations.len()).map(|index| Field::of_combination(analysis, member, index)).collect();
    for (index, limit) in member.limits.iter().enumerate() {
        for combination in &limit.combinations {
            for span in &limit.spans {
                let field = fields.get(*combination).and_then(Option::as_ref);
                let (Some(field), Some(over)) = (field, member.spans.get(*span)) else { continue };
                verdict.checks.push(check(field, limit, over, (index, *combination, *span)));
            }
        }
    }
    for support in 0..member.supports.len() {
        let forces = analysis.combinations.iter().enumerate().filter_map(|(combination, solution)| {
            let force = solution.reactions.get(support)?.force;
            let scale = solution.reactions.iter().map(|reaction| reaction.force.abs()).fold(0.0, f64::max);
            (force < -1e-9 * scale).then_some(Uplift { support, combination, force })
        });
        verdict.uplifts.extend(forces.reduce(|worst, next| if next.force < worst.force { next } else { worst }));
    }
    verdict
}

/// One limit over one span in the state of `field`; the indices of limit, combination and span go into the check as given.
pub fn check(
    field: &Field<'_>,
    limit: &Limit,
    span: &Span,
    (index, combination, place): (usize, usize, usize),
) -> Check {
    let (base, slope) = reference(field, limit.measured, span);
    let found = field.greatest_from(span, base, slope);
    let allowable = allowable(limit, span);
    let utilisation = sums::utilisation(found.value, allowable);
    Check {
        limit: index,
        combination,
        span: place,
        deflection: found.value,
        at: found.at,
        spot: found.spot,
        allowable,
        utilisation,
        pass: utilisation <= 1.0 + 1e-9,
    }
}

/// The line that a span's deflections are measured from: its height at the span's start, m, and its slope.
pub fn reference(field: &Field<'_>, measured: Measured, span: &Span) -> (f64, f64) {
    if measured == Measured::Absolute {
        return (0.0, 0.0);
    }
    let (left, right) = (field.at(span.from).v, field.at(span.to).v);
    match (span.left, span.right) {
        (Some(_), Some(_)) => (left, (right - left) / span.to.beyond(span.from)),
        (Some(_), None) => (left, 0.0),
        (None, Some(_)) => (right, 0.0),
        (None, None) => (0.0, 0.0),
    }
}

/// Allowable deflection of a span under a limit, m.
pub fn allowable(limit: &Limit, span: &Span) -> f64 {
    let length = span.to.beyond(span.from);
    let factor = limit.cantilever_length_factor.filter(|_| span.is_cantilever()).map_or(1.0, |factor| factor.value);
    let by_ratio = limit.ratio.map(|ratio| sums::allowable(factor * length, ratio.value));
    let absolute = limit.absolute.as_ref().map(|absolute| absolute.value.si());
    match (by_ratio, absolute) {
        (Some(ratio), Some(absolute)) => ratio.min(absolute),
        (Some(only), None) | (None, Some(only)) => only,
        (None, None) => f64::INFINITY,
    }
}

#[cfg(test)]
mod tests {
    use super::rounded_up;

    #[test]
    fn utilisations_round_up_and_never_hide_a_failure() {
        assert_eq!(rounded_up(0.81), "0.81");
        assert_eq!(rounded_up(0.8101), "0.82");
        assert_eq!(rounded_up(1.0), "1.00");
        assert_eq!(rounded_up(1.000_001), "1.01");
        assert_eq!(rounded_up(0.0), "0.00");
    }
}
