//! A drawing's primitives as Typst code: curves and texts placed in a box of fixed size.

use std::fmt::Write;

use super::prose::literal;
use crate::figure::{Anchor, Drawing, Fill, Item, Point, Run, Stroke, hatch_lines};

/// Weight of a hatch, mm.
const HATCH: Stroke = Stroke { weight: 0.1, dash: crate::figure::Dash::Solid };

/// The drawing as an expression that calls `picture`, `draw` and `label` of the style file.
///
/// Neighbouring lines of one stroke become one curve, which keeps the page light.
pub fn code(drawing: &Drawing) -> String {
    let mut writer = Writer::default();
    for item in &drawing.items {
        writer.item(item);
    }
    writer.flush();
    let strokes: String = writer
        .strokes
        .iter()
        .enumerate()
        .map(|(index, stroke)| format!("let s{index} = {};", written(*stroke)))
        .collect();
    format!(
        "picture({}, {}, {}, {{{strokes}{}}})",
        mm(drawing.width),
        mm(drawing.height),
        literal(&drawing.alt),
        writer.out
    )
}

#[derive(Default)]
struct Writer {
    out: String,
    strokes: Vec<Stroke>,
    pending: Option<(usize, String)>,
}

impl Writer {
    fn item(&mut self, item: &Item) {
        match item {
            Item::Line { from, to, stroke } => self.open(&[*from, *to], *stroke),
            Item::Polyline { points, stroke } => self.open(points, *stroke),
            Item::Polygon { points, stroke, fill } => {
                let mut path = path(points);
                path.push_str("curve.close(),");
                self.filled(&path, *stroke, *fill, points);
            }
            Item::Circle { stroke, fill, .. } => {
                let curves = item.curves();
                let mut path = curved(&curves);
                path.push_str("curve.close(),");
                let outline: Vec<Point> = curves.iter().map(|[from, ..]| *from).collect();
                self.filled(&path, Some(*stroke), *fill, &outline);
            }
            Item::Arc { stroke, .. } => {
                let path = curved(&item.curves());
                self.stroked(&path, *stroke);
            }
            Item::Text { at, anchor, size_pt, width, turned, runs } => {
                let shift = match anchor {
                    Anchor::Start => 0.0,
                    Anchor::Middle => width / 2.0,
                    Anchor::End => *width,
                };
                self.text(*at, shift, *size_pt, *turned, runs);
            }
        }
    }

    fn open(&mut self, points: &[Point], stroke: Stroke) {
        self.stroked(&path(points), stroke);
    }

    /// Adds an open path to the pending curve where the stroke is the same.
    fn stroked(&mut self, path: &str, stroke: Stroke) {
        let index = self.stroke(stroke);
        match &mut self.pending {
            Some((pending, text)) if *pending == index => text.push_str(path),
            _ => {
                self.flush();
                self.pending = Some((index, path.to_owned()));
            }
        }
    }

    fn filled(&mut self, path: &str, stroke: Option<Stroke>, fill: Fill, outline: &[Point]) {
        let ink = match fill {
            Fill::None | Fill::Hatch { .. } => "none",
            Fill::White => "white",
            Fill::Black => "black",
        };
        if let Fill::Hatch { angle, spacing } = fill {
            for (from, to) in hatch_lines(outline, angle, spacing) {
                self.open(&[from, to], HATCH);
            }
        }
        match (stroke, ink) {
            (Some(stroke), "none") => self.stroked(path, stroke),
            _ => {
                self.flush();
                let name = stroke.map_or_else(|| "none".to_owned(), |stroke| format!("s{}", self.stroke(stroke)));
                let _ = write!(self.out, "draw({name}, {ink}, {path});");
            }
        }
    }

    /// A line of text whose left end lies `shift` before its place, along the line.
    fn text(&mut self, at: Point, shift: f64, size_pt: f64, turned: bool, runs: &[Run]) {
        self.flush();
        let (x, y) = if turned { (at.x, at.y + shift) } else { (at.x - shift, at.y) };
        let words: Vec<String> = runs
            .iter()
            .map(|run| {
                let text = literal(&run.text);
                let text = if run.italic { format!("emph({text})") } else { text };
                if run.sub { format!("lowered({text})") } else { text }
            })
            .collect();
        let body = format!("{{{}}}", words.join(";"));
        let _ = write!(self.out, "label({}, {}, {}pt, {turned}, {body});", mm(x), mm(y), plain(size_pt));
    }

    fn stroke(&mut self, stroke: Stroke) -> usize {
        if let Some(index) = self.strokes.iter().position(|known| *known == stroke) {
            return index;
        }
        self.strokes.push(stroke);
        self.strokes.len() - 1
    }

    fn flush(&mut self) {
        if let Some((index, path)) = self.pending.take() {
            let _ = write!(self.out, "draw(s{index}, none, {path});");
        }
    }
}

fn path(points: &[Point]) -> String {
    let mut out = String::new();
    for (index, point) in points.iter().enumerate() {
        let verb = if index == 0 { "move" } else { "line" };
        let _ = write!(out, "curve.{verb}({}),", place(*point));
    }
    out
}

fn curved(curves: &[[Point; 4]]) -> String {
    let mut out = String::new();
    for (index, [from, leave, arrive, to]) in curves.iter().enumerate() {
        if index == 0 {
            let _ = write!(out, "curve.move({}),", place(*from));
        }
        let _ = write!(out, "curve.cubic({}, {}, {}),", place(*leave), place(*arrive), place(*to));
    }
    out
}

fn place(point: Point) -> String {
    format!("({}, {})", mm(point.x), mm(point.y))
}

fn written(stroke: Stroke) -> String {
    let weight = mm(stroke.weight);
    let pattern: Vec<String> = stroke.dash.pattern().iter().map(|length| mm(*length)).collect();
    let dash = if pattern.is_empty() { "none".to_owned() } else { format!("({})", pattern.join(", ")) };
    format!("pen({weight}, {dash})")
}

fn mm(value: f64) -> String {
    format!("{}mm", plain(value))
}

/// Up to three decimals, none that says nothing; never a negative zero.
pub fn plain(value: f64) -> String {
    let text = format!("{value:.3}");
    let text = text.trim_end_matches('0').trim_end_matches('.');
    if text == "-0" { "0".to_owned() } else { text.to_owned() }
}
