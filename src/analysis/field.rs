//! Shear, moment, slope and deflection anywhere on the member.

use super::action::{Acting, Action};
use super::model::{Model, Piece};
use super::own::{self, Cut};
use super::solve::{Analysis, PieceEnds, Solution};
use crate::member::{Member, Place};

/// Everything at one place.
#[derive(Clone, Copy, Debug, PartialEq, Default)]
pub struct Values {
    /// Just left of the place.
    pub left: Cut,
    /// Just right of the place.
    pub right: Cut,
    /// Deflection, m.
    pub v: f64,
    /// Turn of the section, rad.
    pub psi: f64,
    /// dv/dx just left, rad.
    pub slope_left: f64,
    /// dv/dx just right, rad.
    pub slope_right: f64,
}

/// A case or combination on the member, ready to be looked at anywhere.
#[derive(Clone, Debug)]
pub struct Field<'a> {
    /// The released member, for its pieces.
    pub model: &'a Model,
    /// Cuts and movements at the ends of pieces.
    pub solution: &'a Solution,
    /// What acts, by piece, factors applied; actions of one kind and extent are added up.
    pub actions: Vec<Vec<Action>>,
}

impl<'a> Field<'a> {
    /// The field of a load case.
    pub fn of_case(analysis: &'a Analysis, case: usize) -> Option<Self> {
        let case = analysis.cases.get(case)?;
        let actions = case.actions.iter().map(|list| list.iter().map(|acting| acting.action).collect()).collect();
        Some(Self { model: &analysis.model, solution: &case.total, actions })
    }

    /// The field of a combination.
    pub fn of_combination(analysis: &'a Analysis, member: &Member, combination: usize) -> Option<Self> {
        let solution = analysis.combinations.get(combination)?;
        let factors: Vec<f64> = member.combinations.get(combination)?.factors.iter().map(|f| f.value).collect();
        let actions = (0..analysis.model.pieces.len())
            .map(|piece| {
                let lists = factors.iter().zip(&analysis.cases);
                merged(lists.filter_map(|(factor, case)| Some((*factor, case.actions.get(piece)?.as_slice()))))
            })
            .collect();
        Some(Self { model: &analysis.model, solution, actions })
    }

    /// What acts on a piece.
    pub fn actions_on(&self, piece: usize) -> &[Action] {
        self.actions.get(piece).map_or(&[], Vec::as_slice)
    }

    /// Cuts and movements at the ends of a piece.
    pub fn ends(&self, piece: usize) -> PieceEnds {
        self.solution.pieces.get(piece).copied().unwrap_or_default()
    }

    /// Everything at the distance `x` from the left end of a piece, seen from inside the piece.
    pub fn inside(&self, index: usize, x: f64) -> Values {
        let Some(piece) = self.model.pieces.get(index) else { return Values::default() };
        let (ends, actions) = (self.ends(index), self.actions_on(index));
        let [left, right] = [true, false].map(|with| cut_at(piece, ends, actions, x, with));
        let head: Vec<Action> = actions.iter().filter_map(|action| action.head(x)).collect();
        let own = own::own_bending(&piece.stiffness, x, left, &head);
        let psi = ends.start.psi + own.psi;
        let slope = |cut: Cut| psi + piece.stiffness.ga(x).map_or(0.0, |ga| cut.shear / ga);
        let v = ends.start.v + ends.start.psi * x + own.v;
        Values { left, right, v, psi, slope_left: slope(left), slope_right: slope(right) }
    }

    /// Everything at a place; at a member end both sides are the inner one.
    pub fn at(&self, place: Place) -> Values {
        let after = self.model.piece_at(place);
        let Some(piece) = self.model.pieces.get(after) else { return Values::default() };
        let here = self.inside(after, place.beyond(piece.from));
        if place == Place::ZERO {
            return Values { left: here.right, slope_left: here.slope_right, ..here };
        }
        if place >= piece.to {
            return Values { right: here.left, slope_right: here.slope_left, ..here };
        }
        match after.checked_sub(1).and_then(|before| Some((before, self.model.pieces.get(before)?))) {
            // At a cut each side is read from its own piece.
            Some((before, neighbour)) if neighbour.to == place => {
                let there = self.inside(before, neighbour.length);
                Values { left: there.left, slope_left: there.slope_left, ..here }
            }
            _ => here,
        }
    }
}

/// Shear and moment at the distance `x` of a piece; with what acts exactly there where `with` is set (just left of it).
pub fn cut_at(piece: &Piece, ends: PieceEnds, actions: &[Action], x: f64, with: bool) -> Cut {
    let tails: Vec<Action> = actions.iter().filter_map(|action| action.tail(x, with)).collect();
    own::near_end(ends.right, piece.length - x, &tails)
}

/// Factored actions; those of the same kind and extent are added up, others are kept in the order met.
fn merged<'a>(lists: impl Iterator<Item = (f64, &'a [Acting])>) -> Vec<Action> {
    let mut sum: Vec<Action> = Vec::new();
    for (factor, list) in lists.filter(|(factor, _)| *factor != 0.0) {
        for action in list.iter().map(|acting| acting.action.scaled(factor)) {
            if !sum.iter_mut().any(|kept| kept.absorb(action)) {
                sum.push(action);
            }
        }
    }
    sum
}

impl Action {
    /// Adds another action of the same kind and extent; `false` where it is of another.
    pub fn absorb(&mut self, other: Self) -> bool {
        match (self, other) {
            (Self::Force { p, a }, Self::Force { p: more, a: at }) if *a == at => *p += more,
            (Self::Couple { m, a }, Self::Couple { m: more, a: at }) if *a == at => *m += more,
            (Self::Spread { w0, w1, a, c }, Self::Spread { w0: more0, w1: more1, a: at, c: over })
                if *a == at && *c == over =>
            {
                *w0 += more0;
                *w1 += more1;
            }
            (Self::Gradient { strain, a, c }, Self::Gradient { strain: more, a: at, c: over })
                if *a == at && *c == over =>
            {
                *strain += more;
            }
            _ => return false,
        }
        true
    }
}
