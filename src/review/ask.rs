//! Questions that a claim answers, and their answers on any solved member.

use crate::analysis::action::Action;
use crate::analysis::{Analysis, Field, Solution, Values};
use crate::member::{Limit, Measured, Member, Place, Redundant, Span};
use crate::verdict;

/// Which load state a claim speaks of.
#[derive(Clone, Debug, PartialEq)]
pub enum Of {
    /// A load case, by name.
    Case(String),
    /// A combination, by name.
    Combination(String),
}

/// On which side of a place, where a quantity jumps.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Side {
    /// Just left.
    Left,
    /// Just right.
    Right,
}

/// What runs along the member.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Along {
    /// V = dM/dx, N.
    Shear,
    /// Sagging positive, N·m.
    Moment,
    /// dv/dx, clockwise positive, rad.
    Slope,
    /// Downward positive, m.
    Deflection,
}

/// What is asked.
#[derive(Clone, Debug, PartialEq)]
pub enum Ask {
    /// A support's force, upward, N.
    Reaction {
        /// The support's name.
        support: String,
    },
    /// A support's moment, counter-clockwise, N·m.
    ReactionMoment {
        /// The support's name.
        support: String,
    },
    /// A redundant by its name: `R.B`, `M.B`.
    Redundant {
        /// Its name.
        name: String,
    },
    /// A value at a place.
    Station {
        /// Of what.
        along: Along,
        /// Where.
        at: Place,
        /// On which side.
        side: Side,
        /// From where a deflection is measured.
        measured: Measured,
    },
    /// The greatest or the least within a span.
    Extreme {
        /// Of what.
        along: Along,
        /// The span's name.
        span: String,
        /// The greatest, or the least.
        max: bool,
        /// From where a deflection is measured.
        measured: Measured,
    },
    /// Allowable deflection of a span, m.
    Allowable {
        /// The span's name.
        span: String,
        /// The limit's name; the smallest that limits the combination, where none is named.
        limit: Option<String>,
    },
    /// Utilisation of a limit over a span.
    Utilisation {
        /// The span's name.
        span: String,
        /// The limit's name; the greatest share of any, where none is named.
        limit: Option<String>,
    },
    /// 1.0 where the limits hold, 0.0 where one fails.
    Verdict {
        /// The span's name; every span where none is named.
        span: Option<String>,
        /// The limit's name; every limit where none is named.
        limit: Option<String>,
    },
}

/// A question: what is asked, of which load state.
#[derive(Clone, Debug, PartialEq)]
pub struct Question {
    /// The load state.
    pub of: Of,
    /// What is asked.
    pub ask: Ask,
}

/// Why a member has no such figure.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct NotComparable {
    /// The reason, in a sentence.
    pub reason: String,
}

fn none(reason: impl Into<String>) -> NotComparable {
    NotComparable { reason: reason.into() }
}

/// SI value of a question on a solved member; signs as in the deck.
///
/// # Errors
/// The reason why the member has no such figure.
pub fn evaluate(question: &Question, member: &Member, analysis: &Analysis) -> Result<f64, NotComparable> {
    let (field, solution) = state(&question.of, member, analysis)?;
    let support = |name: &str| {
        let found = member.supports.iter().position(|support| support.name == name);
        found.ok_or_else(|| none(format!("the member has no support {name}")))
    };
    match &question.ask {
        Ask::Reaction { support: name } => {
            let index = support(name)?;
            let holds = member.supports.get(index).is_some_and(|support| support.holds_deflection());
            let reaction = solution.reactions.get(index).filter(|_| holds);
            reaction.map(|r| r.force).ok_or_else(|| none(format!("support {name} holds no deflection")))
        }
        Ask::ReactionMoment { support: name } => {
            let index = support(name)?;
            let holds = member.supports.get(index).is_some_and(|support| support.holds_rotation());
            let reaction = solution.reactions.get(index).filter(|_| holds);
            reaction.map(|r| r.moment).ok_or_else(|| none(format!("support {name} holds no rotation")))
        }
        Ask::Redundant { name } => {
            let position = analysis.model.redundants.iter().position(|redundant| redundant.name(member) == *name);
            let value = position.and_then(|index| solution.redundants.get(index)).copied();
            value
                .or_else(|| by_name(name, member, &field, solution))
                .ok_or_else(|| none(format!("no redundant {name}")))
        }
        Ask::Station { along, at, side, measured } => {
            if *at < Place::ZERO || *at > member.end() {
                return Err(none(format!("the member ends at {} m", member.end().exact())));
            }
            let value = pick(&field.at(*at), *along, *side);
            if *along != Along::Deflection || *measured == Measured::Absolute {
                return Ok(value);
            }
            let span = member.spans.iter().find(|span| span.from <= *at && *at <= span.to);
            let span = span.ok_or_else(|| none("the place lies in no span"))?;
            let (base, slope) = verdict::reference(&field, Measured::Chord, span);
            Ok(value - base - slope * at.beyond(span.from))
        }
        Ask::Extreme { along, span, max, measured } => {
            let span = find_span(member, span)?;
            Ok(extreme(&field, span, *along, *max, *measured))
        }
        Ask::Allowable { span, limit } => {
            let over = find_span(member, span)?;
            let covering = covering(question, member, Some(span), limit.as_deref())?;
            let allowed = covering.iter().map(|(limit, _)| verdict::allowable(limit, over));
            allowed.reduce(f64::min).ok_or_else(|| none(UNLIMITED))
        }
        Ask::Utilisation { span, limit } => {
            let checks = checks(question, member, &field, Some(span), limit.as_deref())?;
            checks.iter().map(|check| check.0).reduce(f64::max).ok_or_else(|| none(UNLIMITED))
        }
        Ask::Verdict { span, limit } => {
            let checks = checks(question, member, &field, span.as_deref(), limit.as_deref())?;
            if checks.is_empty() {
                return Err(none(UNLIMITED));
            }
            Ok(if checks.iter().all(|check| check.1) { 1.0 } else { 0.0 })
        }
    }
}

const UNLIMITED: &str = "no limit of the deck covers this span in this combination";

fn state<'a>(of: &Of, member: &'a Member, analysis: &'a Analysis) -> Result<(Field<'a>, &'a Solution), NotComparable> {
    match of {
        Of::Case(name) => {
            let index = member.cases.iter().position(|case| case.name == *name);
            let index = index.ok_or_else(|| none(format!("the member has no case {name}")))?;
            Field::of_case(analysis, index).zip(analysis.cases.get(index).map(|case| &case.total))
        }
        Of::Combination(name) => {
            let index = member.combinations.iter().position(|combination| combination.name == *name);
            let index = index.ok_or_else(|| none(format!("the member has no combination {name}")))?;
            Field::of_combination(analysis, member, index).zip(analysis.combinations.get(index))
        }
    }
    .ok_or_else(|| none("not solved"))
}

fn by_name(name: &str, member: &Member, field: &Field<'_>, solution: &Solution) -> Option<f64> {
    let (letter, support) = name.split_once('.')?;
    let index = member.supports.iter().position(|known| known.name == support)?;
    let held = member.supports.get(index)?;
    let redundant = if letter == "R" { Redundant::Force(index) } else { Redundant::Moment(index) };
    match redundant {
        Redundant::Force(_) => held.holds_deflection().then(|| solution.reactions.get(index).map(|r| r.force))?,
        Redundant::Moment(_) if held.holds_rotation() && held.at > Place::ZERO && held.at < member.end() => {
            solution.reactions.get(index).map(|r| r.moment)
        }
        Redundant::Moment(_) => Some(field.at(held.at).left.moment),
    }
}

fn find_span<'a>(member: &'a Member, name: &str) -> Result<&'a Span, NotComparable> {
    member.spans.iter().find(|span| span.name == name).ok_or_else(|| none(format!("the member has no span {name}")))
}

fn pick(values: &Values, along: Along, side: Side) -> f64 {
    let left = side == Side::Left;
    match along {
        Along::Shear => (if left { values.left } else { values.right }).shear,
        Along::Moment => (if left { values.left } else { values.right }).moment,
        Along::Slope if left => values.slope_left,
        Along::Slope => values.slope_right,
        Along::Deflection => values.v,
    }
}

fn extreme(field: &Field<'_>, span: &Span, along: Along, max: bool, measured: Measured) -> f64 {
    let sign = if max { 1.0 } else { -1.0 };
    let mut best = f64::NEG_INFINITY;
    let measured = if along == Along::Deflection { measured } else { Measured::Absolute };
    let (base, slope) = verdict::reference(field, measured, span);
    for (index, piece) in field.model.pieces.iter().enumerate() {
        if piece.from < span.from || piece.to > span.to {
            continue;
        }
        let offset = piece.from.beyond(span.from);
        let value =
            |x: f64, side: Side| sign * (pick(&field.inside(index, x), along, side) - base - slope * (offset + x));
        let ends = breaks(field, index, piece.length);
        for (from, to) in ends.iter().zip(ends.iter().skip(1)) {
            let at = |step: u32| from + (to - from) * f64::from(step) / f64::from(STEPS);
            let inner = |x: f64| value(x, if x > *from { Side::Left } else { Side::Right });
            let values: Vec<f64> = (0..=STEPS).map(|step| inner(at(step))).collect();
            best = values.iter().copied().fold(best, f64::max);
            let low = |index: usize| values.get(index).copied().unwrap_or(f64::NEG_INFINITY);
            for step in 0..STEPS {
                // Between two points whose outer neighbours both lie lower something higher may stand.
                let here = step as usize;
                let (left, right) = (low(here), low(here + 1));
                let rising = here == 0 || low(here - 1) <= left;
                let falling = low(here + 2) <= right;
                if rising && falling {
                    best = best.max(golden(at(step), at(step + 1), inner));
                }
            }
        }
    }
    sign * best
}

/// How many steps a stretch is looked at in.
const STEPS: u32 = 24;

/// Places on a piece where a load begins or ends, and its own ends.
fn breaks(field: &Field<'_>, piece: usize, length: f64) -> Vec<f64> {
    let mut ends = vec![0.0, length];
    for action in field.actions_on(piece) {
        match *action {
            Action::Force { a, .. } | Action::Couple { a, .. } => ends.push(a),
            Action::Spread { a, c, .. } | Action::Gradient { a, c, .. } => ends.extend([a, a + c]),
        }
    }
    ends.retain(|end| (0.0..=length).contains(end));
    ends.sort_by(f64::total_cmp);
    ends.dedup_by(|right, left| *right - *left <= 1e-12 * length);
    if let Some(last) = ends.last_mut() {
        *last = length;
    }
    ends
}

/// The greatest value between two places, by golden section.
fn golden(from: f64, to: f64, value: impl Fn(f64) -> f64) -> f64 {
    const SHARE: f64 = 0.618_033_988_749_894_9;
    let (mut low, mut high) = (from, to);
    for _ in 0..60 {
        let (a, b) = (high - SHARE * (high - low), low + SHARE * (high - low));
        if value(a) < value(b) { low = a } else { high = b }
    }
    value((low + high) / 2.0)
}

/// The limits, each with the span, that apply to the question's combination.
fn covering<'m>(
    question: &Question,
    member: &'m Member,
    span: Option<&str>,
    limit: Option<&str>,
) -> Result<Vec<(&'m Limit, &'m Span)>, NotComparable> {
    let Of::Combination(name) = &question.of else { return Err(none("limits apply to combinations, not to cases")) };
    let index = member.combinations.iter().position(|combination| combination.name == *name);
    let index = index.ok_or_else(|| none(format!("the member has no combination {name}")))?;
    let limits = member.limits.iter().filter(|known| known.combinations.contains(&index));
    let limits = limits.filter(|known| limit.is_none_or(|name| known.name == name));
    let pairs = limits.flat_map(|limit| {
        let spans = limit.spans.iter().filter_map(|index| member.spans.get(*index));
        spans.map(move |over| (limit, over))
    });
    Ok(pairs.filter(|(_, over)| span.is_none_or(|name| over.name == name)).collect())
}

/// Utilisation and verdict of every limit that the question covers.
fn checks(
    question: &Question,
    member: &Member,
    field: &Field<'_>,
    span: Option<&str>,
    limit: Option<&str>,
) -> Result<Vec<(f64, bool)>, NotComparable> {
    let covering = covering(question, member, span, limit)?;
    let found = covering.into_iter().map(|(limit, over)| verdict::check(field, limit, over, (0, 0, 0)));
    Ok(found.map(|check| (check.utilisation, check.pass)).collect())
}
