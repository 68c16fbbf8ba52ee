//! Wrong supports, springs and hinges.

use super::Mistake;
use super::edit;
use crate::analysis::stiffness::rigidity;
use crate::member::{Hinge, Hold, LoadKind, Member, Place, Segment, Support, SupportKind};
use crate::quantity::Decimal;

pub(super) fn mistakes(member: &Member) -> Vec<Mistake> {
    let mut list = Vec::new();
    for (index, support) in member.supports.iter().enumerate() {
        restraints(member, index, support, &mut list);
        springs(index, support, &mut list);
    }
    hinges(member, &mut list);
    continuity(member, &mut list);
    list
}

/// The deck's word for what a support holds.
fn word(support: &Support) -> SupportKind {
    match (&support.vertical, &support.rotation) {
        (Hold::Rigid, Hold::Rigid) => SupportKind::Fixed,
        (Hold::Rigid, Hold::Free) => SupportKind::Pinned,
        (Hold::Free, Hold::Rigid) => SupportKind::Guided,
        _ => SupportKind::Elastic,
    }
}

/// The member with one support changed; movements imposed on what is no longer held go.
fn with(member: &Member, index: usize, change: impl Fn(&mut Support)) -> Option<Member> {
    let mut changed = member.clone();
    let support = changed.supports.get_mut(index)?;
    change(support);
    support.kind = word(support);
    let (deflection, rotation) = (support.holds_deflection(), support.holds_rotation());
    for case in &mut changed.cases {
        case.loads.retain(|load| match load.kind {
            LoadKind::Settlement { support, .. } => support != index || deflection,
            LoadKind::Rotation { support, .. } => support != index || rotation,
            _ => true,
        });
    }
    edit::sound(changed)
}

fn restraints(member: &Member, index: usize, support: &Support, list: &mut Vec<Mistake>) {
    let place = format!("support {}", support.name);
    if support.holds_rotation() && support.holds_deflection() {
        let words = format!("support {} taken as a pin", support.name);
        list.push(Mistake::structure("fixed-end-as-pin", &place, words, move |member| {
            with(member, index, |support| support.rotation = Hold::Free)
        }));
    }
    if support.holds_deflection() {
        let words = format!("leaving out support {}", support.name);
        list.push(Mistake::structure("support-ignored", &place, words, move |member| {
            with(member, index, |support| (support.vertical, support.rotation) = (Hold::Free, Hold::Free))
        }));
    }
    let at_end = support.at == Place::ZERO || support.at == member.end();
    if at_end && support.holds_deflection() && !support.holds_rotation() {
        let words = format!("support {} taken as a fixed end", support.name);
        list.push(Mistake::structure("pin-as-fixed-end", &place, words, move |member| {
            with(member, index, |support| support.rotation = Hold::Rigid)
        }));
    }
}

fn springs(index: usize, support: &Support, list: &mut Vec<Mistake>) {
    let place = format!("support {}", support.name);
    let vertical = matches!(support.vertical, Hold::Spring(_));
    let rotation = matches!(support.rotation, Hold::Spring(_));
    if !vertical && !rotation {
        return;
    }
    let words = format!("the spring of support {} taken as rigid", support.name);
    list.push(Mistake::structure("elastic-support-as-rigid", &place, words, move |member| {
        with(member, index, |support| {
            if vertical {
                support.vertical = Hold::Rigid;
            }
            if rotation {
                support.rotation = Hold::Rigid;
            }
        })
    }));
    if vertical && rotation {
        let words = format!("the vertical spring of support {} taken as rigid", support.name);
        list.push(Mistake::structure("elastic-support-as-rigid", format!("{place}, vertical"), words, move |member| {
            with(member, index, |support| support.vertical = Hold::Rigid)
        }));
        let words = format!("the rotational spring of support {} taken as rigid", support.name);
        list.push(Mistake::structure("elastic-support-as-rigid", format!("{place}, rotation"), words, move |member| {
            with(member, index, |support| support.rotation = Hold::Rigid)
        }));
    }
    if rotation {
        let words = format!("leaving out the rotational spring of support {}", support.name);
        list.push(Mistake::structure("spring-ignored", &place, words, move |member| {
            with(member, index, |support| support.rotation = Hold::Free)
        }));
    }
    for power in [3, -3] {
        let words = format!("the spring of support {} wrong by a thousand (10^{power} times)", support.name);
        list.push(Mistake::structure("spring-unit-slip", format!("{place}, 10^{power}"), words, move |member| {
            let factor = Decimal::new(1, power);
            let own = member.supports.get(index)?;
            let vertical = match &own.vertical {
                Hold::Spring(given) => Hold::Spring(edit::times(given, factor)?),
                other => other.clone(),
            };
            let rotation = match &own.rotation {
                Hold::Spring(given) => Hold::Spring(edit::times(given, factor)?),
                other => other.clone(),
            };
            with(member, index, |support| {
                (support.vertical, support.rotation) = (vertical.clone(), rotation.clone());
            })
        }));
    }
}

fn hinges(member: &Member, list: &mut Vec<Mistake>) {
    for (index, hinge) in member.hinges.iter().enumerate() {
        let words = format!("leaving out hinge {}", hinge.name);
        list.push(Mistake::structure("hinge-ignored", format!("hinge {}", hinge.name), words, move |member| {
            let mut changed = member.clone();
            if index >= changed.hinges.len() {
                return None;
            }
            changed.hinges.remove(index);
            edit::sound(changed)
        }));
    }
    let pairs = member.segments.iter().zip(member.segments.iter().skip(1)).enumerate();
    for (index, _) in pairs.filter(|(_, (left, right))| step(member, left, right)) {
        let place = format!("segment {} / segment {}", index + 1, index + 2);
        let words = format!("a hinge assumed between segments {} and {}", index + 1, index + 2);
        list.push(Mistake::structure("hinge-assumed-at-step", place, words, move |member| {
            let at = member.segments.get(index)?.to;
            let rests = member.supports.iter().any(|support| support.at == at);
            let couple = member.cases.iter().flat_map(|case| &case.loads).any(|load| match load.kind {
                LoadKind::Couple { at: place, .. } => place == at,
                _ => false,
            });
            if rests || couple { None } else { with_hinges(member, &[at]) }
        }));
    }
}

/// Whether the section changes between two neighbouring segments.
pub(super) fn step(member: &Member, left: &Segment, right: &Segment) -> bool {
    let ends = left.taper.map_or(left.section, |taper| taper.to);
    let of = |section: usize| member.sections.get(section).map(rigidity);
    of(ends) != of(right.section)
}

fn with_hinges(member: &Member, places: &[Place]) -> Option<Member> {
    let mut changed = member.clone();
    for at in places {
        if changed.hinges.iter().any(|hinge| hinge.at == *at) {
            continue;
        }
        let number = changed.hinges.len() + 1;
        let free = |name: &String| {
            !changed.hinges.iter().any(|hinge| hinge.name == *name)
                && !changed.supports.iter().any(|support| support.name == *name)
        };
        let name = (0..4).map(|round| format!("h{}", number + 10 * round)).find(free)?;
        changed.hinges.push(Hinge { name, at: *at });
    }
    changed.hinges.sort_by_key(|hinge| hinge.at);
    edit::sound(changed)
}

fn continuity(member: &Member, list: &mut Vec<Mistake>) {
    let place = "every span";
    let words = "each span taken as simply supported";
    list.push(Mistake::structure("continuity-ignored", place, words, simple_spans));
    list.push(Mistake::structure(
        "continuity-ignored",
        "inner supports",
        "the member taken as broken over its inner supports, its ends as they are",
        |member| {
            let places = inner(member);
            if places.is_empty() { None } else { with_hinges(member, &places) }
        },
    ));
    let places = inner(member);
    if places.len() > 1 {
        for at in places {
            let Some(support) = member.supports.iter().find(|support| support.at == at) else { continue };
            let words = format!("the member taken as broken over support {}", support.name);
            list.push(Mistake::structure(
                "continuity-ignored",
                format!("support {}", support.name),
                words,
                move |member| with_hinges(member, &[at]),
            ));
        }
    }
}

/// Supports that hold deflection with a span on either side that is no cantilever: where continuity can be broken.
fn inner(member: &Member) -> Vec<Place> {
    let between = |span: &&crate::member::Span| !span.is_cantilever();
    let spans: Vec<_> = member.spans.iter().filter(between).collect();
    let meet = spans.iter().zip(spans.iter().skip(1)).filter(|(left, right)| left.to == right.from);
    let free = |at: &Place| !member.supports.iter().any(|support| support.at == *at && support.holds_rotation());
    meet.map(|(left, _)| left.to).filter(free).collect()
}

/// Every span between supports simply supported: no support holds rotation unless a cantilever needs it, hinges of the deck
/// are gone, and the member is broken over its inner supports.
pub(super) fn simple_spans(member: &Member) -> Option<Member> {
    let mut changed = member.clone();
    let mut any = false;
    for index in 0..changed.supports.len() {
        let support = changed.supports.get(index)?;
        if support.holds_rotation() && support.holds_deflection() {
            any = true;
            changed = with(&changed, index, |support| support.rotation = Hold::Free)?;
        }
    }
    any |= !changed.hinges.is_empty();
    changed.hinges.clear();
    let places = inner(&changed);
    if places.is_empty() {
        return if any { edit::sound(changed) } else { None };
    }
    with_hinges(&changed, &places)
}
