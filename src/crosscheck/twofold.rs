//! Numbers of twice the precision: a sum of two `f64`, after Dekker, *A floating-point technique for extending the available
//! precision* (1971), and Knuth's two-sum. No fused operations: the same on every processor.
//!
//! A stiffness matrix of members a thousand million times stiffer than their neighbours loses nine digits; the second route
//! must not, or it would find fault with the first.

use std::iter::Sum;
use std::ops::{Add, AddAssign, Div, Mul, Neg, Sub, SubAssign};

/// The value `high + low`, `low` at most half a unit in the last place of `high`.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub(super) struct Twofold {
    high: f64,
    low: f64,
}

impl Twofold {
    pub(super) const ZERO: Self = Self { high: 0.0, low: 0.0 };

    /// The nearest `f64`.
    pub(super) fn single(self) -> f64 {
        self.high + self.low
    }
}

impl From<f64> for Twofold {
    fn from(high: f64) -> Self {
        Self { high, low: 0.0 }
    }
}

/// A sum and what it lost.
fn two_sum(a: f64, b: f64) -> (f64, f64) {
    let sum = a + b;
    let back = sum - a;
    (sum, (a - (sum - back)) + (b - back))
}

/// A sum and what it lost, where `a` is the greater.
fn quick(a: f64, b: f64) -> Twofold {
    let high = a + b;
    Twofold { high, low: b - (high - a) }
}

/// Two halves of 26 bits.
fn split(a: f64) -> (f64, f64) {
    let scaled = a * 134_217_729.0;
    let high = scaled - (scaled - a);
    (high, a - high)
}

/// A product and what it lost.
fn two_product(a: f64, b: f64) -> (f64, f64) {
    let product = a * b;
    let ((ah, al), (bh, bl)) = (split(a), split(b));
    (product, ((ah * bh - product) + ah * bl + al * bh) + al * bl)
}

impl Add for Twofold {
    type Output = Self;
    fn add(self, other: Self) -> Self {
        let (high, lost) = two_sum(self.high, other.high);
        let (low, less) = two_sum(self.low, other.low);
        let first = quick(high, lost + low);
        quick(first.high, first.low + less)
    }
}

impl Neg for Twofold {
    type Output = Self;
    fn neg(self) -> Self {
        Self { high: -self.high, low: -self.low }
    }
}

impl Sub for Twofold {
    type Output = Self;
    fn sub(self, other: Self) -> Self {
        self + -other
    }
}

impl Mul for Twofold {
    type Output = Self;
    fn mul(self, other: Self) -> Self {
        let (high, lost) = two_product(self.high, other.high);
        quick(high, lost + (self.high * other.low + self.low * other.high))
    }
}

impl Div for Twofold {
    type Output = Self;
    fn div(self, other: Self) -> Self {
        let first = self.high / other.high;
        let rest = self - other * Self::from(first);
        let second = rest.high / other.high;
        let rest = rest - other * Self::from(second);
        quick(first, second) + Self::from(rest.high / other.high)
    }
}

impl AddAssign for Twofold {
    fn add_assign(&mut self, other: Self) {
        *self = *self + other;
    }
}

impl SubAssign for Twofold {
    fn sub_assign(&mut self, other: Self) {
        *self = *self - other;
    }
}

impl Sum for Twofold {
    fn sum<I: Iterator<Item = Self>>(terms: I) -> Self {
        terms.fold(Self::ZERO, Add::add)
    }
}

#[cfg(test)]
mod tests {
    use super::Twofold;

    #[test]
    fn twice_the_digits_are_kept() {
        let (one, small) = (Twofold::from(1.0), Twofold::from(1e-25));
        assert_eq!((one + small - one).single(), 1e-25);
        let third = one / Twofold::from(3.0);
        assert!((third * Twofold::from(3.0) - one).single().abs() < 1e-31);
        let near = one + Twofold::from(1e-20);
        // (1 + e)(1 - e) = 1 - e^2.
        let product = near * (one - Twofold::from(1e-20));
        assert!((product - one).single().abs() < 1e-31);
    }
}
