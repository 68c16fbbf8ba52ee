//! The released member: pieces between cuts, parts between joints, and how each part is held.

use super::action::{self, Acting};
use super::stability::{Frame, redundants};
use super::stiffness::Stiffness;
use crate::member::{self, LoadKind, Member, Place, Redundant};

/// The released member, ready for every load case.
#[derive(Clone, Debug)]
pub struct Model {
    /// Pieces, left to right: between neighbouring cuts.
    pub pieces: Vec<Piece>,
    /// Parts, left to right: between neighbouring joints.
    pub parts: Vec<Part>,
    /// Parts in the order in which equilibrium solves them; kinematics goes the other way.
    pub order: Vec<usize>,
    /// The redundants released.
    pub redundants: Vec<Redundant>,
    /// Supports as the model sees them, in the member's order.
    pub supports: Vec<Held>,
}

/// A piece: constant section or one taper, no cut inside.
#[derive(Clone, Copy, Debug)]
pub struct Piece {
    /// Left end.
    pub from: Place,
    /// Right end.
    pub to: Place,
    /// Left end, m.
    pub x: f64,
    /// Length, m.
    pub length: f64,
    /// Index of its segment.
    pub segment: usize,
    /// Index of its part.
    pub part: usize,
    /// Rigidity.
    pub stiffness: Stiffness,
}

/// A part of the released member: rigid but for bending, joined to its neighbours by shear alone.
#[derive(Clone, Debug)]
pub struct Part {
    /// Left end.
    pub from: Place,
    /// Right end.
    pub to: Place,
    /// Index of its first piece.
    pub first: usize,
    /// Index behind its last piece.
    pub last: usize,
    /// Indices of the supports that stand on it, left to right; one at a joint belongs to the part on its left.
    pub supports: Vec<usize>,
    /// What holds it.
    pub hold: Hold,
}

/// The two movements that hold a part.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Hold {
    /// Deflection at two places, the first to the left of the second.
    Deflections(Holder, Holder),
    /// Deflection at one place and the turn at a support (its index).
    DeflectionAndTurn(Holder, usize),
}

/// What holds a deflection of a part.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Holder {
    /// A support, by index.
    Support(usize),
    /// The neighbour on the left.
    LeftNeighbour,
    /// The neighbour on the right.
    RightNeighbour,
}

/// A support of the released member.
#[derive(Clone, Copy, Debug)]
pub struct Held {
    /// Where.
    pub at: Place,
    /// Index of its part.
    pub part: usize,
    /// Index of the cut (0 is the member's left end, i the right end of piece i-1).
    pub cut: usize,
    /// Whether the released member still holds deflection here.
    pub deflection: bool,
    /// Whether the released member still holds the turn here.
    pub rotation: bool,
    /// Give of its vertical spring, m/N; zero where rigid.
    pub give: f64,
    /// Give of its rotational spring, rad/N·m; zero where rigid.
    pub turn_give: f64,
}

impl Model {
    /// The model of a stable member. `None` only where the member is a mechanism or its choice of redundants is bad, which
    /// `stability` reports with reasons.
    pub fn new(member: &Member) -> Option<Self> {
        let redundants = redundants(member);
        let frame = Frame::new(member, &redundants);
        if redundants.len() != member.indeterminacy() || frame.mechanism(member.end()).is_some() {
            return None;
        }
        let cuts = cuts(member);
        let mut pieces = pieces(member, &cuts)?;
        let mut parts = parts(&frame, &cuts, member.end());
        for (index, part) in parts.iter().enumerate() {
            pieces.get_mut(part.first..part.last)?.iter_mut().for_each(|piece| piece.part = index);
        }
        let supports = supports(member, &frame, &cuts, &mut parts);
        let order = assign_holds(&mut parts, &supports)?;
        Some(Self { pieces, parts, order, redundants, supports })
    }

    /// What a case puts on each piece.
    pub fn actions(&self, member: &Member, case: usize) -> Vec<Vec<Acting>> {
        let mut lists = vec![Vec::new(); self.pieces.len()];
        let loads = member.cases.get(case).map_or(&[][..], |case| &case.loads);
        for (load, typed) in loads.iter().enumerate() {
            let (from, to) = extent(&typed.kind, member);
            let first = self.pieces.partition_point(|piece| piece.to < from);
            for (list, piece) in lists.iter_mut().zip(&self.pieces).skip(first) {
                if piece.from > to {
                    break;
                }
                if let Some(action) = action::on_piece(member, &typed.kind, piece.segment, piece.from, piece.to) {
                    list.push(Acting { case, load, action });
                }
            }
        }
        lists
    }

    /// The index of the piece that holds the place; at a cut the piece on its right, at the member's end the last.
    pub fn piece_at(&self, place: Place) -> usize {
        self.pieces.partition_point(|piece| piece.to <= place).min(self.pieces.len().saturating_sub(1))
    }

    /// The index of the cut at the place, where there is one.
    pub fn cut_at(&self, place: Place) -> Option<usize> {
        if place == Place::ZERO {
            return Some(0);
        }
        self.pieces.binary_search_by(|piece| piece.to.cmp(&place)).ok().map(|piece| piece + 1)
    }
}

fn extent(kind: &LoadKind, member: &Member) -> (Place, Place) {
    match kind {
        LoadKind::SelfWeight => (Place::ZERO, member.end()),
        LoadKind::Uniform { over, .. }
        | LoadKind::Linear { over, .. }
        | LoadKind::Area { over, .. }
        | LoadKind::Gradient { over, .. } => (over.from, over.to),
        LoadKind::Point { at, .. } | LoadKind::Couple { at, .. } => (*at, *at),
        LoadKind::Settlement { .. } | LoadKind::Rotation { .. } => (member.end(), Place::ZERO),
    }
}

/// Every cut, left to right: ends, changes of section, supports, hinges.
fn cuts(member: &Member) -> Vec<Place> {
    let mut cuts: Vec<Place> = [Place::ZERO]
        .into_iter()
        .chain(member.segments.iter().map(|segment| segment.to))
        .chain(member.supports.iter().map(|support| support.at))
        .chain(member.hinges.iter().map(|hinge| hinge.at))
        .collect();
    cuts.sort_unstable();
    cuts.dedup();
    cuts
}

fn pieces(member: &Member, cuts: &[Place]) -> Option<Vec<Piece>> {
    let pairs = cuts.iter().zip(cuts.iter().skip(1));
    pairs
        .map(|(from, to)| {
            let segment = member.segments.partition_point(|segment| segment.to <= *from);
            let stiffness = Stiffness::of(member, member.segments.get(segment)?, *from)?;
            let (x, length) = (from.x(), to.beyond(*from));
            Some(Piece { from: *from, to: *to, x, length, segment, part: 0, stiffness })
        })
        .collect()
}

fn parts(frame: &Frame, cuts: &[Place], end: Place) -> Vec<Part> {
    let mut from = Place::ZERO;
    let joints = frame.joints.iter().copied().chain([end]);
    let position = |place: Place| cuts.partition_point(|cut| *cut < place);
    joints
        .map(|to| {
            let hold = Hold::Deflections(Holder::LeftNeighbour, Holder::RightNeighbour);
            let part = Part { from, to, first: position(from), last: position(to), supports: Vec::new(), hold };
            from = to;
            part
        })
        .collect()
}

fn supports(member: &Member, frame: &Frame, cuts: &[Place], parts: &mut [Part]) -> Vec<Held> {
    let each = member.supports.iter().zip(&frame.supports).enumerate();
    each.map(|(index, (support, (at, deflection, rotation)))| {
        let part = parts.partition_point(|part| part.to < *at);
        if let Some(part) = parts.get_mut(part) {
            part.supports.push(index);
        }
        Held {
            at: *at,
            part,
            cut: cuts.partition_point(|cut| cut < at),
            deflection: *deflection,
            rotation: *rotation,
            give: give(&support.vertical, |k| k.si()),
            turn_give: give(&support.rotation, |k| k.si()),
        }
    })
    .collect()
}

fn give<K: Copy>(hold: &member::Hold<K>, si: impl Fn(K) -> f64) -> f64 {
    match hold {
        member::Hold::Spring(stiffness) => 1.0 / si(stiffness.value),
        _ => 0.0,
    }
}

/// Gives every part the two movements that hold it, and the order in which equilibrium can be solved part by part.
///
/// A determinate stable chain of n parts has n + 1 restraints, and counting from the left, restraints less parts is 0 or 1
/// behind every part: at 1 the next part leans on this one, at 0 this part leans on the next.
fn assign_holds(parts: &mut [Part], supports: &[Held]) -> Option<Vec<usize>> {
    let count = parts.len();
    let mut restraints = 0;
    let mut leans_left = false;
    for (index, part) in parts.iter_mut().enumerate() {
        let mut deflections: Vec<Holder> = if leans_left { vec![Holder::LeftNeighbour] } else { Vec::new() };
        let mut turn = None;
        for support in &part.supports {
            let held = supports.get(*support)?;
            restraints += usize::from(held.deflection) + usize::from(held.rotation);
            if held.deflection {
                deflections.push(Holder::Support(*support));
            }
            if held.rotation {
                turn = Some(*support);
            }
        }
        let last = index + 1 == count;
        if !last && restraints == index + 1 {
            deflections.push(Holder::RightNeighbour);
        }
        leans_left = restraints == index + 2;
        part.hold = match (deflections.as_slice(), turn) {
            ([first, second], None) => Hold::Deflections(*first, *second),
            ([only], Some(support)) => Hold::DeflectionAndTurn(*only, support),
            _ => return None,
        };
    }
    Some(solving_order(parts))
}

/// A part that leans on a neighbour is solved before it.
fn solving_order(parts: &[Part]) -> Vec<usize> {
    let leans_left = |index: usize| {
        parts.get(index).is_some_and(|part| match part.hold {
            Hold::Deflections(first, _) | Hold::DeflectionAndTurn(first, _) => first == Holder::LeftNeighbour,
        })
    };
    let mut order = Vec::with_capacity(parts.len());
    let mut waiting = Vec::new();
    for index in 0..parts.len() {
        waiting.push(index);
        if !leans_left(index + 1) {
            order.extend(waiting.drain(..).rev());
        }
    }
    order
}
