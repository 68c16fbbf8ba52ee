//! Exact fractions for replaying printed arithmetic.

use num_bigint::{BigInt, Sign};

use crate::quantity::Decimal;

/// A fraction of whole numbers; its denominator is positive. Not reduced: trees are shallow, and reducing costs more.
#[derive(Clone, Debug)]
pub struct Exact {
    top: BigInt,
    bottom: BigInt,
}

fn ten(power: u32) -> BigInt {
    BigInt::from(10).pow(power)
}

impl Exact {
    /// A whole number.
    pub fn whole(n: i64) -> Self {
        Self { top: BigInt::from(n), bottom: BigInt::from(1) }
    }

    /// A decimal.
    pub fn decimal(decimal: Decimal) -> Self {
        let top = BigInt::from(decimal.mantissa());
        let power = ten(decimal.exponent().unsigned_abs());
        if decimal.exponent() >= 0 {
            Self { top: top * power, bottom: BigInt::from(1) }
        } else {
            Self { top, bottom: power }
        }
    }

    /// Sum.
    pub fn plus(&self, other: &Self) -> Self {
        if self.bottom == other.bottom {
            return Self { top: &self.top + &other.top, bottom: self.bottom.clone() };
        }
        Self { top: &self.top * &other.bottom + &other.top * &self.bottom, bottom: &self.bottom * &other.bottom }
    }

    /// Product.
    pub fn times(&self, other: &Self) -> Self {
        Self { top: &self.top * &other.top, bottom: &self.bottom * &other.bottom }
    }

    /// Quotient; `None` for a zero divisor.
    pub fn over(&self, other: &Self) -> Option<Self> {
        match other.top.sign() {
            Sign::NoSign => None,
            Sign::Plus => Some(Self { top: &self.top * &other.bottom, bottom: &self.bottom * &other.top }),
            Sign::Minus => Some(Self { top: -(&self.top * &other.bottom), bottom: -(&self.bottom * &other.top) }),
        }
    }

    /// Whole power.
    pub fn power(&self, n: u32) -> Self {
        Self { top: self.top.pow(n), bottom: self.bottom.pow(n) }
    }

    /// Opposite.
    pub fn opposite(&self) -> Self {
        Self { top: -&self.top, bottom: self.bottom.clone() }
    }

    /// Absolute value.
    pub fn absolute(&self) -> Self {
        Self { top: BigInt::from(self.top.magnitude().clone()), bottom: self.bottom.clone() }
    }

    /// The smaller of two.
    pub fn least(self, other: Self) -> Self {
        let smaller = (&self.top * &other.bottom) <= (&other.top * &self.bottom);
        if smaller { self } else { other }
    }

    /// The power of ten of its leading digit; `None` for zero.
    pub fn leading(&self) -> Option<i32> {
        if self.top.sign() == Sign::NoSign {
            return None;
        }
        let size = self.absolute();
        let bits = i64::try_from(size.top.bits()).ok()? - i64::try_from(size.bottom.bits()).ok()?;
        let mut guess = i32::try_from((bits * 30_103).div_euclid(100_000)).ok()? + 1;
        while !size.reaches(guess) {
            guess -= 1;
        }
        Some(guess)
    }

    /// Whether its size is at least 10^power; it is not negative.
    fn reaches(&self, power: i32) -> bool {
        let scale = ten(power.unsigned_abs());
        if power >= 0 { self.top >= &self.bottom * scale } else { &self.top * scale >= self.bottom }
    }

    /// Rounded half-even to a multiple of 10^exponent; `None` beyond 128 bits.
    pub fn rounded(&self, exponent: i32) -> Option<Decimal> {
        let scale = ten(exponent.unsigned_abs());
        let (top, bottom) = if exponent >= 0 {
            (self.top.clone(), &self.bottom * scale)
        } else {
            (&self.top * scale, self.bottom.clone())
        };
        let size = BigInt::from(top.magnitude().clone());
        let mut whole = &size / &bottom;
        let rest = (&size - &whole * &bottom) * 2;
        let odd = whole.bit(0);
        if rest > bottom || (rest == bottom && odd) {
            whole += 1;
        }
        let mantissa = i128::try_from(&whole).ok()?;
        Some(Decimal::new(if top.sign() == Sign::Minus { -mantissa } else { mantissa }, exponent))
    }

    /// Rounded to 10^exponent, with trailing zeros dropped where nothing was lost.
    pub fn shortest(&self, exponent: i32) -> Option<Decimal> {
        let rounded = self.rounded(exponent)?;
        let back = Self::decimal(rounded);
        let lossless = &back.top * &self.bottom == &self.top * &back.bottom;
        if !lossless {
            return Some(rounded);
        }
        let short = rounded.trimmed();
        if short.exponent() > 0 { short.with_exponent(0) } else { Some(short) }
    }
}

#[cfg(test)]
mod tests {
    use super::Exact;
    use crate::quantity::Decimal;

    fn rounded(text: &str, exponent: i32) -> String {
        let decimal = Decimal::parse(text).expect("a figure");
        Exact::decimal(decimal).rounded(exponent).expect("fits").to_string()
    }

    #[test]
    fn halves_round_to_the_even_neighbour() {
        assert_eq!(rounded("0.125", -2), "0.12");
        assert_eq!(rounded("0.135", -2), "0.14");
        assert_eq!(rounded("-0.125", -2), "-0.12");
        assert_eq!(rounded("0.1251", -2), "0.13");
        assert_eq!(rounded("1250", 2), "1200");
    }

    #[test]
    fn the_leading_digit_is_found_exactly() {
        for (text, power) in [("1", 0), ("9.999999", 0), ("10", 1), ("0.1", -1), ("0.099", -2), ("-123456", 5)] {
            assert_eq!(Exact::decimal(Decimal::parse(text).expect("a figure")).leading(), Some(power), "{text}");
        }
        let third = Exact::whole(1).over(&Exact::whole(3)).expect("not zero");
        assert_eq!(third.leading(), Some(-1));
        assert_eq!(third.rounded(-5).expect("fits").to_string(), "0.33333");
    }
}
