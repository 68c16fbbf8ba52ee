//! How well figures fit the claims.

use super::Evidence;
use super::engine::Engine;

/// How well a hypothesis fits.
#[derive(Clone, Copy, Debug, PartialEq, Default)]
pub struct Fit {
    /// Differing claims reproduced.
    pub explains: usize,
    /// Agreeing claims kept.
    pub keeps: usize,
    /// Largest difference from a claim reproduced, relative to the claim.
    pub worst: f64,
    /// Mean square of the differences, each measured by its tolerance.
    pub spread: f64,
}

/// The claims, in the order in which they are looked at, and how many may be missed.
pub struct Target<'e> {
    evidence: &'e [Evidence],
    /// By claim, what is rounding: a hair of the checker's own figure.
    hairs: Vec<f64>,
    order: Vec<usize>,
    /// Claims that differ.
    pub differing: usize,
    /// Claims that agree.
    pub agreeing: usize,
}

impl<'e> Target<'e> {
    /// The claims that the member has a figure for: differing ones first, and plain sums before peaks.
    pub fn new(evidence: &'e [Evidence], engine: &Engine<'_>) -> Self {
        let has = |claim: &usize| {
            evidence.get(*claim).is_some_and(|claim| claim.claimed.is_finite()) && engine.figure(*claim).is_some()
        };
        let mut order: Vec<usize> = (0..evidence.len()).filter(has).collect();
        let differs = |claim: usize| evidence.get(claim).is_some_and(|claim| claim.differs);
        order.sort_by_key(|claim| (!engine.quick(*claim), !differs(*claim)));
        let differing = order.iter().filter(|claim| differs(**claim)).count();
        let hair = |claim: usize| 1e-9 * engine.figure(claim).map_or(0.0, f64::abs);
        let hairs = (0..evidence.len()).map(hair).collect();
        Self { differing, agreeing: order.len() - differing, order, evidence, hairs }
    }

    /// How many differing claims a hypothesis may miss: one in six.
    pub fn may_miss(&self) -> usize {
        self.differing / 6
    }

    /// How many agreeing claims a hypothesis may spoil: one in six, and fewer than it explains.
    fn may_spoil(&self) -> usize {
        (self.agreeing / 6).min(self.differing.saturating_sub(1) / 2)
    }

    /// The fit of a hypothesis; `None` where it misses too many claims.
    pub fn fit(&self, value: &dyn Fn(usize) -> Option<f64>) -> Option<Fit> {
        let (mut missed, mut spoilt) = (0, 0);
        let mut fit = Fit::default();
        for claim in &self.order {
            let known = self.evidence.get(*claim)?;
            let off = value(*claim).map(|value| (value - known.claimed).abs());
            // A claim may stand exactly on the edge, and a figure that should be nought may be rounding.
            let hair = self.hairs.get(*claim).copied().unwrap_or_default();
            match off.filter(|off| *off <= known.tolerance + hair) {
                Some(off) => {
                    fit.explains += usize::from(known.differs);
                    fit.keeps += usize::from(!known.differs);
                    if known.claimed != 0.0 {
                        fit.worst = fit.worst.max(off / known.claimed.abs());
                    }
                    if known.tolerance > 0.0 {
                        fit.spread += (off / known.tolerance) * (off / known.tolerance);
                    }
                }
                None if known.differs => missed += 1,
                None => spoilt += 1,
            }
            if missed > self.may_miss() || spoilt > self.may_spoil() {
                return None;
            }
        }
        fit.spread /= self.order.len() as f64;
        (fit.explains > 0).then_some(fit)
    }

    /// Whether figures that are not exact yet come near enough to all claims to be worth a closer look.
    pub fn about(&self, value: &dyn Fn(usize) -> Option<f64>) -> bool {
        let far = |claim: &&usize| {
            let known = self.evidence.get(**claim);
            let off = known.zip(value(**claim)).map(|(known, value)| (value - known.claimed).abs() / known.tolerance);
            off.is_none_or(|off| off > 10.0)
        };
        self.order.iter().filter(far).count() <= self.may_miss() + self.may_spoil()
    }

    /// Whether two hypotheses give the same figures within the tolerances.
    pub fn coincide(&self, a: &[Option<f64>], b: &[Option<f64>]) -> bool {
        self.order.iter().all(|claim| {
            let tolerance = self.evidence.get(*claim).map_or(0.0, |claim| claim.tolerance);
            match (a.get(*claim).copied().flatten(), b.get(*claim).copied().flatten()) {
                (Some(a), Some(b)) => (a - b).abs() <= tolerance + self.hairs.get(*claim).copied().unwrap_or_default(),
                (None, None) => true,
                _ => false,
            }
        })
    }

    /// Claims that differ.
    pub fn differing_claims(&self) -> impl Iterator<Item = usize> + '_ {
        self.order.iter().copied().filter(|claim| self.evidence.get(*claim).is_some_and(|claim| claim.differs))
    }
}
