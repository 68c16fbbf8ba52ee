//! Exact places along the member.

use super::Decimal;

/// A place along the member: an exact decimal of metres from its left end.
///
/// All units of length are exact decimals of a metre, so sums and comparisons of places need no tolerance.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct Place(Decimal);

impl Place {
    /// The left end.
    pub const ZERO: Self = Self(Decimal::ZERO);

    /// From exact metres.
    pub const fn metres(exact: Decimal) -> Self {
        Self(exact)
    }

    /// Exact metres.
    pub const fn exact(self) -> Decimal {
        self.0
    }

    /// Metres, rounded to `f64`.
    pub fn x(self) -> f64 {
        self.0.to_f64()
    }

    /// The exact distance from `origin` to here, rounded once; negative to its left.
    pub fn beyond(self, origin: Self) -> f64 {
        self.0.minus(origin.0).map_or_else(|| self.x() - origin.x(), Decimal::to_f64)
    }
}
