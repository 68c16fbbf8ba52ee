//! Values at places inside the member: extremes, stations, the places of checks.

use super::acts::Act;
use super::state::Pair;
use super::sums::Totals;
use super::{Demand, Narrator, finding};
use crate::analysis::action::Action;
use crate::analysis::equilibrium as sums;
use crate::analysis::extreme::{Extreme, Side, Spot};
use crate::analysis::model::Piece;
use crate::analysis::stiffness::Stiffness;
use crate::analysis::{Cut, Field, Values};
use crate::member::Place;
use crate::quantity::Unit;
use crate::working::draft::Symbol;
use crate::working::step::Chapters;
use crate::working::trace::Traced;
use crate::working::units::What;

/// A place that has been worked out.
#[derive(Clone, Debug)]
pub struct Worked {
    /// Index of the combination.
    pub combination: usize,
    /// Where.
    pub spot: Spot,
    /// Distance from the left end of the piece.
    pub x: Traced,
    /// Deflection.
    pub v: Traced,
}

/// How much of a place is wanted.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
enum Want {
    Shear,
    Moment,
    Deflection,
}

impl Narrator<'_> {
    /// Works out every place that results report, combination by combination.
    pub fn places(&mut self, combinations: &[Totals], demands: &[Demand]) -> Vec<Worked> {
        let mut worked = Vec::new();
        for (index, totals) in combinations.iter().enumerate() {
            let (member, analysis) = (self.member, self.analysis);
            let Some(name) = member.combinations.get(index).map(|combination| combination.name.clone()) else {
                continue;
            };
            let Some(field) = Field::of_combination(analysis, member, index) else { continue };
            self.builder.chapter(Chapters::Places(index), format!("Places of interest in combination {name}"));
            self.builder.tag(name.clone());
            self.builder
                .block(format!("Loads of combination {name}: factors times loads of the same kind and extent."));
            let acts = self.combined(index);
            self.book.combined.clone_from(&acts);
            let extremes = field.extremes();
            let mut wanted: Vec<(Extreme, Want, String)> = vec![
                (extremes.moment.max, Want::Moment, "greatest bending moment".to_owned()),
                (extremes.moment.min, Want::Moment, "least bending moment".to_owned()),
                (extremes.shear.max, Want::Shear, "greatest shear".to_owned()),
                (extremes.shear.min, Want::Shear, "least shear".to_owned()),
                (extremes.deflection.max, Want::Deflection, "greatest downward deflection".to_owned()),
                (extremes.deflection.min, Want::Deflection, "greatest upward deflection".to_owned()),
            ];
            for demand in demands.iter().filter(|demand| demand.combination == index) {
                let span = member.spans.get(demand.span).map_or("", |span| span.name.as_str());
                let at = analysis.model.pieces.get(demand.spot.piece).map_or(0.0, |piece| piece.x) + demand.spot.x;
                let extreme = Extreme { value: demand.deflection, at, spot: demand.spot };
                wanted.push((
                    extreme,
                    Want::Deflection,
                    format!("greatest deflection of span {span} as its limit measures it"),
                ));
            }
            for (extreme, want, title) in wanted {
                let done = |known: &&Worked| known.combination == index && known.spot == extreme.spot;
                let known = worked.iter().find(done).map(|known: &Worked| known.x.clone());
                if want == Want::Deflection && known.is_some() {
                    continue;
                }
                let place = self.work(&field, totals, &acts, extreme.spot, want, &title, known);
                if want == Want::Deflection {
                    worked.push(Worked { combination: index, ..place });
                }
            }
            for station in member.stations.clone() {
                self.station(&field, totals, &acts, station);
            }
        }
        self.builder.tag("");
        worked
    }

    /// The combination's loads by piece, added up like the field's.
    fn combined(&mut self, combination: usize) -> Vec<Vec<Act>> {
        let factors = self.book.factors.get(combination).cloned().unwrap_or_default();
        let analysis = self.analysis;
        let mut lists = Vec::new();
        for (index, piece) in analysis.model.pieces.iter().enumerate() {
            let mut kept: Vec<(Act, Vec<Traced>, Vec<Traced>)> = Vec::new();
            for (factor, case) in factors.iter().zip(&analysis.cases).filter(|(factor, _)| !factor.is_zero()) {
                let list = case.actions.get(index).map_or(&[][..], Vec::as_slice);
                for act in self.acts(list, piece) {
                    let value = self.builder.value(factor);
                    let action = act.action.scaled(value);
                    let first = factor.clone() * act.first.clone();
                    let second = factor.clone() * act.second.clone();
                    match kept.iter_mut().find_map(|entry| entry.0.action.absorb(action).then_some(entry)) {
                        Some(entry) => {
                            entry.1.push(first);
                            entry.2.push(second);
                        }
                        None => kept.push((Act { action, ..act }, vec![first], vec![second])),
                    }
                }
            }
            let name = format!("{}{}", self.place_name(piece.from), self.place_name(piece.to));
            let count = kept.len();
            let list = kept
                .into_iter()
                .enumerate()
                .map(|(number, (act, first, second))| {
                    let sub = if count > 1 { format!("{name}{}", number + 1) } else { name.clone() };
                    self.factored(act, &sub, first, second)
                })
                .collect();
            lists.push(list);
        }
        lists
    }

    fn factored(&mut self, act: Act, sub: &str, first: Vec<Traced>, second: Vec<Traced>) -> Act {
        let base = self.builder.base.clone();
        let step =
            |narrator: &mut Self, letter: &'static str, sub: String, unit: Unit, value: f64, terms: Vec<Traced>| {
                let what = finding("factored load", Symbol::new(letter, sub), (What::Other, unit), value);
                narrator.total(what, terms, false)
            };
        match act.action {
            Action::Force { p, .. } => {
                let first = step(self, "P", sub.to_owned(), base.coherent(1, 0), p, first);
                Act { first, ..act }
            }
            Action::Couple { m, .. } => {
                let first = step(self, "M", format!("c{sub}"), base.coherent(1, 1), m, first);
                Act { first, ..act }
            }
            Action::Spread { w0, w1, .. } => {
                let intensity = base.coherent(1, -1);
                let alike = first.iter().zip(&second).all(|(a, b)| a.sources() == b.sources());
                let near = step(self, "w", sub.to_owned(), intensity.clone(), w0, first);
                let far = if alike { near.clone() } else { step(self, "w", format!("{sub}e"), intensity, w1, second) };
                Act { first: near, second: far, ..act }
            }
            Action::Gradient { strain, .. } => {
                // The figure is a curvature on a prismatic piece, a strain on a tapered one.
                let value: f64 = first.iter().map(|term| self.builder.value(term)).sum();
                let unit =
                    if (value - strain).abs() <= 1e-12 * strain.abs() { Unit::none() } else { base.coherent(0, -1) };
                let first = step(self, "kappa", sub.to_owned(), unit, value, first);
                Act { first, ..act }
            }
        }
    }

    #[expect(clippy::too_many_arguments, reason = "a place, what is wanted there, and everything it comes from")]
    fn work(
        &mut self,
        field: &Field<'_>,
        totals: &Totals,
        acts: &[Vec<Act>],
        spot: Spot,
        want: Want,
        title: &str,
        known: Option<Traced>,
    ) -> Worked {
        let zero = || (Traced::zero(), Traced::zero());
        let none = Worked { combination: 0, spot, x: Traced::zero(), v: Traced::zero() };
        let Some(piece) = self.analysis.model.pieces.get(spot.piece).copied() else { return none };
        let values = field.inside(spot.piece, spot.x);
        let at = |list: &[Pair]| list.get(spot.piece).cloned().unwrap_or_else(zero);
        let (from, to) = (self.place_name(piece.from), self.place_name(piece.to));
        let count = self.book.next_place();
        if spot.x <= 0.0 && spot.side == Side::Right || spot.x >= piece.length {
            return self.at_cut(totals, spot, &piece, want, title, &values);
        }
        let x = match known {
            Some(x) => x,
            None => {
                self.builder.block(format!(
                    "The {title} lies between {from} and {to}; the place is chosen where its derivative vanishes."
                ));
                let unit = self.builder.base.coherent(0, 1);
                let what = finding(
                    format!("chosen place of the {title}, from {from}"),
                    Symbol::new("x", count.clone()),
                    (What::Other, unit),
                    spot.x,
                );
                self.builder.state(what, None)
            }
        };
        let with = spot.side == Side::Left;
        let here = list(acts, spot.piece);
        let cut = self.cut_inside(&piece, &at(&totals.right), here, spot.x, &x, with, &values, &count, want);
        if want != Want::Deflection {
            return Worked { combination: 0, spot, x, v: Traced::zero() };
        }
        let (v, _) = self.sway_inside(&piece, &at(&totals.start), here, spot.x, &x, &cut, &values, &count);
        Worked { combination: 0, spot, x, v }
    }

    /// A place at the end of a piece: its figures are those of the cut.
    fn at_cut(
        &mut self,
        totals: &Totals,
        spot: Spot,
        piece: &Piece,
        want: Want,
        title: &str,
        values: &Values,
    ) -> Worked {
        let zero = || (Traced::zero(), Traced::zero());
        let right = spot.x >= piece.length;
        let at = |list: &[Pair]| list.get(spot.piece).cloned().unwrap_or_else(zero);
        let (sway, mut cut) =
            if right { (at(&totals.end), at(&totals.right)) } else { (at(&totals.start), at(&totals.left)) };
        let name = self.place_name(if right { piece.to } else { piece.from });
        let x = if right { self.distance(piece.from, piece.to) } else { Traced::zero() };
        let scale = self.plain();
        // What acts exactly at the cut lies between the cut's figure and the place just left of it.
        if right && want != Want::Deflection {
            self.builder.block(format!("The {title} stands at {name}."));
            let found = self.cut_findings(values.left, &format!("just left of {name}"), &format!("{name}m"), &scale);
            let acts = self.analysis_acts_at_end(spot.piece, piece);
            let l = Traced::zero();
            cut = self.near_end(&cut, &l, &acts, found.map(super::Finding::last), false);
        } else {
            self.builder.block(format!("The {title} stands at {name}."));
            if !right {
                cut = self.beyond_start(spot.piece, cut, values, &name);
            }
        }
        let state = |narrator: &mut Self, letter, unit: (What, Unit), value: f64, figure: Traced| {
            let what = finding(format!("{title}, at {name}"), Symbol::new(letter, format!("{name}x")), unit, value)
                .bold()
                .last();
            narrator.builder.state(what, Some(figure))
        };
        match want {
            Want::Shear => {
                let value = if right { values.left.shear } else { values.right.shear };
                state(self, "V", scale.shear, value, cut.0);
            }
            Want::Moment => {
                let value = if right { values.left.moment } else { values.right.moment };
                state(self, "M", scale.moment, value, cut.1);
            }
            Want::Deflection => {
                state(self, "v", scale.v, values.v, sway.0.clone());
            }
        }
        Worked { combination: 0, spot, x, v: sway.0 }
    }

    /// Just right of a piece's left end: what acts exactly there lies to the left of it.
    fn beyond_start(&mut self, index: usize, cut: Pair, values: &Values, name: &str) -> Pair {
        let (mut forces, mut moments) = (vec![cut.0], vec![cut.1]);
        for act in self.book.combined.get(index).cloned().unwrap_or_default() {
            match act.action {
                Action::Force { a, .. } if a <= 0.0 => forces.push(-act.first),
                Action::Couple { a, .. } if a <= 0.0 => moments.push(act.first),
                _ => {}
            }
        }
        let scale = self.plain();
        let [shear, moment] =
            self.cut_findings(values.right, &format!("just right of {name}"), &format!("{name}p"), &scale);
        (self.total(shear.last(), forces, false), self.total(moment.last(), moments, false))
    }

    /// Actions of the current combination that stand exactly at the right end of a piece, measured from there.
    fn analysis_acts_at_end(&mut self, index: usize, piece: &Piece) -> Vec<Act> {
        let acts = self.book.combined.get(index).cloned().unwrap_or_default();
        acts.into_iter()
            .filter_map(|act| match act.action {
                Action::Force { p, a } if a >= piece.length => {
                    Some(Act { action: Action::Force { p, a: 0.0 }, a: Traced::zero(), b: Traced::zero(), ..act })
                }
                Action::Couple { m, a } if a >= piece.length => {
                    Some(Act { action: Action::Couple { m, a: 0.0 }, a: Traced::zero(), b: Traced::zero(), ..act })
                }
                _ => None,
            })
            .collect()
    }

    #[expect(clippy::too_many_arguments, reason = "a cut needs its piece, its place and what acts")]
    fn cut_inside(
        &mut self,
        piece: &Piece,
        right: &Pair,
        acts: &[Act],
        x: f64,
        at: &Traced,
        with: bool,
        values: &Values,
        sub: &str,
        want: Want,
    ) -> Pair {
        let tails: Vec<Act> = acts.iter().filter_map(|act| self.tail(act, x, at, with)).collect();
        let whole = self.distance(piece.from, piece.to);
        let rest = self.length_beyond(&whole, at, piece.length - x);
        let value: Cut = if with { values.left } else { values.right };
        let scale = self.plain();
        let [shear, moment] = self.cut_findings(value, "there", sub, &scale);
        let (shear, moment) =
            if want == Want::Deflection { (shear, moment) } else { (shear.bold().last(), moment.bold().last()) };
        self.near_end(right, &rest, &tails, [shear, moment], true)
    }

    #[expect(clippy::too_many_arguments, reason = "a movement needs its piece, its place, its cut and what acts")]
    fn sway_inside(
        &mut self,
        piece: &Piece,
        start: &Pair,
        acts: &[Act],
        x: f64,
        at: &Traced,
        cut: &Pair,
        values: &Values,
        sub: &str,
    ) -> Pair {
        let heads: Vec<Act> = acts.iter().filter_map(|act| self.head(act, x, at)).collect();
        let scale = self.plain();
        let (v0, psi0) = (self.builder.value(&start.0), self.builder.value(&start.1));
        let own = [
            finding("own bending up to there", Symbol::new("delta", sub), scale.v.clone(), values.v - v0 - psi0 * x),
            finding("turn by own bending up to there", Symbol::new("phi", sub), scale.psi.clone(), values.psi - psi0),
        ];
        let (delta, phi) = if matches!(piece.stiffness, Stiffness::Tapered(_)) {
            self.tapered_bending(piece, at, x, cut, &heads, own)
        } else {
            self.own_bending(piece, at, cut, &heads, own).unwrap_or_else(|| (Traced::zero(), Traced::zero()))
        };
        let turn = finding("turn there", Symbol::new("psi", sub), scale.psi, values.psi);
        let psi = self.builder.state(turn, Some(sums::chained_psi(start.1.clone(), phi)));
        let what = finding("deflection there", Symbol::new("v", sub), scale.v, values.v)
            .bold()
            .last()
            .basis("shift + turn × length + own bending");
        let v = self.builder.state(what, Some(sums::chained_v(start.0.clone(), start.1.clone(), at.clone(), delta)));
        (v, psi)
    }

    /// Everything at a station, on both sides of it.
    fn station(&mut self, field: &Field<'_>, totals: &Totals, acts: &[Vec<Act>], place: Place) {
        let index = self.analysis.model.piece_at(place);
        let Some(piece) = self.analysis.model.pieces.get(index).copied() else { return };
        let zero = || (Traced::zero(), Traced::zero());
        let values = field.at(place);
        let count = self.book.next_place();
        self.builder.block(format!("Station at x = {} m.", place.exact()));
        let x = self.distance(piece.from, place);
        let distance = place.beyond(piece.from);
        let start = totals.start.get(index).cloned().unwrap_or_else(zero);
        let right = totals.right.get(index).cloned().unwrap_or_else(zero);
        let inside = field.inside(index, distance);
        let here = list(acts, index);
        let at_start = place == piece.from;
        let after = if at_start {
            let name = self.place_name(piece.from);
            self.beyond_start(index, totals.left.get(index).cloned().unwrap_or_else(zero), &values, &name)
        } else {
            self.cut_inside(&piece, &right, here, distance, &x, false, &inside, &format!("{count}r"), Want::Moment)
        };
        let before = if at_start {
            self.before_cut(totals, index, &values, &after, &count)
        } else {
            self.cut_inside(&piece, &right, here, distance, &x, true, &inside, &format!("{count}l"), Want::Moment)
        };
        if at_start {
            let what =
                finding("deflection at the station", Symbol::new("v", count), self.plain().v, values.v).bold().last();
            self.builder.state(what, Some(start.0));
        } else {
            self.sway_inside(&piece, &start, here, distance, &x, &before, &inside, &count);
        }
    }

    /// Just left of a cut: the end of the piece before, with what acts exactly there.
    fn before_cut(&mut self, totals: &Totals, index: usize, values: &Values, after: &Pair, count: &str) -> Pair {
        let Some(before) = index.checked_sub(1) else { return after.clone() };
        let Some(piece) = self.analysis.model.pieces.get(before).copied() else { return after.clone() };
        let cut = totals.right.get(before).cloned().unwrap_or_else(|| (Traced::zero(), Traced::zero()));
        let acts = self.analysis_acts_at_end(before, &piece);
        let scale = self.plain();
        let found = self.cut_findings(values.left, "just left of the station", &format!("{count}l"), &scale);
        self.near_end(&cut, &Traced::zero(), &acts, found.map(super::Finding::last), false)
    }
}

fn list(acts: &[Vec<Act>], piece: usize) -> &[Act] {
    acts.get(piece).map_or(&[], Vec::as_slice)
}
