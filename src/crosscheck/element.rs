//! One element between neighbouring nodes: its flexibility as a cantilever from its left node, by quadrature.

use super::twofold::Twofold;
use crate::member::{LoadKind, Member, Place, Section, TaperLaw, Weight};
use crate::quantity::GRAVITY;

/// Five-point Gauss-Legendre rule on [0, 1]: exact to the ninth degree.
const RULE: [(f64, f64); 5] = [
    (0.046_910_077_030_668, 0.118_463_442_528_094_54),
    (0.230_765_344_947_158_45, 0.239_314_335_249_683_24),
    (0.5, 0.284_444_444_444_444_44),
    (0.769_234_655_052_841_6, 0.239_314_335_249_683_24),
    (0.953_089_922_969_332, 0.118_463_442_528_094_54),
];

/// Panels a tapered stretch is divided into; prismatic integrands need one.
/// Linear tapers of a stiffness ratio of 200 are met to 1e-10, of 1000 to 1e-8.
const PANELS: usize = 96;

/// Deflection and turn, or force and couple.
pub(super) type Two = [Twofold; 2];

/// An element.
#[derive(Clone, Debug)]
pub(super) struct Element {
    pub from: Place,
    pub to: Place,
    pub length: f64,
    /// Inverse of the tip's flexibility.
    pub stiffness: [Two; 2],
}

/// What a case does to an element held at its left node: tip movement, total force, moment about the left node.
#[derive(Clone, Copy, Debug, Default)]
pub(super) struct Loaded {
    pub tip: Two,
    pub force: f64,
    pub moment: f64,
}

/// Local stiffness at a place.
struct Local {
    ei: f64,
    ga: Option<f64>,
    depth: f64,
    expansion: f64,
}

fn weight(section: &Section) -> f64 {
    match &section.weight {
        None => 0.0,
        Some(Weight::PerLength(w)) => w.value.si(),
        Some(Weight::MassPerLength(m)) => m.value.si() * GRAVITY.to_f64(),
        Some(Weight::Mass(a, rho)) => a.value.si() * rho.value.si() * GRAVITY.to_f64(),
        Some(Weight::Specific(a, g)) => a.value.si() * g.value.si(),
    }
}

fn local(member: &Member, segment: usize, offset: f64) -> Option<Local> {
    let segment = member.segments.get(segment)?;
    let left = member.sections.get(segment.section)?;
    let right = segment.taper.map_or(Some(left), |taper| member.sections.get(taper.to))?;
    let share = offset / segment.to.beyond(segment.from);
    let line = |a: f64, b: f64| a + (b - a) * share;
    let (i0, i1) = (left.second_moment.value.si(), right.second_moment.value.si());
    let i = match segment.taper.map(|taper| taper.law) {
        Some(TaperLaw::Cubic) => {
            let depth = line(libm::cbrt(i0), libm::cbrt(i1));
            depth * depth * depth
        }
        _ => line(i0, i1),
    };
    let ga = |section: &Section| section.shear.as_ref().map(|(g, a)| g.value.si() * a.value.si());
    let depth = |section: &Section| section.depth.as_ref().map_or(0.0, |depth| depth.value.si());
    Some(Local {
        ei: left.modulus.value.si() * i,
        ga: ga(left).zip(ga(right)).map(|(a, b)| line(a, b)),
        depth: line(depth(left), depth(right)),
        expansion: left.expansion.as_ref().map_or(0.0, |alpha| alpha.value.si()),
    })
}

/// A sample: distance from the element's left end, weight, stiffness there.
struct Sample {
    x: f64,
    weight: f64,
    at: Local,
}

/// Samples over an element, panels ending at the given places.
fn samples(member: &Member, from: Place, to: Place, breaks: &[Place]) -> Vec<Sample> {
    let mut list = Vec::new();
    for (index, segment) in member.segments.iter().enumerate() {
        let (start, end) = (segment.from.max(from), segment.to.min(to));
        if start >= end {
            continue;
        }
        let mut ends: Vec<Place> =
            [start, end].into_iter().chain(breaks.iter().copied().filter(|b| *b > start && *b < end)).collect();
        ends.sort_unstable();
        ends.dedup();
        for (a, b) in ends.iter().zip(ends.iter().skip(1)) {
            let count = if segment.taper.is_some() { PANELS } else { 1 };
            let length = b.beyond(*a) / count as f64;
            for panel in 0..count {
                for (fraction, share) in RULE {
                    let inner = length * (panel as f64 + fraction);
                    if let Some(at) = local(member, index, a.beyond(segment.from) + inner) {
                        list.push(Sample { x: a.beyond(from) + inner, weight: length * share, at });
                    }
                }
            }
        }
    }
    list
}

impl Element {
    pub(super) fn new(member: &Member, from: Place, to: Place) -> Self {
        let length = to.beyond(from);
        let mut f = [[Twofold::ZERO; 2]; 2];
        for sample in samples(member, from, to, &[]) {
            let arm = Twofold::from(length - sample.x);
            let bend = Twofold::from(sample.weight / sample.at.ei);
            let [[vv, vp], [pv, pp]] = &mut f;
            *vv += arm * arm * bend + Twofold::from(sample.at.ga.map_or(0.0, |ga| sample.weight / ga));
            *vp += arm * bend;
            *pv += arm * bend;
            *pp += bend;
        }
        let [[a, b], [_, d]] = f;
        let determinant = a * d - b * b;
        Self { from, to, length, stiffness: [[d / determinant, -b / determinant], [-b / determinant, a / determinant]] }
    }

    /// What a case does to the element held at its left node; a load at the right node belongs to it, one at the left node
    /// only where nothing lies further left.
    pub(super) fn loaded(&self, member: &Member, case: usize) -> Loaded {
        let mut sum = Loaded::default();
        let Some(case) = member.cases.get(case) else { return sum };
        for load in &case.loads {
            self.one(member, &load.kind, &mut sum);
        }
        sum
    }

    fn one(&self, member: &Member, kind: &LoadKind, sum: &mut Loaded) {
        let mine = |at: Place| (at > self.from && at <= self.to) || (at == self.from && at == Place::ZERO);
        match kind {
            LoadKind::Point { p, at } if mine(*at) => {
                let a = at.beyond(self.from);
                self.forces(member, &[*at], sum, |x| {
                    if x < a { (p.value.si(), p.value.si() * (a - x)) } else { (0.0, 0.0) }
                });
                sum.force += p.value.si();
                sum.moment += p.value.si() * a;
            }
            LoadKind::Couple { m, at } if mine(*at) => {
                let a = at.beyond(self.from);
                self.forces(member, &[*at], sum, |x| if x < a { (0.0, m.value.si()) } else { (0.0, 0.0) });
                sum.moment += m.value.si();
            }
            LoadKind::Uniform { w, over } => self.spread(member, over.from, over.to, (w.value.si(), w.value.si()), sum),
            LoadKind::Area { q, width, over } => {
                let w = q.value.si() * width.value.si();
                self.spread(member, over.from, over.to, (w, w), sum);
            }
            LoadKind::Linear { left, right, over } => {
                self.spread(member, over.from, over.to, (left.value.si(), right.value.si()), sum);
            }
            LoadKind::SelfWeight => {
                for segment in &member.segments {
                    let near = member.sections.get(segment.section).map_or(0.0, weight);
                    let far = segment.taper.and_then(|taper| member.sections.get(taper.to)).map_or(near, weight);
                    self.spread(member, segment.from, segment.to, (near, far), sum);
                }
            }
            LoadKind::Gradient { difference, over } => {
                for sample in samples(member, self.from, self.to, &[over.from, over.to]) {
                    let inside = sample.x >= over.from.beyond(self.from) && sample.x < over.to.beyond(self.from);
                    if inside {
                        let turn = sample.weight * sample.at.expansion * difference.value.si() / sample.at.depth;
                        let [v, psi] = &mut sum.tip;
                        *v += Twofold::from(turn) * Twofold::from(self.length - sample.x);
                        *psi += Twofold::from(turn);
                    }
                }
            }
            _ => {}
        }
    }

    /// An intensity from one place to another, linear between its end values.
    fn spread(&self, member: &Member, from: Place, to: Place, (w0, w1): (f64, f64), sum: &mut Loaded) {
        let (start, end) = (from.max(self.from), to.min(self.to));
        if start >= end {
            return;
        }
        let whole = to.beyond(from);
        let at = |place: Place| w0 + (w1 - w0) * place.beyond(from) / whole;
        let (near, far) = (at(start), at(end));
        let (a, b) = (start.beyond(self.from), end.beyond(self.from));
        // Force and moment about x of what lies to the right of x, from the trapezium that is left there.
        let right_of = |x: f64| {
            if x >= b {
                return (0.0, 0.0);
            }
            let left = x.max(a);
            let here = near + (far - near) * (left - a) / (b - a);
            let length = b - left;
            let force = (here + far) / 2.0 * length;
            let first = length * length * (here + 2.0 * far) / 6.0;
            (force, force * (left - x) + first)
        };
        let (force, moment) = right_of(0.0_f64.min(a));
        sum.force += force;
        sum.moment += moment;
        self.forces(member, &[start, end], sum, right_of);
    }

    /// Adds the tip movement caused by shear and hogging moment along the element.
    fn forces(&self, member: &Member, breaks: &[Place], sum: &mut Loaded, right_of: impl Fn(f64) -> (f64, f64)) {
        for sample in samples(member, self.from, self.to, breaks) {
            let (shear, hogging) = right_of(sample.x);
            let turn = sample.weight * hogging / sample.at.ei;
            let [v, psi] = &mut sum.tip;
            *v += Twofold::from(turn) * Twofold::from(self.length - sample.x)
                + Twofold::from(sample.at.ga.map_or(0.0, |ga| sample.weight * shear / ga));
            *psi += Twofold::from(turn);
        }
    }
}
