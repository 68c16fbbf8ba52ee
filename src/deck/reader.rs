//! A walk over a spanned TOML tree that collects every fault.

use std::ops::Range;

use toml::Spanned;
use toml::de::{DeTable, DeValue};

use crate::diagnostic::Diagnostic;
use crate::quantity::{Decimal, Dimension, Given, Physical, Typed, parse_quantity};
use crate::quantity::{Factor, Place};

/// A value with its place.
pub type Value<'a> = &'a Spanned<DeValue<'a>>;

/// A table with its place and its name for messages.
#[derive(Clone, Debug)]
pub struct Row<'a> {
    /// The table.
    pub table: &'a DeTable<'a>,
    /// Where it stands.
    pub span: Range<usize>,
    /// What it is called: `section.deep`.
    pub path: String,
}

/// Collects faults and warnings.
#[derive(Debug)]
pub struct Reader<'t> {
    /// The text that is read.
    pub text: &'t str,
    /// Faults and warnings so far.
    pub findings: Vec<Diagnostic>,
}

/// The nearest of some names, when it is near enough to be meant.
pub fn nearest<'n>(word: &str, names: impl IntoIterator<Item = &'n str>) -> Option<&'n str> {
    let scored =
        names.into_iter().map(|name| (strsim::damerau_levenshtein(&name.to_lowercase(), &word.to_lowercase()), name));
    scored.min().filter(|(distance, name)| *distance <= 1 + name.len() / 3).map(|(_, name)| name)
}

impl<'t> Reader<'t> {
    /// A reader of this text.
    pub fn new(text: &'t str) -> Self {
        Self { text, findings: Vec::new() }
    }

    /// Reports an error.
    pub fn fault(&mut self, span: Range<usize>, message: impl Into<String>, hint: impl Into<String>) {
        self.findings.push(Diagnostic::error(span, message).hint(hint));
    }

    /// Reports what is lawful but odd.
    pub fn warn(&mut self, span: Range<usize>, message: impl Into<String>, hint: impl Into<String>) {
        self.findings.push(Diagnostic::warning(span, message).hint(hint));
    }

    /// Reports every key that is not known.
    pub fn known(&mut self, row: &Row<'_>, keys: &[&str]) {
        for key in row.table.keys() {
            let name = key.get_ref().as_ref();
            if !keys.contains(&name) {
                let hint = match nearest(name, keys.iter().copied()) {
                    Some(near) => format!("did you mean {near}?"),
                    None => format!("known keys: {}", keys.join(", ")),
                };
                self.fault(key.span(), format!("unknown key \"{}\" in {}", clip(name), row.path), hint);
            }
        }
    }

    /// A value that must be there.
    pub fn required<'a>(&mut self, row: &Row<'a>, key: &str) -> Option<Value<'a>> {
        let value = row.table.get(key);
        if value.is_none() {
            self.fault(row.span.clone(), format!("{} lacks the key \"{key}\"", row.path), format!("add {key} = …"));
        }
        value
    }

    /// Text that is there.
    pub fn text(&mut self, value: Value<'_>, key: &str) -> Option<String> {
        match value.get_ref() {
            DeValue::String(text) if text.len() <= 10_000 => Some(text.to_string()),
            DeValue::String(_) => {
                self.fault(value.span(), format!("{key} is longer than 10,000 bytes"), "shorten it");
                None
            }
            other => self.wrong_type(value, key, "text in quotes", other),
        }
    }

    fn wrong_type<T>(&mut self, value: Value<'_>, key: &str, wanted: &str, found: &DeValue<'_>) -> Option<T> {
        let found = found.type_str();
        self.fault(value.span(), format!("{key} must be {wanted}, not of the type {found}"), "");
        None
    }

    /// Text that may be there.
    pub fn optional_text(&mut self, row: &Row<'_>, key: &str) -> Option<String> {
        let value = row.table.get(key)?;
        self.text(value, key)
    }

    /// Text that must be there and not be empty.
    pub fn required_text(&mut self, row: &Row<'_>, key: &str) -> Option<String> {
        let value = self.required(row, key)?;
        let text = self.text(value, key)?;
        if text.trim().is_empty() {
            self.fault(value.span(), format!("{key} is empty"), "");
            return None;
        }
        Some(text)
    }

    /// A pure number.
    pub fn number(&mut self, value: Value<'_>, key: &str) -> Option<Factor> {
        let written = match value.get_ref() {
            DeValue::Integer(number) if number.radix() == 10 => Decimal::parse(number.as_str()),
            DeValue::Float(number) => Decimal::parse(number.as_str()),
            other => return self.wrong_type(value, key, "a plain number", other),
        };
        let Some(figure) = written else {
            self.fault(value.span(), format!("{key} is not a finite decimal number"), "");
            return None;
        };
        Some(Factor { value: figure.to_f64(), figure })
    }

    /// A pure number above zero.
    pub fn positive_number(&mut self, value: Value<'_>, key: &str) -> Option<Factor> {
        let number = self.number(value, key)?;
        if number.value > 0.0 {
            return Some(number);
        }
        self.fault(value.span(), format!("{key} must be greater than zero"), "");
        None
    }

    /// A typed quantity of any dimension.
    pub fn typed(&mut self, value: Value<'_>, key: &str) -> Option<Typed> {
        let text = match value.get_ref() {
            DeValue::String(text) => text,
            DeValue::Integer(_) | DeValue::Float(_) => {
                self.fault(
                    value.span(),
                    format!("{key} is a bare number where a unit belongs"),
                    "write it in quotes with its unit, as in \"8.5 kN/m\"",
                );
                return None;
            }
            other => return self.wrong_type(value, key, "a quantity in quotes, as in \"8.5 kN/m\"", other),
        };
        match parse_quantity(text) {
            Ok(typed) => Some(typed),
            Err(inner) => {
                let span = self.inner(value.span(), text, inner.range);
                self.fault(span, format!("{key}: {}", inner.message), inner.hint);
                None
            }
        }
    }

    /// The place of a part of a string, where the string stands in the file as it reads.
    fn inner(&self, span: Range<usize>, text: &str, part: Range<usize>) -> Range<usize> {
        let source = self.text.get(span.clone()).unwrap_or_default();
        match source.find(text) {
            Some(offset) if !text.is_empty() => span.start + offset + part.start..span.start + offset + part.end,
            _ => span,
        }
    }

    /// A quantity of one dimension.
    pub fn quantity<T: Physical>(&mut self, value: Value<'_>, key: &str) -> Option<Given<T>> {
        let typed = self.typed(value, key)?;
        self.measured(value, key, typed)
    }

    /// A typed quantity taken as one of a dimension.
    pub fn measured<T: Physical>(&mut self, value: Value<'_>, key: &str, typed: Typed) -> Option<Given<T>> {
        for term in &typed.terms {
            if !fits(term.unit.dimension(), T::DIMENSION) {
                let message = format!("{key}: \"{}\" is not a unit of {}", term.unit, name_of(T::DIMENSION));
                self.fault(value.span(), message, format!("write it as in \"{}\"", example(T::DIMENSION)));
                return None;
            }
        }
        if typed.terms.len() > 1 && T::DIMENSION != Dimension::new(0, 1, 0, 0, 0) {
            self.fault(value.span(), format!("{key}: only lengths may be sums"), "write one figure and one unit");
            return None;
        }
        let si = typed.terms.iter().try_fold(0.0, |sum, term| Some(sum + term.figure.to_f64() * term.unit.si()?));
        // Far beyond any structure, and near enough to 1 that no product of them overflows.
        let sane = |si: &f64| *si == 0.0 || (1e-30..=1e30).contains(&si.abs());
        let Some(value_si) = si.filter(sane).and_then(T::from_si) else {
            self.fault(value.span(), format!("{key} is beyond what can be computed"), "");
            return None;
        };
        Some(Given { value: value_si, typed })
    }

    /// A place or length as exact metres.
    pub fn metres(&mut self, value: Value<'_>, key: &str) -> Option<(Place, Typed)> {
        let typed = self.quantity::<crate::quantity::Length>(value, key)?.typed;
        let exact = typed.terms.iter().try_fold(Decimal::ZERO, |sum, term| {
            let (size, _) = term.unit.size()?;
            sum.plus(term.figure.times(size)?)
        });
        match exact {
            Some(exact) => Some((Place::metres(exact.trimmed()), typed)),
            None => {
                self.fault(value.span(), format!("{key} has too many digits"), "");
                None
            }
        }
    }

    /// A flag.
    pub fn flag(&mut self, row: &Row<'_>, key: &str) -> bool {
        match row.table.get(key).map(|value| (value, value.get_ref())) {
            None => false,
            Some((_, DeValue::Boolean(flag))) => *flag,
            Some((value, other)) => self.wrong_type(value, key, "true or false", other).unwrap_or(false),
        }
    }

    /// A word out of a list.
    pub fn word<T: Copy>(&mut self, value: Value<'_>, key: &str, words: &[(&str, T)]) -> Option<T> {
        let text = self.text(value, key)?;
        if let Some((_, found)) = words.iter().find(|(word, _)| *word == text) {
            return Some(*found);
        }
        let names: Vec<&str> = words.iter().map(|(word, _)| *word).collect();
        let hint = match nearest(&text, names.iter().copied()) {
            Some(near) => format!("did you mean {near}?"),
            None => format!("one of: {}", names.join(", ")),
        };
        self.fault(value.span(), format!("{key} cannot be \"{}\"", clip(&text)), hint);
        None
    }

    /// A table that is there.
    pub fn row<'a>(&mut self, value: Value<'a>, path: impl Into<String>) -> Option<Row<'a>> {
        let path = path.into();
        match value.get_ref() {
            DeValue::Table(table) => Some(Row { table, span: value.span(), path }),
            other => self.wrong_type(value, &path, "a table", other),
        }
    }

    /// The named tables under a key, with their names checked.
    pub fn named<'a>(&mut self, root: &Row<'a>, key: &str) -> Vec<(String, Range<usize>, Row<'a>)> {
        let Some(value) = root.table.get(key) else { return Vec::new() };
        let Some(group) = self.row(value, key) else { return Vec::new() };
        let mut rows = Vec::new();
        for (name, value) in group.table.iter() {
            let text = name.get_ref().to_string();
            if !is_name(&text) {
                self.fault(
                    name.span(),
                    format!("\"{}\" cannot be a name", clip(&text)),
                    "a name is a letter and up to fifteen letters, digits or underscores; start and end are reserved",
                );
            }
            if let Some(row) = self.row(value, format!("{key}.{}", clip(&text))) {
                rows.push((text, name.span(), row));
            }
        }
        if rows.len() > 2_000 {
            self.fault(value.span(), format!("more than 2,000 tables under {key}"), "split the deck");
            rows.truncate(2_000);
        }
        rows
    }

    /// The items of a list.
    pub fn items<'a>(&mut self, value: Value<'a>, key: &str) -> Vec<Value<'a>> {
        match value.get_ref() {
            DeValue::Array(list) => list.iter().collect(),
            other => self.wrong_type(value, key, "a list", other).unwrap_or_default(),
        }
    }
}

/// A long text cut short for a message.
pub fn clip(text: &str) -> String {
    let mut short: String = text.chars().take(40).collect();
    if short.len() < text.len() {
        short.push('…');
    }
    short
}

fn is_name(text: &str) -> bool {
    let mut letters = text.chars();
    let first = letters.next().is_some_and(|letter| letter.is_ascii_alphabetic());
    first
        && text.len() <= 16
        && letters.all(|l| l.is_ascii_alphanumeric() || l == '_')
        && text != "start"
        && text != "end"
}

/// A radian may be left out of a rotational stiffness.
fn fits(found: Dimension, wanted: Dimension) -> bool {
    found == wanted || (wanted.angle == -1 && found == Dimension { angle: 0, ..wanted })
}

/// What a dimension is called.
fn name_of(dimension: Dimension) -> &'static str {
    describe(dimension).0
}

fn example(dimension: Dimension) -> &'static str {
    describe(dimension).1
}

fn describe(d: Dimension) -> (&'static str, &'static str) {
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
