//! Labels placed freely: tried about their points and pushed outwards until they meet no line and no other label.

use super::canvas::{Canvas, Extent, HAIR, LABEL, solid, text_box};
use super::collide::{Strokes, crosses};
use super::measure;
use super::primitive::{Anchor, Item, Point, Run, at};

/// Paper kept between a label and lines, mm.
const CLEAR: f64 = 0.4;
/// Paper kept between labels, mm.
const APART: f64 = 0.7;
/// Distances tried from the point, mm.
const RINGS: [f64; 9] = [0.9, 1.5, 2.3, 3.3, 4.5, 6.0, 8.0, 10.5, 13.5];
/// Beyond this a leader ties the label to its point, mm.
const TIED: f64 = 1.6;
/// Directions tried, degrees away from the preferred one.
const TURNS: [f64; 16] =
    [0.0, 50.0, -50.0, 25.0, -25.0, 75.0, -75.0, 90.0, -90.0, 110.0, -110.0, 130.0, -130.0, 155.0, -155.0, 180.0];

/// A straight line with its weight.
type Weighted = (Point, Point, f64);

/// What labels must keep clear of, sorted into columns of 2 mm.
#[derive(Debug)]
pub struct Field {
    columns: Vec<Vec<Weighted>>,
    boxes: Vec<Extent>,
    bounds: Extent,
}

const COLUMN: f64 = 2.0;

impl Field {
    /// An empty field; labels stay within `bounds`.
    pub fn new(bounds: Extent) -> Self {
        let count = ((bounds.right - bounds.left) / COLUMN).ceil().clamp(1.0, 1000.0) as usize;
        Self { columns: vec![Vec::new(); count + 1], boxes: Vec::new(), bounds }
    }

    /// Adds an item as an obstacle.
    pub fn add(&mut self, item: &Item) {
        if let Item::Text { .. } = item {
            self.boxes.push(Extent::of(item));
            return;
        }
        let strokes = Strokes::of(item);
        for (from, to) in strokes.lines {
            for column in self.range(from.x.min(to.x), from.x.max(to.x)) {
                if let Some(lines) = self.columns.get_mut(column) {
                    lines.push((from, to, strokes.weight));
                }
            }
        }
        self.boxes.extend(strokes.ink);
    }

    fn range(&self, left: f64, right: f64) -> std::ops::RangeInclusive<usize> {
        let last = self.columns.len() - 1;
        let column = |x: f64| (((x - self.bounds.left) / COLUMN).floor().max(0.0) as usize).min(last);
        column(left)..=column(right)
    }

    fn free(&self, label: Extent) -> bool {
        if label.with(self.bounds) != self.bounds || self.boxes.iter().any(|other| label.grown(APART).overlaps(*other))
        {
            return false;
        }
        let hit = |(from, to, weight): &Weighted| crosses(label.grown(CLEAR + weight / 2.0), *from, *to);
        let range = self.range(label.left - 1.0, label.right + 1.0);
        !range.filter_map(|column| self.columns.get(column)).flatten().any(hit)
    }

    /// Places a label about a point, first in the direction `towards` (degrees clockwise from x); false, and nothing
    /// drawn, where it finds no room.
    pub fn place(&mut self, canvas: &mut Canvas, point: Point, towards: f64, runs: &[Run]) -> bool {
        let width = measure::width(runs, LABEL);
        let (above, below) = measure::heights(runs, LABEL);
        let height = above + below;
        for ring in RINGS {
            for turn in TURNS {
                let degrees = (towards + turn).to_radians();
                let (ux, uy) = (libm::cos(degrees), libm::sin(degrees));
                let reach = |u: f64, side: f64| u * ring + u.signum() * side / 2.0 * (u.abs() * 1.6).min(1.0);
                let centre = at(point.x + reach(ux, width), point.y + reach(uy, height));
                let place = at(centre.x, centre.y - height / 2.0 + above);
                let label = text_box(place, Anchor::Middle, width, (above, below), false);
                let end = at(point.x.clamp(label.left, label.right), point.y.clamp(label.top, label.bottom));
                let tied = libm::hypot(end.x - point.x, end.y - point.y) > TIED;
                if !self.free(label) || tied && self.boxes.iter().any(|b| meets(b, point, end)) {
                    continue;
                }
                if tied {
                    let (dx, dy) = (end.x - point.x, end.y - point.y);
                    let part = 1.0 - 0.4 / libm::hypot(dx, dy);
                    let leader = Item::Line {
                        from: point,
                        to: at(point.x + dx * part, point.y + dy * part),
                        stroke: solid(HAIR),
                    };
                    self.add(&leader);
                    canvas.items.push(leader);
                }
                canvas.text(place, Anchor::Middle, runs.to_vec());
                self.boxes.push(label);
                return true;
            }
        }
        false
    }
}

/// Whether a leader enters a label; the dot it starts from does not count.
fn meets(label: &Extent, from: Point, to: Point) -> bool {
    let own = label.left <= from.x && from.x <= label.right && label.top <= from.y && from.y <= label.bottom;
    !own && crosses(label.grown(0.3), from, to)
}
