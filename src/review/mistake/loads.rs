//! Wrong loads: left out, doubled, reversed, spread, cut off, carried over.

use super::edit;
use super::{Change, Mistake, words};
use crate::member::{LoadKind, Member, Place, Stretch};
use crate::quantity::{Decimal, Force, Given, Intensity, Term, Unit};

/// What one load becomes.
#[derive(Clone, Debug, PartialEq)]
pub struct LoadEdit {
    /// Index of the case.
    pub case: usize,
    /// Index of the load within its case.
    pub load: usize,
    /// What stands in its stead.
    pub instead: Instead,
}

/// What stands in a load's stead.
#[derive(Clone, Debug, PartialEq)]
pub enum Instead {
    /// The same, times a factor.
    Times(Decimal),
    /// Others.
    Loads(Vec<LoadKind>),
}

/// The member with loads replaced. `None` where a load cannot be scaled.
pub fn apply(member: &Member, edits: &[LoadEdit]) -> Option<Member> {
    let mut changed = member.clone();
    for (index, case) in changed.cases.iter_mut().enumerate() {
        let mut loads = Vec::with_capacity(case.loads.len());
        for (position, load) in case.loads.drain(..).enumerate() {
            let edit = edits.iter().find(|edit| edit.case == index && edit.load == position);
            let kinds = match edit.map(|edit| &edit.instead) {
                None => vec![load.kind.clone()],
                Some(Instead::Loads(kinds)) => kinds.clone(),
                Some(Instead::Times(factor)) if factor.is_zero() => Vec::new(),
                Some(Instead::Times(factor)) => scaled(&load.kind, *factor)?,
            };
            loads.extend(kinds.into_iter().map(|kind| crate::member::Load { kind, ..load.clone() }));
        }
        case.loads = loads;
    }
    edit::sound(changed)
}

/// A load times a factor. Self-weight has no figure of its own: it can only be repeated.
pub fn scaled(kind: &LoadKind, factor: Decimal) -> Option<Vec<LoadKind>> {
    let one = match kind {
        LoadKind::SelfWeight => {
            let copies = usize::try_from(factor.with_exponent(0)?.mantissa()).ok()?;
            return Some(vec![LoadKind::SelfWeight; copies]);
        }
        LoadKind::Uniform { w, over } => LoadKind::Uniform { w: edit::times(w, factor)?, over: *over },
        LoadKind::Linear { left, right, over } => {
            LoadKind::Linear { left: edit::times(left, factor)?, right: edit::times(right, factor)?, over: *over }
        }
        LoadKind::Area { q, width, over } => {
            LoadKind::Area { q: edit::times(q, factor)?, width: width.clone(), over: *over }
        }
        LoadKind::Point { p, at } => LoadKind::Point { p: edit::times(p, factor)?, at: *at },
        LoadKind::Couple { m, at } => LoadKind::Couple { m: edit::times(m, factor)?, at: *at },
        LoadKind::Settlement { support, by } => {
            LoadKind::Settlement { support: *support, by: edit::times(by, factor)? }
        }
        LoadKind::Rotation { support, by } => LoadKind::Rotation { support: *support, by: edit::times(by, factor)? },
        LoadKind::Gradient { difference, over } => {
            LoadKind::Gradient { difference: edit::times(difference, factor)?, over: *over }
        }
    };
    Some(vec![one])
}

/// Whether a load pushes: a force, an intensity, a couple, a weight.
pub fn is_force(kind: &LoadKind) -> bool {
    !matches!(kind, LoadKind::Settlement { .. } | LoadKind::Rotation { .. } | LoadKind::Gradient { .. })
}

pub(super) fn mistakes(member: &Member) -> Vec<Mistake> {
    let mut list = Vec::new();
    for (case, held) in member.cases.iter().enumerate() {
        for (load, one) in held.loads.iter().enumerate() {
            let found = Found { member, case, load, kind: &one.kind };
            found.factors(&mut list);
            found.shapes(&mut list);
        }
        patterns(member, case, &mut list);
        if held.loads.len() > 1 {
            let none = |load| LoadEdit { case, load, instead: Instead::Times(Decimal::ZERO) };
            let edits = (0..held.loads.len()).map(none).collect();
            let words = format!("leaving out case {}", held.name);
            list.push(Mistake::new("case-omitted", format!("case {}", held.name), words, Change::Loads(edits)));
        }
    }
    list
}

/// Loads of one intensity over some spans, laid over every span.
fn patterns(member: &Member, case: usize, list: &mut Vec<Mistake>) {
    let edge = |place: Place| member.spans.iter().any(|span| span.from == place || span.to == place);
    let whole = Stretch { from: Place::ZERO, to: member.end() };
    let loads = member.cases.get(case).map_or(&[][..], |case| &case.loads);
    let spread = |kind: &LoadKind| match kind {
        LoadKind::Uniform { over, .. } | LoadKind::Area { over, .. }
            if *over != whole && edge(over.from) && edge(over.to) =>
        {
            let mut whole_kind = kind.clone();
            if let LoadKind::Uniform { over, .. } | LoadKind::Area { over, .. } = &mut whole_kind {
                *over = whole;
            }
            Some(whole_kind)
        }
        _ => None,
    };
    let mut done: Vec<LoadKind> = Vec::new();
    for (load, first) in loads.iter().enumerate() {
        let Some(kind) = spread(&first.kind).filter(|kind| !done.contains(kind)) else { continue };
        done.push(kind.clone());
        let alike = loads.iter().enumerate().filter(|(_, other)| spread(&other.kind).as_ref() == Some(&kind));
        let edits: Vec<LoadEdit> = alike
            .map(|(other, _)| {
                let kinds = if other == load { vec![kind.clone()] } else { Vec::new() };
                LoadEdit { case, load: other, instead: Instead::Loads(kinds) }
            })
            .collect();
        let words = format!("the {} laid over every span instead of some", words::load(member, case, &first.kind));
        let place = words::where_load(member, case, load);
        list.push(Mistake::new("pattern-ignored", place, words, Change::Loads(edits)));
    }
}

/// A load and where it stands.
struct Found<'a> {
    member: &'a Member,
    case: usize,
    load: usize,
    kind: &'a LoadKind,
}

impl Found<'_> {
    fn push(&self, list: &mut Vec<Mistake>, name: &str, words: String, instead: Instead) {
        let edit = LoadEdit { case: self.case, load: self.load, instead };
        let place = words::where_load(self.member, self.case, self.load);
        list.push(Mistake::new(name, place, words, Change::Loads(vec![edit])));
    }

    fn factors(&self, list: &mut Vec<Mistake>) {
        let load = words::load(self.member, self.case, self.kind);
        let article = if *self.kind == LoadKind::SelfWeight { "" } else { "the " };
        let half = Decimal::new(5, -1);
        let tenfold = Decimal::new(10, 0);
        let minus = Decimal::new(-1, 0);
        let two = Decimal::new(2, 0);
        let rows: &[(&str, &str, Decimal)] = match self.kind {
            LoadKind::SelfWeight => {
                &[("self-weight-omitted", "leaving out", Decimal::ZERO), ("self-weight-doubled", "counting twice", two)]
            }
            LoadKind::Settlement { .. } => &[
                ("settlement-omitted", "leaving out", Decimal::ZERO),
                ("settlement-reversed", "reversing", minus),
                ("settlement-ten-times", "taking ten times", tenfold),
            ],
            LoadKind::Couple { .. } => &[
                ("load-omitted", "leaving out", Decimal::ZERO),
                ("load-doubled", "counting twice", two),
                ("couple-reversed", "reversing", minus),
            ],
            LoadKind::Gradient { .. } => &[
                ("load-omitted", "leaving out", Decimal::ZERO),
                ("load-doubled", "counting twice", two),
                ("gradient-reversed", "reversing", minus),
                ("gradient-halved", "taking half", half),
            ],
            _ => &[
                ("load-omitted", "leaving out", Decimal::ZERO),
                ("load-doubled", "counting twice", two),
                ("load-reversed", "reversing", minus),
            ],
        };
        for (name, verb, factor) in rows {
            self.push(list, name, format!("{verb} {article}{load}"), Instead::Times(*factor));
        }
    }

    fn shapes(&self, list: &mut Vec<Mistake>) {
        let load = words::load(self.member, self.case, self.kind);
        match self.kind {
            LoadKind::Point { p, at } => self.spread(list, &load, p, *at),
            LoadKind::Uniform { w, over } => {
                let kind = |over: Stretch| LoadKind::Uniform { w: w.clone(), over };
                self.ends(list, &load, *over, &kind);
                if let Some(total) = per_length(self.member, over).and_then(|factor| edit::times(w, factor)) {
                    let words = format!("reading the {load} as a total, spread over its length");
                    let spread = LoadKind::Uniform { w: total, over: *over };
                    self.push(list, "uniform-read-as-total", words, Instead::Loads(vec![spread]));
                }
            }
            LoadKind::Area { q, width, over } => {
                let kind = |over: Stretch| LoadKind::Area { q: q.clone(), width: width.clone(), over };
                self.ends(list, &load, *over, &kind);
            }
            LoadKind::Linear { left, right, over } if left.value != right.value => {
                let turned = LoadKind::Linear { left: right.clone(), right: left.clone(), over: *over };
                let words = format!("the {load} with its ends exchanged");
                self.push(list, "triangle-reversed", words, Instead::Loads(vec![turned]));
            }
            LoadKind::SelfWeight => self.weight_cut(list),
            _ => {}
        }
    }

    /// A force read as an intensity of the same figure over each segment and span that it stands on or at the edge of.
    fn spread(&self, list: &mut Vec<Mistake>, load: &str, p: &Given<Force>, at: Place) {
        let Some(w) = intensity(p) else { return };
        let segments = self.member.segments.iter().enumerate();
        let mut places: Vec<(Stretch, String)> = segments
            .map(|(index, segment)| (Stretch { from: segment.from, to: segment.to }, format!("segment {}", index + 1)))
            .collect();
        let spans = self.member.spans.iter();
        places.extend(spans.map(|span| (Stretch { from: span.from, to: span.to }, format!("span {}", span.name))));
        places.push((Stretch { from: Place::ZERO, to: self.member.end() }, "the whole member".to_owned()));
        // The part of its span on either side of a force that stands within one.
        for span in self.member.spans.iter().filter(|span| span.from < at && at < span.to) {
            places.push((Stretch { from: span.from, to: at }, format!("span {} up to the load", span.name)));
            places.push((Stretch { from: at, to: span.to }, format!("span {} from the load on", span.name)));
        }
        let mut done: Vec<Stretch> = Vec::new();
        for (over, called) in places {
            if at < over.from || at > over.to || done.contains(&over) {
                continue;
            }
            done.push(over);
            let words = format!("reading the {load} as {} over {called}", words::typed(&w));
            let kind = LoadKind::Uniform { w: w.clone(), over };
            self.push(list, "point-read-as-uniform", words, Instead::Loads(vec![kind]));
        }
    }

    /// A load over a part: cut off at a support that it runs across, carried on over one where it ends.
    fn ends(&self, list: &mut Vec<Mistake>, load: &str, over: Stretch, kind: &dyn Fn(Stretch) -> LoadKind) {
        let end = self.member.end();
        for support in self.member.supports.iter().filter(|support| support.holds_deflection()) {
            let at = support.at;
            if over.from < at && at < over.to {
                for (part, side) in
                    [(Stretch { from: over.from, to: at }, "left"), (Stretch { from: at, to: over.to }, "right")]
                {
                    let words = format!("the {load} kept only to the {side} of support {}", support.name);
                    self.push(list, "load-cut-at-support", words, Instead::Loads(vec![kind(part)]));
                }
            }
            let spans = || self.member.spans.iter();
            let mut longer: Vec<Stretch> = Vec::new();
            if over.to == at && at < end {
                longer.extend(spans().filter(|span| span.from == at).map(|span| Stretch { to: span.to, ..over }));
            }
            if over.from == at && at > Place::ZERO {
                longer.extend(spans().filter(|span| span.to == at).map(|span| Stretch { from: span.from, ..over }));
            }
            for part in longer {
                let words = format!("the {load} carried on over support {}", support.name);
                self.push(list, "load-carried-over-end", words, Instead::Loads(vec![kind(part)]));
            }
        }
    }

    /// Self-weight left off a cantilever.
    fn weight_cut(&self, list: &mut Vec<Mistake>) {
        let member = self.member;
        for span in member.spans.iter().filter(|span| span.is_cantilever()) {
            let rest = |segment: &crate::member::Segment| {
                let over = Stretch { from: segment.from.max(span.from), to: segment.to.min(span.to) };
                let section = member.sections.get(segment.section)?;
                let weight = crate::analysis::action::weight_per_length(section);
                let (plain, inside) = (segment.taper.is_none(), over.from < over.to);
                (plain && inside).then_some((weight, over))
            };
            let covered = member.segments.iter().filter(|s| s.from < span.to && s.to > span.from).count();
            let parts: Vec<(f64, Stretch)> = member.segments.iter().filter_map(rest).collect();
            if parts.len() != covered || span.left.or(span.right).is_none() {
                continue;
            }
            let unit =
                Unit::of(Unit::known("kN").zip(Unit::known("m")).into_iter().flat_map(|(kn, m)| [(kn, 1), (m, -1)]));
            let mut kinds = vec![LoadKind::SelfWeight];
            for (weight, over) in parts {
                let Some(w) = edit::of_si::<Intensity>(-weight, &unit) else { return };
                kinds.push(LoadKind::Uniform { w, over });
            }
            let words = format!("leaving self-weight off span {}", span.name);
            self.push(list, "load-cut-at-support", words, Instead::Loads(kinds));
        }
    }
}

/// An intensity of the same figure: kN becomes kN/m, kip becomes kip/ft.
fn intensity(p: &Given<Force>) -> Option<Given<Intensity>> {
    let term = p.typed.terms.first()?;
    let force = term.unit.factors().to_vec();
    let us = force.iter().any(|(atom, _)| matches!(atom.text, "kip" | "lb" | "lbf"));
    let length = Unit::known(if us { "ft" } else { "m" })?;
    let unit = Unit::of(force.into_iter().chain([(length, -1)]));
    edit::read(vec![Term { figure: term.figure, unit }])
}

/// One over the length of a part, in metres (in feet where the sheet prints those).
fn per_length(member: &Member, over: &Stretch) -> Option<Decimal> {
    let foot = if member.title.system == crate::member::System::Us { 0.3048 } else { 1.0 };
    let length = over.to.beyond(over.from) / foot;
    (length > 0.0).then(|| Decimal::nearest(1.0 / length, 12))
}
