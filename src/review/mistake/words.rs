//! Loads and places in words.

use crate::member::{LoadKind, Member, Place, Stretch};
use crate::quantity::{Given, Typed};

/// A quantity as it was typed.
pub fn typed<T>(given: &Given<T>) -> String {
    terms(&given.typed)
}

fn terms(typed: &Typed) -> String {
    let parts: Vec<String> = typed.terms.iter().map(|term| format!("{} {}", term.figure, term.unit)).collect();
    parts.join(" ")
}

/// A place: a support's name, as typed, or in metres.
pub fn place(member: &Member, place: Place) -> String {
    if let Some(support) = member.supports.iter().find(|support| support.at == place) {
        return support.name.clone();
    }
    if place == member.end() {
        return "the end".to_owned();
    }
    member.typed_places.get(&place).map_or_else(|| format!("{} m", place.exact()), terms)
}

fn stretch(member: &Member, over: Stretch) -> String {
    if over.from == Place::ZERO && over.to == member.end() {
        return String::new();
    }
    let from = if over.from == Place::ZERO { "the start".to_owned() } else { place(member, over.from) };
    format!(" from {from} to {}", place(member, over.to))
}

/// A load, without its article: `point load of 9 kN at 5.5 m (case Q)`.
pub fn load(member: &Member, case: usize, kind: &LoadKind) -> String {
    let called = member.cases.get(case).map_or("", |case| case.name.as_str());
    let support = |index: usize| member.supports.get(index).map_or("", |support| support.name.as_str());
    let what = match kind {
        LoadKind::SelfWeight => "self-weight".to_owned(),
        LoadKind::Uniform { w, over } => format!("uniform load of {}{}", typed(w), stretch(member, *over)),
        LoadKind::Linear { left, right, over } => {
            format!("linear load of {} to {}{}", typed(left), typed(right), stretch(member, *over))
        }
        LoadKind::Area { q, width, over } => {
            format!("area load of {} over {}{}", typed(q), typed(width), stretch(member, *over))
        }
        LoadKind::Point { p, at } => format!("point load of {} at {}", typed(p), place(member, *at)),
        LoadKind::Couple { m, at } => format!("couple of {} at {}", typed(m), place(member, *at)),
        LoadKind::Settlement { support: index, by } => format!("settlement of {} by {}", support(*index), typed(by)),
        LoadKind::Rotation { support: index, by } => format!("turn of {} by {}", support(*index), typed(by)),
        LoadKind::Gradient { difference, over } => {
            format!("temperature difference of {}{}", typed(difference), stretch(member, *over))
        }
    };
    format!("{what} (case {called})")
}

/// Where a load is written: `case Q, load 2`.
pub fn where_load(member: &Member, case: usize, load: usize) -> String {
    let called = member.cases.get(case).map_or("", |case| case.name.as_str());
    format!("case {called}, load {}", load + 1)
}
