//! Claims as a file of claims.

use std::fmt::Write;

use super::ask::{Along, Ask, Of, Side};
use super::claim::{Claim, Claims};
use crate::member::Measured;

/// A file that reads as these claims: figures in SI units with every digit, tolerances written out.
///
/// Taken from a sheet, it travels inside the review and can be run again.
pub fn toml(claims: &Claims) -> String {
    let mut text = String::from("# Claims in SI units, signs as in the deck.\nformat = 1\n");
    let _ = writeln!(text, "deck = {}\nblind = {}", quoted(&claims.deck), claims.blind);
    let of = &claims.reviewed;
    let _ = writeln!(text, "\n[reviewed]\nnumber = {}", quoted(&of.number));
    for (key, value) in [("revision", &of.revision), ("subject", &of.subject)] {
        if !value.is_empty() {
            let _ = writeln!(text, "{key} = {}", quoted(value));
        }
    }
    if let Some(date) = of.date {
        let _ = writeln!(text, "date = {}", day(date));
    }
    let name = if claims.reviewer.name.trim().is_empty() { "not named" } else { &claims.reviewer.name };
    let _ = writeln!(text, "\n[reviewer]\nname = {}\ndate = {}", quoted(name), day(claims.reviewer.date));
    for claim in &claims.claims {
        one(&mut text, claim);
    }
    text
}

fn one(text: &mut String, claim: &Claim) {
    let (quantity, unit) = quantity(&claim.question.ask);
    let mut keys = keys(&claim.question.ask);
    keys.push(match &claim.question.of {
        Of::Case(name) => ("case", name.clone()),
        Of::Combination(name) => ("combination", name.clone()),
    });
    let figure = |si: f64| format!("{si:?} {unit}").trim_end().to_owned();
    if claim.verdict {
        keys.push(("value", if claim.claimed > 0.5 { "pass" } else { "fail" }.to_owned()));
    } else {
        keys.extend([("value", figure(claim.claimed)), ("tolerance", figure(claim.tolerance))]);
    }
    if !claim.reference.is_empty() {
        keys.push(("reference", claim.reference.clone()));
    }
    let _ = write!(text, "\n[[claim]]\nquantity = \"{quantity}\"\n");
    for (key, value) in keys {
        let _ = writeln!(text, "{key} = {}", quoted(&value));
    }
}

/// The file's word for what is claimed, and its unit in SI.
fn quantity(ask: &Ask) -> (&'static str, &'static str) {
    match ask {
        Ask::Reaction { .. } => ("reaction", "N"),
        Ask::ReactionMoment { .. } => ("reaction_moment", "N m"),
        Ask::Redundant { name } => ("redundant", if name.starts_with("M.") { "N m" } else { "N" }),
        Ask::Station { along, .. } | Ask::Extreme { along, .. } => match along {
            Along::Shear => ("shear", "N"),
            Along::Moment => ("moment", "N m"),
            Along::Slope => ("slope", "rad"),
            Along::Deflection => ("deflection", "m"),
        },
        Ask::Allowable { .. } => ("allowable", "m"),
        Ask::Utilisation { .. } => ("utilisation", ""),
        Ask::Verdict { .. } => ("verdict", ""),
    }
}

/// The keys that say where.
fn keys(ask: &Ask) -> Vec<(&'static str, String)> {
    let limited = |at: Option<&String>, limit: Option<&String>| {
        let at = at.map(|at| ("at", at.clone()));
        at.into_iter().chain(limit.map(|limit| ("limit", limit.clone()))).collect()
    };
    let chord = |along: Along, measured: Measured| {
        let chord = along == Along::Deflection && measured == Measured::Chord;
        chord.then(|| ("measured", "chord".to_owned()))
    };
    match ask {
        Ask::Reaction { support: at } | Ask::ReactionMoment { support: at } | Ask::Redundant { name: at } => {
            vec![("at", at.clone())]
        }
        Ask::Station { along, at, side, measured } => {
            let mut keys = vec![("at", format!("{} m", at.exact()))];
            if *along != Along::Deflection {
                keys.push(("side", if *side == Side::Left { "left" } else { "right" }.to_owned()));
            }
            keys.extend(chord(*along, *measured));
            keys
        }
        Ask::Extreme { along, span, max, measured } => {
            let mut keys = vec![("at", span.clone()), ("extreme", if *max { "max" } else { "min" }.to_owned())];
            keys.extend(chord(*along, *measured));
            keys
        }
        Ask::Allowable { span, limit } | Ask::Utilisation { span, limit } => limited(Some(span), limit.as_ref()),
        Ask::Verdict { span, limit } => limited(span.as_ref(), limit.as_ref()),
    }
}

fn day((year, month, day): (u16, u8, u8)) -> String {
    format!("{year:04}-{month:02}-{day:02}")
}

/// A TOML string.
pub(super) fn quoted(text: &str) -> String {
    let escaped: String = text
        .chars()
        .flat_map(|letter| match letter {
            '"' | '\\' => vec!['\\', letter],
            letter if letter.is_control() => format!("\\u{:04X}", u32::from(letter)).chars().collect(),
            letter => vec![letter],
        })
        .collect();
    format!("\"{escaped}\"")
}
