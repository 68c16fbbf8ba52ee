//! The small set of operations a formula may use.
//!
//! Every tabulated case, sum and quotient of the program is one function, generic over [`Number`]. The kernel runs it on
//! `f64`, the working runs the same function on a tracing number and obtains its expression, and the tests run it on
//! exact rationals. That is why no string of a formula stands anywhere in the program.

use std::ops::{Add, Div, Mul, Neg, Sub};

/// Arithmetic that a formula may use: the four operations, whole powers, whole constants, absolute value and choice.
///
/// Implementations must follow ordinary algebra. Not guaranteed: freedom from rounding (an `f64` rounds) or from division
/// by zero (callers hold divisors away from zero by construction of the member).
pub trait Number:
    Clone + Add<Output = Self> + Sub<Output = Self> + Mul<Output = Self> + Div<Output = Self> + Neg<Output = Self>
{
    /// The whole number `n`.
    fn whole(n: i64) -> Self;
    /// `self` multiplied by itself `n` times; `n` is at least 1.
    fn power(self, n: u32) -> Self;
    /// The absolute value.
    fn magnitude(self) -> Self;
    /// The smaller of the two.
    fn smaller(self, other: Self) -> Self;
    /// The greater of the two.
    fn greater(self, other: Self) -> Self;
}

impl Number for f64 {
    fn whole(n: i64) -> Self {
        n as f64
    }

    /// Repeated multiplication: the platform's `powi` may round differently from one processor to the next.
    fn power(self, n: u32) -> Self {
        (1..n).fold(self, |product, _| product * self)
    }

    fn magnitude(self) -> Self {
        self.abs()
    }

    fn smaller(self, other: Self) -> Self {
        if other < self { other } else { self }
    }

    fn greater(self, other: Self) -> Self {
        if other > self { other } else { self }
    }
}

#[cfg(test)]
mod tests {
    use super::Number;

    #[test]
    fn a_power_is_repeated_multiplication() {
        assert_eq!(3.0_f64.power(1), 3.0);
        assert_eq!(3.0_f64.power(4), 81.0);
        assert_eq!(f64::whole(-2).power(3), -8.0);
    }
}
