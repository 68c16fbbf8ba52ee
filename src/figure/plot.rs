//! Diagrams of V, M and v, stacked on one x axis.

use super::canvas::{Canvas, HAIR, LABEL, plain, solid, symbol};
use super::elevation::LEFT;
use super::measure;
use super::panel::{Frame, panel};
use super::primitive::{Anchor, Dash, Drawing, Stroke, at};
use super::rows::{Layer, Note, annotate};

/// Diagrams over one stretch of the member.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Plot {
    /// What the diagrams are of, for the alternative text: `Combination C1`.
    pub subject: String,
    /// x of the left end of the axis, in any unit of length; all x are in the same.
    pub from: f64,
    /// x of the right end; greater.
    pub to: f64,
    /// Supports: x and name.
    pub supports: Vec<(f64, String)>,
    /// Panels from top to bottom.
    pub panels: Vec<Panel>,
}

/// One quantity over x.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Panel {
    /// Its symbol: `M`.
    pub symbol: String,
    /// The unit of all y: `kN m`.
    pub unit: String,
    /// A remark behind the unit: `sagging below the axis`; may be empty.
    pub note: String,
    /// Whether positive values are drawn downwards: deflections, and moments on the side of tension.
    pub down: bool,
    /// The lines.
    pub curves: Vec<Curve>,
    /// Chords, with what is measured from them.
    pub chords: Vec<Chord>,
}

/// One line of a panel.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Curve {
    /// What it is, said at its end: `C1`; may be empty.
    pub label: String,
    /// How it is drawn.
    pub style: Style,
    /// Points in the order of x; an upright jump is two points at one x. Values that are not finite are left out.
    pub points: Vec<(f64, f64)>,
    /// Points to name.
    pub marks: Vec<Mark>,
}

/// How a curve is drawn.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Style {
    /// The heavy line of an envelope.
    Envelope,
    /// One of twelve lines that differ by dash and weight; they repeat from there on.
    Line(usize),
}

impl Default for Style {
    fn default() -> Self {
        Self::Line(0)
    }
}

impl Style {
    /// The stroke.
    pub const fn stroke(self) -> Stroke {
        match self {
            Self::Envelope => solid(0.6),
            Self::Line(index) => {
                let dash = match index % 6 {
                    0 => Dash::Solid,
                    1 => Dash::Long,
                    2 => Dash::Short,
                    3 => Dash::DashDot,
                    4 => Dash::Dotted,
                    _ => Dash::DashDotDot,
                };
                let weight = if index % 12 < 6 { 0.25 } else { 0.42 };
                Stroke { weight, dash }
            }
        }
    }
}

/// A point of a curve with a label.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Mark {
    /// Where.
    pub x: f64,
    /// The value there.
    pub y: f64,
    /// `−224.2 at 0 m`.
    pub label: String,
}

/// The straight line between the displaced supports of a span, and the ordinate measured from it.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Chord {
    /// Left end, x and y.
    pub from: (f64, f64),
    /// Right end.
    pub to: (f64, f64),
    /// The ordinate: x, value on the chord, value on the curve, label.
    pub ordinate: Option<(f64, f64, f64, String)>,
}

/// Room between a panel's right end and the names of its lines: a fan, a sample of each line, mm.
pub(super) const KEY: f64 = 12.5;

/// Diagrams, `width` mm wide. Lines are told apart by dash and weight and named at their ends; every mark is labelled.
pub fn diagrams(plot: &Plot, width: f64) -> Drawing {
    let mut canvas = Canvas::default();
    let names = plot.panels.iter().flat_map(|panel| &panel.curves).filter(|curve| !curve.label.is_empty());
    let widest = names.map(|curve| measure::width(&[plain(curve.label.clone())], LABEL)).reduce(f64::max);
    let right = width - widest.map_or(LEFT, |widest| widest + KEY + 1.0);
    let frame = Frame { from: plot.from, to: plot.to, left: LEFT, right: right.max(LEFT + 20.0) };
    let mut low = 0.0;
    for one in &plot.panels {
        low = panel(&mut canvas, one, plot, frame, low) + 4.0;
    }
    let names: Vec<Note> =
        plot.supports.iter().map(|(x, name)| Note::new(frame.x(*x), vec![plain(name.clone())])).collect();
    // One axis for all panels.
    let axis = low - 1.4;
    for note in &names {
        canvas.line(at(note.x, axis - 0.9), at(note.x, axis + 0.9), solid(HAIR));
    }
    canvas.arrow(at(frame.left, axis), at(frame.right + 3.4, axis), HAIR, 1.6);
    canvas.text(at(frame.right + 4.4, axis + 0.6), Anchor::Start, vec![symbol("x")]);
    let layer = Layer { edge: axis + 1.0, up: false, left: 0.0, right: width, beside: false };
    annotate(&mut canvas, &names, layer);
    canvas.finish(width, alt(plot))
}

fn alt(plot: &Plot) -> String {
    let mut text = format!("Diagrams, one above the other: {}.", plot.subject);
    for panel in &plot.panels {
        let said: Vec<String> = panel
            .curves
            .iter()
            .flat_map(|curve| curve.marks.iter().map(move |mark| (curve, mark)))
            .map(|(curve, mark)| {
                let name = if curve.label.is_empty() { String::new() } else { format!("{} ", curve.label) };
                format!("{name}{}", mark.label)
            })
            .chain(
                panel
                    .chords
                    .iter()
                    .filter_map(|chord| chord.ordinate.as_ref().map(|(.., label)| format!("from the chord {label}"))),
            )
            .collect();
        let list = if said.is_empty() { "no values are named".to_owned() } else { said.join("; ") };
        text += &format!(" {} in {}: {list}.", panel.symbol, panel.unit);
    }
    text
}
