//! A symmetric band, solved by LDL^T for many right-hand sides.

use super::twofold::Twofold;

/// Half the bandwidth, the diagonal not counted: three unknowns a node, neighbours coupled.
const HALF: usize = 5;

/// The lower band of a symmetric matrix, row by row: entry k of row i is the column i - k.
#[derive(Clone, Debug)]
pub(super) struct Band {
    rows: Vec<[Twofold; HALF + 1]>,
}

impl Band {
    pub(super) fn new(size: usize) -> Self {
        Self { rows: vec![[Twofold::ZERO; HALF + 1]; size] }
    }

    fn get(&self, i: usize, k: usize) -> Twofold {
        self.rows.get(i).and_then(|row| row.get(k)).copied().unwrap_or_default()
    }

    pub(super) fn add(&mut self, i: usize, j: usize, value: Twofold) {
        let (row, back) = if i >= j { (i, i - j) } else { return };
        if let Some(slot) = self.rows.get_mut(row).and_then(|row| row.get_mut(back)) {
            *slot += value;
        }
    }

    /// Factors in place: the diagonal becomes D, the rest L.
    pub(super) fn factor(&mut self) {
        for i in 0..self.rows.len() {
            for back in (0..=HALF.min(i)).rev() {
                let j = i - back;
                let mut sum = self.get(i, back);
                for m in back + 1..=HALF.min(i) {
                    let column = i - m;
                    if j - column <= HALF {
                        sum -= self.get(i, m) * self.get(j, j - column) * self.get(column, 0);
                    }
                }
                let value = if back == 0 { sum } else { sum / self.get(j, 0) };
                if let Some(slot) = self.rows.get_mut(i).and_then(|row| row.get_mut(back)) {
                    *slot = value;
                }
            }
        }
    }

    /// Solves with a factored band.
    pub(super) fn solve(&self, mut b: Vec<Twofold>) -> Vec<Twofold> {
        let size = self.rows.len();
        let at = |list: &[Twofold], index: usize| list.get(index).copied().unwrap_or_default();
        for i in 0..size {
            let known: Twofold = (1..=HALF.min(i)).map(|back| self.get(i, back) * at(&b, i - back)).sum();
            if let Some(slot) = b.get_mut(i) {
                *slot -= known;
            }
        }
        for (i, slot) in b.iter_mut().enumerate() {
            *slot = *slot / self.get(i, 0);
        }
        for i in (0..size).rev() {
            let known: Twofold = (1..=HALF)
                .filter(|ahead| i + ahead < size)
                .map(|ahead| self.get(i + ahead, ahead) * at(&b, i + ahead))
                .sum();
            if let Some(slot) = b.get_mut(i) {
                *slot -= known;
            }
        }
        b
    }
}

#[cfg(test)]
mod tests {
    use super::{Band, Twofold};

    #[test]
    fn a_band_is_solved() {
        let mut band = Band::new(4);
        for i in 0..4 {
            band.add(i, i, Twofold::from(4.0));
            if i > 0 {
                band.add(i, i - 1, Twofold::from(-1.0));
            }
        }
        band.factor();
        let x = band.solve([2.0, 4.0, 6.0, 13.0].map(Twofold::from).to_vec());
        for (found, exact) in x.iter().zip([1.0, 2.0, 3.0, 4.0]) {
            assert!((found.single() - exact).abs() < 1e-14);
        }
    }
}
