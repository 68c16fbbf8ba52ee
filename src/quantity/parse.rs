//! Reading quantities: a decimal number, then a unit; lengths may be sums.

use std::ops::Range;

use super::{Atom, Decimal, KNOWN, PCI, Term, Typed, Unit};

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

fn fault(range: Range<usize>, message: impl Into<String>, hint: impl Into<String>) -> QuantityFault {
    QuantityFault { range, message: message.into(), hint: hint.into() }
}

/// Reads `8.5 kN/m`, `12 ft 6 in`.
///
/// # Errors
/// A missing or broken number, a decimal comma, a missing or unknown unit.
pub fn parse_quantity(text: &str) -> Result<Typed, QuantityFault> {
    let mut terms: Vec<Term> = Vec::new();
    let mut at = skip_space(text, 0);
    while at < text.len() || terms.is_empty() {
        if !terms.is_empty() {
            // Feet and inches are often written with a hyphen; it is never a minus.
            if text.get(at..).is_some_and(|rest| rest.starts_with(['-', '+'])) {
                at = skip_space(text, at + 1);
            }
            if terms.iter().any(|term| term.figure.mantissa() < 0) {
                let hint = "write it as one figure, as in \"-1.5 ft\"";
                return Err(fault(0..text.len(), "a negative sum can be read in two ways", hint));
            }
        }
        let (figure, after) = number(text, at)?;
        let start = skip_space(text, after);
        let end = unit_end(text, start);
        let words = text.get(start..end).unwrap_or_default().trim_end();
        if text.get(after..start).is_some_and(|gap| !gap.is_empty())
            && text.get(start..).is_some_and(|rest| rest.starts_with(|c: char| c.is_ascii_digit()))
            && !text.get(start..end).is_some_and(|unit| unit.starts_with("1/") || unit.starts_with("1 /"))
        {
            let hint = "write the digits of a number together, 1500, and then the unit";
            return Err(fault(at..end.min(text.len()), "a space inside a number", hint));
        }
        if words.is_empty() {
            return Err(fault(at..after, "a unit is missing behind the number", "write a unit, as in \"8.5 kN/m\""));
        }
        let unit = parse_unit(words)
            .map_err(|inner| QuantityFault { range: inner.range.start + start..inner.range.end + start, ..inner })?;
        terms.push(Term { figure, unit });
        at = skip_space(text, end);
    }
    Ok(Typed { terms })
}

fn skip_space(text: &str, from: usize) -> usize {
    let rest = text.get(from..).unwrap_or_default();
    from + (rest.len() - rest.trim_start().len())
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
        let hint = "write a point for the decimals, 1.5, and no sign between thousands, 1500";
        return Err(fault(comma..comma + 1, "a decimal comma, or a comma between thousands", hint));
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
    let figure = rest.get(..end).and_then(Decimal::parse).filter(|figure| figure.to_f64().is_finite());
    figure.map(|figure| (figure, from + end)).ok_or_else(|| {
        let word = rest.split_whitespace().next().unwrap_or_default().len().max(end);
        fault(from..from + word, "a plain decimal number was expected", "write a figure and a unit, as in \"12.5 kN\"")
    })
}

/// Where the unit that begins at `from` ends: at a space with a figure behind it, or at the end.
fn unit_end(text: &str, from: usize) -> usize {
    let rest = text.get(from..).unwrap_or_default();
    let mut before_space = false;
    let mut before_caret = false;
    for (index, letter) in rest.char_indices() {
        let starts = letter.is_ascii_digit()
            || (matches!(letter, '+' | '-')
                && rest.get(index + 1..).is_some_and(|r| r.trim_start().starts_with(|c: char| c.is_ascii_digit())));
        // After a unit's letters a hyphen and a figure begin the next term: 12 ft-6 in.
        let joined = matches!(letter, '-') && starts && !before_caret;
        if (before_space || joined) && starts && index > 0 {
            return from + index;
        }
        before_space = letter.is_whitespace();
        before_caret = letter == '^';
    }
    text.len()
}

/// Reads `kN/m^2`, `kip-ft`, `MN m/rad`, `1/K`.
///
/// # Errors
/// An unknown unit, a second slash, a broken power.
pub fn parse_unit(text: &str) -> Result<Unit, QuantityFault> {
    let mut factors: Vec<(Atom, i8)> = Vec::new();
    let mut below = false;
    // Whether a factor must follow, since an operator stands before.
    let mut wanting: Option<usize> = None;
    let mut rest = text;
    while let Some(letter) = rest.chars().next() {
        let at = text.len() - rest.len();
        if letter == '/' {
            if below {
                return Err(fault(at..at + 1, "a second slash in a unit", "one slash divides by everything behind it"));
            }
            below = true;
            if wanting.is_some() || at == 0 {
                return Err(stray(letter, at));
            }
            wanting = Some(at);
            rest = rest.get(1..).unwrap_or_default();
        } else if letter.is_whitespace() {
            rest = rest.get(letter.len_utf8()..).unwrap_or_default();
        } else if matches!(letter, '*' | '·' | '-') {
            if wanting.is_some() || factors.is_empty() {
                return Err(stray(letter, at));
            }
            wanting = Some(at);
            rest = rest.get(letter.len_utf8()..).unwrap_or_default();
        } else if letter == '1' && at == 0 && rest.trim_start_matches('1').trim_start().starts_with('/') {
            rest = rest.get(1..).unwrap_or_default();
        } else {
            let part = |c: char| c.is_alphanumeric() || matches!(c, '²' | '³' | '⁴');
            let length = rest.find(|c: char| !part(c)).unwrap_or(rest.len()).max(letter.len_utf8());
            let word = rest.get(..length).unwrap_or_default();
            let atom = Unit::known(word).ok_or_else(|| unknown(word, at))?;
            rest = rest.get(length..).unwrap_or_default();
            let power = match rest.strip_prefix('^') {
                Some(behind) => {
                    let digits = behind.find(|c: char| !c.is_ascii_digit() && c != '-').unwrap_or(behind.len());
                    let power = behind
                        .get(..digits)
                        .and_then(|power| power.parse::<i8>().ok())
                        .filter(|p| (-9..=9).contains(p) && *p != 0);
                    let here = text.len() - behind.len();
                    rest = behind.get(digits..).unwrap_or_default();
                    power.ok_or_else(|| {
                        fault(here..here + digits.max(1), "a power of a unit is a whole number", "as in m^2")
                    })?
                }
                None => 1,
            };
            wanting = None;
            factors.push((atom, if below { -power } else { power }));
            if factors.iter().map(|(_, power)| u32::from(power.unsigned_abs())).sum::<u32>() > MOST_POWERS {
                return Err(fault(0..text.len(), "no quantity has a unit of so many factors", "as in kN m^2"));
            }
        }
    }
    if let Some(at) = wanting {
        let letter = text.get(at..).and_then(|rest| rest.chars().next()).unwrap_or('/');
        return Err(stray(letter, at));
    }
    Ok(Unit::of(factors))
}

/// More than any quantity of the trade has; keeps exponents far from overflow.
const MOST_POWERS: u32 = 12;

fn stray(letter: char, at: usize) -> QuantityFault {
    let hint = "a sign of multiplication or division stands between two units, as in kN/m";
    fault(at..at + letter.len_utf8(), format!("a stray \"{letter}\" in a unit"), hint)
}

fn unknown(word: &str, at: usize) -> QuantityFault {
    let names = || KNOWN.iter().chain([&PCI]).map(|atom| atom.text);
    let nearest =
        names().map(|name| (strsim::damerau_levenshtein(&name.to_lowercase(), &word.to_lowercase()), name)).min();
    let digits = word.trim_end_matches(|c: char| c.is_ascii_digit() || matches!(c, '²' | '³' | '⁴'));
    let hint = match nearest {
        _ if digits.len() < word.len() && Unit::known(digits).is_some() => {
            let power = match word.get(digits.len()..) {
                Some("²") => "2",
                Some("³") => "3",
                Some("⁴") => "4",
                Some(power) => power,
                None => "2",
            };
            format!("powers are written with a caret: {digits}^{power}")
        }
        Some((distance, name)) if distance <= 1 && word.len() > 1 => format!("did you mean {name}?"),
        _ => format!("known units: {}", names().collect::<Vec<_>>().join(" ")),
    };
    fault(at..at + word.len(), format!("unknown unit \"{word}\""), hint)
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

    #[test]
    fn quantities_read_as_the_grammar_has_it() {
        assert_eq!(shown("8.5 kN/m"), "[8.5|kN/m]");
        assert_eq!(shown("12 kN m"), "[12|kN m]");
        assert_eq!(shown("12 kip-ft"), "[12|kip ft]");
        assert_eq!(shown("1.2e-5 1/K"), "[0.000012|1/K]");
        assert_eq!(shown("12 ft 6 in"), "[12|ft][6|in]");
        assert_eq!(shown("5 MN m/rad"), "[5|MN m/rad]");
        assert_eq!(shown("-3 kN*m"), "[-3|kN m]");
        assert_eq!(shown("3 kN/m^2"), "[3|kN/m^2]");
        assert_eq!(shown("490 pcf"), "[490|pcf]");
    }

    #[test]
    fn faults_point_at_the_offending_part() {
        assert_eq!(shown("8,5 kN"), "1..2 a decimal comma, or a comma between thousands");
        assert_eq!(shown("12 ft -6 in"), "[12|ft][6|in]");
        assert_eq!(shown("12 ft - 6 in"), "[12|ft][6|in]");
        assert_eq!(shown("12 ft-6 in"), "[12|ft][6|in]");
        assert_eq!(shown("-1 ft 6 in"), "0..10 a negative sum can be read in two ways");
        assert_eq!(shown("8 - kN/m"), "2..3 a stray \"-\" in a unit");
        assert_eq!(shown("8 kN/m*"), "6..7 a stray \"*\" in a unit");
        assert_eq!(shown("8 kN/"), "4..5 a stray \"/\" in a unit");
        assert_eq!(shown("8 /m"), "2..3 a stray \"/\" in a unit");
        assert_eq!(shown("1 000 N/m"), "0..9 a space inside a number");
        assert_eq!(shown("1 cm4"), "2..5 unknown unit \"cm4\"");
        assert_eq!(shown("1 pcf^9 pcf^9"), "2..13 no quantity has a unit of so many factors");
        assert_eq!(shown("3 m^-1 kN"), "[3|kN/m]");
        assert_eq!(shown("8.5"), "0..3 a unit is missing behind the number");
        assert_eq!(shown("8.5 kM"), "4..6 unknown unit \"kM\"");
        assert_eq!(shown("NaN kN"), "0..3 a plain decimal number was expected");
        assert_eq!(shown("1 kN/m/s"), "6..7 a second slash in a unit");
    }
}
