//! Collisions of a finished drawing: what overlaps a label, and what leaves the paper.

use super::canvas::{Extent, words};
use super::hatch_lines;
use super::primitive::{Drawing, Fill, Item, Point};

/// Clear paper that a label keeps from any line, mm.
pub const CLEAR: f64 = 0.12;

/// One collision.
#[derive(Clone, Debug, PartialEq)]
pub struct Collision {
    /// What kind.
    pub kind: CollisionKind,
    /// What the label says; empty where a line leaves the paper.
    pub label: String,
    /// Index of the item.
    pub item: usize,
    /// Index of the other item; the same as `item` where one leaves the paper.
    pub other: usize,
}

/// Kinds of collision.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum CollisionKind {
    /// Two labels.
    TextText,
    /// A label and a line, an arc, a circle or a hatch line.
    TextLine,
    /// A label and the edge or the ink of a closed outline.
    TextOutline,
    /// Outside the paper.
    Outside,
}

impl Drawing {
    /// Every overlap of a label with another label or a line nearer than 0.12 mm, and everything outside the paper.
    ///
    /// Lines may cross lines. Labels are taken as rectangles from the height of capitals to the depth of descenders.
    pub fn collisions(&self) -> Vec<Collision> {
        let mut found = Vec::new();
        let paper = Extent { left: 0.0, top: 0.0, right: self.width, bottom: self.height }.grown(0.002);
        for (item, drawn) in self.items.iter().enumerate() {
            let extent = Extent::of(drawn);
            if extent.with(paper) != paper || !extent.left.is_finite() {
                found.push(Collision { kind: CollisionKind::Outside, label: said(drawn), item, other: item });
            }
            if matches!(drawn, Item::Text { .. }) {
                let against = |(other, thing): (usize, &Item)| {
                    if other == item {
                        return None;
                    }
                    hit(extent, thing, other > item).map(|kind| Collision { kind, label: said(drawn), item, other })
                };
                found.extend(self.items.iter().enumerate().filter_map(against));
            }
        }
        found
    }
}

fn said(item: &Item) -> String {
    if let Item::Text { runs, .. } = item { words(runs) } else { String::new() }
}

/// How a thing hits a label's rectangle. Two labels are told once: by the earlier one.
fn hit(label: Extent, thing: &Item, later: bool) -> Option<CollisionKind> {
    if let Item::Text { .. } = thing {
        return (later && label.overlaps(Extent::of(thing))).then_some(CollisionKind::TextText);
    }
    if !label.grown(CLEAR).overlaps(Extent::of(thing)) {
        return None;
    }
    let strokes = Strokes::of(thing);
    let near = label.grown(CLEAR + strokes.weight / 2.0);
    let outline = matches!(thing, Item::Polygon { .. });
    let kind = if outline { CollisionKind::TextOutline } else { CollisionKind::TextLine };
    let crossed = strokes.lines.iter().any(|(from, to)| crosses(near, *from, *to));
    (crossed || strokes.ink.is_some_and(|ink| near.overlaps(ink))).then_some(kind)
}

/// The straight lines an item is made of; curves as short chords.
pub struct Strokes {
    /// From and to.
    pub lines: Vec<(Point, Point)>,
    /// Their weight, mm.
    pub weight: f64,
    /// The rectangle around a part filled with ink.
    pub ink: Option<Extent>,
}

impl Strokes {
    /// Of an item; none for a text.
    pub fn of(item: &Item) -> Self {
        match item {
            Item::Line { from, to, stroke } => Self { lines: vec![(*from, *to)], weight: stroke.weight, ink: None },
            Item::Polyline { points, stroke } => {
                let lines = points.iter().copied().zip(points.iter().copied().skip(1)).collect();
                Self { lines, weight: stroke.weight, ink: None }
            }
            Item::Polygon { points, stroke, fill } => {
                let next = points.iter().copied().cycle().skip(1);
                let mut lines: Vec<_> = points.iter().copied().zip(next).collect();
                if let Fill::Hatch { angle, spacing } = fill {
                    lines.extend(hatch_lines(points, *angle, *spacing));
                }
                let ink = matches!(fill, Fill::Black).then(|| Extent::around(points));
                Self { lines, weight: stroke.map_or(0.0, |stroke| stroke.weight), ink }
            }
            Item::Circle { stroke, fill, .. } => {
                let ink = matches!(fill, Fill::Black).then(|| Extent::of(item));
                Self { lines: chords(item), weight: stroke.weight, ink }
            }
            Item::Arc { stroke, .. } => Self { lines: chords(item), weight: stroke.weight, ink: None },
            Item::Text { .. } => Self { lines: Vec::new(), weight: 0.0, ink: None },
        }
    }
}

/// Cubic curves as eight chords each.
fn chords(item: &Item) -> Vec<(Point, Point)> {
    let mut lines = Vec::new();
    for [a, b, c, d] in item.curves() {
        let place = |t: f64| {
            let s = 1.0 - t;
            let mix = |a: f64, b: f64, c: f64, d: f64| {
                s * s * s * a + 3.0 * s * s * t * b + 3.0 * s * t * t * c + t * t * t * d
            };
            Point { x: mix(a.x, b.x, c.x, d.x), y: mix(a.y, b.y, c.y, d.y) }
        };
        lines.extend((0..8).map(|index| (place(f64::from(index) / 8.0), place(f64::from(index + 1) / 8.0))));
    }
    lines
}

/// Whether a straight line enters a rectangle (clipping by parameters, after Liang and Barsky).
pub fn crosses(area: Extent, from: Point, to: Point) -> bool {
    let (dx, dy) = (to.x - from.x, to.y - from.y);
    let sides =
        [(-dx, from.x - area.left), (dx, area.right - from.x), (-dy, from.y - area.top), (dy, area.bottom - from.y)];
    let (mut enter, mut leave) = (0.0_f64, 1.0_f64);
    for (direction, distance) in sides {
        if direction == 0.0 {
            if distance <= 0.0 {
                return false;
            }
        } else if direction < 0.0 {
            enter = enter.max(distance / direction);
        } else {
            leave = leave.min(distance / direction);
        }
    }
    enter < leave
}
