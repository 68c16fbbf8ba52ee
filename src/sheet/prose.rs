//! Text as Typst code: string literals, and prose in which `v_C` is a symbol.

use super::fonts::{Face, text_width};
use super::typeset::superscript;

/// The longest word that is never divided, in characters: 35 mm of the smallest text hold it.
pub const LONGEST: usize = 24;
/// Where a longer word may be divided: after every so many characters.
const PIECE: usize = 8;

/// A Typst string literal that stands for exactly these characters; a word too long for a column may be divided, which
/// adds zero-width spaces that neither print nor separate.
pub fn literal(text: &str) -> String {
    let mut out = String::with_capacity(text.len() + 2);
    out.push('"');
    let mut words = text.split_inclusive(|c: char| c.is_whitespace() && c != '\u{A0}' && c != '\u{202F}');
    for word in &mut words {
        let long = word.chars().count() > LONGEST;
        for (index, character) in word.chars().enumerate() {
            if long && index > 0 && index.is_multiple_of(PIECE) && !combines(character) {
                out.push_str("\\u{200b}");
            }
            write(character, &mut out);
        }
    }
    out.push('"');
    out
}

/// A Typst string literal of a text that is never divided: figures with their units.
pub fn undivided(text: &str) -> String {
    let mut out = String::with_capacity(text.len() + 2);
    out.push('"');
    text.chars().for_each(|character| write(character, &mut out));
    out.push('"');
    out
}

/// Whether a character is drawn on the one before it, as accents are.
const fn combines(character: char) -> bool {
    matches!(character, '\u{300}'..='\u{36F}' | '\u{483}'..='\u{489}' | '\u{591}'..='\u{5C7}' | '\u{64B}'..='\u{65F}' | '\u{20D0}'..='\u{20FF}')
}

fn write(character: char, out: &mut String) {
    match character {
        '"' => out.push_str("\\\""),
        '\\' => out.push_str("\\\\"),
        '\n' => out.push_str("\\n"),
        '\r' => out.push_str("\\r"),
        '\t' => out.push_str("\\t"),
        other if other.is_control() => out.push_str(&format!("\\u{{{:x}}}", u32::from(other))),
        other => out.push(other),
    }
}

/// A text cut to a width in mm at a size in pt, with an ellipsis where something is missing.
pub fn short(text: &str, width: f64, size_pt: f64) -> String {
    let room = width - text_width("…", Face::Regular, size_pt);
    if text_width(text, Face::Regular, size_pt) <= width {
        return text.to_owned();
    }
    let mut kept = String::new();
    let mut used = 0.0;
    for character in text.chars() {
        used += text_width(character.encode_utf8(&mut [0; 4]), Face::Regular, size_pt);
        if used > room {
            break;
        }
        kept.push(character);
    }
    format!("{}…", kept.trim_end())
}

/// Words that stand for Greek letters.
const GREEK: [(&str, &str); 17] = [
    ("rho", "ρ"),
    ("tau", "τ"),
    ("epsilon", "ε"),
    ("psi", "ψ"),
    ("phi", "φ"),
    ("theta", "θ"),
    ("alpha", "α"),
    ("beta", "β"),
    ("gamma", "γ"),
    ("delta", "δ"),
    ("eta", "η"),
    ("kappa", "κ"),
    ("lambda", "λ"),
    ("mu", "μ"),
    ("Delta", "Δ"),
    ("Sigma", "Σ"),
    ("dT", "ΔT"),
];

/// Prose as a Typst expression: symbols slanted with lowered subscripts, the rest as it stands.
pub fn prose(text: &str) -> String {
    let mut parts: Vec<String> = Vec::new();
    let mut plain = String::new();
    let mut rest = text;
    let mut before = ' ';
    while let Some(first) = rest.chars().next() {
        if let (false, Some((base, sub, after))) = (in_word(before), symbol(rest)) {
            if !plain.is_empty() {
                held(&std::mem::take(&mut plain), &mut parts);
            }
            parts.push(format!("emph({})", literal(base)));
            if !sub.is_empty() {
                parts.push(format!("sub({})", literal(&sub)));
            }
            before = '0';
            rest = after;
            continue;
        }
        if let (true, Some((power, after))) = (before.is_alphabetic(), raised(rest)) {
            plain.push_str(&power);
            before = '0';
            rest = after;
            continue;
        }
        plain.push(first);
        before = first;
        rest = rest.get(first.len_utf8()..).unwrap_or_default();
    }
    if !plain.is_empty() || parts.is_empty() {
        held(&plain, &mut parts);
    }
    match parts.as_slice() {
        [one] => one.clone(),
        several => format!("{{{}}}", several.join(";")),
    }
}

/// Text as it stands as a Typst expression; only `A–B` is kept on one line.
pub fn plain(text: &str) -> String {
    let mut parts = Vec::new();
    held(text, &mut parts);
    match parts.as_slice() {
        [one] => one.clone(),
        several => format!("{{{}}}", several.join(";")),
    }
}

/// Plain text; a word that joins two names by a dash (`A–B`) is kept on one line.
fn held(text: &str, parts: &mut Vec<String>) {
    let joined = |word: &str| word.trim_matches(|c: char| !c.is_alphanumeric()).contains('–');
    if !text.split(' ').any(joined) {
        return parts.push(literal(text));
    }
    let mut plain = String::new();
    for (index, word) in text.split(' ').enumerate() {
        if index > 0 {
            plain.push(' ');
        }
        if joined(word) {
            if !plain.is_empty() {
                parts.push(literal(&std::mem::take(&mut plain)));
            }
            parts.push(format!("box({})", literal(word)));
        } else {
            plain.push_str(word);
        }
    }
    if !plain.is_empty() {
        parts.push(literal(&plain));
    }
}

fn in_word(character: char) -> bool {
    character.is_alphanumeric() || character == '_'
}

/// A power at the start of a text, `^2`, as a raised figure, and what follows.
fn raised(text: &str) -> Option<(String, &str)> {
    let rest = text.strip_prefix('^')?;
    let end = rest.find(|c: char| !c.is_ascii_digit()).unwrap_or(rest.len());
    let (digits, after) = rest.split_at(end);
    (!digits.is_empty()).then(|| (digits.chars().map(superscript).collect(), after))
}

/// A symbol at the start of a text: its letters, its subscript, what follows.
fn symbol(text: &str) -> Option<(&str, String, &str)> {
    let end = text.find(|c: char| !c.is_ascii_alphanumeric() && c != '_').unwrap_or(text.len());
    let (word, after) = text.split_at(end);
    let (base, sub) = match word.split_once('_') {
        Some((base, sub)) => (base, sub.replace('_', ",")),
        None => (word, String::new()),
    };
    let greek = GREEK.iter().find(|(name, _)| *name == base).map(|(_, letter)| *letter);
    let letters =
        matches!(base, "EI" | "GA" | "qw") || (base.len() == 1 && base.starts_with(|c: char| c.is_ascii_alphabetic()));
    // A letter that stands alone is a word or a name; only with a subscript is it surely a symbol.
    let sure = !sub.is_empty() || matches!(base, "EI" | "GA" | "psi" | "dT");
    let shown = match (greek, base) {
        (Some(letter), _) => letter,
        (None, "qw") => "q",
        (None, _) if letters => base,
        _ => return None,
    };
    sure.then_some((shown, sub, after))
}

#[cfg(test)]
mod tests {
    use super::{literal, prose, short};

    #[test]
    fn a_literal_ends_where_its_text_ends() {
        assert_eq!(literal("a\"b\\c\n#d"), "\"a\\\"b\\\\c\\n#d\"");
        assert_eq!(literal("\u{1b}"), "\"\\u{1b}\"");
        assert_eq!(literal(&"a".repeat(24)), format!("\"{}\"", "a".repeat(24)));
        assert_eq!(literal(&"a".repeat(25)).matches("\\u{200b}").count(), 3);
    }

    #[test]
    fn a_running_head_is_cut_to_its_width() {
        assert_eq!(short("Intake beam B3", 60.0, 9.0), "Intake beam B3");
        let cut = short(&"wide ".repeat(40), 60.0, 9.0);
        assert!(cut.ends_with('…') && cut.chars().count() < 50, "{cut}");
    }

    #[test]
    fn symbols_in_prose_are_found_and_nothing_else_is() {
        assert_eq!(prose("A beam at A_b?"), "{\"A beam at \";emph(\"A\");sub(\"b\");\"?\"}");
        assert_eq!(prose("EI_1 and psi_C_G"), "{emph(\"EI\");sub(\"1\");\" and \";emph(\"ψ\");sub(\"C,G\")}");
        assert_eq!(prose("file_name_b and Beam_3"), "\"file_name_b and Beam_3\"");
        assert_eq!(prose("1 kN/m^2 at x^y"), "\"1 kN/m² at x^y\"");
        assert_eq!(prose(""), "\"\"");
    }
}
