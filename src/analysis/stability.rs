//! Which movements nothing holds, and which restraints can be released.
//!
//! A beam is a chain of straight parts joined where moment is released. Walking it from left to right, the movements a part
//! can still make are all of them, a turn about one place, a shift, or none. Places are exact, so the verdict needs no
//! tolerance. A part that can move without moving its right neighbour is a mechanism that nothing later can hold.

use crate::member::{Member, Place, Redundant};

/// What a part can still do.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Freedom {
    Any,
    Turn(Place),
    Shift,
    Held,
}

/// A movement that nothing holds.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Mechanism {
    /// Left end of the part that can move.
    pub from: Place,
    /// Right end of the part that can move.
    pub to: Place,
    /// How it can move.
    pub movement: Movement,
}

/// How a part can move.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Movement {
    /// It can shift and turn.
    Any,
    /// It can turn about this place.
    Turn(Place),
    /// It can shift without turning.
    Shift,
}

/// Restraints and joints of the member with some restraints released.
#[derive(Clone, Debug)]
pub(super) struct Frame {
    /// For each support: place, holds deflection, holds rotation.
    pub supports: Vec<(Place, bool, bool)>,
    /// Places where moment is released, left to right.
    pub joints: Vec<Place>,
}

impl Frame {
    pub(super) fn new(member: &Member, released: &[Redundant]) -> Self {
        let mut supports: Vec<_> = member
            .supports
            .iter()
            .map(|support| (support.at, support.holds_deflection(), support.holds_rotation()))
            .collect();
        for redundant in released {
            match (redundant, supports.get_mut(redundant.support())) {
                (Redundant::Force(_), Some(support)) => support.1 = false,
                (Redundant::Moment(_), Some(support)) => support.2 = false,
                _ => {}
            }
        }
        let over_supports = released.iter().filter(|redundant| splits(member, **redundant));
        let mut joints: Vec<Place> = over_supports
            .filter_map(|redundant| Some(member.supports.get(redundant.support())?.at))
            .chain(member.hinges.iter().map(|hinge| hinge.at))
            .collect();
        joints.sort_unstable();
        joints.dedup();
        Self { supports, joints }
    }

    /// The first movement that nothing holds.
    pub(super) fn mechanism(&self, end: Place) -> Option<Mechanism> {
        let mut freedom = Freedom::Any;
        let mut from = Place::ZERO;
        let mut supports = self.supports.iter().peekable();
        for to in self.joints.iter().copied().chain([end]) {
            while let Some((at, deflection, rotation)) = supports.next_if(|support| support.0 <= to) {
                freedom = restrained(freedom, *at, *deflection, *rotation);
            }
            let last = to == end;
            let movement = match freedom {
                Freedom::Any if last => Some(Movement::Any),
                Freedom::Any => Some(Movement::Turn(to)),
                Freedom::Turn(about) if last || about == to => Some(Movement::Turn(about)),
                Freedom::Shift if last => Some(Movement::Shift),
                _ => None,
            };
            if let Some(movement) = movement {
                return Some(Mechanism { from, to, movement });
            }
            freedom = if freedom == Freedom::Held { Freedom::Turn(to) } else { Freedom::Any };
            from = to;
        }
        None
    }
}

/// What a part can still do once a support at `at` holds it.
fn restrained(freedom: Freedom, at: Place, deflection: bool, rotation: bool) -> Freedom {
    let held = match (freedom, deflection) {
        (unchanged, false) => unchanged,
        (Freedom::Any, true) => Freedom::Turn(at),
        (Freedom::Turn(about), true) if about == at => Freedom::Turn(about),
        _ => Freedom::Held,
    };
    match (held, rotation) {
        (unchanged, false) => unchanged,
        (Freedom::Any | Freedom::Shift, true) => Freedom::Shift,
        _ => Freedom::Held,
    }
}

/// Whether releasing this redundant parts the member (a continuity moment) rather than freeing a support's own moment.
pub fn splits(member: &Member, redundant: Redundant) -> bool {
    let Redundant::Moment(index) = redundant else { return false };
    member
        .supports
        .get(index)
        .is_some_and(|support| !support.holds_rotation() && support.at > Place::ZERO && support.at < member.end())
}

/// The movement of the unreleased member that nothing holds; `None` for a stable member.
pub fn mechanism(member: &Member) -> Option<Mechanism> {
    Frame::new(member, &[]).mechanism(member.end())
}

/// Why a choice of redundants cannot be used.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum BadChoice {
    /// Wrong number of redundants.
    Count {
        /// How many the member needs.
        needed: usize,
        /// How many were chosen.
        chosen: usize,
    },
    /// With those before it released, releasing this one leaves a mechanism.
    Dependent {
        /// Index in the choice.
        index: usize,
        /// What would move.
        mechanism: Mechanism,
    },
}

/// Checks a choice of redundants: as many as the degree of indeterminacy, and a stable member left.
///
/// # Errors
/// The first reason why the choice cannot be used.
pub fn check_choice(member: &Member, chosen: &[Redundant]) -> Result<(), BadChoice> {
    for count in 1..=chosen.len() {
        let released = chosen.get(..count).unwrap_or_default();
        if let Some(mechanism) = Frame::new(member, released).mechanism(member.end()) {
            return Err(BadChoice::Dependent { index: count - 1, mechanism });
        }
    }
    let needed = member.indeterminacy();
    if chosen.len() == needed { Ok(()) } else { Err(BadChoice::Count { needed, chosen: chosen.len() }) }
}

/// The redundants of a stable member: the deck's choice, or those a hand would release.
///
/// A single span releases its props' forces, which leaves a cantilever or a simple beam; a member over three and more
/// supports releases the moments over them, which keeps the equations banded. Candidates are walked in that order and kept
/// while the released member stays stable.
pub fn redundants(member: &Member) -> Vec<Redundant> {
    if let Some(chosen) = &member.redundants {
        return chosen.clone();
    }
    let needed = member.indeterminacy();
    let mut kept = Vec::new();
    for candidate in candidates(member) {
        if kept.len() == needed {
            break;
        }
        kept.push(candidate);
        if Frame::new(member, &kept).mechanism(member.end()).is_some() {
            kept.pop();
        }
    }
    kept
}

fn candidates(member: &Member) -> Vec<Redundant> {
    let supports = || member.supports.iter().enumerate();
    let has_moment = |index: usize, at: Place, holds: bool| {
        let hinged = member.hinges.iter().any(|hinge| hinge.at == at);
        (holds || splits(member, Redundant::Moment(index))) && !hinged
    };
    let moments: Vec<_> = supports()
        .filter(|(index, support)| has_moment(*index, support.at, support.holds_rotation()))
        .map(|(index, _)| Redundant::Moment(index))
        .collect();
    let forces = |prop: bool| {
        supports()
            .rev()
            .filter(move |(_, support)| support.holds_deflection() && prop != support.holds_rotation())
            .map(|(index, _)| Redundant::Force(index))
    };
    let all_forces = supports().rev().filter(|(_, s)| s.holds_deflection()).map(|(index, _)| Redundant::Force(index));
    match supports().filter(|(_, support)| support.holds_deflection()).count() {
        0 | 1 => moments.into_iter().chain(all_forces).collect(),
        2 => forces(true).chain(forces(false)).chain(moments.into_iter().rev()).collect(),
        // An inner support that holds rotation is a wall to both sides: members hung on it as cantilevers keep apart what
        // its own moment would mix, and lose no digit where one side is far stiffer than the other.
        _ => {
            let (apart, own): (Vec<_>, Vec<_>) = moments.into_iter().partition(|moment| splits(member, *moment));
            apart.into_iter().chain(forces(true)).chain(forces(false)).chain(own).collect()
        }
    }
}
