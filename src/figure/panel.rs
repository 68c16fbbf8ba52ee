//! One panel of a diagram.

use super::canvas::{Canvas, Extent, HAIR, LABEL, NORMAL, dashed, plain, solid, symbol};
use super::measure;
use super::place::Field;
use super::plot::{Curve, KEY, Panel, Plot};
use super::primitive::{Anchor, Dash, Fill, Point, Run, at};
use super::rows::{Layer, Note, annotate, spread};

/// Height of a panel's values, mm.
const TALL: f64 = 20.0;
/// How far labels may stand outside the values, mm.
const OUTSIDE: f64 = 9.0;
/// Distance of line names, mm.
const PITCH: f64 = 3.2;

/// The x axis on paper.
#[derive(Clone, Copy, Debug)]
pub struct Frame {
    /// x at the left end, in the plot's unit.
    pub from: f64,
    /// x at the right end.
    pub to: f64,
    /// mm on paper.
    pub left: f64,
    /// mm on paper.
    pub right: f64,
}

impl Frame {
    /// x on paper.
    pub fn x(self, x: f64) -> f64 {
        let length = self.to - self.from;
        let part = if length > 0.0 { (x - self.from) / length } else { 0.0 };
        self.left + (self.right - self.left) * if part.is_finite() { part.clamp(0.0, 1.0) } else { 0.0 }
    }
}

/// The y axis on paper.
#[derive(Clone, Copy, Debug)]
struct Rise {
    axis: f64,
    per_unit: f64,
}

impl Rise {
    fn y(self, value: f64) -> f64 {
        self.axis + value * self.per_unit
    }
}

/// Something to name: a point on paper and a label.
struct Named {
    point: Point,
    /// Where the label stands first, degrees clockwise from x.
    towards: f64,
    runs: Vec<Run>,
}

/// Draws a panel below `top`; returns its lowest y.
pub fn panel(canvas: &mut Canvas, panel: &Panel, plot: &Plot, frame: Frame, top: f64) -> f64 {
    // Drawn by itself at any height, then moved below what stands above it.
    let mut own = Canvas::default();
    let (rise, highest, lowest) = rise(panel);
    own.line(at(frame.left, rise.axis), at(frame.right, rise.axis), solid(NORMAL * 0.7));
    for (x, _) in &plot.supports {
        let x = frame.x(*x);
        own.line(at(x, highest), at(x, lowest), dashed(HAIR, Dash::Dotted));
    }
    let mut named = chords(&mut own, panel, frame, rise);
    for curve in &panel.curves {
        let points: Vec<Point> = finite(curve).map(|(x, y)| at(frame.x(x), rise.y(y))).collect();
        own.polyline(points, curve.style.stroke());
        for mark in curve.marks.iter().filter(|mark| mark.x.is_finite() && mark.y.is_finite()) {
            let point = at(frame.x(mark.x), rise.y(mark.y));
            own.circle(point, 0.42, solid(HAIR), Fill::Black);
            let towards = if point.y <= rise.axis { -90.0 } else { 90.0 };
            named.push(Named { point, towards, runs: vec![plain(mark.label.clone())] });
        }
    }
    name_lines(&mut own, panel, frame, rise);
    name_points(&mut own, named, frame, rise, (highest, lowest));
    let head = own.extent().map_or(highest, |extent| extent.top) - 1.6;
    let mut heading = vec![symbol(panel.symbol.clone()), plain(format!(", {}", panel.unit))];
    if !panel.note.is_empty() {
        heading.push(plain(format!(", {}", panel.note)));
    }
    own.text(at(0.0, head), Anchor::Start, heading);
    let extent = own.extent().unwrap_or(Extent { left: 0.0, top: 0.0, right: 0.0, bottom: 0.0 });
    let down = top - extent.top;
    canvas.items.extend(own.items.into_iter().map(|item| super::canvas::shifted(item, 0.0, down)));
    extent.bottom + down
}

fn finite(curve: &Curve) -> impl Iterator<Item = (f64, f64)> {
    curve.points.iter().copied().filter(|(x, y)| x.is_finite() && y.is_finite())
}

/// The y axis that shows every value and zero, and the paper it spans from top to bottom.
fn rise(panel: &Panel) -> (Rise, f64, f64) {
    let curves = panel.curves.iter().flat_map(finite).map(|(_, y)| y);
    let chords = panel.chords.iter().flat_map(|chord| [chord.from.1, chord.to.1]);
    let (least, most) = curves
        .chain(chords)
        .filter(|y| y.is_finite())
        .fold((0.0_f64, 0.0_f64), |(least, most), y| (least.min(y), most.max(y)));
    let range = most - least;
    let per_unit = if range > 0.0 { TALL / range } else { 0.0 };
    let per_unit = if panel.down { per_unit } else { -per_unit };
    let rise = Rise { axis: 0.0, per_unit };
    let (a, b) = (rise.y(least), rise.y(most));
    (rise, a.min(b) - 0.8, a.max(b) + 0.8)
}

/// Chords and the ordinates measured from them; returns what is to be named.
fn chords(canvas: &mut Canvas, panel: &Panel, frame: Frame, rise: Rise) -> Vec<Named> {
    let mut named = Vec::new();
    for chord in &panel.chords {
        let place = |(x, y): (f64, f64)| at(frame.x(x), rise.y(y));
        canvas.line(place(chord.from), place(chord.to), dashed(HAIR * 1.2, Dash::DashDot));
        if let Some((x, on_chord, on_curve, label)) = &chord.ordinate {
            let (from, to) = (place((*x, *on_chord)), place((*x, *on_curve)));
            let length = (to.y - from.y).abs();
            canvas.line(from, to, solid(NORMAL));
            if length > 3.0 {
                let down = (to.y - from.y).signum();
                canvas.head(to, (0.0, down), 1.4);
                canvas.head(from, (0.0, -down), 1.4);
            }
            let middle = at(from.x, (from.y + to.y) / 2.0);
            named.push(Named { point: middle, towards: 0.0, runs: vec![plain(label.clone())] });
        }
    }
    named
}

/// Names of lines at their right ends, each behind a sample of the line, kept apart and in order.
fn name_lines(canvas: &mut Canvas, panel: &Panel, frame: Frame, rise: Rise) {
    let mut ends: Vec<(f64, f64, f64, &Curve)> = Vec::new();
    for curve in panel.curves.iter().filter(|curve| !curve.label.is_empty()) {
        let points: Vec<(f64, f64)> = finite(curve).collect();
        let Some((x, y)) = points.last() else { continue };
        // Lines that end together are ordered by where they come from.
        let before = points.iter().rev().nth(points.len() / 10 + 1).map_or(*y, |point| point.1);
        ends.push((rise.y(*y), rise.y(before), frame.x(*x), curve));
    }
    ends.sort_by(|a, b| (thousandths(a.0)).cmp(&thousandths(b.0)).then(a.1.total_cmp(&b.1)));
    let wish: Vec<f64> = ends.iter().map(|end| end.0).collect();
    let apart = vec![PITCH; ends.len().saturating_sub(1)];
    let (low, high) = (vec![f64::NEG_INFINITY; ends.len()], vec![f64::INFINITY; ends.len()]);
    let places = spread(&wish, &apart, &low, &high).unwrap_or_else(|| wish.clone());
    let above = measure::heights(&[], LABEL).0;
    for ((y, _, x, curve), place) in ends.into_iter().zip(places) {
        let start = frame.right + 4.0;
        canvas.polyline(vec![at(x + 0.5, y), at(start, place)], solid(HAIR));
        canvas.line(at(start, place), at(start + KEY - 5.2, place), curve.style.stroke());
        canvas.text(at(frame.right + KEY, place + above / 2.0), Anchor::Start, vec![plain(curve.label.clone())]);
    }
}

fn thousandths(y: f64) -> i64 {
    (y * 1000.0).round() as i64
}

/// Labels near their points where all find room; else all in layers above and below, on poles.
fn name_points(canvas: &mut Canvas, mut named: Vec<Named>, frame: Frame, rise: Rise, (highest, lowest): (f64, f64)) {
    named.sort_by(|a, b| a.point.x.total_cmp(&b.point.x));
    let before = canvas.items.len();
    let bounds = Extent { left: 0.0, top: highest - OUTSIDE, right: frame.right + 2.0, bottom: lowest + OUTSIDE };
    let mut field = Field::new(bounds);
    canvas.items.iter().for_each(|item| field.add(item));
    let upwards = |point: Point| point.y <= rise.axis;
    if named.iter().all(|name| field.place(canvas, name.point, name.towards, &name.runs)) {
        return;
    }
    canvas.items.truncate(before);
    for up in [true, false] {
        let notes: Vec<Note> = named
            .iter()
            .filter(|name| upwards(name.point) == up)
            .map(|name| Note { x: name.point.x, start: Some(name.point.y), runs: name.runs.clone() })
            .collect();
        let edge = if up { highest - 3.0 } else { lowest + 0.6 };
        // Short of the leaders to the names of lines.
        let layer = Layer { edge, up, left: 0.0, right: frame.right + 0.2, beside: true };
        keep_clear(canvas, layer, &notes);
    }
}

/// Places a layer clear of leaders to the names of lines that end early, which may reach above or below the values.
fn keep_clear(canvas: &mut Canvas, layer: Layer, notes: &[Note]) {
    let others = canvas.items.iter().map(Extent::of).filter(|extent| extent.left < layer.right + 0.2);
    let edge = others.fold(
        layer.edge,
        |edge, other| {
            if layer.up { edge.min(other.top - 2.6) } else { edge.max(other.bottom + 0.4) }
        },
    );
    annotate(canvas, notes, Layer { edge, ..layer });
}
