//! Rigidity along a piece.

use crate::member::{Member, Place, Section, Segment, TaperLaw};
use crate::number::Number;

/// EI, G times shear area and depth of one piece.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Stiffness {
    /// The same all along.
    Constant {
        /// EI, N·m².
        ei: f64,
        /// G times shear area, N; `None` without shear deformation.
        ga: Option<f64>,
        /// Depth, m; zero where none is given (and none is then used).
        depth: f64,
    },
    /// Changing along the segment that the piece belongs to.
    Tapered(Tapered),
}

/// Rigidity of a tapered segment, and where in it a piece begins.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Tapered {
    /// Length of the segment, m.
    pub length: f64,
    /// Distance of the piece's left end from the segment's, m.
    pub offset: f64,
    /// The law of I.
    pub law: TaperLaw,
    /// EI at the segment's left end, N·m².
    pub ei0: f64,
    /// EI at its right end, N·m².
    pub ei1: f64,
    /// Under the cubic law: cube root of the ratio of I, right to left.
    pub root: f64,
    /// G times shear area at both ends, N.
    pub ga: Option<(f64, f64)>,
    /// Depth at both ends, m; zero where none is given.
    pub depth: (f64, f64),
}

/// EI under the cubic law at the distance `s` of `l`: EI0 (1 + (r - 1) s / l)³, with r the cube root of I1/I0.
pub fn cubic_rigidity<N: Number>(ei0: N, root: N, s: N, l: N) -> N {
    let one = N::whole(1);
    ei0 * (one.clone() + (root - one) * s / l).power(3)
}

/// A value that runs linearly from `left` to `right` over `l`, at the distance `s`.
pub fn linear_between<N: Number>(left: N, right: N, s: N, l: N) -> N {
    left.clone() + (right - left) * s / l
}

impl Tapered {
    /// EI at the distance `x` from the piece's left end.
    pub fn ei(&self, x: f64) -> f64 {
        let s = self.offset + x;
        match self.law {
            TaperLaw::Linear => linear_between(self.ei0, self.ei1, s, self.length),
            TaperLaw::Cubic => cubic_rigidity(self.ei0, self.root, s, self.length),
        }
    }

    /// G times shear area at the distance `x` from the piece's left end.
    pub fn ga(&self, x: f64) -> Option<f64> {
        self.ga.map(|(left, right)| linear_between(left, right, self.offset + x, self.length))
    }

    /// Depth at the distance `x` from the piece's left end.
    pub fn depth(&self, x: f64) -> f64 {
        linear_between(self.depth.0, self.depth.1, self.offset + x, self.length)
    }

    /// The quantity that is linear in x, and whose zero limits how fast quadrature converges: relative values at `a`, `b`.
    pub(super) fn driver(&self, a: f64, b: f64) -> (f64, f64) {
        let ratio = match self.law {
            TaperLaw::Linear => self.ei1 / self.ei0,
            TaperLaw::Cubic => self.root,
        };
        let at = |x: f64| linear_between(1.0, ratio, self.offset + x, self.length);
        (at(a), at(b))
    }
}

impl Stiffness {
    pub(super) fn of(member: &Member, segment: &Segment, from: Place) -> Option<Self> {
        let left = member.sections.get(segment.section)?;
        let Some(taper) = segment.taper else {
            return Some(Self::Constant { ei: rigidity(left), ga: shear(left), depth: depth(left) });
        };
        let right = member.sections.get(taper.to)?;
        let (ei0, ei1) = (rigidity(left), rigidity(right));
        Some(Self::Tapered(Tapered {
            length: segment.to.beyond(segment.from),
            offset: from.beyond(segment.from),
            law: taper.law,
            ei0,
            ei1,
            root: libm::cbrt(ei1 / ei0),
            ga: shear(left).zip(shear(right)),
            depth: (depth(left), depth(right)),
        }))
    }

    /// G times shear area at the distance `x`.
    pub fn ga(&self, x: f64) -> Option<f64> {
        match self {
            Self::Constant { ga, .. } => *ga,
            Self::Tapered(tapered) => tapered.ga(x),
        }
    }
}

/// EI of a section, N·m².
pub fn rigidity(section: &Section) -> f64 {
    section.modulus.value.si() * section.second_moment.value.si()
}

/// G times shear area of a section, N.
pub fn shear(section: &Section) -> Option<f64> {
    section.shear.as_ref().map(|(g, area)| g.value.si() * area.value.si())
}

fn depth(section: &Section) -> f64 {
    section.depth.as_ref().map_or(0.0, |depth| depth.value.si())
}
