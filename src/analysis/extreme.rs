//! Greatest and least values, exact: at ends, at jumps, and where the derivative vanishes.

use super::action::Action;
use super::field::{Field, Values, cut_at};
use super::model::Piece;
use super::own::Cut;
use super::poly::{Poly, bisect};
use super::stiffness::{Stiffness, Tapered};
use crate::member::{Place, Span, TaperLaw};

/// Where a value was found.
#[derive(Clone, Copy, Debug, PartialEq, Default)]
pub struct Spot {
    /// Index of the piece.
    pub piece: usize,
    /// Distance from the piece's left end, m.
    pub x: f64,
    /// On which side of the place, where the value jumps.
    pub side: Side,
}

/// A side of a place.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Default)]
pub enum Side {
    /// Just left.
    #[default]
    Left,
    /// Just right.
    Right,
}

/// A value and its place.
#[derive(Clone, Copy, Debug, PartialEq, Default)]
pub struct Extreme {
    /// The value in SI.
    pub value: f64,
    /// Place from the member's left end, m.
    pub at: f64,
    /// The same as a piece and a distance.
    pub spot: Spot,
}

/// The greatest and the least of something.
#[derive(Clone, Copy, Debug, PartialEq, Default)]
pub struct Range {
    /// The greatest.
    pub max: Extreme,
    /// The least.
    pub min: Extreme,
}

/// Extremes over the whole member.
#[derive(Clone, Copy, Debug, PartialEq, Default)]
pub struct Extremes {
    /// Of the bending moment.
    pub moment: Range,
    /// Of the shear.
    pub shear: Range,
    /// Of the deflection.
    pub deflection: Range,
}

/// A stretch of a piece without a jump inside.
struct Stretch {
    piece: usize,
    from: f64,
    length: f64,
}

/// The leftmost place within 1e-9 of the greatest (least) value, as the results' contract has it.
fn pick(candidates: &[Extreme], sign: f64) -> Extreme {
    let best = candidates.iter().map(|extreme| sign * extreme.value).fold(f64::NEG_INFINITY, f64::max);
    let scale = candidates.iter().map(|extreme| extreme.value.abs()).fold(0.0, f64::max);
    let near = |extreme: &&Extreme| sign * extreme.value >= best - 1e-9 * best.abs().max(1e-6 * scale);
    candidates.iter().filter(near).min_by(|a, b| a.at.total_cmp(&b.at)).copied().unwrap_or_default()
}

fn range(candidates: &[Extreme]) -> Range {
    Range { max: pick(candidates, 1.0), min: pick(candidates, -1.0) }
}

impl Field<'_> {
    /// Extremes over the whole member.
    pub fn extremes(&self) -> Extremes {
        let (mut moments, mut shears, mut deflections) = (Vec::new(), Vec::new(), Vec::new());
        for stretch in self.stretches(0..self.model.pieces.len()) {
            let Some(piece) = self.model.pieces.get(stretch.piece) else { continue };
            let (shear, moment) = self.polynomials(&stretch, piece);
            let ends = [(0.0, Side::Right), (stretch.length, Side::Left)];
            let within = |list: Vec<f64>| ends.into_iter().chain(list.into_iter().map(|x| (x, Side::Left)));
            for (x, side) in within(moment.derivative().crossings(stretch.length)) {
                moments.push(self.found(&stretch, x, side, |_, cut| cut.moment));
            }
            for (x, side) in within(shear.derivative().crossings(stretch.length)) {
                shears.push(self.found(&stretch, x, side, |_, cut| cut.shear));
            }
            deflections.extend(self.level_places(&stretch, piece, 0.0, &shear, &moment));
        }
        Extremes { moment: range(&moments), shear: range(&shears), deflection: range(&deflections) }
    }

    /// The deflection of greatest size over a span, from the line `base + slope * (x - start of the span)`.
    pub fn greatest_from(&self, span: &Span, base: f64, slope: f64) -> Extreme {
        let first = self.model.piece_at(span.from);
        let last = self.model.pieces.partition_point(|piece| piece.to < span.to) + 1;
        let mut candidates = Vec::new();
        for stretch in self.stretches(first..last.min(self.model.pieces.len())) {
            let Some(piece) = self.model.pieces.get(stretch.piece) else { continue };
            let (shear, moment) = self.polynomials(&stretch, piece);
            let offset = piece.from.beyond(span.from);
            candidates.extend(self.level_places(&stretch, piece, slope, &shear, &moment).into_iter().map(|found| {
                let line = base + slope * (offset + found.spot.x);
                Extreme { value: found.value - line, ..found }
            }));
        }
        let range = range(&candidates);
        let (up, down) = (range.min.value.abs(), range.max.value.abs());
        let close = (up - down).abs() <= 1e-9 * up.max(down);
        let up_first = if close { range.min.at < range.max.at } else { up > down };
        if up_first { range.min } else { range.max }
    }

    fn found(&self, stretch: &Stretch, x: f64, side: Side, value: impl Fn(&Values, Cut) -> f64) -> Extreme {
        let x = stretch.from + x;
        let values = self.inside(stretch.piece, x);
        let cut = if side == Side::Left { values.left } else { values.right };
        let start = self.model.pieces.get(stretch.piece).map_or(0.0, |piece| piece.x);
        Extreme { value: value(&values, cut), at: start + x, spot: Spot { piece: stretch.piece, x, side } }
    }

    /// Deflections at the ends of a stretch and wherever dv/dx equals `slope` inside it.
    fn level_places(&self, stretch: &Stretch, piece: &Piece, slope: f64, shear: &Poly, moment: &Poly) -> Vec<Extreme> {
        let strain = self.strain(stretch);
        let turning = bend_polynomial(&piece.stiffness, stretch.from, strain, shear, moment).crossings(stretch.length);
        let ends: Vec<f64> = [0.0].into_iter().chain(turning).chain([stretch.length]).collect();
        let pairs = ends.iter().zip(ends.iter().skip(1));
        let inner: Vec<f64> = match piece.stiffness {
            Stiffness::Constant { ei, ga, depth } => {
                let start = self.inside(stretch.piece, stretch.from);
                let curvature = if strain == 0.0 { 0.0 } else { strain / depth };
                let bend = Poly(moment.0.iter().map(|m| -m / ei).collect()).plus(&Poly(vec![curvature]));
                let shears = ga.map_or(Poly(vec![0.0]), |ga| Poly(shear.0.iter().map(|v| v / ga).collect()));
                let rise = Poly(vec![start.psi - slope]).plus(&bend.integral()).plus(&shears);
                pairs.filter_map(|(from, to)| bisect(*from, *to, |x| rise.at(x))).collect()
            }
            Stiffness::Tapered(_) => pairs
                .filter_map(|(from, to)| {
                    bisect(*from, *to, |x| self.inside(stretch.piece, stretch.from + x).slope_right - slope)
                })
                .collect(),
        };
        [0.0, stretch.length]
            .into_iter()
            .chain(inner.into_iter().filter(|x| *x > 0.0 && *x < stretch.length))
            .map(|x| self.found(stretch, x, Side::Left, |values, _| values.v))
            .collect()
    }

    /// Imposed strain difference over a stretch.
    fn strain(&self, stretch: &Stretch) -> f64 {
        let middle = stretch.from + stretch.length / 2.0;
        let gradients = self.actions_on(stretch.piece).iter().filter_map(|action| match *action {
            Action::Gradient { strain, a, c } if a <= middle && middle <= a + c => Some(strain),
            _ => None,
        });
        gradients.sum()
    }

    /// Shear and moment over a stretch as polynomials from its left end.
    fn polynomials(&self, stretch: &Stretch, piece: &Piece) -> (Poly, Poly) {
        let actions = self.actions_on(stretch.piece);
        let cut = cut_at(piece, self.ends(stretch.piece), actions, stretch.from, false);
        let middle = stretch.from + stretch.length / 2.0;
        let (mut w, mut dw) = (0.0, 0.0);
        for action in actions {
            if let Action::Spread { w0, w1, a, c } = *action
                && a <= middle
                && middle <= a + c
            {
                let slope = (w1 - w0) / c;
                w += w0 + slope * (stretch.from - a);
                dw += slope;
            }
        }
        let shear = Poly(vec![-w, -dw]).integral().plus(&Poly(vec![cut.shear]));
        let moment = shear.integral().plus(&Poly(vec![cut.moment]));
        (shear, moment)
    }

    fn stretches(&self, pieces: std::ops::Range<usize>) -> Vec<Stretch> {
        let mut list = Vec::new();
        for index in pieces {
            let Some(piece) = self.model.pieces.get(index) else { continue };
            let mut ends = vec![0.0, piece.length];
            for action in self.actions_on(index) {
                match *action {
                    Action::Force { a, .. } | Action::Couple { a, .. } => ends.push(a),
                    Action::Spread { a, c, .. } | Action::Gradient { a, c, .. } => ends.extend([a, a + c]),
                }
            }
            ends.retain(|end| (0.0..=piece.length).contains(end));
            ends.sort_by(f64::total_cmp);
            ends.dedup_by(|right, left| *right - *left <= 1e-12 * piece.length);
            // The piece's own end is kept to the last bit: what acts at the cut stands there.
            if let Some(last) = ends.last_mut() {
                *last = piece.length;
            }
            let pairs = ends.iter().zip(ends.iter().skip(1));
            list.extend(pairs.map(|(from, to)| Stretch { piece: index, from: *from, length: to - from }));
        }
        list
    }
}

/// A polynomial with the sign of v'' over a stretch that begins at the distance `from` of its piece.
fn bend_polynomial(stiffness: &Stiffness, from: f64, strain: f64, shear: &Poly, moment: &Poly) -> Poly {
    let minus = |poly: &Poly| Poly(poly.0.iter().map(|c| -c).collect());
    match stiffness {
        Stiffness::Constant { ei, ga, depth } => {
            let curvature = if strain == 0.0 { 0.0 } else { strain / depth * ei };
            let shears =
                ga.map_or(Poly(vec![0.0]), |ga| Poly(shear.derivative().0.iter().map(|c| c * ei / ga).collect()));
            minus(moment).plus(&Poly(vec![curvature])).plus(&shears)
        }
        Stiffness::Tapered(tapered) => tapered_bend(tapered, from, strain, shear, moment),
    }
}

/// v'' times EI (times depth, times GA² where they change too): all polynomials, all positive.
fn tapered_bend(tapered: &Tapered, from: f64, strain: f64, shear: &Poly, moment: &Poly) -> Poly {
    let line = |left: f64, right: f64| {
        let slope = (right - left) / tapered.length;
        Poly(vec![left + slope * (tapered.offset + from), slope])
    };
    let ei = match tapered.law {
        TaperLaw::Linear => line(tapered.ei0, tapered.ei1),
        TaperLaw::Cubic => {
            let root = line(1.0, tapered.root);
            Poly(vec![tapered.ei0]).times(&root.times(&root).times(&root))
        }
    };
    let mut bend = Poly(moment.0.iter().map(|m| -m).collect());
    if strain != 0.0 {
        bend =
            bend.times(&line(tapered.depth.0, tapered.depth.1)).plus(&Poly(ei.0.iter().map(|e| e * strain).collect()));
    }
    if let Some((left, right)) = tapered.ga {
        let ga = line(left, right);
        let change = shear.derivative().times(&ga).plus(&Poly(vec![-1.0]).times(&shear.times(&ga.derivative())));
        let rest = if strain == 0.0 { ei } else { ei.times(&line(tapered.depth.0, tapered.depth.1)) };
        bend = bend.times(&ga.times(&ga)).plus(&change.times(&rest));
    }
    bend
}

/// Deflection at the places that a span's deflections are measured from: its left end, its right end.
pub fn span_ends(field: &Field<'_>, span: &Span) -> (f64, f64) {
    let v = |place: Place| field.at(place).v;
    (v(span.from), v(span.to))
}
