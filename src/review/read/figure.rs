//! Claimed figures and their tolerances.

use toml::de::DeValue;

use super::{Build, Kind};
use crate::deck::{Row, Value};
use crate::quantity::{Angle, Decimal, Force, Length, Moment, Typed};

impl Build<'_, '_> {
    pub(super) fn figure(&mut self, kind: Kind, row: &Row<'_>) -> Option<Figure> {
        let value = self.reader.required(row, "value")?;
        if let DeValue::String(text) = value.get_ref()
            && text.trim().is_empty()
        {
            return Some(Figure { si: 0.0, half: 0.0, written: String::new() });
        }
        match kind {
            Kind::Verdict => {
                let words = [("pass", 1.0), ("fail", 0.0)];
                let si = self.reader.word(value, "value", &words)?;
                let written = if si > 0.5 { "pass" } else { "fail" };
                Some(Figure { si, half: 0.0, written: written.to_owned() })
            }
            Kind::Utilisation => {
                let text = match value.get_ref() {
                    DeValue::String(text) => text.to_string(),
                    DeValue::Float(number) => number.as_str().to_owned(),
                    DeValue::Integer(number) => number.as_str().to_owned(),
                    _ => String::new(),
                };
                let (text, scale) = match text.trim().strip_suffix('%') {
                    Some(number) => (number.trim().to_owned(), 0.01),
                    None => (text.trim().to_owned(), 1.0),
                };
                let Some(figure) = Decimal::parse(&text).filter(|figure| figure.to_f64().is_finite()) else {
                    self.reader.fault(value.span(), "a utilisation is a plain number", "as in value = \"0.81\"");
                    return None;
                };
                Some(Figure { si: figure.to_f64() * scale, half: half(figure) * scale, written: text })
            }
            Kind::Reaction | Kind::Shear => self.measured::<Force>(value),
            Kind::Moment | Kind::ReactionMoment => self.measured::<Moment>(value),
            Kind::Deflection | Kind::Allowable => self.measured::<Length>(value),
            Kind::Slope => self.measured::<Angle>(value),
            Kind::Redundant => {
                if self.text_of(row, "at").starts_with("M.") {
                    self.measured::<Moment>(value)
                } else {
                    self.measured::<Force>(value)
                }
            }
        }
    }

    fn measured<T: crate::quantity::Physical>(&mut self, value: Value<'_>) -> Option<Figure> {
        let typed = self.reader.quantity::<T>(value, "value")?.typed;
        Some(Figure { si: si_of(&typed), half: half_of(&typed), written: self.written(value) })
    }

    fn written(&self, value: Value<'_>) -> String {
        match value.get_ref() {
            DeValue::String(text) => text.to_string(),
            _ => String::new(),
        }
    }

    /// Half a unit of the last digit written or 0.5 %, the larger, unless the file says otherwise.
    pub(super) fn tolerance(&mut self, kind: Kind, row: &Row<'_>, si: f64, half: f64) -> Option<f64> {
        if kind == Kind::Verdict {
            return Some(0.0);
        }
        let Some(value) = row.table.get("tolerance") else { return Some(half.max(0.005 * si.abs())) };
        let text = self.reader.text(value, "tolerance")?;
        if let Some(number) = text.trim().strip_suffix('%') {
            let share =
                Decimal::parse(number.trim()).map(Decimal::to_f64).filter(|share| (0.0..=100.0).contains(share));
            if let Some(share) = share {
                return Some(share / 100.0 * si.abs());
            }
            self.reader.fault(value.span(), "a tolerance in % lies between 0 and 100", "as in \"1 %\"");
            return None;
        }
        let figure = match kind {
            Kind::Reaction | Kind::Shear => self.measured::<Force>(value),
            Kind::Moment | Kind::ReactionMoment => self.measured::<Moment>(value),
            Kind::Slope => self.measured::<Angle>(value),
            Kind::Utilisation => {
                let figure = Decimal::parse(text.trim());
                if figure.is_none() {
                    self.reader.fault(value.span(), "a tolerance of a utilisation is a plain number or %", "");
                }
                figure.map(|figure| Figure { si: figure.to_f64(), half: 0.0, written: text.clone() })
            }
            Kind::Redundant if self.text_of(row, "at").starts_with("M.") => self.measured::<Moment>(value),
            Kind::Redundant => self.measured::<Force>(value),
            _ => self.measured::<Length>(value),
        };
        figure.map(|figure| figure.si.abs())
    }
}

/// A figure as written.
pub(super) struct Figure {
    pub si: f64,
    pub half: f64,
    pub written: String,
}

/// Half a unit of the last digit.
fn half(figure: Decimal) -> f64 {
    Decimal::new(5, figure.exponent() - 1).to_f64()
}

fn half_of(typed: &Typed) -> f64 {
    typed.terms.last().map_or(0.0, |term| half(term.figure) * term.unit.si().unwrap_or(1.0))
}

fn si_of(typed: &Typed) -> f64 {
    typed.terms.iter().map(|term| term.figure.to_f64() * term.unit.si().unwrap_or(1.0)).sum()
}
