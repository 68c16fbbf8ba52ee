//! Tabulated cases of the cantilever, each formula once.
//!
//! A piece of constant section is held by a wall at its left end; its tip is at the distance `l`. Deflections are positive
//! downward, turns and couples clockwise, forces downward. Each function gives what the named action alone adds at the
//! tip. They are common property of the trade and stand in every handbook: AISC *Steel Construction Manual* Table 3-23,
//! Roark's *Formulas for Stress and Strain* Table 8.1, AWC *Design Aid No. 6* (titles from memory; the edition at hand must
//! be confirmed). The general part-length forms follow by integrating the unit-force case over the loaded part.
//!
//! Validity: Euler-Bernoulli bending, small deflections, constant EI over the piece; the `shear_…` functions add shear
//! deformation with constant G times shear area. Not covered: torsion, axial force, large deflections.

use crate::number::Number;

fn n<N: Number>(whole: i64) -> N {
    N::whole(whole)
}

/// Deflection at the tip, force `p` at the tip: P L³ / 3EI.
pub fn tip_force_v<N: Number>(p: N, l: N, ei: N) -> N {
    p * l.power(3) / (n::<N>(3) * ei)
}

/// Turn at the tip, force `p` at the tip: P L² / 2EI.
pub fn tip_force_psi<N: Number>(p: N, l: N, ei: N) -> N {
    p * l.power(2) / (n::<N>(2) * ei)
}

/// Deflection at the tip, clockwise couple `m` at the tip: M L² / 2EI.
pub fn tip_couple_v<N: Number>(m: N, l: N, ei: N) -> N {
    m * l.power(2) / (n::<N>(2) * ei)
}

/// Turn at the tip, clockwise couple `m` at the tip: M L / EI.
pub fn tip_couple_psi<N: Number>(m: N, l: N, ei: N) -> N {
    m * l / ei
}

/// Deflection at the tip, force `p` at the distance `a` from the wall: P a² (3L - a) / 6EI.
pub fn force_v<N: Number>(p: N, a: N, l: N, ei: N) -> N {
    p * a.clone().power(2) * (n::<N>(3) * l - a) / (n::<N>(6) * ei)
}

/// Turn at the tip, force `p` at the distance `a` from the wall: P a² / 2EI.
pub fn force_psi<N: Number>(p: N, a: N, ei: N) -> N {
    p * a.power(2) / (n::<N>(2) * ei)
}

/// Deflection at the tip, clockwise couple `m` at the distance `a`: M a (2L - a) / 2EI.
pub fn couple_v<N: Number>(m: N, a: N, l: N, ei: N) -> N {
    m * a.clone() * (n::<N>(2) * l - a) / (n::<N>(2) * ei)
}

/// Turn at the tip, clockwise couple `m` at the distance `a`: M a / EI.
pub fn couple_psi<N: Number>(m: N, a: N, ei: N) -> N {
    m * a / ei
}

/// Deflection at the tip, intensity `w` over the whole length: w L⁴ / 8EI.
pub fn uniform_v<N: Number>(w: N, l: N, ei: N) -> N {
    w * l.power(4) / (n::<N>(8) * ei)
}

/// Turn at the tip, intensity `w` over the whole length: w L³ / 6EI.
pub fn uniform_psi<N: Number>(w: N, l: N, ei: N) -> N {
    w * l.power(3) / (n::<N>(6) * ei)
}

/// Deflection at the tip, intensity `w` from the distance `a` to `b`: w [b³ (4L - b) - a³ (4L - a)] / 24EI.
pub fn uniform_part_v<N: Number>(w: N, a: N, b: N, l: N, ei: N) -> N {
    let far = b.clone().power(3) * (n::<N>(4) * l.clone() - b);
    let near = a.clone().power(3) * (n::<N>(4) * l - a);
    w * (far - near) / (n::<N>(24) * ei)
}

/// Turn at the tip, intensity `w` from the distance `a` to `b`: w (b³ - a³) / 6EI.
pub fn uniform_part_psi<N: Number>(w: N, a: N, b: N, ei: N) -> N {
    w * (b.power(3) - a.power(3)) / (n::<N>(6) * ei)
}

/// Deflection at the tip, intensity from `w0` at the wall to `w1` at the tip: (4 w0 + 11 w1) L⁴ / 120EI.
pub fn linear_v<N: Number>(w0: N, w1: N, l: N, ei: N) -> N {
    (n::<N>(4) * w0 + n::<N>(11) * w1) * l.power(4) / (n::<N>(120) * ei)
}

/// Turn at the tip, intensity from `w0` at the wall to `w1` at the tip: (w0 + 3 w1) L³ / 24EI.
pub fn linear_psi<N: Number>(w0: N, w1: N, l: N, ei: N) -> N {
    (w0 + n::<N>(3) * w1) * l.power(3) / (n::<N>(24) * ei)
}

/// Deflection at the tip, intensity from `w0` at the distance `a` to `w1` at `a + c`.
///
/// The integral of w(s) s² (3L - s) / 6EI over the loaded part, s = a + c t:
/// c [3L (w0 (30a² + 20ac + 5c²) + w1 (30a² + 40ac + 15c²)) - (w0 (30a³ + 30a²c + 15ac² + 3c³)
/// + w1 (30a³ + 60a²c + 45ac² + 12c³))] / 360EI.
pub fn linear_part_v<N: Number>(w0: N, w1: N, a: N, c: N, l: N, ei: N) -> N {
    let [aa, ac, cc] = squares(&a, &c);
    let [aaa, aac, acc, ccc] = cubes(&a, &c);
    let turn = w0.clone() * (n::<N>(30) * aa.clone() + n::<N>(20) * ac.clone() + n::<N>(5) * cc.clone())
        + w1.clone() * (n::<N>(30) * aa + n::<N>(40) * ac + n::<N>(15) * cc);
    let rest = w0
        * (n::<N>(30) * aaa.clone() + n::<N>(30) * aac.clone() + n::<N>(15) * acc.clone() + n::<N>(3) * ccc.clone())
        + w1 * (n::<N>(30) * aaa + n::<N>(60) * aac + n::<N>(45) * acc + n::<N>(12) * ccc);
    c * (n::<N>(3) * l * turn - rest) / (n::<N>(360) * ei)
}

/// Turn at the tip, intensity from `w0` at the distance `a` to `w1` at `a + c`:
/// c [w0 (6a² + 4ac + c²) + w1 (6a² + 8ac + 3c²)] / 24EI.
pub fn linear_part_psi<N: Number>(w0: N, w1: N, a: N, c: N, ei: N) -> N {
    let [aa, ac, cc] = squares(&a, &c);
    let near = w0 * (n::<N>(6) * aa.clone() + n::<N>(4) * ac.clone() + cc.clone());
    let far = w1 * (n::<N>(6) * aa + n::<N>(8) * ac + n::<N>(3) * cc);
    c * (near + far) / (n::<N>(24) * ei)
}

/// Deflection at the tip, curvature `k` from the distance `a` to `b`: k (b - a) (2L - a - b) / 2.
pub fn curvature_v<N: Number>(k: N, a: N, b: N, l: N) -> N {
    k * (b.clone() - a.clone()) * (n::<N>(2) * l - a - b) / n::<N>(2)
}

/// Turn at the tip, curvature `k` from the distance `a` to `b`: k (b - a).
pub fn curvature_psi<N: Number>(k: N, a: N, b: N) -> N {
    k * (b - a)
}

/// Shear deflection at the tip, force `p` at the distance `a`: P a / GA.
pub fn shear_force_v<N: Number>(p: N, a: N, ga: N) -> N {
    p * a / ga
}

/// Shear deflection at the tip, intensity `w` from the distance `a` to `b`: w (b² - a²) / 2GA.
pub fn shear_uniform_v<N: Number>(w: N, a: N, b: N, ga: N) -> N {
    w * (b.power(2) - a.power(2)) / (n::<N>(2) * ga)
}

/// Shear deflection at the tip, intensity from `w0` at the distance `a` to `w1` at `a + c`:
/// c [w0 (3a + c) + w1 (3a + 2c)] / 6GA.
pub fn shear_linear_v<N: Number>(w0: N, w1: N, a: N, c: N, ga: N) -> N {
    super::equilibrium::linear_moment(w0, w1, a, c) / ga
}

fn squares<N: Number>(a: &N, c: &N) -> [N; 3] {
    [a.clone().power(2), a.clone() * c.clone(), c.clone().power(2)]
}

fn cubes<N: Number>(a: &N, c: &N) -> [N; 4] {
    let (a, c) = (a.clone(), c.clone());
    [a.clone().power(3), a.clone().power(2) * c.clone(), a * c.clone().power(2), c.power(3)]
}
