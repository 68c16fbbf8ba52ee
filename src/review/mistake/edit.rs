//! Changing what was typed together with what it means.

use std::collections::BTreeMap;

use crate::analysis::stability;
use crate::member::{LoadKind, Member, Place, Section, Segment};
use crate::quantity::{Decimal, Given, Length, Physical, Term, Typed, Unit};

/// Where the places of a member went.
#[derive(Clone, Copy, Debug, PartialEq, Default)]
pub enum Moves {
    /// Nowhere.
    #[default]
    Nothing,
    /// Every place times a factor.
    Times(Decimal),
    /// One place to another, all others kept.
    One {
        /// From here.
        from: Place,
        /// To there.
        to: Place,
    },
    /// A stretch became longer or shorter; what lies behind it moved along.
    Stretched {
        /// Left end of the stretch.
        from: Place,
        /// Its right end before.
        to: Place,
        /// Its right end after.
        end: Place,
        /// Whether places inside keep their share of the length rather than their distance from the left end.
        share: bool,
    },
}

impl Moves {
    /// Where a place went.
    pub fn place(&self, place: Place) -> Place {
        let moved = match *self {
            Self::Nothing => None,
            Self::Times(factor) => place.exact().times(factor),
            Self::One { from, to } => return if place == from { to } else { place },
            Self::Stretched { from, .. } if place <= from => None,
            Self::Stretched { to, end, .. } if place >= to => {
                place.exact().minus(to.exact()).and_then(|beyond| beyond.plus(end.exact()))
            }
            Self::Stretched { share: false, .. } => None,
            Self::Stretched { from, to, end, .. } => {
                let ratio = place.beyond(from) / to.beyond(from) * end.beyond(from);
                Decimal::nearest(ratio, 12).plus(from.exact())
            }
        };
        moved.map_or(place, |exact| Place::metres(exact.trimmed()))
    }
}

/// A quantity times an exact factor.
pub fn times<T: Physical>(given: &Given<T>, factor: Decimal) -> Option<Given<T>> {
    let scale = |term: &Term| {
        let figure = term.figure.times(factor)?;
        let long = figure.mantissa().unsigned_abs() > 1_000_000_000_000_000_000;
        let figure = if long { Decimal::nearest(figure.to_f64(), 15) } else { figure };
        Some(Term { figure, unit: term.unit.clone() })
    };
    read(given.typed.terms.iter().map(scale).collect::<Option<_>>()?)
}

/// A quantity of a value in SI, written with twelve figures in a unit.
pub fn of_si<T: Physical>(si: f64, unit: &Unit) -> Option<Given<T>> {
    let figure = Decimal::nearest(si / unit.si()?, 12).trimmed();
    read(vec![Term { figure: plain(figure), unit: unit.clone() }])
}

/// A quantity out of its terms.
pub fn read<T: Physical>(terms: Vec<Term>) -> Option<Given<T>> {
    let si = terms.iter().try_fold(0.0, |sum, term| Some(sum + term.figure.to_f64() * term.unit.si()?))?;
    Some(Given { value: T::from_si(si)?, typed: Typed { terms } })
}

/// Without an exponent above zero, so that it prints as it would be typed.
fn plain(figure: Decimal) -> Decimal {
    if figure.exponent() > 0 { figure.with_exponent(0).unwrap_or(figure) } else { figure }
}

/// The unit of the first term.
pub fn unit<T>(given: &Given<T>) -> Unit {
    given.typed.terms.first().map_or_else(Unit::none, |term| term.unit.clone())
}

/// A length plus a factor times another, written in the units of both.
pub fn lengthened(length: &Given<Length>, factor: Decimal, other: &Given<Length>) -> Option<Given<Length>> {
    let mut terms = length.typed.terms.clone();
    for term in &other.typed.terms {
        let figure = term.figure.times(factor)?;
        match terms.iter_mut().find(|known| known.unit == term.unit) {
            Some(known) => known.figure = known.figure.plus(figure)?.trimmed(),
            None => terms.push(Term { figure: figure.trimmed(), unit: term.unit.clone() }),
        }
    }
    for term in &mut terms {
        term.figure = plain(term.figure);
    }
    terms.retain(|term| !term.figure.is_zero());
    read(terms).filter(|length: &Given<Length>| length.value.si() > 0.0)
}

/// A length as exact metres.
pub fn metres(length: &Given<Length>) -> Option<Decimal> {
    length.typed.terms.iter().try_fold(Decimal::ZERO, |sum, term| sum.plus(term.figure.times(term.unit.size()?.0)?))
}

/// Ends of segments from their lengths.
pub fn rechained(mut member: Member) -> Option<Member> {
    let mut from = Place::ZERO;
    for segment in &mut member.segments {
        let to = Place::metres(from.exact().plus(metres(&segment.length)?)?.trimmed());
        (segment.from, segment.to) = (from, to);
        from = to;
    }
    Some(member)
}

/// Moves every place of the member but the ends of its segments.
pub fn moved(mut member: Member, moves: &Moves) -> Member {
    let go = |place: &mut Place| *place = moves.place(*place);
    member.supports.iter_mut().for_each(|support| go(&mut support.at));
    member.hinges.iter_mut().for_each(|hinge| go(&mut hinge.at));
    member.stations.iter_mut().for_each(go);
    for span in &mut member.spans {
        go(&mut span.from);
        go(&mut span.to);
    }
    for load in member.cases.iter_mut().flat_map(|case| &mut case.loads) {
        move_load(&mut load.kind, moves);
    }
    member.typed_places = BTreeMap::new();
    member
}

/// Moves the places of a load.
pub fn move_load(kind: &mut LoadKind, moves: &Moves) {
    match kind {
        LoadKind::Uniform { over, .. }
        | LoadKind::Linear { over, .. }
        | LoadKind::Area { over, .. }
        | LoadKind::Gradient { over, .. } => {
            over.from = moves.place(over.from);
            over.to = moves.place(over.to);
        }
        LoadKind::Point { at, .. } | LoadKind::Couple { at, .. } => *at = moves.place(*at),
        LoadKind::SelfWeight | LoadKind::Settlement { .. } | LoadKind::Rotation { .. } => {}
    }
}

/// Whether a taper changes nothing but what a taper may change: I, weight, depth and shear area.
fn even(member: &Member, segment: &Segment) -> bool {
    let Some(taper) = segment.taper else { return true };
    let ends = member.sections.get(segment.section).zip(member.sections.get(taper.to));
    ends.is_some_and(|(left, right)| {
        let expansion = |section: &Section| section.expansion.as_ref().map(|given| given.value);
        left.modulus.value == right.modulus.value
            && expansion(left) == expansion(right)
            && left.shear.is_some() == right.shear.is_some()
            && left.weight.is_some() == right.weight.is_some()
    })
}

/// The member where it is stable and lawful; its choice of redundants is given up where it no longer serves.
pub fn sound(mut member: Member) -> Option<Member> {
    let end = member.end();
    let inside = |place: Place| place >= Place::ZERO && place <= end;
    let lawful = member.supports.iter().all(|support| inside(support.at))
        && member.supports.iter().zip(member.supports.iter().skip(1)).all(|(left, right)| left.at < right.at)
        && member.hinges.iter().all(|hinge| hinge.at > Place::ZERO && hinge.at < end)
        && member.segments.iter().all(|segment| segment.from < segment.to)
        && member.cases.iter().flat_map(|case| &case.loads).all(|load| match &load.kind {
            LoadKind::Uniform { over, .. }
            | LoadKind::Linear { over, .. }
            | LoadKind::Area { over, .. }
            | LoadKind::Gradient { over, .. } => over.from < over.to && inside(over.from) && inside(over.to),
            LoadKind::Point { at, .. } | LoadKind::Couple { at, .. } => inside(*at),
            LoadKind::SelfWeight | LoadKind::Settlement { .. } | LoadKind::Rotation { .. } => true,
        });
    if !lawful
        || !member.segments.iter().all(|segment| even(&member, segment))
        || stability::mechanism(&member).is_some()
    {
        return None;
    }
    if member.redundants.as_ref().is_some_and(|chosen| stability::check_choice(&member, chosen).is_err()) {
        member.redundants = None;
    }
    Some(member)
}
