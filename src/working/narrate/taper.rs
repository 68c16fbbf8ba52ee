//! Own bending of tapered pieces: one weighted sum, its samples as steps.

use super::acts::Act;
use super::state::Pair;
use super::{Finding, Narrator, finding};
use crate::analysis::action::Action;
use crate::analysis::equilibrium as sums;
use crate::analysis::model::Piece;
use crate::analysis::own::{Cut, Station, stations};
use crate::analysis::stiffness::{Stiffness, Tapered, cubic_rigidity};
use crate::member::TaperLaw;
use crate::quantity::Unit;
use crate::working::draft::{Likes, Symbol};
use crate::working::trace::Traced;
use crate::working::units::What;

/// Turn per length at a sample: imposed curvature less M over EI.
fn bend(curvature: Traced, moment: Traced, ei: Traced) -> Traced {
    curvature - moment / ei
}

impl Narrator<'_> {
    /// Deflection and turn of the tip of the first length `x` of a tapered piece, by Gauss-Legendre quadrature.
    pub fn tapered_bending(
        &mut self,
        piece: &Piece,
        l: &Traced,
        x: f64,
        cut: &Pair,
        acts: &[Act],
        found: [Finding; 2],
    ) -> Pair {
        let Stiffness::Tapered(tapered) = piece.stiffness else { return (Traced::zero(), Traced::zero()) };
        let value = Cut { shear: self.builder.value(&cut.0), moment: self.builder.value(&cut.1) };
        let actions: Vec<Action> = acts.iter().map(|act| act.action).collect();
        let samples = stations(&tapered, x, value, &actions);
        let (mut turns, mut shifts) = (Vec::new(), Vec::new());
        let mut ends: Vec<(f64, Traced)> = vec![(0.0, Traced::zero()), (x, l.clone())];
        // In a place of interest the samples stay rows of its column.
        let outer = self.builder.open_block().filter(|block| block.likes.as_ref().is_none_or(|l| l.fewest > 2));
        let sentence = outer.map(|block| block.sentence.clone());
        for (index, sample) in samples.iter().enumerate() {
            let place = index + 1;
            if let Some(sentence) = &sentence {
                self.sample_block(sentence, piece, place);
            }
            let length = self.panel(sample, acts, &mut ends);
            let at = self.sample_place(sample, place, &length, &ends);
            let arm = self.step(
                format!("arm of sample {place}"),
                "d",
                place,
                (What::Other, self.builder.base.coherent(0, 1)),
                x - sample.x,
                l.clone() - at.clone(),
            );
            let (shear, moment) = self.sample_cut(sample, place, &at, cut, acts, &arm);
            let ei = self.sample_rigidity(piece, &tapered, sample, place, &at);
            let curvature = self.sample_curvature(piece, &tapered, sample, place, &at, acts);
            let unit = self.bend_unit(&found);
            let what = finding(
                format!("turn per length at sample {place}"),
                Symbol::new("q", place.to_string()),
                (What::Other, unit),
                sample.bend(),
            );
            let q = self.builder.find(what, bend(curvature, moment, ei));
            let share = self.share(sample);
            let weight = self.step(
                format!("weight of sample {place}"),
                "W",
                place,
                (What::Other, self.builder.base.coherent(0, 1)),
                sample.weight,
                share * length,
            );
            turns.push(weight.clone() * q.clone());
            shifts.push(weight.clone() * q * arm);
            if let (Some(_), Some(ga)) = (sample.ga, self.sample_shear(piece, &tapered, sample, place, &at)) {
                shifts.push(weight * shear / ga);
            }
        }
        if let Some(sentence) = sentence {
            self.builder.block(sentence);
        }
        let [v, psi] = found;
        let basis = "weighted sum over the samples (Gauss-Legendre)";
        let v = self.builder.find(v.basis(basis), sums::sum(shifts));
        let psi = self.builder.find(psi.basis(basis), sums::sum(turns));
        (v, psi)
    }

    fn sample_block(&mut self, sentence: &str, piece: &Piece, place: usize) {
        let (from, to) = (self.place_name(piece.from), self.place_name(piece.to));
        self.book.leave_place();
        self.builder.block_like(
            sentence,
            Likes {
                key: format!("samples {from} {to}"),
                head: (place.to_string(), String::new()),
                fewest: 2,
                sentence: format!(
                    "Samples of the tapered piece {from}–{to} (Gauss-Legendre): bending at each, and its weight. Symbols are those of the first column."
                ),
            },
        );
    }

    /// Unit of the turn per length, given the units of the state: that of the turn, per length.
    fn bend_unit(&self, found: &[Finding; 2]) -> Unit {
        let [_, psi] = found;
        crate::working::units::product(&psi.unit, &self.builder.base.coherent(0, -1))
    }

    fn step(
        &mut self,
        title: String,
        letter: &'static str,
        index: usize,
        (what, unit): (What, Unit),
        value: f64,
        expression: Traced,
    ) -> Traced {
        self.builder.find(finding(title, Symbol::new(letter, index.to_string()), (what, unit), value), expression)
    }

    /// Length of the panel of a sample, with its ends as steps.
    fn panel(&mut self, sample: &Station, acts: &[Act], ends: &mut Vec<(f64, Traced)>) -> Traced {
        let from = self.end_at(sample.panel.from, acts, ends);
        let to = self.end_at(sample.panel.from + sample.panel.length, acts, ends);
        if from.is_zero() {
            return to;
        }
        let key = -(1.0 + sample.panel.from);
        if let Some((_, known)) = ends.iter().find(|(at, _)| *at == key) {
            return known.clone();
        }
        let length = self.length_beyond(&to, &from, sample.panel.length);
        ends.push((key, length.clone()));
        length
    }

    /// The end of a panel: a load's end, or a chosen division.
    fn end_at(&mut self, at: f64, acts: &[Act], ends: &mut Vec<(f64, Traced)>) -> Traced {
        let scale = ends.iter().map(|(end, _)| end.abs()).fold(0.0, f64::max);
        if let Some((_, known)) = ends.iter().find(|(end, _)| (*end - at).abs() <= 1e-11 * scale) {
            return known.clone();
        }
        let near = |value: f64| (value - at).abs() <= 1e-11 * scale;
        let load = acts.iter().find_map(|act| match act.action {
            Action::Force { a, .. } | Action::Couple { a, .. } if near(a) => Some(act.a.clone()),
            Action::Spread { a, .. } | Action::Gradient { a, .. } if near(a) => Some(act.a.clone()),
            Action::Spread { a, c, .. } | Action::Gradient { a, c, .. } if near(a + c) => Some(act.b.clone()),
            _ => None,
        });
        let end = load.unwrap_or_else(|| {
            let unit = self.builder.base.coherent(0, 1);
            let what = finding(
                "chosen division of the quadrature",
                Symbol::new("e", ends.len().to_string()),
                (What::Other, unit),
                at,
            );
            self.builder.state(what, None)
        });
        ends.push((at, end.clone()));
        end
    }

    fn sample_place(&mut self, sample: &Station, place: usize, length: &Traced, ends: &[(f64, Traced)]) -> Traced {
        let scale = ends.iter().map(|(end, _)| end.abs()).fold(0.0, f64::max);
        let from = ends
            .iter()
            .find(|(end, _)| *end >= 0.0 && (*end - sample.panel.from).abs() <= 1e-11 * scale)
            .map_or_else(Traced::zero, |(_, known)| known.clone());
        let fraction = self.constant("fraction of the panel", "r", sample.fraction);
        let unit = self.builder.base.coherent(0, 1);
        self.step(
            format!("place of sample {place}"),
            "x",
            place,
            (What::Other, unit),
            sample.x,
            from + fraction * length.clone(),
        )
    }

    fn share(&mut self, sample: &Station) -> Traced {
        self.constant("weight as a fraction of the panel", "W", sample.share)
    }

    /// A tabulated constant of the quadrature, written once.
    fn constant(&mut self, title: &str, letter: &'static str, value: f64) -> Traced {
        let scaled = libm::round(value * 1e15) as i128;
        let figure = crate::quantity::Decimal::new(scaled, -15).trimmed();
        let symbol = Symbol::new(letter, format!("g{scaled}"));
        if let Some(known) = self.book.constants.get(&symbol) {
            return known.clone();
        }
        let slot = self.book.derived;
        let shown = Symbol::new(letter, format!("g{}", self.book.constants.len() + 1));
        let step = self.builder.aside(slot, |builder| builder.choose(title, shown, figure, Unit::none(), value));
        self.book.constants.insert(symbol, step.clone());
        step
    }

    fn sample_cut(
        &mut self,
        sample: &Station,
        place: usize,
        at: &Traced,
        cut: &Pair,
        acts: &[Act],
        arm: &Traced,
    ) -> Pair {
        let tails: Vec<Act> = acts.iter().filter_map(|act| self.tail(act, sample.x, at, true)).collect();
        let scale = self.book.scale.clone().unwrap_or_else(|| self.plain());
        let found = [
            finding(
                format!("shear at sample {place}"),
                Symbol::new("V", place.to_string()),
                scale.shear,
                sample.cut.shear,
            ),
            finding(
                format!("moment at sample {place}"),
                Symbol::new("M", place.to_string()),
                scale.moment,
                sample.cut.moment,
            ),
        ];
        if sample.ga.is_some() {
            return self.near_end(cut, arm, &tails, found, false);
        }
        let [_, moment] = found;
        let mut moments = vec![cut.1.clone(), -(cut.0.clone() * arm.clone())];
        moments.extend(tails.iter().map(|act| -act.moment(Traced::zero())));
        (Traced::zero(), self.total(moment, moments, false))
    }

    /// EI at a sample, written once for a place of a piece.
    fn sample_rigidity(
        &mut self,
        piece: &Piece,
        tapered: &Tapered,
        sample: &Station,
        place: usize,
        at: &Traced,
    ) -> Traced {
        let Some(segment) = self.member.segments.get(piece.segment) else { return Traced::zero() };
        let Some(to) = segment.taper.map(|taper| taper.to) else { return Traced::zero() };
        let rigidity = |index: usize| self.book.sections.get(index).map_or_else(Traced::zero, |book| book.ei.clone());
        let (near, far) = (rigidity(segment.section), rigidity(to));
        let (s, l) = self.along(piece, tapered, sample, place, at);
        let what = finding(
            format!("rigidity at sample {place}"),
            Symbol::new("EI", place.to_string()),
            (What::Other, self.builder.base.coherent(1, 2)),
            sample.ei,
        );
        let expression = match tapered.law {
            TaperLaw::Linear => crate::analysis::stiffness::linear_between(near, far, s, l),
            TaperLaw::Cubic => {
                let root = self.root(piece.segment, tapered, &near, &far);
                cubic_rigidity(near, root, s, l)
            }
        };
        self.builder.find(what, expression)
    }

    /// Cube root of the ratio of rigidities: chosen, and shown to give the ratio back.
    fn root(&mut self, segment: usize, tapered: &Tapered, near: &Traced, far: &Traced) -> Traced {
        let key = Symbol::new("root", segment.to_string());
        if let Some(known) = self.book.constants.get(&key) {
            return known.clone();
        }
        let slot = self.book.derived;
        let none = Unit::none();
        let (near, far, ratio) = (near.clone(), far.clone(), tapered.ei1 / tapered.ei0);
        let sub = (segment + 1).to_string();
        let root = self.builder.aside(slot, |builder| {
            let what = finding(
                "cube root of the ratio of I, chosen",
                Symbol::new("rho", sub.clone()),
                (What::Other, none.clone()),
                tapered.root,
            );
            let root = builder.state(what, None);
            let what = finding("ratio of I", Symbol::new("i", sub.clone()), (What::Other, none.clone()), ratio);
            builder.state(what, Some(far / near));
            let what = finding(
                "the chosen root cubed, to be compared with the ratio",
                Symbol::new("i", format!("{sub}c")),
                (What::Other, none.clone()),
                ratio,
            );
            builder.state(what, Some(crate::number::Number::power(root.clone(), 3)));
            root
        });
        self.book.constants.insert(key, root.clone());
        root
    }

    /// Distance of a sample along its segment, and the segment's length.
    fn along(
        &mut self,
        piece: &Piece,
        tapered: &Tapered,
        sample: &Station,
        place: usize,
        at: &Traced,
    ) -> (Traced, Traced) {
        let Some(segment) = self.member.segments.get(piece.segment) else { return (at.clone(), at.clone()) };
        let offset = self.distance(segment.from, piece.from);
        let l = self.distance(segment.from, segment.to);
        let unit = self.builder.base.coherent(0, 1);
        let what = finding(
            format!("sample {place} along its segment"),
            Symbol::new("s", place.to_string()),
            (What::Other, unit),
            tapered.offset + sample.x,
        );
        (self.builder.find(what, offset + at.clone()), l)
    }

    fn sample_shear(
        &mut self,
        piece: &Piece,
        tapered: &Tapered,
        sample: &Station,
        place: usize,
        at: &Traced,
    ) -> Option<Traced> {
        let segment = self.member.segments.get(piece.segment)?;
        let near = self.book.sections.get(segment.section)?.ga.clone()?;
        let far = self.book.sections.get(segment.taper?.to)?.ga.clone()?;
        let (s, l) = self.along(piece, tapered, sample, place, at);
        let what = finding(
            format!("shear rigidity at sample {place}"),
            Symbol::new("GA", place.to_string()),
            (What::Other, self.builder.base.coherent(1, 0)),
            sample.ga?,
        );
        Some(self.linear(&near, &far, &s, &l, what))
    }

    fn sample_curvature(
        &mut self,
        piece: &Piece,
        tapered: &Tapered,
        sample: &Station,
        place: usize,
        at: &Traced,
        acts: &[Act],
    ) -> Traced {
        let strains: Vec<Traced> = acts
            .iter()
            .filter(|act| matches!(act.action, Action::Gradient { a, c, .. } if a <= sample.x && sample.x < a + c))
            .map(|act| act.first.clone())
            .collect();
        if strains.is_empty() {
            return Traced::zero();
        }
        let books = self.member.segments.get(piece.segment).and_then(|segment| {
            let near = self.book.sections.get(segment.section)?.depth.clone()?;
            let far = self.book.sections.get(segment.taper?.to)?.depth.clone()?;
            Some((near, far))
        });
        let Some((near, far)) = books else { return Traced::zero() };
        let (s, l) = self.along(piece, tapered, sample, place, at);
        let unit = self.builder.base.coherent(0, 1);
        let what = finding(
            format!("depth at sample {place}"),
            Symbol::new("h", place.to_string()),
            (What::Other, unit),
            tapered.depth(sample.x),
        );
        let depth = self.linear(&near, &far, &s, &l, what);
        let unit = self.builder.base.coherent(0, -1);
        let what = finding(
            format!("curvature by temperature at sample {place}"),
            Symbol::new("kappa", place.to_string()),
            (What::Other, unit),
            sample.curvature,
        );
        self.builder.find(what, sums::sum(strains) / depth)
    }
}
