//! How the figure of a claim follows from the items: a sum, a peak of a sum, a share of an allowable deflection.

use super::curve::Curve;
use super::items::Items;
use crate::analysis::{Analysis, Field};
use crate::member::{Measured, Member, Span};
use crate::review::ask::{Along, Ask, Of, Question, evaluate};
use crate::review::mistake::{Moves, Reading};
use crate::verdict;

/// A figure as a function of how often each item counts.
#[derive(Clone, Debug)]
pub enum Gauge {
    /// By item, what it adds.
    Sum {
        /// By item.
        values: Vec<f64>,
        /// Whether a figure below zero is read as zero.
        clipped: bool,
    },
    /// The greatest or the least along a span.
    Peak {
        /// Where and what.
        curve: Curve,
        /// 1 for the greatest, -1 for the least.
        sign: f64,
    },
    /// The greatest share of an allowable deflection, or whether all are within it.
    Shares {
        /// Deflections and what is allowed.
        list: Vec<(Curve, f64)>,
        /// Whether the verdict is asked rather than the share.
        verdict: bool,
    },
    /// A figure that no load changes.
    Fixed(f64),
    /// The member has no such figure.
    Absent,
}

/// A solved member whose cases are the items, and what is needed to ask it.
pub struct Ground<'a> {
    /// The member as the checker has it.
    pub member: &'a Member,
    /// Its analysis.
    pub analysis: &'a Analysis,
    /// The items' member after the change.
    pub changed: &'a Member,
    /// Its analysis: one case an item.
    pub solved: &'a Analysis,
    /// Where places went.
    pub moves: Moves,
}

/// The same question on the changed member.
pub fn moved(question: &Question, moves: &Moves) -> Question {
    let mut moved = question.clone();
    if let Ask::Station { at, .. } = &mut moved.ask {
        *at = moves.place(*at);
    }
    moved
}

/// Whether the question asks for what a support took before the change and does not take any more: the answer is zero.
pub fn gone(question: &Question, before: &Member, after: &Member) -> bool {
    let lost = |name: &str, rotation: bool| {
        let holds = |member: &Member| {
            let support = member.supports.iter().find(|support| support.name == name);
            support.is_some_and(|s| if rotation { s.holds_rotation() } else { s.holds_deflection() })
        };
        holds(before) && !holds(after)
    };
    match &question.ask {
        Ask::Reaction { support } => lost(support, false),
        Ask::ReactionMoment { support } => lost(support, true),
        Ask::Redundant { name } => match name.split_once('.') {
            Some(("R", support)) => lost(support, false),
            Some(("M", support)) => {
                let end = after.end();
                let at_end = after.supports.iter().any(|s| s.name == support && (s.at == end || s.at.x() == 0.0));
                at_end && lost(support, true)
            }
            _ => false,
        },
        _ => false,
    }
}

impl Ground<'_> {
    /// How the question is answered here.
    pub fn gauge(&self, question: &Question) -> Gauge {
        let count = self.solved.cases.len();
        if gone(question, self.member, self.changed) {
            return Gauge::Sum { values: vec![0.0; count], clipped: false };
        }
        match &question.ask {
            Ask::Extreme { along, span, max, measured } => {
                let Some(span) = self.span(span) else { return Gauge::Absent };
                let curve = Curve::new(self.solved, span, *along, *measured);
                Gauge::Peak { curve, sign: if *max { 1.0 } else { -1.0 } }
            }
            Ask::Allowable { .. } => {
                // Only limits and spans are looked at; the loads stand in for the checker's own.
                let mut limits = self.member.clone();
                limits.limits = self.changed.limits.clone();
                limits.spans = self.changed.spans.clone();
                evaluate(question, &limits, self.analysis).map_or(Gauge::Absent, Gauge::Fixed)
            }
            Ask::Utilisation { span, limit } => self.shares(question, Some(span), limit.as_deref(), false),
            Ask::Verdict { span, limit } => self.shares(question, span.as_deref(), limit.as_deref(), true),
            Ask::Reaction { .. } | Ask::ReactionMoment { .. } | Ask::Redundant { .. } | Ask::Station { .. } => {
                let ask = moved(question, &self.moves).ask;
                let each = (0..count).map(|item| {
                    evaluate(&Question { of: Items::of(item), ask: ask.clone() }, self.changed, self.solved).ok()
                });
                each.collect::<Option<Vec<f64>>>().map_or(Gauge::Absent, |values| Gauge::Sum { values, clipped: false })
            }
        }
    }

    fn span(&self, name: &str) -> Option<&Span> {
        self.changed.spans.iter().find(|span| span.name == name)
    }

    fn shares(&self, question: &Question, span: Option<&str>, limit: Option<&str>, verdict: bool) -> Gauge {
        let Of::Combination(name) = &question.of else { return Gauge::Absent };
        let index = self.member.combinations.iter().position(|combination| combination.name == *name);
        let Some(index) = index else { return Gauge::Absent };
        let mut list = Vec::new();
        for known in &self.changed.limits {
            if !known.combinations.contains(&index) || limit.is_some_and(|limit| limit != known.name) {
                continue;
            }
            for over in known.spans.iter().filter_map(|span| self.changed.spans.get(*span)) {
                if span.is_none_or(|span| span == over.name) {
                    let curve = Curve::new(self.solved, over, Along::Deflection, known.measured);
                    list.push((curve, verdict::allowable(known, over)));
                }
            }
        }
        if list.is_empty() { Gauge::Absent } else { Gauge::Shares { list, verdict } }
    }

    /// How the question is answered by somebody who reads the result wrongly; `None` where that changes nothing.
    pub fn read(&self, question: &Question, plain: &Gauge, reading: Reading) -> Option<Gauge> {
        match reading {
            Reading::UpliftClipped { support } => {
                let name = &self.member.supports.get(support)?.name;
                let asked = matches!(&question.ask, Ask::Reaction { support } if support == name);
                match plain {
                    Gauge::Sum { values, .. } if asked => Some(Gauge::Sum { values: values.clone(), clipped: true }),
                    _ => None,
                }
            }
            Reading::MidspanDeflection { span } => self.midspan(question, span, Along::Deflection),
            Reading::MidspanMoment { span } => self.midspan(question, span, Along::Moment),
            Reading::SlopeCarryDropped { span } => self.without(question, plain, span, |_, field, over, x| {
                let (at, distance) = foot(over, x)?;
                Some(field.at(at).psi * distance)
            }),
            Reading::SettlementDropped { span } => {
                let over = self.changed.spans.get(span)?;
                let support = over.left.or(over.right)?;
                self.without(question, plain, span, |item, _, _, _| {
                    self.solved.cases.get(item)?.settlements.get(support).copied()
                })
            }
            Reading::ChordAsAbsolute => self.chord(question, plain, 1.0),
            Reading::AbsoluteAsChord => self.chord(question, plain, -1.0),
            Reading::SimpleSpan { .. } => None,
        }
    }

    fn midspan(&self, question: &Question, span: usize, wanted: Along) -> Option<Gauge> {
        let over = self.changed.spans.get(span)?;
        match &question.ask {
            Ask::Extreme { along, span, measured, .. } if *along == wanted && *span == over.name => {
                let middle = (over.from.x() + over.to.x()) / 2.0;
                let piece = self.solved.model.pieces.iter().rposition(|piece| piece.x <= middle)?;
                let start = self.solved.model.pieces.get(piece)?.x;
                let share = if *measured == Measured::Chord { 0.5 } else { 0.0 };
                let value = |field: &Field<'_>| {
                    let here = field.inside(piece, middle - start);
                    let ends = field.at(over.from).v + field.at(over.to).v;
                    if wanted == Along::Moment { here.right.moment } else { here.v - share * ends }
                };
                Some(Gauge::Sum { values: self.fields().map(|field| value(&field)).collect(), clipped: false })
            }
            _ => None,
        }
    }

    fn fields(&self) -> impl Iterator<Item = Field<'_>> {
        (0..self.solved.cases.len()).filter_map(|case| Field::of_case(self.solved, case))
    }

    /// Deflections of one span less something that each item gives at each place.
    fn without(
        &self,
        question: &Question,
        plain: &Gauge,
        span: usize,
        less: impl Fn(usize, &Field<'_>, &Span, f64) -> Option<f64>,
    ) -> Option<Gauge> {
        let over = self.changed.spans.get(span)?;
        match (&moved(question, &self.moves).ask, plain) {
            (Ask::Station { along: Along::Deflection, at, .. }, Gauge::Sum { values, .. })
                if over.from <= *at && *at <= over.to && Some(*at) != foot(over, 0.0).map(|(at, _)| at) =>
            {
                let each = self.fields().zip(values).enumerate();
                let each = each.map(|(item, (field, value))| Some(value - less(item, &field, over, at.x())?));
                Some(Gauge::Sum { values: each.collect::<Option<_>>()?, clipped: false })
            }
            (Ask::Extreme { along: Along::Deflection, span, .. }, Gauge::Peak { curve, sign })
                if *span == over.name =>
            {
                let curve = self.bent(curve, over, &less)?;
                Some(Gauge::Peak { curve, sign: *sign })
            }
            _ => None,
        }
    }

    fn bent(
        &self,
        curve: &Curve,
        over: &Span,
        less: &impl Fn(usize, &Field<'_>, &Span, f64) -> Option<f64>,
    ) -> Option<Curve> {
        let mut bent = curve.clone();
        for (item, (field, values)) in self.fields().zip(&mut bent.values).enumerate() {
            for (value, x) in values.iter_mut().zip(&curve.shape.at) {
                *value -= less(item, &field, over, *x)?;
            }
        }
        Some(bent)
    }

    /// Absolute deflections measured from the line between the supports of the span (of the neighbouring span for a
    /// cantilever), for `sign` 1; chord deflections measured absolutely for -1.
    fn chord(&self, question: &Question, plain: &Gauge, sign: f64) -> Option<Gauge> {
        let wanted = if sign > 0.0 { Measured::Absolute } else { Measured::Chord };
        match (&moved(question, &self.moves).ask, plain) {
            (Ask::Station { along: Along::Deflection, at, measured, .. }, Gauge::Sum { values, .. })
                if *measured == wanted =>
            {
                let over = self.changed.spans.iter().find(|span| span.from <= *at && *at <= span.to)?;
                let line = self.line_span(over, sign)?;
                let each = self.fields().zip(values).map(|(field, value)| value - sign * height(&field, line, at.x()));
                Some(Gauge::Sum { values: each.collect(), clipped: false })
            }
            (Ask::Extreme { along: Along::Deflection, span, measured, .. }, Gauge::Peak { curve, sign: peak })
                if *measured == wanted =>
            {
                let over = self.span(span)?;
                let line = self.line_span(over, sign)?;
                let less = |_: usize, field: &Field<'_>, _: &Span, x: f64| Some(sign * height(field, line, x));
                Some(Gauge::Peak { curve: self.bent(curve, over, &less)?, sign: *peak })
            }
            _ => None,
        }
    }

    fn line_span<'s>(&'s self, over: &'s Span, sign: f64) -> Option<&'s Span> {
        // A cantilever's own line is the level of its support; only the line of its neighbour is taken for the absolute.
        if !over.is_cantilever() || sign < 0.0 {
            return Some(over);
        }
        let place = if over.left.is_some() { over.from } else { over.to };
        let mut others = self.changed.spans.iter().filter(|span| !span.is_cantilever());
        others.find(|span| span.from == place || span.to == place)
    }
}

/// The support of a cantilever span, and the distance from there to `x`.
fn foot(span: &Span, x: f64) -> Option<(crate::member::Place, f64)> {
    match (span.left, span.right) {
        (Some(_), None) => Some((span.from, x - span.from.x())),
        (None, Some(_)) => Some((span.to, x - span.to.x())),
        _ => None,
    }
}

/// Height at `x` of the line that a span's deflections are measured from.
fn height(field: &Field<'_>, span: &Span, x: f64) -> f64 {
    let (left, right) = (field.at(span.from).v, field.at(span.to).v);
    match (span.left, span.right) {
        (Some(_), Some(_)) => left + (right - left) * (x - span.from.x()) / span.to.beyond(span.from),
        (Some(_), None) => left,
        (None, Some(_)) => right,
        (None, None) => 0.0,
    }
}
