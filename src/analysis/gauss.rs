//! Gauss-Legendre quadrature of fixed tables.
//!
//! Abscissae are the roots of the Legendre polynomials, weights 2 / ((1 - x²) P'(x)²): computed to 40 digits for this table
//! (the values agree with Abramowitz & Stegun, *Handbook of Mathematical Functions*, Table 25.4, from memory). Only the
//! positive half is kept; a rule is symmetric.

/// One half of a rule on [-1, 1]: abscissa and weight, from the outermost inwards.
type Half = &'static [(f64, f64)];

/// Rules by number of points, all even.
const RULES: [(usize, Half); 7] = [
    (4, &[(0.8611363115940526, 0.34785484513745385), (0.33998104358485626, 0.6521451548625461)]),
    (
        6,
        &[
            (0.932469514203152, 0.17132449237917036),
            (0.6612093864662645, 0.3607615730481386),
            (0.2386191860831969, 0.46791393457269104),
        ],
    ),
    (
        8,
        &[
            (0.9602898564975362, 0.10122853629037626),
            (0.7966664774136267, 0.22238103445337448),
            (0.525532409916329, 0.31370664587788727),
            (0.1834346424956498, 0.362683783378362),
        ],
    ),
    (
        10,
        &[
            (0.9739065285171717, 0.06667134430868814),
            (0.8650633666889845, 0.1494513491505806),
            (0.6794095682990244, 0.21908636251598204),
            (0.4333953941292472, 0.26926671930999635),
            (0.14887433898163122, 0.29552422471475287),
        ],
    ),
    (
        12,
        &[
            (0.9815606342467192, 0.04717533638651183),
            (0.9041172563704749, 0.10693932599531843),
            (0.7699026741943047, 0.16007832854334622),
            (0.5873179542866175, 0.20316742672306592),
            (0.3678314989981802, 0.2334925365383548),
            (0.1252334085114689, 0.24914704581340277),
        ],
    ),
    (
        16,
        &[
            (0.9894009349916499, 0.027152459411754093),
            (0.9445750230732326, 0.062253523938647894),
            (0.8656312023878318, 0.09515851168249279),
            (0.755404408355003, 0.12462897125553388),
            (0.6178762444026438, 0.14959598881657674),
            (0.45801677765722737, 0.16915651939500254),
            (0.2816035507792589, 0.18260341504492358),
            (0.09501250983763744, 0.1894506104550685),
        ],
    ),
    (
        20,
        &[
            (0.9931285991850949, 0.017614007139152118),
            (0.9639719272779138, 0.04060142980038694),
            (0.912234428251326, 0.06267204833410907),
            (0.8391169718222188, 0.08327674157670475),
            (0.7463319064601508, 0.10193011981724044),
            (0.636053680726515, 0.11819453196151841),
            (0.5108670019508271, 0.13168863844917664),
            (0.37370608871541955, 0.14209610931838204),
            (0.22778585114164507, 0.14917298647260374),
            (0.07652652113349734, 0.15275338713072584),
        ],
    ),
];

/// One sample of a rule: where, and with which weight.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Sample {
    /// Fraction of the panel from its left end, between 0 and 1.
    pub fraction: f64,
    /// Weight as a fraction of the panel; the weights of a panel add up to 1.
    pub weight: f64,
}

/// A panel of an interval and how many points it takes.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Panel {
    /// Left end.
    pub from: f64,
    /// Length.
    pub length: f64,
    /// Points.
    pub points: usize,
}

/// The samples of the rule with `points` points; none for a number that has no table.
pub fn samples(points: usize) -> Vec<Sample> {
    let half = RULES.iter().find(|(count, _)| *count == points).map_or(&[] as Half, |(_, half)| half);
    let left = half.iter().map(|(x, w)| Sample { fraction: (1.0 - x) / 2.0, weight: w / 2.0 });
    let right = half.iter().rev().map(|(x, w)| Sample { fraction: (1.0 + x) / 2.0, weight: w / 2.0 });
    left.chain(right).collect()
}

/// Panels over the interval from `a` to `b` on which a rational function with its pole where `driver` (linear over the
/// interval, with these two positive end values) vanishes is integrated to some 13 digits.
///
/// The error of n points falls as rho^(-2n), rho being the sum of the half axes of the largest ellipse about the panel that
/// holds no pole (Davis & Rabinowitz, *Methods of Numerical Integration*, section 4.6, from memory); a margin covers poles
/// of the third order. Not guaranteed for integrands with another singularity.
pub fn panels(a: f64, b: f64, driver: impl Fn(f64) -> f64) -> Vec<Panel> {
    let mut done = Vec::new();
    let mut open = vec![(a, b, 0)];
    while let Some((from, to, depth)) = open.pop() {
        match points_for(driver(from), driver(to)) {
            Some(points) => done.push(Panel { from, length: to - from, points }),
            None if depth == 40 => done.push(Panel { from, length: to - from, points: 20 }),
            None => {
                let middle = from + (to - from) / 2.0;
                open.push((middle, to, depth + 1));
                open.push((from, middle, depth + 1));
            }
        }
    }
    done
}

fn points_for(left: f64, right: f64) -> Option<usize> {
    let (small, large) = if left < right { (left, right) } else { (right, left) };
    if large - small < 1e-9 * large {
        return Some(4);
    }
    let z = (large + small) / (large - small);
    let rho = z + (z * z - 1.0).sqrt();
    RULES.iter().map(|(points, _)| *points).find(|points| {
        let n = *points as f64;
        2.0 * n * libm::log10(rho) >= 13.0 + 2.0 * libm::log10(2.0 * n)
    })
}

#[cfg(test)]
mod tests {
    use super::{panels, samples};

    #[test]
    fn a_rule_of_n_points_is_exact_to_degree_2n_minus_1() {
        for points in [4, 6, 8, 10, 12, 16, 20] {
            for degree in 0..2 * points as i32 {
                let sum: f64 =
                    samples(points).iter().map(|s| s.weight * libm::pow(s.fraction, f64::from(degree))).sum();
                assert!((sum - 1.0 / f64::from(degree + 1)).abs() < 4e-16 * 20.0, "{points} points, degree {degree}");
            }
        }
    }

    #[test]
    fn panels_integrate_a_cubed_pole_to_twelve_digits() {
        for ratio in [1.0_f64, 1.2, 2.0, 5.0, 50.0] {
            let height = |x: f64| 1.0 + (ratio - 1.0) * x;
            let sum: f64 = panels(0.0, 1.0, height)
                .iter()
                .flat_map(|p| {
                    samples(p.points).into_iter().map(|s| (p.length * s.weight, p.from + p.length * s.fraction))
                })
                .map(|(weight, x)| weight / (height(x) * height(x) * height(x)))
                .sum();
            let exact = (1.0 + 1.0 / ratio) / (2.0 * ratio);
            assert!((sum / exact - 1.0).abs() < 1e-12, "ratio {ratio}: {sum} against {exact}");
        }
    }
}
