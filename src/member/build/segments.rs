//! Segments and their tapers.

use super::{Build, FAR};
use crate::deck::{Row, Value};
use crate::member::{Part, Place, Section, Segment, Taper, TaperLaw};

/// The most segments of a member.
const MOST: usize = 20_000;

impl Build<'_> {
    pub(super) fn segments(&mut self, root: &Row<'_>) {
        let before = self.reader.errors();
        let given = root.table.get("segment");
        if !self.reader.has(root, "segment") {
            let hint = "add [[segment]] with length and section";
            self.reader.fault(root.span.clone(), "the member has no segment", hint);
        }
        if let Some(value) = given {
            let items = self.reader.tables(value, "segment", MOST);
            if items.is_empty() && self.reader.errors() == before {
                self.reader.fault(value.span(), "the member has no segment", "add [[segment]] with length and section");
            }
            let mut from = Place::ZERO;
            for (index, item) in items.into_iter().enumerate() {
                match self.segment(item, index, from) {
                    Some(to) => from = to,
                    None => self.length_known = false,
                }
            }
            self.end = from;
        }
        self.length_known &= given.is_some() && !self.member.segments.is_empty();
        if !self.length_known {
            self.end = FAR;
        }
    }

    /// Reads one segment; its right end, or `None` where its length could not be read.
    fn segment(&mut self, item: Value<'_>, index: usize, from: Place) -> Option<Place> {
        let row = self.reader.row(item, format!("segment {}", index + 1))?;
        self.reader.known(&row, &["length", "section", "taper", "source", "confirm"]);
        let part = Part::Segment(self.member.segments.len());
        self.declare(&row, part, format!("segment {}", index + 1));
        let section = self.reader.required(&row, "section");
        let section = section.and_then(|value| self.reader.called(value, "section", &self.sections));
        let taper = row.table.get("taper").and_then(|value| self.taper(value, section, index));
        let value = self.reader.required(&row, "length")?;
        let (size, length) = self.reader.metres(value, "length")?;
        if size <= Place::ZERO {
            self.reader.fault(value.span(), "a segment must have a length greater than zero", "");
            return None;
        }
        if !(1e-9..=1e6).contains(&size.x()) {
            let hint = "a segment is from 1e-9 m to 1e6 m long";
            self.reader.fault(value.span(), "this length is beyond what can be computed", hint);
            return None;
        }
        let Some(end) = from.exact().plus(size.exact()) else {
            self.reader.fault(value.span(), "the length has too many digits", "");
            return None;
        };
        let to = Place::metres(end.trimmed());
        // A section that is not known is none; its fault has been reported.
        let section = section.unwrap_or(usize::MAX);
        self.member.segments.push(Segment { length, from, to, section, taper });
        Some(to)
    }

    fn taper(&mut self, value: Value<'_>, section: Option<usize>, index: usize) -> Option<Taper> {
        let row = self.reader.row(value, format!("the taper of segment {}", index + 1))?;
        self.reader.known(&row, &["to", "law"]);
        let to = self.reader.required(&row, "to");
        let to = to.and_then(|value| self.reader.called(value, "to", &self.sections));
        let words = [("cubic", TaperLaw::Cubic), ("linear", TaperLaw::Linear)];
        let law = self.reader.required(&row, "law").and_then(|value| self.reader.word(value, "law", &words));
        let (to, law, from) = (to?, law?, section?);
        if to == from {
            let hint = "leave the taper out, or name the section at the other end";
            self.reader.warn(value.span(), "this taper ends in the section it begins with", hint);
        }
        let sections = &self.member.sections;
        let (left, right) = (sections.get(from)?, sections.get(to)?);
        let faults = mismatches(left, right);
        for (what, message, hint) in faults {
            if !self.unsure.contains(&(from, what)) && !self.unsure.contains(&(to, what)) {
                self.reader.fault(value.span(), message, hint);
            }
        }
        Some(Taper { to, law })
    }
}

/// In what the sections of a taper must agree but do not: the key, the fault, its mend.
fn mismatches(left: &Section, right: &Section) -> Vec<(&'static str, String, &'static str)> {
    let names = format!("{} and {}", left.name, right.name);
    let mut found = Vec::new();
    let material = "a taper changes I, weight, depth and shear area, not the material";
    if left.modulus.value != right.modulus.value {
        found.push(("E", format!("the sections {names} of a taper differ in E"), material));
    }
    let alpha = |section: &Section| section.expansion.as_ref().map(|given| given.value);
    if alpha(left) != alpha(right) {
        found.push(("alpha", format!("the sections {names} of a taper differ in alpha"), material));
    }
    if left.shear.is_some() != right.shear.is_some() {
        let message = format!("only one of the sections {names} gives G and shear_area");
        found.push(("G", message, "give both or neither"));
    }
    if left.weight.is_some() != right.weight.is_some() {
        found.push(("weight", format!("only one of the sections {names} gives a weight"), "give both or neither"));
    }
    found
}
