//! Reading units: products of powers of known units, one slash.

use super::parse::{QuantityFault, fault};
use super::{Atom, KNOWN, PCI, Unit};

/// More than any quantity of the trade has; keeps exponents far from overflow.
const MOST_POWERS: u32 = 12;

/// What people write for a unit, and what it is called here.
const OTHER_NAMES: [(&str, &str); 15] = [
    ("feet", "ft"),
    ("foot", "ft"),
    ("'", "ft"),
    ("inch", "in"),
    ("inches", "in"),
    ("\"", "in"),
    ("metre", "m"),
    ("meter", "m"),
    ("kips", "kip"),
    ("lbs", "lb"),
    ("C", "degC"),
    ("°C", "degC"),
    ("F", "degF"),
    ("°F", "degF"),
    ("k", "kip"),
];

/// Reads `kN/m^2`, `kip-ft`, `MN m/rad`, `1/K`.
///
/// # Errors
/// An unknown unit, a second slash, a stray operator, a broken power, powers beyond any quantity of the trade.
pub fn parse_unit(text: &str) -> Result<Unit, QuantityFault> {
    let mut factors: Vec<(Atom, i8)> = Vec::new();
    let mut below = false;
    // The operator behind which a unit must follow.
    let mut waiting: Option<usize> = None;
    let one = text.strip_prefix('1').is_some_and(|rest| rest.trim_start().starts_with('/'));
    let mut rest = if one { text.get(1..).unwrap_or_default() } else { text };
    while let Some(letter) = rest.chars().next() {
        let at = text.len() - rest.len();
        if letter.is_whitespace() {
            rest = rest.get(letter.len_utf8()..).unwrap_or_default();
        } else if matches!(letter, '/' | '*' | '·' | '-' | '+') {
            if letter == '/' && below {
                return Err(fault(at..at + 1, "a second slash in a unit", "one slash divides by everything behind it"));
            }
            let first = factors.is_empty() && !(letter == '/' && one);
            if first || waiting.is_some() || letter == '+' {
                return Err(stray(letter, at));
            }
            below |= letter == '/';
            waiting = Some(at);
            rest = rest.get(letter.len_utf8()..).unwrap_or_default();
        } else {
            let length = rest.find(ends_word).unwrap_or(rest.len()).max(letter.len_utf8());
            let word = rest.get(..length).unwrap_or_default();
            let atom = Unit::known(word).ok_or_else(|| unknown(word, at))?;
            rest = rest.get(length..).unwrap_or_default();
            let power = power(text, &mut rest)?;
            waiting = None;
            factors.push((atom, if below { -power } else { power }));
            if factors.iter().map(|(_, power)| u32::from(power.unsigned_abs())).sum::<u32>() > MOST_POWERS {
                return Err(fault(0..text.len(), "no quantity has a unit of so many factors", "as in kN m^2"));
            }
        }
    }
    match waiting.and_then(|at| Some((at, text.get(at..)?.chars().next()?))) {
        Some((at, letter)) => Err(stray(letter, at)),
        None => Ok(Unit::of(factors)),
    }
}

fn ends_word(letter: char) -> bool {
    letter.is_whitespace() || matches!(letter, '/' | '*' | '·' | '-' | '+' | '^')
}

/// The power behind a unit; 1 where there is none.
fn power(text: &str, rest: &mut &str) -> Result<i8, QuantityFault> {
    let Some(behind) = rest.strip_prefix('^') else { return Ok(1) };
    let minus = usize::from(behind.starts_with('-'));
    let digits = behind.get(minus..).unwrap_or_default();
    let digits = digits.find(|c: char| !c.is_alphanumeric() && c != '.').unwrap_or(digits.len()) + minus;
    let here = text.len() - behind.len();
    let power = behind.get(..digits).and_then(|power| power.parse::<i8>().ok());
    let Some(power) = power.filter(|power| (-9..=9).contains(power) && *power != 0) else {
        let message = "a power of a unit is a whole number from 1 to 9";
        return Err(fault(here - 1..here + digits, message, "as in m^2"));
    };
    *rest = behind.get(digits..).unwrap_or_default();
    Ok(power)
}

fn stray(letter: char, at: usize) -> QuantityFault {
    let hint = "a sign of multiplication or division stands between two units, as in kN/m";
    fault(at..at + letter.len_utf8(), format!("a stray \"{letter}\" in a unit"), hint)
}

/// `cm^4` for `cm4` and `cm⁴`, where the letters before the digits are a known unit.
pub(super) fn plain_power(word: &str) -> Option<String> {
    let base = word.trim_end_matches(|c: char| c.is_ascii_digit() || superscript(c).is_some());
    Unit::known(base)?;
    let tail = word.get(base.len()..).filter(|tail| !tail.is_empty())?;
    let power: String = tail.chars().map(|c| superscript(c).unwrap_or(c)).collect();
    Some(format!("{base}^{power}"))
}

fn superscript(letter: char) -> Option<char> {
    Some(match letter {
        '¹' => '1',
        '²' => '2',
        '³' => '3',
        '⁴' => '4',
        '⁵' => '5',
        '⁶' => '6',
        '⁻' => '-',
        _ => return None,
    })
}

fn unknown(word: &str, at: usize) -> QuantityFault {
    let place = at..at + word.len();
    if let Some(written) = plain_power(word) {
        return fault(place, "a power of a unit is written with ^", format!("write {written}"));
    }
    if word.contains(['(', ')']) {
        let hint = "one slash divides by everything behind it: write kN/m K for kN/(m K)";
        return fault(place, "a bracket in a unit", hint);
    }
    if ["t", "T", "tonne", "tonnes", "ton", "tons", "kgf"].contains(&word) {
        let message = format!("unknown unit \"{word}\"");
        return fault(place, message, "a mass is given in kg, a force in kN or kip");
    }
    if let Some((_, name)) = OTHER_NAMES.iter().find(|(other, _)| *other == word) {
        return fault(place, format!("unknown unit \"{word}\""), format!("write {name}"));
    }
    let names = || KNOWN.iter().chain([&PCI]).map(|atom| atom.text);
    let scored = || names().map(|name| (strsim::damerau_levenshtein(&name.to_lowercase(), &word.to_lowercase()), name));
    let least = scored().map(|(distance, _)| distance).min().unwrap_or(usize::MAX);
    let near: Vec<&str> = scored().filter(|(distance, _)| *distance == least).map(|(_, name)| name).collect();
    let close = least == 0 || (least == 1 && word.chars().count() > 1);
    let hint = if close && near.len() <= 3 {
        format!("did you mean {}?", near.join(" or "))
    } else {
        format!("known units: {}", names().collect::<Vec<_>>().join(" "))
    };
    let shown: String = word.chars().take(24).collect();
    fault(place, format!("unknown unit \"{shown}\""), hint)
}

#[cfg(test)]
mod tests {
    use super::parse_unit;

    fn shown(text: &str) -> String {
        match parse_unit(text) {
            Ok(unit) => unit.to_string(),
            Err(fault) => format!("{}..{} {} | {}", fault.range.start, fault.range.end, fault.message, fault.hint),
        }
    }

    #[test]
    fn stray_operators_are_faults() {
        for (text, place) in [
            ("- kN/m", "0..1 a stray \"-\""),
            ("kN/m*", "4..5 a stray \"*\""),
            ("kN/", "2..3 a stray \"/\""),
            ("/m", "0..1 a stray \"/\""),
            ("kN*/m", "3..4 a stray \"/\""),
            ("kN**m", "3..4 a stray \"*\""),
            ("kN+m", "2..3 a stray \"+\""),
            ("1/", "1..2 a stray \"/\""),
        ] {
            assert!(shown(text).starts_with(place), "{text}: {}", shown(text));
        }
        assert!(shown("kN/m/m").starts_with("4..5 a second slash"));
        assert_eq!(shown("1/K"), "1/K");
        assert_eq!(shown("1 / K"), "1/K");
    }

    #[test]
    fn powers_are_capped_and_written_with_a_caret() {
        assert!(shown("pcf^9 pcf^9").starts_with("0..11 no quantity"));
        assert!(shown("pcf^99").starts_with("3..6 a power"));
        assert!(shown("m^2.5").starts_with("1..5 a power"));
        assert!(shown("m^").starts_with("1..2 a power"));
        assert!(shown("m^0").starts_with("1..3 a power"));
        assert_eq!(shown("cm4"), "0..3 a power of a unit is written with ^ | write cm^4");
        assert_eq!(shown("kN/m²"), "3..6 a power of a unit is written with ^ | write m^2");
        assert_eq!(shown("cm⁴"), "0..5 a power of a unit is written with ^ | write cm^4");
    }

    #[test]
    fn the_nearest_known_unit_is_named() {
        assert!(shown("KN").ends_with("did you mean kN?"));
        assert!(shown("kN/M").ends_with("did you mean m?"));
        assert!(shown("gpa").ends_with("did you mean GPa?"));
        assert!(shown("kM").contains("known units: m mm cm"));
        assert!(shown("feet").ends_with("write ft"));
        assert!(shown("kN/(m").contains("a bracket"));
        assert!(shown("t").contains("a mass is given in kg"));
    }
}
