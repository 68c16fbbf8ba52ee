//! Units of measurement as products of powers of the known ones.

use std::fmt;

use super::Decimal;

/// Exponents of the base dimensions of a quantity.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord, Default)]
pub struct Dimension {
    /// Exponent of force.
    pub force: i8,
    /// Exponent of length.
    pub length: i8,
    /// Exponent of mass; weight follows from mass by g, in N/kg.
    pub mass: i8,
    /// Exponent of temperature difference.
    pub temperature: i8,
    /// Exponent of plane angle; kept apart so that a bare number is not taken for an angle.
    pub angle: i8,
}

impl Dimension {
    /// The dimension with the given exponents of force, length, mass, temperature and angle.
    pub const fn new(force: i8, length: i8, mass: i8, temperature: i8, angle: i8) -> Self {
        Self { force, length, mass, temperature, angle }
    }
}

/// One unit that the program knows.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct Atom {
    /// As written in a deck: `kN`.
    pub text: &'static str,
    /// Its dimension.
    pub dimension: Dimension,
    /// Its size in SI base units (m, N, kg, K, rad): `size / divisor`, both exact.
    pub size: Decimal,
    /// See `size`.
    pub divisor: Decimal,
}

const fn atom(text: &'static str, d: [i8; 5], size: (i128, i32), divisor: (i128, i32)) -> Atom {
    let [force, length, mass, temperature, angle] = d;
    Atom {
        text,
        dimension: Dimension::new(force, length, mass, temperature, angle),
        size: Decimal::new(size.0, size.1),
        divisor: Decimal::new(divisor.0, divisor.1),
    }
}

const LENGTH: [i8; 5] = [0, 1, 0, 0, 0];
const FORCE: [i8; 5] = [1, 0, 0, 0, 0];
const STRESS: [i8; 5] = [1, -2, 0, 0, 0];
const INTENSITY: [i8; 5] = [1, -1, 0, 0, 0];
const SPECIFIC_WEIGHT: [i8; 5] = [1, -3, 0, 0, 0];
const TEMPERATURE: [i8; 5] = [0, 0, 0, 1, 0];
const ANGLE: [i8; 5] = [0, 0, 0, 0, 1];
const ONE: (i128, i32) = (1, 0);
/// One avoirdupois pound-force in newtons: 0.45359237 kg times 9.80665 m/s², both exact by definition.
const POUND: (i128, i32) = (44_482_216_152_605, -13);
const KIP: (i128, i32) = (44_482_216_152_605, -10);

/// Every unit a deck may use. Inch and foot by the international definition (25.4 mm), pound-force by the definitions of
/// the pound and of standard gravity.
pub const KNOWN: [Atom; 28] = [
    atom("m", LENGTH, ONE, ONE),
    atom("mm", LENGTH, (1, -3), ONE),
    atom("cm", LENGTH, (1, -2), ONE),
    atom("in", LENGTH, (254, -4), ONE),
    atom("ft", LENGTH, (3048, -4), ONE),
    atom("N", FORCE, ONE, ONE),
    atom("kN", FORCE, (1, 3), ONE),
    atom("MN", FORCE, (1, 6), ONE),
    atom("lbf", FORCE, POUND, ONE),
    atom("lb", FORCE, POUND, ONE),
    atom("kip", FORCE, KIP, ONE),
    atom("Pa", STRESS, ONE, ONE),
    atom("kPa", STRESS, (1, 3), ONE),
    atom("MPa", STRESS, (1, 6), ONE),
    atom("GPa", STRESS, (1, 9), ONE),
    atom("psi", STRESS, POUND, (64516, -8)),
    atom("ksi", STRESS, KIP, (64516, -8)),
    atom("psf", STRESS, POUND, (9_290_304, -8)),
    atom("ksf", STRESS, KIP, (9_290_304, -8)),
    atom("kg", [0, 0, 1, 0, 0], ONE, ONE),
    atom("K", TEMPERATURE, ONE, ONE),
    atom("degC", TEMPERATURE, ONE, ONE),
    atom("degF", TEMPERATURE, (5, 0), (9, 0)),
    atom("rad", ANGLE, ONE, ONE),
    atom("mrad", ANGLE, (1, -3), ONE),
    atom("plf", INTENSITY, POUND, (3048, -4)),
    atom("klf", INTENSITY, KIP, (3048, -4)),
    atom("pcf", SPECIFIC_WEIGHT, POUND, (28_316_846_592, -12)),
];

/// Pounds-force a cubic inch; apart from [`KNOWN`] only because its divisor is long.
pub const PCI: Atom = atom("pci", SPECIFIC_WEIGHT, POUND, (16_387_064, -12));

/// A unit: a product of powers of known units, in the order written.
#[derive(Clone, Debug, PartialEq, Eq, PartialOrd, Ord, Default)]
pub struct Unit {
    factors: Vec<(Atom, i8)>,
}

impl Unit {
    /// The unit of a pure number.
    pub const fn none() -> Self {
        Self { factors: Vec::new() }
    }

    /// A product of powers; factors with the exponent 0 are left out.
    pub fn of(factors: impl IntoIterator<Item = (Atom, i8)>) -> Self {
        Self { factors: factors.into_iter().filter(|(_, power)| *power != 0).collect() }
    }

    /// A known unit by its text, to the first power. `None` when there is no such unit.
    pub fn known(text: &str) -> Option<Atom> {
        KNOWN.iter().chain([&PCI]).find(|atom| atom.text == text).copied()
    }

    /// The factors in the order written.
    pub fn factors(&self) -> &[(Atom, i8)] {
        &self.factors
    }

    /// Whether this is the unit of a pure number.
    pub fn is_none(&self) -> bool {
        self.factors.is_empty()
    }

    /// The dimension of the product.
    pub fn dimension(&self) -> Dimension {
        // Saturating: a unit put together by hand may have powers beyond those that a deck may use.
        self.factors.iter().fold(Dimension::default(), |sum, (atom, power)| {
            let add = |sum: i8, one: i8| sum.saturating_add(one.saturating_mul(*power));
            Dimension {
                force: add(sum.force, atom.dimension.force),
                length: add(sum.length, atom.dimension.length),
                mass: add(sum.mass, atom.dimension.mass),
                temperature: add(sum.temperature, atom.dimension.temperature),
                angle: add(sum.angle, atom.dimension.angle),
            }
        })
    }

    /// Size in SI base units as an exact quotient `(numerator, denominator)`; `None` beyond 128 bits.
    pub fn size(&self) -> Option<(Decimal, Decimal)> {
        self.factors.iter().try_fold((Decimal::ONE, Decimal::ONE), |size, (atom, power)| {
            (0..power.unsigned_abs()).try_fold(size, |(top, bottom), _| {
                let (up, down) = if *power > 0 { (atom.size, atom.divisor) } else { (atom.divisor, atom.size) };
                Some((top.times(up)?, bottom.times(down)?))
            })
        })
    }

    /// Size in SI base units, rounded to `f64`.
    pub fn si(&self) -> Option<f64> {
        self.size().map(|(top, bottom)| top.to_f64() / bottom.to_f64())
    }
}

impl fmt::Display for Unit {
    /// ASCII in the deck's grammar: `kN m^2`, `kN/m^2 GPa`, `1/K`.
    fn fmt(&self, out: &mut fmt::Formatter<'_>) -> fmt::Result {
        let part = |positive: bool| {
            let words: Vec<String> = self
                .factors
                .iter()
                .filter(|(_, power)| (*power > 0) == positive)
                .map(|(atom, power)| match power.unsigned_abs() {
                    1 => atom.text.to_owned(),
                    n => format!("{}^{n}", atom.text),
                })
                .collect();
            words.join(" ")
        };
        let (top, bottom) = (part(true), part(false));
        match (top.is_empty(), bottom.is_empty()) {
            (_, true) => out.write_str(&top),
            (true, false) => write!(out, "1/{bottom}"),
            (false, false) => write!(out, "{top}/{bottom}"),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::Unit;

    fn unit(parts: &[(&str, i8)]) -> Unit {
        Unit::of(parts.iter().filter_map(|(text, power)| Some((Unit::known(text)?, *power))))
    }

    #[test]
    fn sizes_follow_the_definitions() {
        // 1 ksi = 6.894757 MPa, 1 kip/ft = 14.593903 kN/m: published conversion tables.
        let ksi = unit(&[("ksi", 1)]).si().unwrap_or(0.0);
        assert!((ksi / 6.894_757_293e6 - 1.0).abs() < 1e-9);
        let klf = unit(&[("kip", 1), ("ft", -1)]).si().unwrap_or(0.0);
        assert!((klf / 14.593_903e3 - 1.0).abs() < 1e-7);
        assert_eq!(unit(&[("klf", 1)]).si(), Some(klf));
    }

    #[test]
    fn no_power_overflows() {
        let beyond = unit(&[("pcf", 127), ("pcf", 127), ("kg", -128)]);
        assert_eq!(beyond.dimension().length, i8::MIN);
        assert_eq!(beyond.si(), None);
    }

    #[test]
    fn a_unit_prints_in_the_grammar_of_decks() {
        assert_eq!(unit(&[("kN", 1), ("m", 2)]).to_string(), "kN m^2");
        assert_eq!(unit(&[("kN", 1), ("m", -2), ("GPa", -1)]).to_string(), "kN/m^2 GPa");
        assert_eq!(unit(&[("K", -1)]).to_string(), "1/K");
        assert_eq!(Unit::none().to_string(), "");
    }
}
