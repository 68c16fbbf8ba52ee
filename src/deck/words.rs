//! Words of messages: names, the nearest of them, what a dimension is called.

use crate::quantity::Dimension;

/// The nearest of some names, when it is near enough to be meant.
pub fn nearest<'n>(word: &str, names: impl IntoIterator<Item = &'n str>) -> Option<&'n str> {
    if word.len() > 200 {
        return None;
    }
    let scored =
        names.into_iter().map(|name| (strsim::damerau_levenshtein(&name.to_lowercase(), &word.to_lowercase()), name));
    // Near enough: a third of its letters and one, and at least one letter in common.
    let near = |distance: usize, name: &str| distance <= 1 + name.len() / 3 && distance < word.len().max(name.len());
    scored.min().filter(|(distance, name)| *distance == 0 || near(*distance, name)).map(|(_, name)| name)
}

/// "did you mean …?" where a known name is near, else the known names after `otherwise`; at most sixteen of them.
pub fn suggest<'n>(word: &str, names: impl IntoIterator<Item = &'n str> + Clone, otherwise: &str) -> String {
    if let Some(near) = nearest(word, names.clone()) {
        return format!("did you mean {near}?");
    }
    let mut known: Vec<&str> = names.into_iter().take(17).collect();
    if known.len() == 17 {
        known.pop();
        known.push("…");
    }
    format!("{otherwise}: {}", known.join(", "))
}

/// A long text cut short for a message.
pub fn clip(text: &str) -> String {
    let mut short: String = text.chars().take(40).collect();
    if short.len() < text.len() {
        short.push('…');
    }
    short
}

/// Whether a section, support, hinge, case, combination or limit may be called so.
pub fn is_name(text: &str) -> bool {
    let mut letters = text.chars();
    let first = letters.next().is_some_and(|letter| letter.is_ascii_alphabetic());
    first
        && text.len() <= 16
        && letters.all(|l| l.is_ascii_alphanumeric() || l == '_')
        && text != "start"
        && text != "end"
}

/// A radian may be left out of a rotational stiffness.
pub fn fits(found: Dimension, wanted: Dimension) -> bool {
    found == wanted || (wanted.angle == -1 && found == Dimension { angle: 0, ..wanted })
}

/// What a dimension is called, with an example of it.
pub fn describe(d: Dimension) -> (&'static str, &'static str) {
    match [d.force, d.length, d.mass, d.temperature, d.angle] {
        [0, 1, 0, 0, 0] => ("length", "3.5 m"),
        [0, 2, 0, 0, 0] => ("area", "53.8 cm^2"),
        [0, 4, 0, 0, 0] => ("second moment of area", "8356 cm^4"),
        [1, 0, 0, 0, 0] => ("force", "12 kN"),
        [1, 1, 0, 0, 0] => ("moment", "5 kN m"),
        [1, -1, 0, 0, 0] => ("force per length", "8.5 kN/m"),
        [1, -2, 0, 0, 0] => ("stress or load per area", "3.5 kN/m^2"),
        [1, -3, 0, 0, 0] => ("weight per volume", "490 pcf"),
        [0, -3, 1, 0, 0] => ("mass per volume", "7850 kg/m^3"),
        [0, -1, 1, 0, 0] => ("mass per length", "42.2 kg/m"),
        [1, 1, 0, 0, -1] => ("moment per turn", "5 MN m/rad"),
        [0, 0, 0, 0, 1] => ("angle", "2 mrad"),
        [0, 0, 0, 1, 0] => ("difference of temperature", "20 K"),
        [0, 0, 0, -1, 0] => ("thermal expansion", "12e-6 1/K"),
        _ => ("the quantity wanted here", "1 m"),
    }
}

/// What a kind of TOML value is called.
pub fn kind_of(type_name: &str) -> &'static str {
    match type_name {
        "string" => "text",
        "integer" | "float" => "a bare number",
        "boolean" => "true or false",
        "datetime" => "a date",
        "array" => "a list",
        _ => "a table",
    }
}
