//! Loads on a piece, as figures of the working.

use super::given::LoadBook;
use super::{Finding, Narrator, finding};
use crate::analysis::Cut;
use crate::analysis::action::{Acting, Action};
use crate::analysis::cantilever as tip;
use crate::analysis::equilibrium as sums;
use crate::analysis::model::Piece;
use crate::analysis::stiffness::linear_between;
use crate::member::{LoadKind, Place, Stretch};
use crate::working::draft::Symbol;
use crate::working::trace::Traced;
use crate::working::units::What;

/// What acts on a piece, or on its head or tail: the analysis's action and the steps behind its figures.
#[derive(Clone, Debug)]
pub struct Act {
    /// The analysis's action; distances from the left end of the piece, head or tail.
    pub action: Action,
    /// A force, couple, near intensity, or difference of strain per depth.
    pub first: Traced,
    /// Far intensity.
    pub second: Traced,
    /// Distance of its near end.
    pub a: Traced,
    /// Length of the loaded part.
    pub c: Traced,
    /// Distance of its far end.
    pub b: Traced,
    /// Whether it covers the whole length.
    pub whole: bool,
}

impl Act {
    fn uniform(&self) -> bool {
        self.first.source().is_some() && self.first.source() == self.second.source()
    }

    /// Downward force.
    pub fn resultant(&self) -> Traced {
        match self.action {
            Action::Force { .. } => self.first.clone(),
            Action::Spread { .. } if self.uniform() => self.first.clone() * self.c.clone(),
            Action::Spread { .. } => sums::linear_resultant(self.first.clone(), self.second.clone(), self.c.clone()),
            Action::Couple { .. } | Action::Gradient { .. } => Traced::zero(),
        }
    }

    /// Clockwise moment about a point the distance `d` to the left of where distances are measured from.
    pub fn moment(&self, d: Traced) -> Traced {
        let arm = d + self.a.clone();
        match self.action {
            Action::Force { .. } => self.first.clone() * arm,
            Action::Couple { .. } => self.first.clone(),
            Action::Spread { .. } if self.uniform() => {
                if arm.is_zero() {
                    sums::uniform_from_end(self.first.clone(), self.c.clone())
                } else {
                    sums::uniform_moment(self.first.clone(), arm, self.c.clone())
                }
            }
            Action::Spread { .. } => sums::linear_moment(self.first.clone(), self.second.clone(), arm, self.c.clone()),
            Action::Gradient { .. } => Traced::zero(),
        }
    }

    /// Deflection, shear deflection and turn it alone gives at the tip of a piece of constant rigidity.
    pub fn tip(&self, l: &Traced, ei: &Traced, ga: Option<&Traced>) -> [Traced; 3] {
        let (first, second) = (self.first.clone(), self.second.clone());
        let (a, b, c, l, ei) = (self.a.clone(), self.b.clone(), self.c.clone(), l.clone(), ei.clone());
        let shear = |value: &dyn Fn(Traced) -> Traced| ga.map_or_else(Traced::zero, |ga| value(ga.clone()));
        match self.action {
            Action::Force { .. } if self.whole => [
                tip::tip_force_v(first.clone(), l.clone(), ei.clone()),
                shear(&|ga| tip::shear_force_v(first.clone(), l.clone(), ga)),
                tip::tip_force_psi(first.clone(), l.clone(), ei),
            ],
            Action::Force { .. } => [
                tip::force_v(first.clone(), a.clone(), l, ei.clone()),
                shear(&|ga| tip::shear_force_v(first.clone(), a.clone(), ga)),
                tip::force_psi(first.clone(), a.clone(), ei),
            ],
            Action::Couple { .. } if self.whole => [
                tip::tip_couple_v(first.clone(), l.clone(), ei.clone()),
                Traced::zero(),
                tip::tip_couple_psi(first, l, ei),
            ],
            Action::Couple { .. } => {
                [tip::couple_v(first.clone(), a.clone(), l, ei.clone()), Traced::zero(), tip::couple_psi(first, a, ei)]
            }
            Action::Spread { .. } if self.uniform() && self.whole => [
                tip::uniform_v(first.clone(), l.clone(), ei.clone()),
                shear(&|ga| tip::shear_uniform_v(first.clone(), Traced::zero(), l.clone(), ga)),
                tip::uniform_psi(first.clone(), l.clone(), ei),
            ],
            Action::Spread { .. } if self.uniform() => [
                tip::uniform_part_v(first.clone(), a.clone(), b.clone(), l, ei.clone()),
                shear(&|ga| tip::shear_uniform_v(first.clone(), a.clone(), b.clone(), ga)),
                tip::uniform_part_psi(first.clone(), a.clone(), b.clone(), ei),
            ],
            Action::Spread { .. } if self.whole => [
                tip::linear_v(first.clone(), second.clone(), l.clone(), ei.clone()),
                shear(&|ga| tip::shear_linear_v(first.clone(), second.clone(), Traced::zero(), l.clone(), ga)),
                tip::linear_psi(first.clone(), second.clone(), l.clone(), ei),
            ],
            Action::Spread { .. } => [
                tip::linear_part_v(first.clone(), second.clone(), a.clone(), c.clone(), l, ei.clone()),
                shear(&|ga| tip::shear_linear_v(first.clone(), second.clone(), a.clone(), c.clone(), ga)),
                tip::linear_part_psi(first.clone(), second.clone(), a.clone(), c.clone(), ei),
            ],
            Action::Gradient { .. } => [
                tip::curvature_v(first.clone(), a.clone(), b.clone(), l),
                Traced::zero(),
                tip::curvature_psi(first, a, b),
            ],
        }
    }

    /// The tabulated case it rests on.
    pub fn basis(&self) -> &'static str {
        match self.action {
            Action::Force { .. } => "cantilever: force at a distance",
            Action::Couple { .. } => "cantilever: couple at a distance",
            Action::Spread { .. } if self.uniform() => "cantilever: uniform load",
            Action::Spread { .. } => "cantilever: linearly varying load",
            Action::Gradient { .. } => "cantilever: imposed curvature",
        }
    }
}

impl Narrator<'_> {
    /// Each of a piece's actions in a case, with the steps behind it.
    pub fn acts(&mut self, list: &[Acting], piece: &Piece) -> Vec<Act> {
        list.iter().filter_map(|acting| self.act(acting, piece)).collect()
    }

    fn act(&mut self, acting: &Acting, piece: &Piece) -> Option<Act> {
        let kind = self.member.cases.get(acting.case)?.loads.get(acting.load)?.kind.clone();
        let book = self.book.loads.get(acting.case)?.get(acting.load)?.clone();
        let action = acting.action;
        match (&kind, book) {
            (LoadKind::Point { at, .. } | LoadKind::Couple { at, .. }, LoadBook::Single(first)) => {
                let a = self.distance(piece.from, *at);
                let whole = *at == piece.to;
                Some(Act { action, first, second: Traced::zero(), b: a.clone(), a, c: Traced::zero(), whole })
            }
            (LoadKind::SelfWeight, _) => self.weight_act(action, piece),
            (
                LoadKind::Uniform { over, .. } | LoadKind::Area { over, .. } | LoadKind::Linear { over, .. },
                LoadBook::Spread(near, far),
            ) => Some(self.spread_act(action, piece, *over, near, far)),
            (LoadKind::Gradient { over, .. }, LoadBook::Single(difference)) => {
                self.gradient_act(action, piece, *over, difference)
            }
            _ => None,
        }
    }

    /// The part of a stretch on a piece, and the figures of its ends and length.
    fn part(&mut self, piece: &Piece, over: Stretch) -> (Stretch, [Traced; 3], bool) {
        let part = Stretch { from: over.from.max(piece.from), to: over.to.min(piece.to) };
        let figures = [
            self.distance(piece.from, part.from),
            self.distance(part.from, part.to),
            self.distance(piece.from, part.to),
        ];
        (part, figures, part.from == piece.from && part.to == piece.to)
    }

    fn spread_act(&mut self, action: Action, piece: &Piece, over: Stretch, near: Traced, far: Traced) -> Act {
        let (part, [a, c, b], whole) = self.part(piece, over);
        let (mut first, mut second) = (near.clone(), far.clone());
        if let (Action::Spread { w0, w1, .. }, true) = (action, near.source() != far.source()) {
            first = self.intensity(over, part.from, &near, &far, w0);
            second = self.intensity(over, part.to, &near, &far, w1);
        }
        Act { action, first, second, a, c, b, whole }
    }

    /// Intensity of a linearly varying load at a place.
    fn intensity(&mut self, over: Stretch, at: Place, near: &Traced, far: &Traced, value: f64) -> Traced {
        if at == over.from {
            return near.clone();
        }
        if at == over.to {
            return far.clone();
        }
        let (length, along) = (self.distance(over.from, over.to), self.distance(over.from, at));
        let unit = self.builder.base.coherent(1, -1);
        let symbol = Symbol::new("w", format!("at{}", self.place_name(at)));
        let what = finding(format!("intensity at x = {} m", at.exact()), symbol, (What::Other, unit), value);
        let expression = sums::intensity_at(near.clone(), far.clone(), length, along);
        let slot = self.book.derived;
        self.builder.aside(slot, |builder| builder.find(what, expression))
    }

    fn weight_act(&mut self, action: Action, piece: &Piece) -> Option<Act> {
        let segment = self.member.segments.get(piece.segment)?;
        let near = self.book.sections.get(segment.section)?.weight.clone()?;
        let over = Stretch { from: segment.from, to: segment.to };
        let far = match segment.taper {
            Some(taper) => self.book.sections.get(taper.to)?.weight.clone()?,
            None => near.clone(),
        };
        Some(self.spread_act(action, piece, over, near, far))
    }

    fn gradient_act(&mut self, action: Action, piece: &Piece, over: Stretch, difference: Traced) -> Option<Act> {
        let (_, [a, c, b], whole) = self.part(piece, over);
        let segment = self.member.segments.get(piece.segment)?;
        let book = self.book.sections.get(segment.section)?.clone();
        let strain = book.expansion? * difference;
        let Action::Gradient { strain: value, .. } = action else { return None };
        let none = crate::quantity::Unit::none();
        let slot = self.book.derived;
        let first = if segment.taper.is_some() {
            let what = finding(
                "strain, top less bottom",
                Symbol::new("epsilon", self.place_name(piece.to)),
                (What::Other, none),
                value,
            );
            self.builder.aside(slot, |builder| builder.find(what, strain))
        } else {
            let depth = self.member.sections.get(segment.section)?.depth.as_ref()?.value.si();
            let unit = self.builder.base.coherent(0, -1);
            let what = finding(
                "curvature by temperature",
                Symbol::new("kappa", self.place_name(piece.to)),
                (What::Other, unit),
                value / depth,
            );
            let expression = strain / book.depth?;
            self.builder.aside(slot, |builder| builder.find(what, expression))
        };
        Some(Act { action, first, second: Traced::zero(), a, c, b, whole })
    }

    /// Shear and moment at the near end of a length, from those at its far end and what acts between.
    pub fn near_end(
        &mut self,
        far: &(Traced, Traced),
        l: &Traced,
        acts: &[Act],
        found: [Finding; 2],
        always: bool,
    ) -> (Traced, Traced) {
        let [shear, moment] = found;
        let mut forces = vec![far.0.clone()];
        let mut moments = vec![far.1.clone(), -(far.0.clone() * l.clone())];
        for act in acts {
            forces.push(act.resultant());
            moments.push(-act.moment(Traced::zero()));
        }
        (self.total(shear, forces, always), self.total(moment, moments, always))
    }

    /// Deflection and turn of the tip of a length of constant rigidity: by the cut at its tip and what acts on it.
    pub fn own_bending(
        &mut self,
        piece: &Piece,
        l: &Traced,
        cut: &(Traced, Traced),
        acts: &[Act],
        found: [Finding; 2],
    ) -> Option<(Traced, Traced)> {
        let segment = self.member.segments.get(piece.segment)?;
        let book = self.book.sections.get(segment.section)?.clone();
        let mut vs = vec![
            tip::tip_force_v(cut.0.clone(), l.clone(), book.ei.clone()),
            -tip::tip_couple_v(cut.1.clone(), l.clone(), book.ei.clone()),
        ];
        let mut turns = vec![
            tip::tip_force_psi(cut.0.clone(), l.clone(), book.ei.clone()),
            -tip::tip_couple_psi(cut.1.clone(), l.clone(), book.ei.clone()),
        ];
        if let Some(ga) = &book.ga {
            vs.push(tip::shear_force_v(cut.0.clone(), l.clone(), ga.clone()));
        }
        for act in acts {
            let [v, shear, psi] = act.tip(l, &book.ei, book.ga.as_ref());
            vs.extend([v, shear]);
            turns.push(psi);
        }
        let [v, psi] = found;
        Some((self.total(v, vs, false), self.total(psi, turns, false)))
    }

    /// The head of an act: its part left of the distance `x`, as the analysis clips it.
    pub fn head(&mut self, act: &Act, x: f64, at: &Traced) -> Option<Act> {
        let action = act.action.head(x)?;
        let (Action::Spread { w0, w1, a, c }, Action::Spread { w1: end, c: kept, .. }) = (act.action, action) else {
            return Some(match (act.action, action) {
                (Action::Gradient { a, c, .. }, Action::Gradient { c: kept, .. }) if kept < c => {
                    let length = self.length_beyond(at, &act.a, x - a);
                    Act { action, c: length, b: at.clone(), whole: act.a.is_zero(), ..act.clone() }
                }
                _ => Act { action, whole: false, ..act.clone() },
            });
        };
        if kept >= c {
            // It ends before x, or exactly there.
            let whole = act.a.is_zero() && a + c >= x;
            return Some(Act { action, whole, ..act.clone() });
        }
        let length = self.length_beyond(at, &act.a, x - a);
        let second = if act.uniform() || w0 == w1 { act.second.clone() } else { self.clipped(act, &length, end) };
        Some(Act { action, second, c: length, b: at.clone(), whole: act.a.is_zero(), ..act.clone() })
    }

    /// The tail of an act: its part right of the distance `x`, distances measured from there.
    pub fn tail(&mut self, act: &Act, x: f64, at: &Traced, with: bool) -> Option<Act> {
        let action = act.action.tail(x, with)?;
        let kept = match (act.action, action) {
            (Action::Force { a, .. } | Action::Couple { a, .. }, _) => {
                let a = self.length_beyond(&act.a, at, a - x);
                return Some(Act { action, b: a.clone(), a, whole: false, ..act.clone() });
            }
            (Action::Spread { a, .. } | Action::Gradient { a, .. }, _) if a >= x => {
                let start = self.length_beyond(&act.a, at, a - x);
                return Some(Act { action, a: start, whole: false, ..act.clone() });
            }
            (_, Action::Spread { c, .. } | Action::Gradient { c, .. }) => c,
            _ => return None,
        };
        let length = self.length_beyond(&act.b, at, kept);
        let first = match action {
            Action::Spread { w0, w1, .. } if !act.uniform() && w0 != w1 => {
                let along = match act.action {
                    Action::Spread { a, .. } => self.length_beyond(at, &act.a, x - a),
                    _ => at.clone(),
                };
                self.clipped(act, &along, w0)
            }
            _ => act.first.clone(),
        };
        Some(Act { action, first, a: Traced::zero(), b: length.clone(), c: length, whole: false, ..act.clone() })
    }

    /// A difference of two distances as a step, once a place.
    pub fn length_beyond(&mut self, far: &Traced, near: &Traced, value: f64) -> Traced {
        let unit = self.builder.base.coherent(0, 1);
        let expression = far.clone() - near.clone();
        let sources = expression.sources();
        let number = match self.book.difference(&sources) {
            Ok(known) => return known,
            Err(number) => number,
        };
        let what =
            finding("difference of distances", Symbol::new("d", format!("x{number}")), (What::Other, unit), value);
        let step = self.builder.find(what, expression);
        self.book.keep_difference(sources, step.clone());
        step
    }

    fn clipped(&mut self, act: &Act, along: &Traced, value: f64) -> Traced {
        let unit = self.builder.base.coherent(1, -1);
        let expression = sums::intensity_at(act.first.clone(), act.second.clone(), act.c.clone(), along.clone());
        let sources = expression.sources();
        let number = match self.book.difference(&sources) {
            Ok(known) => return known,
            Err(number) => number,
        };
        let what = finding("intensity there", Symbol::new("w", format!("x{number}")), (What::Other, unit), value);
        let step = self.builder.find(what, expression);
        self.book.keep_difference(sources, step.clone());
        step
    }

    /// A quantity that runs linearly along a tapered segment, at a place of a piece.
    pub fn linear(&mut self, left: &Traced, right: &Traced, s: &Traced, l: &Traced, found: Finding) -> Traced {
        self.builder.find(found, linear_between(left.clone(), right.clone(), s.clone(), l.clone()))
    }

    /// Cut of the analysis as two findings.
    pub fn cut_findings(&self, cut: Cut, title: &str, sub: &str, scale: &super::Scale) -> [Finding; 2] {
        [
            finding(format!("shear {title}"), Symbol::new("V", sub), scale.shear.clone(), cut.shear)
                .basis("equilibrium of what lies to the right"),
            finding(format!("bending moment {title}"), Symbol::new("M", sub), scale.moment.clone(), cut.moment)
                .basis("equilibrium of what lies to the right"),
        ]
    }
}
