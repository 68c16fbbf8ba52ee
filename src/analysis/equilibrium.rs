//! Equilibrium, compatibility and superposition: the sums and quotients of the method, each formula once.
//!
//! Forces are positive downward, couples clockwise, reactions upward, reaction moments counter-clockwise, bending moments
//! sagging, V = dM/dx.

use crate::number::Number;

fn n<N: Number>(whole: i64) -> N {
    N::whole(whole)
}

/// Moment of a uniform load `w` over the length `c` that begins at the distance `d`: w c (d + c/2).
pub fn uniform_moment<N: Number>(w: N, d: N, c: N) -> N {
    w * c.clone() * (d + c / n::<N>(2))
}

/// Resultant of a load from `w0` to `w1` over the length `c`: (w0 + w1) c / 2.
pub fn linear_resultant<N: Number>(w0: N, w1: N, c: N) -> N {
    (w0 + w1) * c / n::<N>(2)
}

/// Moment of a load from `w0` to `w1` over the length `c` that begins at the distance `d`:
/// c [w0 (3d + c) + w1 (3d + 2c)] / 6.
pub fn linear_moment<N: Number>(w0: N, w1: N, d: N, c: N) -> N {
    let three_d = n::<N>(3) * d;
    c.clone() * (w0 * (three_d.clone() + c.clone()) + w1 * (three_d + n::<N>(2) * c)) / n::<N>(6)
}

/// Intensity at the distance `s` along a load that runs from `w0` to `w1` over the length `c`.
pub fn intensity_at<N: Number>(w0: N, w1: N, c: N, s: N) -> N {
    w0.clone() + (w1 - w0) * s / c
}

/// The sum of all terms; zero for none.
pub fn sum<N: Number>(terms: impl IntoIterator<Item = N>) -> N {
    terms.into_iter().reduce(|total, term| total + term).unwrap_or_else(|| N::whole(0))
}

/// Factors times terms, summed.
pub fn weighted<N: Number>(pairs: impl IntoIterator<Item = (N, N)>) -> N {
    sum(pairs.into_iter().map(|(factor, term)| factor * term))
}

/// The force that balances the moment `moment` about a point at the distance `arm`.
pub fn balancing_force<N: Number>(moment: N, arm: N) -> N {
    moment / arm
}

/// Value carried to the next cut: shift of the wall, turn of the wall times length, own bending.
pub fn chained_v<N: Number>(v: N, psi: N, l: N, own: N) -> N {
    v + psi * l + own
}

/// Turn carried to the next cut: turn of the wall and own bending.
pub fn chained_psi<N: Number>(psi: N, own: N) -> N {
    psi + own
}

/// Turn of a part's start from the deflections it must have at two places: ((v2 - t2) - (v1 - t1)) / l.
pub fn start_turn<N: Number>(v1: N, t1: N, v2: N, t2: N, l: N) -> N {
    ((v2 - t2) - (v1 - t1)) / l
}

/// Deflection of a part's start from the deflection `v1` at the distance `d`: v1 - t1 - psi d.
pub fn start_deflection<N: Number>(v1: N, t1: N, psi: N, d: N) -> N {
    v1 - t1 - psi * d
}

/// Movement of a support: what is imposed on it (or on its spring's foot) and the give of its spring.
pub fn yielded<N: Number>(imposed: N, reaction: N, stiffness: N) -> N {
    imposed + reaction / stiffness
}

/// One redundant: X = d / f.
pub fn single<N: Number>(d: N, f: N) -> N {
    d / f
}

/// Determinant of two equations: f11 f22 - f12 f21.
pub fn determinant<N: Number>(f11: N, f12: N, f21: N, f22: N) -> N {
    f11 * f22 - f12 * f21
}

/// Cramer's rule, first of two: (d1 f22 - f12 d2) / D.
pub fn cramer_first<N: Number>(d1: N, d2: N, f12: N, f22: N, determinant: N) -> N {
    (d1 * f22 - f12 * d2) / determinant
}

/// Cramer's rule, second of two: (f11 d2 - d1 f21) / D.
pub fn cramer_second<N: Number>(d1: N, d2: N, f11: N, f21: N, determinant: N) -> N {
    (f11 * d2 - d1 * f21) / determinant
}

/// One entry after elimination: a - sum of u_ki u_kj / u_kk over the rows k already eliminated.
pub fn eliminated<N: Number>(entry: N, rows: impl IntoIterator<Item = (N, N, N)>) -> N {
    rows.into_iter().fold(entry, |rest, (left, right, pivot)| rest - left * right / pivot)
}

/// Back substitution: (y - sum of u_ij X_j) / u_ii.
pub fn back_substituted<N: Number>(y: N, known: impl IntoIterator<Item = (N, N)>, pivot: N) -> N {
    known.into_iter().fold(y, |rest, (entry, x)| rest - entry * x) / pivot
}

/// Height of the chord at the distance `s` from its left end: vl + (vr - vl) s / l.
pub fn chord_at<N: Number>(left: N, right: N, s: N, l: N) -> N {
    left.clone() + (right - left) * s / l
}

/// Deflection from the chord.
pub fn from_chord<N: Number>(v: N, chord: N) -> N {
    v - chord
}

/// Reference length over ratio.
pub fn allowable<N: Number>(length: N, ratio: N) -> N {
    length / ratio
}

/// Demand over what is allowed, both directions counted.
pub fn utilisation<N: Number>(found: N, allowed: N) -> N {
    found.magnitude() / allowed
}

/// Moment of a uniform load `w` over the length `c` that begins at the point itself: w c² / 2.
pub fn uniform_from_end<N: Number>(w: N, c: N) -> N {
    w * c.power(2) / n::<N>(2)
}
