//! Roots of polynomials of low degree on an interval.

/// A polynomial by its coefficients, the constant first.
#[derive(Clone, Debug, PartialEq)]
pub struct Poly(pub Vec<f64>);

impl Poly {
    /// Its value, by Horner's scheme.
    pub fn at(&self, x: f64) -> f64 {
        self.0.iter().rev().fold(0.0, |sum, coefficient| sum * x + coefficient)
    }

    /// Its derivative.
    pub fn derivative(&self) -> Self {
        Self(self.0.iter().enumerate().skip(1).map(|(power, coefficient)| power as f64 * coefficient).collect())
    }

    /// Its integral, zero at zero.
    pub fn integral(&self) -> Self {
        let terms = self.0.iter().enumerate().map(|(power, coefficient)| coefficient / (power as f64 + 1.0));
        Self([0.0].into_iter().chain(terms).collect())
    }

    /// Product.
    pub fn times(&self, other: &Self) -> Self {
        let mut product = vec![0.0; (self.0.len() + other.0.len()).saturating_sub(1)];
        for (i, left) in self.0.iter().enumerate() {
            for (slot, right) in product.iter_mut().skip(i).zip(&other.0) {
                *slot += left * right;
            }
        }
        Self(product)
    }

    /// Sum.
    pub fn plus(&self, other: &Self) -> Self {
        let count = self.0.len().max(other.0.len());
        let at = |poly: &Self, index: usize| poly.0.get(index).copied().unwrap_or_default();
        Self((0..count).map(|index| at(self, index) + at(other, index)).collect())
    }

    /// Places strictly between 0 and `l` where it changes sign, from left to right.
    ///
    /// Between neighbouring roots of its derivative a polynomial is monotone; each such stretch is bracketed and bisected
    /// to the last bit. Roots without a change of sign are left out: nothing is greatest there.
    pub fn crossings(&self, l: f64) -> Vec<f64> {
        if self.0.iter().skip(1).all(|coefficient| *coefficient == 0.0) {
            return Vec::new();
        }
        let turning = self.derivative().crossings(l);
        let ends: Vec<f64> = [0.0].into_iter().chain(turning).chain([l]).collect();
        let stretches = ends.iter().zip(ends.iter().skip(1));
        stretches.filter_map(|(from, to)| bisect(*from, *to, |x| self.at(x))).filter(|x| *x > 0.0 && *x < l).collect()
    }
}

/// The place between `from` and `to` where a monotone function changes sign; `None` where it does not.
pub fn bisect(from: f64, to: f64, value: impl Fn(f64) -> f64) -> Option<f64> {
    let (mut low, mut high) = (from, to);
    let (at_low, at_high) = (value(low), value(high));
    if at_low == 0.0 || at_high == 0.0 {
        return if at_low == 0.0 { Some(low) } else { Some(high) };
    }
    if (at_low > 0.0) == (at_high > 0.0) {
        return None;
    }
    for _ in 0..200 {
        let middle = low + (high - low) / 2.0;
        if middle <= low || middle >= high {
            break;
        }
        if (value(middle) > 0.0) == (at_low > 0.0) {
            low = middle;
        } else {
            high = middle;
        }
    }
    Some(low + (high - low) / 2.0)
}

#[cfg(test)]
mod tests {
    use super::Poly;

    #[test]
    fn crossings_are_found_between_turning_points() {
        // (x - 1)(x - 2)(x - 3)
        let roots = Poly(vec![-6.0, 11.0, -6.0, 1.0]).crossings(4.0);
        assert_eq!(roots.len(), 3);
        for (root, exact) in roots.iter().zip([1.0, 2.0, 3.0]) {
            assert!((root - exact).abs() < 1e-14);
        }
        assert!(Poly(vec![1.0, 0.0, 1.0]).crossings(4.0).is_empty());
        assert!(Poly(vec![5.0]).crossings(1.0).is_empty());
    }
}
