//! One state of the released member: a unit redundant, or a load case.

use super::action::{Acting, Action};
use super::equilibrium as sums;
use super::model::{Hold, Holder, Model, Part};
use super::own::{self, Cut, Sway};
use super::stability::splits;
use crate::member::{LoadKind, Member, Redundant};

/// What a support gives: upward force, counter-clockwise moment. Zero where it does not hold that movement.
#[derive(Clone, Copy, Debug, PartialEq, Default)]
pub struct Reaction {
    /// Upward, N.
    pub force: f64,
    /// Counter-clockwise, N·m.
    pub moment: f64,
}

/// A piece in a state.
#[derive(Clone, Copy, Debug, PartialEq, Default)]
pub struct PieceState {
    /// Just right of its left end.
    pub left: Cut,
    /// At its right end, beyond whatever acts at the cut itself.
    pub right: Cut,
    /// Deflection and turn at its left end.
    pub start: Sway,
    /// Deflection and turn at its right end.
    pub end: Sway,
    /// What it adds by its own bending.
    pub own: Sway,
    /// Its left end measured from the start of its part, the part's start held.
    pub from_start: Sway,
    /// Its right end measured likewise.
    pub to_end: Sway,
}

/// Items around a stretch of the member; everything outside is zero.
#[derive(Clone, Debug, PartialEq)]
pub struct Window<T> {
    first: usize,
    items: Vec<T>,
}

impl<T: Copy + Default + PartialEq> Window<T> {
    /// Keeps the stretch from the first to the last item that is not zero.
    pub(super) fn trimmed(items: Vec<T>) -> Self {
        let zero = T::default();
        let first = items.iter().position(|item| *item != zero).unwrap_or(items.len());
        let last = items.iter().rposition(|item| *item != zero).map_or(first, |last| last + 1);
        Self { first, items: items.get(first..last).unwrap_or_default().to_vec() }
    }

    /// The item at `index`; zero outside the stretch.
    pub fn get(&self, index: usize) -> T {
        index.checked_sub(self.first).and_then(|index| self.items.get(index)).copied().unwrap_or_default()
    }

    /// Indices of the stretch.
    pub fn range(&self) -> std::ops::Range<usize> {
        self.first..self.first + self.items.len()
    }

    /// Items with their indices.
    pub fn iter(&self) -> impl Iterator<Item = (usize, &T)> {
        self.items.iter().enumerate().map(|(index, item)| (index + self.first, item))
    }
}

/// A solved state of the released member.
#[derive(Clone, Debug, PartialEq)]
pub struct State {
    /// By piece.
    pub pieces: Window<PieceState>,
    /// By support; a released movement has no reaction here, but a redundant applied as a load has its own value.
    pub reactions: Window<Reaction>,
    /// Shear in the joint behind each part but the last.
    pub joints: Window<f64>,
    /// By part: deflection and turn of its start.
    pub starts: Window<Sway>,
}

/// What loads a state.
#[derive(Clone, Debug)]
pub struct Loading<'a> {
    /// By piece.
    pub actions: &'a [Vec<Acting>],
    /// Redundants applied as loads, with their values.
    pub redundants: &'a [(Redundant, f64)],
    /// Settlement of each support, m; empty for none.
    pub settlements: &'a [f64],
    /// Imposed turn of each support, rad; empty for none.
    pub turns: &'a [f64],
}

/// Imposed movements of the supports in a case: settlements and turns, summed by support.
pub fn imposed(member: &Member, case: usize) -> (Vec<f64>, Vec<f64>) {
    let mut settlements = vec![0.0; member.supports.len()];
    let mut turns = settlements.clone();
    for load in member.cases.get(case).map_or(&[][..], |case| &case.loads) {
        match &load.kind {
            LoadKind::Settlement { support, by } => add(&mut settlements, *support, by.value.si()),
            LoadKind::Rotation { support, by } => add(&mut turns, *support, by.value.si()),
            _ => {}
        }
    }
    (settlements, turns)
}

fn add(list: &mut [f64], index: usize, value: f64) {
    if let Some(item) = list.get_mut(index) {
        *item += value;
    }
}

pub(super) struct Solver<'a> {
    pub(super) member: &'a Member,
    pub(super) model: &'a Model,
}

/// Working space of one state.
struct Sketch {
    pieces: Vec<PieceState>,
    reactions: Vec<Reaction>,
    joints: Vec<f64>,
    starts: Vec<Sway>,
    /// Moment in each joint: the redundant that was released there, zero at a hinge.
    joint_moments: Vec<f64>,
}

impl Solver<'_> {
    /// Solves the released member by equilibrium, then chains its pieces.
    pub(super) fn solve(&self, loading: &Loading<'_>) -> State {
        let model = self.model;
        let mut sketch = Sketch {
            pieces: vec![PieceState::default(); model.pieces.len()],
            reactions: vec![Reaction::default(); model.supports.len()],
            joints: vec![0.0; model.parts.len()],
            starts: vec![Sway::default(); model.parts.len()],
            joint_moments: vec![0.0; model.parts.len()],
        };
        self.apply_redundants(loading.redundants, &mut sketch);
        for part in &model.order {
            self.balance(*part, loading, &mut sketch);
        }
        for part in 0..model.parts.len() {
            self.cut(part, loading.actions, &mut sketch);
        }
        for part in model.order.iter().rev() {
            self.chain(*part, loading, &mut sketch);
        }
        State {
            pieces: Window::trimmed(sketch.pieces),
            reactions: Window::trimmed(sketch.reactions),
            joints: Window::trimmed(sketch.joints),
            starts: Window::trimmed(sketch.starts),
        }
    }

    fn apply_redundants(&self, redundants: &[(Redundant, f64)], sketch: &mut Sketch) {
        for (redundant, value) in redundants {
            let index = redundant.support();
            let Some(held) = self.model.supports.get(index) else { continue };
            let joint = splits(self.member, *redundant);
            let reaction = sketch.reactions.get_mut(index);
            match (redundant, reaction) {
                (Redundant::Force(_), Some(reaction)) => reaction.force += value,
                // Bending moment at the left end is opposite to the support's counter-clockwise moment.
                (Redundant::Moment(_), Some(reaction)) if !joint => {
                    reaction.moment += if held.cut == 0 { -value } else { *value };
                }
                _ => add(&mut sketch.joint_moments, held.part, *value),
            }
        }
    }

    /// Downward force on a part and its clockwise moment about the place `about`, without what holds it; `joint` is the
    /// downward force of the joint at its right end.
    fn load_of(
        &self,
        index: usize,
        part: &Part,
        about: f64,
        joint: f64,
        loading: &Loading<'_>,
        sketch: &Sketch,
    ) -> (f64, f64) {
        let (mut force, mut moment) = (0.0, 0.0);
        let range = part.first..part.last;
        let lists = loading.actions.get(range.clone()).unwrap_or_default();
        for (piece, list) in self.model.pieces.get(range).unwrap_or_default().iter().zip(lists) {
            for acting in list {
                force += acting.action.resultant();
                moment += acting.action.moment(piece.x - about);
            }
        }
        let mut push = |down: f64, x: f64, couple: f64| {
            force += down;
            moment += down * (x - about) + couple;
        };
        for support in &part.supports {
            if let (Some(held), Some(reaction)) = (self.model.supports.get(*support), sketch.reactions.get(*support)) {
                push(-reaction.force, held.at.x(), -reaction.moment);
            }
        }
        let at = |list: &[f64], index: usize| list.get(index).copied().unwrap_or_default();
        if let Some(before) = index.checked_sub(1) {
            push(-at(&sketch.joints, before), part.from.x(), at(&sketch.joint_moments, before));
        }
        push(joint, part.to.x(), -at(&sketch.joint_moments, index));
        (force, moment)
    }

    /// Equilibrium of one part gives the two forces that hold it.
    fn balance(&self, index: usize, loading: &Loading<'_>, sketch: &mut Sketch) {
        let Some(part) = self.model.parts.get(index) else { return };
        match part.hold {
            Hold::Deflections(first, second) => {
                let (x1, x2) = (self.holder_x(part, first), self.holder_x(part, second));
                // What the joint brings right above the far holder goes straight into it: no residual travels on.
                let joint = sketch.joints.get(index).copied().unwrap_or_default();
                let (direct, apart) = if x2 == part.to.x() { (joint, 0.0) } else { (0.0, joint) };
                let (force, moment) = self.load_of(index, part, x1, apart, loading, sketch);
                let far = if moment == 0.0 { 0.0 } else { sums::balancing_force(moment, x2 - x1) };
                self.give_force(index, second, far + direct, sketch);
                self.give_force(index, first, force - far, sketch);
            }
            Hold::DeflectionAndTurn(holder, support) => {
                let joint = sketch.joints.get(index).copied().unwrap_or_default();
                let about = self.holder_x(part, holder);
                let (force, moment) = self.load_of(index, part, about, joint, loading, sketch);
                self.give_force(index, holder, force, sketch);
                if let Some(reaction) = sketch.reactions.get_mut(support) {
                    reaction.moment += moment;
                }
            }
        }
    }

    pub(super) fn holder_x(&self, part: &Part, holder: Holder) -> f64 {
        match holder {
            Holder::Support(support) => self.model.supports.get(support).map_or(0.0, |held| held.at.x()),
            Holder::LeftNeighbour => part.from.x(),
            Holder::RightNeighbour => part.to.x(),
        }
    }

    fn give_force(&self, part: usize, holder: Holder, upward: f64, sketch: &mut Sketch) {
        match holder {
            Holder::Support(support) => {
                if let Some(reaction) = sketch.reactions.get_mut(support) {
                    reaction.force += upward;
                }
            }
            // The joint's shear acts upward on the part to its right and downward on the part to its left.
            Holder::LeftNeighbour => {
                if let Some(before) = part.checked_sub(1) {
                    add(&mut sketch.joints, before, upward);
                }
            }
            Holder::RightNeighbour => add(&mut sketch.joints, part, -upward),
        }
    }

    /// Free bodies of a part, right to left.
    fn cut(&self, index: usize, actions: &[Vec<Acting>], sketch: &mut Sketch) {
        let Some(part) = self.model.parts.get(index) else { return };
        let at = |list: &[f64]| list.get(index).copied().unwrap_or_default();
        let mut cut = Cut { shear: at(&sketch.joints), moment: at(&sketch.joint_moments) };
        let mut supports = part.supports.iter().rev().peekable();
        for piece in (part.first..part.last).rev() {
            while let Some(support) =
                supports.next_if(|support| self.model.supports.get(**support).is_some_and(|held| held.cut > piece))
            {
                let reaction = sketch.reactions.get(*support).copied().unwrap_or_default();
                cut.shear -= reaction.force;
                cut.moment += reaction.moment;
            }
            let (Some(geometry), Some(state)) = (self.model.pieces.get(piece), sketch.pieces.get_mut(piece)) else {
                return;
            };
            state.right = cut;
            let list = actions.get(piece).map_or(&[][..], Vec::as_slice);
            cut = own::near_end(cut, geometry.length, list.iter().map(|acting| &acting.action));
            state.left = cut;
        }
    }

    /// Chains the pieces of a part, left to right, and puts the part where what holds it wants it.
    fn chain(&self, index: usize, loading: &Loading<'_>, sketch: &mut Sketch) {
        let Some(part) = self.model.parts.get(index) else { return };
        let mut carried = Sway::default();
        for piece in part.first..part.last {
            let (Some(geometry), Some(state)) = (self.model.pieces.get(piece), sketch.pieces.get_mut(piece)) else {
                return;
            };
            let head: Vec<Action> =
                loading.actions.get(piece).map_or(Vec::new(), |list| list.iter().map(|acting| acting.action).collect());
            if state.right != Cut::default() || state.left != Cut::default() || !head.is_empty() {
                state.own = own::own_bending(&geometry.stiffness, geometry.length, state.right, &head);
            }
            state.from_start = carried;
            carried = Sway {
                v: sums::chained_v(carried.v, carried.psi, geometry.length, state.own.v),
                psi: sums::chained_psi(carried.psi, state.own.psi),
            };
            state.to_end = carried;
        }
        let start = self.start(index, part, loading, sketch);
        if let Some(place) = sketch.starts.get_mut(index) {
            *place = start;
        }
        for piece in part.first..part.last {
            let (Some(geometry), Some(state)) = (self.model.pieces.get(piece), sketch.pieces.get_mut(piece)) else {
                return;
            };
            let near = geometry.from.beyond(part.from);
            let far = geometry.to.beyond(part.from);
            let place = |carried: Sway, d: f64| Sway {
                v: sums::chained_v(start.v, start.psi, d, carried.v),
                psi: sums::chained_psi(start.psi, carried.psi),
            };
            state.start = place(state.from_start, near);
            state.end = place(state.to_end, far);
        }
    }

    fn start(&self, index: usize, part: &Part, loading: &Loading<'_>, sketch: &Sketch) -> Sway {
        let x = part.from.x();
        match part.hold {
            Hold::Deflections(first, second) => {
                let (d1, v1, t1) = self.held_deflection(index, part, first, loading, sketch);
                let (d2, v2, t2) = self.held_deflection(index, part, second, loading, sketch);
                let psi = sums::start_turn(v1, t1.v, v2, t2.v, d2 - d1);
                Sway { v: sums::start_deflection(v1, t1.v, psi, d1 - x), psi }
            }
            Hold::DeflectionAndTurn(holder, support) => {
                let (d, v, t) = self.held_deflection(index, part, holder, loading, sketch);
                let (turn, carried) = self.held_turn(support, loading, sketch);
                let psi = turn - carried.psi;
                Sway { v: sums::start_deflection(v, t.v, psi, d - x), psi }
            }
        }
    }

    /// Place, deflection there, and what the chain has carried there.
    fn held_deflection(
        &self,
        index: usize,
        part: &Part,
        holder: Holder,
        loading: &Loading<'_>,
        sketch: &Sketch,
    ) -> (f64, f64, Sway) {
        let x = self.holder_x(part, holder);
        let piece = |index: usize| sketch.pieces.get(index).copied().unwrap_or_default();
        match holder {
            Holder::Support(support) => {
                let imposed = loading.settlements.get(support).copied().unwrap_or_default();
                let force = sketch.reactions.get(support).map_or(0.0, |reaction| reaction.force);
                let give = self.model.supports.get(support).map_or(0.0, |held| held.give);
                (x, imposed + force * give, self.carried_to(support, sketch))
            }
            Holder::LeftNeighbour => {
                let v = index.checked_sub(1).and_then(|before| self.model.parts.get(before));
                (x, v.map_or(0.0, |part| piece(part.last.saturating_sub(1)).end.v), Sway::default())
            }
            Holder::RightNeighbour => {
                let v = self.model.parts.get(index + 1).map_or(0.0, |part| piece(part.first).start.v);
                (x, v, piece(part.last.saturating_sub(1)).to_end)
            }
        }
    }

    fn held_turn(&self, support: usize, loading: &Loading<'_>, sketch: &Sketch) -> (f64, Sway) {
        let imposed = loading.turns.get(support).copied().unwrap_or_default();
        let moment = sketch.reactions.get(support).map_or(0.0, |reaction| reaction.moment);
        let give = self.model.supports.get(support).map_or(0.0, |held| held.turn_give);
        (imposed + moment * give, self.carried_to(support, sketch))
    }

    /// What the chain of a support's part has carried to the support.
    fn carried_to(&self, support: usize, sketch: &Sketch) -> Sway {
        let Some(held) = self.model.supports.get(support) else { return Sway::default() };
        let first = self.model.parts.get(held.part).map_or(0, |part| part.first);
        match held.cut.checked_sub(1) {
            Some(piece) if held.cut > first => sketch.pieces.get(piece).map_or(Sway::default(), |state| state.to_end),
            _ => Sway::default(),
        }
    }
}
