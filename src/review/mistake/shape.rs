//! Wrong shape along the member: the law of a taper, a mean depth, a limit's reference length.

use super::Mistake;
use super::edit;
use crate::member::{Factor, Member, TaperLaw, Weight};
use crate::quantity::{Decimal, Physical};

pub(super) fn mistakes(member: &Member) -> Vec<Mistake> {
    let mut list = Vec::new();
    for (index, segment) in member.segments.iter().enumerate() {
        let Some(taper) = segment.taper else { continue };
        let place = format!("segment {}", index + 1);
        let (name, law, words) = match taper.law {
            TaperLaw::Cubic => {
                ("taper-inertia-interpolated", TaperLaw::Linear, "taking I of the taper as linear, not its depth")
            }
            TaperLaw::Linear => {
                ("taper-depth-interpolated", TaperLaw::Cubic, "taking the depth of the taper as linear, not its I")
            }
        };
        let words_of = |words: &str| format!("{words} ({place})");
        list.push(Mistake::structure(name, &place, words_of(words), move |member| {
            let mut changed = member.clone();
            changed.segments.get_mut(index)?.taper.as_mut()?.law = law;
            edit::sound(changed)
        }));
        let words = words_of("one section of the mean depth instead of the taper");
        list.push(Mistake::structure("mean-depth-for-taper", &place, words, move |member| mean_depth(member, index)));
    }
    for (index, limit) in member.limits.iter().enumerate() {
        let Some(factor) = limit.cantilever_length_factor else { continue };
        let (other, words) = if factor.value == 1.0 {
            (2, "a cantilever's limit taken from twice its length")
        } else {
            (1, "a cantilever's limit taken from its single length")
        };
        if factor.value == f64::from(other) || limit.ratio.is_none() {
            continue;
        }
        let place = format!("limit {}", limit.name);
        list.push(Mistake::structure("cantilever-length-not-doubled", place, words, move |member| {
            let mut changed = member.clone();
            let figure = Decimal::new(i128::from(other), 0);
            changed.limits.get_mut(index)?.cantilever_length_factor = Some(Factor { value: f64::from(other), figure });
            Some(changed)
        }));
    }
    list
}

/// A segment of one section whose depth is the mean of its ends': the cube root of I is the mean of both.
fn mean_depth(member: &Member, index: usize) -> Option<Member> {
    let mut changed = member.clone();
    let segment = changed.segments.get_mut(index)?;
    let taper = segment.taper.take()?;
    let (left, right) = (member.sections.get(segment.section)?, member.sections.get(taper.to)?);
    let root = |si: f64| libm::cbrt(si);
    let mean = (root(left.second_moment.value.si()) + root(right.second_moment.value.si())) / 2.0;
    let mut section = left.clone();
    section.name = format!("{}_mean", left.name);
    section.second_moment = edit::of_si(mean * mean * mean, &edit::unit(&left.second_moment))?;
    section.depth = halfway(left.depth.as_ref(), right.depth.as_ref(), |depth| depth.si());
    section.weight = match (&left.weight, &right.weight) {
        (Some(Weight::PerLength(a)), Some(Weight::PerLength(b))) => {
            halfway(Some(a), Some(b), |w| w.si()).map(Weight::PerLength)
        }
        (Some(Weight::MassPerLength(a)), Some(Weight::MassPerLength(b))) => {
            halfway(Some(a), Some(b), |m| m.si()).map(Weight::MassPerLength)
        }
        (Some(Weight::Mass(a, density)), Some(Weight::Mass(b, _))) => {
            halfway(Some(a), Some(b), |area| area.si()).map(|area| Weight::Mass(area, density.clone()))
        }
        (Some(Weight::Specific(a, weight)), Some(Weight::Specific(b, _))) => {
            halfway(Some(a), Some(b), |area| area.si()).map(|area| Weight::Specific(area, weight.clone()))
        }
        _ => left.weight.clone(),
    };
    section.shear = match (&left.shear, &right.shear) {
        (Some((g, a)), Some((_, b))) => halfway(Some(a), Some(b), |area| area.si()).map(|area| (g.clone(), area)),
        _ => None,
    };
    segment.section = changed.sections.len();
    changed.sections.push(section);
    edit::sound(changed)
}

fn halfway<T: Physical>(
    left: Option<&crate::quantity::Given<T>>,
    right: Option<&crate::quantity::Given<T>>,
    si: impl Fn(&T) -> f64,
) -> Option<crate::quantity::Given<T>> {
    let (left, right) = (left?, right?);
    edit::of_si((si(&left.value) + si(&right.value)) / 2.0, &edit::unit(left))
}
