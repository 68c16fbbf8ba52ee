//! Reading quantities: a text, its unit's place, its dimension, its size.

use std::ops::Range;

use toml::de::DeValue;

use super::reader::{Reader, Value};
use super::words::{clip, describe, fits};
use crate::quantity::{Decimal, Factor, Given, Length, Physical, Place, Typed, parse_placed};

/// Sizes in SI units that are read; zero besides. Far beyond any structure, and near enough to 1 that no product of them
/// overflows.
const SIZES: std::ops::RangeInclusive<f64> = 1e-30..=1e30;

/// A typed quantity with the places of its units in the file.
#[derive(Clone, Debug)]
pub struct Amount {
    /// As typed.
    pub typed: Typed,
    /// Where the unit of each term stands.
    pub units: Vec<Range<usize>>,
}

impl Amount {
    /// Whether any of its units holds a mass.
    pub fn has_mass(&self) -> bool {
        self.typed.terms.iter().any(|term| term.unit.dimension().mass != 0)
    }
}

impl Reader<'_> {
    /// A pure number.
    pub fn number(&mut self, value: Value<'_>, key: &str) -> Option<Factor> {
        let hint = "write it without quotes, with a point: 1.5";
        let written = match value.get_ref() {
            DeValue::Integer(number) if number.radix() == 10 => Decimal::parse(number.as_str()),
            DeValue::Float(number) => Decimal::parse(number.as_str()),
            DeValue::Integer(_) => None,
            _ => return self.wrong_type(value, key, "a plain number", hint),
        };
        let Some(figure) = written else {
            self.fault(value.span(), format!("{key} is not a finite decimal number"), hint);
            return None;
        };
        let size = figure.to_f64();
        if size != 0.0 && !SIZES.contains(&size.abs()) {
            self.fault(value.span(), format!("{key} is beyond what can be computed"), "from 1e-30 to 1e30");
            return None;
        }
        Some(Factor { value: size, figure })
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

    /// A whole number within bounds.
    pub fn whole_number(&mut self, value: Value<'_>, key: &str, bounds: std::ops::RangeInclusive<u32>) -> Option<u32> {
        let number = match value.get_ref() {
            DeValue::Integer(number) if number.radix() == 10 => number.as_str().parse::<u32>().ok(),
            DeValue::Integer(_) | DeValue::Float(_) => None,
            _ => return self.wrong_type(value, key, "a whole number", "write it without quotes"),
        };
        let number = number.filter(|number| bounds.contains(number));
        if number.is_none() {
            let message = format!("{key} must be a whole number from {} to {}", bounds.start(), bounds.end());
            self.fault(value.span(), message, "");
        }
        number
    }

    /// A typed quantity of any dimension; `example` is one that is lawful here.
    pub fn typed(&mut self, value: Value<'_>, key: &str, example: &str) -> Option<Amount> {
        let text = match value.get_ref() {
            DeValue::String(text) => text,
            DeValue::Integer(_) | DeValue::Float(_) => {
                self.fault(
                    value.span(),
                    format!("{key} is a bare number where a unit belongs"),
                    format!("write it in quotes with its unit, as in \"{example}\""),
                );
                return None;
            }
            _ => return self.wrong_type(value, key, "a quantity in quotes", &format!("as in \"{example}\"")),
        };
        match parse_placed(text) {
            Ok((typed, units)) => {
                let units = units.into_iter().map(|unit| self.inner(value.span(), text, unit)).collect();
                Some(Amount { typed, units })
            }
            Err(inner) => {
                let span = self.inner(value.span(), text, inner.range);
                let general = format!("write it as in \"{example}\"");
                let hint = if inner.hint.is_empty() { general } else { inner.hint };
                self.fault(span, format!("{key}: {}", inner.message), hint);
                None
            }
        }
    }

    /// The place of a part of a string, where the string stands in the file as it reads.
    fn inner(&self, span: Range<usize>, text: &str, part: Range<usize>) -> Range<usize> {
        let source = self.text.get(span.clone()).unwrap_or_default();
        match source.find(text) {
            Some(offset) if !part.is_empty() => span.start + offset + part.start..span.start + offset + part.end,
            _ => span,
        }
    }

    /// A quantity of one dimension.
    pub fn quantity<T: Physical>(&mut self, value: Value<'_>, key: &str) -> Option<Given<T>> {
        let amount = self.typed(value, key, describe(T::DIMENSION).1)?;
        self.measured(value, key, amount)
    }

    /// A typed quantity taken as one of a dimension.
    pub fn measured<T: Physical>(&mut self, value: Value<'_>, key: &str, amount: Amount) -> Option<Given<T>> {
        let Amount { typed, units } = amount;
        let (name, example) = describe(T::DIMENSION);
        for (term, place) in typed.terms.iter().zip(units) {
            if !fits(term.unit.dimension(), T::DIMENSION) {
                let message = format!("{key}: \"{}\" is not a unit of {name}", clip(&term.unit.to_string()));
                self.fault(place, message, format!("write it as in \"{example}\""));
                return None;
            }
        }
        if typed.terms.len() > 1 && T::DIMENSION != Length::DIMENSION {
            self.fault(value.span(), format!("{key}: only lengths may be sums"), "write one figure and one unit");
            return None;
        }
        let si = typed.terms.iter().try_fold(0.0, |sum, term| Some(sum + term.figure.to_f64() * term.unit.si()?));
        let sane = |si: &f64| *si == 0.0 || SIZES.contains(&si.abs());
        // A figure that is not zero must not become one.
        let zero = typed.terms.iter().all(|term| term.figure.is_zero());
        let Some(size) = si.filter(|si| sane(si) && (*si != 0.0 || zero)).and_then(T::from_si) else {
            let hint = format!("from 1e-30 to 1e30 in SI units; write it as in \"{example}\"");
            self.fault(value.span(), format!("{key} is beyond what can be computed"), hint);
            return None;
        };
        Some(Given { value: size, typed })
    }

    /// A quantity above zero.
    pub fn positive<T: Physical>(&mut self, value: Value<'_>, key: &str) -> Option<Given<T>> {
        let given = self.quantity::<T>(value, key)?;
        if given.value.to_si() > 0.0 {
            return Some(given);
        }
        self.fault(value.span(), format!("{key} must be greater than zero"), "");
        None
    }

    /// A place or length as exact metres.
    pub fn metres(&mut self, value: Value<'_>, key: &str) -> Option<(Place, Given<Length>)> {
        let given = self.quantity::<Length>(value, key)?;
        let exact = given.typed.terms.iter().try_fold(Decimal::ZERO, |sum, term| {
            let (size, _) = term.unit.size()?;
            sum.plus(term.figure.times(size)?)
        });
        match exact {
            Some(exact) => Some((Place::metres(exact.trimmed()), given)),
            None => {
                self.fault(value.span(), format!("{key} has too many digits"), "");
                None
            }
        }
    }
}
