//! Figures of all claims under one state of the member, ready for any mistake about loads and any two of them.

use std::rc::Rc;

use super::curve::Shape;
use super::gauge::Gauge;
use super::items::Effect;

/// One line a claim.
#[derive(Clone, Debug)]
pub struct Board {
    lines: Vec<Line>,
}

#[derive(Clone, Debug)]
enum Line {
    Sum {
        base: f64,
        /// By mistake about loads, what it adds.
        deltas: Vec<f64>,
        clipped: bool,
    },
    Curves {
        list: Vec<Traced>,
        finish: Finish,
    },
    Fixed(f64),
    Absent,
}

/// A curve under the state: values at its points, and what each mistake about loads adds there.
#[derive(Clone, Debug)]
struct Traced {
    shape: Rc<Shape>,
    base: Vec<f64>,
    deltas: Vec<Vec<f64>>,
    allowable: f64,
}

#[derive(Clone, Copy, Debug, PartialEq)]
enum Finish {
    Peak(f64),
    Share,
    Verdict,
}

impl Board {
    /// The board of gauges (one a claim) with the weights of every item (one list a claim) and the effects of mistakes about
    /// loads, which may be none.
    pub fn new(gauges: &[Gauge], weights: &[Rc<Vec<f64>>], own: usize, effects: &[Effect]) -> Self {
        let lines =
            gauges.iter().zip(weights).map(|(gauge, weights)| Line::new(gauge, weights, own, effects)).collect();
        Self { lines }
    }

    /// A board of figures that cannot be combined with anything.
    pub fn fixed(vector: &[Option<f64>]) -> Self {
        let line = |value: &Option<f64>| value.map_or(Line::Absent, Line::Fixed);
        Self { lines: vector.iter().map(line).collect() }
    }

    /// Whether no claim's figure here depends on a load.
    pub fn is_fixed(&self) -> bool {
        self.lines.iter().all(|line| matches!(line, Line::Fixed(_) | Line::Absent))
    }

    /// The figure of a claim under up to two mistakes about loads, which must not touch the same load.
    pub fn value(&self, claim: usize, first: Option<usize>, second: Option<usize>) -> Option<f64> {
        match self.lines.get(claim)? {
            Line::Fixed(value) => Some(*value),
            Line::Absent => None,
            Line::Sum { base, deltas, clipped } => {
                let delta = |mistake: Option<usize>| mistake.map_or(Some(0.0), |index| deltas.get(index).copied());
                let value = base + delta(first)? + delta(second)?;
                Some(if *clipped { value.max(0.0) } else { value })
            }
            Line::Curves { list, finish } => {
                let shares = list.iter().map(|traced| traced.value(*finish, first, second));
                match finish {
                    Finish::Peak(_) | Finish::Share => shares.reduce(|a, b| Some(a?.max(b?)))?,
                    Finish::Verdict => {
                        let greatest = shares.reduce(|a, b| Some(a?.max(b?)))??;
                        Some(if greatest <= 1.0 + 1e-9 { 1.0 } else { 0.0 })
                    }
                }
            }
        }
    }

    /// Whether a claim's figure is a plain sum: quick to find.
    pub fn quick(&self, claim: usize) -> bool {
        !matches!(self.lines.get(claim), Some(Line::Curves { .. }))
    }
}

impl Line {
    fn new(gauge: &Gauge, weights: &[f64], own: usize, effects: &[Effect]) -> Self {
        let sum = |values: &[f64]| values.iter().zip(weights).take(own).map(|(value, weight)| value * weight).sum();
        let trace = |curve: &super::curve::Curve, allowable: f64| {
            let points = curve.shape.at.len();
            let add = |total: &mut Vec<f64>, item: usize, times: f64| {
                let weight = times * weights.get(item).copied().unwrap_or_default();
                let values = curve.values.get(item).map_or(&[][..], Vec::as_slice);
                for (total, value) in total.iter_mut().zip(values).filter(|_| weight != 0.0) {
                    *total += weight * value;
                }
            };
            let mut base = vec![0.0; points];
            for item in 0..own {
                add(&mut base, item, 1.0);
            }
            let deltas = effects.iter().map(|effect| {
                let mut delta = vec![0.0; points];
                effect.terms.iter().for_each(|(item, times)| add(&mut delta, *item, *times));
                delta
            });
            Traced { shape: Rc::clone(&curve.shape), base, deltas: deltas.collect(), allowable }
        };
        match gauge {
            Gauge::Sum { values, clipped } => {
                let delta = |effect: &Effect| -> f64 {
                    let at = |list: &[f64], item: usize| list.get(item).copied().unwrap_or_default();
                    effect.terms.iter().map(|(item, times)| times * at(weights, *item) * at(values, *item)).sum()
                };
                Self::Sum { base: sum(values), deltas: effects.iter().map(delta).collect(), clipped: *clipped }
            }
            Gauge::Peak { curve, sign } => Self::Curves { list: vec![trace(curve, 1.0)], finish: Finish::Peak(*sign) },
            Gauge::Shares { list, verdict } => {
                let finish = if *verdict { Finish::Verdict } else { Finish::Share };
                Self::Curves { list: list.iter().map(|(curve, allowable)| trace(curve, *allowable)).collect(), finish }
            }
            Gauge::Fixed(value) => Self::Fixed(*value),
            Gauge::Absent => Self::Absent,
        }
    }
}

impl Traced {
    fn value(&self, finish: Finish, first: Option<usize>, second: Option<usize>) -> Option<f64> {
        let mut values = self.base.clone();
        for mistake in [first, second].into_iter().flatten() {
            let delta = self.deltas.get(mistake)?;
            values.iter_mut().zip(delta).for_each(|(value, delta)| *value += delta);
        }
        Some(match finish {
            Finish::Peak(sign) => self.shape.peak(&values, sign),
            Finish::Share | Finish::Verdict => {
                let greatest = self.shape.peak(&values, 1.0).abs().max(self.shape.peak(&values, -1.0).abs());
                greatest / self.allowable
            }
        })
    }
}
