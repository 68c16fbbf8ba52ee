//! Reading quantities: a decimal number, then a unit; lengths may be sums.

use std::ops::Range;

use super::parse_unit::parse_unit;
use super::{Decimal, Term, Typed, Unit};

/// Why a text is not a quantity, and which part of it is at fault.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct QuantityFault {
    /// Byte range within the text.
    pub range: Range<usize>,
    /// What is wrong.
    pub message: String,
    /// How to mend it; may be empty.
    pub hint: String,
}

pub(super) fn fault(range: Range<usize>, message: impl Into<String>, hint: impl Into<String>) -> QuantityFault {
    QuantityFault { range, message: message.into(), hint: hint.into() }
}

/// Reads `8.5 kN/m`, `12 ft 6 in`.
///
/// # Errors
/// A missing or broken number, a decimal comma, grouped digits, a missing or unknown unit, a sum that can be read in two
/// ways.
pub fn parse_quantity(text: &str) -> Result<Typed, QuantityFault> {
    parse_placed(text).map(|(typed, _)| typed)
}

/// The same with the byte range of each term's unit.
///
/// # Errors
/// As [`parse_quantity`].
pub fn parse_placed(text: &str) -> Result<(Typed, Vec<Range<usize>>), QuantityFault> {
    let mut terms: Vec<Term> = Vec::new();
    let mut places = Vec::new();
    let mut at = skip_space(text, 0);
    while at < text.len() || terms.is_empty() {
        let joint = text.get(at..at + 1).filter(|sign| !terms.is_empty() && ["+", "-"].contains(sign));
        let sign_at = at;
        if joint.is_some() {
            at = skip_space(text, at + 1);
        }
        let (figure, after) = number(text, at)?;
        let start = skip_space(text, after);
        let end = unit_end(text, start);
        let words = text.get(start..end).unwrap_or_default().trim_end();
        if words.is_empty() {
            return Err(fault(at..after, "a unit is missing behind the number", ""));
        }
        if second_number(words) {
            return Err(grouped(text, at, start));
        }
        let unit = parse_unit(words)
            .map_err(|inner| QuantityFault { range: inner.range.start + start..inner.range.end + start, ..inner })?;
        // 12 ft-6 in is the trade's hyphen; anywhere else a minus inside a sum is in doubt.
        let feet_and_inches = is_plain(&unit, "in") && terms.last().is_some_and(|term| is_plain(&term.unit, "ft"));
        if joint == Some("-") && !feet_and_inches {
            let hint = "a hyphen joins feet and inches only; write the length as one figure";
            return Err(fault(sign_at..sign_at + 1, "a minus inside a sum can be read in two ways", hint));
        }
        terms.push(Term { figure, unit });
        places.push(start..start + words.len());
        at = skip_space(text, end);
    }
    let minus = text.trim_start().starts_with('-') || terms.iter().any(|term| term.figure.mantissa() < 0);
    if terms.len() > 1 && minus {
        let hint = "write it as one figure, as in \"-1.5 ft\"";
        return Err(fault(0..text.len(), "a negative sum can be read in two ways", hint));
    }
    Ok((Typed { terms }, places))
}

fn is_plain(unit: &Unit, name: &str) -> bool {
    matches!(unit.factors(), [(atom, 1)] if atom.text == name)
}

fn skip_space(text: &str, from: usize) -> usize {
    let rest = text.get(from..).unwrap_or_default();
    from + (rest.len() - rest.trim_start().len())
}

/// Whether what stands in the place of a unit begins with a number other than the 1 of `1/K`.
fn second_number(words: &str) -> bool {
    let behind_one = words.strip_prefix('1').map(str::trim_start).and_then(|rest| rest.strip_prefix('/'));
    let fraction = behind_one.is_some_and(|rest| rest.trim_start().starts_with(|c: char| c.is_ascii_digit()));
    fraction || (behind_one.is_none() && words.starts_with(|c: char| c.is_ascii_digit()))
}

/// The fault of `1 000 N`, or of `12 1/2 in`.
fn grouped(text: &str, number: usize, second: usize) -> QuantityFault {
    let rest = text.get(second..).unwrap_or_default();
    let length = rest.find(|c: char| !c.is_ascii_digit()).unwrap_or(rest.len());
    let behind = rest.get(length..).unwrap_or_default();
    let figures = text.get(number..second + length).unwrap_or_default();
    if length == 3 && !behind.starts_with('/') {
        let whole: String = figures.chars().filter(|letter| !letter.is_whitespace()).collect();
        let hint = format!("digits are not grouped: write {whole}");
        return fault(number..second + length, "a gap inside a number", hint);
    }
    let hint = "write one figure and then its unit; a fraction as a decimal, 12.5 in";
    fault(second..second + length, "a second number where a unit was expected", hint)
}

fn number(text: &str, from: usize) -> Result<(Decimal, usize), QuantityFault> {
    let rest = text.get(from..).unwrap_or_default();
    let bytes = rest.as_bytes();
    let digit = |index: usize| bytes.get(index).is_some_and(u8::is_ascii_digit);
    let mut end = usize::from(matches!(bytes.first(), Some(b'+' | b'-')));
    while digit(end) {
        end += 1;
    }
    if bytes.get(end) == Some(&b',') && digit(end + 1) {
        let comma = from + end;
        let hint = "write a point for decimals, 1.5, and nothing between thousands, 1500";
        return Err(fault(comma..comma + 1, "a decimal comma or a comma between thousands", hint));
    }
    if let Some(mark) = rest.get(end..).and_then(|behind| behind.chars().next())
        && matches!(mark, '_' | '\'' | '’')
        && (1..=3).all(|step| digit(end + mark.len_utf8() - 1 + step))
    {
        let place = from + end;
        let hint = "digits are not grouped: write 1500";
        return Err(fault(place..place + mark.len_utf8(), "a mark between thousands", hint));
    }
    if bytes.get(end) == Some(&b'.') {
        end += 1;
        while digit(end) {
            end += 1;
        }
    }
    if matches!(bytes.get(end), Some(b'e' | b'E')) {
        let sign = usize::from(matches!(bytes.get(end + 1), Some(b'+' | b'-')));
        if digit(end + 1 + sign) {
            end += 1 + sign;
            while digit(end) {
                end += 1;
            }
        }
    }
    match rest.get(..end).and_then(Decimal::parse).filter(|figure| figure.to_f64().is_finite()) {
        Some(figure) => Ok((figure, from + end)),
        None => Err(no_number(rest, from, end)),
    }
}

/// Why there is no number at the beginning of `rest`, of which `end` bytes look like one.
fn no_number(rest: &str, from: usize, end: usize) -> QuantityFault {
    let word = rest.split_whitespace().next().unwrap_or_default();
    let place = from..from + word.len().max(end);
    let looks = rest.get(..end).unwrap_or_default().trim_start_matches(['+', '-']);
    if word.starts_with(['−', '–', '—']) {
        let sign = word.chars().next().map_or(1, char::len_utf8);
        return fault(from..from + sign, "a dash where a minus sign was expected", "write the hyphen of the keyboard");
    }
    if looks.starts_with('.') && looks.len() > 1 {
        return fault(place, "a number begins with a digit", format!("write 0{looks}"));
    }
    if looks.ends_with('.') && looks.len() > 1 {
        return fault(place, "a number does not end with a point", format!("write {looks}0"));
    }
    if looks.starts_with(|c: char| c.is_ascii_digit()) {
        let hint = "at most 34 digits, and a power of ten within 60";
        return fault(from..from + end, "this number is too long or too great", hint);
    }
    fault(place, "a plain decimal number was expected", "")
}

/// Where the unit that begins at `from` ends: before a space or sign that leads to a figure, or at the end.
fn unit_end(text: &str, from: usize) -> usize {
    let rest = text.get(from..).unwrap_or_default();
    let mut gap: Option<usize> = None;
    let mut previous = ' ';
    for (index, letter) in rest.char_indices() {
        match gap {
            Some(start) if letter.is_ascii_digit() && index > 0 => return from + start,
            _ if letter.is_whitespace() || (matches!(letter, '+' | '-') && previous != '^') => {
                gap = gap.or(Some(index));
            }
            _ => gap = None,
        }
        previous = letter;
    }
    text.len()
}

#[cfg(test)]
mod tests {
    use super::parse_quantity;

    fn shown(text: &str) -> String {
        match parse_quantity(text) {
            Ok(typed) => typed.terms.iter().map(|term| format!("[{}|{}]", term.figure, term.unit)).collect(),
            Err(fault) => format!("{}..{} {}", fault.range.start, fault.range.end, fault.message),
        }
    }

    fn hint(text: &str) -> String {
        parse_quantity(text).err().map(|fault| fault.hint).unwrap_or_default()
    }

    #[test]
    fn quantities_read_as_the_grammar_has_it() {
        assert_eq!(shown("8.5 kN/m"), "[8.5|kN/m]");
        assert_eq!(shown("12 kN m"), "[12|kN m]");
        assert_eq!(shown("12 kip-ft"), "[12|kip ft]");
        assert_eq!(shown("12 kip - ft"), "[12|kip ft]");
        assert_eq!(shown("12 kN·m"), "[12|kN m]");
        assert_eq!(shown("1.2e-5 1/K"), "[0.000012|1/K]");
        assert_eq!(shown("12 ft 6 in"), "[12|ft][6|in]");
        assert_eq!(shown("5 MN m/rad"), "[5|MN m/rad]");
        assert_eq!(shown("-3 kN*m"), "[-3|kN m]");
        assert_eq!(shown("3 kN/m^2"), "[3|kN/m^2]");
        assert_eq!(shown("3 m^-1 kN"), "[3|kN/m]");
        assert_eq!(shown("490 pcf"), "[490|pcf]");
    }

    #[test]
    fn a_hyphen_between_feet_and_inches_is_no_minus() {
        for text in ["12 ft -6 in", "12 ft - 6 in", "12 ft-6 in", "12 ft + 6 in"] {
            assert_eq!(shown(text), "[12|ft][6|in]", "{text}");
        }
        assert_eq!(shown("12 m -6 cm"), "5..6 a minus inside a sum can be read in two ways");
        assert_eq!(shown("-1 ft 6 in"), "0..10 a negative sum can be read in two ways");
        assert_eq!(shown("-0 ft 6 in"), "0..10 a negative sum can be read in two ways");
        assert_eq!(shown("1 ft - -6 in"), "0..12 a negative sum can be read in two ways");
    }

    #[test]
    fn faults_point_at_the_offending_part() {
        assert_eq!(shown("8.5"), "0..3 a unit is missing behind the number");
        assert_eq!(shown("NaN kN"), "0..3 a plain decimal number was expected");
        assert_eq!(shown("-inf kN"), "0..4 a plain decimal number was expected");
        assert_eq!(shown(".5 kN"), "0..2 a number begins with a digit");
        assert_eq!(shown("5. kN"), "0..2 a number does not end with a point");
        assert_eq!(shown("1e99 kN"), "0..4 this number is too long or too great");
        assert_eq!(shown("−5 kN"), "0..3 a dash where a minus sign was expected");
        assert_eq!(shown(""), "0..0 a plain decimal number was expected");
        assert_eq!(shown("8 kN/m 3"), "7..8 a unit is missing behind the number");
    }

    #[test]
    fn grouped_digits_are_named() {
        assert_eq!(shown("8,5 kN"), "1..2 a decimal comma or a comma between thousands");
        assert_eq!(shown("1,000 N"), "1..2 a decimal comma or a comma between thousands");
        assert_eq!(shown("1 000 N/m"), "0..5 a gap inside a number");
        assert_eq!(hint("1 000 N/m"), "digits are not grouped: write 1000");
        assert_eq!(shown("1'000 N"), "1..2 a mark between thousands");
        assert_eq!(shown("1_000 N"), "1..2 a mark between thousands");
        assert_eq!(shown("12 1/2 in"), "3..4 a second number where a unit was expected");
        assert_eq!(shown("12 15 in"), "3..5 a second number where a unit was expected");
    }
}
