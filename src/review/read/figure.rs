//! Claimed figures and their tolerances.

use toml::de::DeValue;

use super::{Build, Kind};
use crate::deck::{Row, Value};
use crate::quantity::{Angle, Decimal, Force, Length, Moment, Physical, Typed};

/// A figure as written.
#[derive(Clone, Debug, Default)]
pub(super) struct Figure {
    /// In SI.
    pub si: f64,
    /// Size of the unit written, in SI; `None` for words and sums.
    pub unit: Option<f64>,
    /// Half a unit of the last digit written, in SI.
    pub half: f64,
    /// The text; empty where the file leaves the value open.
    pub written: String,
}

/// How far a recomputed figure may be off.
#[derive(Clone, Copy, Debug)]
pub(super) enum Tolerance {
    /// Half a unit of the last digit written or 0.5 %, the larger.
    Usual,
    /// A share of the claimed figure.
    Share(f64),
    /// So much, in SI.
    Absolute(f64),
}

impl Tolerance {
    /// In SI, for a figure.
    pub fn of(self, figure: &Figure) -> f64 {
        match self {
            Self::Usual => figure.half.max(0.005 * figure.si.abs()),
            Self::Share(share) => share * figure.si.abs(),
            Self::Absolute(si) => si,
        }
    }
}

impl Build<'_, '_> {
    pub(super) fn figure(&mut self, kind: Kind, row: &Row<'_>) -> Option<Figure> {
        let value = self.reader.required(row, "value")?;
        if let DeValue::String(text) = value.get_ref()
            && text.trim().is_empty()
        {
            return Some(Figure::default());
        }
        match kind {
            Kind::Verdict => {
                let words = [("pass", 1.0), ("fail", 0.0)];
                let si = self.reader.word(value, "value", &words)?;
                let written = if si > 0.5 { "pass" } else { "fail" };
                Some(Figure { si, written: written.to_owned(), ..Figure::default() })
            }
            Kind::Utilisation => {
                let figure = plain(value);
                if figure.is_none() {
                    self.reader.fault(
                        value.span(),
                        "a utilisation is a plain number",
                        "as in value = 0.81 or value = \"81 %\"",
                    );
                }
                figure
            }
            _ => self.dimensioned(kind, value, "value", row),
        }
    }

    /// A quantity of the dimension that this kind of claim has.
    fn dimensioned(&mut self, kind: Kind, value: Value<'_>, key: &str, row: &Row<'_>) -> Option<Figure> {
        match kind {
            Kind::Reaction | Kind::Shear => self.measured::<Force>(value, key),
            Kind::Moment | Kind::ReactionMoment => self.measured::<Moment>(value, key),
            Kind::Slope => self.measured::<Angle>(value, key),
            Kind::Redundant if self.text_of(row, "at").starts_with("M.") => self.measured::<Moment>(value, key),
            Kind::Redundant => self.measured::<Force>(value, key),
            Kind::Deflection | Kind::Allowable => self.measured::<Length>(value, key),
            Kind::Utilisation | Kind::Verdict => plain(value),
        }
    }

    fn measured<T: Physical>(&mut self, value: Value<'_>, key: &str) -> Option<Figure> {
        let typed = self.reader.quantity::<T>(value, key)?.typed;
        let written = match value.get_ref() {
            DeValue::String(text) => text.split_whitespace().collect::<Vec<_>>().join(" "),
            _ => String::new(),
        };
        let unit = match typed.terms.as_slice() {
            [only] => only.unit.si(),
            _ => None,
        };
        Some(Figure { si: si_of(&typed), unit, half: half_of(&typed), written })
    }

    /// The tolerance, read whatever became of the figure; `None` where it is at fault.
    pub(super) fn tolerance(&mut self, kind: Kind, row: &Row<'_>) -> Option<Tolerance> {
        let Some(value) = row.table.get("tolerance") else {
            return Some(if kind == Kind::Verdict { Tolerance::Absolute(0.0) } else { Tolerance::Usual });
        };
        if kind == Kind::Verdict {
            self.reader.warn(value.span(), "a verdict has no tolerance: this is left aside", "take it out");
            return Some(Tolerance::Absolute(0.0));
        }
        if let DeValue::String(text) = value.get_ref()
            && let Some(number) = text.trim().strip_suffix('%')
        {
            let share = Decimal::parse(number.trim()).map(Decimal::to_f64);
            if let Some(share) = share.filter(|share| (0.0..=100.0).contains(share)) {
                return Some(Tolerance::Share(share / 100.0));
            }
            self.reader.fault(value.span(), "a tolerance in % lies between 0 and 100", "as in \"1 %\"");
            return None;
        }
        let figure = self.dimensioned(kind, value, "tolerance", row);
        if kind == Kind::Utilisation && figure.is_none() {
            let message = "the tolerance of a utilisation is a plain number or a share in %";
            self.reader.fault(value.span(), message, "as in \"0.01\" or \"1 %\"");
        }
        let figure = figure?;
        if figure.si < 0.0 {
            self.reader.fault(value.span(), "a tolerance is not negative", "write it without the sign");
            return None;
        }
        Some(Tolerance::Absolute(figure.si))
    }
}

/// A plain number or a share in %.
fn plain(value: Value<'_>) -> Option<Figure> {
    let written = match value.get_ref() {
        DeValue::String(text) => text.trim().to_owned(),
        DeValue::Float(number) => number.as_str().to_owned(),
        DeValue::Integer(number) if number.radix() == 10 => number.as_str().to_owned(),
        _ => return None,
    };
    let (digits, scale) = match written.strip_suffix('%') {
        Some(number) => (number.trim(), 0.01),
        None => (written.as_str(), 1.0),
    };
    let figure = Decimal::parse(digits).filter(|figure| figure.to_f64().abs() <= 1e30)?;
    Some(Figure { si: figure.to_f64() * scale, unit: Some(scale), half: half(figure) * scale, written })
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
