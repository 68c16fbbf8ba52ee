//! A file of claims to fill in, with every quantity that a deck reports.

use std::fmt::Write;

use super::read::MOST;
use super::write::quoted;
use crate::analysis::Analysis;
use crate::member::{Measured, Member};

/// The file; every value is empty, and an empty value is left out of a review. No more is written than can be read.
pub fn starter(member: &Member, analysis: &Analysis, deck: &str) -> String {
    let (year, month, day) = member.title.date;
    let text = format!(
        "# Claims to review: fill in the figures of the document under review; what stays empty is left out.\n\
         # Signs: loads, deflections positive downward; slopes clockwise; reactions upward, reaction moments\n\
         # counter-clockwise; bending moments sagging; V = dM/dx. The greatest deflection is the greatest downward.\n\
         # A claim may have tolerance = \"1 %\"; else half a unit of its last digit or 0.5 %, the larger.\n\
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
    let mut list = List { text, count: 0 };
    for combination in &member.combinations {
        let name = combination.name.as_str();
        list.supports(member, analysis, ("combination", name));
        for station in &member.stations {
            let at = format!("{} m", station.exact());
            for quantity in ["shear", "moment", "slope", "deflection"] {
                let side: &[(&str, &str)] = if quantity == "deflection" { &[] } else { &[("side", "right")] };
                list.claim(quantity, &at, ("combination", name), side);
            }
        }
        for span in &member.spans {
            for quantity in ["shear", "moment", "deflection"] {
                for extreme in ["max", "min"] {
                    list.claim(quantity, &span.name, ("combination", name), &[("extreme", extreme)]);
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
            let of = ("combination", combination.name.as_str());
            for quantity in ["allowable", "utilisation", "verdict"] {
                list.claim(quantity, &span.name, of, &[("limit", &limit.name)]);
            }
            if limit.measured == Measured::Chord {
                let more = [("extreme", "max"), ("measured", "chord")];
                list.claim("deflection", &span.name, of, &more);
            }
        }
    }
    for case in &member.cases {
        list.supports(member, analysis, ("case", &case.name));
    }
    if list.count > MOST {
        let _ =
            write!(list.text, "\n# {} further figures are left out: so long a file is not read.\n", list.count - MOST);
    }
    list.text
}

struct List {
    text: String,
    count: usize,
}

impl List {
    /// Reactions and redundants of a load state.
    fn supports(&mut self, member: &Member, analysis: &Analysis, of: (&str, &str)) {
        for support in &member.supports {
            if support.holds_deflection() {
                self.claim("reaction", &support.name, of, &[]);
            }
            if support.holds_rotation() {
                self.claim("reaction_moment", &support.name, of, &[]);
            }
        }
        for redundant in &analysis.model.redundants {
            self.claim("redundant", &redundant.name(member), of, &[]);
        }
    }

    fn claim(&mut self, quantity: &str, at: &str, of: (&str, &str), more: &[(&str, &str)]) {
        self.count += 1;
        if self.count > MOST {
            return;
        }
        let _ = write!(self.text, "\n[[claim]]\nquantity = \"{quantity}\"\nat = {}\n", quoted(at));
        for (key, value) in more {
            let _ = writeln!(self.text, "{key} = {}", quoted(value));
        }
        let _ = write!(self.text, "{} = {}\nvalue = \"\"\nreference = \"\"\n", of.0, quoted(of.1));
    }
}
