//! One state of the released member, told: reactions, cuts, own bending, chain.

use super::acts::Act;
use super::{Narrator, Scale, finding};
use crate::analysis::equilibrium as sums;
use crate::analysis::model::{Hold, Holder, Part, Piece};
use crate::analysis::own::Sway;
use crate::analysis::stability::splits;
use crate::analysis::state::State;
use crate::member::{Place, Redundant};
use crate::working::draft::{Likes, Symbol};
use crate::working::trace::Traced;

/// A pair of figures: shear and moment, or deflection and turn, or force and moment.
pub type Pair = (Traced, Traced);

const REACTIONS: &str = "Reactions of the released member, by equilibrium of its parts.";
const CUTS: &str = "Free bodies, right to left: shear and bending moment at every cut.";
const CHAIN: &str =
    "Pieces chained, left to right: own bending of each piece, then shift of its wall, turn times length, own bending.";

fn nothing() -> Pair {
    (Traced::zero(), Traced::zero())
}

/// A state as steps; what does not act is zero.
#[derive(Clone, Debug)]
pub struct Told {
    /// By piece: just right of its left end.
    pub left: Vec<Pair>,
    /// By piece: at its right end.
    pub right: Vec<Pair>,
    /// By piece: deflection and turn at its left end.
    pub start: Vec<Pair>,
    /// By piece: deflection and turn at its right end.
    pub end: Vec<Pair>,
    /// By support.
    pub reactions: Vec<Pair>,
}

/// What loads the state that is told.
pub struct Loads<'a> {
    /// By piece.
    pub acts: &'a [Vec<Act>],
    /// The unit redundant and its step.
    pub unit: Option<(Redundant, Traced)>,
    /// By support: settlement and imposed turn.
    pub imposed: &'a [Pair],
}

struct Teller<'n, 'a, 'l> {
    narrator: &'n mut Narrator<'a>,
    state: &'l State,
    loads: &'l Loads<'l>,
    scale: &'l Scale,
    told: Told,
    joints: Vec<Traced>,
    joint_moments: Vec<Traced>,
    /// By piece: what the chain has carried to its left and right end, the part's start held.
    carried: Vec<(Pair, Pair)>,
}

impl<'a> Narrator<'a> {
    /// A block for a stretch of the member, which may stand as a column beside others.
    fn stretch_column(&mut self, sentence: &str, from: Place, to: Place, what: &str) {
        if self.book.column.is_some() {
            return;
        }
        let likes = Likes {
            key: what.to_owned(),
            head: (format!("{}–{}", self.place_name(from), self.place_name(to)), String::new()),
            fewest: 3,
            sentence: format!("{sentence} Symbols are those of the first column."),
        };
        self.builder.block_like(sentence, likes);
    }

    /// Tells a state of the released member.
    pub fn tell(&mut self, state: &State, loads: &Loads<'_>, scale: &Scale) -> Told {
        let model = &self.analysis.model;
        let pieces = vec![nothing(); model.pieces.len()];
        let parts = model.parts.len();
        let order = model.order.clone();
        let told = Told {
            left: pieces.clone(),
            right: pieces.clone(),
            start: pieces.clone(),
            end: pieces.clone(),
            reactions: vec![nothing(); model.supports.len()],
        };
        let carried = vec![(nothing(), nothing()); pieces.len()];
        let zeros = vec![Traced::zero(); parts];
        let mut teller =
            Teller { narrator: self, state, loads, scale, told, joints: zeros.clone(), joint_moments: zeros, carried };
        teller.stage(REACTIONS);
        teller.apply_unit();
        for part in &order {
            teller.part_column(REACTIONS, *part, "balance");
            teller.balance(*part);
        }
        teller.stage(CUTS);
        for part in 0..parts {
            teller.cut(part);
        }
        teller.stage(CHAIN);
        for part in order.iter().rev() {
            teller.chain(*part);
        }
        teller.told
    }
}

impl Teller<'_, '_, '_> {
    fn part(&self, index: usize) -> Option<Part> {
        self.narrator.analysis.model.parts.get(index).cloned()
    }

    fn piece(&self, index: usize) -> Option<Piece> {
        self.narrator.analysis.model.pieces.get(index).copied()
    }

    fn apply_unit(&mut self) {
        let Some((redundant, unit)) = self.loads.unit.clone() else { return };
        let index = redundant.support();
        let Some(held) = self.narrator.analysis.model.supports.get(index).copied() else { return };
        let joint = splits(self.narrator.member, redundant);
        match (redundant, self.told.reactions.get_mut(index)) {
            (Redundant::Force(_), Some(reaction)) => reaction.0 = unit,
            (Redundant::Moment(_), Some(reaction)) if !joint => {
                reaction.1 = if held.cut == 0 { -unit } else { unit };
            }
            _ => {
                if let Some(moment) = self.joint_moments.get_mut(held.part) {
                    *moment = unit;
                }
            }
        }
    }

    fn holder_place(&self, part: &Part, holder: Holder) -> Place {
        match holder {
            Holder::Support(support) => {
                self.narrator.analysis.model.supports.get(support).map_or(Place::ZERO, |held| held.at)
            }
            Holder::LeftNeighbour => part.from,
            Holder::RightNeighbour => part.to,
        }
    }

    /// Downward forces on a part and their clockwise moments about a place; `joint` is the force at its right end.
    fn terms(&mut self, index: usize, part: &Part, about: Place, joint: Traced) -> (Vec<Traced>, Vec<Traced>) {
        let (mut forces, mut moments) = (Vec::new(), Vec::new());
        for piece in part.first..part.last {
            let Some(geometry) = self.piece(piece) else { continue };
            for act in self.loads.acts.get(piece).map_or(&[][..], Vec::as_slice) {
                let d = self.narrator.distance(about, geometry.from);
                forces.push(act.resultant());
                moments.push(act.moment(d));
            }
        }
        let mut push = |narrator: &mut Narrator<'_>, down: Traced, at: Place, couple: Traced| {
            if !down.is_zero() {
                let d = narrator.distance(about, at);
                moments.push(down.clone() * d);
                forces.push(down);
            }
            moments.push(couple);
        };
        for support in &part.supports {
            let at = self.narrator.analysis.model.supports.get(*support).map_or(Place::ZERO, |held| held.at);
            let (force, moment) = self.told.reactions.get(*support).cloned().unwrap_or_else(nothing);
            push(self.narrator, -force, at, -moment);
        }
        let at = |list: &[Traced], index: usize| list.get(index).cloned().unwrap_or_else(Traced::zero);
        if let Some(before) = index.checked_sub(1) {
            push(self.narrator, -at(&self.joints, before), part.from, at(&self.joint_moments, before));
        }
        push(self.narrator, joint, part.to, -at(&self.joint_moments, index));
        (forces, moments)
    }

    fn balance(&mut self, index: usize) {
        let Some(part) = self.part(index) else { return };
        match part.hold {
            Hold::Deflections(first, second) => {
                let (x1, x2) = (self.holder_place(&part, first), self.holder_place(&part, second));
                let joint = self.joints.get(index).cloned().unwrap_or_else(Traced::zero);
                // What the joint brings right above the far holder goes straight into it.
                let (direct, apart) = if x2 == part.to { (joint, Traced::zero()) } else { (Traced::zero(), joint) };
                let (mut forces, moments) = self.terms(index, &part, x1, apart);
                let live: Vec<Traced> = moments.into_iter().filter(|term| !term.is_zero()).collect();
                if live.is_empty() && forces.is_empty() {
                    self.set_force(index, second, &direct);
                    self.set_force(index, first, &Traced::zero());
                    return;
                }
                let arm = if live.is_empty() { Traced::zero() } else { self.narrator.distance(x1, x2) };
                let far = self.far_force(index, second, live, arm, x1, direct.clone());
                self.set_force(index, second, &far);
                forces.push(direct - far);
                let near = self.near_force(index, first, forces);
                self.set_force(index, first, &near);
            }
            Hold::DeflectionAndTurn(holder, support) => {
                let about = self.holder_place(&part, holder);
                let joint = self.joints.get(index).cloned().unwrap_or_else(Traced::zero);
                let (forces, moments) = self.terms(index, &part, about, joint);
                let force = self.near_force(index, holder, forces);
                self.set_force(index, holder, &force);
                let name = self.narrator.support_name(support);
                let value = self.state.reactions.get(support).moment;
                let what = finding(
                    format!("moment of support {name}, counter-clockwise"),
                    Symbol::new("m", name),
                    self.scale.moment.clone(),
                    value,
                )
                .basis("equilibrium of moments");
                let sum = self.narrator.total(what, moments, false);
                if let Some(reaction) = self.told.reactions.get_mut(support) {
                    reaction.1 = sum;
                }
            }
        }
    }

    /// What a holder's force is called, and its upward value in the analysis.
    fn force_finding(&self, part: usize, holder: Holder) -> super::Finding {
        let (title, symbol, value) = match holder {
            Holder::Support(support) => {
                let name = self.narrator.support_name(support);
                let value = self.state.reactions.get(support).force;
                (format!("reaction of support {name}, upward"), Symbol::new("R", name), value)
            }
            Holder::LeftNeighbour => self.joint_finding(part.saturating_sub(1), 1.0),
            Holder::RightNeighbour => self.joint_finding(part, -1.0),
        };
        finding(title, symbol, self.scale.shear.clone(), value).basis("equilibrium of the part")
    }

    fn joint_finding(&self, joint: usize, sign: f64) -> (String, Symbol, f64) {
        let at = self.part(joint).map_or(Place::ZERO, |part| part.to);
        let name = self.narrator.place_name(at);
        (
            format!("upward force that the joint at {name} gives the part"),
            Symbol::new("J", name),
            sign * self.state.joints.get(joint),
        )
    }

    fn far_force(
        &mut self,
        part: usize,
        holder: Holder,
        moments: Vec<Traced>,
        arm: Traced,
        about: Place,
        direct: Traced,
    ) -> Traced {
        let what = self.force_finding(part, holder);
        if moments.is_empty() {
            return self.narrator.builder.find(what, direct);
        }
        let moments = if moments.len() > 5 {
            let at = self.narrator.place_name(about);
            let value = moments.iter().map(|term| self.narrator.builder.value(term)).sum();
            let symbol = Symbol::new("S", at.clone());
            let sum = finding(format!("moment of the loads about {at}"), symbol, self.scale.moment.clone(), value);
            self.narrator.total(sum, moments, false)
        } else {
            sums::sum(moments)
        };
        self.narrator.builder.find(what, sums::balancing_force(moments, arm) + direct)
    }

    fn near_force(&mut self, part: usize, holder: Holder, forces: Vec<Traced>) -> Traced {
        let what = self.force_finding(part, holder);
        self.narrator.total(what, forces, false)
    }

    fn set_force(&mut self, part: usize, holder: Holder, upward: &Traced) {
        match holder {
            Holder::Support(support) => {
                if let Some(reaction) = self.told.reactions.get_mut(support) {
                    reaction.0 = upward.clone();
                }
            }
            Holder::LeftNeighbour => {
                if let Some(joint) = part.checked_sub(1).and_then(|before| self.joints.get_mut(before)) {
                    *joint = upward.clone();
                }
            }
            Holder::RightNeighbour => {
                if let Some(joint) = self.joints.get_mut(part) {
                    *joint = -upward.clone();
                }
            }
        }
    }

    /// Free bodies of a part, right to left.
    fn cut(&mut self, index: usize) {
        let Some(part) = self.part(index) else { return };
        let at = |list: &[Traced]| list.get(index).cloned().unwrap_or_else(Traced::zero);
        let mut cut = (at(&self.joints), at(&self.joint_moments));
        let mut supports = part.supports.clone();
        for piece in (part.first..part.last).rev() {
            let Some(geometry) = self.piece(piece) else { return };
            let found = self.state.pieces.get(piece);
            self.column(CUTS, &geometry, "cut");
            while let Some(support) = supports.pop_if(|support| {
                self.narrator.analysis.model.supports.get(*support).is_some_and(|held| held.cut > piece)
            }) {
                let reaction = self.told.reactions.get(support).cloned().unwrap_or_else(nothing);
                let name = self.narrator.place_name(geometry.to);
                let [shear, moment] = self.narrator.cut_findings(
                    found.right,
                    &format!("left of {name}"),
                    &format!("{name}l"),
                    self.scale,
                );
                cut = (
                    self.narrator.builder.find(shear, cut.0 - reaction.0),
                    self.narrator.builder.find(moment, cut.1 + reaction.1),
                );
            }
            if let Some(slot) = self.told.right.get_mut(piece) {
                *slot = cut.clone();
            }
            let name = self.narrator.place_name(geometry.from);
            let findings =
                self.narrator.cut_findings(found.left, &format!("right of {name}"), &format!("{name}r"), self.scale);
            let acts = self.loads.acts.get(piece).cloned().unwrap_or_default();
            let l = self.narrator.distance(geometry.from, geometry.to);
            cut = self.narrator.near_end(&cut, &l, &acts, findings, false);
            if let Some(slot) = self.told.left.get_mut(piece) {
                *slot = cut.clone();
            }
        }
    }

    /// A block for one stage of a state; of many unit states it stands as a column beside the others.
    fn stage(&mut self, sentence: &str) {
        match self.narrator.book.column.clone() {
            Some(head) => {
                let likes = Likes {
                    key: sentence.to_owned(),
                    head: (head, String::new()),
                    fewest: 2,
                    sentence: format!("{sentence} Symbols are those of the first column."),
                };
                self.narrator.builder.block_like(sentence, likes);
            }
            None => {
                self.narrator.builder.block(sentence);
            }
        }
    }

    /// A block for one piece, which stands as a column beside others where their derivations are alike.
    fn column(&mut self, sentence: &str, piece: &Piece, what: &str) {
        self.narrator.stretch_column(sentence, piece.from, piece.to, what);
    }

    /// The same for a part.
    fn part_column(&mut self, sentence: &str, part: usize, what: &str) {
        if let Some(part) = self.part(part) {
            self.narrator.stretch_column(sentence, part.from, part.to, what);
        }
    }

    fn sway_findings(&self, sway: Sway, title: &str, letters: [&'static str; 2], sub: &str) -> [super::Finding; 2] {
        let [v, psi] = letters;
        [
            finding(format!("deflection {title}"), Symbol::new(v, sub), self.scale.v.clone(), sway.v),
            finding(format!("turn {title}"), Symbol::new(psi, sub), self.scale.psi.clone(), sway.psi),
        ]
    }

    fn own(&mut self, index: usize, piece: &Piece) -> Pair {
        let found = self.state.pieces.get(index);
        let (from, to) = (self.narrator.place_name(piece.from), self.narrator.place_name(piece.to));
        let cut = self.told.right.get(index).cloned().unwrap_or_else(nothing);
        let acts = self.loads.acts.get(index).cloned().unwrap_or_default();
        if cut.0.is_zero() && cut.1.is_zero() && acts.is_empty() {
            return nothing();
        }
        let [v, psi] = self.sway_findings(
            found.own,
            &format!("by own bending of {from}–{to}"),
            ["delta", "phi"],
            &format!("{from}{to}"),
        );
        let basis = acts.first().map_or("cantilever: force and couple at the tip", Act::basis);
        let found = [v.basis("cantilever: force and couple at the tip"), psi.basis(basis)];
        let l = self.narrator.distance(piece.from, piece.to);
        if matches!(piece.stiffness, crate::analysis::stiffness::Stiffness::Tapered(_)) {
            return self.narrator.tapered_bending(piece, &l, piece.length, &cut, &acts, found);
        }
        self.narrator.own_bending(piece, &l, &cut, &acts, found).unwrap_or_else(nothing)
    }

    /// Chains the pieces of a part and puts it where what holds it wants it.
    fn chain(&mut self, index: usize) {
        let Some(part) = self.part(index) else { return };
        let walled = self.walled(&part);
        let mut carried = nothing();
        for piece in part.first..part.last {
            let Some(geometry) = self.piece(piece) else { return };
            self.column(CHAIN, &geometry, "chain");
            let (own_v, own_psi) = self.own(piece, &geometry);
            let before = carried.clone();
            let state = self.state.pieces.get(piece);
            let name = self.narrator.place_name(geometry.to);
            let l = self.narrator.distance(geometry.from, geometry.to);
            let letters = if walled { ["v", "psi"] } else { ["t", "tau"] };
            let title = if walled { format!("of {name}") } else { format!("carried to {name}, the part's start held") };
            let [v, psi] = self.sway_findings(state.to_end, &title, letters, &name);
            carried = (
                self.narrator.builder.find(
                    v.basis("shift + turn × length + own bending"),
                    sums::chained_v(carried.0, carried.1.clone(), l, own_v),
                ),
                self.narrator.builder.find(psi, sums::chained_psi(carried.1, own_psi)),
            );
            if let Some(slot) = self.carried.get_mut(piece) {
                *slot = (before, carried.clone());
            }
        }
        self.part_column(CHAIN, index, "start");
        let start = if walled { nothing() } else { self.start(index, &part) };
        self.place_pieces(&part, &start);
    }

    /// Whether the part's left end is held in a wall that does not move: then the chain is already absolute.
    fn walled(&self, part: &Part) -> bool {
        let Hold::DeflectionAndTurn(Holder::Support(at), turn) = part.hold else { return false };
        let supports = &self.narrator.analysis.model.supports;
        let rigid =
            supports.get(at).is_some_and(|held| held.at == part.from && held.give == 0.0 && held.turn_give == 0.0);
        let still = self.loads.imposed.get(at).is_none_or(|(v, psi)| v.is_zero() && psi.is_zero());
        at == turn && rigid && still
    }

    fn start(&mut self, index: usize, part: &Part) -> Pair {
        let value = self.state.starts.get(index);
        let name = self.narrator.place_name(part.from);
        let sub = if part.from == Place::ZERO { name.clone() } else { format!("{name}r") };
        let [v, psi] = self.sway_findings(value, &format!("of the part's start at {name}"), ["v", "psi"], &sub);
        match part.hold {
            Hold::Deflections(first, second) => {
                let (x1, v1, t1) = self.held_deflection(index, part, first);
                let (x2, v2, t2) = self.held_deflection(index, part, second);
                let l = self.narrator.distance(x1, x2);
                let d = self.narrator.distance(part.from, x1);
                let turn = self.narrator.builder.find(psi, sums::start_turn(v1.clone(), t1.0.clone(), v2, t2.0, l));
                let shift = self.narrator.builder.find(v, sums::start_deflection(v1, t1.0, turn.clone(), d));
                (shift, turn)
            }
            Hold::DeflectionAndTurn(holder, support) => {
                let (x, v1, t1) = self.held_deflection(index, part, holder);
                let held = self.held_turn(support);
                let carried = self.carried_to(support);
                let d = self.narrator.distance(part.from, x);
                let turn = self.narrator.builder.find(psi, held - carried.1);
                let shift = self.narrator.builder.find(v, sums::start_deflection(v1, t1.0, turn.clone(), d));
                (shift, turn)
            }
        }
    }

    fn held_deflection(&mut self, index: usize, part: &Part, holder: Holder) -> (Place, Traced, Pair) {
        let at = self.holder_place(part, holder);
        match holder {
            Holder::Support(support) => (at, self.support_deflection(support), self.carried_to(support)),
            Holder::LeftNeighbour => {
                let before = index.checked_sub(1).and_then(|before| self.part(before));
                let v = before.and_then(|before| self.told.end.get(before.last.checked_sub(1)?).cloned());
                (at, v.map_or_else(Traced::zero, |pair| pair.0), nothing())
            }
            Holder::RightNeighbour => {
                let v = self.part(index + 1).and_then(|next| self.told.start.get(next.first).cloned());
                let carried = part.last.checked_sub(1).and_then(|last| self.carried.get(last).cloned());
                (at, v.map_or_else(Traced::zero, |pair| pair.0), carried.map_or_else(nothing, |pair| pair.1))
            }
        }
    }

    /// Deflection of a support that holds: what is imposed and the give of its spring.
    fn support_deflection(&mut self, support: usize) -> Traced {
        let imposed = self.loads.imposed.get(support).map_or_else(Traced::zero, |pair| pair.0.clone());
        let reaction = self.told.reactions.get(support).map_or_else(Traced::zero, |pair| pair.0.clone());
        let Some(k) = self.narrator.book.springs.get(support).and_then(|spring| spring.0.clone()) else {
            return imposed;
        };
        let give = self.narrator.analysis.model.supports.get(support).map_or(0.0, |held| held.give);
        let value = self.narrator.builder.value(&imposed) + self.narrator.builder.value(&reaction) * give;
        let name = self.narrator.support_name(support);
        let what =
            finding(format!("give of the spring at {name}"), Symbol::new("v", name), self.scale.v.clone(), value);
        self.narrator.builder.find(what, sums::yielded(imposed, reaction, k))
    }

    fn held_turn(&mut self, support: usize) -> Traced {
        let imposed = self.loads.imposed.get(support).map_or_else(Traced::zero, |pair| pair.1.clone());
        let moment = self.told.reactions.get(support).map_or_else(Traced::zero, |pair| pair.1.clone());
        let Some(c) = self.narrator.book.springs.get(support).and_then(|spring| spring.1.clone()) else {
            return imposed;
        };
        let give = self.narrator.analysis.model.supports.get(support).map_or(0.0, |held| held.turn_give);
        let value = self.narrator.builder.value(&imposed) + self.narrator.builder.value(&moment) * give;
        let name = self.narrator.support_name(support);
        let what =
            finding(format!("turn of the spring at {name}"), Symbol::new("theta", name), self.scale.psi.clone(), value);
        self.narrator.builder.find(what, sums::yielded(imposed, moment, c))
    }

    fn carried_to(&self, support: usize) -> Pair {
        let model = &self.narrator.analysis.model;
        let Some(held) = model.supports.get(support) else { return nothing() };
        let first = model.parts.get(held.part).map_or(0, |part| part.first);
        match held.cut.checked_sub(1) {
            Some(piece) if held.cut > first => self.carried.get(piece).map_or_else(nothing, |pair| pair.1.clone()),
            _ => nothing(),
        }
    }

    /// The support that holds the part's deflection at a place, whose deflection is then known without the chain.
    fn known_at(&mut self, part: &Part, place: Place) -> Option<Traced> {
        let holders = match part.hold {
            Hold::Deflections(first, second) => vec![first, second],
            Hold::DeflectionAndTurn(only, _) => vec![only],
        };
        for holder in holders {
            if let Holder::Support(support) = holder
                && self.holder_place(part, holder) == place
            {
                return Some(self.support_deflection_known(support));
            }
        }
        None
    }

    /// As `support_deflection`, without writing the give of a spring again.
    fn support_deflection_known(&mut self, support: usize) -> Traced {
        let spring = self.narrator.book.springs.get(support).is_some_and(|spring| spring.0.is_some());
        if spring {
            let name = self.narrator.support_name(support);
            let tag = self.narrator.builder.current_tag();
            let symbol = Symbol::new("v", name);
            if let Some(known) = self.narrator.builder.written(&symbol, &tag) {
                return known;
            }
        }
        self.support_deflection(support)
    }

    /// Puts every piece of a part where its start has been put.
    fn place_pieces(&mut self, part: &Part, start: &Pair) {
        for piece in part.first..part.last {
            let Some(geometry) = self.piece(piece) else { return };
            let state = self.state.pieces.get(piece);
            let (near, far) = self.carried.get(piece).cloned().unwrap_or_else(|| (nothing(), nothing()));
            let left = if piece == part.first {
                start.clone()
            } else {
                piece.checked_sub(1).and_then(|before| self.told.end.get(before).cloned()).unwrap_or_else(nothing)
            };
            let _ = near;
            let right = self.placed(part, &geometry, start, &far, state.end);
            if let (Some(slot), Some(end)) = (self.told.start.get_mut(piece), self.told.end.get_mut(piece)) {
                *slot = left;
                *end = right;
            }
        }
    }

    fn placed(&mut self, part: &Part, piece: &Piece, start: &Pair, carried: &Pair, value: Sway) -> Pair {
        if start.0.is_zero() && start.1.is_zero() {
            return carried.clone();
        }
        let name = self.narrator.place_name(piece.to);
        let [v, psi] = self.sway_findings(value, &format!("of {name}"), ["v", "psi"], &name);
        let psi = if piece.to == part.to && part.to != self.narrator.member.end() {
            super::Finding { symbol: Symbol::new("psi", format!("{name}l")), ..psi }
        } else {
            psi
        };
        let turn = self.narrator.builder.find(psi, sums::chained_psi(start.1.clone(), carried.1.clone()));
        let known = self.known_at(part, piece.to);
        let shift = match known {
            Some(known) => known,
            None => {
                let d = self.narrator.distance(part.from, piece.to);
                self.narrator.builder.find(v, sums::chained_v(start.0.clone(), start.1.clone(), d, carried.0.clone()))
            }
        };
        (shift, turn)
    }
}
