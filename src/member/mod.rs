//! What a deck means: a member that is valid by construction.
//!
//! Nothing validates after this point. Every place is an exact decimal of metres, so that neighbouring places are told
//! apart or found equal without a tolerance. Spans, pieces and names have been resolved to indices; every index kept
//! here is within its list, and lists of supports, hinges and segments are ordered from left to right.

pub mod build;
mod load;
mod record;

pub use crate::quantity::{Factor, Place};
pub use load::{Case, Load, LoadKind, Nature, Stretch};
pub use record::{Assumption, Decimals, Declared, Part, Record, Revision, SheetWishes};

use std::collections::BTreeMap;

use crate::diagnostic::Diagnostic;
use crate::quantity::{
    Area, Density, Expansion, Given, Intensity, Length, LinearMass, RotationalStiffness, SecondMoment, SpecificWeight,
    Stress, Typed,
};

/// A member with everything that acts on it and everything that is asked of it.
#[derive(Clone, Debug, PartialEq)]
pub struct Member {
    /// Project, number, subject and whoever signs.
    pub title: Title,
    /// Named sections, in the deck's order.
    pub sections: Vec<Section>,
    /// Segments, left to right, end to end.
    pub segments: Vec<Segment>,
    /// Supports, left to right; no two at one place.
    pub supports: Vec<Support>,
    /// Hinges, left to right.
    pub hinges: Vec<Hinge>,
    /// Places of interest, left to right, without repetition.
    pub stations: Vec<Place>,
    /// The redundants that the deck chose; `None` where the choice is the program's.
    pub redundants: Option<Vec<Redundant>>,
    /// Load cases, in the deck's order.
    pub cases: Vec<Case>,
    /// Combinations, in the deck's order.
    pub combinations: Vec<Combination>,
    /// Spans, left to right.
    pub spans: Vec<Span>,
    /// Allowable deflections, in the deck's order.
    pub limits: Vec<Limit>,
    /// Every place that the deck typed, as first typed; ends of segments come from their lengths instead.
    pub typed_places: BTreeMap<Place, Typed>,
    /// Revisions, assumptions, sources, and how the sheet is to be printed.
    pub record: Record,
    /// What is lawful but odd; also printed on the sheet.
    pub warnings: Vec<Diagnostic>,
}

impl Member {
    /// The right end of the member; its left end is at zero.
    pub fn end(&self) -> Place {
        self.segments.last().map_or(Place::ZERO, |segment| segment.to)
    }

    /// A sentence for every value and assumption that waits for confirmation.
    pub fn unconfirmed(&self) -> Vec<String> {
        self.record.unconfirmed()
    }

    /// Degree of static indeterminacy: restraints held, less two equations of equilibrium, less one for each hinge.
    ///
    /// Negative only for a mechanism, which a member never is.
    pub fn indeterminacy(&self) -> usize {
        let restraints: usize = self.supports.iter().map(Support::restraints).sum();
        restraints.saturating_sub(2 + self.hinges.len())
    }
}

/// The heading of a calculation.
#[derive(Clone, Debug, PartialEq, Default)]
pub struct Title {
    /// The project.
    pub project: String,
    /// The calculation's number.
    pub number: String,
    /// What is calculated.
    pub subject: String,
    /// Letter or number of the revision.
    pub revision: String,
    /// The sheet's date, as year, month, day.
    pub date: (u16, u8, u8),
    /// Who prepared it.
    pub prepared: Option<String>,
    /// Who checked it; `None` prints "not checked".
    pub checked: Option<String>,
    /// Who approved it.
    pub approved: Option<String>,
    /// For whom.
    pub client: Option<String>,
    /// By which office.
    pub office: Option<String>,
    /// How the sheet prints.
    pub system: System,
}

/// The units a sheet prints in.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Default)]
pub enum System {
    /// kN, m, mm, mrad.
    #[default]
    Si,
    /// kip, ft, in, mrad.
    Us,
}

/// A cross-section: E, I and whatever self-weight, temperature and shear need.
#[derive(Clone, Debug, PartialEq)]
pub struct Section {
    /// Its name in the deck.
    pub name: String,
    /// Modulus of elasticity.
    pub modulus: Given<Stress>,
    /// Second moment of area about the axis of bending.
    pub second_moment: Given<SecondMoment>,
    /// What self-weight comes from.
    pub weight: Option<Weight>,
    /// Depth, for temperature gradients and for drawing.
    pub depth: Option<Given<Length>>,
    /// Coefficient of thermal expansion.
    pub expansion: Option<Given<Expansion>>,
    /// Shear modulus and shear area; present where shear deformation counts.
    pub shear: Option<(Given<Stress>, Given<Area>)>,
}

/// What the weight of a section comes from.
#[derive(Clone, Debug, PartialEq)]
pub enum Weight {
    /// Weight per length, typed as a force per length.
    PerLength(Given<Intensity>),
    /// Mass per length, typed in kg/m.
    MassPerLength(Given<LinearMass>),
    /// Area times density as mass per volume.
    Mass(Given<Area>, Given<Density>),
    /// Area times weight per volume.
    Specific(Given<Area>, Given<SpecificWeight>),
}

/// A length of member with one section, or tapering from one section to another.
#[derive(Clone, Debug, PartialEq)]
pub struct Segment {
    /// Its length as typed.
    pub length: Given<Length>,
    /// Left end.
    pub from: Place,
    /// Right end; beyond `from`.
    pub to: Place,
    /// Index of the section at the left end.
    pub section: usize,
    /// Where it tapers: the section at the right end and the law between.
    pub taper: Option<Taper>,
}

/// How a tapered segment changes.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Taper {
    /// Index of the section at the right end.
    pub to: usize,
    /// How I runs between the ends.
    pub law: TaperLaw,
}

/// The law of I along a tapered segment; weight, G times shear area and depth are linear in x under either.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum TaperLaw {
    /// I is linear in x.
    Linear,
    /// The cube root of I is linear in x: a solid rectangle of constant width and linearly varying depth.
    Cubic,
}

/// A support: a place and what it holds.
#[derive(Clone, Debug, PartialEq)]
pub struct Support {
    /// Its name in the deck.
    pub name: String,
    /// Where it stands.
    pub at: Place,
    /// The deck's word for it.
    pub kind: SupportKind,
    /// How it holds deflection.
    pub vertical: Hold<Intensity>,
    /// How it holds the turn of the section.
    pub rotation: Hold<RotationalStiffness>,
}

impl Support {
    /// Whether it holds deflection, rigidly or by a spring.
    pub fn holds_deflection(&self) -> bool {
        !matches!(self.vertical, Hold::Free)
    }

    /// Whether it holds the turn, rigidly or by a spring.
    pub fn holds_rotation(&self) -> bool {
        !matches!(self.rotation, Hold::Free)
    }

    /// How many movements it holds.
    pub fn restraints(&self) -> usize {
        usize::from(self.holds_deflection()) + usize::from(self.holds_rotation())
    }
}

/// The deck's word for a support.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum SupportKind {
    /// Holds deflection and rotation.
    Fixed,
    /// Holds deflection.
    Pinned,
    /// Holds deflection; the same as pinned here.
    Roller,
    /// Holds rotation.
    Guided,
    /// Each movement rigid, free or by a spring.
    Elastic,
}

/// How a support holds one movement.
#[derive(Clone, Debug, PartialEq)]
pub enum Hold<K> {
    /// Not at all.
    Free,
    /// Rigidly.
    Rigid,
    /// By a spring of this stiffness.
    Spring(Given<K>),
}

/// An internal release of moment.
#[derive(Clone, Debug, PartialEq)]
pub struct Hinge {
    /// Its name in the deck.
    pub name: String,
    /// Where it is; may be the place of a support that does not hold rotation.
    pub at: Place,
}

/// A movement that is released, named by the force that the release takes away.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Redundant {
    /// `R.<support>`: the support's upward force. Holds the support's index.
    Force(usize),
    /// `M.<support>`: the bending moment in the member over the support, sagging positive; at an inner support that
    /// holds rotation the support's own moment, counter-clockwise. Holds the support's index.
    Moment(usize),
}

impl Redundant {
    /// The index of its support.
    pub const fn support(self) -> usize {
        match self {
            Self::Force(support) | Self::Moment(support) => support,
        }
    }

    /// Its name in the deck and in the results: `R.B`, `M.B`.
    pub fn name(self, member: &Member) -> String {
        let letter = if matches!(self, Self::Force(_)) { 'R' } else { 'M' };
        let support = member.supports.get(self.support()).map_or("", |support| support.name.as_str());
        format!("{letter}.{support}")
    }
}

/// A combination of load cases.
#[derive(Clone, Debug, PartialEq)]
pub struct Combination {
    /// Its name in the deck.
    pub name: String,
    /// What it is called; may be empty.
    pub title: String,
    /// What it is for.
    pub purpose: Purpose,
    /// One factor for each case, in the order of [`Member::cases`]; zero where the deck names none.
    pub factors: Vec<Factor>,
}

/// What a combination is for.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Purpose {
    /// Deflections and other matters of service.
    Serviceability,
    /// Resistance.
    Strength,
    /// Overturning and uplift.
    Stability,
}

impl Purpose {
    /// The deck's word.
    pub const fn word(self) -> &'static str {
        match self {
            Self::Serviceability => "serviceability",
            Self::Strength => "strength",
            Self::Stability => "stability",
        }
    }
}

/// A span: between neighbouring supports that hold deflection, or a cantilever beyond the last of them.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Span {
    /// `A-B`, `start-A` or `B-end`.
    pub name: String,
    /// Left end.
    pub from: Place,
    /// Right end.
    pub to: Place,
    /// Index of the support at the left end; `None` at a free start.
    pub left: Option<usize>,
    /// Index of the support at the right end; `None` at a free end.
    pub right: Option<usize>,
}

impl Span {
    /// Whether it is a cantilever.
    pub const fn is_cantilever(&self) -> bool {
        self.left.is_none() || self.right.is_none()
    }
}

/// An allowable deflection.
#[derive(Clone, Debug, PartialEq)]
pub struct Limit {
    /// Its name in the deck.
    pub name: String,
    /// The denominator of span over ratio.
    pub ratio: Option<Factor>,
    /// An absolute cap; with a ratio, the smaller rules.
    pub absolute: Option<Given<Length>>,
    /// Indices of the combinations it applies to; never empty.
    pub combinations: Vec<usize>,
    /// Indices of the spans it applies to; never empty.
    pub spans: Vec<usize>,
    /// From where the deflection is measured.
    pub measured: Measured,
    /// How many times its length a cantilever's reference length is; present where a cantilever span is covered.
    pub cantilever_length_factor: Option<Factor>,
    /// Where the ratio comes from.
    pub basis: String,
}

/// From where a deflection is measured.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Measured {
    /// From the straight line between the span's displaced supports; a cantilever from the level of its support.
    Chord,
    /// From where the member lay unloaded.
    Absolute,
}
