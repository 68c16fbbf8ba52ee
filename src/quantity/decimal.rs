//! Exact decimals: the only numbers that are ever printed.

use std::cmp::Ordering;
use std::fmt;

/// An exact decimal, `mantissa * 10^exponent`.
///
/// A figure typed in a deck and every figure printed on a sheet is one of these. Arithmetic is checked: what does not
/// fit 128 bits is `None`, never a wrong figure. Trailing zeros are significant for printing (`12.40` keeps its zero)
/// but not for comparison.
#[derive(Clone, Copy, Debug)]
pub struct Decimal {
    mantissa: i128,
    exponent: i32,
}

impl Decimal {
    /// Zero, printed as `0`.
    pub const ZERO: Self = Self { mantissa: 0, exponent: 0 };
    /// One.
    pub const ONE: Self = Self { mantissa: 1, exponent: 0 };

    /// `mantissa * 10^exponent`.
    pub const fn new(mantissa: i128, exponent: i32) -> Self {
        Self { mantissa, exponent }
    }

    /// The whole number before the power of ten is applied.
    pub const fn mantissa(self) -> i128 {
        self.mantissa
    }

    /// The power of ten.
    pub const fn exponent(self) -> i32 {
        self.exponent
    }

    /// Whether the value is zero.
    pub const fn is_zero(self) -> bool {
        self.mantissa == 0
    }

    /// Reads `-12.40`, `8356`, `1.2e-5`: ASCII digits, at most one point, an optional exponent.
    ///
    /// `None` for anything else: a comma, a grouped figure, `NaN`, infinity, an exponent beyond ±60 or more than 34 digits.
    pub fn parse(text: &str) -> Option<Self> {
        let (body, power) = match text.find(['e', 'E']) {
            Some(place) => {
                let (body, rest) = text.split_at(place);
                (body, rest.get(1..)?.parse::<i32>().ok()?)
            }
            None => (text, 0),
        };
        let (negative, digits) = match body.strip_prefix('-') {
            Some(rest) => (true, rest),
            None => (false, body.strip_prefix('+').unwrap_or(body)),
        };
        let (whole, fraction) = digits.split_once('.').unwrap_or((digits, ""));
        let figures = whole.len() + fraction.len();
        let ascii = |part: &str| part.bytes().all(|byte| byte.is_ascii_digit());
        if figures == 0 || figures > 34 || !ascii(whole) || !ascii(fraction) || power.abs() > 60 {
            return None;
        }
        if digits.ends_with('.') || digits.starts_with('.') {
            return None;
        }
        let mantissa =
            whole.bytes().chain(fraction.bytes()).fold(0_i128, |sum, byte| sum * 10 + i128::from(byte - b'0'));
        let places = i32::try_from(fraction.len()).ok()?;
        Some(Self::new(if negative { -mantissa } else { mantissa }, power - places))
    }

    /// The nearest `f64`. Exact decimals of up to 15 digits and powers to 10^22 convert with one rounding.
    pub fn to_f64(self) -> f64 {
        let short = self.trimmed();
        let mantissa = short.mantissa as f64;
        if short.exponent >= 0 { mantissa * ten(short.exponent) } else { mantissa / ten(-short.exponent) }
    }

    /// The decimal of `digits` significant figures nearest to `value`; zero for what is not finite or beyond 10^30.
    pub fn nearest(value: f64, digits: u32) -> Self {
        if value == 0.0 || !value.is_finite() || value.abs() > 1e30 || value.abs() < 1e-30 {
            return Self::ZERO;
        }
        let lead = libm::floor(libm::log10(value.abs())) as i32;
        let places = digits as i32 - 1 - lead;
        let scaled = if places >= 0 { value * ten(places) } else { value / ten(-places) };
        let rounded = Self::new(libm::round(scaled) as i128, -places);
        if places < 0 { rounded.with_exponent(0).unwrap_or(rounded) } else { rounded }
    }

    /// The same value without trailing zeros.
    pub fn trimmed(self) -> Self {
        if self.mantissa == 0 {
            return Self::ZERO;
        }
        let mut short = self;
        while short.mantissa % 10 == 0 {
            short.mantissa /= 10;
            short.exponent += 1;
        }
        short
    }

    /// The same value written with exactly the power of ten `exponent`, where that loses no digit.
    pub fn with_exponent(self, exponent: i32) -> Option<Self> {
        let short = self.trimmed();
        if short.is_zero() {
            return Some(Self::new(0, exponent));
        }
        let shift = u32::try_from(short.exponent.checked_sub(exponent)?).ok()?;
        let mantissa = short.mantissa.checked_mul(10_i128.checked_pow(shift)?)?;
        Some(Self::new(mantissa, exponent))
    }

    /// Exact sum.
    pub fn plus(self, other: Self) -> Option<Self> {
        let exponent = self.trimmed().exponent.min(other.trimmed().exponent);
        let (left, right) = (self.with_exponent(exponent)?, other.with_exponent(exponent)?);
        Some(Self::new(left.mantissa.checked_add(right.mantissa)?, exponent))
    }

    /// Exact difference.
    pub fn minus(self, other: Self) -> Option<Self> {
        self.plus(Self::new(other.mantissa.checked_neg()?, other.exponent))
    }

    /// Exact product.
    pub fn times(self, other: Self) -> Option<Self> {
        let (left, right) = (self.trimmed(), other.trimmed());
        Some(Self::new(left.mantissa.checked_mul(right.mantissa)?, left.exponent.checked_add(right.exponent)?))
    }
}

/// 10^n for n from 0, by multiplication; exact up to 10^22.
fn ten(n: i32) -> f64 {
    (0..n).fold(1.0, |power, _| power * 10.0)
}

impl PartialEq for Decimal {
    fn eq(&self, other: &Self) -> bool {
        self.cmp(other) == Ordering::Equal
    }
}

impl Eq for Decimal {}

impl PartialOrd for Decimal {
    fn partial_cmp(&self, other: &Self) -> Option<Ordering> {
        Some(self.cmp(other))
    }
}

impl Ord for Decimal {
    fn cmp(&self, other: &Self) -> Ordering {
        let (left, right) = (self.trimmed(), other.trimmed());
        let exponent = left.exponent.min(right.exponent);
        match (left.with_exponent(exponent), right.with_exponent(exponent)) {
            (Some(a), Some(b)) => a.mantissa.cmp(&b.mantissa),
            // Too far apart to share an exponent: their sizes differ by far more than a rounding.
            _ => self.to_f64().total_cmp(&other.to_f64()),
        }
    }
}

impl fmt::Display for Decimal {
    /// ASCII digits with `-` and `.`, no grouping; `e` only beyond twelve zeros at either end.
    fn fmt(&self, out: &mut fmt::Formatter<'_>) -> fmt::Result {
        let sign = if self.mantissa < 0 { "-" } else { "" };
        let digits = self.mantissa.unsigned_abs().to_string();
        if self.exponent > 12 || self.exponent < -30 {
            return write!(out, "{sign}{digits}e{}", self.exponent);
        }
        if self.exponent >= 0 {
            let zeros = if self.is_zero() { 0 } else { self.exponent.unsigned_abs() as usize };
            return write!(out, "{sign}{digits}{}", "0".repeat(zeros));
        }
        let places = self.exponent.unsigned_abs() as usize;
        let padded = format!("{digits:0>width$}", width = places + 1);
        let (whole, fraction) = padded.split_at(padded.len() - places);
        write!(out, "{sign}{whole}.{fraction}")
    }
}

#[cfg(test)]
mod tests {
    use super::Decimal;

    #[test]
    fn a_typed_figure_prints_as_it_was_typed() {
        for text in ["12.40", "-0.05", "8356", "0", "200", "0.000012"] {
            assert_eq!(Decimal::parse(text).map(|d| d.to_string()).as_deref(), Some(text));
        }
        assert_eq!(Decimal::parse("1.2e-5").map(|d| d.to_string()).as_deref(), Some("0.000012"));
        assert_eq!(Decimal::parse("3e3").map(|d| d.to_string()).as_deref(), Some("3000"));
    }

    #[test]
    fn what_is_not_a_plain_figure_is_refused() {
        for text in ["", "-", "1,5", "1.2.3", "NaN", "inf", "1e", "1e999", ".5", "5.", "--1", "1 000", "٣"] {
            assert!(Decimal::parse(text).is_none(), "{text}");
        }
    }

    #[test]
    fn sums_are_exact_where_floating_point_is_not() {
        let sum = Decimal::parse("0.1").and_then(|a| a.plus(Decimal::parse("0.2")?));
        assert_eq!(sum, Decimal::parse("0.3"));
        assert_eq!(Decimal::parse("1.50"), Decimal::parse("1.5"));
    }
}
