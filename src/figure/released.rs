//! The released member: what is let go, and the redundants in its place.

use super::Words;
use super::band::{self, Depths, Scale};
use super::canvas::{Canvas, HEAVY, LABEL, NORMAL, plain, sub, symbol};
use super::elevation::{LEFT, kind_word, name_notes, symbol_size};
use super::measure;
use super::primitive::{Drawing, Run, at};
use super::rows::{Layer, Note, annotate};
use super::support::{Held, Side, Symbol, ghost, hinge};
use crate::member::{Member, Redundant, Support};

/// Length of a redundant force's arrow, mm.
const ARROW: f64 = 7.5;
/// Radius of a redundant moment's arc, mm.
const ARC: f64 = 3.2;

/// The member with the movements of `redundants` released and the redundants as arrows in their positive sense.
///
/// A force points up at its support, whose symbol is dashed. A moment over an inner support is a pair of couples about a
/// hinge, sagging positive; where the support itself holds rotation, or at an end, it is one couple on the member.
/// Redundants that name no support are left out.
pub fn released(member: &Member, redundants: &[Redundant], said: &Words, width: f64) -> Drawing {
    let scale = Scale::fit(member, LEFT, width - LEFT);
    let depths = Depths::sketched(member, 2.2);
    let size = symbol_size(member, scale);
    let mut canvas = Canvas::default();
    band::draw(&mut canvas, member, scale, &depths, false);
    for place in member.hinges.iter().map(|hinge| hinge.at.x()) {
        hinge(&mut canvas, at(scale.x(place), 0.0), depths.half_at(member, place));
    }
    let mut low = depths.greatest(member);
    for (index, support) in member.supports.iter().enumerate() {
        let node = at(scale.x(support.at.x()), 0.0);
        let half = depths.half_at(member, support.at.x());
        let (force, moment) =
            (redundants.contains(&Redundant::Force(index)), redundants.contains(&Redundant::Moment(index)));
        let whole = Symbol::of(member, support, node, half, size);
        low = low.max(remaining(&mut canvas, whole, force, moment));
        if force {
            let foot = half + size + 0.8;
            canvas.arrow(at(node.x, foot + ARROW), at(node.x, half + 0.25), HEAVY * 0.8, 2.2);
            low = low.max(foot + ARROW);
        }
        if moment {
            couples(&mut canvas, whole, support);
        }
    }
    let top = canvas.extent().map_or(0.0, |extent| extent.top) - 0.4;
    let moments = notes(member, redundants, scale, |redundant| matches!(redundant, Redundant::Moment(_)));
    let upper = Layer { edge: top, up: true, left: 0.0, right: width, beside: false };
    annotate(&mut canvas, &moments, upper);
    // Names stay near the member; the forces' symbols stand at the tails of their arrows.
    let mut below = name_notes(member, said, scale, &depths);
    for note in notes(member, redundants, scale, |redundant| matches!(redundant, Redundant::Force(_))) {
        match below.iter_mut().find(|name| (name.x - note.x).abs() < 0.01) {
            Some(name) => {
                let mut both = name.runs.clone();
                both.push(plain(": "));
                both.extend(note.runs.iter().cloned());
                // The force bears the support's name: where both are too wide together, it says enough.
                name.runs = if measure::width(&both, LABEL) < width - 1.0 { both } else { note.runs };
            }
            None => below.push(note),
        }
    }
    annotate(&mut canvas, &below, Layer { edge: low + 0.3, up: false, left: 0.0, right: width, beside: false });
    canvas.finish(width, alt(member, redundants))
}

/// What is left of a support; a support that is released altogether is a dashed outline.
fn remaining(canvas: &mut Canvas, whole: Symbol, force: bool, moment: bool) -> f64 {
    let vertical = if force { Held::Free } else { whole.vertical };
    let rotation = if moment { Held::Free } else { whole.rotation };
    if vertical == Held::Free && rotation == Held::Free {
        return ghost(canvas, whole.node, whole.half, whole.size);
    }
    Symbol { vertical, rotation, ..whole }.draw(canvas)
}

/// The couples of a released moment, each on the face that it bends; sagging positive.
fn couples(canvas: &mut Canvas, symbol: Symbol, support: &Support) {
    let node = symbol.node;
    let own = support.holds_rotation();
    let weight = NORMAL * 1.3;
    match symbol.side {
        // On a left-hand face a sagging moment turns clockwise, on a right-hand face the other way.
        Side::Start => canvas.couple(node, ARC, 130.0, 130.0, weight),
        Side::End => canvas.couple(node, ARC, 50.0, -130.0, weight),
        Side::Inner if own => {
            canvas.couple(node, ARC, -20.0, -220.0, weight);
        }
        Side::Inner => {
            hinge(canvas, node, symbol.half);
            canvas.couple(at(node.x - 1.6, node.y), ARC, -160.0, -100.0, weight);
            canvas.couple(at(node.x + 1.6, node.y), ARC, -20.0, 100.0, weight);
        }
    }
}

/// The symbol of a redundant: its letter, its support lowered.
pub fn name(member: &Member, redundant: Redundant) -> Vec<Run> {
    let letter = if matches!(redundant, Redundant::Force(_)) { "R" } else { "M" };
    let support = member.supports.get(redundant.support()).map_or("", |support| support.name.as_str());
    vec![symbol(letter), sub(support)]
}

fn notes(member: &Member, redundants: &[Redundant], scale: Scale, wanted: impl Fn(&Redundant) -> bool) -> Vec<Note> {
    let note = |redundant: &Redundant| {
        let support = member.supports.get(redundant.support())?;
        Some(Note::new(scale.x(support.at.x()), name(member, *redundant)))
    };
    redundants.iter().filter(|redundant| wanted(redundant)).filter_map(note).collect()
}

fn alt(member: &Member, redundants: &[Redundant]) -> String {
    let one = |redundant: &Redundant| {
        let support = member.supports.get(redundant.support())?;
        let what = match redundant {
            Redundant::Force(_) => "the upward force of support",
            Redundant::Moment(_) if support.holds_rotation() => "the moment of support",
            Redundant::Moment(_) => "the bending moment over support",
        };
        Some(format!("{}, {what} {} ({})", redundant.name(member), support.name, kind_word(support)))
    };
    let list: Vec<String> = redundants.iter().filter_map(one).collect();
    if list.is_empty() {
        return "The member is statically determinate; nothing is released.".to_owned();
    }
    format!("The released member. Released, with arrows in the positive sense: {}.", list.join("; "))
}
