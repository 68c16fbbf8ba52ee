//! Chains of dimensions.

use super::canvas::{Canvas, HAIR, LABEL, LIGHT, solid};
use super::measure;
use super::primitive::{Anchor, Run, at};
use super::rows::{Layer, Note, annotate, one_row};

/// Draws a chain at `y` through the ticks (mm, rising) with one label for each interval; returns its lowest y.
///
/// Labels that fit their interval stand below it; the others hang below on leaders.
pub fn chain(canvas: &mut Canvas, y: f64, ticks: &[f64], labels: Vec<Vec<Run>>, left: f64, right: f64) -> f64 {
    let (Some(first), Some(last)) = (ticks.first(), ticks.last()) else { return y };
    canvas.line(at(*first, y), at(*last, y), solid(HAIR));
    for tick in ticks {
        canvas.line(at(*tick, y - 1.0), at(*tick, y + 1.0), solid(HAIR));
        canvas.line(at(tick - 0.55, y + 0.55), at(tick + 0.55, y - 0.55), solid(LIGHT));
    }
    let intervals = ticks.iter().zip(ticks.iter().skip(1));
    let notes: Vec<(Note, f64)> =
        intervals.zip(labels).map(|((a, b), runs)| (Note::new((a + b) / 2.0, runs), b - a)).collect();
    let layer = Layer { edge: y + 0.9, up: false, left, right, beside: false };
    let all: Vec<Note> = notes.iter().map(|(note, _)| note.clone()).collect();
    if one_row(&all, layer) {
        return annotate(canvas, &all, layer);
    }
    let (above, descent) = measure::heights(&[], LABEL);
    let base = layer.edge + above + 0.4;
    let mut below = Vec::new();
    for (note, room) in notes {
        if measure::width(&note.runs, LABEL) + 1.4 <= room {
            canvas.text(at(note.x, base), Anchor::Middle, note.runs);
        } else {
            below.push(Note { start: Some(y), ..note });
        }
    }
    let edge = if below.len() < all.len() { base + descent + 0.3 } else { y + 1.6 };
    annotate(canvas, &below, Layer { edge, ..layer })
}
