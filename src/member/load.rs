//! Load cases and what they hold.

use super::Place;
use crate::quantity::{Angle, Force, Given, Intensity, Length, Moment, Stress, TemperatureDifference};

/// A load case.
#[derive(Clone, Debug, PartialEq)]
pub struct Case {
    /// Its name in the deck.
    pub name: String,
    /// What it is called; may be empty.
    pub title: String,
    /// What kind of action it is.
    pub nature: Nature,
    /// What it holds, in the deck's order.
    pub loads: Vec<Load>,
}

/// The kind of action a case holds.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum Nature {
    /// Permanent action.
    Permanent,
    /// Imposed on floors.
    Imposed,
    /// Imposed on roofs.
    RoofImposed,
    /// Snow.
    Snow,
    /// Rain.
    Rain,
    /// Wind.
    Wind,
    /// Earthquake.
    Seismic,
    /// Earth pressure.
    Soil,
    /// Fluids.
    Fluid,
    /// Temperature.
    Thermal,
    /// Movement of supports.
    Movement,
    /// Any other.
    Other,
}

impl Nature {
    /// Every nature with the deck's word for it.
    pub const WORDS: [(&'static str, Self); 12] = [
        ("permanent", Self::Permanent),
        ("imposed", Self::Imposed),
        ("roof_imposed", Self::RoofImposed),
        ("snow", Self::Snow),
        ("rain", Self::Rain),
        ("wind", Self::Wind),
        ("seismic", Self::Seismic),
        ("soil", Self::Soil),
        ("fluid", Self::Fluid),
        ("thermal", Self::Thermal),
        ("movement", Self::Movement),
        ("other", Self::Other),
    ];
}

/// One load of a case.
#[derive(Clone, Debug, PartialEq)]
pub struct Load {
    /// What acts, where.
    pub kind: LoadKind,
    /// The deck's remark.
    pub note: Option<String>,
    /// Where the figure comes from.
    pub source: Option<String>,
}

/// A part of the member; `to` lies beyond `from`.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Stretch {
    /// Left end.
    pub from: Place,
    /// Right end.
    pub to: Place,
}

/// What acts. Positive senses as in the deck: forces and movements down, couples and turns clockwise.
#[derive(Clone, Debug, PartialEq)]
pub enum LoadKind {
    /// The weight of every segment; each has a section that gives one.
    SelfWeight,
    /// An intensity, uniform over a part.
    Uniform {
        /// The intensity.
        w: Given<Intensity>,
        /// Where.
        over: Stretch,
    },
    /// An intensity that runs linearly from the left to the right end of a part.
    Linear {
        /// At the left end of the part.
        left: Given<Intensity>,
        /// At the right end of the part.
        right: Given<Intensity>,
        /// Where.
        over: Stretch,
    },
    /// A load on an area, carried over a width.
    Area {
        /// Force per area.
        q: Given<Stress>,
        /// Tributary width.
        width: Given<Length>,
        /// Where.
        over: Stretch,
    },
    /// A force at a place.
    Point {
        /// The force.
        p: Given<Force>,
        /// Where.
        at: Place,
    },
    /// A couple at a place.
    Couple {
        /// The couple.
        m: Given<Moment>,
        /// Where.
        at: Place,
    },
    /// A support (on a spring: its foot) moves down.
    Settlement {
        /// Index of the support.
        support: usize,
        /// By how much.
        by: Given<Length>,
    },
    /// A support (on a spring: its foot) turns.
    Rotation {
        /// Index of the support.
        support: usize,
        /// By how much.
        by: Given<Angle>,
    },
    /// The top of a part is warmer than its bottom.
    Gradient {
        /// Temperature at the top less temperature at the bottom.
        difference: Given<TemperatureDifference>,
        /// Where.
        over: Stretch,
    },
}
