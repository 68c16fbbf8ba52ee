//! Placed primitives: what a drawing is made of.
//!
//! Lengths are millimetres, the origin is the top left corner, y runs downwards; angles are degrees, clockwise from the
//! direction of x as seen on paper. Every coordinate of a finished drawing is a multiple of 0.001 mm, so that the same
//! member gives the same drawing to the byte.

use serde::Serialize;

/// A finished drawing.
#[derive(Clone, Debug, PartialEq, Serialize)]
pub struct Drawing {
    /// Width, mm.
    pub width: f64,
    /// Height, mm.
    pub height: f64,
    /// What it shows, in words: its alternative text.
    pub alt: String,
    /// What is drawn; later items lie over earlier ones.
    pub items: Vec<Item>,
}

/// A place on the drawing, mm.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub struct Point {
    /// From the left edge.
    pub x: f64,
    /// From the top edge.
    pub y: f64,
}

/// Shorthand for a [`Point`].
pub const fn at(x: f64, y: f64) -> Point {
    Point { x, y }
}

/// How a line is drawn; always black, with round caps and joins.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
pub struct Stroke {
    /// Weight, mm.
    pub weight: f64,
    /// Dashes.
    pub dash: Dash,
}

/// Patterns of dashes.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize)]
#[serde(rename_all = "snake_case")]
pub enum Dash {
    /// No gaps.
    Solid,
    /// Long dashes.
    Long,
    /// Short dashes.
    Short,
    /// Dots.
    Dotted,
    /// Dash and dot.
    DashDot,
    /// Dash and two dots.
    DashDotDot,
}

impl Dash {
    /// Lengths of stroke and gap in turn, mm; empty for a line without gaps.
    pub const fn pattern(self) -> &'static [f64] {
        match self {
            Self::Solid => &[],
            Self::Long => &[2.4, 1.0],
            Self::Short => &[1.0, 0.8],
            Self::Dotted => &[0.2, 0.7],
            Self::DashDot => &[2.4, 0.7, 0.2, 0.7],
            Self::DashDotDot => &[2.4, 0.7, 0.2, 0.7, 0.2, 0.7],
        }
    }
}

/// What lies inside a closed outline.
#[derive(Clone, Copy, Debug, PartialEq, Serialize)]
#[serde(rename_all = "snake_case")]
pub enum Fill {
    /// Nothing: what lies below shows.
    None,
    /// Paper: hides what lies below.
    White,
    /// Ink: arrow heads and dots.
    Black,
    /// Thin parallel lines; [`super::hatch_lines`] gives them, clipped.
    Hatch {
        /// Direction of the lines, degrees clockwise from x.
        angle: f64,
        /// Distance between them, mm.
        spacing: f64,
    },
}

/// Which part of a text stands at its place.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Serialize)]
#[serde(rename_all = "snake_case")]
pub enum Anchor {
    /// Its left end.
    Start,
    /// Its middle.
    Middle,
    /// Its right end.
    End,
}

/// A piece of text in one style. A subscript is set at [`SUBSCRIPT_SIZE`] of the size, lowered by [`SUBSCRIPT_DROP`] of it.
#[derive(Clone, Debug, PartialEq, Eq, Serialize)]
pub struct Run {
    /// The characters.
    pub text: String,
    /// Italic: symbols of quantities.
    pub italic: bool,
    /// A subscript.
    pub sub: bool,
}

/// Size of a subscript against its text.
pub const SUBSCRIPT_SIZE: f64 = 0.7;
/// How far a subscript's baseline lies below its text's, against the size of the text.
pub const SUBSCRIPT_DROP: f64 = 0.2;

/// One primitive.
#[derive(Clone, Debug, PartialEq, Serialize)]
#[serde(tag = "kind", rename_all = "snake_case")]
pub enum Item {
    /// A straight line.
    Line {
        /// One end.
        from: Point,
        /// The other.
        to: Point,
        /// How.
        stroke: Stroke,
    },
    /// Straight lines from point to point, open.
    Polyline {
        /// The points; two or more.
        points: Vec<Point>,
        /// How.
        stroke: Stroke,
    },
    /// A closed outline.
    Polygon {
        /// The corners; three or more, the first not repeated.
        points: Vec<Point>,
        /// Its outline; `None` for arrow heads, which are ink alone.
        stroke: Option<Stroke>,
        /// Its inside.
        fill: Fill,
    },
    /// A full circle.
    Circle {
        /// Centre.
        centre: Point,
        /// Radius, mm.
        radius: f64,
        /// Its outline.
        stroke: Stroke,
        /// Its inside.
        fill: Fill,
    },
    /// Part of a circle.
    Arc {
        /// Centre.
        centre: Point,
        /// Radius, mm.
        radius: f64,
        /// Where it begins, degrees clockwise from x.
        start: f64,
        /// How far it runs, degrees; positive clockwise on paper; less than a full turn.
        sweep: f64,
        /// How.
        stroke: Stroke,
    },
    /// One line of text.
    Text {
        /// On the baseline, at the anchor.
        at: Point,
        /// What stands there.
        anchor: Anchor,
        /// Size, pt of 1/72 in.
        size_pt: f64,
        /// Width as measured in the embedded font, mm.
        width: f64,
        /// Turned a quarter counter-clockwise about its place, so that it reads from below upwards.
        turned: bool,
        /// What it says.
        runs: Vec<Run>,
    },
}

impl Item {
    /// A circle or an arc as cubic curves, each with its start, two handles and end; empty for other items.
    ///
    /// Quarter turns or less; off the true circle by less than 0.03 % of the radius.
    pub fn curves(&self) -> Vec<[Point; 4]> {
        match *self {
            Self::Circle { centre, radius, .. } => arc_curves(centre, radius, 0.0, 360.0),
            Self::Arc { centre, radius, start, sweep, .. } => arc_curves(centre, radius, start, sweep),
            _ => Vec::new(),
        }
    }
}

/// The point of a circle at an angle in degrees.
pub(super) fn on_circle(centre: Point, radius: f64, degrees: f64) -> Point {
    let turn = degrees.to_radians();
    at(centre.x + radius * libm::cos(turn), centre.y + radius * libm::sin(turn))
}

fn arc_curves(centre: Point, radius: f64, start: f64, sweep: f64) -> Vec<[Point; 4]> {
    let parts = (sweep.abs() / 90.0).ceil().max(1.0);
    let step = sweep / parts;
    let handle = radius * 4.0 / 3.0 * libm::tan(step.to_radians() / 4.0);
    let curve = |index: u32| {
        let (first, second) = (start + step * f64::from(index), start + step * f64::from(index + 1));
        let (from, to) = (on_circle(centre, radius, first), on_circle(centre, radius, second));
        let tangent = |degrees: f64| (-libm::sin(degrees.to_radians()), libm::cos(degrees.to_radians()));
        let ((ax, ay), (bx, by)) = (tangent(first), tangent(second));
        let leave = at(from.x + handle * ax, from.y + handle * ay);
        let arrive = at(to.x - handle * bx, to.y - handle * by);
        [from, leave, arrive, to].map(rounded)
    };
    (0..parts as u32).map(curve).collect()
}

/// To the nearest 0.001 mm; never a negative zero.
pub(super) fn thousandth(value: f64) -> f64 {
    (value * 1000.0).round() / 1000.0 + 0.0
}

/// Both coordinates to the nearest 0.001 mm.
pub(super) fn rounded(point: Point) -> Point {
    at(thousandth(point.x), thousandth(point.y))
}
