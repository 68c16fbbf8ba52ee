//! Other routes to the same numbers.
//!
//! Nothing is shared with `analysis` but the member: equilibrium from loads and reactions alone, and a stiffness solution
//! whose unknowns stand only at supports, hinges and ends (an unknown at every cut would lose every digit on tiny
//! segments). Figures come in as plain numbers, findings go out as data.

mod band;
mod element;
mod equilibrium;
mod stiffness;
mod twofold;

pub use equilibrium::residual;
pub use stiffness::{Nodes, solve};

/// A figure by both routes.
#[derive(Clone, Debug, PartialEq)]
pub struct Row {
    /// What it is.
    pub what: String,
    /// By the first route.
    pub first: f64,
    /// By the second.
    pub second: f64,
    /// Their difference, relative to the greatest figure of the same quantity and case.
    pub difference: f64,
}

/// Rows from figures of one quantity and one case: `(what, first, second)`.
pub fn compare(figures: &[(String, f64, f64)]) -> Vec<Row> {
    let scale = figures.iter().map(|(_, first, second)| first.abs().max(second.abs())).fold(0.0, f64::max);
    let row = |(what, first, second): &(String, f64, f64)| Row {
        what: what.clone(),
        first: *first,
        second: *second,
        difference: if scale == 0.0 { 0.0 } else { (first - second).abs() / scale },
    };
    figures.iter().map(row).collect()
}

/// The largest difference of some rows; infinite where one is not a number.
pub fn largest(rows: &[Row]) -> f64 {
    rows.iter().fold(0.0, |largest, row| {
        if row.difference <= largest {
            largest
        } else if row.difference.is_nan() {
            f64::INFINITY
        } else {
            row.difference
        }
    })
}

#[cfg(test)]
mod tests {
    use super::{compare, largest};

    #[test]
    fn a_perturbed_figure_is_seen() {
        let same = compare(&[("a".into(), 10.0, 10.0), ("b".into(), 1e-9, 0.0)]);
        assert!(largest(&same) < 1e-9);
        let off = compare(&[("a".into(), 10.0, 10.0001), ("b".into(), 1.0, 1.0)]);
        assert!(largest(&off) > 9e-6);
        assert!(largest(&compare(&[("a".into(), f64::NAN, 1.0)])).is_infinite());
    }
}
