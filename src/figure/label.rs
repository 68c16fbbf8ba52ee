//! Words and figures of labels.
//!
//! Figures of the deck are shown as typed where their units belong to the sheet's system, else converted to five figures:
//! the exact conversion stands in the working.

use crate::member::{Place, System};
use crate::quantity::{Decimal, Typed, Unit};

/// What a figure measures; it chooses the unit to convert to.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Measure {
    /// m or ft.
    Length,
    /// mm or in.
    Movement,
    /// kN or kip.
    Force,
    /// kN m or kip ft.
    Couple,
    /// kN/m or kip/ft.
    Intensity,
    /// kN/m² or psf.
    AreaLoad,
    /// kN/mm or kip/in.
    Stiffness,
    /// kN m/rad or kip ft/rad.
    TurnStiffness,
    /// mrad.
    Turn,
    /// K or degF.
    Temperature,
    /// kN m² or kip in².
    Rigidity,
}

impl Measure {
    fn unit(self, system: System) -> Unit {
        let si = system == System::Si;
        let parts: &[(&str, i8)] = match (self, si) {
            (Self::Length, true) => &[("m", 1)],
            (Self::Length, false) => &[("ft", 1)],
            (Self::Movement, true) => &[("mm", 1)],
            (Self::Movement, false) => &[("in", 1)],
            (Self::Force, true) => &[("kN", 1)],
            (Self::Force, false) => &[("kip", 1)],
            (Self::Couple, true) => &[("kN", 1), ("m", 1)],
            (Self::Couple, false) => &[("kip", 1), ("ft", 1)],
            (Self::Intensity, true) => &[("kN", 1), ("m", -1)],
            (Self::Intensity, false) => &[("kip", 1), ("ft", -1)],
            (Self::AreaLoad, true) => &[("kN", 1), ("m", -2)],
            (Self::AreaLoad, false) => &[("psf", 1)],
            (Self::Stiffness, true) => &[("kN", 1), ("mm", -1)],
            (Self::Stiffness, false) => &[("kip", 1), ("in", -1)],
            (Self::TurnStiffness, true) => &[("kN", 1), ("m", 1), ("rad", -1)],
            (Self::TurnStiffness, false) => &[("kip", 1), ("ft", 1), ("rad", -1)],
            (Self::Turn, _) => &[("mrad", 1)],
            (Self::Temperature, true) => &[("K", 1)],
            (Self::Temperature, false) => &[("degF", 1)],
            (Self::Rigidity, true) => &[("kN", 1), ("m", 2)],
            (Self::Rigidity, false) => &[("kip", 1), ("in", 2)],
        };
        Unit::of(parts.iter().filter_map(|(text, power)| Some((Unit::known(text)?, *power))))
    }
}

/// Whether every unit of a typed quantity belongs to the system; angles belong to both.
fn belongs(typed: &Typed, system: System) -> bool {
    const SI: [&str; 13] = ["m", "mm", "cm", "N", "kN", "MN", "Pa", "kPa", "MPa", "GPa", "kg", "K", "degC"];
    let fits = |text: &str| matches!(text, "rad" | "mrad") || (SI.contains(&text) == (system == System::Si));
    typed.terms.iter().all(|term| term.unit.factors().iter().all(|(atom, _)| fits(atom.text)))
}

/// A figure of the deck with its unit; `si` is its value in SI. Without its sign where `unsigned`.
pub fn given(typed: &Typed, si: f64, measure: Measure, system: System, unsigned: bool) -> String {
    if belongs(typed, system) {
        let words: Vec<String> = typed
            .terms
            .iter()
            .map(|term| {
                let figure = if unsigned { magnitude(term.figure) } else { term.figure };
                format!("{} {}", figures(figure), unit_words(&term.unit))
            })
            .collect();
        return words.join(" ");
    }
    converted(if unsigned { si.abs() } else { si }, measure, system)
}

/// A value in SI to five figures in the sheet's unit.
pub fn converted(si: f64, measure: Measure, system: System) -> String {
    let unit = measure.unit(system);
    let figure = five_figures(si / unit.si().unwrap_or(1.0));
    format!("{} {}", figures(figure), unit_words(&unit))
}

/// The distance from one place to a later one: exact in metres, to five figures in feet.
pub fn distance(from: Place, to: Place, system: System) -> String {
    let exact = to.exact().minus(from.exact()).map(Decimal::trimmed);
    match exact {
        Some(exact) if system == System::Si => {
            let plain = if exact.exponent() > 0 { exact.with_exponent(0).unwrap_or(exact) } else { exact };
            format!("{} m", figures(plain))
        }
        _ => converted(to.beyond(from), Measure::Length, system),
    }
}

/// Rounded half-even to five significant figures, trailing zeros left out; zero for what is not finite.
fn five_figures(value: f64) -> Decimal {
    let figure = Decimal::parse(&format!("{value:.4e}")).unwrap_or(Decimal::ZERO).trimmed();
    if figure.exponent() > 0 { figure.with_exponent(0).unwrap_or(figure) } else { figure }
}

fn magnitude(figure: Decimal) -> Decimal {
    Decimal::new(figure.mantissa().checked_abs().unwrap_or(i128::MAX), figure.exponent())
}

/// A decimal as it stands in a drawing: a true minus, thin spaces between thousands from five digits on.
fn figures(decimal: Decimal) -> String {
    let text = decimal.to_string();
    let (sign, digits) = text.strip_prefix('-').map_or(("", text.as_str()), |rest| ("−", rest));
    let (whole, fraction) = digits.split_once('.').map_or((digits, None), |(whole, rest)| (whole, Some(rest)));
    let mut grouped = String::new();
    for (index, digit) in whole.chars().enumerate() {
        let left = whole.len() - index;
        if index > 0 && left % 3 == 0 && whole.len() > 4 {
            grouped.push('\u{2009}');
        }
        grouped.push(digit);
    }
    fraction.map_or_else(|| format!("{sign}{grouped}"), |rest| format!("{sign}{grouped}.{rest}"))
}

/// A unit in print: raised powers.
fn unit_words(unit: &Unit) -> String {
    unit.to_string().replace("^2", "²").replace("^3", "³").replace("^4", "⁴").replace("deg", "°")
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::quantity::Term;

    fn typed(figure: &str, unit: &[(&str, i8)]) -> Typed {
        let unit = Unit::of(unit.iter().map(|(text, power)| (Unit::known(text).expect("known"), *power)));
        Typed { terms: vec![Term { figure: Decimal::parse(figure).expect("figure"), unit }] }
    }

    #[test]
    fn figures_stand_as_typed_in_their_own_system() {
        let load = typed("-8.50", &[("kN", 1), ("m", -2)]);
        assert_eq!(given(&load, -8500.0, Measure::AreaLoad, System::Si, false), "−8.50 kN/m²");
        assert_eq!(given(&load, -8500.0, Measure::AreaLoad, System::Si, true), "8.50 kN/m²");
    }

    #[test]
    fn figures_of_the_other_system_are_converted() {
        // 1 kip = 4.4482216 kN (definition of the pound-force).
        let force = typed("10", &[("kip", 1)]);
        assert_eq!(given(&force, 44_482.216, Measure::Force, System::Si, false), "44.482 kN");
        assert_eq!(given(&force, 44_482.216, Measure::Force, System::Us, false), "10 kip");
    }

    #[test]
    fn distances_are_exact_metres_and_thousands_are_grouped() {
        let place = |text: &str| Place::metres(Decimal::parse(text).expect("figure"));
        assert_eq!(distance(place("0.1"), place("0.3"), System::Si), "0.2 m");
        assert_eq!(distance(place("0"), place("30"), System::Si), "30 m");
        assert_eq!(converted(41_200_000.0, Measure::Rigidity, System::Si), "41\u{2009}200 kN m²");
    }
}
