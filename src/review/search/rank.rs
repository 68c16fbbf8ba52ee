//! The search itself: singles, then pairs, ranked, the leading ones solved in full, and what must be said about them.

use super::engine::{Engine, Hypothesis, Vector};
use super::fit::{Fit, Target};
use super::{Evidence, Explanation, Findings};
use crate::member::Member;
use crate::review::ask::evaluate;

/// The most explanations returned.
const MOST: usize = 10;
/// The most that are solved in full.
const CHECKED: usize = 60;

/// A hypothesis that fits.
#[derive(Clone, Debug)]
struct Found {
    hypothesis: Hypothesis,
    fit: Fit,
    mistakes: usize,
    vector: Vector,
    member: Option<Member>,
}

impl Found {
    /// Better first: explains more, keeps more, takes fewer mistakes (a fitted ratio counts on top), is nearer.
    fn rank(&self) -> impl Ord + use<> {
        let fitted = usize::from(self.hypothesis.ratio.is_some());
        let spread = (self.fit.spread * 1e9) as u64;
        (usize::MAX - self.fit.explains, usize::MAX - self.fit.keeps, 2 * self.mistakes + fitted, spread)
    }
}

impl Engine<'_> {
    /// Searches with the claims in the order of the engine's questions.
    pub fn findings(&self, evidence: &[Evidence]) -> Findings {
        let target = self.target(evidence);
        if target.differing == 0 {
            return Findings::default();
        }
        let mut tried = 0;
        let mut found = Vec::new();
        self.singles(|hypothesis, value| {
            tried += 1;
            self.weigh(&target, hypothesis, value, 1, &mut found);
        });
        let whole = |found: &[Found]| {
            found.iter().any(|f| f.fit.explains == target.differing && f.fit.keeps == target.agreeing)
        };
        let mut chance = 0.0;
        if !whole(&found) && target.differing >= 2 {
            tried += self.fitted(evidence, &target, |hypothesis, value| {
                self.weigh(&target, hypothesis, value, 1, &mut found);
            });
            found.dedup_by(|a, b| a.hypothesis.ratio.is_some() && a.hypothesis == b.hypothesis);
        }
        if !whole(&found) && target.differing >= 2 {
            let before = tried;
            self.pairs(|hypothesis, value| {
                tried += 1;
                self.weigh(&target, hypothesis, value, 2, &mut found);
            });
            for (first, second, vector) in self.doubles() {
                tried += 1;
                let structures = [Some(*first), Some(*second)];
                let hypothesis = Hypothesis { structures, ..Hypothesis::default() };
                let value = |claim: usize| vector.get(claim).copied().flatten();
                self.weigh(&target, hypothesis, &value, 2, &mut found);
            }
            chance = self.chance(evidence, &target, tried - before);
        }
        found.sort_by_key(Found::rank);
        let fits = found.len();
        let mut named = self.checked(&target, found);
        self.same_name_once(&target, &mut named);
        named.truncate(MOST);
        let remark = self.remark(&target, &named, fits, chance);
        let explanations = named.iter().map(|one| self.explanation(&target, one, &named)).collect();
        Findings { explanations, remark, tried }
    }

    /// The claims as the search looks at them.
    pub fn target<'e>(&self, evidence: &'e [Evidence]) -> Target<'e> {
        Target::new(evidence, self)
    }

    /// The checker's own figure for a claim.
    pub fn figure(&self, claim: usize) -> Option<f64> {
        let question = self.questions.get(claim)?;
        evaluate(question, self.member, self.analysis).ok()
    }

    fn weigh(
        &self,
        target: &Target<'_>,
        hypothesis: Hypothesis,
        value: &dyn Fn(usize) -> Option<f64>,
        mistakes: usize,
        found: &mut Vec<Found>,
    ) {
        if let Some(fit) = target.fit(value) {
            let vector = (0..self.questions.len()).map(value).collect();
            found.push(Found { hypothesis, fit, mistakes, vector, member: None });
        }
    }

    /// Each of the leading ones solved in full; what does not hold then is dropped.
    fn checked(&self, target: &Target<'_>, found: Vec<Found>) -> Vec<Found> {
        let mut kept = Vec::new();
        for mut one in found.into_iter().take(CHECKED) {
            if one.hypothesis.reading.is_none() {
                let Some((member, vector)) = self.exact(&one.hypothesis) else { continue };
                let Some(fit) = target.fit(&|claim| vector.get(claim).copied().flatten()) else { continue };
                (one.fit, one.vector, one.member) = (fit, vector, Some(member));
            }
            kept.push(one);
        }
        kept.sort_by_key(Found::rank);
        kept
    }

    /// Variants of one mistake that give the same figures are named once.
    fn same_name_once(&self, target: &Target<'_>, found: &mut Vec<Found>) {
        let names = |one: &Found| -> Vec<String> {
            self.mistakes(&one.hypothesis).iter().map(|mistake| mistake.name.clone()).collect()
        };
        let mut kept: Vec<Found> = Vec::new();
        for one in found.drain(..) {
            let again = kept.iter().any(|known| {
                names(known) == names(&one)
                    && known.hypothesis.ratio.is_some() == one.hypothesis.ratio.is_some()
                    && target.coincide(&known.vector, &one.vector)
            });
            if !again {
                kept.push(one);
            }
        }
        *found = kept;
    }

    /// How many pairs would fit claims that are merely somewhere near: the share of single mistakes whose figure lies about
    /// each claim, claim by claim, times the number of pairs.
    fn chance(&self, evidence: &[Evidence], target: &Target<'_>, pairs: usize) -> f64 {
        const WINDOW: f64 = 20.0;
        let claims: Vec<usize> = target.differing_claims().collect();
        let mut near = vec![0.0; claims.len()];
        let mut count = 0.0;
        self.singles(|_, value| {
            count += 1.0;
            for (near, claim) in near.iter_mut().zip(&claims) {
                let Some(known) = evidence.get(*claim) else { continue };
                if value(*claim).is_some_and(|value| (value - known.claimed).abs() <= WINDOW * known.tolerance) {
                    *near += 1.0;
                }
            }
        });
        near.iter().fold(pairs as f64, |expected, near| expected * (near + 1.0) / (count + 1.0) / WINDOW)
    }

    fn remark(&self, target: &Target<'_>, named: &[Found], fits: usize, chance: f64) -> Option<String> {
        let mut parts = Vec::new();
        let best = named.first();
        if best.is_none() {
            parts.push(
                "None of the mistakes tried, single or in pairs, would reproduce the claims that differ.".to_owned(),
            );
            if self.doubles_left_out() {
                parts.push(
                    "Pairs of two changes to the structure were left out: there are too many on this member."
                        .to_owned(),
                );
            }
            return Some(parts.join(" "));
        }
        if target.differing < 3 {
            let claims = if target.differing == 1 { "Only one claim differs" } else { "Only two claims differ" };
            parts.push(format!("{claims}: that leaves many stories open, and more figures would tell them apart."));
        }
        let level = |one: &Found| (one.fit.explains, one.fit.keeps, one.mistakes);
        let mut distinct: Vec<&Found> = Vec::new();
        for one in named.iter().filter(|one| best.map(level) == Some(level(one))) {
            if !distinct.iter().any(|known| target.coincide(&known.vector, &one.vector)) {
                distinct.push(one);
            }
        }
        if fits > MOST || distinct.len() > 3 {
            parts.push(format!("{fits} hypotheses fit these claims within their tolerances."));
        }
        let needs_pair = best.is_some_and(|one| one.mistakes > 1);
        if needs_pair && chance > 0.02 {
            parts.push("So many pairs were tried that one may fit by chance.".to_owned());
        }
        if best.is_some_and(|one| one.hypothesis.ratio.is_some()) && target.differing < 4 {
            parts.push("The ratio was fitted to one of the claims, which leaves few to confirm it.".to_owned());
        }
        (!parts.is_empty()).then(|| parts.join(" "))
    }

    fn explanation(&self, target: &Target<'_>, one: &Found, all: &[Found]) -> Explanation {
        let mut names: Vec<(String, String, String)> = Vec::new();
        if let Some((section, ratio)) = one.hypothesis.ratio {
            let section = section.and_then(|index| self.member.sections.get(index));
            let place = section.map_or("every section".to_owned(), |section| format!("section {}", section.name));
            let words =
                format!("taking {place} about its weak axis (I divided by {ratio}, a ratio fitted to the claims)");
            names.push(("section-weak-axis".to_owned(), place, words));
        }
        for mistake in self.mistakes(&one.hypothesis) {
            names.push((mistake.name.clone(), mistake.place.clone(), mistake.words.clone()));
        }
        let words: Vec<&str> = names.iter().map(|(_, _, words)| words.as_str()).collect();
        let subject = match words.as_slice() {
            [first, second] => format!("{}, together with {second},", capital(first)),
            _ => capital(words.first().copied().unwrap_or_default()),
        };
        let object = if one.fit.explains == target.differing {
            "these figures".to_owned()
        } else {
            format!("{} of these {} figures", one.fit.explains, target.differing)
        };
        let same = |other: &&Found| other.hypothesis != one.hypothesis && target.coincide(&other.vector, &one.vector);
        Explanation {
            text: format!("{subject} would reproduce {object}."),
            explains: one.fit.explains,
            keeps: one.fit.keeps,
            largest_relative_difference: one.fit.worst,
            member: one.member.clone(),
            tie: all.iter().any(|other| same(&other)),
            mistakes: names.iter().map(|(name, _, _)| name.clone()).collect(),
            wheres: names.into_iter().map(|(_, place, _)| place).collect(),
        }
    }
}

/// With a capital letter in front.
fn capital(words: &str) -> String {
    let mut letters = words.chars();
    letters.next().map_or_else(String::new, |first| first.to_uppercase().chain(letters).collect())
}
