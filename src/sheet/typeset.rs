//! Figures and units as printed text: the one place where a decimal becomes characters of a page.

use crate::quantity::{Decimal, Typed, Unit};

/// Joins a figure to its unit and groups the digits: no line ends here.
pub(super) const NARROW: char = '\u{202F}';
/// Joins words that stay on one line.
pub(super) const FIXED: char = '\u{00A0}';

/// A decimal as a sheet prints it: a true minus, digits grouped by thin spaces from 10 000 up, a power of ten where it
/// would otherwise hold a long row of zeros. Trailing zeros are kept: they are significant.
pub fn figure(decimal: Decimal) -> String {
    let Some((mantissa, power)) = power_of_ten(decimal) else { return plain(decimal) };
    let raised: String = power.to_string().chars().map(superscript).collect();
    if mantissa.mantissa() == 1 && mantissa.exponent() == 0 {
        return format!("10{raised}");
    }
    format!("{}{NARROW}·{NARROW}10{raised}", plain(mantissa))
}

fn plain(decimal: Decimal) -> String {
    let text = decimal.to_string();
    let (sign, digits) = text.strip_prefix('-').map_or(("", text.as_str()), |rest| ("−", rest));
    format!("{sign}{}", grouped(digits))
}

/// Digits with at most one point, in groups of three before it from five digits up.
pub(super) fn grouped(digits: &str) -> String {
    let (whole, fraction) = digits.split_once('.').map_or((digits, None), |(whole, fraction)| (whole, Some(fraction)));
    let mut out = String::new();
    for (index, digit) in whole.chars().enumerate() {
        if whole.len() >= 5 && index > 0 && (whole.len() - index).is_multiple_of(3) {
            out.push(NARROW);
        }
        out.push(digit);
    }
    if let Some(fraction) = fraction {
        out.push('.');
        out.push_str(fraction);
    }
    out
}

/// Mantissa with one digit before the point, and the power of ten; `None` where the plain figure reads well: from
/// 0.001 to 10^10, and zero.
fn power_of_ten(decimal: Decimal) -> Option<(Decimal, i32)> {
    if decimal.is_zero() {
        return None;
    }
    let digits = i32::try_from(decimal.mantissa().unsigned_abs().to_string().len()).ok()?;
    let leading = digits - 1 + decimal.exponent();
    (!(-3..=9).contains(&leading)).then(|| (Decimal::new(decimal.mantissa(), 1 - digits), leading))
}

/// A unit as a sheet prints it: `kN m²`, `kN/m²`, `1/K`; several divisors in brackets. Empty for a pure number.
pub fn unit(unit: &Unit) -> String {
    let part = |positive: bool| -> Vec<String> {
        let factors = unit.factors().iter().filter(|(_, power)| (*power > 0) == positive);
        factors.map(|(atom, power)| raised(symbol(atom.text), power.unsigned_abs())).collect()
    };
    let (top, bottom) = (part(true), part(false));
    let join = |words: &[String]| words.join(&FIXED.to_string());
    match bottom.as_slice() {
        [] => join(&top),
        [one] if top.is_empty() => format!("1/{one}"),
        [one] => format!("{}/{one}", join(&top)),
        several if top.is_empty() => format!("1/({})", join(several)),
        several => format!("{}/({})", join(&top), join(several)),
    }
}

fn symbol(text: &str) -> &str {
    match text {
        "degC" => "°C",
        "degF" => "°F",
        other => other,
    }
}

fn raised(text: &str, power: u8) -> String {
    if power == 1 {
        return text.to_owned();
    }
    let digits: String = power.to_string().chars().map(superscript).collect();
    format!("{text}{digits}")
}

/// A digit or minus raised; any other character as it is.
pub(super) const fn superscript(character: char) -> char {
    match character {
        '0' => '⁰',
        '1' => '¹',
        '2' => '²',
        '3' => '³',
        '4' => '⁴',
        '5' => '⁵',
        '6' => '⁶',
        '7' => '⁷',
        '8' => '⁸',
        '9' => '⁹',
        '-' => '⁻',
        other => other,
    }
}

/// A figure with its unit, held together on one line: `41 200 kN m²`, `0.81`.
pub fn quantity(decimal: Decimal, of: &Unit) -> String {
    let words = unit(of);
    if words.is_empty() { figure(decimal) } else { format!("{}{FIXED}{words}", figure(decimal)) }
}

/// A quantity as it was typed, each term with its unit: `12 ft 6 in`.
pub fn typed(given: &Typed) -> String {
    let terms: Vec<String> = given.terms.iter().map(|term| quantity(term.figure, &term.unit)).collect();
    terms.join(&FIXED.to_string())
}

/// A date in words: `30 November 2026`. Months beyond twelve print as their number; a date from a deck never has one.
pub fn date((year, month, day): (u16, u8, u8), months: &[String]) -> String {
    let name = usize::from(month).checked_sub(1).and_then(|index| months.get(index)).cloned();
    format!("{day}{FIXED}{}{FIXED}{year}", name.unwrap_or_else(|| month.to_string()))
}

#[cfg(test)]
mod tests {
    use super::{figure, quantity, unit};
    use crate::quantity::{Decimal, Unit};

    fn printed(text: &str) -> Option<String> {
        Decimal::parse(text).map(figure)
    }

    fn made(parts: &[(&str, i8)]) -> Unit {
        Unit::of(parts.iter().filter_map(|(text, power)| Some((Unit::known(text)?, *power))))
    }

    #[test]
    fn figures_carry_a_true_minus_and_group_from_ten_thousand() {
        for (typed, wanted) in [
            ("12.40", "12.40"),
            ("-265.0", "−265.0"),
            ("9999", "9999"),
            ("10000", "10\u{202F}000"),
            ("-1234567.50", "−1\u{202F}234\u{202F}567.50"),
            ("0.0012", "0.0012"),
            ("0.00012", "1.2\u{202F}·\u{202F}10⁻⁴"),
            ("0.000012", "1.2\u{202F}·\u{202F}10⁻⁵"),
            ("1e-6", "10⁻⁶"),
            ("210000000000", "2.10000000000\u{202F}·\u{202F}10¹¹"),
            ("0", "0"),
            ("0.00", "0.00"),
        ] {
            assert_eq!(printed(typed).as_deref(), Some(wanted), "{typed}");
        }
    }

    #[test]
    fn units_carry_superscripts() {
        for (parts, wanted) in [
            (&[("kN", 1), ("m", 2)][..], "kN\u{A0}m²"),
            (&[("kip", 1), ("ft", 2)], "kip\u{A0}ft²"),
            (&[("kN", 1), ("m", -2)], "kN/m²"),
            (&[("K", -1)], "1/K"),
            (&[("kN", 1), ("m", -2), ("K", -1)], "kN/(m²\u{A0}K)"),
            (&[("degC", 1)], "°C"),
            (&[], ""),
        ] {
            assert_eq!(unit(&made(parts)), wanted);
        }
    }

    #[test]
    fn a_pure_number_has_no_trailing_space() {
        assert_eq!(quantity(Decimal::new(81, -2), &Unit::none()), "0.81");
        assert_eq!(quantity(Decimal::new(1234, -3), &made(&[("mm", 1)])), "1.234\u{A0}mm");
    }
}
