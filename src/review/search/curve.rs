//! Greatest and least values over a span of a sum of states.
//!
//! Between neighbouring cuts and ends of loads everything that runs along the member is a polynomial (a smooth function on a
//! taper): its values at a few Chebyshev points say all about it, and they add up.

use std::rc::Rc;

use crate::analysis::action::Action;
use crate::analysis::model::Piece;
use crate::analysis::stiffness::Stiffness;
use crate::analysis::{Analysis, Field, Model};
use crate::member::{Measured, Span, TaperLaw};
use crate::review::ask::Along;

/// Points of one span.
#[derive(Clone, Debug)]
pub struct Shape {
    /// Stretches: first point, number of points.
    stretches: Vec<(usize, usize)>,
    /// Points on [0, 1] of a stretch of constant section.
    places: Vec<f64>,
    /// Points on [0, 1] of a stretch of a taper.
    taper_places: Vec<f64>,
    /// Places of the points from the member's left end, m.
    pub at: Vec<f64>,
}

/// Points of one span and the values of every item there.
#[derive(Clone, Debug)]
pub struct Curve {
    /// Where.
    pub shape: Rc<Shape>,
    /// By item: values at all points.
    pub values: Vec<Vec<f64>>,
}

/// Points of a stretch of constant section (what runs there is of the fifth degree at most), and of a taper.
const POINTS: usize = 7;
const TAPER_POINTS: usize = 21;

/// Chebyshev points of the second kind on [0, 1].
fn point(index: usize, count: usize) -> f64 {
    let last = count.saturating_sub(1).max(1) as f64;
    (1.0 - libm::cos(std::f64::consts::PI * index as f64 / last)) / 2.0
}

/// Where a share `t` of a stretch lies, from the piece's left end.
///
/// Along a taper what bends runs like logarithms and powers of what is linear in x (I, or its cube root): shares are those of
/// its logarithm, in which all of that is smooth however strong the taper is.
fn place(piece: &Piece, stretch: &Stretch, t: f64) -> f64 {
    let share = match &piece.stiffness {
        Stiffness::Constant { .. } => t,
        Stiffness::Tapered(tapered) => {
            let ratio = match tapered.law {
                TaperLaw::Linear => tapered.ei1 / tapered.ei0,
                TaperLaw::Cubic => tapered.root,
            };
            let at = |x: f64| 1.0 + (ratio - 1.0) * (tapered.offset + x) / tapered.length;
            let growth = at(stretch.from + stretch.length) / at(stretch.from);
            if (growth - 1.0).abs() < 1e-3 { t } else { (libm::pow(growth, t) - 1.0) / (growth - 1.0) }
        }
    };
    stretch.from + stretch.length * share
}

/// A stretch of a piece without a jump inside: its piece, where it begins there, how long it is.
struct Stretch {
    piece: usize,
    from: f64,
    length: f64,
}

fn stretches(model: &Model, fields: &[Field<'_>], span: &Span) -> Vec<Stretch> {
    let mut list = Vec::new();
    for (index, piece) in model.pieces.iter().enumerate() {
        if piece.from < span.from || piece.to > span.to {
            continue;
        }
        let mut ends = vec![0.0, piece.length];
        for action in fields.iter().flat_map(|field| field.actions_on(index)) {
            match *action {
                Action::Force { a, .. } | Action::Couple { a, .. } => ends.push(a),
                Action::Spread { a, c, .. } | Action::Gradient { a, c, .. } => ends.extend([a, a + c]),
            }
        }
        ends.retain(|end| (0.0..=piece.length).contains(end));
        ends.sort_by(f64::total_cmp);
        ends.dedup_by(|right, left| *right - *left <= 1e-9 * piece.length);
        if let Some(last) = ends.last_mut() {
            *last = piece.length;
        }
        let pairs = ends.iter().zip(ends.iter().skip(1));
        list.extend(pairs.map(|(from, to)| Stretch { piece: index, from: *from, length: to - from }));
    }
    list
}

impl Curve {
    /// Values of every item (a case of the analysis) along a span.
    pub fn new(analysis: &Analysis, span: &Span, along: Along, measured: Measured) -> Self {
        let model = &analysis.model;
        let fields: Vec<Field<'_>> =
            (0..analysis.cases.len()).filter_map(|case| Field::of_case(analysis, case)).collect();
        let list = stretches(model, &fields, span);
        let count = |stretch: &Stretch| {
            let tapered =
                model.pieces.get(stretch.piece).is_some_and(|piece| matches!(piece.stiffness, Stiffness::Tapered(_)));
            if tapered { TAPER_POINTS } else { POINTS }
        };
        let mut first = 0;
        let mut ranges = Vec::new();
        for stretch in &list {
            ranges.push((first, count(stretch)));
            first += count(stretch);
        }
        let values = fields
            .iter()
            .map(|field| {
                let (base, slope) = reference(field, span, along, measured);
                let each = list.iter().zip(&ranges);
                each.flat_map(|(stretch, (_, count))| {
                    (0..*count).map(move |index| (stretch, index, *count)).collect::<Vec<_>>()
                })
                .map(|(stretch, index, count)| {
                    let Some(piece) = model.pieces.get(stretch.piece) else { return 0.0 };
                    let x = place(piece, stretch, point(index, count));
                    let values = field.inside(stretch.piece, x);
                    let left = index + 1 == count;
                    let cut = if left { values.left } else { values.right };
                    let beyond = piece.from.beyond(span.from);
                    match along {
                        Along::Shear => cut.shear,
                        Along::Moment => cut.moment,
                        Along::Slope if left => values.slope_left,
                        Along::Slope => values.slope_right,
                        Along::Deflection => values.v - base - slope * (beyond + x),
                    }
                })
                .collect()
            })
            .collect();
        let places = |count: usize| (0..count).map(|index| point(index, count)).collect();
        let each = list.iter().zip(&ranges);
        let at = each.flat_map(|(stretch, (_, count))| {
            let piece = model.pieces.get(stretch.piece);
            (0..*count)
                .map(move |index| piece.map_or(0.0, |piece| piece.x + place(piece, stretch, point(index, *count))))
        });
        let at = at.collect();
        let (places, taper_places) = (places(POINTS), places(TAPER_POINTS));
        Self { shape: Rc::new(Shape { stretches: ranges, places, taper_places, at }), values }
    }
}

impl Shape {
    /// The greatest (for `sign` 1) or the least (for -1) of values at the curve's points and between them.
    pub fn peak(&self, values: &[f64], sign: f64) -> f64 {
        let best = values.iter().map(|value| sign * value).fold(f64::NEG_INFINITY, f64::max);
        let least = values.iter().map(|value| sign * value).fold(f64::INFINITY, f64::min);
        let near = best - 0.2 * (best - least);
        let mut peak = best;
        for (first, count) in &self.stretches {
            let part = values.get(*first..first + count).unwrap_or_default();
            let places = if *count == POINTS { &self.places } else { &self.taper_places };
            let at = |index: usize| part.get(index).map_or(f64::NEG_INFINITY, |value| sign * value);
            for (index, value) in part.iter().enumerate() {
                let value = sign * value;
                let before = index.checked_sub(1).map_or(f64::NEG_INFINITY, at);
                if value >= near && best > least && value >= before && value >= at(index + 1) {
                    peak = peak.max(refined(part, places, index, sign));
                }
            }
        }
        sign * peak
    }
}

/// The line that a span's deflections are measured from: its height at the span's left end and its slope.
fn reference(field: &Field<'_>, span: &Span, along: Along, measured: Measured) -> (f64, f64) {
    if along != Along::Deflection || measured == Measured::Absolute {
        return (0.0, 0.0);
    }
    let (left, right) = (field.at(span.from).v, field.at(span.to).v);
    match (span.left, span.right) {
        (Some(_), Some(_)) => (left, (right - left) / span.to.beyond(span.from)),
        (Some(_), None) => (left, 0.0),
        (None, Some(_)) => (right, 0.0),
        (None, None) => (0.0, 0.0),
    }
}

/// The greatest value between the neighbours of a point, by golden section on the interpolating polynomial.
fn refined(part: &[f64], places: &[f64], index: usize, sign: f64) -> f64 {
    let place = |index: usize| places.get(index.min(places.len().saturating_sub(1))).copied().unwrap_or_default();
    let (mut low, mut high) = (place(index.saturating_sub(1)), place(index + 1));
    let at = |t: f64| sign * interpolated(part, places, t);
    let golden = 0.618_033_988_749_894_9;
    let (mut a, mut b) = (high - golden * (high - low), low + golden * (high - low));
    let (mut at_a, mut at_b) = (at(a), at(b));
    // The value at a flat top is right to the square of the place: 30 steps leave 1e-6 of the place.
    for _ in 0..30 {
        if at_a > at_b {
            (high, b, at_b) = (b, a, at_a);
            a = high - golden * (high - low);
            at_a = at(a);
        } else {
            (low, a, at_a) = (a, b, at_b);
            b = low + golden * (high - low);
            at_b = at(b);
        }
    }
    at_a.max(at_b)
}

/// Barycentric interpolation through the Chebyshev points.
fn interpolated(part: &[f64], places: &[f64], t: f64) -> f64 {
    let count = part.len();
    let (mut top, mut bottom, mut sign) = (0.0, 0.0, 1.0);
    for (index, value) in part.iter().enumerate() {
        let distance = t - places.get(index).copied().unwrap_or_default();
        if distance == 0.0 {
            return *value;
        }
        let end = index == 0 || index + 1 == count;
        let weight = sign * if end { 0.5 } else { 1.0 } / distance;
        top += weight * value;
        bottom += weight;
        sign = -sign;
    }
    top / bottom
}
