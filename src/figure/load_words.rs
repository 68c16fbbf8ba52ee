//! Loads in words, for labels and alternative text.

use super::Words;
use super::label::{self, Measure};
use crate::member::{LoadKind, Member, Place, Stretch};

/// `settles 6 mm`, `turns 2 mrad clockwise` for everything that moves a support.
pub fn movements(member: &Member, kinds: &[&LoadKind], support: usize) -> Vec<String> {
    let system = member.title.system;
    let mut said = Vec::new();
    for kind in kinds {
        match kind {
            LoadKind::Settlement { support: moved, by } if *moved == support => {
                let figure = label::given(&by.typed, by.value.si(), Measure::Movement, system, true);
                let verb = if by.value.si() >= 0.0 { "settles" } else { "rises" };
                said.push(format!("{verb} {figure}"));
            }
            LoadKind::Rotation { support: moved, by } if *moved == support => {
                let figure = label::given(&by.typed, by.value.si(), Measure::Turn, system, true);
                said.push(format!("turns {figure} {}", clockwise(by.value.si())));
            }
            _ => {}
        }
    }
    said
}

fn clockwise(value: f64) -> &'static str {
    if value >= 0.0 { "clockwise" } else { "counter-clockwise" }
}

fn downward(value: f64) -> &'static str {
    if value >= 0.0 { "downward" } else { "upward" }
}

/// One load in words.
pub fn describe(member: &Member, kind: &LoadKind, said: &Words) -> String {
    let system = member.title.system;
    let figure = |typed: &crate::quantity::Typed, si, measure| label::given(typed, si, measure, system, true);
    let place = |place: Place| label::distance(Place::ZERO, place, system);
    let over = |over: &Stretch| format!("from {} to {}", place(over.from), place(over.to));
    let name = |support: &usize| member.supports.get(*support).map_or("", |support| support.name.as_str());
    match kind {
        LoadKind::SelfWeight => format!("self-weight {}", said.self_weight).trim_end().to_owned(),
        LoadKind::Uniform { w, over: part } => {
            let si = w.value.si();
            format!("uniform load {} {} {}", figure(&w.typed, si, Measure::Intensity), downward(si), over(part))
        }
        LoadKind::Linear { left, right, over: part } => {
            let end = |w: &crate::quantity::Given<crate::quantity::Intensity>| {
                let si = w.value.si();
                format!("{} {}", figure(&w.typed, si, Measure::Intensity), downward(si))
            };
            format!("linearly varying load {} to {} {}", end(left), end(right), over(part))
        }
        LoadKind::Area { q, width, over: part } => format!(
            "area load {} on a width of {} {} {}",
            figure(&q.typed, q.value.si(), Measure::AreaLoad),
            figure(&width.typed, width.value.si(), Measure::Length),
            downward(q.value.si()),
            over(part)
        ),
        LoadKind::Point { p, at } => {
            let si = p.value.si();
            format!("force {} {} at {}", figure(&p.typed, si, Measure::Force), downward(si), place(*at))
        }
        LoadKind::Couple { m, at } => {
            let si = m.value.si();
            format!("couple {} {} at {}", figure(&m.typed, si, Measure::Couple), clockwise(si), place(*at))
        }
        LoadKind::Settlement { support, .. } | LoadKind::Rotation { support, .. } => {
            format!("support {} {}", name(support), movements(member, &[kind], *support).join(" "))
        }
        LoadKind::Gradient { difference, over: part } => {
            let si = difference.value.si();
            let side = if si >= 0.0 { "top" } else { "bottom" };
            format!("{side} warmer by {} {}", figure(&difference.typed, si, Measure::Temperature), over(part))
        }
    }
}
