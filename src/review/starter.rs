//! A file of claims to fill in, with every quantity that a deck reports.

use std::fmt::Write;

use crate::analysis::Analysis;
use crate::member::{Measured, Member};

/// The file; every value is empty, and an empty value is left out of a review.
pub fn starter(member: &Member, analysis: &Analysis, deck: &str) -> String {
    let (year, month, day) = member.title.date;
    let mut text = format!(
        "# Claims to review: fill in the figures of the document under review; what stays empty is left out.\n\
         format = 1\n\
         deck = {}\n\
         blind = false                # true where you modelled without the originator's sheets\n\n\
         [reviewed]\n\
         number = {}\n\
         revision = {}\n\
         subject = {}\n\n\
         [reviewer]\n\
         name = \"your name\"\n\
         date = {year:04}-{month:02}-{day:02}\n",
        quoted(deck),
        quoted(&member.title.number),
        quoted(&member.title.revision),
        quoted(&member.title.subject),
    );
    for combination in &member.combinations {
        let name = combination.name.as_str();
        for support in &member.supports {
            if support.holds_deflection() {
                claim(&mut text, "reaction", &support.name, name, &[]);
            }
            if support.holds_rotation() {
                claim(&mut text, "reaction_moment", &support.name, name, &[]);
            }
        }
        for redundant in &analysis.model.redundants {
            claim(&mut text, "redundant", &redundant.name(member), name, &[]);
        }
        for station in &member.stations {
            let at = format!("{} m", station.exact());
            for quantity in ["shear", "moment", "slope", "deflection"] {
                let side: &[(&str, &str)] = if quantity == "deflection" { &[] } else { &[("side", "right")] };
                claim(&mut text, quantity, &at, name, side);
            }
        }
        for span in &member.spans {
            for quantity in ["shear", "moment", "deflection"] {
                for extreme in ["max", "min"] {
                    claim(&mut text, quantity, &span.name, name, &[("extreme", extreme)]);
                }
            }
        }
    }
    for limit in &member.limits {
        for (combination, span) in
            limit.combinations.iter().flat_map(|c| limit.spans.iter().map(move |span| (*c, *span)))
        {
            let (Some(combination), Some(span)) = (member.combinations.get(combination), member.spans.get(span)) else {
                continue;
            };
            for quantity in ["allowable", "utilisation", "verdict"] {
                claim(&mut text, quantity, &span.name, &combination.name, &[("limit", &limit.name)]);
            }
            if limit.measured == Measured::Chord {
                let more = [("extreme", "max"), ("measured", "chord")];
                claim(&mut text, "deflection", &span.name, &combination.name, &more);
            }
        }
    }
    text
}

fn claim(text: &mut String, quantity: &str, at: &str, combination: &str, more: &[(&str, &str)]) {
    let _ = write!(text, "\n[[claim]]\nquantity = \"{quantity}\"\nat = {}\n", quoted(at));
    for (key, value) in more {
        let _ = writeln!(text, "{key} = {}", quoted(value));
    }
    let _ = write!(text, "combination = {}\nvalue = \"\"\nreference = \"\"\n", quoted(combination));
}

/// A TOML string.
fn quoted(text: &str) -> String {
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
