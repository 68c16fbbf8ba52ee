//! Wrong lengths: a step in the wrong place, digits exchanged, feet for metres.

use super::edit::{self, Moves};
use super::supports::step;
use super::{Mistake, words};
use crate::member::{Member, Place};
use crate::quantity::{Decimal, Given, Length, Term};

pub(super) fn mistakes(member: &Member) -> Vec<Mistake> {
    let mut list = Vec::new();
    steps(member, &mut list);
    slips(member, &mut list);
    let feet = Decimal::new(328_084, -5);
    let metres = Decimal::new(3_048, -4);
    for (factor, name, words) in [
        (feet, "feet-read-as-metres", "lengths in feet read as metres (every length times 3.28084)"),
        (metres, "metres-read-as-feet", "lengths in metres read as feet (every length times 0.3048)"),
    ] {
        let moves = Moves::Times(factor);
        let mistake = Mistake::structure(name, "every length", words, move |member| {
            let mut changed = member.clone();
            for segment in &mut changed.segments {
                segment.length = edit::times(&segment.length, factor)?;
            }
            edit::sound(edit::moved(edit::rechained(changed)?, &moves))
        });
        list.push(mistake.moving(moves));
    }
    list
}

/// Each change of section a tenth of a neighbouring segment to either side; what acts or is asked at the step moves along,
/// or stays.
fn steps(member: &Member, list: &mut Vec<Mistake>) {
    let pairs = member.segments.iter().zip(member.segments.iter().skip(1)).enumerate();
    for (index, (left, right)) in pairs.filter(|(_, (left, right))| step(member, left, right)) {
        let at = left.to;
        let held = member.supports.iter().any(|support| support.at == at);
        let acted = member.cases.iter().flat_map(|case| &case.loads).any(|load| {
            let mut moved = load.kind.clone();
            edit::move_load(&mut moved, &Moves::One { from: at, to: Place::ZERO });
            moved != load.kind
        });
        let asked = member.stations.contains(&at);
        let mut done: Vec<Place> = Vec::new();
        for (tenth, sign) in [(&left.length, -1), (&right.length, 1), (&right.length, -1), (&left.length, 1)] {
            let factor = Decimal::new(sign, -1);
            let to = edit::metres(tenth)
                .and_then(|length| at.exact().plus(length.times(factor)?))
                .map(|exact| Place::metres(exact.trimmed()));
            let Some(to) = to.filter(|to| !done.contains(to) && *to > left.from && *to < right.to) else { continue };
            done.push(to);
            let place = format!("segment {} / segment {}", index + 1, index + 2);
            let from_to = format!("from {} to {} m", words::place(member, at), to.exact());
            let along = Moves::One { from: at, to };
            let tenth = tenth.clone();
            let variants: &[(Moves, Moves, &str)] = match (held, acted, asked) {
                (true, ..) | (false, false, false) => &[(Moves::Nothing, Moves::Nothing, "")],
                (false, true, _) => &[
                    (along, along, ", what acts there moved along"),
                    (along, Moves::Nothing, ", the loads there moved along"),
                    (Moves::Nothing, Moves::Nothing, ", what acts there kept in place"),
                ],
                (false, false, true) => &[
                    (Moves::Nothing, along, ", the figures there taken at the step"),
                    (Moves::Nothing, Moves::Nothing, ""),
                ],
            };
            for (loads, figures, how) in variants {
                let (loads, tenth) = (*loads, tenth.clone());
                let words = format!("the step between segments {} and {} moved {from_to}{how}", index + 1, index + 2);
                let mistake = Mistake::structure("step-misplaced", &place, words, move |member| {
                    moved_step(member, index, factor, &tenth, &loads)
                });
                list.push(mistake.moving(*figures));
            }
        }
    }
}

fn moved_step(member: &Member, index: usize, factor: Decimal, tenth: &Given<Length>, loads: &Moves) -> Option<Member> {
    let mut changed = member.clone();
    let back = Decimal::ZERO.minus(factor)?;
    let left = changed.segments.get_mut(index)?;
    left.length = edit::lengthened(&left.length, factor, tenth)?;
    let right = changed.segments.get_mut(index + 1)?;
    right.length = edit::lengthened(&right.length, back, tenth)?;
    for load in changed.cases.iter_mut().flat_map(|case| &mut case.loads) {
        edit::move_load(&mut load.kind, loads);
    }
    edit::sound(edit::rechained(changed)?)
}

/// Each segment's length with two neighbouring digits exchanged or a zero slipped in behind the point.
fn slips(member: &Member, list: &mut Vec<Mistake>) {
    for (index, segment) in member.segments.iter().enumerate() {
        for (position, term) in segment.length.typed.terms.iter().enumerate() {
            for figure in slipped(term.figure) {
                let mut terms = segment.length.typed.terms.clone();
                if let Some(slot) = terms.get_mut(position) {
                    *slot = Term { figure, unit: term.unit.clone() };
                }
                let Some(length) = edit::read::<Length>(terms).filter(|length| length.value.si() > 0.0) else {
                    continue;
                };
                let ratio = length.value.si() / segment.length.value.si();
                let end = edit::metres(&length).and_then(|exact| segment.from.exact().plus(exact));
                let Some(end) = end.filter(|_| (0.2..=5.0).contains(&ratio)) else { continue };
                let end = Place::metres(end.trimmed());
                let share = places(member).iter().any(|place| *place < segment.to && *place >= end);
                let moves = Moves::Stretched { from: segment.from, to: segment.to, end, share };
                let place = format!("segment {}", index + 1);
                let (was, is) = (words::typed(&segment.length), words::typed(&length));
                let words = format!("the length of segment {} read as {is} instead of {was}", index + 1);
                let mistake = Mistake::structure("length-digit-slip", place, words, move |member| {
                    let mut changed = member.clone();
                    changed.segments.get_mut(index)?.length = length.clone();
                    edit::sound(edit::moved(edit::rechained(changed)?, &moves))
                });
                list.push(mistake.moving(moves));
            }
        }
    }
}

/// Every place of the member that is not an end of a segment.
fn places(member: &Member) -> Vec<Place> {
    use crate::member::LoadKind;
    let loads = member.cases.iter().flat_map(|case| &case.loads).flat_map(|load| match &load.kind {
        LoadKind::Uniform { over, .. }
        | LoadKind::Linear { over, .. }
        | LoadKind::Area { over, .. }
        | LoadKind::Gradient { over, .. } => vec![over.from, over.to],
        LoadKind::Point { at, .. } | LoadKind::Couple { at, .. } => vec![*at],
        LoadKind::SelfWeight | LoadKind::Settlement { .. } | LoadKind::Rotation { .. } => Vec::new(),
    });
    let supports = member.supports.iter().map(|support| support.at);
    let hinges = member.hinges.iter().map(|hinge| hinge.at);
    supports.chain(hinges).chain(member.stations.iter().copied()).chain(loads).collect()
}

/// Figures that a slip of a digit makes of one.
fn slipped(figure: Decimal) -> Vec<Decimal> {
    let text = figure.to_string();
    let digits: Vec<char> = text.chars().filter(char::is_ascii_digit).collect();
    let point = text.find('.').unwrap_or(text.len());
    let mut found: Vec<Decimal> = Vec::new();
    let mut keep = |digits: Vec<char>, point: usize| {
        let (whole, fraction) = digits.split_at(point.min(digits.len()));
        let text: String = if fraction.is_empty() {
            whole.iter().collect()
        } else {
            whole.iter().chain(&['.']).chain(fraction).collect()
        };
        found.extend(Decimal::parse(&text).filter(|slip| *slip != figure && !slip.is_zero()));
    };
    for first in 0..digits.len().saturating_sub(1) {
        let mut exchanged = digits.clone();
        exchanged.swap(first, first + 1);
        if exchanged.first() != Some(&'0') || point == 1 {
            keep(exchanged, point);
        }
    }
    if point < text.len() {
        let mut padded = digits.clone();
        padded.insert(point, '0');
        keep(padded, point);
    }
    let mut kept: Vec<Decimal> = Vec::new();
    for slip in found {
        if !kept.contains(&slip) {
            kept.push(slip);
        }
    }
    kept
}

#[cfg(test)]
mod tests {
    use super::{Decimal, slipped};

    #[test]
    fn digits_slip_as_hands_slip() {
        let of = |text: &str| {
            let slips = Decimal::parse(text).map(slipped).unwrap_or_default();
            slips.iter().map(ToString::to_string).collect::<Vec<_>>().join(" ")
        };
        assert_eq!(of("1.5"), "5.1 1.05");
        assert_eq!(of("3.25"), "2.35 3.52 3.025");
        assert_eq!(of("14"), "41");
        assert_eq!(of("6"), "");
        assert_eq!(of("10"), "");
        assert_eq!(of("1.05"), "0.15 1.50 1.005");
    }
}
