//! Mistakes people make, as generators: each yields, for one member, hypotheses that say what would have been done wrongly,
//! where, and what the member then is.
//!
//! Names are plain English. Everything a hypothesis changes stays a lawful [`Member`]: typed figures and values move together,
//! so that a rewritten member can be narrated like any other.

pub mod edit;
mod geometry;
pub mod loads;
mod names;
pub mod reading;
mod shape;
mod stiffness;
mod supports;
pub mod weights;
mod words;

use std::fmt;

pub use edit::Moves;
pub use loads::{Instead, LoadEdit};
pub use names::NAMES;
pub use reading::Reading;
pub use weights::Weights;

use crate::member::Member;

/// One hypothesis: what would have been done wrongly, and where.
#[derive(Debug)]
pub struct Mistake {
    /// Its name: `settlement-omitted`.
    pub name: String,
    /// Where: `support B`, `segment 1 / segment 2`.
    pub place: String,
    /// What was done, as the subject of "would reproduce these figures".
    pub words: String,
    /// What it changes.
    pub change: Change,
}

/// What a mistake changes.
#[derive(Debug)]
pub enum Change {
    /// Stiffness, geometry, supports, hinges, limits: the member must be solved anew.
    Structure(Structure),
    /// Loads: the solution is a sum of others.
    Loads(Vec<LoadEdit>),
    /// Factors of combinations, or of all loads at once.
    Weights(Weights),
    /// The member is solved rightly and read wrongly.
    Reading(Reading),
}

/// A member out of a member.
pub type Rewrite = Box<dyn Fn(&Member) -> Option<Member> + Send + Sync>;

/// A change that asks for a new solution.
pub struct Structure {
    /// The rewritten member; `None` where it does not apply (any more).
    pub rewrite: Rewrite,
    /// Where places of the member went.
    pub moves: Moves,
}

impl fmt::Debug for Structure {
    fn fmt(&self, out: &mut fmt::Formatter<'_>) -> fmt::Result {
        out.debug_struct("Structure").field("moves", &self.moves).finish_non_exhaustive()
    }
}

impl Mistake {
    fn new(name: impl Into<String>, place: impl Into<String>, words: impl Into<String>, change: Change) -> Self {
        Self { name: name.into(), place: place.into(), words: words.into(), change }
    }

    fn structure(
        name: impl Into<String>,
        place: impl Into<String>,
        words: impl Into<String>,
        rewrite: impl Fn(&Member) -> Option<Member> + Send + Sync + 'static,
    ) -> Self {
        let structure = Structure { rewrite: Box::new(rewrite), moves: Moves::Nothing };
        Self::new(name, place, words, Change::Structure(structure))
    }

    fn moving(mut self, moves: Moves) -> Self {
        if let Change::Structure(structure) = &mut self.change {
            structure.moves = moves;
        }
        self
    }
}

/// Every mistake that this member leaves room for, by what it changes.
#[derive(Debug, Default)]
pub struct Catalogue {
    /// Those that ask for a new solution.
    pub structures: Vec<Mistake>,
    /// Those that change single loads.
    pub loads: Vec<Mistake>,
    /// Those that change factors.
    pub weights: Vec<Mistake>,
    /// Those that read the result wrongly.
    pub readings: Vec<Mistake>,
}

impl Catalogue {
    /// Generates every mistake for the member: each section, load, support, segment, span, combination in turn.
    pub fn new(member: &Member) -> Self {
        let mut structures = stiffness::mistakes(member);
        structures.extend(shape::mistakes(member));
        structures.extend(supports::mistakes(member));
        structures.extend(geometry::mistakes(member));
        Self {
            structures,
            loads: loads::mistakes(member),
            weights: weights::mistakes(member),
            readings: reading::mistakes(member),
        }
    }

    /// How many mistakes there are.
    pub fn len(&self) -> usize {
        self.structures.len() + self.loads.len() + self.weights.len() + self.readings.len()
    }

    /// Whether there is none.
    pub fn is_empty(&self) -> bool {
        self.len() == 0
    }
}

/// The member with a section taken about its weak axis, its second moment divided by `ratio`; every section where `None`.
pub fn weak_axis(member: &Member, section: Option<usize>, ratio: f64) -> Option<Member> {
    stiffness::divided(member, section, ratio)
}

/// The member with every span between supports simply supported; `None` where that changes nothing or leaves a mechanism.
pub fn simple_spans(member: &Member) -> Option<Member> {
    supports::simple_spans(member)
}
