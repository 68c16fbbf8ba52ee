//! One place worked out: cut there, own bending up to there, shift and turn of the wall.

use super::acts::Act;
use super::places::{Under, Want, Wish, Worked};
use super::state::Pair;
use super::sums::Totals;
use super::{Narrator, finding};
use crate::analysis::action::Action;
use crate::analysis::equilibrium as sums;
use crate::analysis::extreme::{Side, Spot};
use crate::analysis::model::Piece;
use crate::analysis::stiffness::Stiffness;
use crate::analysis::{Cut, Values};
use crate::member::Place;
use crate::working::draft::{Likes, Symbol};
use crate::working::trace::Traced;
use crate::working::units::What;

impl Narrator<'_> {
    /// Works out one place under a combination; `known` is its distance where an earlier step has chosen it.
    pub fn work(&mut self, under: &Under<'_>, wish: &Wish, known: Option<Traced>) -> Worked {
        let zero = || (Traced::zero(), Traced::zero());
        let spot = wish.spot;
        let none = Worked { combination: 0, spot, x: Traced::zero(), v: Traced::zero() };
        let Some(piece) = self.analysis.model.pieces.get(spot.piece).copied() else { return none };
        let values = under.field.inside(spot.piece, spot.x);
        let at = |list: &[Pair]| list.get(spot.piece).cloned().unwrap_or_else(zero);
        // Deflection is the same on both sides of a cut.
        let at_start = spot.x <= 0.0 && (spot.side == Side::Right || wish.want == Want::Deflection);
        if at_start || spot.x >= piece.length {
            return self.at_cut(under.totals, spot, &piece, wish, &values);
        }
        let (from, to) = (self.place_name(piece.from), self.place_name(piece.to));
        let kind = if known.is_some() { "known" } else { "chosen" };
        let likes = Likes {
            key: format!("inside {} {:?} {kind}", spot.piece, wish.want),
            head: (under.name.to_owned(), wish.short.clone()),
            fewest: 2,
            sentence: format!(
                "Extremes between {from} and {to}: each place, x from {from}, is chosen where the derivative of what is extreme vanishes."
            ),
        };
        self.open_place(
            format!(
                "The {} under {} lies between {from} and {to}; the place, x from {from}, is chosen where its derivative vanishes.",
                wish.title, under.name
            ),
            likes,
        );
        let x = known.unwrap_or_else(|| {
            let unit = self.builder.base.coherent(0, 1);
            let what = finding(
                format!("chosen place of the {}, from {from}", wish.title),
                Symbol::new("x", ""),
                (What::Other, unit),
                spot.x,
            );
            self.builder.state(what, None)
        });
        let with = spot.side == Side::Left;
        let here = list(under.acts, spot.piece);
        let cut = self.cut_inside(&piece, &at(&under.totals.right), here, spot.x, &x, with, &values, "x", wish.want);
        if wish.want != Want::Deflection {
            return Worked { combination: 0, spot, x, v: Traced::zero() };
        }
        let (v, _) = self.sway_inside(&piece, &at(&under.totals.start), here, spot.x, &x, &cut, &values, "x");
        Worked { combination: 0, spot, x, v }
    }

    fn open_place(&mut self, sentence: String, likes: Likes) {
        self.book.leave_place();
        self.builder.block_like(sentence, likes);
    }

    /// A place at the end of a piece: its figures are those of the cut, but for what acts exactly there.
    fn at_cut(&mut self, totals: &Totals, spot: Spot, piece: &Piece, wish: &Wish, values: &Values) -> Worked {
        let zero = || (Traced::zero(), Traced::zero());
        let right = spot.x >= piece.length;
        let at = |list: &[Pair]| list.get(spot.piece).cloned().unwrap_or_else(zero);
        let (sway, cut) =
            if right { (at(&totals.end), at(&totals.right)) } else { (at(&totals.start), at(&totals.left)) };
        let name = self.place_name(if right { piece.to } else { piece.from });
        let x = if right { self.distance(piece.from, piece.to) } else { Traced::zero() };
        let head = (self.builder.current_tag(), wish.short.clone());
        let likes = Likes {
            key: format!("at {name} {:?}", wish.want),
            head,
            fewest: 2,
            sentence: format!("Extremes at {name}: the cut's figures and what acts exactly there."),
        };
        self.open_place(format!("The {} stands at {name}.", wish.title), likes);
        let worked = Worked { combination: 0, spot, x, v: sway.0.clone() };
        if wish.want == Want::Deflection {
            self.stated(sway.0, wish, &name, values.v);
            return worked;
        }
        let cut = if right {
            // What acts exactly at the cut lies between the cut's figure and the place just left of it.
            let scale = self.plain();
            let found = self.cut_findings(values.left, &format!("just left of {name}"), &format!("{name}m"), &scale);
            let acts = self.analysis_acts_at_end(spot.piece, piece);
            self.near_end(&cut, &Traced::zero(), &acts, found.map(super::Finding::last), false)
        } else {
            self.beyond_start(spot.piece, cut, values, &name)
        };
        let value = if right { values.left } else { values.right };
        match wish.want {
            Want::Shear => self.stated(cut.0, wish, &name, value.shear),
            _ => self.stated(cut.1, wish, &name, value.moment),
        }
        worked
    }

    /// A figure that is no step of its own yet, such as a deflection held at zero.
    fn stated(&mut self, figure: Traced, wish: &Wish, name: &str, value: f64) {
        if figure.source().is_some() {
            return;
        }
        let scale = self.plain();
        let (letter, unit) = match wish.want {
            Want::Shear => ("V", scale.shear),
            Want::Moment => ("M", scale.moment),
            Want::Deflection => ("v", scale.v),
        };
        let what =
            finding(format!("{}, at {name}", wish.title), Symbol::new(letter, format!("{name}x")), unit, value).last();
        self.builder.state(what, Some(figure));
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
    pub fn station(&mut self, under: &Under<'_>, place: Place) {
        let index = self.analysis.model.piece_at(place);
        let Some(piece) = self.analysis.model.pieces.get(index).copied() else { return };
        let zero = || (Traced::zero(), Traced::zero());
        let (values, count) = (under.field.at(place), "x");
        let at = place.exact();
        let sentence = format!("Station at x = {at} m from the member's left end.");
        let likes = Likes {
            key: format!("station {at}"),
            head: (under.name.to_owned(), String::new()),
            fewest: 2,
            sentence: sentence.clone(),
        };
        self.open_place(format!("{sentence} Combination {}.", under.name), likes);
        let x = self.distance(piece.from, place);
        let distance = place.beyond(piece.from);
        let start = under.totals.start.get(index).cloned().unwrap_or_else(zero);
        let right = under.totals.right.get(index).cloned().unwrap_or_else(zero);
        if place == piece.from {
            let name = self.place_name(piece.from);
            let left = under.totals.left.get(index).cloned().unwrap_or_else(zero);
            let after = self.beyond_start(index, left, &values, &name);
            self.before_cut(under.totals, index, &values, &after, count);
            if start.0.source().is_none() {
                let unit = self.plain().v;
                let what = finding("deflection at the station", Symbol::new("v", count), unit, values.v).bold().last();
                self.builder.state(what, Some(start.0));
            }
            return;
        }
        let inside = under.field.inside(index, distance);
        let here = list(under.acts, index);
        let with = Want::Moment;
        // Both sides are worked out only where something acts between them.
        let before = if acts_at(here, distance) {
            self.cut_inside(&piece, &right, here, distance, &x, false, &inside, "xr", with);
            self.cut_inside(&piece, &right, here, distance, &x, true, &inside, "xl", with)
        } else {
            self.cut_inside(&piece, &right, here, distance, &x, false, &inside, count, with)
        };
        self.sway_inside(&piece, &start, here, distance, &x, &before, &inside, count);
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

/// Whether a force or couple stands exactly there.
fn acts_at(acts: &[Act], x: f64) -> bool {
    acts.iter().any(|act| match act.action {
        Action::Force { a, .. } | Action::Couple { a, .. } => a == x,
        _ => false,
    })
}
