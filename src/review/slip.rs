//! Differences that a sign, a unit or a decimal point would explain by itself.
//!
//! Only units of the figure's own kind are tried, and only on figures written finely enough to tell one from another: a
//! force is never said to be in feet, and one digit alone betrays nothing.

use super::ask::{Along, Ask};
use super::claim::Claim;

/// A unit by its name in a sentence and its size in SI.
type Named = (&'static str, f64);

/// Pound-force, N: exact by the definitions of the pound and of standard gravity.
const POUND: f64 = 4.448_221_615_260_5;
/// A tonne's weight, N.
const TONNE: f64 = 9_806.65;
const FOOT: f64 = 0.3048;
const INCH: f64 = 0.0254;

const FORCES: [Named; 7] = [
    ("N", 1.0),
    ("kN", 1e3),
    ("MN", 1e6),
    ("lbf", POUND),
    ("kip", 1e3 * POUND),
    ("kilograms-force", 1e-3 * TONNE),
    ("tonnes-force", TONNE),
];

const MOMENTS: [Named; 10] = [
    ("N mm", 1e-3),
    ("N m", 1.0),
    ("kN cm", 10.0),
    ("kN m", 1e3),
    ("MN m", 1e6),
    ("lbf in", POUND * INCH),
    ("lbf ft", POUND * FOOT),
    ("kip in", 1e3 * POUND * INCH),
    ("kip ft", 1e3 * POUND * FOOT),
    ("tonne-metres", TONNE),
];

const LENGTHS: [Named; 5] = [("mm", 1e-3), ("cm", 1e-2), ("m", 1.0), ("in", INCH), ("ft", FOOT)];

const ANGLES: [Named; 3] = [("mrad", 1e-3), ("rad", 1.0), ("degrees", std::f64::consts::PI / 180.0)];

const SHARES: [Named; 2] = [("%", 0.01), ("parts of one", 1.0)];

/// The units a claim of this kind might have been meant in.
fn units(ask: &Ask) -> &'static [Named] {
    match ask {
        Ask::Redundant { name } if name.starts_with("M.") => &MOMENTS,
        Ask::Reaction { .. } | Ask::Redundant { .. } => &FORCES,
        Ask::ReactionMoment { .. } => &MOMENTS,
        Ask::Station { along, .. } | Ask::Extreme { along, .. } => match along {
            Along::Shear => &FORCES,
            Along::Moment => &MOMENTS,
            Along::Slope => &ANGLES,
            Along::Deflection => &LENGTHS,
        },
        Ask::Allowable { .. } => &LENGTHS,
        Ask::Utilisation { .. } => &SHARES,
        Ask::Verdict { .. } => &[],
    }
}

/// A figure whose last digit is worth more than this share of it is too coarse to tell one unit from another.
const COARSE: f64 = 0.02;

/// A slip may be off by no more than this share of the figure, whatever the claim's own tolerance.
const NEAR: f64 = 0.005;

/// What would turn the claimed figure into the recomputed one, in a sentence; empty where nothing does.
pub fn slip(claim: &Claim, value: f64) -> String {
    let figure = claim.claimed;
    if claim.verdict || value == 0.0 || figure == 0.0 {
        return String::new();
    }
    if (figure + value).abs() <= claim.tolerance * (1.0 + 1e-9) {
        return "would agree with the opposite sign".to_owned();
    }
    if claim.half > COARSE * figure.abs() {
        return String::new();
    }
    let window = claim.tolerance.min(NEAR * figure.abs()).max(claim.half);
    // The claim's own uncertainty is scaled with it.
    let gives = |factor: f64| (figure * factor - value).abs() <= window * factor.abs() * (1.0 + 1e-9);
    for (sign, prefix) in [(1.0, "would agree"), (-1.0, "would agree with the opposite sign,")] {
        for (name, size) in units(&claim.question.ask) {
            let Some(ratio) = claim.unit.map(|unit| size / unit).filter(|ratio| (ratio - 1.0).abs() > 1e-9) else {
                continue;
            };
            if gives(sign * ratio) {
                return format!("{prefix} if the figure were in {name}");
            }
            if gives(sign / ratio) {
                return format!("{prefix} if the figure had been converted as if from {name}");
            }
        }
        for (factor, said) in POINTS {
            if gives(sign * factor) {
                return format!("{prefix} with the decimal point {said}");
            }
        }
    }
    if matches!(claim.question.ask, Ask::Utilisation { .. }) && (figure * value - 1.0).abs() <= window * value.abs() {
        return "would agree as the allowable over the deflection".to_owned();
    }
    String::new()
}

const POINTS: [(f64, &str); 6] = [
    (10.0, "one place further right"),
    (0.1, "one place further left"),
    (100.0, "two places further right"),
    (0.01, "two places further left"),
    (1000.0, "three places further right"),
    (0.001, "three places further left"),
];
