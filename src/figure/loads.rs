//! One load case on the member.

use super::Words;
use super::band::{self, Depths, Scale};
use super::canvas::{Canvas, HEAVY, LABEL, NORMAL, plain, solid};
use super::elevation::{LEFT, between, caption, chain_of, name_notes, symbol_size};
use super::label::{self, Measure};
use super::load_words::{describe, movements};
use super::measure;
use super::primitive::{Drawing, Fill, Run, at};
use super::rows::{Layer, Note, annotate};
use super::strips::{self, Look, Placed, Strip, TALL};
use super::support::{Symbol, hinge};
use crate::member::{Case, LoadKind, Member, Place, Stretch};

/// Radius of a couple's circle, mm.
const COUPLE: f64 = 2.5;
/// Length of a point load's arrow above whatever it stands on, mm.
const SHAFT: f64 = 7.5;

/// The loads of the case with this index, `width` mm wide; the bare member where there is no such case.
///
/// Arrows point the way a load acts; figures stand without sign.
pub fn loads(member: &Member, case: usize, said: &Words, width: f64) -> Drawing {
    let none = Vec::new();
    let case = member.cases.get(case);
    let kinds: Vec<&LoadKind> = case.map_or(&none, |case| &case.loads).iter().map(|load| &load.kind).collect();
    let scale = Scale::fit(member, LEFT, width - room_right(member, &kinds));
    let depths = Depths::sketched(member, 2.2);
    let sketch = Sketch { member, said, kinds, scale, depths, width };
    let mut canvas = Canvas::default();
    let low = sketch.bare(&mut canvas);
    sketch.above(&mut canvas);
    let low = sketch.below(&mut canvas, low);
    sketch.positions(&mut canvas, low);
    if !said.total.is_empty() {
        caption(&mut canvas, &said.total, LEFT, width);
    }
    canvas.finish(width, alt(member, case, said))
}

/// Room for the label of a point load near the right end.
fn room_right(member: &Member, kinds: &[&LoadKind]) -> f64 {
    let widths = kinds.iter().filter_map(|kind| match kind {
        LoadKind::Point { .. } => Some(measure::width(&[plain(point_label(member, kind))], LABEL) + 1.5),
        _ => None,
    });
    widths.fold(LEFT, f64::max)
}

fn point_label(member: &Member, kind: &LoadKind) -> String {
    match kind {
        LoadKind::Point { p, .. } => label::given(&p.typed, p.value.si(), Measure::Force, member.title.system, true),
        _ => String::new(),
    }
}

/// Labels below the member are not joined beyond this width, mm.
const LONGEST: f64 = 70.0;

struct Sketch<'a> {
    member: &'a Member,
    said: &'a Words,
    kinds: Vec<&'a LoadKind>,
    scale: Scale,
    depths: Depths,
    width: f64,
}

impl Sketch<'_> {
    fn x(&self, place: Place) -> f64 {
        self.scale.x(place.x())
    }

    /// The member, its supports and what moves them; returns the lowest y.
    fn bare(&self, canvas: &mut Canvas) -> f64 {
        band::draw(canvas, self.member, self.scale, &self.depths, false);
        let size = symbol_size(self.member, self.scale);
        let mut low = 0.0_f64;
        for (index, support) in self.member.supports.iter().enumerate() {
            let x = self.x(support.at);
            let half = self.depths.half_at(self.member, support.at.x());
            let mut foot = Symbol::of(self.member, support, at(x, 0.0), half, size).draw(canvas);
            for kind in &self.kinds {
                match kind {
                    LoadKind::Settlement { support, by } if *support == index => {
                        let (top, end) = (at(x, foot + 0.5), at(x, foot + 4.5));
                        let down = by.value.si() >= 0.0;
                        let (from, to) = if down { (top, end) } else { (end, top) };
                        canvas.arrow(from, to, NORMAL, 1.7);
                        foot += 4.8;
                    }
                    LoadKind::Rotation { support, by } if *support == index => {
                        let sign = if by.value.si() >= 0.0 { 1.0 } else { -1.0 };
                        canvas.couple(at(x, foot + 2.7), 2.0, 90.0 + sign * 45.0, sign * 270.0, NORMAL);
                        foot += 5.0;
                    }
                    _ => {}
                }
            }
            low = low.max(foot);
        }
        for place in self.member.hinges.iter().map(|hinge| hinge.at.x()) {
            hinge(canvas, at(self.scale.x(place), 0.0), self.depths.half_at(self.member, place));
        }
        low.max(self.depths.greatest(self.member))
    }

    /// Strips, couples, point loads and their labels.
    fn above(&self, canvas: &mut Canvas) {
        let mut base = -self.depths.greatest(self.member) - 0.4;
        for kind in &self.kinds {
            if let LoadKind::Couple { m, at: place } = kind {
                let centre = at(self.x(*place), 0.0);
                let sign = if m.value.si() >= 0.0 { 1.0 } else { -1.0 };
                canvas.couple(centre, COUPLE, 90.0 + sign * 45.0, sign * 270.0, NORMAL * 1.2);
                canvas.circle(centre, 0.35, solid(NORMAL), Fill::Black);
                base = base.min(-COUPLE - 1.2);
            }
        }
        let poles: Vec<f64> = self.points().map(|(place, _)| self.x(place)).collect();
        let strips: Vec<Strip> = self.kinds.iter().filter_map(|kind| self.strip(kind)).collect();
        let placed = strips::stack(strips, &poles, base, self.width);
        for strip in &placed {
            strips::draw(canvas, strip);
        }
        self.point_loads(canvas, &placed, base);
    }

    fn points(&self) -> impl Iterator<Item = (Place, &LoadKind)> {
        self.kinds.iter().filter_map(|kind| match kind {
            LoadKind::Point { at, .. } => Some((*at, *kind)),
            _ => None,
        })
    }

    fn point_loads(&self, canvas: &mut Canvas, placed: &[Placed], base: f64) {
        let highest = canvas.extent().map_or(base, |extent| extent.top.min(base));
        let away: Vec<Note> =
            placed.iter().flat_map(Placed::away).map(|(x, line, runs)| Note { x, start: Some(line), runs }).collect();
        let mut notes: Vec<Note> = away;
        let mut tail = base;
        for (place, _) in self.points() {
            let stands = self.stands(placed, place);
            tail = tail.min(stands - SHAFT);
        }
        // Above every strip that a label could meet.
        tail = tail.min(highest - 3.4);
        for (place, kind) in self.points() {
            let x = self.x(place);
            let stands = self.stands(placed, place);
            let (top, tip) = (at(x, tail), at(x, stands));
            let down = matches!(kind, LoadKind::Point { p, .. } if p.value.si() >= 0.0);
            let (from, to) = if down { (top, tip) } else { (tip, top) };
            canvas.arrow(from, to, HEAVY * 0.8, 2.2);
            notes.push(Note::new(x, vec![plain(point_label(self.member, kind))]));
        }
        annotate(canvas, &notes, Layer { edge: tail, up: true, left: 0.0, right: self.width, beside: true });
    }

    /// y of what a force stands on: the highest strip there, else the member.
    fn stands(&self, placed: &[Placed], place: Place) -> f64 {
        let (x, member) = (self.x(place), -self.depths.half_at(self.member, place.x()) - 0.3);
        placed.iter().filter_map(|strip| strip.line(x)).fold(member, |top, line| top.min(line - 0.15))
    }

    fn strip(&self, kind: &LoadKind) -> Option<Strip> {
        let system = self.member.title.system;
        let plain_label = |text: String, over: &Stretch| vec![(self.x(over.from), self.x(over.to), vec![plain(text)])];
        let even = |over: &Stretch, height: f64, look: Look, text: String| Strip {
            from: self.x(over.from),
            to: self.x(over.to),
            left: height,
            right: height,
            look,
            labels: plain_label(text, over),
        };
        match kind {
            LoadKind::SelfWeight => {
                let whole = Stretch { from: Place::ZERO, to: self.member.end() };
                let figure = if self.said.self_weight.is_empty() { "" } else { " " };
                let text = format!("self-weight{figure}{}", self.said.self_weight);
                Some(even(&whole, TALL * 0.6, Look::Weight, text))
            }
            LoadKind::Uniform { w, over } => {
                let text = label::given(&w.typed, w.value.si(), Measure::Intensity, system, true);
                Some(even(over, TALL.copysign(w.value.si()), Look::Load, text))
            }
            LoadKind::Area { q, width, over } => {
                let text = format!(
                    "{} × {}",
                    label::given(&q.typed, q.value.si(), Measure::AreaLoad, system, true),
                    label::given(&width.typed, width.value.si(), Measure::Length, system, true)
                );
                Some(even(over, TALL.copysign(q.value.si()), Look::Load, text))
            }
            LoadKind::Gradient { difference, over } => {
                let kelvin = difference.value.si();
                let figure = label::given(&difference.typed, kelvin, Measure::Temperature, system, true);
                let side = if kelvin >= 0.0 { "top" } else { "bottom" };
                let look = Look::Gradient { top: kelvin >= 0.0 };
                Some(even(over, 4.0, look, format!("{side} warmer by {figure}")))
            }
            LoadKind::Linear { left, right, over } => {
                let most = left.value.si().abs().max(right.value.si().abs());
                let tall = |w: f64| if most > 0.0 { w / most * (TALL + 1.0) } else { 0.0 };
                let text = |w: &crate::quantity::Given<crate::quantity::Intensity>| {
                    label::given(&w.typed, w.value.si(), Measure::Intensity, system, true)
                };
                let (from, to) = (self.x(over.from), self.x(over.to));
                Some(Strip {
                    from,
                    to,
                    left: tall(left.value.si()),
                    right: tall(right.value.si()),
                    look: Look::Load,
                    labels: end_labels(from, to, text(left), text(right)),
                })
            }
            _ => None,
        }
    }

    /// Names, movements, couples' figures; returns the lowest y.
    fn below(&self, canvas: &mut Canvas, low: f64) -> f64 {
        let system = self.member.title.system;
        let mut notes = name_notes(self.member, self.said, self.scale, &self.depths);
        let named = notes.len();
        for (index, support) in self.member.supports.iter().enumerate() {
            for text in movements(self.member, &self.kinds, index) {
                add(&mut notes, named, self.x(support.at), None, text);
            }
        }
        for kind in &self.kinds {
            if let LoadKind::Couple { m, at: place } = kind {
                let text = label::given(&m.typed, m.value.si(), Measure::Couple, system, true);
                let start = self.depths.half_at(self.member, place.x()) + 0.2;
                add(&mut notes, named, self.x(*place), Some(start), text);
            }
        }
        let edge = low.max(COUPLE) + 0.3;
        annotate(canvas, &notes, Layer { edge, up: false, left: 0.0, right: self.width, beside: false })
    }

    /// A chain through ends, supports and wherever a load begins, ends or stands.
    fn positions(&self, canvas: &mut Canvas, low: f64) {
        let mut places = vec![Place::ZERO, self.member.end()];
        places.extend(self.member.supports.iter().map(|support| support.at));
        for kind in &self.kinds {
            match kind {
                LoadKind::Uniform { over, .. }
                | LoadKind::Linear { over, .. }
                | LoadKind::Area { over, .. }
                | LoadKind::Gradient { over, .. } => places.extend([over.from, over.to]),
                LoadKind::Point { at, .. } | LoadKind::Couple { at, .. } => places.push(*at),
                LoadKind::SelfWeight | LoadKind::Settlement { .. } | LoadKind::Rotation { .. } => {}
            }
        }
        places.sort();
        places.dedup();
        chain_of(canvas, &places, between(&places, self.member), self.scale, low + 2.4, self.width);
    }
}

/// Adds a figure to the label of the name at its place, or, where there is none or the label grows long, as its own.
fn add(notes: &mut Vec<Note>, named: usize, x: f64, start: Option<f64>, text: String) {
    if let Some(note) = notes.iter_mut().take(named).find(|note| (note.x - x).abs() < 0.05) {
        let joint = if note.runs.len() > 1 { "," } else { ":" };
        let more = plain(format!("{joint} {text}"));
        if note.width() + measure::width(std::slice::from_ref(&more), LABEL) <= LONGEST {
            note.runs.push(more);
            return;
        }
        notes.push(Note::new(x, vec![plain(text)]));
        return;
    }
    notes.push(Note { x, start, runs: vec![plain(text)] });
}

/// One label at each end, or one for both where the strip is short.
fn end_labels(from: f64, to: f64, left: String, right: String) -> Vec<(f64, f64, Vec<Run>)> {
    let width = |text: &str| measure::width(&[plain(text)], LABEL);
    let (a, b) = (width(&left), width(&right));
    if a + b + 4.0 > to - from {
        return vec![(from, to, vec![plain(format!("{left} to {right}"))])];
    }
    // Each over its own end, free to give way towards the middle.
    let middle = from + (to - from) * a / (a + b);
    vec![(from, middle.min(from + a + 4.0), vec![plain(left)]), (middle.max(to - b - 4.0), to, vec![plain(right)])]
}

fn alt(member: &Member, case: Option<&Case>, said: &Words) -> String {
    let Some(case) = case else { return "The member without loads.".to_owned() };
    let loads: Vec<String> = case.loads.iter().map(|load| describe(member, &load.kind, said)).collect();
    let title = if case.title.is_empty() { String::new() } else { format!(", {}", case.title) };
    let total = if said.total.is_empty() { String::new() } else { format!(" {}", said.total) };
    format!("Load case {}{title}, on the member: {}.{total}", case.name, loads.join("; "))
}
