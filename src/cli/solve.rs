//! `proofspan solve`: results without a PDF.

use std::path::Path;

use super::Outcome;
use super::output::{calculate, failed, outcome, say, small, verdict};
use crate::analysis::{Extreme, Field};
use crate::calculation::Calculation;
use crate::member::System;

pub fn run(deck: &Path, json: bool, working: bool, at: &[String]) -> Outcome {
    let (_, calculation) = match calculate(deck, at) {
        Ok(solved) => solved,
        Err(outcome) => return outcome,
    };
    if json {
        let derivation = match working.then(|| calculation.working()).transpose() {
            Ok(derivation) => derivation,
            Err(fault) => return failed(&fault),
        };
        say(&calculation.json(derivation.as_ref()).to_string());
        return outcome(&calculation);
    }
    tables(&calculation);
    verdict(&calculation);
    outcome(&calculation)
}

/// Reactions, stations and extremes of every combination.
fn tables(calculation: &Calculation) {
    let member = &calculation.member;
    let (force, length, f, l) = match member.title.system {
        System::Si => (1e3, 1.0, "kN", "m"),
        System::Us => (4_448.221_615_260_5, 0.3048, "kip", "ft"),
    };
    let (tiny, t) = small(calculation);
    for (index, combination) in member.combinations.iter().enumerate() {
        let Some(field) = Field::of_combination(&calculation.analysis, member, index) else { continue };
        say(&format!("Combination {} ({})", combination.name, combination.purpose.word()));
        for (support, reaction) in member.supports.iter().zip(&field.solution.reactions) {
            let up = if support.holds_deflection() {
                format!("{:>12.3} {f} upward", reaction.force / force)
            } else {
                String::new()
            };
            let turn = reaction.moment / force / length;
            let moment = if support.holds_rotation() {
                format!("{turn:>12.3} {f} {l} counter-clockwise")
            } else {
                String::new()
            };
            say(&format!("  support {:<16} {up} {moment}", support.name));
        }
        for place in &member.stations {
            let here = field.at(*place);
            say(&format!(
                "  at {:>8.3} {l}  V {:.3} | {:.3} {f}  M {:.3} | {:.3} {f} {l}  v {:.3} {t}",
                place.x() / length,
                here.left.shear / force,
                here.right.shear / force,
                here.left.moment / force / length,
                here.right.moment / force / length,
                here.v / tiny,
            ));
        }
        let extremes = field.extremes();
        let show = |name: &str, extreme: Extreme, size: f64, unit: &str| {
            say(&format!("  {name:<22} {:>12.3} {unit} at {:.3} {l}", extreme.value / size, extreme.at / length));
        };
        show("greatest moment", extremes.moment.max, force * length, &format!("{f} {l}"));
        show("least moment", extremes.moment.min, force * length, &format!("{f} {l}"));
        show("greatest shear", extremes.shear.max, force, f);
        show("least shear", extremes.shear.min, force, f);
        show("greatest downward", extremes.deflection.max, tiny, t);
        show("greatest upward", extremes.deflection.min, tiny, t);
    }
}
