//! A symmetric system with a skyline, eliminated without pivoting.
//!
//! Flexibility matrices are symmetric and positive definite, so elimination in the given order is stable (Golub & Van Loan,
//! *Matrix Computations*, section 4.2, from memory). Row i keeps the entries from its first one that is not zero to the
//! diagonal; the cost grows linearly for banded systems. Not guaranteed for indefinite matrices: a pivot that is not
//! positive is reported.

use super::equilibrium as sums;

/// Lower triangle of a symmetric matrix, row by row from the first entry that is not zero.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Skyline {
    rows: Vec<(usize, Vec<f64>)>,
}

/// The eliminated system: `u_ij` for j >= i, kept by columns.
#[derive(Clone, Debug, PartialEq)]
pub struct Eliminated {
    upper: Skyline,
}

impl Skyline {
    /// Adds the next row: entries up to and including the diagonal, the last `row.len()` columns.
    pub fn push(&mut self, row: Vec<f64>) {
        let index = self.rows.len();
        self.rows.push(((index + 1).saturating_sub(row.len()), row));
    }

    /// Number of unknowns.
    pub fn len(&self) -> usize {
        self.rows.len()
    }

    /// Whether there are no unknowns.
    pub fn is_empty(&self) -> bool {
        self.rows.is_empty()
    }

    /// The entry in row i and column j, either triangle.
    pub fn get(&self, i: usize, j: usize) -> f64 {
        let (row, column) = if i > j { (i, j) } else { (j, i) };
        self.rows.get(row).and_then(|(first, row)| row.get(column.checked_sub(*first)?)).copied().unwrap_or_default()
    }

    /// The first column of row i that is not zero.
    pub fn first(&self, i: usize) -> usize {
        self.rows.get(i).map_or(i, |(first, _)| *first)
    }

    /// Eliminates in the given order. `None` where a pivot is not positive.
    pub fn eliminate(&self) -> Option<Eliminated> {
        let mut upper = Skyline::default();
        for j in 0..self.len() {
            let first = self.first(j);
            let mut column: Vec<f64> = Vec::with_capacity(j + 1 - first);
            for i in first..=j {
                let start = if i == j { first } else { first.max(upper.first(i)) };
                let rows = (start..i).map(|k| {
                    let right = column.get(k - first).copied().unwrap_or_default();
                    let left = if i == j { right } else { upper.get(i, k) };
                    (left, right, upper.get(k, k))
                });
                column.push(sums::eliminated(self.get(i, j), rows));
            }
            if !column.last().is_some_and(|pivot| *pivot > 0.0) {
                return None;
            }
            upper.push(column);
        }
        Some(Eliminated { upper })
    }
}

impl Eliminated {
    /// The entry u_ij, j >= i.
    pub fn get(&self, i: usize, j: usize) -> f64 {
        self.upper.get(i, j)
    }

    /// The first row that reaches column j.
    pub fn first(&self, j: usize) -> usize {
        self.upper.first(j)
    }

    /// Right-hand side after elimination.
    pub fn forward(&self, d: &[f64]) -> Vec<f64> {
        let mut y: Vec<f64> = Vec::with_capacity(d.len());
        for (j, d) in d.iter().enumerate() {
            let rows =
                (self.first(j)..j).map(|k| (self.get(k, j), y.get(k).copied().unwrap_or_default(), self.get(k, k)));
            let next = sums::eliminated(*d, rows);
            y.push(next);
        }
        y
    }

    /// Back substitution from a right-hand side after elimination.
    pub fn back(&self, y: &[f64]) -> Vec<f64> {
        let count = y.len();
        // The furthest column that row i reaches.
        let mut reach: Vec<usize> = (0..count).collect();
        for j in 0..count {
            for i in self.first(j)..j {
                if let Some(reach) = reach.get_mut(i) {
                    *reach = j;
                }
            }
        }
        let mut x = vec![0.0; count];
        for i in (0..count).rev() {
            let last = reach.get(i).copied().unwrap_or(i);
            let known = (i + 1..=last).map(|j| (self.get(i, j), x.get(j).copied().unwrap_or_default()));
            let value = sums::back_substituted(y.get(i).copied().unwrap_or_default(), known, self.get(i, i));
            if let Some(slot) = x.get_mut(i) {
                *slot = value;
            }
        }
        x
    }
}

#[cfg(test)]
mod tests {
    use super::Skyline;

    #[test]
    fn a_banded_system_is_solved() {
        // 4 -1 0 0; -1 4 -1 0; ... with the solution 1, 2, 3, 4.
        let mut matrix = Skyline::default();
        for row in [vec![4.0], vec![-1.0, 4.0], vec![-1.0, 4.0], vec![-1.0, 4.0]] {
            matrix.push(row);
        }
        let eliminated = matrix.eliminate().expect("positive definite");
        let x = eliminated.back(&eliminated.forward(&[2.0, 4.0, 6.0, 13.0]));
        for (found, exact) in x.iter().zip([1.0, 2.0, 3.0, 4.0]) {
            assert!((found - exact).abs() < 1e-14);
        }
    }

    #[test]
    fn an_indefinite_matrix_is_refused() {
        let mut matrix = Skyline::default();
        matrix.push(vec![1.0]);
        matrix.push(vec![2.0, 1.0]);
        assert!(matrix.eliminate().is_none());
    }
}
