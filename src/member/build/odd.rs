//! What is lawful but odd.

use super::Build;
use crate::deck::Row;
use crate::member::{LoadKind, System};
use crate::quantity::{Area, Decimal, Given, Length, SecondMoment, Stress};

impl Build<'_> {
    /// Figures of a section that are likely a wrong unit or a lost digit.
    pub(super) fn odd_section(
        &mut self,
        row: &Row<'_>,
        modulus: Option<&Given<Stress>>,
        second_moment: Option<&Given<SecondMoment>>,
        area: Option<&Given<Area>>,
        depth: Option<&Given<Length>>,
    ) {
        if let (Some(e), Some(value)) = (modulus, row.table.get("E"))
            && !(1e9..=1e12).contains(&e.value.si())
        {
            let message = format!("E of {} lies outside 1 GPa to 1000 GPa", row.path);
            self.reader.warn(value.span(), message, "steel has about 210 GPa, timber 11 GPa: mind the unit");
        }
        let (Some(i), Some(depth), Some(value)) = (second_moment, depth, row.table.get("I")) else { return };
        let (i, depth) = (i.value.si(), depth.value.si());
        let (unit, size) = match self.member.title.system {
            System::Si => ("mm", 1e-3),
            System::Us => ("in", 0.0254),
        };
        let small = |metres: f64| Decimal::nearest(metres / size, 3).trimmed();
        if let Some(area) = area {
            let gyration = (i / area.value.si()).sqrt();
            // No part of a section lies farther than its depth from the axis: sqrt(I/A) is at most half of the depth. A
            // solid rectangle has 0.29 of it.
            if gyration > depth * 0.5 * (1.0 + 1e-9) || gyration < depth * 0.05 {
                let (r, d) = (small(gyration), small(depth));
                let message = format!(
                    "I of {} does not suit its A and depth: sqrt(I/A) = {r} {unit}, depth {d} {unit}",
                    row.path
                );
                let hint = "sqrt(I/A) of a section is about 0.3 to 0.45 of its depth: mind the units";
                self.reader.warn(value.span(), message, hint);
            }
        } else if i > depth * depth * depth * depth * 100.0 {
            // Wider than a hundred times its depth, even as a solid rectangle twelve times so.
            let message = format!("I of {} is great for a depth of {} {unit}", row.path, small(depth));
            self.reader.warn(value.span(), message, "mind the units");
        }
    }

    /// Findings about the deck as a whole.
    pub(super) fn oddities(&mut self) {
        let mut odd = Vec::new();
        let member = &self.member;
        for (index, case) in member.cases.iter().enumerate() {
            let used = member.combinations.iter().any(|c| c.factors.get(index).is_some_and(|f| f.value != 0.0));
            // A factor of zero that is written out has been spoken of.
            if !used && !self.zeroed.contains(&index) {
                let message = format!("no combination uses case {}", case.name);
                odd.push((self.cases.span(&case.name), message, "give it a factor, or take it out"));
            }
        }
        let mut used = vec![false; member.sections.len()];
        for segment in &member.segments {
            for index in [Some(segment.section), segment.taper.map(|taper| taper.to)].into_iter().flatten() {
                used.get_mut(index).into_iter().for_each(|slot| *slot = true);
            }
        }
        for (section, _) in member.sections.iter().zip(&used).filter(|(_, used)| !**used) {
            let message = format!("no segment uses section {}", section.name);
            odd.push((self.sections.span(&section.name), message, "take it out, or name it in a segment"));
        }
        let weighs: Vec<bool> =
            member.cases.iter().map(|case| case.loads.iter().any(|load| load.kind == LoadKind::SelfWeight)).collect();
        if let Some(first) = member.cases.first().filter(|_| !weighs.contains(&true)) {
            let hint = "add { kind = \"self_weight\" } to a case, unless its weight is in another load";
            odd.push((self.cases.span(&first.name), "the member carries no self-weight".to_owned(), hint));
        }
        for combination in &member.combinations {
            let counted = member.cases.iter().zip(&weighs).zip(&combination.factors);
            let names: Vec<&str> = counted
                .filter(|((_, weighs), factor)| **weighs && factor.value != 0.0)
                .map(|((case, _), _)| case.name.as_str())
                .collect();
            if names.len() > 1 {
                let message =
                    format!("combination {} counts the self-weight in each of {}", combination.name, names.join(", "));
                odd.push((self.combinations.span(&combination.name), message, "one case of it is enough"));
            }
        }
        if let Some(first) = member.combinations.first().filter(|_| member.limits.is_empty()) {
            let message = "the deck sets no limit, so that no deflection is checked".to_owned();
            let hint = "add a table [limit.NAME] with ratio and basis";
            odd.push((self.combinations.span(&first.name), message, hint));
        }
        for (span, message, hint) in odd {
            self.reader.warn(span.unwrap_or(self.whole.clone()), message, hint);
        }
    }
}
