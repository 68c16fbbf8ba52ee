//! Redundants from what the released member leaves open.

use super::cases::Flexibilities;
use super::{Narrator, finding};
use crate::analysis::equilibrium as sums;
use crate::member::Redundant;
use crate::working::draft::{Likes, Symbol};
use crate::working::trace::Traced;

const BACK: &str = "Back substitution, from the last redundant to the first.";

impl Narrator<'_> {
    pub fn solve(
        &mut self,
        redundants: &[Redundant],
        gaps: &[Traced],
        flexibility: &Flexibilities,
        values: &[f64],
        reduced: &[f64],
    ) -> Vec<Traced> {
        let f = |i: usize, j: usize| {
            flexibility.entries.get(i).and_then(|row| row.get(j)).cloned().unwrap_or_else(Traced::zero)
        };
        match (gaps, &flexibility.determinant) {
            ([gap], _) => vec![self.redundant(redundants, 0, values, sums::single(gap.clone(), f(0, 0)))],
            ([d1, d2], Some(determinant)) => {
                let first = sums::cramer_first(d1.clone(), d2.clone(), f(0, 1), f(1, 1), determinant.clone());
                let second = sums::cramer_second(d1.clone(), d2.clone(), f(0, 0), f(1, 0), determinant.clone());
                vec![self.redundant(redundants, 0, values, first), self.redundant(redundants, 1, values, second)]
            }
            _ => self.substitute(redundants, gaps, flexibility, values, reduced),
        }
    }

    fn redundant(&mut self, redundants: &[Redundant], index: usize, values: &[f64], expression: Traced) -> Traced {
        let Some(redundant) = redundants.get(index) else { return Traced::zero() };
        let value = values.get(index).copied().unwrap_or_default();
        let scale = self.plain();
        let units = if matches!(redundant, Redundant::Force(_)) { scale.shear } else { scale.moment };
        let words = self.redundant_words(*redundant);
        let what = finding(format!("redundant: {words}"), self.redundant_symbol(*redundant), units, value);
        self.builder.state(what.bold().last().basis("compatibility"), Some(expression))
    }

    fn substitute(
        &mut self,
        redundants: &[Redundant],
        gaps: &[Traced],
        flexibility: &Flexibilities,
        values: &[f64],
        reduced: &[f64],
    ) -> Vec<Traced> {
        let count = gaps.len();
        let u = |i: usize, j: usize| {
            flexibility.upper.get(i).and_then(|row| row.get(j)).cloned().unwrap_or_else(Traced::zero)
        };
        let scale = self.plain();
        let mut y: Vec<Traced> = Vec::with_capacity(count);
        self.builder.block("Right-hand sides, eliminated like the flexibilities.");
        for (j, gap) in gaps.iter().enumerate() {
            let rows = (0..j).map(|k| (u(k, j), y.get(k).cloned().unwrap_or_else(Traced::zero), u(k, k)));
            let rows: Vec<_> = rows.filter(|(left, right, _)| !left.is_zero() && !right.is_zero()).collect();
            let name = self.named(redundants, j);
            let force = redundants.get(j).is_some_and(|redundant| matches!(redundant, Redundant::Force(_)));
            let units = if force { scale.v.clone() } else { scale.psi.clone() };
            let what = finding(
                format!("right-hand side {name} after elimination"),
                Symbol::new("y", name),
                units,
                reduced.get(j).copied().unwrap_or_default(),
            );
            let step = self.builder.find(what, sums::eliminated(gap.clone(), rows));
            y.push(step);
        }
        let mut x = vec![Traced::zero(); count];
        for i in (0..count).rev() {
            let likes = Likes {
                key: "back".to_owned(),
                head: (self.named(redundants, i), String::new()),
                fewest: 3,
                sentence: format!("{BACK} Symbols are those of the first column."),
            };
            self.builder.block_like(BACK, likes);
            let known: Vec<(Traced, Traced)> = (i + 1..count)
                .map(|j| (u(i, j), x.get(j).cloned().unwrap_or_else(Traced::zero)))
                .filter(|(entry, x)| !entry.is_zero() && !x.is_zero())
                .collect();
            let expression = sums::back_substituted(y.get(i).cloned().unwrap_or_else(Traced::zero), known, u(i, i));
            let step = self.redundant(redundants, i, values, expression);
            if let Some(slot) = x.get_mut(i) {
                *slot = step;
            }
        }
        x
    }
}
