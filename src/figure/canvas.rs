//! A drawing in the making: items at any coordinates, cropped and rounded when finished.

use super::measure;
use super::primitive::{Anchor, Dash, Drawing, Fill, Item, Point, Run, Stroke, at, on_circle, rounded, thousandth};

/// Weight of what matters most: point loads, envelopes.
pub const HEAVY: f64 = 0.5;
/// Weight of outlines.
pub const NORMAL: f64 = 0.28;
/// Weight of secondary lines.
pub const LIGHT: f64 = 0.18;
/// Weight of leaders, hatching and dimension lines.
pub const HAIR: f64 = 0.12;
/// Size of labels, pt.
pub const LABEL: f64 = 7.5;
/// Distance of baselines of stacked labels, mm.
pub const ROW: f64 = 3.4;
/// Paper left above and below a drawing, mm.
const MARGIN: f64 = 0.6;

/// A solid stroke.
pub const fn solid(weight: f64) -> Stroke {
    Stroke { weight, dash: Dash::Solid }
}

/// A dashed stroke.
pub const fn dashed(weight: f64, dash: Dash) -> Stroke {
    Stroke { weight, dash }
}

/// Upright text.
pub fn plain(text: impl Into<String>) -> Run {
    Run { text: text.into(), italic: false, sub: false }
}

/// A symbol of a quantity.
pub fn symbol(text: impl Into<String>) -> Run {
    Run { text: text.into(), italic: true, sub: false }
}

/// A subscript.
pub fn sub(text: impl Into<String>) -> Run {
    Run { text: text.into(), italic: false, sub: true }
}

/// The words of runs, for alternative text.
pub fn words(runs: &[Run]) -> String {
    runs.iter().map(|run| if run.sub { format!("_{}", run.text) } else { run.text.clone() }).collect()
}

/// Items gathered so far.
#[derive(Debug, Default)]
pub struct Canvas {
    /// In the order drawn.
    pub items: Vec<Item>,
}

impl Canvas {
    /// A straight line.
    pub fn line(&mut self, from: Point, to: Point, stroke: Stroke) {
        self.items.push(Item::Line { from, to, stroke });
    }

    /// An open line through points.
    pub fn polyline(&mut self, points: Vec<Point>, stroke: Stroke) {
        if points.len() > 1 {
            self.items.push(Item::Polyline { points, stroke });
        }
    }

    /// A closed outline.
    pub fn polygon(&mut self, points: Vec<Point>, stroke: Option<Stroke>, fill: Fill) {
        self.items.push(Item::Polygon { points, stroke, fill });
    }

    /// A circle.
    pub fn circle(&mut self, centre: Point, radius: f64, stroke: Stroke, fill: Fill) {
        self.items.push(Item::Circle { centre, radius, stroke, fill });
    }

    /// A text at its baseline.
    pub fn text(&mut self, place: Point, anchor: Anchor, runs: Vec<Run>) {
        let width = measure::width(&runs, LABEL);
        self.items.push(Item::Text { at: place, anchor, size_pt: LABEL, width, turned: false, runs });
    }

    /// A text that reads upwards, its place on the baseline.
    pub fn turned(&mut self, place: Point, anchor: Anchor, runs: Vec<Run>) {
        let width = measure::width(&runs, LABEL);
        self.items.push(Item::Text { at: place, anchor, size_pt: LABEL, width, turned: true, runs });
    }

    /// A filled arrow head with its tip at `tip`, pointing along `(dx, dy)`, which has length 1.
    pub fn head(&mut self, tip: Point, (dx, dy): (f64, f64), length: f64) {
        let half = length * 0.3;
        let base = at(tip.x - dx * length, tip.y - dy * length);
        let corners = vec![tip, at(base.x - dy * half, base.y + dx * half), at(base.x + dy * half, base.y - dx * half)];
        self.polygon(corners, None, Fill::Black);
    }

    /// An arrow; its shaft ends inside the head, so that the tip stays sharp.
    pub fn arrow(&mut self, from: Point, to: Point, weight: f64, head: f64) {
        let (dx, dy) = (to.x - from.x, to.y - from.y);
        let length = libm::hypot(dx, dy);
        if length < 1e-9 {
            return;
        }
        let (ux, uy) = (dx / length, dy / length);
        let head = head.min(length);
        self.line(from, at(to.x - ux * head * 0.8, to.y - uy * head * 0.8), solid(weight));
        self.head(to, (ux, uy), head);
    }

    /// A couple: part of a circle with a head at its end; `sweep` is positive clockwise.
    pub fn couple(&mut self, centre: Point, radius: f64, start: f64, sweep: f64, weight: f64) {
        let head = 1.7_f64.min(radius);
        // The head is straight, the circle is not: it is laid along the chord so that it hugs the circle.
        let turn = (head / radius).to_degrees() * sweep.signum();
        self.items.push(Item::Arc { centre, radius, start, sweep: sweep - 0.8 * turn, stroke: solid(weight) });
        let tip = on_circle(centre, radius, start + sweep);
        let base = on_circle(centre, radius, start + sweep - turn);
        let (dx, dy) = (tip.x - base.x, tip.y - base.y);
        let length = libm::hypot(dx, dy).max(1e-9);
        self.head(tip, (dx / length, dy / length), head);
    }

    /// Short slanted strokes along the ground from `from` to `to`; they lie to the left of that direction.
    pub fn ground(&mut self, from: Point, to: Point) {
        let (dx, dy) = (to.x - from.x, to.y - from.y);
        let length = libm::hypot(dx, dy);
        let count = (length / 0.8).round().max(2.0);
        let (ux, uy) = (dx / length, dy / length);
        for index in 0..count as u32 {
            let along = (f64::from(index) + 0.8) * length / count;
            let start = at(from.x + ux * along, from.y + uy * along);
            let end = at(start.x + (uy - ux) * 0.8, start.y - (ux + uy) * 0.8);
            self.line(start, end, solid(HAIR));
        }
        self.line(from, to, solid(NORMAL));
    }

    /// Extent of everything drawn: left, top, right, bottom; `None` when empty.
    pub fn extent(&self) -> Option<Extent> {
        self.items.iter().map(Extent::of).reduce(Extent::with)
    }

    /// Crops the height to what is drawn, moves it to the origin, rounds. The drawing is `width` wide, or wider where
    /// something reaches beyond either side.
    pub fn finish(self, width: f64, alt: String) -> Drawing {
        let extent = self.extent().unwrap_or(Extent { left: 0.0, top: 0.0, right: 0.0, bottom: 0.0 });
        let (dx, dy) = ((-extent.left).max(0.0), MARGIN - extent.top);
        let items = self.items.into_iter().map(|item| shifted(item, dx, dy)).collect();
        Drawing {
            width: thousandth(width.max(extent.right + dx)),
            height: thousandth(extent.bottom + dy + MARGIN),
            alt,
            items,
        }
    }
}

/// A rectangle along the axes, mm.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Extent {
    /// Least x.
    pub left: f64,
    /// Least y.
    pub top: f64,
    /// Greatest x.
    pub right: f64,
    /// Greatest y.
    pub bottom: f64,
}

impl Extent {
    /// The smallest rectangle around points.
    pub fn around<'a>(points: impl IntoIterator<Item = &'a Point>) -> Self {
        let none =
            Self { left: f64::INFINITY, top: f64::INFINITY, right: f64::NEG_INFINITY, bottom: f64::NEG_INFINITY };
        points.into_iter().fold(none, |sum, p| sum.with(Self { left: p.x, top: p.y, right: p.x, bottom: p.y }))
    }

    /// The smallest rectangle around both.
    pub fn with(self, other: Self) -> Self {
        Self {
            left: self.left.min(other.left),
            top: self.top.min(other.top),
            right: self.right.max(other.right),
            bottom: self.bottom.max(other.bottom),
        }
    }

    /// Wider by `by` on every side.
    pub fn grown(self, by: f64) -> Self {
        Self { left: self.left - by, top: self.top - by, right: self.right + by, bottom: self.bottom + by }
    }

    /// Whether both share more than an edge.
    pub fn overlaps(self, other: Self) -> bool {
        self.left < other.right && other.left < self.right && self.top < other.bottom && other.top < self.bottom
    }

    /// Of one item, with the weight of its lines.
    pub fn of(item: &Item) -> Self {
        match item {
            Item::Line { from, to, stroke } => Self::around([from, to]).grown(stroke.weight / 2.0),
            Item::Polyline { points, stroke } => Self::around(points).grown(stroke.weight / 2.0),
            Item::Polygon { points, stroke, .. } => {
                Self::around(points).grown(stroke.map_or(0.0, |stroke| stroke.weight / 2.0))
            }
            Item::Circle { centre, radius, stroke, .. } => Self::around([centre]).grown(radius + stroke.weight / 2.0),
            Item::Arc { stroke, .. } => {
                let curves = item.curves();
                Self::around(curves.iter().flatten()).grown(stroke.weight / 2.0)
            }
            Item::Text { at, anchor, size_pt, width, turned, runs } => {
                text_box(*at, *anchor, *width, measure::heights(runs, *size_pt), *turned)
            }
        }
    }
}

/// The rectangle that a text takes.
pub fn text_box(place: Point, anchor: Anchor, width: f64, (above, below): (f64, f64), turned: bool) -> Extent {
    let before = match anchor {
        Anchor::Start => 0.0,
        Anchor::Middle => width / 2.0,
        Anchor::End => width,
    };
    if turned {
        Extent {
            left: place.x - above,
            right: place.x + below,
            top: place.y + before - width,
            bottom: place.y + before,
        }
    } else {
        Extent {
            left: place.x - before,
            right: place.x - before + width,
            top: place.y - above,
            bottom: place.y + below,
        }
    }
}

/// The item moved and rounded.
pub fn shifted(item: Item, dx: f64, dy: f64) -> Item {
    let go = |p: Point| rounded(at(p.x + dx, p.y + dy));
    match item {
        Item::Line { from, to, stroke } => Item::Line { from: go(from), to: go(to), stroke },
        Item::Polyline { points, stroke } => Item::Polyline { points: points.into_iter().map(go).collect(), stroke },
        Item::Polygon { points, stroke, fill } => {
            Item::Polygon { points: points.into_iter().map(go).collect(), stroke, fill }
        }
        Item::Circle { centre, radius, stroke, fill } => {
            Item::Circle { centre: go(centre), radius: thousandth(radius), stroke, fill }
        }
        Item::Arc { centre, radius, start, sweep, stroke } => Item::Arc {
            centre: go(centre),
            radius: thousandth(radius),
            start: thousandth(start),
            sweep: thousandth(sweep),
            stroke,
        },
        Item::Text { at, anchor, size_pt, width, turned, runs } => {
            Item::Text { at: go(at), anchor, size_pt, width: thousandth(width), turned, runs }
        }
    }
}
