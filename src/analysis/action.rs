//! Loads as they act on one piece.

use super::cantilever as tip;
use super::equilibrium as sums;
use crate::member::{LoadKind, Member, Place, Section, Stretch, Taper, Weight};
use crate::quantity::GRAVITY;

/// What acts on a piece; distances from the piece's left end, m. Forces N, couples N·m, intensities N/m.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Action {
    /// A force.
    Force {
        /// Downward force.
        p: f64,
        /// Its distance.
        a: f64,
    },
    /// A couple.
    Couple {
        /// Clockwise couple.
        m: f64,
        /// Its distance.
        a: f64,
    },
    /// An intensity running linearly over a part.
    Spread {
        /// At the near end of the part.
        w0: f64,
        /// At the far end of the part.
        w1: f64,
        /// Near end.
        a: f64,
        /// Length of the part.
        c: f64,
    },
    /// A strain gradient: the section turns by `strain / depth` per length.
    Gradient {
        /// Expansion times difference of temperature (top less bottom); no unit.
        strain: f64,
        /// Near end.
        a: f64,
        /// Length of the part.
        c: f64,
    },
}

/// An action and the load of the case that it comes from.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Acting {
    /// Index of the case.
    pub case: usize,
    /// Index of the load within its case.
    pub load: usize,
    /// What acts.
    pub action: Action,
}

impl Action {
    /// Total downward force.
    pub fn resultant(self) -> f64 {
        match self {
            Self::Force { p, .. } => p,
            Self::Spread { w0, w1, c, .. } => sums::linear_resultant(w0, w1, c),
            Self::Couple { .. } | Self::Gradient { .. } => 0.0,
        }
    }

    /// Clockwise moment about a point at the distance `-d` from the piece's left end (its left end for `d = 0`).
    pub fn moment(self, d: f64) -> f64 {
        match self {
            Self::Force { p, a } => p * (d + a),
            Self::Couple { m, .. } => m,
            Self::Spread { w0, w1, a, c } => sums::linear_moment(w0, w1, d + a, c),
            Self::Gradient { .. } => 0.0,
        }
    }

    /// The part of the action strictly left of the distance `x`: what bends the piece's head.
    pub fn head(self, x: f64) -> Option<Self> {
        match self {
            Self::Force { a, .. } | Self::Couple { a, .. } => (a < x).then_some(self),
            Self::Spread { w0, w1, a, c } if a < x => {
                let length = c.min(x - a);
                let end = if length < c { sums::intensity_at(w0, w1, c, length) } else { w1 };
                Some(Self::Spread { w0, w1: end, a, c: length })
            }
            Self::Gradient { strain, a, c } if a < x => Some(Self::Gradient { strain, a, c: c.min(x - a) }),
            Self::Spread { .. } | Self::Gradient { .. } => None,
        }
    }

    /// The part of the action right of the distance `x`, its distances measured from there. A force or couple exactly at
    /// `x` belongs to it where `with` is set: the value just left of the place.
    pub fn tail(self, x: f64, with: bool) -> Option<Self> {
        let beyond = |a: f64| a > x || (with && a >= x);
        match self {
            Self::Force { p, a } => beyond(a).then_some(Self::Force { p, a: a - x }),
            Self::Couple { m, a } => beyond(a).then_some(Self::Couple { m, a: a - x }),
            Self::Spread { w0, w1, a, c } if a >= x => Some(Self::Spread { w0, w1, a: a - x, c }),
            Self::Spread { w0, w1, a, c } if a + c > x => {
                let start = sums::intensity_at(w0, w1, c, x - a);
                Some(Self::Spread { w0: start, w1, a: 0.0, c: c - (x - a) })
            }
            Self::Gradient { strain, a, c } if a + c > x => {
                let start = a.max(x);
                Some(Self::Gradient { strain, a: start - x, c: a + c - start })
            }
            Self::Spread { .. } | Self::Gradient { .. } => None,
        }
    }

    /// Intensity at the distance `x`, from the right where it jumps.
    pub fn intensity(self, x: f64) -> f64 {
        match self {
            Self::Spread { w0, w1, a, c } if a <= x && x < a + c => sums::intensity_at(w0, w1, c, x - a),
            _ => 0.0,
        }
    }

    /// The action times a factor.
    #[must_use]
    pub fn scaled(self, factor: f64) -> Self {
        match self {
            Self::Force { p, a } => Self::Force { p: factor * p, a },
            Self::Couple { m, a } => Self::Couple { m: factor * m, a },
            Self::Spread { w0, w1, a, c } => Self::Spread { w0: factor * w0, w1: factor * w1, a, c },
            Self::Gradient { strain, a, c } => Self::Gradient { strain: factor * strain, a, c },
        }
    }

    /// Deflection and turn that it alone gives at the tip of a piece of constant EI (and GA) of the length `l`.
    pub fn tip(self, l: f64, ei: f64, ga: Option<f64>, depth: f64) -> (f64, f64) {
        let (v, psi) = match self {
            Self::Force { p, a } => (tip::force_v(p, a, l, ei), tip::force_psi(p, a, ei)),
            Self::Couple { m, a } => (tip::couple_v(m, a, l, ei), tip::couple_psi(m, a, ei)),
            Self::Spread { w0, w1, a, c } => {
                (tip::linear_part_v(w0, w1, a, c, l, ei), tip::linear_part_psi(w0, w1, a, c, ei))
            }
            Self::Gradient { strain, a, c } => {
                let k = strain / depth;
                (tip::curvature_v(k, a, a + c, l), tip::curvature_psi(k, a, a + c))
            }
        };
        (v + ga.map_or(0.0, |ga| self.shear_tip(ga)), psi)
    }

    fn shear_tip(self, ga: f64) -> f64 {
        match self {
            Self::Force { p, a } => tip::shear_force_v(p, a, ga),
            Self::Spread { w0, w1, a, c } => tip::shear_linear_v(w0, w1, a, c, ga),
            Self::Couple { .. } | Self::Gradient { .. } => 0.0,
        }
    }
}

/// Weight per length of a section, N/m; zero for one that gives none.
pub fn weight_per_length(section: &Section) -> f64 {
    let g = GRAVITY.to_f64();
    match &section.weight {
        Some(Weight::PerLength(w)) => w.value.si(),
        Some(Weight::MassPerLength(mass)) => mass.value.si() * g,
        Some(Weight::Mass(area, density)) => area.value.si() * density.value.si() * g,
        Some(Weight::Specific(area, weight)) => area.value.si() * weight.value.si(),
        None => 0.0,
    }
}

/// The part of a load that acts on the piece from `from` to `to`, which lies within one segment.
///
/// A force or couple exactly at a cut belongs to the piece on its left; at the member's left end to the first piece.
pub(super) fn on_piece(member: &Member, kind: &LoadKind, segment: usize, from: Place, to: Place) -> Option<Action> {
    let inside = |at: Place| (at > from && at <= to) || (at == from && from == Place::ZERO);
    match kind {
        LoadKind::SelfWeight => self_weight(member, segment, from, to),
        LoadKind::Uniform { w, over } => spread(w.value.si(), w.value.si(), *over, from, to),
        LoadKind::Area { q, width, over } => {
            let w = q.value.si() * width.value.si();
            spread(w, w, *over, from, to)
        }
        LoadKind::Linear { left, right, over } => spread(left.value.si(), right.value.si(), *over, from, to),
        LoadKind::Point { p, at } => inside(*at).then(|| Action::Force { p: p.value.si(), a: at.beyond(from) }),
        LoadKind::Couple { m, at } => inside(*at).then(|| Action::Couple { m: m.value.si(), a: at.beyond(from) }),
        LoadKind::Gradient { difference, over } => {
            let section = member.sections.get(member.segments.get(segment)?.section)?;
            let strain = section.expansion.as_ref()?.value.si() * difference.value.si();
            let part = overlap(*over, from, to)?;
            Some(Action::Gradient { strain, a: part.from.beyond(from), c: part.to.beyond(part.from) })
        }
        LoadKind::Settlement { .. } | LoadKind::Rotation { .. } => None,
    }
}

fn overlap(over: Stretch, from: Place, to: Place) -> Option<Stretch> {
    let part = Stretch { from: over.from.max(from), to: over.to.min(to) };
    (part.from < part.to).then_some(part)
}

fn spread(w0: f64, w1: f64, over: Stretch, from: Place, to: Place) -> Option<Action> {
    let part = overlap(over, from, to)?;
    let whole = over.to.beyond(over.from);
    let at = |place: Place, end: Place, end_value: f64| {
        if place == end { end_value } else { sums::intensity_at(w0, w1, whole, place.beyond(over.from)) }
    };
    let (near, far) = if w0 == w1 { (w0, w0) } else { (at(part.from, over.from, w0), at(part.to, over.to, w1)) };
    Some(Action::Spread { w0: near, w1: far, a: part.from.beyond(from), c: part.to.beyond(part.from) })
}

fn self_weight(member: &Member, index: usize, from: Place, to: Place) -> Option<Action> {
    let segment = member.segments.get(index)?;
    let near = weight_per_length(member.sections.get(segment.section)?);
    let far = match segment.taper {
        Some(Taper { to, .. }) => weight_per_length(member.sections.get(to)?),
        None => near,
    };
    spread(near, far, Stretch { from: segment.from, to: segment.to }, from, to)
}
