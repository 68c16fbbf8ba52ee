//! Wrong stiffness: another section's, an average, exchanged, the weak axis, another modulus, another unit.

use super::edit;
use super::{Mistake, Rewrite};
use crate::analysis::stiffness::rigidity;
use crate::member::{Member, Section};
use crate::quantity::{Atom, Decimal, Stress, Unit};

pub(super) fn mistakes(member: &Member) -> Vec<Mistake> {
    let mut list = Vec::new();
    one_stiffness(member, &mut list);
    averaged(member, &mut list);
    swapped(member, &mut list);
    scaled(member, &mut list);
    list
}

/// Indices of sections that segments use, without repetition.
pub(super) fn used(member: &Member) -> Vec<usize> {
    let all = member.segments.iter().flat_map(|segment| [Some(segment.section), segment.taper.map(|taper| taper.to)]);
    let mut list: Vec<usize> = all.flatten().collect();
    list.sort_unstable();
    list.dedup();
    list
}

fn name(member: &Member, section: usize) -> String {
    member.sections.get(section).map_or_else(String::new, |section| section.name.clone())
}

fn differ(member: &Member, a: usize, b: usize) -> bool {
    let of = |section: usize| member.sections.get(section).map(rigidity);
    of(a) != of(b)
}

/// A section with the stiffness of another: E, I and what shear needs; weight, depth and expansion stay its own.
fn stiffened(own: &Section, other: &Section) -> Section {
    Section {
        modulus: other.modulus.clone(),
        second_moment: other.second_moment.clone(),
        shear: other.shear.clone(),
        ..own.clone()
    }
}

fn one_stiffness(member: &Member, list: &mut Vec<Mistake>) {
    let sections = used(member);
    for section in &sections {
        if !sections.iter().any(|other| differ(member, *section, *other)) {
            continue;
        }
        let (section, called) = (*section, name(member, *section));
        let kind = format!("one-stiffness-of-{called}");
        let words = format!("one stiffness, that of section {called}, along the whole member");
        list.push(Mistake::structure(&kind, format!("section {called}"), words, move |member| {
            let mut changed = member.clone();
            let other = member.sections.get(section)?;
            for own in &mut changed.sections {
                *own = stiffened(own, other);
            }
            edit::sound(changed)
        }));
        if heavy(member) {
            let words = format!("section {called} along the whole member, its weight included");
            list.push(Mistake::structure(&kind, format!("section {called}, with its weight"), words, move |member| {
                let mut changed = member.clone();
                for segment in &mut changed.segments {
                    segment.section = section;
                    segment.taper = None;
                }
                edit::sound(changed)
            }));
        }
    }
}

/// Whether a section's own weight, depth or expansion counts anywhere, so that exchanging whole sections differs from
/// exchanging their stiffness.
fn heavy(member: &Member) -> bool {
    use crate::member::LoadKind;
    let loads = || member.cases.iter().flat_map(|case| &case.loads);
    loads().any(|load| matches!(load.kind, LoadKind::SelfWeight | LoadKind::Gradient { .. }))
}

fn averaged(member: &Member, list: &mut Vec<Mistake>) {
    let sections = used(member);
    let of = |section: usize| member.sections.get(section).map_or(0.0, rigidity);
    let count = sections.len() as f64;
    let plain: f64 = sections.iter().map(|section| of(*section)).sum::<f64>() / count;
    let mean = |segment: &crate::member::Segment| {
        let far = segment.taper.map_or(segment.section, |taper| taper.to);
        (of(segment.section) + of(far)) / 2.0
    };
    let lengths: f64 = member.segments.iter().map(|segment| segment.length.value.si()).sum();
    let weighted =
        member.segments.iter().map(|segment| mean(segment) * segment.length.value.si()).sum::<f64>() / lengths;
    let by_segment = member.segments.iter().map(mean).sum::<f64>() / member.segments.len() as f64;
    if !sections.iter().any(|section| differ(member, *section, sections.first().copied().unwrap_or_default())) {
        return;
    }
    let ways = [
        (plain, "plain mean of the sections"),
        (weighted, "mean weighted by length"),
        (by_segment, "plain mean of the segments"),
    ];
    let mut done: Vec<f64> = Vec::new();
    for (ei, how) in ways {
        if done.iter().any(|known| (known / ei - 1.0).abs() < 1e-9) {
            continue;
        }
        done.push(ei);
        let words = format!("one averaged stiffness along the whole member ({how})");
        list.push(Mistake::structure("stiffness-averaged", format!("whole member, {how}"), words, move |member| {
            let mut changed = member.clone();
            for section in &mut changed.sections {
                let unit = edit::unit(&section.second_moment);
                section.second_moment = edit::of_si(ei / section.modulus.value.si(), &unit)?;
            }
            edit::sound(changed)
        }));
    }
}

fn swapped(member: &Member, list: &mut Vec<Mistake>) {
    let sections = used(member);
    let heavy = heavy(member);
    let mut push = |place: String, words: String, rewrite: Rewrite| {
        let structure = super::Structure { rewrite, moves: edit::Moves::Nothing };
        list.push(Mistake::new("stiffnesses-swapped", place, words, super::Change::Structure(structure)));
    };
    for (index, a) in sections.iter().enumerate() {
        for b in sections.iter().skip(index + 1).filter(|b| differ(member, *a, **b)) {
            let (a, b) = (*a, *b);
            // Where either has but one segment, the segments are named.
            let (place, words) = match (only(member, a), only(member, b)) {
                (Some(i), Some(j)) => {
                    let (i, j) = (i.min(j) + 1, i.max(j) + 1);
                    let place = format!("segment {i} / segment {j}");
                    (place, format!("exchanging the stiffnesses of segments {i} and {j}"))
                }
                _ => {
                    let (a, b) = (name(member, a), name(member, b));
                    (
                        format!("section {a} / section {b}"),
                        format!("exchanging the stiffnesses of sections {a} and {b}"),
                    )
                }
            };
            push(place.clone(), words.clone(), Box::new(move |member| exchanged_sections(member, a, b, false)));
            if heavy {
                let place = format!("{place}, with their weights");
                push(
                    place,
                    format!("{words}, their weights included"),
                    Box::new(move |member| exchanged_sections(member, a, b, true)),
                );
            }
        }
    }
    // On a member of very many segments only neighbours are exchanged.
    let far = if member.segments.len() > 12 { 2 } else { member.segments.len() };
    for (i, left) in member.segments.iter().enumerate() {
        for (j, right) in member.segments.iter().enumerate().skip(i + 1).take(far) {
            let plain = left.taper.is_none() && right.taper.is_none();
            // Two segments are exchanged as segments only where that differs from exchanging their sections.
            if !plain || !differ(member, left.section, right.section) || both_everywhere(member, i, j) {
                continue;
            }
            let place = format!("segment {} / segment {}", i + 1, j + 1);
            let words = format!("exchanging the stiffnesses of segments {} and {}", i + 1, j + 1);
            push(place.clone(), words.clone(), Box::new(move |member| exchanged_segments(member, i, j, false)));
            if heavy {
                let place = format!("{place}, with their weights");
                push(
                    place,
                    format!("{words}, their weights included"),
                    Box::new(move |member| exchanged_segments(member, i, j, true)),
                );
            }
        }
    }
}

/// The only segment of a section, untapered.
fn only(member: &Member, section: usize) -> Option<usize> {
    let uses = |segment: &crate::member::Segment| {
        segment.section == section || segment.taper.is_some_and(|taper| taper.to == section)
    };
    let mut all = member.segments.iter().enumerate().filter(|(_, segment)| uses(segment));
    let (index, segment) = all.next()?;
    (segment.taper.is_none() && all.next().is_none()).then_some(index)
}

/// Whether the two segments are the only ones of their sections.
fn both_everywhere(member: &Member, i: usize, j: usize) -> bool {
    let of = |index: usize| member.segments.get(index).map(|segment| segment.section);
    let uses = |segment: &crate::member::Segment, section: Option<usize>| {
        Some(segment.section) == section || segment.taper.map(|taper| taper.to) == section
    };
    let mut others = member.segments.iter().enumerate().filter(|(index, _)| *index != i && *index != j);
    !others.any(|(_, segment)| uses(segment, of(i)) || uses(segment, of(j)))
}

fn exchanged_sections(member: &Member, a: usize, b: usize, whole: bool) -> Option<Member> {
    let mut changed = member.clone();
    let (left, right) = (member.sections.get(a)?.clone(), member.sections.get(b)?.clone());
    if whole {
        let other = |section: usize| match section {
            _ if section == a => b,
            _ if section == b => a,
            _ => section,
        };
        for segment in &mut changed.segments {
            segment.section = other(segment.section);
            if let Some(taper) = &mut segment.taper {
                taper.to = other(taper.to);
            }
        }
    } else {
        *changed.sections.get_mut(a)? = stiffened(&left, &right);
        *changed.sections.get_mut(b)? = stiffened(&right, &left);
    }
    edit::sound(changed)
}

fn exchanged_segments(member: &Member, i: usize, j: usize, whole: bool) -> Option<Member> {
    let mut changed = member.clone();
    let (a, b) = (member.segments.get(i)?.section, member.segments.get(j)?.section);
    let (mut left, mut right) = (b, a);
    if !whole {
        let (own, other) = (member.sections.get(a)?, member.sections.get(b)?);
        let named = |base: &Section, like: &Section| Section {
            name: format!("{}_as_{}", base.name, like.name),
            ..stiffened(base, like)
        };
        left = changed.sections.len();
        right = left + 1;
        changed.sections.push(named(own, other));
        changed.sections.push(named(other, own));
    }
    changed.segments.get_mut(i)?.section = left;
    changed.segments.get_mut(j)?.section = right;
    edit::sound(changed)
}

/// Second moments of one section or of all divided by a ratio.
pub(super) fn divided(member: &Member, section: Option<usize>, ratio: f64) -> Option<Member> {
    let mut changed = member.clone();
    for (index, own) in changed.sections.iter_mut().enumerate() {
        if section.is_none_or(|wanted| wanted == index) {
            let unit = edit::unit(&own.second_moment);
            own.second_moment = edit::of_si(own.second_moment.value.si() / ratio, &unit)?;
        }
    }
    edit::sound(changed)
}

/// Ratio of the second moments about both axes of a rolled I-section: IPE 300 by EN 10365 dimensions, 8356.1 / 603.8 and the
/// same rounded as published.
const WEAK: [f64; 2] = [13.84, 13.8];
/// One in⁴ in cm⁴ (1 in = 2.54 cm by definition).
const INCH: f64 = 41.623_142_56;

fn scaled(member: &Member, list: &mut Vec<Mistake>) {
    let sections = used(member);
    let one_by_one = sections.iter().map(|section| (Some(*section), format!("section {}", name(member, *section))));
    let mut targets: Vec<(Option<usize>, String)> = one_by_one.collect();
    if sections.len() > 1 {
        targets.push((None, "every section".to_owned()));
    }
    for (section, called) in targets {
        for ratio in WEAK {
            let words = format!("taking {called} about its weak axis (I divided by {ratio})");
            list.push(Mistake::structure("section-weak-axis", &called, words, move |member| {
                divided(member, section, ratio)
            }));
        }
        for (ratio, how) in [(INCH, "the figure in in^4 as cm^4"), (1.0 / INCH, "the figure in cm^4 as in^4")] {
            let words = format!("reading the second moment of {called} in another unit: {how}");
            list.push(Mistake::structure("inch-stiffness-as-centimetre", &called, words, move |member| {
                divided(member, section, ratio)
            }));
        }
        for gpa in [200_i128, 210] {
            let modulus = 1e9 * gpa as f64;
            let other = |index: &usize| {
                let own = member.sections.get(*index).map_or(0.0, |section| section.modulus.value.si());
                // Within a hair, 29,000 ksi is 200 GPa.
                (190e9..=215e9).contains(&own) && (own / modulus - 1.0).abs() > 0.01
            };
            let affected = sections.iter().filter(|index| section.is_none_or(|wanted| wanted == **index));
            if !affected.clone().any(other) {
                continue;
            }
            let words = format!("taking E of {called} as {gpa} GPa");
            list.push(Mistake::structure("modulus-of-another-steel", &called, words, move |member| {
                let mut changed = member.clone();
                for (index, own) in changed.sections.iter_mut().enumerate() {
                    if section.is_none_or(|wanted| wanted == index) && own.modulus.value.si() >= 190e9 {
                        own.modulus = gigapascals(gpa)?;
                    }
                }
                edit::sound(changed)
            }));
        }
    }
}

fn gigapascals(gpa: i128) -> Option<crate::quantity::Given<Stress>> {
    let atom: Atom = Unit::known("GPa")?;
    let unit = Unit::of([(atom, 1)]);
    edit::read(vec![crate::quantity::Term { figure: Decimal::new(gpa, 0), unit }])
}
