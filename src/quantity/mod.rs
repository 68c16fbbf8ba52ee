//! Physical quantities: finite by construction, one internal unit each (SI base units), and the exact decimals and units
//! they are typed and printed in.

mod decimal;
mod parse;
mod parse_unit;
mod place;
mod unit;

pub use decimal::Decimal;
pub use parse::{QuantityFault, parse_placed, parse_quantity};
pub use parse_unit::parse_unit;
pub use place::Place;
pub use unit::{Atom, Dimension, KNOWN, PCI, Unit};

/// Standard gravity as weight per mass, N/kg (9.80665 m/s², ISO 80000-3).
pub const GRAVITY: Decimal = Decimal::new(980_665, -5);

/// One term of a typed quantity: `12 ft` of `12 ft 6 in`.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Term {
    /// The figure as typed.
    pub figure: Decimal,
    /// The unit as typed.
    pub unit: Unit,
}

/// What was typed for a quantity: one term, or several for a length in mixed units.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Typed {
    /// The terms in the order typed; never empty.
    pub terms: Vec<Term>,
}

/// A quantity of the deck: its value in SI and the figures it was typed as.
#[derive(Clone, Debug, PartialEq)]
pub struct Given<T> {
    /// The value.
    pub value: T,
    /// As typed.
    pub typed: Typed,
}

/// A pure number as typed.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Factor {
    /// Its value.
    pub value: f64,
    /// As typed; zero for a case the combination does not name.
    pub figure: Decimal,
}

macro_rules! quantities {
    ($($(#[$doc:meta])* $name:ident: $force:literal $length:literal $mass:literal $temperature:literal $angle:literal;)*) => {$(
        $(#[$doc])*
        #[derive(Clone, Copy, Debug, PartialEq, PartialOrd, Default)]
        pub struct $name(f64);

        impl $name {
            /// From SI base units; `None` when not finite.
            pub fn new(si: f64) -> Option<Self> {
                si.is_finite().then_some(Self(si))
            }

            /// In SI base units.
            pub const fn si(self) -> f64 {
                self.0
            }
        }

        impl Physical for $name {
            const DIMENSION: Dimension = Dimension::new($force, $length, $mass, $temperature, $angle);

            fn from_si(si: f64) -> Option<Self> {
                Self::new(si)
            }

            fn to_si(&self) -> f64 {
                self.0
            }
        }
    )*};
}

/// A quantity that can be read from a deck.
pub trait Physical: Sized {
    /// Its dimension.
    const DIMENSION: Dimension;
    /// From SI base units; `None` when not finite.
    fn from_si(si: f64) -> Option<Self>;
    /// In SI base units.
    fn to_si(&self) -> f64;
}

quantities! {
    /// A length, m.
    Length: 0 1 0 0 0;
    /// An area, m².
    Area: 0 2 0 0 0;
    /// A second moment of area, m⁴.
    SecondMoment: 0 4 0 0 0;
    /// A force, N.
    Force: 1 0 0 0 0;
    /// A moment, N·m.
    Moment: 1 1 0 0 0;
    /// A force per length, N/m; also the stiffness of a support in deflection.
    Intensity: 1 -1 0 0 0;
    /// A force per area, Pa: a modulus, or a load on an area.
    Stress: 1 -2 0 0 0;
    /// A weight per volume, N/m³.
    SpecificWeight: 1 -3 0 0 0;
    /// A mass per volume, kg/m³.
    Density: 0 -3 1 0 0;
    /// A mass per length, kg/m.
    LinearMass: 0 -1 1 0 0;
    /// A moment per turn, N·m/rad.
    RotationalStiffness: 1 1 0 0 -1;
    /// A plane angle, rad.
    Angle: 0 0 0 0 1;
    /// A difference of temperature, K.
    TemperatureDifference: 0 0 0 1 0;
    /// A strain per temperature, 1/K.
    Expansion: 0 0 0 -1 0;
}
