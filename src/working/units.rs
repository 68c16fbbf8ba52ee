//! The coherent units of a working: kN, m, rad, or kip, ft, rad. No step holds a hidden factor.

use crate::member::System;
use crate::quantity::{Atom, Unit};

/// What a figure is, for rounding figures of one quantity alike.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub enum What {
    /// A force, shear or reaction.
    Force,
    /// A moment.
    Moment,
    /// A deflection in the unit of length.
    Deflection,
    /// A turn.
    Turn,
    /// Demand over what is allowed.
    Utilisation,
    /// Anything else: rounded by its own size.
    Other,
}

/// The base units of a working.
#[derive(Clone, Debug)]
pub struct Base {
    force: Atom,
    length: Atom,
    small: Atom,
}

const fn plain(text: &'static str) -> Atom {
    // Every text used here is in the table; the first entry stands in for the compiler's sake.
    let mut index = 0;
    while index < crate::quantity::KNOWN.len() {
        let atom = crate::quantity::KNOWN.as_slice().split_at(index).1;
        if let [first, ..] = atom
            && same(first.text.as_bytes(), text.as_bytes())
        {
            return *first;
        }
        index += 1;
    }
    crate::quantity::PCI
}

const fn same(left: &[u8], right: &[u8]) -> bool {
    match (left.split_first(), right.split_first()) {
        (None, None) => true,
        (Some((a, left)), Some((b, right))) => *a == *b && same(left, right),
        _ => false,
    }
}

const RAD: Atom = plain("rad");
const KELVIN: Atom = plain("K");
const KILOGRAM: Atom = plain("kg");

impl Base {
    /// The base units of a printing system.
    pub fn of(system: System) -> Self {
        match system {
            System::Si => Self { force: plain("kN"), length: plain("m"), small: plain("mm") },
            System::Us => Self { force: plain("kip"), length: plain("ft"), small: plain("in") },
        }
    }

    /// force^f length^l.
    pub fn coherent(&self, force: i8, length: i8) -> Unit {
        Unit::of([(self.force, force), (self.length, length)])
    }

    /// force^f length^l, times an angle.
    pub fn turning(&self, force: i8, length: i8) -> Unit {
        Unit::of([(RAD, 1), (self.force, force), (self.length, length)])
    }

    /// force length per angle.
    pub fn rotational(&self) -> Unit {
        Unit::of([(self.force, 1), (self.length, 1), (RAD, -1)])
    }

    /// The unit deflections are shown in.
    pub fn shown_deflection(&self) -> Unit {
        Unit::of([(self.small, 1)])
    }

    /// How many small units of length make one.
    pub fn small_per_length(&self) -> Unit {
        Unit::of([(self.small, 1), (self.length, -1)])
    }

    /// Temperature difference.
    pub fn temperature(&self) -> Unit {
        Unit::of([(KELVIN, 1)])
    }

    /// Thermal expansion.
    pub fn expansion(&self) -> Unit {
        Unit::of([(KELVIN, -1)])
    }

    /// Mass per volume.
    pub fn density(&self) -> Unit {
        Unit::of([(KILOGRAM, 1), (self.length, -3)])
    }

    /// Mass per length.
    pub fn linear_mass(&self) -> Unit {
        Unit::of([(KILOGRAM, 1), (self.length, -1)])
    }

    /// Weight per mass.
    pub fn gravity(&self) -> Unit {
        Unit::of([(self.force, 1), (KILOGRAM, -1)])
    }
}

/// The unit that turns a figure in `from` into one in `to`: `to / from`.
pub fn conversion(from: &Unit, to: &Unit) -> Unit {
    let inverse = Unit::of(from.factors().iter().map(|(atom, power)| (*atom, -power)));
    product(to, &inverse)
}

/// Product of units, like factors joined.
pub fn product(left: &Unit, right: &Unit) -> Unit {
    let mut factors: Vec<(Atom, i8)> = left.factors().to_vec();
    for (atom, power) in right.factors() {
        match factors.iter_mut().find(|(known, _)| known == atom) {
            Some((_, sum)) => *sum += power,
            None => factors.push((*atom, *power)),
        }
    }
    Unit::of(factors)
}

#[cfg(test)]
mod tests {
    use super::{Base, conversion};
    use crate::member::System;
    use crate::quantity::Unit;

    #[test]
    fn working_units_print_in_the_grammar_of_decks() {
        let base = Base::of(System::Si);
        assert_eq!(base.coherent(1, 2).to_string(), "kN m^2");
        assert_eq!(base.coherent(-1, 1).to_string(), "m/kN");
        assert_eq!(base.turning(-1, -1).to_string(), "rad/kN m");
        let gpa = Unit::of([(Unit::known("GPa").expect("known"), 1)]);
        assert_eq!(conversion(&gpa, &base.coherent(1, -2)).to_string(), "kN/m^2 GPa");
    }
}
