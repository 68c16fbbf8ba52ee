//! Equilibrium of the whole member from loads and reactions alone.

use crate::member::{LoadKind, Member, Weight};
use crate::quantity::GRAVITY;

/// Residuals of force and of moment about the left end, relative to the sums of their terms' sizes.
///
/// `factors` are those of the cases, `reactions` upward forces and counter-clockwise moments by support.
pub fn residual(member: &Member, factors: &[f64], reactions: &[(f64, f64)]) -> f64 {
    let mut force = Sum::default();
    let mut moment = Sum::default();
    for (case, factor) in member.cases.iter().zip(factors) {
        for load in &case.loads {
            for (f, m) in resultants(member, &load.kind) {
                force.add(factor * f);
                moment.add(factor * m);
            }
        }
    }
    for (support, (up, counter)) in member.supports.iter().zip(reactions) {
        force.add(-up);
        moment.add(-up * support.at.x());
        moment.add(-counter);
    }
    force.relative().max(moment.relative())
}

#[derive(Default)]
struct Sum {
    total: f64,
    size: f64,
}

impl Sum {
    fn add(&mut self, term: f64) {
        self.total += term;
        self.size += term.abs();
    }

    fn relative(&self) -> f64 {
        if self.size == 0.0 { 0.0 } else { (self.total / self.size).abs() }
    }
}

/// Force and moment about the left end of a load, split where its intensity bends.
fn resultants(member: &Member, kind: &LoadKind) -> Vec<(f64, f64)> {
    let trapezium = |from: f64, to: f64, w0: f64, w1: f64| {
        let c = to - from;
        let (near, far) = (w0 * c / 2.0, w1 * c / 2.0);
        vec![(near, near * (from + c / 3.0)), (far, far * (to - c / 3.0))]
    };
    match kind {
        LoadKind::Point { p, at } => vec![(p.value.si(), p.value.si() * at.x())],
        LoadKind::Couple { m, .. } => vec![(0.0, m.value.si())],
        LoadKind::Uniform { w, over } => trapezium(over.from.x(), over.to.x(), w.value.si(), w.value.si()),
        LoadKind::Linear { left, right, over } => {
            trapezium(over.from.x(), over.to.x(), left.value.si(), right.value.si())
        }
        LoadKind::Area { q, width, over } => {
            let w = q.value.si() * width.value.si();
            trapezium(over.from.x(), over.to.x(), w, w)
        }
        LoadKind::SelfWeight => member
            .segments
            .iter()
            .flat_map(|segment| {
                let weight = |index: usize| member.sections.get(index).map_or(0.0, per_length);
                let near = weight(segment.section);
                let far = segment.taper.map_or(near, |taper| weight(taper.to));
                trapezium(segment.from.x(), segment.to.x(), near, far)
            })
            .collect(),
        LoadKind::Settlement { .. } | LoadKind::Rotation { .. } | LoadKind::Gradient { .. } => Vec::new(),
    }
}

fn per_length(section: &crate::member::Section) -> f64 {
    match &section.weight {
        None => 0.0,
        Some(Weight::PerLength(w)) => w.value.si(),
        Some(Weight::MassPerLength(m)) => m.value.si() * GRAVITY.to_f64(),
        Some(Weight::Mass(a, rho)) => a.value.si() * rho.value.si() * GRAVITY.to_f64(),
        Some(Weight::Specific(a, g)) => a.value.si() * g.value.si(),
    }
}
